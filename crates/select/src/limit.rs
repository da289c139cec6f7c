//! How much memory a search may take, and what it says when that is not enough.

use std::fmt;

/// Memory that a search may take for itself, bytes: with the catalogs of a very large shop, and a list
/// being moved to a larger place, the process stays under 1 GiB.
const MEMORY_LIMIT: usize = 560 << 20;

/// Why a search ended early.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum SearchError {
    /// The parts tie or balance so evenly that the list of what could still be first outgrew memory.
    TooLarge {
        /// How many sets of candidates were waiting.
        waiting: usize,
    },
}

impl fmt::Display for SearchError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::TooLarge { waiting } => write!(
                f,
                "the search holds {waiting} sets of candidates of which each could still be first, \
                 and would need more than {} MiB; pin a slot or tighten the sheet",
                MEMORY_LIMIT >> 20
            ),
        }
    }
}

impl std::error::Error for SearchError {}

/// Refuses to go on with `in_use` bytes and so many sets waiting.
pub(crate) fn check(in_use: usize, waiting: usize) -> Result<(), SearchError> {
    if in_use > MEMORY_LIMIT { Err(SearchError::TooLarge { waiting }) } else { Ok(()) }
}

/// Room for one more in a long list, made a quarter at a time: doubling would ask for three times the
/// memory of the list while it is moved.
pub(crate) fn make_room<T>(list: &mut Vec<T>, more: usize) {
    if list.capacity() - list.len() < more {
        list.reserve_exact(more.max(list.len() / 4 + 1024));
    }
}
