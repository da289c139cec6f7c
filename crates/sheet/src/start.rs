//! A rail sheet to begin with, made from the declarations of the keys.

use crate::keys::{self, Applies, Fallback, Key, Kind};
use std::fmt::Write as _;

/// Values for the keys that a sheet must give: those of a small rail.
static EXAMPLES: [(&Key, &str); 9] = [
    (&keys::RAIL_NAME, "\"New rail 5 V\""),
    (&keys::FEED_MIN_V, "9.0"),
    (&keys::FEED_NOMINAL_V, "11.0"),
    (&keys::FEED_MAX_V, "14.0"),
    (&keys::OUTPUT_VOLTAGE_V, "5.0"),
    (&keys::OUTPUT_TOLERANCE_PCT, "4"),
    (&keys::LOAD_MAX_A, "0.3"),
    (&keys::AMBIENT_MIN_C, "0"),
    (&keys::AMBIENT_MAX_C, "40"),
];

const INTRODUCTION: &str = "\
# A rail sheet: what one supply rail has to do. The figures are those of an example: put yours in place.
#
# A line `#key = …` is a key that may be left out, with what then holds, or in words if that is no value.
# Take the `#` away to say something else.
";

/// A sheet with a fixed output and a line for every key, each with its meaning. What must be given is
/// given as in an example; what need not is commented out.
pub fn starting_sheet() -> String {
    let mut text = String::from(INTRODUCTION);
    // TOML wants keys outside all sections before the first of them.
    let outside = keys::ALL.iter().filter(|key| key.section().is_empty());
    for key in outside.chain(keys::ALL.iter().filter(|key| !key.section().is_empty())) {
        let heading = format!("\n[{}]\n", key.section());
        if !key.section().is_empty() && !text.contains(&heading) {
            text += &heading;
        }
        push_key(&mut text, key);
    }
    text
}

fn push_key(text: &mut String, key: &Key) {
    let when = match key.applies {
        Applies::Always | Applies::FixedOutput => String::new(),
        Applies::AdjustableOutput => "; only with an adjustable output".to_owned(),
        Applies::With(other) => format!("; only with {}", other.name),
        Applies::Without(other) => format!("; only without {}", other.name),
    };
    // Writing to a text can't fail.
    let _ = writeln!(text, "\n# {}{when}\n#   {}", key.meaning, takes(key));
    let name = key.short_name();
    let example = EXAMPLES.iter().find(|(known, _)| *known == key).map(|(_, value)| *value);
    let _ = match (example, key.default_as_toml()) {
        (Some(value), _) => writeln!(text, "{name} = {value}"),
        (None, Some(value)) => writeln!(text, "#{name} = {value}"),
        (None, None) if matches!(key.fallback, Fallback::Required) => {
            writeln!(text, "#{name} = …")
        }
        (None, None) => writeln!(text, "#{name} = … (without it: {})", key.default_in_words()),
    };
}

/// What a key takes, in words for somebody who fills it in.
fn takes(key: &Key) -> String {
    match key.kind {
        Kind::Count(least) => format!("a whole number from {least} on"),
        _ => key.expects(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::shop::ShopFile;

    #[test]
    fn the_starting_sheet_is_sound() {
        let mut notices = Vec::new();
        let sheet =
            crate::read("rail.toml", &starting_sheet(), &ShopFile::empty(), &[], &mut notices);
        assert_eq!(notices, []);
        assert!(sheet.is_some());
    }

    #[test]
    fn every_key_has_a_line_and_those_with_a_default_can_be_taken_in() {
        let text = starting_sheet();
        for key in keys::ALL {
            let line = format!("\n#{} = ", key.short_name());
            let given = format!("\n{} = ", key.short_name());
            assert!(text.contains(&line) || text.contains(&given), "{}", key.name);
            let must = matches!((key.fallback, key.applies), (Fallback::Required, Applies::Always));
            assert!(!must || text.contains(&given), "{} must be given", key.name);
        }
        // Without the mark, every default of the usual kind is what it says.
        let taken_in: String = text
            .lines()
            .map(|line| match line.strip_prefix('#') {
                Some(key) if !key.starts_with(' ') && !key.contains('…') && !key.is_empty() => {
                    key
                }
                _ => line,
            })
            .filter(|line| !line.starts_with("lasts_s"))
            .collect::<Vec<_>>()
            .join("\n");
        let mut notices = Vec::new();
        crate::read("rail.toml", &taken_in, &ShopFile::empty(), &[], &mut notices);
        assert_eq!(notices, [], "{taken_in}");
    }
}
