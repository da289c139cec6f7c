//! The help of every command teaches by examples that run.

mod common;

use common::run;
use docs_check::root;
use docs_check::shell::Shell;
use std::path::Path;

/// Every command that does something, as its words: those without commands below them.
fn commands() -> Vec<Vec<String>> {
    let mut found = Vec::new();
    let mut open = vec![Vec::<String>::new()];
    while let Some(words) = open.pop() {
        let below = commands_below(&help_of(&words));
        if below.is_empty() {
            found.push(words);
            continue;
        }
        open.extend(below.into_iter().map(|name| [words.clone(), vec![name]].concat()));
    }
    found.sort();
    found
}

fn help_of(words: &[String]) -> String {
    let arguments: Vec<&str> = words.iter().map(String::as_str).chain(["--help"]).collect();
    let help = run(Path::new("."), &arguments);
    assert_eq!((help.status, help.err.as_str()), (0, ""), "{arguments:?}");
    help.out
}

/// The names in the section `Commands:` of a help text.
fn commands_below(help: &str) -> Vec<String> {
    help.lines()
        .skip_while(|line| *line != "Commands:")
        .skip(1)
        .take_while(|line| line.starts_with("  "))
        .filter(|line| !line.starts_with("   "))
        .filter_map(|line| line.split_whitespace().next())
        .filter(|name| *name != "help")
        .map(str::to_owned)
        .collect()
}

/// The examples of a help text, each on one line.
fn examples(help: &str) -> Vec<String> {
    let whole = help.replace("\\\n", " ");
    let lines = whole.lines().skip_while(|line| !line.starts_with("Examples")).skip(1);
    let indented = lines.take_while(|line| line.starts_with("  ") || line.is_empty());
    indented.map(str::trim).filter(|l| l.starts_with("railwright ")).map(str::to_owned).collect()
}

#[test]
fn every_command_is_found() {
    let commands: Vec<String> = commands().iter().map(|words| words.join(" ")).collect();
    for known in ["shortlist", "catalog check", "new sheet", "completions"] {
        assert!(commands.iter().any(|command| command == known), "{known} of {commands:?}");
    }
}

#[test]
fn every_command_has_two_examples_that_run_on_the_sample_shop() {
    let program = Path::new(env!("CARGO_BIN_EXE_railwright"));
    let commands = commands();
    std::thread::scope(|scope| {
        for words in &commands {
            scope.spawn(move || {
                let examples = examples(&help_of(words));
                assert!(examples.len() >= 2, "{words:?} has two examples: {examples:?}");
                // Those of a command follow each other, as a reader would try them.
                let shell = Shell::new(&root(), program).expect("a shell");
                for example in examples {
                    let ran = shell.run(&example).expect("a shell");
                    // 1 is an answer too: a design that fails, a list without a row.
                    assert!(matches!(ran.status, Some(0 | 1)), "{example}: {}", ran.said);
                }
            });
        }
    });
}

#[test]
fn help_keeps_to_a_hundred_columns() {
    for words in commands() {
        let help = help_of(&words);
        let widest = help.lines().max_by_key(|line| line.chars().count()).unwrap_or_default();
        assert!(widest.chars().count() <= 100, "{words:?}: {widest}");
    }
}

/// A reader that has seen enough, as `head` or a pager that is left, is no fault of any command.
#[cfg(unix)]
#[test]
fn a_closed_pipe_is_a_normal_end_of_every_command() {
    let program = Path::new(env!("CARGO_BIN_EXE_railwright"));
    let commands = commands();
    std::thread::scope(|scope| {
        for words in &commands {
            scope.spawn(move || {
                let Some(example) = examples(&help_of(words)).into_iter().next() else { return };
                let shell = Shell::new(&root(), program).expect("a shell");
                // Until the reader is gone for certain, nothing is written.
                let ends = format!(
                    "{{ sleep 0.2; {example}; echo \"ended $?\" >ended; }} | true; cat ended"
                );
                let ran = shell.run(&ends).expect("a shell");
                let is_normal = ran.said.contains("ended 0") || ran.said.contains("ended 1");
                assert!(is_normal && !ran.said.contains("panicked"), "{example}: {}", ran.said);
            });
        }
    });
}
