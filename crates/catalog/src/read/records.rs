//! The records of a text, one after another, with their places.

use crate::header::Header;
use csv::ByteRecord;
use std::ops::ControlFlow;

/// Where a record begins within the text, and its line within it.
///
/// The reader's position is that behind the record before, which can leave the end of that line and
/// blank lines in between.
pub(super) fn begin_of_record(text: &[u8], record: &ByteRecord) -> (usize, u32) {
    let (mut at, mut line) = record.position().map_or((0, 1), |p| (p.byte() as usize, p.line()));
    while let Some(byte @ (b'\n' | b'\r')) = text.get(at) {
        line += u64::from(*byte == b'\n');
        at += 1;
    }
    (at, u32::try_from(line).unwrap_or(u32::MAX))
}

/// Calls `row` with line, beginning and cells of every record behind the header.
pub(crate) fn for_each_record(
    text: &[u8],
    header: &Header,
    mut row: impl FnMut(u32, usize, &ByteRecord),
) {
    let _: ControlFlow<()> = try_for_each_record(text, header, |line, start, record| {
        row(line, start, record);
        ControlFlow::Continue(())
    });
}

/// The same until `row` breaks off.
pub(crate) fn try_for_each_record<B>(
    text: &[u8],
    header: &Header,
    mut row: impl FnMut(u32, usize, &ByteRecord) -> ControlFlow<B>,
) -> ControlFlow<B> {
    let rows = text.get(header.end..).unwrap_or_default();
    let mut reader = reader(rows, header);
    let mut record = ByteRecord::new();
    while reader.read_byte_record(&mut record).unwrap_or(false) {
        let (start, line) = begin_of_record(rows, &record);
        row(header.lines.saturating_add(line), header.end + start, &record)?;
    }
    ControlFlow::Continue(())
}

/// The reader of the rows in a text.
pub(super) fn reader<'t>(text: &'t [u8], header: &Header) -> csv::Reader<&'t [u8]> {
    csv::ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .delimiter(header.separator)
        .buffer_capacity(BUFFER)
        .from_reader(text)
}

/// Bytes that the reader copies at a time: they stay in the nearest cache until they are parsed.
const BUFFER: usize = 16 * 1024;
