//! How an input is altered: bytes, numbers, cells, lines, and words that mean something to a reader.

use catalog::Kind;
use fastrand::Rng;

/// No input grows beyond this, in bytes.
pub const LONGEST: usize = 64 * 1024;

/// Texts that readers of numbers, tables and TOML stumble on.
const AWKWARD: [&str; 64] = [
    "NaN",
    "nan",
    "inf",
    "-inf",
    "Infinity",
    "1e999999999",
    "-1e999999999",
    "1e-999999999",
    "1e308",
    "1.7976931348623157e308",
    "5e-324",
    "4.9e-325",
    "2.2250738585072014e-308",
    "0",
    "-0",
    "-0.0",
    "-1",
    "0x10",
    "1_000",
    "1,5",
    "1.5.5",
    ".",
    "+",
    "-",
    "e5",
    "1e",
    "18446744073709551616",
    "9007199254740993",
    "99999999999999999999999999999999999999999999",
    "4k7",
    "R47",
    "47R",
    "4K7",
    "1M0",
    "R",
    "k",
    "5 V",
    "5 mA",
    "5 °C",
    "2.1 mV/°C",
    "1 Ω",
    "µ",
    "1:2;3:4",
    "1:2;1:3",
    ";",
    ":",
    "1:",
    ":1",
    "\"",
    "\"\"",
    "\r",
    "\r\n",
    "\u{feff}",
    "\u{202e}",
    "\u{0}",
    "\u{1b}[31m",
    "[[",
    "]]",
    "{}",
    "=",
    "#",
    "'''",
    "\"\"\"",
    "2026-12-01",
];

/// Bytes that are no UTF-8, or begin something that does not end.
const NO_TEXT: [&[u8]; 4] = [b"\xff", b"\xc3", b"\xed\xa0\x80", b"\xf0\x9f"];

/// What a reader knows by name: columns of catalogs and keys of sheets.
fn known_word(dice: &mut Rng) -> String {
    if dice.bool() {
        let columns = dice.choice(Kind::ALL).map(Kind::columns).unwrap_or_default();
        return dice.choice(columns).map(|column| column.name.to_owned()).unwrap_or_default();
    }
    let keys: Vec<&str> = sheet::keys::ALL.iter().map(|key| key.name).collect();
    dice.choice(keys).unwrap_or_default().to_owned()
}

/// Alters an input in one place, or a few. `other` is another input, to take pieces from.
pub fn altered(input: &[u8], other: &[u8], dice: &mut Rng) -> Vec<u8> {
    let mut text = input.to_vec();
    alter(&mut text, other, dice);
    // Many changes at once are mostly refused at the first; one or two get further.
    while dice.u8(0..5) < 2 {
        alter(&mut text, other, dice);
    }
    text.truncate(LONGEST);
    text
}

fn alter(text: &mut Vec<u8>, other: &[u8], dice: &mut Rng) {
    let (from, to) = range(text.len(), dice);
    match dice.u8(0..45) / 4 {
        0 => {
            let bit = 1 << dice.u8(0..8);
            text.iter_mut().skip(from).take(1).for_each(|byte| *byte ^= bit);
        }
        1 => replace(text, from, to, b""),
        2 => replace(text, from, from, &[dice.u8(..)]),
        3 => {
            let piece = text.get(from..to).unwrap_or_default().to_vec();
            replace(text, from, from, &piece);
        }
        4 => {
            let (begin, end) = range(other.len(), dice);
            replace(text, from, to, other.get(begin..end).unwrap_or_default());
        }
        5 => {
            let word = dice.choice(AWKWARD).unwrap_or_default();
            replace(text, from, from, word.as_bytes());
        }
        6 => replace(text, from, from, dice.choice(NO_TEXT).unwrap_or_default()),
        7 => replace(text, from, from, known_word(dice).as_bytes()),
        8 => {
            // A cell or value becomes an awkward one.
            let (begin, end) = around(text, from, |b| !b",;:=\n[]{}\"".contains(&b));
            let word = dice.choice(AWKWARD).unwrap_or_default();
            replace(text, begin, end, word.as_bytes());
        }
        9 => {
            // A number becomes another that is as long or much longer.
            let (begin, end) = around(text, from, |b| b.is_ascii_digit());
            let digits: String = (0..dice.usize(1..24)).map(|_| dice.digit(10)).collect();
            replace(text, begin, end, digits.as_bytes());
        }
        10 => {
            // A line twice, elsewhere.
            let (begin, end) = around(text, from, |b| b != b'\n');
            let mut line = text.get(begin..end).unwrap_or_default().to_vec();
            line.push(b'\n');
            let (_, place) = around(text, to, |b| b != b'\n');
            replace(text, (place + 1).min(text.len()), (place + 1).min(text.len()), &line);
        }
        _ => {
            // A piece many times over: depth and width.
            let piece = text.get(from..to).unwrap_or_default();
            let piece = piece.get(..piece.len().min(16)).unwrap_or_default();
            let many = piece.repeat(dice.usize(2..2000));
            let room = LONGEST.saturating_sub(text.len());
            replace(text, from, from, many.get(..many.len().min(room)).unwrap_or_default());
        }
    }
}

/// A short range within `length`, mostly of a few bytes.
fn range(length: usize, dice: &mut Rng) -> (usize, usize) {
    let from = dice.usize(0..=length);
    let most = if dice.u8(0..8) == 0 { 4096 } else { 12 };
    (from, (from + dice.usize(0..=most)).min(length))
}

/// The bytes round `at` that belong together.
fn around(text: &[u8], at: usize, belongs: impl Fn(u8) -> bool) -> (usize, usize) {
    let at = at.min(text.len());
    let (before, after) = text.split_at(at);
    let begin = before.iter().rposition(|b| !belongs(*b)).map_or(0, |n| n + 1);
    let end = after.iter().position(|b| !belongs(*b)).map_or(text.len(), |n| at + n);
    (begin, end)
}

fn replace(text: &mut Vec<u8>, from: usize, to: usize, with: &[u8]) {
    let from = from.min(text.len());
    let to = to.clamp(from, text.len());
    text.splice(from..to, with.iter().copied());
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_seed_gives_the_same_inputs_again() {
        let inputs = |seed| {
            let mut dice = Rng::with_seed(seed);
            (0..200)
                .map(|_| altered(b"part,cost\nA,1\n", b"[rail]\n", &mut dice))
                .collect::<Vec<_>>()
        };
        assert_eq!(inputs(1), inputs(1));
        assert_ne!(inputs(1), inputs(2));
    }

    #[test]
    fn no_input_grows_without_limit() {
        let mut dice = Rng::with_seed(3);
        let mut text = b"a,b\n".to_vec();
        for _ in 0..2000 {
            text = altered(&text, b"x,y\n", &mut dice);
            assert!(text.len() <= LONGEST);
        }
    }
}
