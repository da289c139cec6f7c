//! The header row: which separator, which column is which, and what is odd about the names.

use crate::cells::ABSENT;
use crate::column::{Column, Need};
use crate::decimal::DecimalMark;
use crate::kind::Kind;
use crate::{locate, near};
use csv::ByteRecord;
use notice::{Notice, Place};
use std::collections::{HashMap, HashSet};

/// Beyond this many columns no further unknown one is compared with the known names.
const MOST_COMPARED: usize = 1000;

/// At most so many names are told one by one to be at fault.
const MOST_TOLD: usize = 20;

/// A header row, read.
#[derive(Debug, Clone, Default)]
pub(crate) struct Header {
    /// The names, trimmed, renamed ones by their new name.
    pub(crate) names: Vec<String>,
    /// The names in the file of those that were renamed.
    pub(crate) renamed: Vec<String>,
    /// Between cells.
    pub(crate) separator: u8,
    /// Before decimals; found out when the header is known.
    pub(crate) decimal: DecimalMark,
    /// For each declared column the field it is found in, or [`ABSENT`].
    pub(crate) fields: Vec<u32>,
    /// Where the rows begin.
    pub(crate) end: usize,
    /// Line breaks before the rows.
    pub(crate) lines: u32,
}

/// Why a file has no header row with which rows could be understood; notices have told it.
#[derive(Debug)]
pub(crate) struct NoHeader {
    /// A name is not UTF-8: another encoding may help.
    pub(crate) has_foreign_bytes: bool,
}

/// Reads the header of a file.
pub(crate) fn read(
    kind: Kind,
    file: &str,
    bytes: &[u8],
    renamed: &[(String, String)],
    notices: &mut Vec<Notice>,
) -> Result<Header, NoHeader> {
    let mut begin = locate::bom_length(bytes);
    let mut text = bytes.get(begin..).unwrap_or_default();
    let mut separator = separator_of(text);
    if let Some((told, length)) = told_separator(text) {
        separator = told;
        begin += length;
        text = bytes.get(begin..).unwrap_or_default();
    }
    let mut record = ByteRecord::new();
    let mut reader = csv::ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .delimiter(separator)
        .from_reader(text);
    if !reader.read_byte_record(&mut record).unwrap_or(false) {
        let notice = Notice::error("file-empty", Place::file(file), "the file holds no header row")
            .expected("the names of the columns in the first line");
        notices.push(notice);
        return Err(NoHeader { has_foreign_bytes: false });
    }
    let has_foreign_bytes = record.iter().any(|cell| std::str::from_utf8(cell).is_err());
    let end = begin + usize::try_from(reader.position().byte()).unwrap_or(text.len());
    let head = bytes.get(..end).unwrap_or_default();
    let start = begin + text.iter().take_while(|b| matches!(b, b'\n' | b'\r')).count();
    let mut header = Header {
        names: Vec::with_capacity(record.len()),
        renamed: Vec::new(),
        separator,
        decimal: DecimalMark::default(),
        fields: vec![ABSENT; kind.columns().len()],
        end,
        lines: u32::try_from(memchr::memchr_iter(b'\n', head).count()).unwrap_or(u32::MAX),
    };
    let line =
        1 + u32::try_from(bytes.iter().take(start).filter(|b| **b == b'\n').count()).unwrap_or(0);
    let place = HeaderPlace { kind, file, bytes, start, separator, line };
    if header.name_columns(&record, renamed, &place, notices).is_none() {
        return Err(NoHeader { has_foreign_bytes });
    }
    header.find_columns(kind);
    header.doubt_names(&place, notices);
    Ok(header)
}

/// The separator that a first line `sep=;` tells, as spreadsheets understand it, and that line's
/// length.
fn told_separator(text: &[u8]) -> Option<(u8, usize)> {
    let rest = text.strip_prefix(b"sep=").or_else(|| text.strip_prefix(b"SEP="))?;
    match rest {
        [separator @ (b',' | b';' | b'\t'), b'\r', b'\n', ..] => Some((*separator, 7)),
        [separator @ (b',' | b';' | b'\t'), b'\n', ..] => Some((*separator, 6)),
        _ => None,
    }
}

/// The separator that the header row holds most of, outside quotation marks; a comma where it holds
/// none.
fn separator_of(text: &[u8]) -> u8 {
    let mut counts = [(b',', 0usize), (b';', 0), (b'\t', 0)];
    let mut is_quoted = false;
    let line = text.iter().skip_while(|b| matches!(b, b'\n' | b'\r'));
    for byte in line.take_while(|b| **b != b'\n') {
        is_quoted ^= *byte == b'"';
        if let Some((_, count)) = counts.iter_mut().find(|(s, _)| s == byte && !is_quoted) {
            *count += 1;
        }
    }
    // The first of equal ones: a comma needs no majority.
    counts.iter().rev().max_by_key(|(_, count)| *count).map_or(b',', |(separator, _)| *separator)
}

/// The header row, for notices about it.
struct HeaderPlace<'f> {
    kind: Kind,
    file: &'f str,
    bytes: &'f [u8],
    start: usize,
    separator: u8,
    line: u32,
}

impl HeaderPlace<'_> {
    /// A notice about the name in a field.
    fn about(&self, field: usize, notice: fn(Place) -> Notice) -> Notice {
        let spot = locate::spot(self.bytes, self.start, self.separator, Some(field), None);
        let file = self.file.to_owned();
        notice(Place { file, line: self.line, column: spot.column })
            .found(spot.found)
            .excerpt(spot.excerpt)
    }
}

impl Header {
    /// Takes the names from the record. None where two columns bear the same.
    fn name_columns(
        &mut self,
        record: &ByteRecord,
        renamed: &[(String, String)],
        place: &HeaderPlace<'_>,
        notices: &mut Vec<Notice>,
    ) -> Option<()> {
        let mut seen: HashSet<String> = HashSet::with_capacity(record.len());
        let new_names: HashMap<&str, &str> =
            renamed.iter().map(|(file, page)| (file.trim(), page.trim())).collect();
        let mut sound = true;
        // A place is found by walking there, so what is wrong with a million names is not told of each.
        let mut told = 0..MOST_TOLD;
        let mut more = 0usize;
        for (field, cell) in record.iter().enumerate() {
            let Ok(text) = std::str::from_utf8(cell) else {
                sound = false;
                self.names.push(String::new());
                if told.next().is_none() {
                    more += 1;
                    continue;
                }
                notices.push(
                    place
                        .about(field, |p| {
                            Notice::error(
                                "cell-not-utf8",
                                p,
                                "the name of a column is not valid UTF-8",
                            )
                        })
                        .mend("save the file as UTF-8"),
                );
                continue;
            };
            let text = text.trim();
            let new_name = new_names.get(text).copied();
            if new_name.is_some() {
                self.renamed.push(text.to_owned());
            }
            let name = new_name.unwrap_or(text).to_owned();
            // Columns without a name, as a comma at the end of a line makes them, are no clash.
            let is_clash = !name.is_empty() && !seen.insert(name.clone());
            sound &= !is_clash;
            if is_clash && told.next().is_none() {
                more += 1;
            } else if is_clash {
                let expected = format!("`{}` once", brief(&name));
                notices.push(
                    place
                        .about(field, |p| {
                            Notice::error(
                                "column-duplicate",
                                p,
                                "another column has this name already",
                            )
                        })
                        .expected(expected)
                        .mend("rename or delete one of the two columns"),
                );
            }
            self.names.push(name);
        }
        if more > 0 {
            let message = format!("and {more} more names of columns are at fault");
            let at = Place::line(place.kind.file_name(), place.line);
            notices.push(Notice::error("notices-cut", at, message));
        }
        sound.then_some(())
    }

    /// Finds the declared columns among the names.
    fn find_columns(&mut self, kind: Kind) {
        let places: HashMap<&str, u32> =
            self.names.iter().zip(0u32..).map(|(name, field)| (name.as_str(), field)).collect();
        for (column, field) in kind.columns().iter().zip(self.fields.iter_mut()) {
            *field = places.get(column.name).copied().unwrap_or(ABSENT);
        }
    }

    /// Warns of names that are nearly those of columns, and of needed columns that are missing.
    fn doubt_names(&self, place: &HeaderPlace<'_>, notices: &mut Vec<Notice>) {
        let columns = place.kind.columns();
        let is_present = |name: &str| {
            columns.iter().zip(&self.fields).any(|(c, f)| c.name == name && *f != ABSENT)
        };
        let mut meant: Vec<&str> = Vec::new();
        let unknown = self
            .names
            .iter()
            .enumerate()
            .filter(|(_, name)| !columns.iter().any(|c| c.name == name.as_str()));
        for (field, name) in unknown.take(MOST_COMPARED) {
            let Some(near) = near::nearest(name, columns.iter().map(|c| c.name)) else { continue };
            // `iz_max_a` beside `iz_min_a` is a column of the shop's own.
            if is_present(near) && near::slips(name, near) > 1 {
                continue;
            }
            meant.push(near);
            notices.push(
                place
                    .about(field, |p| {
                        Notice::warning(
                            "column-near-miss",
                            p,
                            "this is nearly the name of a column, and is not read",
                        )
                    })
                    .expected(format!("`{near}`"))
                    .mend(format!("write `{near}`, or map the name in `[columns]` of shop.toml")),
            );
        }
        for (column, field) in columns.iter().zip(&self.fields) {
            let is_needed = matches!(column.need, Need::Always | Need::ToProve);
            if *field != ABSENT || !is_needed || meant.contains(&column.name) {
                continue;
            }
            notices.push(self.missing(column, place));
        }
    }

    /// The notice that a needed column is missing; without a part's name no row can be read at all.
    fn missing(&self, column: &Column, place: &HeaderPlace<'_>) -> Notice {
        let at = Place::line(place.file, place.line);
        let name = column.name;
        let consequence = match column.need {
            Need::Always => "no row can be read without it",
            _ => "every part is unproven without it",
        };
        Notice::warning("column-missing", at, format!("there is no column `{name}`: {consequence}"))
            .expected(format!("a column `{name}`: {}", column.cell))
            .mend("add it, or map the name that the file uses in `[columns]` of shop.toml")
    }
}

fn brief(name: &str) -> String {
    name.chars().take(40).collect()
}
