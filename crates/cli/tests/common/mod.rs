//! Running the program on catalogs of the repository, or on altered copies of them.

#![allow(dead_code)] // each test file uses some of it

pub mod browser;
pub mod sheets;
pub mod tool;

use std::path::{Path, PathBuf};
use std::process::{Command, Output};

/// A file or folder of the repository.
pub fn repository(path: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../..").join(path)
}

/// A worked case.
pub fn case(name: &str) -> PathBuf {
    repository("tests/worked-cases").join(name)
}

/// What a run said and how it ended.
#[derive(Debug)]
pub struct Run {
    pub status: i32,
    pub out: String,
    pub err: String,
}

/// The program, to be run in a folder, without colours or widths of the machine that runs the tests.
pub fn program(folder: &Path) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_railwright"));
    command.current_dir(folder).env_remove("COLUMNS").env_remove("NO_COLOR");
    command
}

/// Runs the program in a folder.
pub fn run(folder: &Path, arguments: &[&str]) -> Run {
    told(program(folder).args(arguments).output().expect("the program runs"))
}

/// The texts of an output.
pub fn told(output: Output) -> Run {
    Run {
        status: output.status.code().expect("no signal ends the program"),
        out: String::from_utf8(output.stdout).expect("UTF-8"),
        err: String::from_utf8(output.stderr).expect("UTF-8"),
    }
}

/// A copy of a worked case in a folder of its own, to be altered.
pub fn copy_of(name: &str) -> tempfile::TempDir {
    let copy = tempfile::tempdir().expect("a folder");
    copy_folder(&case(name), copy.path());
    copy
}

/// A copy of the sample shop with its sheets and designs, to be altered.
pub fn copy_of_the_sample() -> tempfile::TempDir {
    let copy = tempfile::tempdir().expect("a folder");
    copy_folder(&repository("catalogs-sample"), copy.path());
    copy
}

fn copy_folder(from: &Path, to: &Path) {
    for entry in std::fs::read_dir(from).expect("the folder is there") {
        let entry = entry.expect("an entry");
        let target = to.join(entry.file_name());
        if entry.file_type().expect("a type").is_dir() {
            std::fs::create_dir(&target).expect("a folder");
            copy_folder(&entry.path(), &target);
        } else {
            std::fs::write(&target, std::fs::read(entry.path()).expect("a file")).expect("a copy");
        }
    }
}
