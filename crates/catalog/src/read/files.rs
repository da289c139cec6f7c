//! Which files of a folder belong to a kind of catalog.

use crate::kind::Kind;
use notice::{Notice, Place};
use std::io::ErrorKind;
use std::path::{Path, PathBuf};

/// A catalog file that is there.
#[derive(Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) struct FileThere {
    /// Its name within the folder, with `/` between its parts: `zeners.csv`, `zeners/brindlow.csv`.
    pub(super) name: String,
    /// Where it is.
    pub(super) path: PathBuf,
}

/// The files of a kind in the order of their names: `zeners.csv`, and each `.csv` in the folder
/// `zeners`. Hidden files, such as the locks of spreadsheet programs, are passed over; what else lies
/// in that folder is told.
pub(super) fn of_kind(folder: &Path, kind: Kind, notices: &mut Vec<Notice>) -> Vec<FileThere> {
    let mut files = Vec::new();
    let single = folder.join(kind.file_name());
    if single.symlink_metadata().is_ok() {
        files.push(FileThere { name: kind.file_name().to_owned(), path: single });
    }
    let several = folder.join(kind.folder_name());
    let entries = match std::fs::read_dir(&several) {
        Ok(entries) => entries,
        // Some shop may keep a file of that name without an ending; it is no catalog.
        Err(error) if matches!(error.kind(), ErrorKind::NotFound | ErrorKind::NotADirectory) => {
            return files;
        }
        Err(error) => {
            notices.push(unreadable(kind.folder_name(), folder, &error));
            return files;
        }
    };
    for entry in entries {
        let path = match entry {
            Ok(entry) => entry.path(),
            Err(error) => {
                notices.push(unreadable(kind.folder_name(), folder, &error));
                continue;
            }
        };
        let file = path.file_name().unwrap_or_default().to_string_lossy().into_owned();
        if file.starts_with('.') {
            continue;
        }
        let name = format!("{}/{file}", kind.folder_name());
        let is_csv = path.extension().is_some_and(|ending| ending.eq_ignore_ascii_case("csv"));
        if is_csv && !path.is_dir() {
            files.push(FileThere { name, path });
        } else {
            let place = Place::file(name);
            notices.push(
                Notice::warning("file-not-read", place, "this is no catalog, and is not read")
                    .expected(format!("files `{}/*.csv`", kind.folder_name()))
                    .mend("save it as CSV, or keep it elsewhere"),
            );
        }
    }
    files.sort();
    // Folders list their files in no order; the notices follow the names as the files do.
    notices.sort_by(|a, b| a.place.cmp(&b.place));
    files
}

/// The notice that no file of a kind is there.
pub(super) fn missing(kind: Kind, folder: &Path) -> Notice {
    let message = format!("the file is missing in {}", folder.display());
    Notice::error("file-missing", Place::file(kind.file_name()), message).expected(format!(
        "a catalog `{}`, or several `{}/*.csv`",
        kind.file_name(),
        kind.folder_name()
    ))
}

/// The notice that a file, or a folder of files, can't be read.
pub(super) fn unreadable(name: &str, folder: &Path, error: &std::io::Error) -> Notice {
    let message = format!("the file in {} can't be read: {error}", folder.display());
    Notice::error("file-unreadable", Place::file(name), message)
}
