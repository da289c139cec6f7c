//! Words in pictures.

use quantity::notation::engineering;

/// A text as XML can hold it: characters that no XML file may hold, or that act on a reader, are replaced.
///
/// Source: W3C, Extensible Markup Language 1.0, production 2.
pub(crate) fn clean(text: &str) -> String {
    let is_xml = |c| {
        matches!(c, '\t' | '\n' | '\r' | '\u{20}'..='\u{d7ff}' | '\u{e000}'..='\u{fffd}')
            || c >= '\u{10000}'
    };
    // Control characters that XML lets through, and marks that turn the direction of writing.
    let acts = |c| {
        matches!(c, '\u{7f}'..='\u{9f}' | '\u{200e}' | '\u{200f}' | '\u{202a}'..='\u{202e}'
            | '\u{2066}'..='\u{2069}')
    };
    let allowed = |c: char| is_xml(c) && !acts(c);
    text.chars().map(|c| if allowed(c) { c } else { '\u{fffd}' }).collect()
}

/// A name cut to so many characters, with a sign that it was.
pub(crate) fn shortened(name: &str, most: usize) -> String {
    if name.chars().count() <= most {
        return name.to_owned();
    }
    name.chars().take(most.saturating_sub(1)).chain(['…']).collect()
}

/// About how wide a text of the usual size comes out, in units. Typefaces differ; this is on the wide
/// side of most.
pub(crate) fn width(text: &str) -> f64 {
    let wide = |c: char| match c {
        'i' | 'l' | 'j' | '.' | ',' | ':' | ';' | '\'' | '|' | 'I' => 3.4,
        'm' | 'w' | 'M' | 'W' | '…' => 10.0,
        'A'..='Z' | 'Ω' | '%' => 8.0,
        ' ' | '(' | ')' | '-' | 't' | 'f' | 'r' => 4.6,
        _ => 6.6,
    };
    text.chars().map(wide).sum()
}

/// Volts, to four digits.
pub(crate) fn volts(v: f64) -> String {
    engineering(v, "V", 4)
}

/// Amperes, to three digits.
pub(crate) fn amps(a: f64) -> String {
    engineering(a, "A", 3)
}

/// Degrees to the nearest whole one.
pub(crate) fn degrees(c: f64) -> String {
    if c.is_finite() { format!("{c:.0} °C") } else { format!("{c} °C") }
}

/// A share in percent.
pub(crate) fn percent(share: f64) -> String {
    if share.is_finite() { format!("{:.0} %", share * 100.0) } else { "∞".to_owned() }
}

/// Moves labels apart so that each has `gap` units, keeping them near where they belong and within
/// `low … high`. Takes places of which each is at least the one before; gives them in the same order.
pub(crate) fn apart(wanted: &[f64], gap: f64, low: f64, high: f64) -> Vec<f64> {
    let mut placed: Vec<f64> = Vec::with_capacity(wanted.len());
    for &place in wanted {
        let least = placed.last().map_or(low, |last| last + gap);
        placed.push(place.max(least));
    }
    let mut most = high;
    for place in placed.iter_mut().rev() {
        *place = place.min(most);
        most = *place - gap;
    }
    placed
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn characters_that_xml_forbids_are_replaced() {
        assert_eq!(clean("a\u{1b}[31m\u{0}b\u{fffe}"), "a\u{fffd}[31m\u{fffd}b\u{fffd}");
        assert_eq!(clean("4.7 kΩ <&>"), "4.7 kΩ <&>");
        assert_eq!(clean("a\u{202e}b"), "a\u{fffd}b");
    }

    #[test]
    fn long_names_are_cut_between_characters() {
        assert_eq!(shortened("ΩΩΩΩΩ", 3), "ΩΩ…");
        assert_eq!(shortened("DNW60", 5), "DNW60");
    }

    #[test]
    fn labels_keep_their_order_and_their_gap() {
        assert_eq!(apart(&[10.0, 11.0, 12.0], 5.0, 0.0, 100.0), [10.0, 15.0, 20.0]);
        assert_eq!(apart(&[90.0, 99.0, 100.0], 5.0, 0.0, 100.0), [90.0, 95.0, 100.0]);
        assert_eq!(apart(&[], 5.0, 0.0, 100.0), [0.0; 0]);
    }
}
