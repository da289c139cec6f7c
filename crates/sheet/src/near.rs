//! The nearest known name for a misspelt one.

use strsim::osa_distance;

/// Longer names than this are no slips of the finger, and comparing them would take long.
const LONGEST: usize = 60;

/// A name in another section than the one written is as far off as one wrong letter.
const OTHER_SECTION: usize = 1;

/// The nearest of `names`; None where none is near. Case counts for nothing, `-` and a space are
/// taken as `_`. The first of several equally near ones is it.
pub(crate) fn nearest<'a>(
    written: &str,
    names: impl IntoIterator<Item = &'a str>,
) -> Option<&'a str> {
    pick(written, names, distance)
}

/// The nearest of dotted `keys`: near as a whole, or in its last part alone (`min_v` outside its
/// section).
pub(crate) fn nearest_key<'a>(
    written: &str,
    keys: impl IntoIterator<Item = &'a str>,
) -> Option<&'a str> {
    pick(written, keys, |written, key| {
        let whole = distance(written, key);
        let last = distance(last_part(written), last_part(key)).map(|d| d + OTHER_SECTION);
        [whole, last].into_iter().flatten().min()
    })
}

fn pick<'a>(
    written: &str,
    names: impl IntoIterator<Item = &'a str>,
    distance: impl Fn(&str, &str) -> Option<usize>,
) -> Option<&'a str> {
    if written.chars().count() > LONGEST {
        return None;
    }
    let written = folded(written);
    let near = |name: &'a str| distance(&written, &folded(name)).map(|distance| (distance, name));
    let (_, name) = names.into_iter().filter_map(near).min_by_key(|(distance, _)| *distance)?;
    Some(name)
}

/// How many letters are wrong; None beyond a third of those written (one is always allowed).
fn distance(written: &str, name: &str) -> Option<usize> {
    let (length, name_length) = (written.chars().count(), name.chars().count());
    let allowed = (length / 3).max(1);
    // Every letter too many or too few is a wrong one; most names need no closer look.
    if length.abs_diff(name_length) > allowed {
        return None;
    }
    Some(osa_distance(written, name)).filter(|wrong| *wrong <= allowed)
}

fn last_part(name: &str) -> &str {
    name.rsplit('.').next().unwrap_or_default()
}

fn folded(name: &str) -> String {
    name.to_lowercase().replace(['-', ' '], "_")
}
