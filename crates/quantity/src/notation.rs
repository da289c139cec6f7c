//! How a figure is written in a catalog cell: numbers, SI prefixes, unit words, letter codes.
//!
//! A cell holds a plain or scientific number, then an SI prefix, then a unit word, each of the last
//! two optional: `0.005`, `5e-3`, `5m`, `5 mA`. Resistances may be letter codes of IEC 60062: `4k7`,
//! `R47`. Prefix and code letters move the decimal exponent before anything turns binary, so `5m`
//! is the very figure that `0.005` is.

use crate::spreadsheet::is_date;
use std::fmt;

/// The unit of a column, with the words that a cell may end in.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Unit {
    /// A bare number: a gain, a count.
    Plain,
    /// V.
    Volt,
    /// A.
    Ampere,
    /// W.
    Watt,
    /// Hz.
    Hertz,
    /// dB.
    Decibel,
    /// s.
    Second,
    /// Ω; letter codes of IEC 60062 are read too.
    Ohm,
    /// °C.
    Celsius,
    /// °C/W.
    CelsiusPerWatt,
    /// %.
    Percent,
    /// %/°C.
    PercentPerDegree,
    /// ppm/°C.
    PpmPerDegree,
    /// mV/°C.
    MillivoltPerDegree,
    /// J/°C.
    JoulePerDegree,
}

impl Unit {
    /// Every unit.
    pub const ALL: [Unit; 15] = [
        Unit::Plain,
        Unit::Volt,
        Unit::Ampere,
        Unit::Watt,
        Unit::Hertz,
        Unit::Decibel,
        Unit::Second,
        Unit::Ohm,
        Unit::Celsius,
        Unit::CelsiusPerWatt,
        Unit::Percent,
        Unit::PercentPerDegree,
        Unit::PpmPerDegree,
        Unit::MillivoltPerDegree,
        Unit::JoulePerDegree,
    ];

    /// The words that a cell in this unit may end in, the usual one first.
    pub const fn spellings(self) -> &'static [&'static str] {
        match self {
            Unit::Plain => &[],
            Unit::Volt => &["V"],
            Unit::Ampere => &["A"],
            Unit::Watt => &["W"],
            Unit::Hertz => &["Hz"],
            Unit::Decibel => &["dB"],
            Unit::Second => &["s"],
            // The last is U+2126, which Unicode holds equal to the letter omega.
            Unit::Ohm => &["Ω", "ohm", "ohms", "\u{2126}"],
            Unit::Celsius => &["°C", "degC", "C"],
            Unit::CelsiusPerWatt => &["°C/W", "C/W", "K/W"],
            Unit::Percent => &["%"],
            Unit::PercentPerDegree => &["%/°C", "%/K", "%"],
            Unit::PpmPerDegree => &["ppm/°C", "ppm/K", "ppm"],
            Unit::MillivoltPerDegree => &["mV/°C", "mV/K"],
            Unit::JoulePerDegree => &["J/°C", "J/K"],
        }
    }

    /// The usual spelling; empty for a bare number.
    pub fn symbol(self) -> &'static str {
        self.spellings().first().copied().unwrap_or("")
    }

    /// What is measured in this unit, with its article: `a voltage`.
    pub const fn quantity(self) -> &'static str {
        match self {
            Unit::Plain => "a plain number",
            Unit::Volt => "a voltage",
            Unit::Ampere => "a current",
            Unit::Watt => "a power",
            Unit::Hertz => "a frequency",
            Unit::Decibel => "a ratio",
            Unit::Second => "a time",
            Unit::Ohm => "a resistance",
            Unit::Celsius => "a temperature",
            Unit::CelsiusPerWatt => "a thermal resistance",
            Unit::Percent => "a percentage",
            Unit::PercentPerDegree | Unit::PpmPerDegree | Unit::MillivoltPerDegree => {
                "a temperature coefficient"
            }
            Unit::JoulePerDegree => "a heat capacity",
        }
    }

    /// The text is one of this unit's words.
    fn is_spelled(self, text: &str) -> bool {
        self.spellings().contains(&text)
    }
}

/// Why a text is no figure in the unit asked for.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum NotationError {
    /// There is nothing but white space.
    Blank,
    /// The text is not valid UTF-8.
    NotUtf8,
    /// The text does not begin with a number.
    NotANumber,
    /// The number ends in the word of another unit than the one asked for.
    OtherUnit {
        /// The unit that was found.
        found: Unit,
        /// The unit that was asked for.
        expected: Unit,
    },
    /// The number is followed by something that is neither prefix nor unit.
    Trailing {
        /// What follows the number.
        text: String,
    },
    /// A comma stands where a decimal point could.
    DecimalComma,
    /// The text looks like a date, as spreadsheets make of some numbers and names.
    DateLike,
    /// The figure lies beyond the greatest that can be held.
    TooLarge,
    /// The figure is not zero but closer to zero than can be held.
    TooSmall,
}

impl fmt::Display for NotationError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Blank => write!(f, "nothing is given"),
            Self::NotUtf8 => write!(f, "the text is not valid UTF-8"),
            Self::NotANumber => write!(f, "this is not a number"),
            Self::OtherUnit { found, expected } => {
                write!(f, "this is {} in {}", found.quantity(), found.symbol())?;
                match expected {
                    Unit::Plain => write!(f, " where a plain number belongs"),
                    _ => {
                        write!(f, " where {} in {} belongs", expected.quantity(), expected.symbol())
                    }
                }
            }
            Self::Trailing { text } => {
                write!(f, "`{text}` behind the number is neither an SI prefix nor the unit")
            }
            Self::DecimalComma => write!(f, "a comma is no decimal point"),
            Self::DateLike => write!(f, "this looks like a date that a spreadsheet made of it"),
            Self::TooLarge => write!(f, "the figure is too large to be held"),
            Self::TooSmall => write!(f, "the figure is too close to zero to be held"),
        }
    }
}

impl std::error::Error for NotationError {}

/// Reads a figure in `unit`. Prefixes are applied; percent, ppm and mV/°C stay as they are written.
///
/// The result is the binary figure nearest to the decimal meaning. White space round the text, and
/// between number, prefix and unit, is passed over. In a temperature a bare `K` is refused: it would
/// as likely be a kelvin as a thousand degrees.
///
/// # Errors
/// See [`NotationError`]. Infinities, NaN, hexadecimal and digit separators are no numbers.
///
/// ```
/// use quantity::notation::{NotationError, Unit, parse};
/// assert_eq!(parse("5 mA", Unit::Ampere), Ok(0.005));
/// assert_eq!(parse("4k7", Unit::Ohm), Ok(4700.0));
/// assert_eq!(parse("2.1 mV/°C", Unit::MillivoltPerDegree), Ok(2.1));
/// assert_eq!(
///     parse("5 V", Unit::Ampere),
///     Err(NotationError::OtherUnit { found: Unit::Volt, expected: Unit::Ampere })
/// );
/// ```
pub fn parse(text: &str, unit: Unit) -> Result<f64, NotationError> {
    parse_bytes(text.as_bytes(), unit)
}

/// As [`parse`], from the bytes of a cell; most cells never need to be looked at as text.
///
/// # Errors
/// See [`NotationError`].
#[inline]
pub fn parse_bytes(cell: &[u8], unit: Unit) -> Result<f64, NotationError> {
    match quick(cell, unit) {
        Some(figure) => Ok(figure),
        None => std::str::from_utf8(cell)
            .map_err(|_| NotationError::NotUtf8)
            .and_then(|text| written_out(text.trim(), unit)),
    }
}

/// The figure where the cell is a short number, with at most a prefix behind it, as nearly all cells
/// are; None where [`parse_bytes`] has to look closer, as at the shapes that [`crate::spreadsheet`]
/// recognises: `1E+04`, `01.05`. Allocates nothing and finds no words for what
/// is wrong, so that loops over large files may ask it first.
#[inline]
pub fn quick(cell: &[u8], unit: Unit) -> Option<f64> {
    let (number, used) = Decimal::scan(cell)?;
    if number.has_large_e || matches!(cell, [b'0', b'0'..=b'9', ..]) {
        return None;
    }
    match cell.get(used..)? {
        [] => number.nearest(0),
        // Beyond ASCII a lone byte is no UTF-8, though `char::from` would read a µ of an older code page.
        &[letter] if letter.is_ascii() && !is_kelvin(letter, unit) => {
            number.nearest(prefix_exponent(char::from(letter))?)
        }
        _ => None,
    }
}

/// A decimal number digits·10^exponent.
#[derive(Clone, Copy)]
struct Decimal {
    negative: bool,
    /// All digits as a whole number; meaningless where there are too many of them.
    digits: u64,
    /// Digits were lost because there are too many to be held.
    is_long: bool,
    /// The exponent stands behind a large `E`.
    has_large_e: bool,
    exponent: i32,
}

/// Digits up to here take one more without overflow.
const ROOM_FOR_A_DIGIT: u64 = (u64::MAX - 9) / 10;

/// Every whole number up to here has a binary figure of its own.
const EXACT_WHOLE: u64 = 1 << 53;

/// Powers of ten that are exact as binary figures.
const EXACT_POWERS: [f64; 23] = [
    1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16,
    1e17, 1e18, 1e19, 1e20, 1e21, 1e22,
];

/// Exponents are held within this, far beyond what any figure needs, so that sums can't overflow.
const EXPONENT_LIMIT: i32 = 1_000_000;

impl Decimal {
    /// The number at the beginning of the text, and how many bytes it takes.
    #[inline]
    fn scan(text: &[u8]) -> Option<(Self, usize)> {
        let mut n =
            Self { negative: false, digits: 0, is_long: false, has_large_e: false, exponent: 0 };
        let mut at = 0;
        if let Some(sign @ (b'-' | b'+')) = text.first() {
            n.negative = *sign == b'-';
            at = 1;
        }
        let begin = at;
        at = n.take_digits(text, at);
        let mut count = at - begin;
        if text.get(at) == Some(&b'.') {
            let behind = at + 1;
            at = n.take_digits(text, behind);
            let places = at - behind;
            count += places;
            n.exponent = -i32::try_from(places).unwrap_or(EXPONENT_LIMIT).min(EXPONENT_LIMIT);
        }
        if count == 0 {
            return None;
        }
        if let Some(letter @ (b'e' | b'E')) = text.get(at)
            && let Some((power, end)) = scan_power(text, at + 1)
        {
            n.has_large_e = *letter == b'E';
            n.exponent += power;
            at = end;
        }
        Some((n, at))
    }

    /// Takes the digits from `begin` on, and tells where they end.
    #[inline]
    fn take_digits(&mut self, text: &[u8], begin: usize) -> usize {
        let mut at = begin;
        for byte in text.get(begin..).unwrap_or_default() {
            let digit = byte.wrapping_sub(b'0');
            if digit > 9 {
                break;
            }
            if self.digits <= ROOM_FOR_A_DIGIT {
                self.digits = self.digits * 10 + u64::from(digit);
            } else {
                self.is_long = true;
            }
            at += 1;
        }
        at
    }

    /// The nearest binary figure of this·10^shift where one rounding gives it: digits and power are
    /// both exact, so their product or quotient is rounded once (W. D. Clinger, "How to read floating
    /// point numbers accurately", 1990).
    #[inline]
    fn nearest(self, shift: i32) -> Option<f64> {
        if self.is_long || self.digits > EXACT_WHOLE {
            return None;
        }
        let whole = self.digits as f64;
        let exponent = self.exponent + shift;
        let power = *EXACT_POWERS.get(exponent.unsigned_abs() as usize)?;
        let size = if exponent < 0 { whole / power } else { whole * power };
        // Zero has no sign here: no figure of a data sheet means anything by one.
        Some(if self.negative && size > 0.0 { -size } else { size })
    }
}

/// The exponent behind an `e`, and where it ends.
fn scan_power(text: &[u8], mut at: usize) -> Option<(i32, usize)> {
    let negative = match text.get(at) {
        Some(b'-') => true,
        Some(b'+') => false,
        _ => {
            at -= 1;
            false
        }
    };
    at += 1;
    let begin = at;
    let mut power: i32 = 0;
    while let Some(digit) = text.get(at).filter(|b| b.is_ascii_digit()) {
        power = (power * 10 + i32::from(digit - b'0')).min(EXPONENT_LIMIT / 10);
        at += 1;
    }
    (at > begin).then_some((if negative { -power } else { power }, at))
}

/// The decimal exponent of an SI prefix.
#[inline]
fn prefix_exponent(letter: char) -> Option<i32> {
    Some(match letter {
        'p' => -12,
        'n' => -9,
        'u' | 'µ' | 'μ' => -6,
        'm' => -3,
        'k' | 'K' => 3,
        'M' => 6,
        'G' => 9,
        _ => return None,
    })
}

fn is_kelvin(letter: u8, unit: Unit) -> bool {
    letter == b'K' && unit == Unit::Celsius
}

/// Every form that a cell may take, from its trimmed text.
#[cold]
fn written_out(text: &str, unit: Unit) -> Result<f64, NotationError> {
    if text.is_empty() {
        return Err(NotationError::Blank);
    }
    if unit == Unit::Ohm
        && let Some(figure) = letter_code(text)
    {
        return figure;
    }
    let Some((number, used)) = Decimal::scan(text.as_bytes()) else {
        return Err(if is_date(text) {
            NotationError::DateLike
        } else {
            NotationError::NotANumber
        });
    };
    // A number is ASCII, so the cut lies between characters.
    let (digits, rest) = text.split_at(used);
    let rest = rest.trim_start();
    match shift_of(rest, unit) {
        Some(shift) => spelled(number, digits, shift),
        None => Err(trailing(text, rest, unit)),
    }
}

/// The decimal exponent that prefix and unit word stand for; None where they are something else.
fn shift_of(rest: &str, unit: Unit) -> Option<i32> {
    // The unit comes first: the `K` of `5 K/W` and the `m` of `2 mV/K` are no prefixes.
    if rest.is_empty() || unit.is_spelled(rest) {
        return Some(0);
    }
    let letter = rest.chars().next()?;
    let word = rest.get(letter.len_utf8()..)?.trim_start();
    let is_prefix_alone = word.is_empty() && !(letter == 'K' && unit == Unit::Celsius);
    let shift = prefix_exponent(letter)?;
    (is_prefix_alone || unit.is_spelled(word)).then_some(shift)
}

/// number·10^shift as the nearest binary figure, by way of decimal text where it has to be.
fn spelled(number: Decimal, digits: &str, shift: i32) -> Result<f64, NotationError> {
    if let Some(figure) = number.nearest(shift) {
        return Ok(figure);
    }
    let mantissa = digits.split(['e', 'E']).next().unwrap_or(digits);
    let places = mantissa.split_once('.').map_or(0, |(_, behind)| behind.len());
    let places = i32::try_from(places).unwrap_or(EXPONENT_LIMIT).min(EXPONENT_LIMIT);
    // The mantissa brings its own point, which `exponent` has counted already.
    let power = number.exponent + places + shift;
    let figure: f64 =
        format!("{mantissa}e{power}").parse().map_err(|_| NotationError::NotANumber)?;
    if figure.is_infinite() {
        Err(NotationError::TooLarge)
    } else if figure == 0.0 && mantissa.bytes().any(|b| (b'1'..=b'9').contains(&b)) {
        Err(NotationError::TooSmall)
    } else {
        // As in `nearest`, zero has no sign.
        Ok(if figure == 0.0 { 0.0 } else { figure })
    }
}

/// A letter code of IEC 60062, in which a letter stands in place of the decimal point: `4k7`, `R47`,
/// `470R`, with a unit word behind it or not. None where the text is of another form.
fn letter_code(text: &str) -> Option<Result<f64, NotationError>> {
    let is_digit = |c: char| c.is_ascii_digit();
    let (before, rest) = text.split_at(text.find(|c| !is_digit(c))?);
    let letter = rest.chars().next()?;
    let shift = match letter {
        'R' => 0,
        'k' | 'K' => 3,
        'M' => 6,
        'G' => 9,
        _ => return None,
    };
    let rest = rest.get(1..)?;
    let (after, word) = rest.split_at(rest.find(|c| !is_digit(c)).unwrap_or(rest.len()));
    let word = word.trim_start();
    let is_code = !(before.is_empty() && after.is_empty())
        && (word.is_empty() || Unit::Ohm.is_spelled(word))
        // `47k` is number and prefix; the code without figures behind the letter is `47R`.
        && (letter == 'R' || !after.is_empty());
    if !is_code {
        return None;
    }
    let digits = format!("{before}.{after}");
    let (number, _) = Decimal::scan(digits.as_bytes())?;
    Some(spelled(number, &digits, shift))
}

/// Names what follows a number where neither prefix nor unit does.
fn trailing(text: &str, rest: &str, expected: Unit) -> NotationError {
    let other = |word: &str| Unit::ALL.into_iter().find(|u| *u != expected && u.is_spelled(word));
    let behind_prefix = || {
        let letter = rest.chars().next()?;
        prefix_exponent(letter)?;
        other(rest.get(letter.len_utf8()..)?.trim_start())
    };
    if let Some(found) = other(rest).or_else(behind_prefix) {
        return NotationError::OtherUnit { found, expected };
    }
    let mut chars = rest.chars();
    if chars.next() == Some(',') && chars.next().is_some_and(|c| c.is_ascii_digit()) {
        return NotationError::DecimalComma;
    }
    if is_date(text) {
        return NotationError::DateLike;
    }
    NotationError::Trailing { text: rest.chars().take(LONGEST_QUOTE).collect() }
}

/// Characters of a cell that a message repeats.
const LONGEST_QUOTE: usize = 24;

/// What the writer of a text that can't be read probably meant: a text that can be.
///
/// Tries decimal commas, separators of thousands (points and spaces too), typographic minus signs, signs and words before
/// the number, and unit words in another case.
///
/// ```
/// use quantity::notation::{Unit, suggestion};
/// assert_eq!(suggestion("5,1", Unit::Volt).as_deref(), Some("5.1"));
/// assert_eq!(suggestion("5V1", Unit::Volt).as_deref(), Some("5.1"));
/// assert_eq!(suggestion("plenty", Unit::Volt), None);
/// ```
pub fn suggestion(text: &str, unit: Unit) -> Option<String> {
    const LONGEST: usize = 40;
    let text = text.trim();
    if text.len() > LONGEST {
        return None;
    }
    let readable = |t: &String| parse(t, unit).is_ok();
    let minus = text.replace(['\u{2212}', '\u{2013}'], "-");
    let bare = minus.trim_start_matches(|c: char| !c.is_ascii_digit() && !"+-.".contains(c));
    let is_point_last = bare.rfind('.') > bare.rfind(',');
    let thousands = bare.contains('.').then(|| match is_point_last {
        true => bare.replace(',', ""),
        false => bare.replace('.', "").replace(',', "."),
    });
    let in_groups = between_digits(bare, char::is_whitespace);
    let comma = (bare.matches(',').count() == 1).then(|| bare.replace(',', "."));
    let number = bare.trim_end_matches(|c: char| !c.is_ascii_digit());
    let in_words = unit.spellings().iter().find_map(|word| {
        let lower = bare.to_lowercase();
        let before = lower.strip_suffix(&word.to_lowercase())?.len();
        Some(format!("{}{word}", bare.get(..before)?))
    });
    let point = unit.spellings().iter().find_map(|word| {
        // `5V1`: the letter in place of the point, as on the part itself.
        let (before, after) = bare.split_once(word)?;
        let is_code = after.bytes().all(|b| b.is_ascii_digit()) && !after.is_empty();
        is_code.then(|| format!("{before}.{after}"))
    });
    let r_code =
        (unit == Unit::Ohm).then(|| bare.strip_suffix('R').map(|n| n.replace('.', "R"))).flatten();
    [Some(bare.to_owned()), thousands, in_groups, comma, in_words, point, r_code]
        .into_iter()
        .flatten()
        .find(readable)
        // A foreign word behind a number: the number by itself, unless it is a unit that means
        // something else.
        .or_else(|| {
            let is_foreign = matches!(written_out(bare, unit), Err(NotationError::Trailing { .. }));
            is_foreign.then(|| number.to_owned()).filter(readable)
        })
}

/// The text without the characters of a kind that stand between two digits.
fn between_digits(text: &str, is_of_kind: impl Fn(char) -> bool) -> Option<String> {
    let chars: Vec<char> = text.chars().collect();
    let is_digit =
        |at: Option<usize>| at.and_then(|at| chars.get(at)).is_some_and(char::is_ascii_digit);
    let kept: String = chars
        .iter()
        .enumerate()
        .filter(|(at, c)| {
            !(is_of_kind(**c) && is_digit(at.checked_sub(1)) && is_digit(at.checked_add(1)))
        })
        .map(|(_, c)| *c)
        .collect();
    (kept != text).then_some(kept)
}

/// Prefixes for display, with their decimal exponents, rising.
const PREFIXES: [(i32, &str); 8] =
    [(-12, "p"), (-9, "n"), (-6, "µ"), (-3, "m"), (0, ""), (3, "k"), (6, "M"), (9, "G")];

/// Units that are commonly written with a prefix; a temperature or a percentage is not.
const PREFIXED: [&str; 6] = ["V", "A", "W", "Hz", "s", "Ω"];

/// A figure for people: `digits` significant digits (1 to 17), an SI prefix where the unit takes one.
///
/// ```
/// use quantity::notation::engineering;
/// assert_eq!(engineering(4700.0, "Ω", 4), "4.7 kΩ");
/// assert_eq!(engineering(0.0061, "A", 4), "6.1 mA");
/// assert_eq!(engineering(999.96, "V", 4), "1 kV");
/// assert_eq!(engineering(1234.0, "°C", 4), "1234 °C");
/// assert_eq!(engineering(f64::INFINITY, "A", 4), "inf A");
/// ```
pub fn engineering(figure: f64, unit: &str, digits: usize) -> String {
    let takes_prefix = PREFIXED.contains(&unit);
    let (number, prefix) = in_thousands(figure, digits, takes_prefix);
    match (prefix, unit) {
        ("", "") => number,
        _ => format!("{number} {prefix}{unit}"),
    }
}

/// A resistance as it is written beside a symbol: `4.7k`, `680`, `0.47`, `1M`.
///
/// ```
/// use quantity::notation::resistance;
/// assert_eq!(resistance(4700.0), "4.7k");
/// assert_eq!(resistance(0.47), "0.47");
/// assert_eq!(resistance(1e6), "1M");
/// ```
pub fn resistance(ohm: f64) -> String {
    let (number, prefix) = in_thousands(ohm, 6, ohm.abs() >= 1.0);
    format!("{number}{prefix}")
}

/// The figure rounded to `digits` significant digits, in the thousands of the prefix that follows it.
fn in_thousands(figure: f64, digits: usize, takes_prefix: bool) -> (String, &'static str) {
    if !figure.is_finite() {
        return (format!("{figure}"), "");
    }
    if figure == 0.0 {
        return ("0".to_owned(), "");
    }
    let digits = digits.clamp(1, 17);
    // Rounded first: 999.96 V at four digits is 1.000 kV, not 1000 V.
    let text = format!("{figure:.*e}", digits - 1);
    let exponent: i32 = text.split_once('e').and_then(|(_, power)| power.parse().ok()).unwrap_or(0);
    let (thousands, prefix) = PREFIXES
        .into_iter()
        .rfind(|(e, _)| takes_prefix && *e <= exponent)
        .unwrap_or(if takes_prefix { PREFIXES[0] } else { (0, "") });
    let places = usize::try_from((digits as i32 - 1) - (exponent - thousands)).unwrap_or(0);
    let scaled: f64 = text
        .split_once('e')
        .and_then(|(mantissa, _)| format!("{mantissa}e{}", exponent - thousands).parse().ok())
        .unwrap_or(figure);
    let mut number = format!("{scaled:.places$}");
    if number.contains('.') {
        number.truncate(number.trim_end_matches('0').trim_end_matches('.').len());
    }
    (number, prefix)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn letter_codes_of_iec_60062() {
        // Source: Wikipedia "RKM code", table "Examples of resistance values".
        let published = [
            ("R47", 0.47),
            ("4R7", 4.7),
            ("4K7", 4700.0),
            ("47K", 47_000.0),
            ("470K", 470_000.0),
            ("4M7", 4_700_000.0),
        ];
        for (code, ohm) in published {
            assert_eq!(parse(code, Unit::Ohm), Ok(ohm), "{code}");
        }
        let likewise =
            [("4k7", 4700.0), ("470R", 470.0), ("1M0", 1e6), ("2G2", 2.2e9), ("4k7 Ω", 4700.0)];
        for (code, ohm) in likewise {
            assert_eq!(parse(code, Unit::Ohm), Ok(ohm), "{code}");
        }
    }

    #[test]
    fn letter_codes_belong_to_resistances() {
        assert!(parse("4k7", Unit::Volt).is_err());
        assert!(parse("R47", Unit::Plain).is_err());
        for text in ["R", "K", "4.7k7", "4R7R", "4m7", "4k7e3", "RK", "4.7R"] {
            assert!(parse(text, Unit::Ohm).is_err(), "{text}");
        }
    }

    #[test]
    fn prefixes_give_the_figure_of_the_decimal_text() {
        let same = [
            ("5m", 0.005),
            ("0.2m", 0.0002),
            ("20m", 0.02),
            ("4.7k", 4700.0),
            ("4.7K", 4700.0),
            ("200n", 2e-7),
            ("60u", 6e-5),
            ("60\u{b5}", 6e-5),
            ("60\u{3bc}", 6e-5),
            ("7p", 7e-12),
            ("1.5M", 1.5e6),
            ("2G", 2e9),
            ("1e3k", 1e6),
            ("1.1e-1m", 1.1e-4),
        ];
        for (text, figure) in same {
            assert_eq!(parse(text, Unit::Ampere), Ok(figure), "{text}");
        }
    }

    #[test]
    fn every_listed_unit_word_is_read_with_and_without_space_and_prefix() {
        for unit in Unit::ALL {
            for word in unit.spellings() {
                assert_eq!(parse(&format!("12{word}"), unit), Ok(12.0), "{word}");
                assert_eq!(parse(&format!(" 12 {word} "), unit), Ok(12.0), "{word}");
                assert_eq!(parse(&format!("12 k{word}"), unit), Ok(12_000.0), "{word}");
            }
        }
        assert_eq!(parse("5.1\u{a0}V", Unit::Volt), Ok(5.1));
    }

    #[test]
    fn another_unit_is_named() {
        let error = |found, expected| Err(NotationError::OtherUnit { found, expected });
        assert_eq!(parse("15A", Unit::Volt), error(Unit::Ampere, Unit::Volt));
        assert_eq!(parse("15 mA", Unit::Volt), error(Unit::Ampere, Unit::Volt));
        assert_eq!(parse("15 Ω", Unit::Plain), error(Unit::Ohm, Unit::Plain));
        assert_eq!(parse("1 K/W", Unit::Celsius), error(Unit::CelsiusPerWatt, Unit::Celsius));
        assert_eq!(parse("2 %/K", Unit::Percent), error(Unit::PercentPerDegree, Unit::Percent));
    }

    #[test]
    fn a_kelvin_is_no_thousand_degrees() {
        assert!(parse("423K", Unit::Celsius).is_err());
        assert!(parse("423 K", Unit::Celsius).is_err());
        assert_eq!(parse("423K", Unit::Hertz), Ok(423e3));
    }

    #[test]
    fn what_is_no_number_is_refused() {
        for text in [
            "", " ", "nan", "NaN", "inf", "-inf", "infinity", "0x10", "1_000", "e5", ".", "-",
            "+-5", "5E", "5e", "1 2", "--5", "5..1",
        ] {
            assert!(parse(text, Unit::Volt).is_err(), "{text:?}");
        }
        assert_eq!(parse("1e999", Unit::Volt), Err(NotationError::TooLarge));
        assert_eq!(parse("1e308k", Unit::Volt), Err(NotationError::TooLarge));
        assert_eq!(parse("1e99999999999999", Unit::Volt), Err(NotationError::TooLarge));
        assert_eq!(parse("1e-999", Unit::Volt), Err(NotationError::TooSmall));
        assert_eq!(parse("0e999", Unit::Volt), Ok(0.0));
        assert_eq!(parse("5,1", Unit::Volt), Err(NotationError::DecimalComma));
        assert_eq!(parse("2024-05-01", Unit::Volt), Err(NotationError::DateLike));
        assert_eq!(parse("5-May", Unit::Volt), Err(NotationError::DateLike));
        assert_eq!(parse_bytes(b"5 \xb5A", Unit::Ampere), Err(NotationError::NotUtf8));
    }

    #[test]
    fn short_and_odd_forms_of_numbers() {
        for (text, figure) in [(".5", 0.5), ("5.", 5.0), ("+5", 5.0), ("-0", 0.0), ("007", 7.0)] {
            assert_eq!(parse(text, Unit::Volt), Ok(figure), "{text}");
        }
        assert!(parse("-0", Unit::Volt).is_ok_and(f64::is_sign_positive));
    }

    #[test]
    fn suggestions_can_be_read() {
        let cases = [
            ("5,1", Unit::Volt, Some("5.1")),
            ("1,234.5", Unit::Ohm, Some("1234.5")),
            ("1.234,5", Unit::Ohm, Some("1234.5")),
            ("1 234.5", Unit::Ohm, Some("1234.5")),
            ("10\u{202f}000 Ω", Unit::Ohm, Some("10000 Ω")),
            ("\u{2212}2.5", Unit::MillivoltPerDegree, Some("-2.5")),
            ("±5", Unit::Percent, Some("5")),
            ("€0.42", Unit::Plain, Some("0.42")),
            ("0.42 EUR", Unit::Plain, Some("0.42")),
            ("10 kOhm", Unit::Ohm, Some("10 kohm")),
            ("4.7R", Unit::Ohm, Some("4R7")),
            ("6V2", Unit::Volt, Some("6.2")),
            ("5 A", Unit::Volt, None),
        ];
        for (text, unit, meant) in cases {
            assert_eq!(suggestion(text, unit).as_deref(), meant, "{text}");
        }
    }

    #[test]
    fn figures_for_people() {
        let cases = [
            (0.0, "V", "0 V"),
            (12.02, "V", "12.02 V"),
            (0.000_641_2, "A", "641.2 µA"),
            (-0.0025, "V", "-2.5 mV"),
            (2e-13, "A", "0.2 pA"),
            (0.47, "Ω", "470 mΩ"),
            (123_456.0, "", "123500"),
            (67.143_44, "°C", "67.14 °C"),
        ];
        for (figure, unit, text) in cases {
            assert_eq!(engineering(figure, unit, 4), text);
        }
    }

    proptest! {
        #![proptest_config(ProptestConfig::with_cases(4000))]

        #[test]
        fn numbers_are_read_as_the_standard_library_reads_them(text in "[+-]?[0-9]{1,22}(\\.[0-9]{0,22})?(e[+-]?[0-9]{1,2})?") {
            let expected: f64 = text.parse().unwrap();
            prop_assert_eq!(parse(&text, Unit::Volt), Ok(if expected == 0.0 { 0.0 } else { expected }));
        }

        #[test]
        fn a_prefix_is_an_exponent(mantissa in "[0-9]{1,20}\\.[0-9]{0,20}", which in 0usize..8) {
            let (exponent, prefix) = PREFIXES[which];
            let expected: f64 = format!("{mantissa}e{exponent}").parse().unwrap();
            prop_assert_eq!(parse(&format!("{mantissa}{prefix}"), Unit::Watt), Ok(expected));
        }

        #[test]
        fn no_text_panics(text in "\\PC*", bytes in proptest::collection::vec(any::<u8>(), 0..12)) {
            for unit in Unit::ALL {
                if let Ok(figure) = parse(&text, unit) {
                    prop_assert!(figure.is_finite());
                }
                let _ = parse_bytes(&bytes, unit);
                if let Some(better) = suggestion(&text, unit) {
                    prop_assert!(parse(&better, unit).is_ok());
                }
            }
        }

        #[test]
        fn what_is_shown_reads_back_within_its_digits(mantissa in 1.0f64..10.0, exponent in -13i32..12) {
            let figure = mantissa * 10f64.powi(exponent);
            let back = parse(&engineering(figure, "Ω", 6), Unit::Ohm).unwrap();
            prop_assert!((back / figure - 1.0).abs() < 6e-6);
        }
    }
}
