//! All designs below a folder, read with their sheets; files at fault do not stop the others.

use crate::desk::{Desk, OnDesk};
use notice::{Notice, Place, Severity};
use report::shortage::Broken;
use std::path::{Path, PathBuf};

/// Designs as they were read.
#[derive(Default)]
pub(crate) struct Folder {
    /// Those that could be read, in the order of their paths.
    pub(crate) designs: Vec<OnDesk>,
    /// Those that could not.
    pub(crate) broken: Vec<Broken>,
}

impl Folder {
    /// Reads every design below a folder. None with a notice where there is no such folder.
    pub(crate) fn read(
        folder: &Path,
        desk: &mut Desk<'_>,
        notices: &mut Vec<Notice>,
    ) -> Option<Self> {
        let mut paths = Vec::new();
        if let Err(error) = below(folder, &mut paths) {
            let place = Place::file(folder.display().to_string());
            let message = format!("the folder can't be read: {error}");
            notices.push(Notice::error("folder-unreadable", place, message));
            return None;
        }
        paths.sort();
        let mut read = Self::default();
        for path in paths.iter().filter(|path| may_be_design(path)) {
            let mut found = Vec::new();
            match desk.read(path, &mut found) {
                Ok(design) => read.designs.push(design),
                Err(_) => read
                    .broken
                    .push(Broken { file: path.display().to_string(), faults: faults(&found) }),
            }
            notices.append(&mut found);
        }
        Some(read)
    }
}

/// The errors among notices, a line each.
pub(crate) fn faults(notices: &[Notice]) -> Vec<String> {
    let errors = notices.iter().filter(|n| n.severity == Severity::Error);
    errors.map(Notice::to_string).collect()
}

/// Every TOML file below a folder. Links to other folders are not followed, for they may lead in a
/// circle.
fn below(folder: &Path, paths: &mut Vec<PathBuf>) -> std::io::Result<()> {
    for entry in std::fs::read_dir(folder)? {
        let entry = entry?;
        let path = entry.path();
        if entry.file_type()?.is_dir() {
            below(&path, paths)?;
        } else if path.extension().is_some_and(|ending| ending.eq_ignore_ascii_case("toml")) {
            paths.push(path);
        }
    }
    Ok(())
}

/// A file that begins a line with the key of a design's format, or that can't be read: sheets and other
/// files may lie in the same folder. What is wrong with it is for the reader to say.
fn may_be_design(path: &Path) -> bool {
    let Ok(text) = std::fs::read_to_string(path) else { return true };
    let is_key = |line: &str| {
        let rest = line.trim_start().strip_prefix(design::keys::DESIGN);
        rest.is_some_and(|rest| rest.trim_start().starts_with('='))
    };
    text.lines().any(is_key)
}
