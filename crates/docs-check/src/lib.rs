//! Holds the written pages against the code.
//!
//! The README, the developers' page and the folder `docs` repeat things that the code decides: columns
//! and keys, names of checks and of the functions that make them, which crate may know which. What
//! can be made from declarations is made ([`generated`]); the rest is looked up, so that a page that
//! has fallen behind fails a test.
//!
//! | module | what it holds |
//! |---|---|
//! | [`page`] | the pages; links, headings, code and tables of one |
//! | [`generated`] | the parts of pages that are made from declarations |
//! | [`code`] | where a function stands in the sources |
//! | [`manifest`] | the crates of the workspace and what they depend on |
//! | [`drawn`] | pictures that pages show |
//! | [`shown`], [`shell`] | output that pages show, held against what the program prints |
//!
//! It serves tests and writers alone and is no part of the tool.

pub mod code;
pub mod drawn;
pub mod generated;
pub mod manifest;
pub mod page;
pub mod shell;
pub mod shown;

use std::path::PathBuf;

/// The root of the repository.
///
/// Cargo says at run time where the crate stands; where it doesn't, the place of the build counts,
/// which is another one after a checkout was moved.
pub fn root() -> PathBuf {
    let here = std::env::var_os("CARGO_MANIFEST_DIR")
        .map_or_else(|| PathBuf::from(env!("CARGO_MANIFEST_DIR")), PathBuf::from);
    here.ancestors().nth(2).unwrap_or(&here).to_owned()
}
