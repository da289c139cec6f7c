//! The six catalogs, column by column: each module declares the columns of one file and turns a row
//! of cells into figures.

pub(crate) mod common;
pub(crate) mod heatsinks;
pub(crate) mod opamps;
pub(crate) mod pots;
pub(crate) mod resistors;
pub(crate) mod transistors;
pub(crate) mod zeners;

use crate::cells::Cells;
use crate::column::{Cell, Column, End, Need, Range, Unit, number};
use crate::kind::Kind;

/// Figures that are read from the rows of one kind of catalog.
pub(crate) trait Figures: Sized + Send {
    /// The catalog.
    const KIND: Kind;

    /// The text for whose sake this row is left out of the catalog without looking further.
    fn left_out<'r>(_cells: &Cells<'r, '_>) -> Option<&'r [u8]> {
        None
    }

    /// Reads every cell of the row, so that all that is wrong or lacking is noted in `cells`. The
    /// figures mean something only where nothing was noted.
    fn read(cells: &mut Cells<'_, '_>) -> Option<Self>;
}

/// Declares the columns of one file, once. `at::<name>` is the place of a column in `COLUMNS`.
macro_rules! columns {
    (first $first:expr, after $before:expr;
     $($name:ident: $make:ident($($arg:expr),* $(,)?) $(.$adjust:ident($($value:expr),*))*;)*) => {
        #[allow(non_camel_case_types, dead_code)]
        enum Own { $($name),* }

        /// The place of each of these columns in [`COLUMNS`]; some are declared but never read.
        #[allow(non_upper_case_globals, dead_code)]
        pub(crate) mod at {
            $(pub(crate) const $name: usize = $first + super::Own::$name as usize;)*
        }

        const OWN: [crate::column::Column; [$(stringify!($name)),*].len()] = [$(
            crate::column::Column::$make(stringify!($name), $($arg),*)
                $(.$adjust($($value),*))*
        ),*];

        /// The columns of this file, in the order in which blanks are listed.
        pub(crate) static COLUMNS: [crate::column::Column; $first + OWN.len()] =
            crate::tables::joined(&$before, &OWN);
    };
}
pub(crate) use columns;

/// The columns of every catalog, followed by those of one.
const fn joined<const A: usize, const B: usize, const N: usize>(
    first: &[Column; A],
    second: &[Column; B],
) -> [Column; N] {
    assert!(A + B == N);
    let filler = Column::optional("", Cell::Text, "", "");
    let mut all = [filler; N];
    let mut i = 0;
    while i < N {
        all[i] = if i < A { first[i] } else { second[i - A] };
        i += 1;
    }
    all
}

// Cells that several catalogs share.

const ABOVE_ZERO: Range = Range::ABOVE_ZERO;
const FROM_ZERO: Range = Range::FROM_ZERO;
const ANY: Range = Range::ANY;

/// Greatest junction temperatures; ratings are stated at 25 °C, so nothing below makes sense.
const JUNCTION: Cell = number(Unit::Celsius, Range { low: End::Open(25.0), high: End::None });

/// A tolerance of 100 % would leave no resistance, or no voltage.
const TOLERANCE: Cell =
    number(Unit::Percent, Range { low: End::Closed(0.0), high: End::Open(100.0) });

const VOLTS: Cell = number(Unit::Volt, ANY);
const RATED_VOLTS: Cell = number(Unit::Volt, ABOVE_ZERO);
const AMPERES: Cell = number(Unit::Ampere, ABOVE_ZERO);
const AMPERES_FROM_ZERO: Cell = number(Unit::Ampere, FROM_ZERO);
const WATTS: Cell = number(Unit::Watt, ABOVE_ZERO);
const OHMS: Cell = number(Unit::Ohm, ABOVE_ZERO);
const OHMS_FROM_ZERO: Cell = number(Unit::Ohm, FROM_ZERO);
const DEGREES: Cell = number(Unit::Celsius, ANY);
const DECIBELS: Cell = number(Unit::Decibel, ANY);
const THERMAL: Cell = number(Unit::CelsiusPerWatt, ABOVE_ZERO);
const HEAT_CAPACITY: Cell = number(Unit::JoulePerDegree, ABOVE_ZERO);
const PPM: Cell = number(Unit::PpmPerDegree, ANY);
const HERTZ: Cell = number(Unit::Hertz, ANY);
