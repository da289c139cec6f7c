//! A candidate's short id.

use crate::hash::HashOf;

/// Every id begins with this letter, so that it can't be taken for a rank.
const LETTER: char = 'k';

/// Hexadecimal digits behind the letter: 28 bits, enough for lists that people read.
const DIGITS: usize = 7;

/// The id of a candidate, from its parts and values alone: the same on every machine, whatever else
/// the catalogs hold.
///
/// `parts` are (slot, maker, part) of the slots that have a part, `values` the resistances by their
/// names in results, Ω.
pub fn id<'a>(
    parts: impl Iterator<Item = (&'a str, &'a str, &'a str)>,
    values: impl Iterator<Item = (&'a str, f64)>,
) -> String {
    // No name holds a zero byte that a spreadsheet could have written, so fields stay apart.
    let mut text = String::new();
    for (slot, maker, part) in parts {
        text.extend([slot, "\0", maker, "\0", part, "\n"]);
    }
    for (name, ohm) in values {
        text.extend([name, "\0", &ohm.to_string(), "\n"]);
    }
    let hex = HashOf(text.as_bytes()).hex();
    std::iter::once(LETTER).chain(hex.chars().take(DIGITS)).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn of(maker: &str, part: &str, rz: f64) -> String {
        id([("zener", maker, part)].into_iter(), [("rz_ohm", rz)].into_iter())
    }

    #[test]
    fn parts_and_values_alone_make_the_id() {
        let first = of("Brindlow", "ZQ5V6", 3300.0);
        assert_eq!(first, of("Brindlow", "ZQ5V6", 3300.0));
        assert_ne!(first, of("Wexcombe", "ZQ5V6", 3300.0));
        assert_ne!(first, of("Brindlow", "ZQ5V6", 2700.0));
        assert_ne!(of("A", "BC", 1.0), of("AB", "C", 1.0));
    }

    #[test]
    fn an_id_is_no_rank() {
        let id = of("Brindlow", "ZQ5V6", 3300.0);
        assert_eq!(id.len(), 1 + DIGITS);
        assert!(id.starts_with(|c: char| c.is_ascii_alphabetic()));
        assert!(id.chars().skip(1).all(|c| matches!(c, '0'..='9' | 'a'..='f')));
    }
}
