//! What can be wrong with a row, and how it is told.

use crate::column::{Cell, Column};
use crate::locate::{self, Spot};
use crate::near;
use notice::{Notice, Place};
use quantity::notation::{self, NotationError, Unit};

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
    /// The same part of the same maker stands on an earlier line.
    Duplicate { line: u32 },
    /// The cell is not valid UTF-8.
    NotUtf8,
    /// The same, in a column that is not declared.
    NotUtf8InField { field: usize },
    /// The cell is no figure in its unit.
    Notation { error: NotationError, unit: Unit },
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

/// A row of a file, for notices about it.
pub(crate) struct RowPlace<'f> {
    /// The file's name.
    pub(crate) file: &'f str,
    /// The whole file.
    pub(crate) bytes: &'f [u8],
    /// Where the record begins.
    pub(crate) start: usize,
    /// Its line.
    pub(crate) line: u32,
    /// Between cells.
    pub(crate) separator: u8,
    /// The declared columns.
    pub(crate) columns: &'static [Column],
    /// For each of them the field it is found in.
    pub(crate) fields: &'f [u32],
}

impl RowPlace<'_> {
    /// The notice of one fault.
    pub(crate) fn notice(&self, fault: &Fault) -> Notice {
        let column = fault.column.and_then(|at| self.columns.get(at));
        let field = match fault.what {
            What::NotUtf8InField { field } => Some(field),
            _ => fault.column.and_then(|at| self.fields.get(at)).map(|f| *f as usize),
        };
        let spot = locate::spot(self.bytes, self.start, self.separator, field, fault.within);
        let place = Place { file: self.file.to_owned(), line: self.line, column: spot.column };
        let (code, message) = told(&fault.what, column);
        let mut notice = Notice::error(code, place, message);
        if spot.is_cell {
            notice = notice.found(spot.found.clone());
        }
        if let Some(expected) = expected(&fault.what, column) {
            notice = notice.expected(expected);
        }
        if let Some(mend) = mend(&fault.what, column, &spot) {
            notice = notice.mend(mend);
        }
        notice.excerpt(spot.excerpt)
    }
}

/// Code and message of a fault.
fn told(what: &What, column: Option<&Column>) -> (&'static str, String) {
    let name = column.map_or("", |c| c.name);
    match what {
        What::Ragged { cells, header } => {
            ("row-ragged", format!("the row has {cells} cells where the header has {header}"))
        }
        What::NoPart => ("row-without-part", "the row names no part".to_owned()),
        What::Duplicate { line } => (
            "row-duplicate",
            format!("the same part of the same maker stands on line {line} already"),
        ),
        What::NotUtf8 | What::NotUtf8InField { .. } => {
            ("cell-not-utf8", "the cell is not valid UTF-8".to_owned())
        }
        What::Notation { error: error @ NotationError::OtherUnit { .. }, .. } => {
            ("cell-unit", format!("`{name}`: {error}"))
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
        What::Duplicate { .. } => Some("each part of a maker once in a file".to_owned()),
        What::NotUtf8 | What::NotUtf8InField { .. } => Some("text in UTF-8".to_owned()),
        What::LineWithoutValue | What::LineTooWide | What::ZeroPowerBelowFull { .. } => None,
        What::Notation { .. }
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

fn mend(what: &What, column: Option<&Column>, spot: &Spot) -> Option<String> {
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
        What::Notation { error: NotationError::DateLike, .. } => {
            Some("make the column text in the spreadsheet, and type the figure again".to_owned())
        }
        What::Notation { unit, .. } => notation::suggestion(&spot.found, *unit).map(try_this),
        What::UnknownWord => {
            let Some(Cell::Word(words)) = column.map(|c| c.cell) else { return None };
            near::nearest(&spot.found, words.iter().copied()).map(|w| try_this(w.to_owned()))
        }
        What::BlankItem => Some("remove the `;` that nothing follows or goes before".to_owned()),
        What::NotAPoint if spot.found.matches(':').count() == 2 => {
            Some("is this a time of day that a spreadsheet made of a point?".to_owned())
        }
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

fn try_this(text: String) -> String {
    format!("try `{text}`")
}

/// A notice about a cell that can be read: its place, text and line.
pub(crate) fn about_cell(
    place: &RowPlace<'_>,
    column: &str,
    notice: impl FnOnce(Place) -> Notice,
) -> Notice {
    let at = place.columns.iter().position(|c| c.name == column);
    let field = at.and_then(|at| place.fields.get(at)).map(|f| *f as usize);
    let spot = locate::spot(place.bytes, place.start, place.separator, field, None);
    let notice =
        notice(Place { file: place.file.to_owned(), line: place.line, column: spot.column });
    let notice = if spot.is_cell { notice.found(spot.found) } else { notice };
    notice.excerpt(spot.excerpt)
}
