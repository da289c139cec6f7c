//! Life-cycle words: of catalogs, of the sheets that let parts in by them, and of results.

use std::fmt;

/// Where a part stands in its life.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Default)]
pub enum Status {
    /// In production.
    Active,
    /// Still made, but its maker advises against new designs.
    NotRecommended,
    /// Last orders are taken.
    LastBuy,
    /// No longer made.
    Obsolete,
    /// The catalog doesn't say.
    #[default]
    Unknown,
}

impl Status {
    /// Every status.
    pub const ALL: [Status; 5] = [
        Status::Active,
        Status::NotRecommended,
        Status::LastBuy,
        Status::Obsolete,
        Status::Unknown,
    ];

    /// The words of catalogs and sheets, in the order of [`Status::ALL`].
    pub const WORDS: [&'static str; 5] =
        ["active", "not-recommended", "last-buy", "obsolete", "unknown"];

    /// The word used in catalogs, sheets and results.
    pub const fn name(self) -> &'static str {
        Self::WORDS[self as usize]
    }

    /// The status of this name, in any case.
    pub fn named(name: &str) -> Option<Status> {
        Status::ALL.into_iter().find(|s| s.name().eq_ignore_ascii_case(name))
    }
}

impl fmt::Display for Status {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.name())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_lead_back() {
        for status in Status::ALL {
            assert_eq!(Status::named(&status.name().to_uppercase()), Some(status));
        }
        assert_eq!(Status::named("retired"), None);
    }
}
