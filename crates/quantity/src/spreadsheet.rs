//! What spreadsheets make of figures, lists and names that they take for something else.
//!
//! A cell that a spreadsheet has changed can often not be changed back: `1:05` may have been `25:5`.
//! These functions recognise the usual shapes, so that a reader can say what happened.

/// The months in full, and as spreadsheets shorten them in the languages whose forms are distinct.
const MONTHS: [&str; 37] = [
    "january",
    "february",
    "march",
    "april",
    "june",
    "july",
    "august",
    "september",
    "october",
    "november",
    "december",
    "jan",
    "feb",
    "mar",
    "apr",
    "may",
    "jun",
    "jul",
    "aug",
    "sep",
    "sept",
    "oct",
    "nov",
    "dec",
    "mär",
    "mrz",
    "mai",
    "okt",
    "dez",
    "janv",
    "févr",
    "avr",
    "juin",
    "juil",
    "août",
    "déc",
    "mars",
];

/// Longer texts are no dates, and costly to look at.
const LONGEST: usize = 24;

/// The text looks like a date: `2024-05-01`, `1/5/2024`, `01.05.2024`, `5-May`, `1. Mai`.
///
/// Three bare numbers are enough, so this is for cells that hold figures; see [`is_date_of_a_name`].
pub fn is_date(text: &str) -> bool {
    let Some((numbers, months)) = pieces_of_a_date(text) else { return false };
    numbers.len() == 3 && months == 0 || months == 1 && matches!(numbers.len(), 1 | 2)
}

/// A name looks like a date that was made of it. Names as `1-2-3` are left alone: three numbers are
/// a date only where one of them can be a year.
///
/// ```
/// use quantity::spreadsheet::is_date_of_a_name;
/// assert!(is_date_of_a_name("1-Mar"));
/// assert!(is_date_of_a_name("2003-02-01"));
/// assert!(!is_date_of_a_name("1-2-3"));
/// assert!(!is_date_of_a_name("2N3055"));
/// ```
pub fn is_date_of_a_name(text: &str) -> bool {
    let Some((numbers, months)) = pieces_of_a_date(text) else { return false };
    let is_year = |n: &&str| n.len() == 4 && (n.starts_with("19") || n.starts_with("20"));
    match months {
        0 => numbers.len() == 3 && numbers.iter().any(is_year),
        1 => matches!(numbers.len(), 1 | 2) && numbers.iter().all(|n| n.len() <= 2 || is_year(n)),
        _ => false,
    }
}

/// The numbers of a text that holds nothing but numbers and names of months, and how many of the
/// latter it holds.
fn pieces_of_a_date(text: &str) -> Option<(Vec<&str>, usize)> {
    if text.len() > LONGEST || !text.bytes().any(|b| b.is_ascii_digit()) {
        return None;
    }
    let pieces = text.split(['-', '/', '.', ' ']).filter(|piece| !piece.is_empty());
    let mut numbers = Vec::new();
    let mut months = 0;
    for piece in pieces {
        if piece.bytes().all(|b| b.is_ascii_digit()) {
            numbers.push(piece);
        } else if is_name_of_month(piece) {
            months += 1;
        } else if !is_clock(piece) {
            return None;
        }
    }
    Some((numbers, months))
}

/// Three letters that a month begins with in English, in any case.
#[inline]
pub fn is_month(letters: [u8; 3]) -> bool {
    matches!(
        &letters.map(|letter| letter.to_ascii_lowercase()),
        b"jan"
            | b"feb"
            | b"mar"
            | b"apr"
            | b"may"
            | b"jun"
            | b"jul"
            | b"aug"
            | b"sep"
            | b"oct"
            | b"nov"
            | b"dec"
    )
}

fn is_name_of_month(piece: &str) -> bool {
    let piece = piece.to_lowercase();
    MONTHS.contains(&piece.as_str())
}

/// The time behind a date: `00:00:00`.
fn is_clock(piece: &str) -> bool {
    piece.len() >= 5 && piece.bytes().all(|b| b.is_ascii_digit() || b == b':')
}

/// A day and month, `01.05` or `01.05.`, as some spreadsheets make of `1.5`: nobody writes a nought
/// before the 1.
pub fn is_day_and_month(text: &[u8]) -> bool {
    let (day, month) = match text {
        [b'0', day, b'.', m, n] | [b'0', day, b'.', m, n, b'.'] => (*day, [*m, *n]),
        _ => return false,
    };
    day.is_ascii_digit() && matches!(month, [b'0', b'1'..=b'9'] | [b'1', b'0'..=b'2'])
}

/// A time of day, as spreadsheets make of `25:5`: `1:05`, `01:05:00`, `1:05 AM`. Where neither hours
/// nor minutes show it by a nought in front, only seconds or the half of the day do.
pub fn is_time_of_day(text: &str) -> bool {
    if text.len() > LONGEST {
        return false;
    }
    let text = text.trim();
    let lower = text.to_ascii_lowercase();
    let half = lower.strip_suffix("am").or_else(|| lower.strip_suffix("pm")).map(str::trim_end);
    let parts: Vec<&str> = half.unwrap_or(&lower).split(':').collect();
    let is_part = |p: &&str| (1..=3).contains(&p.len()) && p.bytes().all(|b| b.is_ascii_digit());
    let has_nought = |p: &&str| p.len() == 2 && p.starts_with('0');
    if !parts.iter().all(is_part) {
        return false;
    }
    match parts.as_slice() {
        [_, minutes] => minutes.len() <= 2 && (half.is_some() || parts.iter().any(has_nought)),
        [_, minutes, seconds] => minutes.len() == 2 && seconds.len() == 2,
        _ => false,
    }
}

/// A power of ten as spreadsheets write it, `1E+04`, `1.23E-05`: a large `E`, a sign, two digits.
/// They cut digits to show it so, and make it of names too.
#[inline]
pub fn is_power(text: &[u8]) -> bool {
    let [digits @ .., b'E', b'+' | b'-', tens, ones] = text else { return false };
    let (first, rest) = match digits {
        [b'-' | b'+', first, rest @ ..] | [first, rest @ ..] => (first, rest),
        [] => return false,
    };
    first.is_ascii_digit()
        && tens.is_ascii_digit()
        && ones.is_ascii_digit()
        && rest.iter().all(|b| b.is_ascii_digit() || matches!(b, b'.' | b','))
}

/// What a formula that failed leaves behind, and a column too narrow for its figure: `#N/A`, `####`.
pub fn is_failure(text: &str) -> bool {
    const FAILURES: [&str; 7] =
        ["#N/A", "#NAME?", "#VALUE!", "#REF!", "#DIV/0!", "#NUM!", "#NULL!"];
    let is_narrow = || text.len() >= 3 && text.bytes().all(|b| b == b'#');
    text.starts_with('#') && (FAILURES.contains(&text) || is_narrow())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn dates_are_recognised_in_the_forms_of_several_countries() {
        for text in [
            "2024-05-01",
            "1/5/2024",
            "01.05.2024",
            "5-May",
            "May-05",
            "1. Mai",
            "01. Mrz",
            "3-Okt",
            "12 févr.",
            "2024-05-01 00:00:00",
        ] {
            assert!(is_date(text), "{text}");
        }
        for text in ["5.1", "5-10", "12", "TO-220", "5 mA", "-5", "1:5"] {
            assert!(!is_date(text), "{text}");
        }
    }

    #[test]
    fn a_name_is_a_date_only_with_a_month_or_a_year() {
        for text in ["1-Mar", "Mar-01", "01.02.2003", "2003-02-01", "5-Dez", "Oct-2004"] {
            assert!(is_date_of_a_name(text), "{text}");
        }
        for text in ["1-2-3", "E-C-B", "2N3055", "DEC-300", "MARK-5", "10-12", "SO-8", "74-1-1"] {
            assert!(!is_date_of_a_name(text), "{text}");
        }
    }

    #[test]
    fn times_powers_and_failures() {
        for text in ["1:05", "01:30", "19:40:00", "1:42 AM", "25:05:00"] {
            assert!(is_time_of_day(text), "{text}");
        }
        for text in ["1:5", "10:10", "3:1000", "0.1:500", "1:0.42", "100:05.5", "1:1:1"] {
            assert!(!is_time_of_day(text), "{text}");
        }
        for text in ["1E+04", "1.23E-05", "-2E+10", "1,5E+03"] {
            assert!(is_power(text.as_bytes()), "{text}");
        }
        for text in ["1e-5", "1E4", "1e+04", "E+04", "5E-3", "BE+04"] {
            assert!(!is_power(text.as_bytes()), "{text}");
        }
        assert!(is_failure("#N/A") && is_failure("####") && !is_failure("#1") && !is_failure("#"));
        assert!(is_day_and_month(b"01.05") && is_day_and_month(b"09.12."));
        assert!(
            !is_day_and_month(b"1.05") && !is_day_and_month(b"01.13") && !is_day_and_month(b"01.5")
        );
    }
}
