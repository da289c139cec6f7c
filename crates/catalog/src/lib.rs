//! Catalogs of parts: six kinds of CSV files, one or several of each, one row a part that can be bought.
//!
//! What a column means (name, unit, range, whether it is needed, default) is declared once, in
//! [`column`](mod@column)'s terms, by the module of its catalog. The reader, its messages, the search for
//! misspelt headers, the plausibility check and the reference page all follow from the declarations.
//!
//! | module | what it holds |
//! |---|---|
//! | [`column`](mod@column) | what can be said about a column |
//! | [`kind`] | the six catalogs, their files and columns |
//! | [`shop`] | what has been read: rows, unproven parts, the files themselves |
//! | [`price`] | price breaks |
//! | [`read`] | reading a folder of catalogs |
//! | [`plausible`] | values that can be read but hardly be meant |
//! | [`reference`](mod@reference) | the reference page of all columns |
//! | [`start`] | catalogs to begin with |
//!
//! This crate does not compute a check, choose a value, or print. Faults become [`notice::Notice`]s.

pub mod column;
pub mod kind;
pub mod plausible;
pub mod price;
pub mod read;
pub mod reference;
pub mod shop;
pub mod start;

mod cells;
mod decimal;
mod duplicates;
mod fault;
mod header;
mod locate;
mod near;
mod source;
mod tables;

pub use circuit::status::Status;
pub use column::Column;
pub use kind::Kind;
pub use price::Price;
pub use read::{ReadOptions, read_folder};
pub use shop::{
    Catalog, FileRead, LeftOut, Row, Shop, Sink, Unproven, lacks_for_fault, lacks_for_sink,
    leaves_no_resistance,
};
