//! Output that pages show, held against what the program really prints.
//!
//! A fenced block of the language `console` shows commands and what they print:
//!
//! ```text
//! $ railwright catalog check \
//!       --catalogs catalogs-sample
//! what it prints, standard error and standard output
//! …
//! more of it, behind any number of lines left out
//! $ another command
//! ```
//!
//! The blocks of a page are one [`Shell`] in the order of the page, so a command may read what an
//! earlier one has written. Nobody types output into a page: a writer types the command and runs
//! `cargo run -p docs-check -- renew`.

use crate::page::Page;
use crate::shell::Shell;
use pulldown_cmark::{CodeBlockKind, Event, Parser, Tag, TagEnd};
use std::io;
use std::ops::Range;

/// The language of blocks that show commands and output.
const LANGUAGE: &str = "console";

/// What a command line begins with.
const PROMPT: &str = "$ ";

/// The line that stands for lines left out.
const LEFT_OUT: &str = "…";

/// A command and the excerpt of its output that stands below it.
#[derive(Debug, Clone, PartialEq, Eq)]
struct Shown {
    /// The command line, its line breaks as they are.
    command: String,
    /// The lines below it.
    excerpt: Vec<String>,
}

/// What is wrong with the output that a page shows; empty where all of it is current.
///
/// # Errors
/// Where no shell can be started.
pub fn stale(page: &Page, shell: &Shell) -> io::Result<Vec<String>> {
    let mut faults = Vec::new();
    for block in blocks(&page.text) {
        let Some(all) = page.text.get(block).and_then(commands) else {
            faults.push(format!("a `{LANGUAGE}` block begins with no `{PROMPT}` line"));
            continue;
        };
        for shown in all {
            let output = shell.run(&shown.command)?.said;
            if let Some(line) = first_missing(&shown.excerpt, &output) {
                faults.push(format!("`{}` prints no longer: {line}", shown.command));
            }
        }
    }
    Ok(faults)
}

/// The page with the output of all its commands as they print now.
///
/// Where lines are left out, a part behind them is found again by its first line and keeps its length.
///
/// # Errors
/// Where no shell can be started, or such a first line is printed no longer: then the writer must say
/// what is to be shown.
pub fn renewed(page: &Page, shell: &Shell) -> io::Result<String> {
    let mut text = String::new();
    let mut done = 0;
    for block in blocks(&page.text) {
        let Some(all) = page.text.get(block.clone()).and_then(commands) else { continue };
        text += page.text.get(done..block.start).unwrap_or_default();
        for shown in all {
            let output = shell.run(&shown.command)?.said;
            text += &format!("{PROMPT}{}\n", shown.command);
            for line in renewed_excerpt(&shown.excerpt, &output).map_err(|line| {
                io::Error::other(format!(
                    "{}: `{}` prints no longer, and it is not clear what should stand there: {line}",
                    page.name, shown.command
                ))
            })? {
                text += &line;
                text.push('\n');
            }
        }
        done = block.end;
    }
    text += page.text.get(done..).unwrap_or_default();
    Ok(text)
}

/// Where the contents of the `console` blocks lie in a text.
fn blocks(text: &str) -> Vec<Range<usize>> {
    let mut blocks = Vec::new();
    let mut open: Option<Range<usize>> = None;
    for (event, range) in Parser::new(text).into_offset_iter() {
        match event {
            Event::Start(Tag::CodeBlock(CodeBlockKind::Fenced(info))) if &*info == LANGUAGE => {
                open = Some(0..0);
            }
            Event::Text(_) => {
                if let Some(block) = &mut open {
                    let start = if block.end == 0 { range.start } else { block.start };
                    *block = start..range.end;
                }
            }
            Event::End(TagEnd::CodeBlock) => blocks.extend(open.take()),
            _ => {}
        }
    }
    blocks
}

/// The commands of a block; None where it begins with something else.
fn commands(block: &str) -> Option<Vec<Shown>> {
    let mut all: Vec<Shown> = Vec::new();
    let mut goes_on = false;
    for line in block.lines() {
        if let Some(command) = line.strip_prefix(PROMPT) {
            all.push(Shown { command: command.to_owned(), excerpt: Vec::new() });
            goes_on = command.ends_with('\\');
        } else {
            let last = all.last_mut()?;
            if goes_on {
                last.command = format!("{}\n{line}", last.command);
                goes_on = line.ends_with('\\');
            } else {
                last.excerpt.push(line.to_owned());
            }
        }
    }
    (!all.is_empty()).then_some(all)
}

/// The first line of an excerpt that the output does not have at its place; None where it has all.
///
/// Lines must follow each other as in the output, from its first to its last; across a line `…` any
/// number may lie between. White space at the end of a line does not count.
fn first_missing<'e>(excerpt: &'e [String], output: &'e str) -> Option<&'e str> {
    let output: Vec<&str> = output.lines().map(str::trim_end).collect();
    let mut next = 0;
    let mut may_skip = false;
    for line in excerpt.iter().map(|line| line.trim_end()) {
        if line.trim() == LEFT_OUT {
            may_skip = true;
            continue;
        }
        let rest = output.get(next..).unwrap_or_default();
        let found = if may_skip {
            rest.iter().position(|printed| *printed == line)
        } else {
            rest.first().filter(|printed| **printed == line).map(|_| 0)
        };
        match found {
            Some(skipped) => next += skipped + 1,
            None => return Some(line),
        }
        may_skip = false;
    }
    if may_skip { None } else { output.get(next).copied() }
}

/// The excerpt anew; as an error the line that is not found again.
fn renewed_excerpt(excerpt: &[String], output: &str) -> Result<Vec<String>, String> {
    let output: Vec<String> = output.lines().map(|line| line.trim_end().to_owned()).collect();
    let parts: Vec<&[String]> = excerpt.split(|line| line.trim() == LEFT_OUT).collect();
    if parts.len() == 1 {
        return Ok(output);
    }
    let mut made = Vec::new();
    let mut next = 0;
    for (number, part) in parts.iter().enumerate() {
        if number > 0 {
            made.push(LEFT_OUT.to_owned());
        }
        let Some(first) = part.first() else { continue };
        let rest = output.get(next..).unwrap_or_default();
        let skipped = match number {
            0 => 0,
            _ => rest.iter().position(|line| line == first.trim_end()).ok_or(first.clone())?,
        };
        let taken: Vec<String> = rest.iter().skip(skipped).take(part.len()).cloned().collect();
        next += skipped + taken.len();
        made.extend(taken);
    }
    Ok(made)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn lines(text: &str) -> Vec<String> {
        text.lines().map(str::to_owned).collect()
    }

    #[test]
    fn lines_follow_each_other_but_across_an_ellipsis() {
        let output = "a\nb\nc\nd\n";
        let missing = |excerpt| first_missing(&lines(excerpt), output).map(str::to_owned);
        assert_eq!(missing("a\nb\nc\nd"), None);
        assert_eq!(missing("a\nb\n…"), None);
        assert_eq!(missing("a\n…\nd\n"), None);
        assert_eq!(missing("…\nc\nd"), None);
        assert_eq!(missing("a\nc\n…").as_deref(), Some("c"));
        assert_eq!(missing("a\n…\nb\nd\n").as_deref(), Some("d"));
        assert_eq!(missing("a\n…\nx\n").as_deref(), Some("x"));
        assert_eq!(missing("a\nb").as_deref(), Some("c"), "what is left out must be marked");
    }

    #[test]
    fn an_excerpt_is_renewed_part_by_part() {
        let output = "head 2\nrow\nfoot 2\nend\n";
        let renewed = |excerpt| renewed_excerpt(&lines(excerpt), output);
        assert_eq!(renewed("head 1\nold"), Ok(lines(output)));
        assert_eq!(renewed("head 1\n…\nfoot 2\nold\n…"), Ok(lines("head 2\n…\nfoot 2\nend\n…")));
        assert_eq!(renewed("head 1\n…\nfoot 1"), Err("foot 1".to_owned()));
    }

    #[test]
    fn blocks_are_taken_apart_into_commands() {
        let text = "# x\n\n```console\n$ a \\\n    b\nout\n\n$ c\n```\n\n```sh\n$ no\n```\n";
        let all: Vec<&str> = blocks(text).into_iter().map(|block| &text[block]).collect();
        assert_eq!(all, ["$ a \\\n    b\nout\n\n$ c\n"]);
        let shown = |command: &str, excerpt: &[&str]| Shown {
            command: command.to_owned(),
            excerpt: excerpt.iter().map(|&line| line.to_owned()).collect(),
        };
        assert_eq!(
            commands(all[0]),
            Some(vec![shown("a \\\n    b", &["out", ""]), shown("c", &[])])
        );
        assert_eq!(commands("out\n$ c\n"), None);
    }

    #[cfg(unix)]
    #[test]
    fn commands_of_a_page_see_what_those_before_have_written() {
        let text = "```console\n$ echo 7 > x\n```\nand\n```console\n$ cat x; ls\nold\n```\n";
        let page = Page { name: "x.md".to_owned(), text: text.to_owned() };
        let shell = || Shell::new(&crate::root(), std::path::Path::new("/bin/sh")).unwrap();
        assert_eq!(stale(&page, &shell()).unwrap().len(), 1);
        let text = renewed(&page, &shell()).unwrap();
        assert!(text.ends_with("$ cat x; ls\n7\ncatalogs-sample\nx\n```\n"), "{text}");
        let page = Page { text, ..page };
        assert_eq!(stale(&page, &shell()).unwrap(), Vec::<String>::new());
    }
}
