//! A folder of catalogs and a rail sheet, read and ready for a search, each step timed.

use catalog::{ReadOptions, Shop, read_folder};
use notice::Notice;
use sheet::{Sheet, ShopFile};
use std::fmt;
use std::path::{Path, PathBuf};
use std::time::{Duration, Instant};

/// Why there is nothing to measure.
#[derive(Debug)]
pub enum WorkloadError {
    /// The sheet could not be opened.
    Open(PathBuf, std::io::Error),
    /// Catalogs or sheet have errors.
    Faulty(Vec<Notice>),
}

impl fmt::Display for WorkloadError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Open(path, error) => write!(f, "cannot read {}: {error}", path.display()),
            Self::Faulty(notices) => {
                for notice in notices {
                    writeln!(f, "{notice}")?;
                }
                Ok(())
            }
        }
    }
}

impl std::error::Error for WorkloadError {}

/// Reads the catalogs of a folder.
///
/// # Errors
/// The faults that the reader found.
pub fn read_shop(folder: &Path) -> Result<Shop, WorkloadError> {
    let mut notices = Vec::new();
    read_folder(folder, &ReadOptions::default(), &mut notices).ok_or(WorkloadError::Faulty(notices))
}

/// Takes a rail sheet from its text.
///
/// # Errors
/// The faults that the reader found.
pub fn take_sheet(name: &str, text: &str) -> Result<Sheet, WorkloadError> {
    take_sheet_set(name, text, &[])
}

fn take_sheet_set(name: &str, text: &str, set: &[String]) -> Result<Sheet, WorkloadError> {
    let mut notices = Vec::new();
    sheet::read(name, text, &ShopFile::empty(), set, &mut notices)
        .ok_or(WorkloadError::Faulty(notices))
}

/// Reads a rail sheet.
///
/// # Errors
/// Where the file cannot be opened or has faults.
pub fn read_sheet(path: &Path) -> Result<Sheet, WorkloadError> {
    read_sheet_set(path, &[])
}

/// Reads a rail sheet of which some values are set otherwise (`load.max_a=1.5`).
///
/// # Errors
/// Where the file cannot be opened, or it or a value has faults.
pub fn read_sheet_set(path: &Path, set: &[String]) -> Result<Sheet, WorkloadError> {
    let text = std::fs::read_to_string(path)
        .map_err(|error| WorkloadError::Open(path.to_owned(), error))?;
    take_sheet_set(&path.display().to_string(), &text, set)
}

/// What some work returned, and how long it took.
pub fn timed<T>(work: impl FnOnce() -> T) -> (T, Duration) {
    let begin = Instant::now();
    let result = work();
    (result, begin.elapsed())
}

/// Milliseconds, as tables show them.
pub fn milliseconds(time: Duration) -> f64 {
    1e3 * time.as_secs_f64()
}
