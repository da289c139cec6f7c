//! The nearest of several names, for "did you mean".

/// Names longer than this are no slips of known ones, and costly to compare.
const LONGEST: usize = 64;

/// The name that `text` is probably meant to be: equal but for case, spaces and hyphens, or a slip of
/// at most a quarter of its letters away. Of equally near ones the first.
pub(crate) fn nearest<'n>(text: &str, names: impl IntoIterator<Item = &'n str>) -> Option<&'n str> {
    if text.is_empty() || text.len() > LONGEST {
        return None;
    }
    let text = plain(text);
    names
        .into_iter()
        .map(|name| (distance(&text, name), name))
        .filter(|&(d, name)| d <= allowed(name))
        .min_by_key(|&(d, _)| d)
        .map(|(_, name)| name)
}

/// How many slips lie between two names, case, spaces and hyphens aside.
pub(crate) fn slips(text: &str, name: &str) -> usize {
    distance(&plain(text), name)
}

fn distance(plain_text: &str, name: &str) -> usize {
    strsim::osa_distance(plain_text, &plain(name))
}

fn allowed(name: &str) -> usize {
    (name.chars().count() / 4).clamp(1, 3)
}

fn plain(text: &str) -> String {
    text.trim().to_lowercase().replace([' ', '-'], "_")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn slips_are_found_and_other_names_are_not() {
        let names = ["vz_v", "zzt_ohm", "iz_min_a", "status", "notes"];
        assert_eq!(nearest("VZ V", names), Some("vz_v"));
        assert_eq!(nearest("vz", names), None, "two of four letters are no slip");
        assert_eq!(nearest("zzt_ohms", names), Some("zzt_ohm"));
        assert_eq!(nearest("iz_mni_a", names), Some("iz_min_a"));
        assert_eq!(nearest("colour", names), None);
        assert_eq!(nearest(&"v".repeat(1000), names), None);
    }
}
