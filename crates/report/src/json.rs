//! The shortlist as JSON, format 1.

use crate::shortlist::Shortlist;

/// The text of a JSON file: indented, ending in a line break.
///
/// # Errors
/// As serde_json does; values of this crate give it no reason to.
pub fn shortlist(list: &Shortlist<'_>) -> Result<Vec<u8>, serde_json::Error> {
    let mut text = serde_json::to_vec_pretty(list)?;
    text.push(b'\n');
    Ok(text)
}
