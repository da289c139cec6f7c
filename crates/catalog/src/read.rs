//! Reading a folder of catalogs.
//!
//! The six files are read side by side, and a large file in pieces. What comes out does not depend
//! on how many threads there are: pieces are put together in the order of the file.
//!
//! The codes of the notices, for scripts:
//!
//! | code | what it says |
//! |---|---|
//! | `file-missing`, `file-unreadable`, `file-empty`, `file-encoding` | the file as a whole |
//! | `column-duplicate` | two columns have the same name |
//! | `column-missing`, `column-near-miss` | warnings: a needed column is not there, or a name is nearly one |
//! | `row-without-part`, `row-duplicate`, `row-ragged` | which part it is, and which cell is which |
//! | `row-without-value`, `row-too-wide`, `row-power-rating` | cells that can't be true together |
//! | `cell-notation`, `cell-unit`, `cell-not-utf8` | the cell is no figure, or one in another unit |
//! | `cell-out-of-range`, `cell-word` | a figure, or a word, that the column doesn't take |
//! | `cell-list`, `cell-points`, `cell-price` | a list, and the item in it that is wrong |
//! | `notices-cut`, `rows-skipped` | how many more there are; how many rows were left out |
//! | `value-implausible`, `column-gaps` | warnings of [`crate::plausible`] |

mod inline;

pub use inline::{InlineFault, read_inline};

use crate::cells::{Cells, Noted};
use crate::duplicates::{name_hash, refuse_duplicates};
use crate::fault::{Fault, RowPlace, What};
use crate::header::{self, Header};
use crate::kind::Kind;
use crate::shop::{Catalog, FileRead, LeftOut, Row, Shop, Unproven};
use crate::status::Status;
use crate::tables::Figures;
use crate::tables::common::at;
use compact_str::CompactString;
use csv::ByteRecord;
use notice::{Notice, Place, Severity};
use rayon::prelude::*;
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
/// A missing file is an error, but for `pots.csv` and `heatsinks.csv` where they are not needed.
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

/// Reads the file of one kind.
fn read_catalog<T: Figures>(folder: &Path, options: &ReadOptions) -> (Catalog<T>, Vec<Notice>) {
    let kind = T::KIND;
    let mut notices = Vec::new();
    let mut catalog = Catalog::empty(kind);
    let may_be_missing = match kind {
        Kind::Pots => !options.needs_pots,
        Kind::Heatsinks => !options.needs_heatsinks,
        _ => false,
    };
    match std::fs::read(folder.join(kind.file_name())) {
        Ok(bytes) => read_bytes(bytes, options, &mut catalog, &mut notices),
        Err(error) if error.kind() == std::io::ErrorKind::NotFound && may_be_missing => {}
        Err(error) => notices.push(unreadable(kind, folder, &error)),
    }
    (catalog, notices)
}

fn unreadable(kind: Kind, folder: &Path, error: &std::io::Error) -> Notice {
    let place = Place::file(kind.file_name());
    let folder = folder.display();
    if error.kind() == std::io::ErrorKind::NotFound {
        Notice::error("file-missing", place, format!("the file is missing in {folder}"))
            .expected(format!("a catalog {}", kind.file_name()))
    } else {
        Notice::error(
            "file-unreadable",
            place,
            format!("the file in {folder} can't be read: {error}"),
        )
    }
}

fn read_bytes<T: Figures>(
    bytes: Vec<u8>,
    options: &ReadOptions,
    catalog: &mut Catalog<T>,
    notices: &mut Vec<Notice>,
) {
    let kind = T::KIND;
    let Some(header) = header::read(kind, &bytes, &options.renamed, notices) else {
        return;
    };
    let rows = read_rows::<T>(&bytes, &header);
    let mut row_notices = rows.notices;
    let mut more = rows.more_notices;
    catalog.rows = rows.rows;
    catalog.unproven = rows.unproven;
    catalog.left_out = rows.left_out;
    catalog.broken = rows.broken;
    refuse_duplicates(rows.names, &bytes, &header, catalog, &mut row_notices, &mut more);
    if options.skip_broken_rows {
        for notice in &mut row_notices {
            notice.severity = Severity::Warning;
        }
    }
    if more > 0 {
        let message = format!("and {more} more of the kind in this file");
        let place = Place::file(kind.file_name());
        let mut notice = Notice::error("notices-cut", place, message);
        if options.skip_broken_rows {
            notice.severity = Severity::Warning;
        }
        row_notices.push(notice);
    }
    notices.append(&mut row_notices);
    if options.skip_broken_rows && catalog.broken > 0 {
        let message = match catalog.broken {
            1 => "1 row is left out because something in it is wrong".to_owned(),
            n => format!("{n} rows are left out because something in them is wrong"),
        };
        notices.push(Notice::warning("rows-skipped", Place::file(kind.file_name()), message));
    }
    catalog.files.push(FileRead { name: kind.file_name().to_owned(), bytes, header });
}

/// What is read from a piece of a file, or from all of it.
struct Rows<T> {
    rows: Vec<Row<T>>,
    unproven: Vec<Unproven>,
    left_out: Vec<LeftOut>,
    /// The hash of maker and part of every row that names a part, whatever else is wrong with it.
    names: Vec<u64>,
    broken: usize,
    /// At most [`MOST_NOTICES`], in the order of the file.
    notices: Vec<Notice>,
    more_notices: usize,
}

impl<T> Rows<T> {
    fn new() -> Self {
        Self {
            rows: Vec::new(),
            unproven: Vec::new(),
            left_out: Vec::new(),
            names: Vec::new(),
            broken: 0,
            notices: Vec::new(),
            more_notices: 0,
        }
    }

    /// Takes everything out of `next`, which keeps its room.
    fn append(&mut self, next: &mut Rows<T>) {
        self.rows.append(&mut next.rows);
        self.unproven.append(&mut next.unproven);
        self.left_out.append(&mut next.left_out);
        self.names.append(&mut next.names);
        self.broken += std::mem::take(&mut next.broken);
        self.more_notices += std::mem::take(&mut next.more_notices);
        for notice in next.notices.drain(..) {
            self.tell(|| notice);
        }
    }

    /// Keeps a notice, or only counts it where there are too many.
    fn tell(&mut self, notice: impl FnOnce() -> Notice) {
        if self.notices.len() < MOST_NOTICES {
            self.notices.push(notice());
        } else {
            self.more_notices += 1;
        }
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

fn read_rows<T: Figures>(bytes: &[u8], header: &Header) -> Rows<T> {
    let pieces = pieces(bytes, header);
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
            || read_piece(bytes, header, first, &mut all),
            || {
                buffers
                    .par_iter_mut()
                    .zip(others)
                    .for_each(|(buffer, piece)| read_piece(bytes, header, piece, buffer));
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

fn read_piece<T: Figures>(bytes: &[u8], header: &Header, piece: &Piece, rows: &mut Rows<T>) {
    let text = bytes.get(piece.start..piece.end).unwrap_or_default();
    // Checked once for all cells; the separators are ASCII, so each cell is then valid as well.
    let is_utf8 = std::str::from_utf8(text).is_ok();
    let mut reader = reader(text, header);
    let mut record = ByteRecord::new();
    let mut noted = Noted::default();
    // An error of the reader can only be one of reading, which memory does not give.
    while reader.read_byte_record(&mut record).unwrap_or(false) {
        let (skipped, line) = begin_of_record(text, &record);
        let place = RowPlace {
            file: T::KIND.file_name(),
            bytes,
            start: piece.start + skipped,
            line: piece.lines_before.saturating_add(line),
            separator: header.separator,
            columns: T::KIND.columns(),
            fields: &header.fields,
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
        read_row(&record, header, &place, &mut noted, rows);
        noted.faults.clear();
        noted.lacks.clear();
    }
}

/// Where a record begins within the text, and its line within it.
///
/// The reader's position is that behind the record before, which can leave the end of that line and
/// blank lines in between.
fn begin_of_record(text: &[u8], record: &ByteRecord) -> (usize, u32) {
    let (mut at, mut line) = record.position().map_or((0, 1), |p| (p.byte() as usize, p.line()));
    while let Some(byte @ (b'\n' | b'\r')) = text.get(at) {
        line += u64::from(*byte == b'\n');
        at += 1;
    }
    (at, u32::try_from(line).unwrap_or(u32::MAX))
}

/// Reads one record into what it turns out to be.
fn read_row<T: Figures>(
    record: &ByteRecord,
    header: &Header,
    place: &RowPlace<'_>,
    noted: &mut Noted,
    rows: &mut Rows<T>,
) {
    let line = place.line;
    if record.len() != header.names.len() {
        // Which cell belongs to which column is anybody's guess, so only this is told.
        let what = What::Ragged { cells: record.len(), header: header.names.len() };
        noted.faults.push(Fault { column: None, within: None, what });
        return tell_faults(place, noted, rows);
    }
    let mut cells = Cells::new(place.columns, place.fields, record, noted);
    let part = cells.text(at::part);
    let maker = cells.text(at::maker);
    if cells.raw(at::part).is_empty() {
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
            file: 0,
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
                file: 0,
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
                file: 0,
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
        let field = fault.column.and_then(|at| place.fields.get(at));
        matches!(fault.what, What::NotUtf8)
            && noted.faults.iter().any(|other| {
                matches!(other.what, What::NotUtf8InField { field: f } if field == Some(&(f as u32)))
            })
    };
    for fault in noted.faults.iter().filter(|f| !told_by_field(f)) {
        rows.tell(|| place.notice(fault));
    }
}

/// Calls `row` with line, beginning and cells of every record behind the header.
pub(crate) fn for_each_record(
    bytes: &[u8],
    header: &Header,
    mut row: impl FnMut(u32, usize, &ByteRecord),
) {
    let text = bytes.get(header.end..).unwrap_or_default();
    let mut reader = reader(text, header);
    let mut record = ByteRecord::new();
    while reader.read_byte_record(&mut record).unwrap_or(false) {
        let (start, line) = begin_of_record(text, &record);
        row(header.lines.saturating_add(line), header.end + start, &record);
    }
}

/// The reader of the rows in a text.
fn reader<'t>(text: &'t [u8], header: &Header) -> csv::Reader<&'t [u8]> {
    csv::ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .delimiter(header.separator)
        .buffer_capacity(BUFFER)
        .from_reader(text)
}

/// Bytes that the reader copies at a time: they stay in the nearest cache until they are parsed.
const BUFFER: usize = 16 * 1024;
