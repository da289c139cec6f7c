//! How much changes: the order of changes.
//!
//! Of two ways to mend a design the smaller is the one that, compared item by item in this order,
//! has less:
//!
//! 1. further parts: slots that get another part although theirs was not gone;
//! 2. changed parts, the replacement among them, that are not known to have the package of the part
//!    before;
//! 3. changed parts of the same package whose pinout is not known to be the same;
//! 4. resistors of another value.

use std::ops::Add;

/// How much changes; less is smaller.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Default)]
pub struct Extent {
    /// Parts that change beside the replacement of the one that is gone.
    pub further_parts: u8,
    /// Changed parts, the replacement among them, of another package, or of one that is not known to
    /// be the same.
    pub other_packages: u8,
    /// Changed parts of the same package whose pinout is another, or not known to be the same.
    pub other_pinouts: u8,
    /// Resistors of another value: 0 to 3.
    pub values: u8,
}

impl Add for Extent {
    type Output = Extent;

    fn add(self, other: Extent) -> Extent {
        Extent {
            further_parts: self.further_parts + other.further_parts,
            other_packages: self.other_packages + other.other_packages,
            other_pinouts: self.other_pinouts + other.other_pinouts,
            values: self.values + other.values,
        }
    }
}

impl Extent {
    /// A part that changes: `further` where the one before it was not gone.
    pub fn of_part(further: bool, board: Board) -> Extent {
        Extent {
            further_parts: u8::from(further),
            other_packages: u8::from(!board.keeps_package()),
            other_pinouts: u8::from(board.keeps_package() && board != Board::Same),
            values: 0,
        }
    }

    /// So many resistors of another value.
    pub fn of_values(changed: u8) -> Extent {
        Extent { values: changed, ..Extent::default() }
    }
}

/// What another part does to the board.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Board {
    /// The same package and pinout.
    Same,
    /// The same package; the pinouts differ.
    OtherPinout,
    /// The same package; a pinout is blank.
    PinoutUnknown,
    /// Another package.
    OtherPackage,
    /// A package is blank.
    Unknown,
    /// There was no part in this place.
    Added,
    /// There is no part in this place any more.
    Removed,
}

impl Board {
    /// Compares two parts by what their rows say; None: blank. A part without a pinout of its own, as
    /// a resistor or a heatsink, is told by its package alone: `has_pinout` false.
    ///
    /// ```
    /// use substitute::change::Board;
    /// let of = |a, b| Board::between((Some("TO-220"), a), (Some("TO-220"), b), true);
    /// assert_eq!(of(Some("B-C-E"), Some("B-C-E")), Board::Same);
    /// assert_eq!(of(Some("B-C-E"), None), Board::PinoutUnknown);
    /// assert_eq!(Board::between((None, None), (None, None), true), Board::Unknown);
    /// ```
    pub fn between(
        was: (Option<&str>, Option<&str>),
        is: (Option<&str>, Option<&str>),
        has_pinout: bool,
    ) -> Board {
        let ((Some(package_was), pinout_was), (Some(package_is), pinout_is)) = (was, is) else {
            return Board::Unknown;
        };
        if package_was != package_is {
            return Board::OtherPackage;
        }
        match (pinout_was, pinout_is) {
            _ if !has_pinout => Board::Same,
            (Some(was), Some(is)) if was == is => Board::Same,
            (Some(_), Some(_)) => Board::OtherPinout,
            _ => Board::PinoutUnknown,
        }
    }

    /// The package is known to be the same.
    pub fn keeps_package(self) -> bool {
        matches!(self, Board::Same | Board::OtherPinout | Board::PinoutUnknown)
    }

    /// The word used in results.
    pub const fn name(self) -> &'static str {
        match self {
            Board::Same => "same-package-and-pinout",
            Board::OtherPinout => "same-package-other-pinout",
            Board::PinoutUnknown => "same-package-pinout-unknown",
            Board::OtherPackage => "other-package",
            Board::Unknown => "unknown",
            Board::Added => "added",
            Board::Removed => "removed",
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_further_part_is_more_than_any_footprint_and_that_more_than_any_values() {
        let further = Extent::of_part(true, Board::Same);
        let replaced = Extent::of_part(false, Board::OtherPackage) + Extent::of_values(3);
        let pinout = Extent::of_part(false, Board::PinoutUnknown) + Extent::of_values(3);
        assert!(further > replaced);
        assert!(replaced > pinout);
        assert!(pinout > Extent::of_values(3));
    }

    #[test]
    fn a_blank_is_never_a_part_that_drops_in() {
        let blank = Board::between((Some("SO-8"), Some("std")), (None, Some("std")), true);
        assert_eq!(blank, Board::Unknown);
        assert!(!blank.keeps_package());
        let resistor = Board::between((Some("0207"), None), (Some("0207"), None), false);
        assert_eq!(resistor, Board::Same);
    }
}
