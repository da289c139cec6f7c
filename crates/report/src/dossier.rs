//! A result as a set of tables that go into one file, a workbook or Markdown.
//!
//! | module | what it holds |
//! |---|---|
//! | [`shortlist`] | ranking, order lines of one candidate, notes, every check |
//! | [`designs`] | answers, order lines, notes, every check, conditions of designs |
//! | [`notes`] | what was assumed, what is not checked, cautions, hashes |

pub mod designs;
pub mod notes;
pub mod shortlist;

use crate::figure::Figure;
use crate::table::Cell;

/// What a check leaves, in its unit; blank where both sides are infinite.
fn left(asked: Figure, allowed: Figure) -> Cell {
    let left = allowed.0 - asked.0;
    if left.is_nan() { Cell::Blank } else { left.into() }
}
