//! Programs that some tests need and the product does not: a simulator, a browser, a spreadsheet program,
//! Python packages.
//!
//! Where one is absent the test says so by name and passes over it. `.ci/run` installs them all and sets
//! `RAILWRIGHT_NEED_TOOLS`, which makes absence a failure.

use std::process::{Command, Stdio};

/// The program's path, or `None` after saying that `test` is skipped for want of it.
///
/// # Panics
///
/// Where the program is absent and `RAILWRIGHT_NEED_TOOLS` is set.
pub fn program(test: &str, names: &[&str]) -> Option<String> {
    let found = names.iter().find(|name| answers(Command::new(name).arg("--version")));
    found.map(|name| (*name).to_owned()).or_else(|| absent(test, &names.join(" or ")))
}

/// A Python that has the packages: `RAILWRIGHT_PYTHON`, else `python3`. `None` as for [`program`].
///
/// # Panics
///
/// As [`program`].
pub fn python_with(test: &str, packages: &[&str]) -> Option<String> {
    let python = std::env::var("RAILWRIGHT_PYTHON").unwrap_or_else(|_| "python3".to_owned());
    let import = format!("import {}", packages.join(", "));
    if answers(Command::new(&python).args(["-c", &import])) {
        return Some(python);
    }
    absent(test, &format!("{python} with {}", packages.join(", ")))
}

/// Node with these packages: the program, and the folder of packages that `NODE_PATH` must name, which is
/// `RAILWRIGHT_NODE_MODULES`. `None` as for [`program`].
///
/// # Panics
///
/// As [`program`].
pub fn node_with(test: &str, packages: &[&str]) -> Option<(String, std::path::PathBuf)> {
    let node = program(test, &["node", "nodejs"])?;
    let folder = std::env::var_os("RAILWRIGHT_NODE_MODULES").map(std::path::PathBuf::from);
    let holds_all = |folder: &std::path::PathBuf| packages.iter().all(|p| folder.join(p).is_dir());
    match folder.filter(holds_all) {
        Some(folder) => Some((node, folder)),
        None => {
            absent(test, &format!("RAILWRIGHT_NODE_MODULES with {}", packages.join(", ")));
            None
        }
    }
}

fn answers(command: &mut Command) -> bool {
    let quiet = command.stdin(Stdio::null()).stdout(Stdio::null()).stderr(Stdio::null());
    quiet.status().is_ok_and(|status| status.success())
}

fn absent(test: &str, what: &str) -> Option<String> {
    assert!(
        std::env::var_os("RAILWRIGHT_NEED_TOOLS").is_none(),
        "{test} needs {what}, which is not here"
    );
    eprintln!("skipped: {test}: {what} is not here");
    None
}
