//! A catalog file as its rows are read, and a row in it.

use crate::column::Column;
use crate::fault::{Fault, What};
use crate::header::Header;
use crate::kind::Kind;
use crate::locate::{self, Spot};
use notice::{Notice, Place};

/// A catalog file whose header row is known.
#[derive(Clone, Copy)]
pub(crate) struct Source<'f> {
    /// Which kind of catalog.
    pub(crate) kind: Kind,
    /// The file's name within the folder.
    pub(crate) name: &'f str,
    /// Its text: UTF-8 but for files that mix encodings.
    pub(crate) text: &'f [u8],
    /// Its header row.
    pub(crate) header: &'f Header,
}

/// A row of a file, for notices about it.
#[derive(Clone, Copy)]
pub(crate) struct RowPlace<'f> {
    /// The file.
    pub(crate) source: Source<'f>,
    /// Where the record begins in its text.
    pub(crate) start: usize,
    /// The line on which it begins.
    pub(crate) line: u32,
}

impl<'f> RowPlace<'f> {
    /// The declared columns.
    pub(crate) fn columns(&self) -> &'static [Column] {
        self.source.kind.columns()
    }

    /// The field that a declared column is found in.
    fn field(&self, column: usize) -> Option<usize> {
        self.source.header.fields.get(column).map(|field| *field as usize)
    }

    fn spot(&self, field: Option<usize>, within: Option<(usize, usize)>) -> Spot {
        let Source { text, header, .. } = self.source;
        locate::spot(text, self.start, header.separator, field, within)
    }

    fn place(&self, spot: &Spot) -> Place {
        Place { file: self.source.name.to_owned(), line: self.line, column: spot.column }
    }

    /// The notice of one fault.
    pub(crate) fn notice(&self, fault: &Fault) -> Notice {
        let column = fault.column.and_then(|at| self.columns().get(at));
        let field = match fault.what {
            What::NotUtf8InField { field } => Some(field),
            _ => fault.column.and_then(|at| self.field(at)),
        };
        let spot = self.spot(field, fault.within);
        let place = self.place(&spot);
        fault.told(column, place, spot, &self.source.header.decimal)
    }

    /// A notice about a cell that can be read: its place, text and line.
    pub(crate) fn about_cell(&self, column: &str, notice: impl FnOnce(Place) -> Notice) -> Notice {
        let at = self.columns().iter().position(|c| c.name == column);
        let spot = self.spot(at.and_then(|at| self.field(at)), None);
        let notice = notice(self.place(&spot));
        let notice = if spot.is_cell { notice.found(spot.found) } else { notice };
        notice.excerpt(spot.excerpt)
    }
}
