//! The kept inputs: a folder for each target.

use crate::target::Target;
use std::io;
use std::path::{Path, PathBuf};

/// The folder of the corpus in this crate.
pub fn folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("corpus")
}

/// The inputs of a target with the names of their files, in order of name.
///
/// # Errors
/// Where the folder or a file can't be read.
pub fn read(folder: &Path, target: Target) -> io::Result<Vec<(String, Vec<u8>)>> {
    let mut inputs = Vec::new();
    for entry in std::fs::read_dir(folder.join(target.name()))? {
        let entry = entry?;
        let name = entry.file_name().to_string_lossy().into_owned();
        inputs.push((name, std::fs::read(entry.path())?));
    }
    inputs.sort();
    Ok(inputs)
}
