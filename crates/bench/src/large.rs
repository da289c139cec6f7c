//! Large shops made from a seed: catalogs of invented parts, and rail sheets that ask for them.
//!
//! The same seed, sizes and kind give the same bytes on every machine: the generator of chance is
//! spelled out in `dice`, logarithms come from a library in place of the platform, and figures are
//! printed from their exact binary value. Nothing in here computes whether a part suits a rail.
//!
//! | module | what it makes |
//! |---|---|
//! | `dice` | chance |
//! | `cells` | one CSV row after another |
//! | `offer` | what every part has: name, maker, price, stock, status, source |
//! | `zeners`, `opamps`, `transistors`, `resistors`, `pots`, `heatsinks` | the figures of one kind of parts, and its file |
//! | `hard` | figures that are meant to be hard for a search |
//! | `sheets` | the rail sheets |

mod cells;
mod dice;
mod hard;
mod heatsinks;
mod offer;
mod opamps;
mod pots;
mod resistors;
mod sheets;
mod transistors;
mod zeners;

use catalog::Kind;
use quantity::points::PointsError;
use std::fmt;
use std::path::{Path, PathBuf};

/// What shop to make.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Order {
    /// Rows of each catalog.
    pub sizes: Sizes,
    /// Another seed, another shop.
    pub seed: u64,
    /// None: parts as they are sold. Else figures that are meant to be hard for a search.
    pub hard: Option<Hard>,
}

/// Rows of each catalog.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Sizes {
    /// Rows of `zeners.csv`.
    pub zeners: usize,
    /// Rows of `opamps.csv`.
    pub opamps: usize,
    /// Rows of `transistors.csv`.
    pub transistors: usize,
    /// Rows of `heatsinks.csv`.
    pub heatsinks: usize,
    /// Rows of `resistors.csv`.
    pub lines: usize,
    /// Rows of `pots.csv`.
    pub pots: usize,
}

impl Sizes {
    /// The same number of zeners, amplifiers and transistors, a tenth as many heatsinks, eight lines
    /// of resistors and a hundredth as many pots (at least ten of each).
    pub fn alike(rows: usize) -> Self {
        Self {
            zeners: rows,
            opamps: rows,
            transistors: rows,
            heatsinks: (rows / 10).max(10),
            lines: 8,
            pots: (rows / 100).max(10),
        }
    }
}

/// In which way a shop is hard for a search.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Hard {
    /// All parts of a slot have the same figures and price: only names tell candidates apart.
    Ties,
    /// Every better figure costs more along a smooth curve, so that no part is dominated.
    Undominated,
    /// Nothing holds, and what fails is `no-load`, the last check of all.
    LastCheck,
    /// Nothing holds: half the transistors fail `base-drive`, the other half `no-load`.
    MixedReasons,
    /// Of the sets of parts some hold and some do not, nearly always for `output-error` alone.
    OneCheck,
}

impl Hard {
    /// All kinds with their names on the command line.
    pub const ALL: [(&'static str, Self); 5] = [
        ("ties", Self::Ties),
        ("undominated", Self::Undominated),
        ("last-check", Self::LastCheck),
        ("mixed-reasons", Self::MixedReasons),
        ("one-check", Self::OneCheck),
    ];
}

/// Why a shop could not be made.
#[derive(Debug)]
pub enum LargeError {
    /// The folder or a file in it could not be written.
    Write(PathBuf, std::io::Error),
    /// A curve came out that is none: a defect of the generator.
    Curve(PointsError),
}

impl fmt::Display for LargeError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Write(path, error) => write!(f, "cannot write {}: {error}", path.display()),
            Self::Curve(error) => write!(f, "the generator made a curve that is none: {error}"),
        }
    }
}

impl std::error::Error for LargeError {}

impl From<PointsError> for LargeError {
    fn from(error: PointsError) -> Self {
        Self::Curve(error)
    }
}

/// The bytes of one catalog.
///
/// # Errors
/// [`LargeError::Curve`] where the generator has a defect.
pub fn catalog_bytes(kind: Kind, order: &Order) -> Result<Vec<u8>, LargeError> {
    let bytes = match kind {
        Kind::Zeners => zeners::file(order),
        Kind::Opamps => opamps::file(order),
        Kind::Transistors => transistors::file(order)?,
        Kind::Resistors => resistors::file(order),
        Kind::Pots => pots::file(order),
        Kind::Heatsinks => heatsinks::file(order),
    };
    Ok(bytes)
}

/// The rail sheets for a shop: file name and text.
pub fn rail_sheets(order: &Order) -> Vec<(&'static str, String)> {
    sheets::all(order)
}

/// Writes the six catalogs and the rail sheets into `folder`, which is made where it is missing;
/// files of the same names are replaced.
///
/// # Errors
/// [`LargeError::Write`] names the file that could not be written.
pub fn write_shop(folder: &Path, order: &Order) -> Result<(), LargeError> {
    let write = |name: &str, bytes: &[u8]| {
        let path = folder.join(name);
        std::fs::write(&path, bytes).map_err(|error| LargeError::Write(path, error))
    };
    std::fs::create_dir_all(folder).map_err(|error| LargeError::Write(folder.to_owned(), error))?;
    for kind in Kind::ALL {
        write(kind.file_name(), &catalog_bytes(kind, order)?)?;
    }
    for (name, text) in rail_sheets(order) {
        write(name, text.as_bytes())?;
    }
    Ok(())
}
