//! One CSV row after another, as catalogs print figures.

use std::fmt::Write as _;

/// Digits that data sheets print.
const SHEET_DIGITS: usize = 3;

/// Digits that a cell shows; beyond what sheets print, so that figures on a smooth curve stay apart.
const CELL_DIGITS: usize = 6;

/// A file in the making.
pub struct Cells {
    text: String,
    /// The needed figure of this row that is left blank, counted from 0.
    gap: Option<usize>,
    /// Needed figures of this row so far.
    needed: usize,
    is_first: bool,
}

impl Cells {
    /// A file with this header row.
    pub fn new(header: &str) -> Self {
        Self { text: format!("{header}\n"), gap: None, needed: 0, is_first: true }
    }

    /// Begins a row; the needed figure with the number `gap` stays blank.
    pub fn begin(&mut self, gap: Option<usize>) {
        (self.gap, self.needed, self.is_first) = (gap, 0, true);
    }

    /// Ends a row.
    pub fn end(&mut self) {
        self.text.push('\n');
    }

    /// The whole file.
    pub fn into_bytes(self) -> Vec<u8> {
        self.text.into_bytes()
    }

    /// A cell with this text, quoted where a comma asks for it.
    pub fn text(&mut self, text: &str) {
        self.separate();
        if text.contains(',') {
            self.text.push('"');
            self.text.push_str(text);
            self.text.push('"');
        } else {
            self.text.push_str(text);
        }
    }

    /// A needed figure.
    pub fn needed(&mut self, value: f64) {
        if self.takes_gap() {
            self.separate();
        } else {
            self.number(value);
        }
    }

    /// A figure that may be blank.
    pub fn optional(&mut self, value: Option<f64>) {
        match value {
            Some(value) => self.number(value),
            None => self.separate(),
        }
    }

    /// A needed list of points.
    pub fn needed_points(&mut self, points: &[(f64, f64)]) {
        let is_gap = self.takes_gap();
        self.optional_points((!is_gap).then_some(points));
    }

    /// A list of points that may be blank.
    pub fn optional_points(&mut self, points: Option<&[(f64, f64)]>) {
        self.separate();
        for (n, (x, y)) in points.into_iter().flatten().enumerate() {
            if n > 0 {
                self.text.push(';');
            }
            self.push_number(*x);
            self.text.push(':');
            self.push_number(*y);
        }
    }

    fn takes_gap(&mut self) -> bool {
        let is_gap = self.gap == Some(self.needed);
        self.needed += 1;
        is_gap
    }

    fn number(&mut self, value: f64) {
        self.separate();
        self.push_number(value);
    }

    fn separate(&mut self) {
        if !self.is_first {
            self.text.push(',');
        }
        self.is_first = false;
    }

    /// Plain between 0.01 and a million, else with an SI prefix: `0.25`, `4.7m`, `120n`.
    fn push_number(&mut self, value: f64) {
        let size = value.abs();
        let (scaled, prefix) = match size {
            0.0 => (0.0, ""),
            s if s < 1e-9 => (value * 1e12, "p"),
            s if s < 1e-6 => (value * 1e9, "n"),
            s if s < 1e-3 => (value * 1e6, "u"),
            s if s < 1e-2 => (value * 1e3, "m"),
            _ => (value, ""),
        };
        let shown = rounded_to(scaled, CELL_DIGITS);
        // Writing into a text cannot fail.
        let _ = write!(self.text, "{shown}{prefix}");
    }
}

/// A figure as data sheets print it.
pub fn figure(value: f64) -> f64 {
    rounded_to(value, SHEET_DIGITS)
}

/// Rounded to significant digits by way of its decimal text, which is exact on every machine.
fn rounded_to(value: f64, digits: usize) -> f64 {
    let text = format!("{value:.*e}", digits - 1);
    text.parse().unwrap_or(value)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn figures_are_printed_as_catalogs_do() {
        let mut cells = Cells::new("a,b,c,d,e,f");
        cells.begin(Some(1));
        cells.needed(0.0047);
        cells.needed(5.0);
        cells.optional(Some(-0.000_000_120_000_01));
        cells.optional(None);
        cells.text("clip, no screw");
        cells.needed_points(&[(0.1, 40.0), (1.0, 12.345_678_9)]);
        cells.end();
        let text = String::from_utf8(cells.into_bytes()).unwrap_or_default();
        assert_eq!(text, "a,b,c,d,e,f\n4.7m,,-120n,,\"clip, no screw\",0.1:40;1:12.3457\n");
    }
}
