//! What is told about the rows of one file, and how much of it.

use super::MOST_NOTICES;
use notice::Notice;

/// Notices in the order of a file; those beyond [`MOST_NOTICES`] are only counted.
#[derive(Debug, Default)]
pub(crate) struct Told {
    pub(crate) kept: Vec<Notice>,
    pub(crate) more: usize,
}

impl Told {
    /// Keeps a notice, or only counts it where there are too many.
    pub(crate) fn tell(&mut self, notice: impl FnOnce() -> Notice) {
        if self.kept.len() < MOST_NOTICES {
            self.kept.push(notice());
        } else {
            self.more += 1;
        }
    }

    /// Takes everything out of `next`.
    pub(super) fn append(&mut self, next: &mut Told) {
        self.more += std::mem::take(&mut next.more);
        for notice in next.kept.drain(..) {
            self.tell(|| notice);
        }
    }

    /// Puts others in between at their lines, those about a row behind what was told of it before.
    pub(super) fn insert(&mut self, others: Told) {
        self.kept.extend(others.kept);
        self.kept.sort_by_key(|notice| notice.place.line);
        self.more += others.more + self.kept.len().saturating_sub(MOST_NOTICES);
        self.kept.truncate(MOST_NOTICES);
    }
}
