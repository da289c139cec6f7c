//! Which mark a file puts before its decimals.
//!
//! A comma is read as one only where that is no guess: in a file whose cells are parted by `;` or
//! tabs, and in which no figure has a decimal point. Even there a lone group of three digits behind a
//! comma, `4,700`, may as well mean thousands, and is refused.

use crate::cells::{ABSENT, ITEM, SIDE, trimmed};
use crate::read::records::try_for_each_record;
use crate::source::Source;
use quantity::spreadsheet;
use std::ops::ControlFlow;

/// The mark before decimals in a file.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub(crate) enum DecimalMark {
    /// A point; cells are parted by commas.
    #[default]
    Point,
    /// A point, for the figure on this line has one, though commas do not part cells.
    PointSeen {
        /// Its line.
        line: u32,
        /// The figure.
        figure: String,
    },
    /// A comma, for no figure has a point.
    Comma,
}

/// Finds out by which mark a file goes.
pub(crate) fn of_file(source: &Source<'_>) -> DecimalMark {
    let rows = source.text.get(source.header.end..).unwrap_or_default();
    let has_commas = memchr::memchr(b',', rows).is_some();
    if !matches!(source.header.separator, b';' | b'\t') || !has_commas {
        return DecimalMark::Point;
    }
    let figures: Vec<usize> = source
        .kind
        .columns()
        .iter()
        .zip(&source.header.fields)
        .filter(|(column, field)| column.cell.holds_figures() && **field != ABSENT)
        .map(|(_, field)| *field as usize)
        .collect();
    let seen = try_for_each_record(source.text, source.header, |line, _, record| {
        for field in &figures {
            let cell = record.get(*field).map(trimmed).unwrap_or_default();
            if let Some(item) = items(cell).find(|item| has_point(item)) {
                let figure = String::from_utf8_lossy(item).trim().chars().take(20).collect();
                return ControlFlow::Break(DecimalMark::PointSeen { line, figure });
            }
        }
        ControlFlow::Continue(())
    });
    match seen {
        ControlFlow::Break(mark) => mark,
        ControlFlow::Continue(()) => DecimalMark::Comma,
    }
}

fn items(cell: &[u8]) -> impl Iterator<Item = &[u8]> {
    cell.split(|b| matches!(*b, ITEM | SIDE))
}

/// A figure has a decimal point: just one, beside a digit. Dates have more, or stand apart.
fn has_point(item: &[u8]) -> bool {
    let item = item.trim_ascii();
    let mut points = memchr::memchr_iter(b'.', item);
    let (Some(at), None) = (points.next(), points.next()) else { return false };
    let is_digit = |byte: Option<&u8>| byte.is_some_and(u8::is_ascii_digit);
    let behind = item.get(at + 1);
    let before = at.checked_sub(1).and_then(|at| item.get(at));
    let is_decimal = is_digit(behind) || (behind.is_none() && is_digit(before));
    is_decimal && !spreadsheet::is_day_and_month(item)
}

/// The figure with a point in place of its comma.
pub(crate) fn with_point(text: &[u8]) -> Vec<u8> {
    text.iter().map(|b| if *b == b',' { b'.' } else { *b }).collect()
}

/// A figure whose comma may as well part thousands: `4,700`, but not `0,470`, for nobody begins
/// thousands with a nought.
pub(crate) fn may_part_thousands(text: &[u8]) -> bool {
    let text = text.trim_ascii();
    let text = text.strip_prefix(b"-").or_else(|| text.strip_prefix(b"+")).unwrap_or(text);
    let Some(at) = memchr::memchr(b',', text) else { return false };
    let (before, behind) = text.split_at(at);
    let group = behind.get(1..).unwrap_or_default();
    let digits = group.iter().take_while(|b| b.is_ascii_digit()).count();
    (1..=3).contains(&before.len())
        && before.iter().all(u8::is_ascii_digit)
        && before.first() != Some(&b'0')
        && digits == 3
        && group.get(3) != Some(&b',')
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_group_of_three_may_be_thousands() {
        for text in ["4,700", "1,000 V", "12,345k", "-100,000"] {
            assert!(may_part_thousands(text.as_bytes()), "{text}");
        }
        for text in ["4,7", "4,70", "4,7000", "0,470", "1000,000", ",500", "1,000,000", "x,000"] {
            assert!(!may_part_thousands(text.as_bytes()), "{text}");
        }
    }

    #[test]
    fn a_point_is_one_of_a_figure_and_not_of_a_date() {
        for text in ["5.1", ".5", "5.", "1.5 mA", "1.000,5"] {
            assert!(has_point(text.as_bytes()), "{text}");
        }
        for text in ["5,1", "01.05.2024", "1. Mai", "01.05", "01.05.", "."] {
            assert!(!has_point(text.as_bytes()), "{text}");
        }
    }
}
