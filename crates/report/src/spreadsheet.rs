//! Texts in the cells of a spreadsheet.

use std::borrow::Cow;

/// A text as a cell that no spreadsheet runs as a formula: one that begins like a formula gets an
/// apostrophe before it. Numbers do not go through here, so `-0.03` stays a number.
///
/// Source: OWASP, "CSV Injection", for the characters that begin a formula.
///
/// ```
/// use report::spreadsheet::safe_text;
/// assert_eq!(safe_text("PN-140"), "PN-140");
/// assert_eq!(safe_text("=HYPERLINK(A1)"), "'=HYPERLINK(A1)");
/// ```
pub fn safe_text(text: &str) -> Cow<'_, str> {
    if text.starts_with(['=', '+', '-', '@', '\t', '\r']) {
        Cow::Owned(format!("'{text}"))
    } else {
        Cow::Borrowed(text)
    }
}
