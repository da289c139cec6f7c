//! Files that are written: whole or not at all, and never over another by accident.

use std::fmt;
use std::io::{self, Write};
use std::path::{Path, PathBuf};

/// A format that a result can be written in.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Format {
    Json,
    Csv,
    Xlsx,
    Md,
    Html,
}

impl Format {
    /// The ending of its files.
    const fn ending(self) -> &'static str {
        match self {
            Format::Json => "json",
            Format::Csv => "csv",
            Format::Xlsx => "xlsx",
            Format::Md => "md",
            Format::Html => "html",
        }
    }
}

/// A file to be written, its format told by its ending.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Target {
    pub(crate) path: PathBuf,
    pub(crate) format: Format,
}

impl Target {
    /// A file in one of the formats that a command writes.
    pub(crate) fn read(text: &str, formats: &[Format]) -> Result<Self, String> {
        let path = PathBuf::from(text);
        let ending = path.extension().unwrap_or_default().to_string_lossy().to_ascii_lowercase();
        match formats.iter().find(|format| format.ending() == ending) {
            Some(format) => Ok(Self { path, format: *format }),
            None => {
                let known: Vec<String> =
                    formats.iter().map(|f| format!(".{}", f.ending())).collect();
                Err(format!(
                    "the file's ending tells the format: write a name that ends in {}",
                    known.join(" or ")
                ))
            }
        }
    }
}

/// Why a file could not be read or written.
#[derive(Debug)]
pub(crate) enum FileFault {
    /// It is there already.
    Exists(PathBuf),
    /// It is there already, and nothing makes this command replace it.
    Kept(PathBuf),
    /// Its folder is not there.
    NoFolder(PathBuf),
    /// Two outputs have the same name.
    Twice(PathBuf),
    /// It can't be written.
    NotWritten(PathBuf, io::Error),
}

impl fmt::Display for FileFault {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Exists(path) => write!(
                f,
                "{} is there already; --overwrite replaces it, or choose another name",
                path.display()
            ),
            Self::Kept(path) => {
                write!(f, "{} is there already, and stays; choose another name", path.display())
            }
            Self::NoFolder(path) => {
                let folder = folder_of(path).display();
                write!(
                    f,
                    "{} can't be written: there is no folder {folder}; make it first",
                    path.display()
                )
            }
            Self::Twice(path) => {
                write!(f, "{} is named for two outputs; leave one of them out", path.display())
            }
            Self::NotWritten(path, error) => {
                write!(f, "{} can't be written: {error}", path.display())
            }
        }
    }
}

impl std::error::Error for FileFault {}

/// Finds out, before any work is done, whether files could be written.
pub(crate) fn check<'p>(
    paths: impl Iterator<Item = &'p Path>,
    overwrite: bool,
) -> Result<(), FileFault> {
    let mut seen: Vec<&Path> = Vec::new();
    for path in paths {
        if seen.contains(&path) {
            return Err(FileFault::Twice(path.to_owned()));
        }
        seen.push(path);
        if !folder_of(path).is_dir() {
            return Err(FileFault::NoFolder(path.to_owned()));
        }
        if !overwrite && path.symlink_metadata().is_ok() {
            return Err(FileFault::Exists(path.to_owned()));
        }
    }
    Ok(())
}

/// Writes a file by way of a temporary one beside it, so that nobody ever sees half of it.
///
/// Without `overwrite` a file that came into being meanwhile is not replaced either.
pub(crate) fn write_whole(path: &Path, bytes: &[u8], overwrite: bool) -> Result<(), FileFault> {
    let not_written = |error| FileFault::NotWritten(path.to_owned(), error);
    let mut file = builder(path).tempfile_in(folder_of(path)).map_err(not_written)?;
    file.write_all(bytes).and_then(|()| file.as_file().sync_all()).map_err(not_written)?;
    let persisted = if overwrite { file.persist(path) } else { file.persist_noclobber(path) };
    match persisted {
        Ok(_) => Ok(()),
        Err(e) if e.error.kind() == io::ErrorKind::AlreadyExists => {
            Err(FileFault::Exists(path.to_owned()))
        }
        Err(e) => Err(not_written(e.error)),
    }
}

/// Temporary files are private by default; the file that is to stay gets the usual permissions, or
/// those of the file that it replaces.
#[cfg(unix)]
fn builder<'a, 'b>(path: &Path) -> tempfile::Builder<'a, 'b> {
    use std::os::unix::fs::PermissionsExt;
    let usual = std::fs::Permissions::from_mode(0o666);
    let permissions = path.metadata().map_or(usual, |old| old.permissions());
    let mut builder = tempfile::Builder::new();
    builder.permissions(permissions);
    builder
}

#[cfg(not(unix))]
fn builder<'a, 'b>(_: &Path) -> tempfile::Builder<'a, 'b> {
    tempfile::Builder::new()
}

/// The folder of a file; the current one for a bare name.
pub(crate) fn folder_of(path: &Path) -> &Path {
    path.parent().filter(|p| !p.as_os_str().is_empty()).unwrap_or(Path::new("."))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_ending_tells_the_format() {
        let formats = [Format::Json, Format::Csv];
        let format = |name: &str| Target::read(name, &formats).map(|t| t.format);
        assert_eq!(format("a/b.JSON"), Ok(Format::Json));
        assert_eq!(format("b.csv"), Ok(Format::Csv));
        for name in ["b.yaml", "b", "json", "b.xlsx"] {
            let told = format(name).unwrap_err();
            assert!(told.contains(".json or .csv"), "{told}");
        }
    }

    #[test]
    fn a_file_that_is_there_stays_unless_overwritten() {
        let folder = tempfile::tempdir().unwrap();
        let path = folder.path().join("x.csv");
        write_whole(&path, b"first", false).unwrap();
        assert!(matches!(write_whole(&path, b"second", false), Err(FileFault::Exists(_))));
        assert_eq!(std::fs::read(&path).unwrap(), b"first");
        write_whole(&path, b"third", true).unwrap();
        assert_eq!(std::fs::read(&path).unwrap(), b"third");
        let left = std::fs::read_dir(folder.path()).unwrap().count();
        assert_eq!(left, 1, "no temporary file is left");
    }
}
