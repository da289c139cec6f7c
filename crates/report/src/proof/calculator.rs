//! Works out an expression of plain numbers, as a pocket calculator does.
//!
//! A proof shows formulas with their numbers put in. The calculator reads that text again, so that
//! what is shown is known to give the figure beside it, and tells how many digits it takes.

use std::fmt;

/// Why a text is no expression of numbers.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct NotAnExpression {
    /// The byte at which the text stops making sense.
    pub at: usize,
}

impl fmt::Display for NotAnExpression {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "the text makes no sense from byte {} on", self.at)
    }
}

impl std::error::Error for NotAnExpression {}

/// Brackets within brackets: no formula comes near, and a text of nothing else must not exhaust the
/// stack.
const DEEPEST: usize = 64;

/// The value of an expression of numbers, `+`, `−`, `·`, `/`, `²`, `^`, brackets and the functions
/// `max`, `min`, `clamp(x, low, high)`, `abs`, `ln`. The ASCII signs `-` and `*` are understood too.
///
/// A product or quotient in which something is infinite is infinite, be it beside a zero: what has no
/// value has no product.
///
/// # Errors
/// Where the text is no such expression.
///
/// ```
/// use report::proof::calculator::work_out;
/// assert_eq!(work_out("102.5 + 9.6·1 − 45"), Ok(102.5 + 9.6 - 45.0));
/// assert_eq!(work_out("2·3²/(1 − 4)"), Ok(-6.0));
/// assert_eq!(work_out("max(0, −2, 5e-3)"), Ok(0.005));
/// assert!(work_out("VUmin − 3").is_err());
/// ```
pub fn work_out(text: &str) -> Result<f64, NotAnExpression> {
    let mut reader = Reader { text, at: 0, depth: 0 };
    let value = reader.sum()?;
    reader.skip_spaces();
    if reader.at == text.len() { Ok(value) } else { Err(reader.fault()) }
}

struct Reader<'t> {
    text: &'t str,
    at: usize,
    depth: usize,
}

impl Reader<'_> {
    fn fault(&self) -> NotAnExpression {
        NotAnExpression { at: self.at }
    }

    fn rest(&self) -> &str {
        self.text.get(self.at..).unwrap_or_default()
    }

    fn skip_spaces(&mut self) {
        let rest = self.rest();
        self.at += rest.len() - rest.trim_start().len();
    }

    /// Takes one of the signs, where it comes next.
    fn take(&mut self, signs: &[char]) -> Option<char> {
        self.skip_spaces();
        let next = self.rest().chars().next().filter(|c| signs.contains(c))?;
        self.at += next.len_utf8();
        Some(next)
    }

    fn sum(&mut self) -> Result<f64, NotAnExpression> {
        let mut sum = self.product()?;
        while let Some(sign) = self.take(&['+', '−', '-']) {
            let next = self.product()?;
            if sign == '+' {
                sum += next;
            } else {
                sum -= next;
            }
        }
        Ok(sum)
    }

    fn product(&mut self) -> Result<f64, NotAnExpression> {
        let mut product = self.signed()?;
        while let Some(sign) = self.take(&['·', '*', '/']) {
            let next = self.signed()?;
            if sign == '/' {
                product /= next;
            } else if product.is_infinite() || next.is_infinite() {
                product = f64::INFINITY;
            } else {
                product *= next;
            }
        }
        Ok(product)
    }

    fn signed(&mut self) -> Result<f64, NotAnExpression> {
        match self.take(&['−', '-']) {
            Some(_) => self.power().map(|value| -value),
            None => self.power(),
        }
    }

    fn power(&mut self) -> Result<f64, NotAnExpression> {
        let base = self.operand()?;
        match self.take(&['²', '^']) {
            Some('²') => Ok(base * base),
            Some(_) => Ok(base.powf(self.operand()?)),
            None => Ok(base),
        }
    }

    fn operand(&mut self) -> Result<f64, NotAnExpression> {
        self.skip_spaces();
        if self.rest().starts_with('(') {
            let values = self.bracket()?;
            return match values.as_slice() {
                [value] => Ok(*value),
                _ => Err(self.fault()),
            };
        }
        if self.rest().starts_with(|c: char| c.is_ascii_digit()) {
            return self.number();
        }
        let letters = self.rest().find(|c: char| !c.is_ascii_alphabetic());
        let name = self.rest().get(..letters.unwrap_or(self.rest().len())).unwrap_or_default();
        let name = name.to_owned();
        if name == "inf" {
            self.at += name.len();
            return Ok(f64::INFINITY);
        }
        let begin = self.at;
        self.at += name.len();
        let values = self.bracket()?;
        applied(&name, &values).ok_or(NotAnExpression { at: begin })
    }

    /// Values in brackets, commas between them.
    fn bracket(&mut self) -> Result<Vec<f64>, NotAnExpression> {
        self.take(&['(']).ok_or_else(|| self.fault())?;
        self.depth += 1;
        if self.depth > DEEPEST {
            return Err(self.fault());
        }
        let mut values = vec![self.sum()?];
        while self.take(&[',']).is_some() {
            values.push(self.sum()?);
        }
        self.take(&[')']).ok_or_else(|| self.fault())?;
        self.depth -= 1;
        Ok(values)
    }

    fn number(&mut self) -> Result<f64, NotAnExpression> {
        let rest = self.rest();
        let plain = |text: &str| text.find(|c: char| !c.is_ascii_digit() && c != '.');
        let mut end = plain(rest).unwrap_or(rest.len());
        if let Some(power) = rest.get(end..).and_then(|r| r.strip_prefix('e')) {
            let digits = power.strip_prefix(['+', '-']).unwrap_or(power);
            let length = digits.find(|c: char| !c.is_ascii_digit()).unwrap_or(digits.len());
            end = rest.len() - digits.len() + length;
        }
        let value = rest.get(..end).and_then(|number| number.parse().ok());
        let value = value.ok_or_else(|| self.fault())?;
        self.at += end;
        Ok(value)
    }
}

fn applied(name: &str, values: &[f64]) -> Option<f64> {
    match (name, values) {
        ("max", [first, more @ ..]) => Some(more.iter().copied().fold(*first, f64::max)),
        ("min", [first, more @ ..]) => Some(more.iter().copied().fold(*first, f64::min)),
        // In this order, as the circuit does it: the upper end wins where the ends have crossed.
        ("clamp", [x, low, high]) => Some(x.max(*low).min(*high)),
        ("abs", [x]) => Some(x.abs()),
        ("ln", [x]) => Some(x.ln()),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn expressions_are_worked_out_by_the_usual_order() {
        for (text, value) in [
            ("1 − 2 − 3", -4.0),
            ("2 + 3·4", 14.0),
            ("12/3/2", 2.0),
            ("−3²", -9.0),
            ("(−3)²", 9.0),
            ("10^(40/20)", 100.0),
            ("4·ln(1)", 0.0),
            ("clamp(7, 0, 1)", 1.0),
            ("clamp(−7, 0, 1)", 0.0),
            ("min(2, 1 + 2, 3)", 2.0),
            ("abs(2 - 5)", 3.0),
            ("1.5e3 + 5e-1", 1500.5),
            ("12.7 + inf", f64::INFINITY),
            ("0·inf", f64::INFINITY),
            ("3 − inf", f64::NEG_INFINITY),
        ] {
            assert_eq!(work_out(text), Ok(value), "{text}");
        }
    }

    #[test]
    fn what_is_no_expression_is_refused() {
        for text in
            ["", "1 +", "(1", "1)", "max()", "sin(1)", "1 2", "(1, 2)", "clamp(1, 2)", "1.2.3"]
        {
            assert!(work_out(text).is_err(), "{text}");
        }
        assert!(work_out(&"(".repeat(100_000)).is_err());
    }
}
