//! What can be wrong with a row, and how it is told.

use crate::column::{Cell, Column};
use crate::decimal::DecimalMark;
use crate::locate::Spot;
use crate::near;
use notice::{Notice, Place};
use quantity::notation::{self, NotationError, Unit};
use quantity::spreadsheet;

/// The longest text of a cell, in bytes. Names go into every table and message, so one without bounds
/// would fill memory many times over; more than this is an unclosed quotation mark or a broken file.
pub(crate) const MOST_TEXT: usize = 1000;

/// One thing that is wrong with a row.
#[derive(Debug)]
pub(crate) struct Fault {
    /// The declared column, by its place; None: the row as a whole.
    pub(crate) column: Option<usize>,
    /// The bytes of the trimmed cell that are at fault; None: all of it.
    pub(crate) within: Option<(usize, usize)>,
    /// What is wrong.
    pub(crate) what: What,
}

/// What is wrong.
#[derive(Debug)]
pub(crate) enum What {
    /// The record has another number of cells than the header.
    Ragged { cells: usize, header: usize },
    /// The row names no part.
    NoPart,
    /// The same part of the same maker stands on an earlier line, of another file where one is named.
    Duplicate { file: Option<String>, line: u32 },
    /// The cell is not valid UTF-8.
    NotUtf8,
    /// The text of the cell is longer than any name is.
    TooLong { bytes: usize },
    /// The same as [`What::NotUtf8`], in a column that is not declared.
    NotUtf8InField { field: usize },
    /// The cell is no figure in its unit.
    Notation { error: NotationError, unit: Unit },
    /// A comma that may part thousands or decimals.
    MayBeThousands,
    /// A spreadsheet made a time of day of a point or price break.
    TimeOfDay,
    /// A doubt: a spreadsheet wrote the figure as a power of ten.
    WrittenAsPower { value: f64 },
    /// A doubt: a spreadsheet made a date, a power of ten or a failure of a name.
    DamagedName(Damage),
    /// The figure lies outside its range.
    OutOfRange { value: f64 },
    /// The cell is not one of the small whole numbers it may be.
    NotCount,
    /// The cell is none of the words it may be.
    UnknownWord,
    /// An item of a list is blank.
    BlankItem,
    /// An item is no `x:y`.
    NotAPoint,
    /// x does not rise.
    NotRising,
    /// An item is no `quantity:price`.
    NotABreak,
    /// A quantity is no whole number of at least 1.
    NotAQuantity,
    /// Quantities do not rise.
    BreaksNotRising,
    /// No value of a line lies from `min_ohm` to `max_ohm`.
    LineWithoutValue,
    /// `max_ohm` is beyond all measure of `min_ohm`.
    LineTooWide,
    /// A power rating ends before it begins to fall.
    ZeroPowerBelowFull { full_power_to_c: f64, zero_power_at_c: f64 },
}

/// What a spreadsheet made of a name.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Damage {
    Date,
    Power,
    Failure,
}

impl Damage {
    /// What the name looks as if a spreadsheet had done to it.
    pub(crate) fn of(name: &str) -> Option<Self> {
        if spreadsheet::is_date_of_a_name(name) {
            Some(Self::Date)
        } else if spreadsheet::is_power(name.as_bytes()) {
            Some(Self::Power)
        } else {
            spreadsheet::is_failure(name).then_some(Self::Failure)
        }
    }
}

impl Fault {
    /// The notice of the fault, which lies at this spot.
    pub(crate) fn told(
        &self,
        column: Option<&Column>,
        place: Place,
        spot: Spot,
        decimal: &DecimalMark,
    ) -> Notice {
        let (code, message) = told(&self.what, column, decimal);
        let mut notice = Notice::error(code, place, message);
        if spot.is_cell {
            notice = notice.found(spot.found.clone());
        }
        if let Some(expected) = expected(&self.what, column) {
            notice = notice.expected(expected);
        }
        if let Some(mend) = mend(&self.what, column, &spot, decimal) {
            notice = notice.mend(mend);
        }
        notice.excerpt(spot.excerpt)
    }
}

/// Code and message of a fault.
fn told(what: &What, column: Option<&Column>, decimal: &DecimalMark) -> (&'static str, String) {
    let name = column.map_or("", |c| c.name);
    match what {
        What::Ragged { cells, header } => {
            ("row-ragged", format!("the row has {cells} cells where the header has {header}"))
        }
        What::NoPart => ("row-without-part", "the row names no part".to_owned()),
        What::Duplicate { file, line } => {
            let of_file = file.as_ref().map(|name| format!(" of {name}")).unwrap_or_default();
            let message =
                format!("the same part of the same maker stands on line {line}{of_file} already");
            ("row-duplicate", message)
        }
        What::NotUtf8 | What::NotUtf8InField { .. } => {
            ("cell-not-utf8", "the cell is not valid UTF-8".to_owned())
        }
        What::TooLong { bytes } => {
            ("cell-too-long", format!("`{name}`: a text of {bytes} bytes is no name"))
        }
        What::Notation { error: error @ NotationError::OtherUnit { .. }, .. } => {
            ("cell-unit", format!("`{name}`: {error}"))
        }
        What::Notation { error: error @ NotationError::DecimalComma, .. } => {
            let seen = match decimal {
                DecimalMark::PointSeen { line, figure } => {
                    format!(" in a file that has decimal points too: `{figure}` on line {line}")
                }
                DecimalMark::Point | DecimalMark::Comma => String::new(),
            };
            ("cell-notation", format!("`{name}`: {error}{seen}"))
        }
        What::MayBeThousands => (
            "cell-thousands",
            format!("`{name}`: three digits behind a comma may be decimals or thousands"),
        ),
        What::TimeOfDay => (
            "cell-points",
            format!("`{name}`: this looks like a time of day that a spreadsheet made of it"),
        ),
        What::WrittenAsPower { value } => (
            "cell-spreadsheet",
            format!(
                "`{name}`: a spreadsheet has written the figure so, and may have cut its digits; it is read as {value}"
            ),
        ),
        What::DamagedName(damage) => {
            let (looks, made) = match damage {
                Damage::Date => ("a date", "of a name"),
                Damage::Power => ("a power of ten", "of a name"),
                Damage::Failure => ("what a failed formula leaves behind", "in place of a text"),
            };
            let message = match damage {
                Damage::Failure => format!("`{name}`: this looks like {looks} {made}"),
                _ => format!("`{name}`: this looks like {looks} that a spreadsheet made {made}"),
            };
            ("cell-spreadsheet", message)
        }
        What::Notation { error, .. } => ("cell-notation", format!("`{name}`: {error}")),
        What::OutOfRange { value, .. } => {
            ("cell-out-of-range", format!("`{name}`: {value} is out of range"))
        }
        What::NotCount => ("cell-out-of-range", format!("`{name}` is out of range")),
        What::UnknownWord => ("cell-word", format!("`{name}` doesn't know this word")),
        What::BlankItem => ("cell-list", format!("`{name}`: an item of the list is blank")),
        What::NotAPoint => ("cell-points", format!("`{name}`: an item of the list is no point")),
        What::NotRising => (
            "cell-points",
            format!("`{name}`: the figure before the colon doesn't rise from the point before"),
        ),
        What::NotABreak => ("cell-price", format!("`{name}`: an item is no price break")),
        What::NotAQuantity => {
            ("cell-price", format!("`{name}`: the quantity is no whole number of at least 1"))
        }
        What::BreaksNotRising => {
            ("cell-price", format!("`{name}`: the quantities of the price breaks don't rise"))
        }
        What::LineWithoutValue => {
            ("row-without-value", "the line has no value from `min_ohm` to `max_ohm`".to_owned())
        }
        What::LineTooWide => (
            "row-too-wide",
            "no line of resistors spans so much from `min_ohm` to `max_ohm`".to_owned(),
        ),
        What::ZeroPowerBelowFull { full_power_to_c, zero_power_at_c } => (
            "row-power-rating",
            format!(
                "`zero_power_at_c` ({zero_power_at_c} °C) doesn't lie above `full_power_to_c` \
                 ({full_power_to_c} °C)"
            ),
        ),
    }
}

fn expected(what: &What, column: Option<&Column>) -> Option<String> {
    match what {
        What::Ragged { header, .. } => Some(format!("{header} cells")),
        What::NoPart => Some("the name of a part".to_owned()),
        What::Duplicate { .. } => {
            Some("each part of a maker once in all files of a kind".to_owned())
        }
        What::NotUtf8 | What::NotUtf8InField { .. } => Some("text in UTF-8".to_owned()),
        What::TooLong { .. } => Some(format!("at most {MOST_TEXT} bytes")),
        What::LineWithoutValue
        | What::LineTooWide
        | What::ZeroPowerBelowFull { .. }
        | What::DamagedName(_)
        | What::WrittenAsPower { .. } => None,
        What::MayBeThousands
        | What::TimeOfDay
        | What::Notation { .. }
        | What::OutOfRange { .. }
        | What::NotCount
        | What::UnknownWord
        | What::BlankItem
        | What::NotAPoint
        | What::NotRising
        | What::NotABreak
        | What::NotAQuantity
        | What::BreaksNotRising => column.map(|c| c.cell.to_string()),
    }
}

fn mend(
    what: &What,
    column: Option<&Column>,
    spot: &Spot,
    decimal: &DecimalMark,
) -> Option<String> {
    match what {
        What::Ragged { .. } if spot.spans_lines => {
            Some("is a quotation mark left open?".to_owned())
        }
        What::Ragged { .. } => Some(
            "put a cell that holds the separator in quotation marks, and fill up missing cells \
             with separators"
                .to_owned(),
        ),
        What::NoPart => Some("name the part, or delete the row".to_owned()),
        What::Duplicate { .. } => Some("delete one of the two rows, or tell them apart".to_owned()),
        What::NotUtf8 | What::NotUtf8InField { .. } => Some(match spot.as_latin_1() {
            Some(text) => format!("save the file as UTF-8; read as Latin-1 this is `{text}`"),
            None => "save the file as UTF-8".to_owned(),
        }),
        What::TooLong { .. } => Some(
            "look for a quotation mark that is opened and never closed; notes belong in `source`"
                .to_owned(),
        ),
        What::Notation { error: NotationError::DateLike, .. } => {
            Some("make the column text in the spreadsheet, and type the figure again".to_owned())
        }
        What::Notation { .. } if spreadsheet::is_failure(&spot.found) => {
            Some("look at the cell in the spreadsheet: its formula failed, or its column is too narrow".to_owned())
        }
        What::Notation { unit, .. } if *decimal == DecimalMark::Comma => {
            let meant = notation::suggestion(&spot.found.replace(',', "."), *unit)?;
            Some(try_this(meant.replace('.', ",")))
        }
        What::Notation { unit, .. } => notation::suggestion(&spot.found, *unit).map(try_this),
        What::MayBeThousands => {
            let whole = spot.found.replace(',', "");
            Some(format!("write `{whole}`, or another number of decimals, such as {}", more_decimals(&spot.found)))
        }
        What::TimeOfDay => Some(
            "make the column text in the spreadsheet, and type the list again: the figures may have \
             changed"
                .to_owned(),
        ),
        What::WrittenAsPower { .. } => {
            Some("write all digits of the figure, or a prefix, such as `10k`".to_owned())
        }
        What::DamagedName(Damage::Failure) => {
            Some("look at the cell in the spreadsheet".to_owned())
        }
        What::DamagedName(_) => {
            Some("make the column text in the spreadsheet, and type the name again".to_owned())
        }
        What::UnknownWord => {
            let Some(Cell::Word(words)) = column.map(|c| c.cell) else { return None };
            near::nearest(&spot.found, words.iter().copied()).map(|w| try_this(w.to_owned()))
        }
        What::BlankItem => Some("remove the `;` that nothing follows or goes before".to_owned()),
        What::NotAPoint => {
            Some("write each point as `x:y`; a figure at one current is one point".to_owned())
        }
        What::NotABreak => Some("write each price break as `quantity:price`".to_owned()),
        What::NotRising | What::BreaksNotRising => Some("put the items in rising order".to_owned()),
        What::OutOfRange { .. }
        | What::NotCount
        | What::NotAQuantity
        | What::LineWithoutValue
        | What::LineTooWide
        | What::ZeroPowerBelowFull { .. } => None,
    }
}

/// A figure with three decimals as one that nobody takes for thousands: without its last noughts, or
/// with one more.
fn more_decimals(found: &str) -> String {
    let end = found.find(',').map_or(found.len(), |comma| (comma + 4).min(found.len()));
    let (figure, rest) = found.split_at(end);
    let short = figure.trim_end_matches('0');
    let changed = match short {
        short if short.ends_with(',') => format!("{short}0"),
        short if short.len() < figure.len() => short.to_owned(),
        _ => format!("{figure}0"),
    };
    format!("`{changed}{rest}`")
}

fn try_this(text: String) -> String {
    format!("try `{text}`")
}
