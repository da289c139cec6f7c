//! Rail sheets and shop files: what their keys mean, and how they are read.
//!
//! A rail sheet (TOML) says what is asked of one rail; a shop file (`shop.toml`) holds what all
//! sheets of a shop share. [`read`] brings both together, and what `--set` changed, into a
//! [`Sheet`]: a checked [`circuit::rail::Rail`] with the rules for its parts. Every fault of the
//! text becomes a [`notice::Notice`] with file, line and column; all of them are gathered.
//!
//! | module | what it holds |
//! |---|---|
//! | [`keys`] | every key, declared once: unit, meaning, range, default, when it applies |
//! | [`bounds`] | the range of a number |
//! | [`code`] | the lasting names of this crate's notices |
//! | `source` | places and excerpts in a text |
//! | `near` | the nearest known name for a misspelt one |
//! | `value` | one TOML value read as its key wants it |
//! | `settings` | the keys that a file gives |
//! | `policy` | derating policies |
//! | `argument` | `--set KEY=VALUE` |
//! | [`shop`] | the shop file |
//! | [`requirement`] | the sheet as a whole: forms, defaults, rules between keys |
//! | [`mod@reference`] | the reference of all keys, made from their declarations |
//! | [`start`] | a sheet to begin with, likewise |
//!
//! This crate does not open files, print, know catalogs or compute a check.

mod argument;
pub mod bounds;
pub mod code;
pub mod keys;
mod near;
mod policy;
pub mod reference;
pub mod requirement;
mod settings;
pub mod shop;
mod source;
pub mod start;
mod value;

pub use reference::reference_markdown;
pub use requirement::{Assumed, NamedPart, PartRules, Sheet, Weights, read};
pub use shop::ShopFile;
pub use source::Mark;
pub use start::starting_sheet;
