//! The commands that people are told are those that are checked.

use docs_check::page::Page;
use docs_check::root;

#[test]
fn the_commands_of_the_readme_are_run_by_the_guard() {
    let root = root();
    let readme = Page::read(&root, "README.md").expect("the README");
    let guard = std::fs::read_to_string(root.join(".ci/run")).expect(".ci/run");
    let told: Vec<String> = readme
        .code_blocks("sh")
        .iter()
        .flat_map(|block| block.lines().map(str::to_owned).collect::<Vec<_>>())
        .collect();
    assert!(told.len() >= 2, "the README tells the main job and the tests in `sh` blocks");
    for command in told {
        assert!(
            guard.lines().any(|line| runs(line, &command)),
            ".ci/run does not run `{command}`, which the README tells"
        );
    }
}

/// A line of the guard runs this command as it is written; its output may go elsewhere.
fn runs(line: &str, command: &str) -> bool {
    let line = line.trim();
    let line = line.strip_prefix("step ").unwrap_or(line);
    line.strip_prefix(command).is_some_and(|rest| {
        let rest = rest.trim_start();
        rest.is_empty() || rest.starts_with("2>") || rest.starts_with('|')
    })
}

#[test]
fn the_readme_begins_with_the_job_and_then_the_two_commands() {
    let readme = Page::read(&root(), "README.md").expect("the README");
    let blocks = readme.code_blocks("sh");
    let starts =
        |i: usize, start: &str| blocks.get(i).is_some_and(|block| block.starts_with(start));
    assert!(starts(0, "cargo run --release -p railwright -- shortlist "));
    assert!(starts(1, "cargo test"));
}
