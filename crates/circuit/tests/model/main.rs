//! The crate against the model page written down once more, and against trying every value.
//!
//! | module | what it holds |
//! |---|---|
//! | `parts` | random rails and parts |
//! | `page` | the formulas of the page, once more |
//! | `page_agrees` | every check and figure against them |
//! | `choices` | the values that are chosen, against trying every value |
//! | `bounds` | necessary conditions, and the joins of amplifiers |

mod bounds;
mod choices;
mod page;
mod page_agrees;
mod parts;
