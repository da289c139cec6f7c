//! The cells of one row, read as their columns declare.
//!
//! This is the inner loop of reading: nothing is allocated for a cell that is sound, and what is wrong
//! is only noted, as small data that [`crate::fault`] puts into words afterwards.

use crate::column::{Axes, Cell, Column, Figure, Need, Range};
use crate::decimal::{self, DecimalMark};
use crate::fault::{Damage, Fault, MOST_TEXT, What};
use crate::header::Header;
use crate::price::Price;
use circuit::parts::OverCurrent;
use compact_str::CompactString;
use csv::ByteRecord;
use quantity::notation::{NotationError, Unit, parse_bytes, quick};
use quantity::points::{Points, PointsError};
use quantity::spreadsheet;

/// The field that a declared column is found in, where the header has none.
pub(crate) const ABSENT: u32 = u32::MAX;

/// Between the items of a list.
pub(crate) const ITEM: u8 = b';';
/// Between the two sides of a point or a price break.
pub(crate) const SIDE: u8 = b':';

/// What is noted while a row is read; kept from row to row, so that its room is.
#[derive(Default)]
pub(crate) struct Noted {
    /// What is wrong.
    pub(crate) faults: Vec<Fault>,
    /// What a spreadsheet has probably changed, though it can be read.
    pub(crate) doubts: Vec<Fault>,
    /// The needed columns that are blank.
    pub(crate) lacks: Vec<&'static str>,
    points: Vec<(f64, f64)>,
    breaks: Vec<(u64, f64)>,
}

impl Noted {
    /// Forgets the row.
    pub(crate) fn clear(&mut self) {
        self.faults.clear();
        self.doubts.clear();
        self.lacks.clear();
    }
}

/// The cells of one row.
pub(crate) struct Cells<'r, 'n> {
    /// The declared columns.
    columns: &'static [Column],
    /// For each of them the field it is found in.
    fields: &'r [u32],
    /// Figures have a decimal comma.
    has_commas: bool,
    record: &'r ByteRecord,
    noted: &'n mut Noted,
}

impl<'r, 'n> Cells<'r, 'n> {
    pub(crate) fn new(
        columns: &'static [Column],
        header: &'r Header,
        record: &'r ByteRecord,
        noted: &'n mut Noted,
    ) -> Self {
        let has_commas = header.decimal == DecimalMark::Comma;
        Self { columns, fields: &header.fields, has_commas, record, noted }
    }

    /// The trimmed bytes of a cell; empty where it is blank or the file has no such column.
    #[inline]
    pub(crate) fn raw(&self, at: usize) -> &'r [u8] {
        let field = self.fields.get(at).copied().unwrap_or(ABSENT);
        self.record.get(field as usize).map_or(&[], trimmed)
    }

    /// Notes that a needed cell is blank.
    pub(crate) fn lack(&mut self, at: usize) {
        if let Some(column) = self.columns.get(at) {
            self.noted.lacks.push(column.name);
        }
    }

    /// Notes a fault that lies in the row's cells together; shown at one of them.
    pub(crate) fn fault_row(&mut self, at: usize, what: What) {
        self.noted.faults.push(Fault { column: Some(at), within: None, what });
    }

    /// Notes a fault in the bytes from `start` to `end` of a trimmed cell.
    #[cold]
    fn fault(&mut self, at: usize, within: (usize, usize), what: What) {
        self.noted.faults.push(Fault { column: Some(at), within: Some(within), what });
    }

    #[cold]
    fn fault_cell(&mut self, at: usize, what: What) {
        self.noted.faults.push(Fault { column: Some(at), within: None, what });
    }

    #[cold]
    fn doubt(&mut self, at: usize, what: What) {
        self.noted.doubts.push(Fault { column: Some(at), within: None, what });
    }

    /// A text; empty where the cell is blank.
    #[inline]
    pub(crate) fn text(&mut self, at: usize) -> &'r str {
        let cell = self.raw(at);
        match std::str::from_utf8(cell) {
            Ok(text) if text.len() > MOST_TEXT => {
                self.fault_cell(at, What::TooLong { bytes: text.len() });
                ""
            }
            Ok(text) => {
                if may_be_damaged(cell)
                    && let Some(damage) = Damage::of(text)
                {
                    self.doubt(at, What::DamagedName(damage));
                }
                text
            }
            Err(_) => {
                self.fault_cell(at, What::NotUtf8);
                ""
            }
        }
    }

    /// A text that only has to be there.
    pub(crate) fn needs_text(&mut self, at: usize) {
        if self.raw(at).is_empty() {
            self.lack(at);
        }
    }

    /// A figure that proves the part. NaN where it is blank, which is noted, or wrong.
    #[inline]
    pub(crate) fn needed(&mut self, at: usize) -> f64 {
        let cell = self.raw(at);
        if cell.is_empty() {
            self.lack(at);
            return f64::NAN;
        }
        self.figure(at, cell).unwrap_or(f64::NAN)
    }

    /// A figure that may be blank. None where it is blank or wrong.
    #[inline]
    pub(crate) fn optional(&mut self, at: usize) -> Option<f64> {
        let cell = self.raw(at);
        if cell.is_empty() { None } else { self.figure(at, cell) }
    }

    /// A figure, or the default that its column declares. NaN where it is wrong.
    pub(crate) fn defaulted(&mut self, at: usize) -> f64 {
        let cell = self.raw(at);
        match self.columns.get(at) {
            Some(Column { need: Need::Default(figure), cell: Cell::Number(number), .. })
                if cell.is_empty() =>
            {
                figure / number.divisor
            }
            _ => self.figure(at, cell).unwrap_or(f64::NAN),
        }
    }

    /// Checks a figure that nothing is computed from.
    pub(crate) fn only_check(&mut self, at: usize) {
        let _ = self.optional(at);
    }

    #[inline]
    fn figure(&mut self, at: usize, cell: &[u8]) -> Option<f64> {
        let Some(Column { cell: Cell::Number(figure), .. }) = self.columns.get(at) else {
            return None;
        };
        let value = self.in_range(at, cell, (0, cell.len()), figure)?;
        Some(if figure.divisor == 1.0 { value } else { value / figure.divisor })
    }

    /// The figure in a part of a cell, in the unit of the cell.
    #[inline]
    fn in_range(
        &mut self,
        at: usize,
        text: &[u8],
        within: (usize, usize),
        figure: &Figure,
    ) -> Option<f64> {
        match quick(text, figure.unit) {
            Some(value) if figure.range.holds(value) => Some(value),
            _ => self.in_range_closely(at, text, within, figure),
        }
    }

    /// The same for any notation; notes what is wrong.
    #[cold]
    fn in_range_closely(
        &mut self,
        at: usize,
        text: &[u8],
        within: (usize, usize),
        figure: &Figure,
    ) -> Option<f64> {
        if spreadsheet::is_day_and_month(text) {
            self.fault_notation(at, within, NotationError::DateLike, figure.unit);
            return None;
        }
        let read = if self.has_commas && text.contains(&b',') {
            if decimal::may_part_thousands(text) {
                self.fault(at, within, What::MayBeThousands);
                return None;
            }
            parse_bytes(&decimal::with_point(text), figure.unit)
        } else {
            parse_bytes(text, figure.unit)
        };
        match read {
            Ok(value) if figure.range.holds(value) => {
                if spreadsheet::is_power(text) {
                    self.doubt(at, What::WrittenAsPower { value });
                }
                Some(value)
            }
            Ok(value) => {
                self.fault(at, within, What::OutOfRange { value });
                None
            }
            Err(error) => {
                self.fault_notation(at, within, error, figure.unit);
                None
            }
        }
    }

    #[cold]
    fn fault_notation(
        &mut self,
        at: usize,
        within: (usize, usize),
        error: NotationError,
        unit: Unit,
    ) {
        let what = match error {
            NotationError::NotUtf8 => What::NotUtf8,
            NotationError::Blank => What::BlankItem,
            error => What::Notation { error, unit },
        };
        self.fault(at, within, what);
    }

    /// A small whole number that proves the part.
    pub(crate) fn count(&mut self, at: usize) -> Option<u8> {
        let cell = self.raw(at);
        if cell.is_empty() {
            self.lack(at);
            return None;
        }
        let Some(Column { cell: Cell::Count(low, high), .. }) = self.columns.get(at) else {
            return None;
        };
        let found = (*low..=*high).find(|n| match cell {
            [digit] => digit.wrapping_sub(b'0') == *n,
            _ => parse_bytes(cell, Unit::Plain) == Ok(f64::from(*n)),
        });
        if found.is_none() {
            self.fault_cell(at, What::NotCount);
        }
        found
    }

    /// The place of a word in its column's list. None where the cell is blank or another word.
    #[inline]
    pub(crate) fn word(&mut self, at: usize) -> Option<usize> {
        let cell = self.raw(at);
        if cell.is_empty() {
            return None;
        }
        let Some(Column { cell: Cell::Word(words), .. }) = self.columns.get(at) else {
            return None;
        };
        let found = words.iter().position(|w| w.as_bytes().eq_ignore_ascii_case(cell));
        if found.is_none() {
            self.fault_cell(at, What::UnknownWord);
        }
        found
    }

    /// A list of points. None where the cell is blank or wrong; a needed one that is blank is noted.
    pub(crate) fn points(&mut self, at: usize) -> Option<Points> {
        let cell = self.raw(at);
        let column = self.columns.get(at)?;
        if cell.is_empty() {
            if column.need == Need::ToProve {
                self.lack(at);
            }
            return None;
        }
        match &column.cell {
            Cell::Points(axes) => self.points_in(at, cell, axes),
            _ => None,
        }
    }

    /// A needed figure over the collector current: a number or a list of points.
    pub(crate) fn number_or_points(&mut self, at: usize) -> Option<OverCurrent> {
        let cell = self.raw(at);
        if cell.is_empty() {
            self.lack(at);
            return None;
        }
        let Some(Column { cell: Cell::NumberOrPoints(axes), .. }) = self.columns.get(at) else {
            return None;
        };
        if cell.contains(&SIDE) {
            return self.points_in(at, cell, axes).map(OverCurrent::Points);
        }
        let figure = Figure { unit: axes.y, range: Axes::RANGE, divisor: 1.0 };
        self.in_range(at, cell, (0, cell.len()), &figure).map(OverCurrent::Number)
    }

    fn points_in(&mut self, at: usize, cell: &[u8], axes: &Axes) -> Option<Points> {
        if is_time_of_day(cell) {
            self.fault_cell(at, What::TimeOfDay);
            return None;
        }
        let side = |unit| Figure { unit, range: Range::ABOVE_ZERO, divisor: 1.0 };
        let (x_side, y_side) = (side(axes.x), side(axes.y));
        let mut pairs = std::mem::take(&mut self.noted.points);
        pairs.clear();
        let mut sound = true;
        for (start, item) in items(cell) {
            let end = start + item.len();
            let Some(colon) = item.iter().position(|b| *b == SIDE) else {
                let what =
                    if item.trim_ascii().is_empty() { What::BlankItem } else { What::NotAPoint };
                self.fault(at, (start, end), what);
                sound = false;
                continue;
            };
            let (left, right) = (item.get(..colon)?, item.get(colon + 1..)?);
            if right.contains(&SIDE) {
                self.fault(at, (start, end), What::NotAPoint);
                sound = false;
                continue;
            }
            let x = self.in_range(at, left, (start, start + colon), &x_side);
            let y = self.in_range(at, right, (start + colon + 1, end), &y_side);
            match (x, y) {
                (Some(x), Some(y)) => pairs.push((x, y)),
                _ => sound = false,
            }
        }
        let points = if sound {
            match Points::new(pairs.as_slice()) {
                Ok(points) => Some(points),
                Err(error) => {
                    let index = match error {
                        PointsError::NotRising(i) | PointsError::NotPositive(i) => i,
                        PointsError::Empty => 0,
                    };
                    let within =
                        items(cell).nth(index).map_or((0, cell.len()), |(s, i)| (s, s + i.len()));
                    self.fault(at, within, What::NotRising);
                    None
                }
            }
        } else {
            None
        };
        self.noted.points = pairs;
        points
    }

    /// A list of figures. None where the cell is blank or any of them wrong.
    pub(crate) fn numbers(&mut self, at: usize) -> Option<Vec<f64>> {
        let cell = self.raw(at);
        if cell.is_empty() {
            return None;
        }
        let Some(Column { cell: Cell::Numbers(figure), .. }) = self.columns.get(at) else {
            return None;
        };
        let mut values = Vec::new();
        let mut sound = true;
        for (start, item) in items(cell) {
            match self.in_range(at, item, (start, start + item.len()), figure) {
                Some(value) => values.push(value),
                None => sound = false,
            }
        }
        sound.then_some(values)
    }

    /// A needed list of texts.
    pub(crate) fn texts(&mut self, at: usize) -> Vec<CompactString> {
        let cell = self.raw(at);
        if cell.is_empty() {
            self.lack(at);
            return Vec::new();
        }
        let Ok(text) = std::str::from_utf8(cell) else {
            self.fault_cell(at, What::NotUtf8);
            return Vec::new();
        };
        let mut texts = Vec::new();
        for (start, item) in items(text.as_bytes()) {
            match text.get(start..start + item.len()).map(str::trim) {
                Some(item) if !item.is_empty() => {
                    if may_be_damaged(item.as_bytes())
                        && let Some(damage) = Damage::of(item)
                    {
                        let within = Some((start, start + item.len()));
                        let what = What::DamagedName(damage);
                        self.noted.doubts.push(Fault { column: Some(at), within, what });
                    }
                    texts.push(CompactString::new(item));
                }
                _ => self.fault(at, (start, start + item.len()), What::BlankItem),
            }
        }
        texts
    }

    /// A needed price or price breaks.
    pub(crate) fn price(&mut self, at: usize) -> Option<Price> {
        let cell = self.raw(at);
        if cell.is_empty() {
            self.lack(at);
            return None;
        }
        const PRICE: Figure = Figure { unit: Unit::Plain, range: Range::FROM_ZERO, divisor: 1.0 };
        if !cell.contains(&SIDE) {
            return self.in_range(at, cell, (0, cell.len()), &PRICE).map(Price::single);
        }
        if is_time_of_day(cell) {
            self.fault_cell(at, What::TimeOfDay);
            return None;
        }
        let mut breaks = std::mem::take(&mut self.noted.breaks);
        breaks.clear();
        let mut sound = true;
        for (start, item) in items(cell) {
            let end = start + item.len();
            let colon = item.iter().position(|b| *b == SIDE);
            let sides = colon.and_then(|c| Some((item.get(..c)?, item.get(c + 1..)?)));
            let Some((left, right)) = sides.filter(|(_, right)| !right.contains(&SIDE)) else {
                self.fault(at, (start, end), What::NotABreak);
                sound = false;
                continue;
            };
            let price_begins = start + left.len() + 1;
            let price = self.in_range(at, right, (price_begins, end), &PRICE);
            let Some(quantity) = whole_quantity(left) else {
                self.fault(at, (start, start + left.len()), What::NotAQuantity);
                sound = false;
                continue;
            };
            if breaks.last().is_some_and(|(before, _)| *before >= quantity) {
                self.fault(at, (start, start + left.len()), What::BreaksNotRising);
                sound = false;
            }
            match price {
                Some(price) => breaks.push((quantity, price)),
                None => sound = false,
            }
        }
        let price = if sound { Price::breaks(&breaks) } else { None };
        self.noted.breaks = breaks;
        price
    }
}

/// A name has the shape of what spreadsheets make of names: a date, a power of ten, a failure. Asked of
/// every name, so without looking at all of it.
#[inline]
fn may_be_damaged(name: &[u8]) -> bool {
    let parts_a_date = |byte: u8| matches!(byte, b'-' | b'/' | b'.' | b' ');
    match name {
        [b'#', ..] => true,
        [b'0'..=b'9', .., b'E', b'+' | b'-', _, _] => true,
        [b'0'..=b'9', a, b, _, d, ..] => [*a, *b, *d].into_iter().any(parts_a_date),
        [a, b, c, d, ..] => parts_a_date(*d) && spreadsheet::is_month([*a, *b, *c]),
        _ => false,
    }
}

/// A whole cell is a time of day. Longer lists are none.
#[inline]
fn is_time_of_day(cell: &[u8]) -> bool {
    const LONGEST: usize = "00:00:00 AM".len();
    cell.len() <= LONGEST && std::str::from_utf8(cell).is_ok_and(spreadsheet::is_time_of_day)
}

/// A whole quantity of at least 1.
fn whole_quantity(text: &[u8]) -> Option<u64> {
    let figure = parse_bytes(text, Unit::Plain).ok()?;
    // Every whole number up to 2^53 is held exactly; nobody buys more pieces.
    let is_whole = figure.fract() == 0.0 && (1.0..=9_007_199_254_740_992.0).contains(&figure);
    is_whole.then_some(figure as u64)
}

/// The items of a list, each with the place at which it begins.
fn items(cell: &[u8]) -> impl Iterator<Item = (usize, &[u8])> {
    let mut start = 0;
    cell.split(|b| *b == ITEM).map(move |item| {
        let begin = start;
        start += item.len() + 1;
        (begin, item)
    })
}

/// The bytes without white space at their ends, also that beyond ASCII where the text is valid.
#[inline]
pub(crate) fn trimmed(cell: &[u8]) -> &[u8] {
    let is_plain = |b: Option<&u8>| b.is_none_or(|b| (b'!'..=b'~').contains(b));
    if is_plain(cell.first()) && is_plain(cell.last()) {
        return cell;
    }
    trimmed_closely(cell)
}

/// The same where an end may be white space; apart from the above, which is all that most cells need.
#[cold]
fn trimmed_closely(cell: &[u8]) -> &[u8] {
    match std::str::from_utf8(cell) {
        Ok(text) => text.trim().as_bytes(),
        Err(_) => cell.trim_ascii(),
    }
}
