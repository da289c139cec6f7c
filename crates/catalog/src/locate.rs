//! Where a cell stands in its file: only asked for when something has to be said about it.

use notice::Excerpt;
use std::ops::Range;

/// Characters of a faulty cell that are quoted.
const LONGEST_FOUND: usize = 60;
/// Bytes of the line that are shown on either side of the marked part.
const CONTEXT: usize = 50;

/// A cell, or a row as a whole, within its file.
pub(crate) struct Spot {
    /// Column in characters within the physical line, from 1; 0: the row as a whole.
    pub(crate) column: u32,
    /// A cell was found, not only its row.
    pub(crate) is_cell: bool,
    /// The text at fault, cut where it is long.
    pub(crate) found: String,
    /// Its line, with the text at fault marked.
    pub(crate) excerpt: Excerpt,
    /// The record goes on over several lines.
    pub(crate) spans_lines: bool,
    /// The bytes of the text at fault, cut where it is long.
    bytes: Vec<u8>,
}

impl Spot {
    /// The text as it would read in Latin-1, where it then holds a sign of micro or degree.
    pub(crate) fn as_latin_1(&self) -> Option<String> {
        let is_sign = |b: &u8| matches!(b, 0xB5 | 0xB0);
        self.bytes.iter().any(is_sign).then(|| self.bytes.iter().map(|b| char::from(*b)).collect())
    }
}

/// The place of a field of the record that begins at `start`, or of `within` its trimmed text.
pub(crate) fn spot(
    bytes: &[u8],
    start: usize,
    separator: u8,
    field: Option<usize>,
    within: Option<(usize, usize)>,
) -> Spot {
    let (cell, end_of_record) = cell_range(bytes, start, separator, field);
    let is_cell = cell.is_some();
    let marked = match cell {
        Some(cell) => part_of(bytes, cell, within),
        None => start..end_of_line(bytes, start),
    };
    let record = bytes.get(start..end_of_record).unwrap_or_default();
    let line_begins = begin_of_line(bytes, marked.start);
    // Where a quoted cell above holds a line break, the column belongs to another line than the
    // record's, so none is given.
    let on_first_line = line_begins <= start;
    let column = if is_cell && on_first_line {
        characters(bytes.get(line_begins..marked.start).unwrap_or_default()).saturating_add(1)
    } else {
        0
    };
    let text = bytes.get(marked.clone()).unwrap_or_default();
    Spot {
        column: u32::try_from(column).unwrap_or(u32::MAX),
        is_cell,
        found: readable(text, LONGEST_FOUND),
        excerpt: excerpt(bytes, line_begins, marked),
        spans_lines: record.trim_ascii_end().contains(&b'\n'),
        bytes: text.get(..LONGEST_FOUND.min(text.len())).unwrap_or_default().to_vec(),
    }
}

/// A character of a text with its line.
pub(crate) struct CharacterSpot {
    /// Its line, from 1.
    pub(crate) line: u32,
    /// Its place in that line in characters, from 1.
    pub(crate) column: u32,
    pub(crate) found: String,
    pub(crate) excerpt: Excerpt,
}

/// The character of a text in UTF-8 that begins at a byte.
pub(crate) fn character(text: &[u8], at: usize) -> CharacterSpot {
    let line_begins = begin_of_line(text, at);
    let before = text.get(..at).unwrap_or_default();
    let in_line = text.get(line_begins..at).unwrap_or_default();
    let rest = text.get(at..).unwrap_or_default();
    let more = rest.iter().skip(1).take_while(|b| **b & 0xC0 == 0x80).count();
    let end = at + (1 + more).min(rest.len());
    let number = |n: usize| u32::try_from(n).unwrap_or(u32::MAX);
    CharacterSpot {
        line: number(memchr::memchr_iter(b'\n', before).count() + 1),
        column: number(characters(in_line) + 1),
        found: readable(text.get(at..end).unwrap_or_default(), LONGEST_FOUND),
        excerpt: excerpt(text, line_begins, at..end),
    }
}

/// The raw bytes of a field with its quotation marks, and the end of the record.
fn cell_range(
    bytes: &[u8],
    start: usize,
    separator: u8,
    wanted: Option<usize>,
) -> (Option<Range<usize>>, usize) {
    let mut parser = csv_core::ReaderBuilder::new().delimiter(separator).build();
    let mut scratch = [0; 1024];
    let mut at = start;
    let mut field = 0;
    let mut field_begins = start;
    let mut found = None;
    loop {
        let input = bytes.get(at..).unwrap_or_default();
        let (result, read, _) = parser.read_field(input, &mut scratch);
        at += read;
        match result {
            csv_core::ReadFieldResult::Field { record_end } => {
                if wanted == Some(field) {
                    let raw = bytes.get(field_begins..at).unwrap_or_default();
                    let ends_with_mark = matches!(raw.last(), Some(b'\n' | b'\r'))
                        || (!record_end && raw.last() == Some(&separator));
                    found = Some(field_begins..at - usize::from(ends_with_mark));
                }
                if record_end {
                    return (found, at);
                }
                field += 1;
                field_begins = at;
            }
            csv_core::ReadFieldResult::End => return (found, at),
            csv_core::ReadFieldResult::OutputFull => {}
            // The parser is told the end of the file by an empty input, which comes next.
            csv_core::ReadFieldResult::InputEmpty => {}
        }
    }
}

/// The part of a raw cell that `within` its trimmed text stands for. Doubled quotation marks before
/// it shift the mark by as many bytes, which is near enough.
fn part_of(bytes: &[u8], cell: Range<usize>, within: Option<(usize, usize)>) -> Range<usize> {
    let Range { mut start, mut end } = cell;
    let raw = |start: usize, end: usize| bytes.get(start..end).unwrap_or_default();
    if raw(start, end).first() == Some(&b'"') {
        start += 1;
        if raw(start, end).last() == Some(&b'"') {
            end -= 1;
        }
    }
    let text = raw(start, end);
    let trimmed = crate::cells::trimmed(text);
    // `trimmed` is a part of `text`: white space is cut at the front first.
    let blank = text.len() - text.trim_ascii_start().len();
    let front = match std::str::from_utf8(text) {
        Ok(t) => t.len() - t.trim_start().len(),
        Err(_) => blank,
    };
    if trimmed.is_empty() {
        return start..end;
    }
    let begin = start + front;
    let last = begin + trimmed.len();
    match within {
        Some((from, to)) => (begin + from).min(last)..(begin + to).min(last),
        None => begin..last,
    }
}

fn begin_of_line(bytes: &[u8], at: usize) -> usize {
    let before = bytes.get(..at).unwrap_or_default();
    memchr::memrchr(b'\n', before).map_or(bom_length(bytes), |n| n + 1)
}

fn end_of_line(bytes: &[u8], at: usize) -> usize {
    let rest = bytes.get(at..).unwrap_or_default();
    memchr::memchr2(b'\n', b'\r', rest).map_or(bytes.len(), |n| at + n)
}

/// The length of the byte order mark that some spreadsheets put before UTF-8.
pub(crate) fn bom_length(bytes: &[u8]) -> usize {
    if bytes.starts_with(b"\xef\xbb\xbf") { 3 } else { 0 }
}

/// Characters of a text that may not be valid UTF-8: all bytes but those that go on with one.
fn characters(text: &[u8]) -> usize {
    text.iter().filter(|b| **b & 0xC0 != 0x80).count()
}

/// Text for people: at most so many characters, and none that moves the cursor.
fn readable(text: &[u8], longest: usize) -> String {
    let bytes = text.get(..text.len().min(4 * longest)).unwrap_or_default();
    let text = String::from_utf8_lossy(bytes);
    let shown = |c: char| if c.is_control() { ' ' } else { c };
    let mut cut: String = text.chars().take(longest).map(shown).collect();
    if bytes.len() > cut.len() && text.chars().count() > longest {
        cut.push('…');
    }
    cut
}

fn excerpt(bytes: &[u8], line_begins: usize, marked: Range<usize>) -> Excerpt {
    let end = end_of_line(bytes, marked.start).max(marked.start);
    let marked_end = marked.end.min(end);
    let is_cut = marked.start - line_begins.min(marked.start) > CONTEXT;
    let mut from = if is_cut { marked.start - CONTEXT } else { line_begins.min(marked.start) };
    // Begin on a character.
    while from < marked.start && bytes.get(from).is_some_and(|b| b & 0xC0 == 0x80) {
        from += 1;
    }
    let mut text = if is_cut { "…".to_owned() } else { String::new() };
    text += &readable(bytes.get(from..marked.start).unwrap_or_default(), CONTEXT);
    let start = text.len();
    text += &readable(bytes.get(marked.start..marked_end).unwrap_or_default(), LONGEST_FOUND);
    let end_of_mark = text.len();
    text += &readable(bytes.get(marked_end..end).unwrap_or_default(), CONTEXT);
    Excerpt { text, start, end: end_of_mark }
}

/// The texts of the record that starts on a physical line, trimmed; empty where there is none.
pub(crate) fn record_texts(bytes: &[u8], line: u32, separator: u8) -> Vec<String> {
    let begin = match line {
        0 => return Vec::new(),
        1 => bom_length(bytes),
        _ => match memchr::memchr_iter(b'\n', bytes).nth(line as usize - 2) {
            Some(newline) => newline + 1,
            None => return Vec::new(),
        },
    };
    let mut record = csv::ByteRecord::new();
    let read = csv::ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .delimiter(separator)
        .from_reader(bytes.get(begin..).unwrap_or_default())
        .read_byte_record(&mut record);
    match read {
        Ok(true) => record.iter().map(|c| String::from_utf8_lossy(c).trim().to_owned()).collect(),
        _ => Vec::new(),
    }
}
