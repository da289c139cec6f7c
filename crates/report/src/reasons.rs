//! Reasons told in words: why nothing qualifies, why a part is not on the list, which blanks to fill.
//!
//! | module | what it tells |
//! |---|---|
//! | `words` | keys, parts and findings, as every reason names them |
//! | `nothing` | why nothing qualifies |
//! | `part` | why a part is not on the list |
//! | `gaps` | blank cells that are worth filling |

mod gaps;
mod nothing;
mod part;
mod words;

pub use gaps::gaps;
pub use nothing::{nothing, something};
pub use part::part;
