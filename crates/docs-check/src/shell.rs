//! A shell in a folder of its own that holds a copy of the sample shop.

use std::ffi::OsString;
use std::io;
use std::path::Path;
use std::process::Command;
use tempfile::TempDir;

/// Columns of text that a page has room for.
const WIDTH: &str = "80";

/// A shell: its commands see what those before them have written.
#[derive(Debug)]
pub struct Shell {
    folder: TempDir,
    path: OsString,
}

impl Shell {
    /// A shell in which `railwright` is this program, and `catalogs-sample` a copy of the
    /// repository's.
    ///
    /// # Errors
    /// Where the folder can't be made or the shop not be copied.
    pub fn new(root: &Path, program: &Path) -> io::Result<Self> {
        let folder = tempfile::tempdir()?;
        copy(&root.join("catalogs-sample"), &folder.path().join("catalogs-sample"))?;
        let usual = std::env::var_os("PATH").unwrap_or_default();
        let beside = program.parent().unwrap_or(Path::new(".")).to_owned();
        let path =
            std::env::join_paths(std::iter::once(beside).chain(std::env::split_paths(&usual)))
                .map_err(io::Error::other)?;
        Ok(Self { folder, path })
    }

    /// Runs a command line; what it said is standard output and standard error as a person sees them.
    ///
    /// # Errors
    /// Where no shell can be started.
    pub fn run(&self, command: &str) -> io::Result<Ran> {
        let output = Command::new("sh")
            .args(["-c", &format!("exec 2>&1\n{command}")])
            .current_dir(self.folder.path())
            .env("PATH", &self.path)
            .env("COLUMNS", WIDTH)
            .env_remove("NO_COLOR")
            .output()?;
        let said = String::from_utf8_lossy(&output.stdout).into_owned();
        Ok(Ran { said, status: output.status.code() })
    }

    /// A file that a command has written.
    ///
    /// # Errors
    /// Where it can't be read.
    pub fn file(&self, name: &str) -> io::Result<Vec<u8>> {
        std::fs::read(self.folder.path().join(name))
    }
}

/// What came of a command.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Ran {
    /// What it said.
    pub said: String,
    /// Its exit status; None where a signal ended it.
    pub status: Option<i32>,
}

fn copy(from: &Path, to: &Path) -> io::Result<()> {
    std::fs::create_dir(to)?;
    for entry in std::fs::read_dir(from)? {
        let entry = entry?;
        let target = to.join(entry.file_name());
        if entry.file_type()?.is_dir() {
            copy(&entry.path(), &target)?;
        } else {
            std::fs::copy(entry.path(), target)?;
        }
    }
    Ok(())
}
