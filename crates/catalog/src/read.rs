//! Reading a folder of catalogs.
//!
//! A kind of catalog is one file, `zeners.csv`, or several, `zeners/*.csv`, or both: they are read in
//! the order of their names as if they were one. The six kinds are read side by side, and a large file
//! in pieces. What comes out does not depend on how many threads there are: pieces are put together in
//! the order of the file.
//!
//! The codes of the notices, for scripts:
//!
//! | code | what it says |
//! |---|---|
//! | `file-missing`, `file-unreadable`, `file-empty`, `file-not-read` | the file as a whole |
//! | `file-encoding` | a warning where the file is not UTF-8 and read all the same |
//! | `column-duplicate` | two columns have the same name |
//! | `column-missing`, `column-near-miss` | warnings: a needed column is not there, or a name is nearly one |
//! | `row-without-part`, `row-duplicate`, `row-ragged` | which part it is, and which cell is which |
//! | `row-without-value`, `row-too-wide`, `row-power-rating` | cells that can't be true together |
//! | `cell-notation`, `cell-unit`, `cell-not-utf8` | the cell is no figure, or one in another unit |
//! | `cell-too-long` | the text is longer than any name |
//! | `cell-out-of-range`, `cell-word` | a figure, or a word, that the column doesn't take |
//! | `cell-list`, `cell-points`, `cell-price` | a list, and the item in it that is wrong |
//! | `cell-thousands` | a comma that may part thousands or decimals |
//! | `cell-spreadsheet` | warnings: a spreadsheet has probably changed the cell |
//! | `notices-cut`, `rows-skipped` | how many more there are; how many rows were left out |
//! | `value-implausible`, `cell-spaces`, `column-gaps` | warnings of [`crate::plausible`] |

mod encoding;
mod files;
mod inline;
mod one_kind;
pub(crate) mod records;
mod rows;
pub(crate) mod told;

pub use inline::{InlineFault, read_inline};

use crate::shop::{Catalog, Shop};
use notice::Notice;
use one_kind::read_catalog;
use std::path::Path;

/// How catalogs are to be read.
#[derive(Debug, Clone, Default)]
pub struct ReadOptions {
    /// `[columns]` of `shop.toml`: the name in the file, and the name of the column that it is.
    pub renamed: Vec<(String, String)>,
    /// Leave rows out that something is wrong with, with a warning, instead of stopping.
    pub skip_broken_rows: bool,
    /// The rail has an adjustable output: `pots.csv` must be there.
    pub needs_pots: bool,
    /// `heatsinks.csv` must be there. No rail needs it: parts go unmounted without.
    pub needs_heatsinks: bool,
}

/// At most so many notices are kept for one file; how many more there were is said.
pub const MOST_NOTICES: usize = 200;

/// Reads the catalogs of a folder.
///
/// All faults of all files are added to `notices`, in the order of files and lines. None where any
/// of them is an error, for then the run must stop. Nothing is printed.
///
/// A kind without a file is an error, but for pots and heatsinks where they are not needed.
pub fn read_folder(
    folder: &Path,
    options: &ReadOptions,
    notices: &mut Vec<Notice>,
) -> Option<Shop> {
    // The two largest files of most shops first, so that they share the threads.
    let ((zeners, transistors), (opamps, (resistors, (pots, heatsinks)))) = rayon::join(
        || rayon::join(|| read_catalog(folder, options), || read_catalog(folder, options)),
        || {
            rayon::join(
                || read_catalog(folder, options),
                || {
                    rayon::join(
                        || read_catalog(folder, options),
                        || {
                            rayon::join(
                                || read_catalog(folder, options),
                                || read_catalog(folder, options),
                            )
                        },
                    )
                },
            )
        },
    );
    let mut stops = false;
    let mut told = |mut of_file: Vec<Notice>| {
        stops |= notice::has_errors(&of_file);
        notices.append(&mut of_file);
    };
    let shop = Shop {
        zeners: taken(zeners, &mut told),
        opamps: taken(opamps, &mut told),
        transistors: taken(transistors, &mut told),
        resistors: taken(resistors, &mut told),
        pots: taken(pots, &mut told),
        heatsinks: taken(heatsinks, &mut told),
    };
    (!stops).then_some(shop)
}

fn taken<T>(read: (Catalog<T>, Vec<Notice>), told: &mut impl FnMut(Vec<Notice>)) -> Catalog<T> {
    told(read.1);
    read.0
}
