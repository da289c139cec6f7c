//! The shortlist for people: a table that fits the terminal, and below it what was covered, assumed,
//! left unchecked, and what to beware of.

mod columns;
mod layout;
pub(crate) mod sections;

use crate::figure::Pairs;
use crate::look::Look;
use crate::shortlist::Shortlist;

/// The whole text.
///
/// `lost` tells what combinations were lost to where nothing qualifies and the list itself does not
/// count them: what [`crate::shortlist::lost`] gives.
pub fn shortlist(
    list: &Shortlist<'_>,
    lost: Option<&Pairs<&'static str, String>>,
    look: &Look,
) -> String {
    let mut text = sections::request(list, look);
    text.push('\n');
    if list.candidates.is_empty() {
        text += &sections::nothing_qualifies(list, lost, look);
    } else {
        text += &layout::table(list, look);
        text.push('\n');
        text += &sections::combinations(list, look);
    }
    text += &sections::trust(list, look);
    text
}
