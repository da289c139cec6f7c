//! The rows of one file: cut into pieces for the threads, read cell by cell, put together again.

use super::records::{begin_of_record, reader};
use super::told::Told;
use crate::cells::{Cells, Noted, trimmed};
use crate::duplicates::name_hash;
use crate::fault::{Fault, What};
use crate::header::Header;
use crate::shop::{LeftOut, Row, Unproven};
use crate::source::{RowPlace, Source};
use crate::tables::Figures;
use crate::tables::common::at;
use circuit::status::Status;
use compact_str::CompactString;
use csv::ByteRecord;
use notice::{Notice, Severity};
use rayon::prelude::*;

/// What is read from a piece of a file, or from all of it.
pub(super) struct Rows<T> {
    pub(super) rows: Vec<Row<T>>,
    pub(super) unproven: Vec<Unproven>,
    pub(super) left_out: Vec<LeftOut>,
    /// The hash of maker and part of every row that names a part, whatever else is wrong with it.
    pub(super) names: Vec<u64>,
    pub(super) broken: usize,
    /// What is wrong with rows, in the order of the file.
    pub(super) faults: Told,
    /// What a spreadsheet has probably done to rows that can be read all the same, likewise.
    pub(super) doubts: Told,
    /// Some of it is not UTF-8.
    pub(super) has_foreign_bytes: bool,
}

impl<T> Rows<T> {
    pub(super) fn new() -> Self {
        Self {
            rows: Vec::new(),
            unproven: Vec::new(),
            left_out: Vec::new(),
            names: Vec::new(),
            broken: 0,
            faults: Told::default(),
            doubts: Told::default(),
            has_foreign_bytes: false,
        }
    }

    /// Takes everything out of `next`, which keeps its room.
    pub(super) fn append(&mut self, next: &mut Rows<T>) {
        self.rows.append(&mut next.rows);
        self.unproven.append(&mut next.unproven);
        self.left_out.append(&mut next.left_out);
        self.names.append(&mut next.names);
        self.broken += std::mem::take(&mut next.broken);
        self.has_foreign_bytes |= std::mem::take(&mut next.has_foreign_bytes);
        self.faults.append(&mut next.faults);
        self.doubts.append(&mut next.doubts);
    }
}

/// A piece of a file: whole records.
struct Piece {
    start: usize,
    end: usize,
    /// Line breaks before it.
    lines_before: u32,
    /// Line breaks within it: as many records at most, but for one without a line end.
    lines: u32,
}

/// How much of a file a thread takes at once: enough that handing it out costs nothing, and little
/// enough that what is read from it stays in the processor's cache until it is put in its place.
const PIECE: usize = 256 * 1024;

/// Cuts the rows of a file into pieces for the threads. Where a quotation mark occurs, a line break
/// may lie within a cell, and the file is one piece.
fn pieces(bytes: &[u8], header: &Header) -> Vec<Piece> {
    let mut start = header.end;
    let mut lines_before = header.lines;
    let rest = bytes.get(start..).unwrap_or_default();
    let wanted = if memchr::memchr(b'"', rest).is_some() { rest.len() } else { PIECE };
    let mut pieces = Vec::with_capacity(rest.len() / wanted.max(1) + 1);
    while start < bytes.len() {
        let cut = (start + wanted).min(bytes.len());
        let after = bytes.get(cut..).unwrap_or_default();
        let end = memchr::memchr(b'\n', after).map_or(bytes.len(), |n| cut + n + 1);
        let piece = bytes.get(start..end).unwrap_or_default();
        let breaks = memchr::memchr_iter(b'\n', piece).count();
        let lines = u32::try_from(breaks).unwrap_or(u32::MAX);
        pieces.push(Piece { start, end, lines_before, lines });
        lines_before = lines_before.saturating_add(lines);
        start = end;
    }
    pieces
}

/// Reads the rows of a file; `file` is its place in the catalog.
pub(super) fn read_rows<T: Figures>(source: &Source<'_>, file: u16) -> Rows<T> {
    let bytes = source.text;
    let pieces = pieces(bytes, source.header);
    let lines = pieces.iter().map(|p| p.lines as usize).sum::<usize>();
    let mut all = Rows::new();
    // Room for every row from the beginning: moving them would cost more than reading them.
    let most = room_for::<T>(lines + 1, bytes.len());
    all.rows.reserve_exact(most);
    all.names.reserve_exact(most);
    // One piece for each thread at a time: the first goes straight to its place, the others by way of
    // buffers. The same buffers serve all along, for fresh memory is dearer than the copy out of them.
    let at_once = rayon::current_num_threads();
    let mut buffers: Vec<Rows<T>> =
        std::iter::repeat_with(Rows::new).take(at_once.saturating_sub(1)).collect();
    for batch in pieces.chunks(at_once.max(1)) {
        let Some((first, others)) = batch.split_first() else { continue };
        rayon::join(
            || read_piece(source, file, first, &mut all),
            || {
                buffers
                    .par_iter_mut()
                    .zip(others)
                    .for_each(|(buffer, piece)| read_piece(source, file, piece, buffer));
            },
        );
        for buffer in &mut buffers {
            all.append(buffer);
        }
    }
    all
}

/// Rows to make room for in a text of so many lines. Lines too short to hold a part's needed cells
/// count for nothing, so that a file of line breaks doesn't fill the memory.
fn room_for<T: Figures>(lines: usize, bytes: usize) -> usize {
    lines.min(bytes / T::KIND.columns().len())
}

fn read_piece<T: Figures>(source: &Source<'_>, file: u16, piece: &Piece, rows: &mut Rows<T>) {
    let text = source.text.get(piece.start..piece.end).unwrap_or_default();
    // Checked once for all cells; the separators are ASCII, so each cell is then valid as well.
    let is_utf8 = std::str::from_utf8(text).is_ok();
    rows.has_foreign_bytes |= !is_utf8;
    let mut reader = reader(text, source.header);
    let mut record = ByteRecord::new();
    let mut noted = Noted::default();
    // An error of the reader can only be one of reading, which memory does not give.
    while reader.read_byte_record(&mut record).unwrap_or(false) {
        let (skipped, line) = begin_of_record(text, &record);
        let place = RowPlace {
            source: *source,
            start: piece.start + skipped,
            line: piece.lines_before.saturating_add(line),
        };
        if !is_utf8 {
            let invalid = record
                .iter()
                .enumerate()
                .filter(|(_, cell)| std::str::from_utf8(cell).is_err())
                .map(|(field, _)| Fault {
                    column: None,
                    within: None,
                    what: What::NotUtf8InField { field },
                });
            noted.faults.extend(invalid);
        }
        read_row(&record, file, &place, &mut noted, rows);
        if !noted.doubts.is_empty() {
            tell_doubts(&place, &noted, rows);
        }
        noted.clear();
    }
}

/// Reads one record into what it turns out to be.
fn read_row<T: Figures>(
    record: &ByteRecord,
    file: u16,
    place: &RowPlace<'_>,
    noted: &mut Noted,
    rows: &mut Rows<T>,
) {
    let line = place.line;
    let header = place.source.header;
    if record.len() != header.names.len() {
        if is_blank(record) {
            return;
        }
        // Which cell belongs to which column is anybody's guess, so only this is told.
        let what = What::Ragged { cells: record.len(), header: header.names.len() };
        noted.faults.push(Fault { column: None, within: None, what });
        return tell_faults(place, noted, rows);
    }
    let mut cells = Cells::new(place.columns(), header, record, noted);
    let part = cells.text(at::part);
    let maker = cells.text(at::maker);
    if cells.raw(at::part).is_empty() {
        if is_blank(record) {
            return;
        }
        cells.fault_row(at::part, What::NoPart);
    } else {
        rows.names.push(name_hash(part, maker));
    }
    if let Some(polarity) = T::left_out(&cells) {
        if !noted.faults.is_empty() {
            return tell_faults(place, noted, rows);
        }
        let polarity = CompactString::from_utf8_lossy(polarity);
        rows.left_out.push(LeftOut {
            file,
            line,
            part: part.into(),
            maker: maker.into(),
            polarity,
        });
        return;
    }
    let price = cells.price(at::cost);
    let stock = cells.optional(at::stock);
    let lead_weeks = cells.optional(at::lead_weeks);
    let status =
        cells.word(at::status).and_then(|n| Status::ALL.get(n).copied()).unwrap_or(Status::Unknown);
    let package = cells.text(at::package);
    let pinout = cells.text(at::pinout);
    let figures = T::read(&mut cells);
    if !noted.faults.is_empty() {
        return tell_faults(place, noted, rows);
    }
    let (part, maker) = (CompactString::new(part), CompactString::new(maker));
    let stated = |text: &str| (!text.is_empty()).then(|| CompactString::new(text));
    let package = stated(package);
    match (figures, price) {
        (Some(figures), Some(price)) if noted.lacks.is_empty() => {
            rows.rows.push(Row {
                file,
                line,
                part,
                maker,
                price,
                stock,
                lead_weeks,
                status,
                package,
                pinout: stated(pinout),
                figures,
            });
        }
        (_, price) => {
            rows.unproven.push(Unproven {
                file,
                line,
                part,
                maker,
                status,
                stock,
                price,
                lead_weeks,
                package,
                lacks: noted.lacks.clone(),
            });
        }
    }
}

/// Turns what is wrong with a row into notices. A cell that is not UTF-8 is told once.
#[cold]
fn tell_faults<T>(place: &RowPlace<'_>, noted: &Noted, rows: &mut Rows<T>) {
    rows.broken += 1;
    let told_by_field = |fault: &Fault| {
        let field = fault.column.and_then(|at| place.source.header.fields.get(at));
        matches!(fault.what, What::NotUtf8)
            && noted.faults.iter().any(|other| {
                matches!(other.what, What::NotUtf8InField { field: f } if field == Some(&(f as u32)))
            })
    };
    for fault in noted.faults.iter().filter(|f| !told_by_field(f)) {
        rows.faults.tell(|| place.notice(fault));
    }
}

/// Turns what a spreadsheet has probably done to a row into warnings.
#[cold]
fn tell_doubts<T>(place: &RowPlace<'_>, noted: &Noted, rows: &mut Rows<T>) {
    for doubt in &noted.doubts {
        rows.doubts.tell(|| Notice { severity: Severity::Warning, ..place.notice(doubt) });
    }
}

/// No cell holds anything: spreadsheets write rows that were cleared as separators alone.
#[cold]
fn is_blank(record: &ByteRecord) -> bool {
    record.iter().all(|cell| trimmed(cell).is_empty())
}
