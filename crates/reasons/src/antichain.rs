//! The least that fails: sets of checks of which none holds another.

use crate::check_set::Failing;

/// Sets of failing checks of which none lies within another, each with the least utilisation at which
/// it was found and where that was. What is found first stays where another is no better.
#[derive(Debug, Clone)]
pub(crate) struct Antichain<P>(Vec<(Failing, P)>);

impl<P: Copy> Antichain<P> {
    pub fn new() -> Self {
        Self(Vec::new())
    }

    /// Nothing that fails in this way or a worse one is news.
    pub fn covers(&self, failing: &Failing) -> bool {
        self.0.iter().any(|(known, _)| {
            known.set.is_within(failing.set)
                && (known.set != failing.set || known.worst <= failing.worst)
        })
    }

    pub fn insert(&mut self, failing: Failing, place: P) {
        if !self.covers(&failing) {
            self.0.retain(|(known, _)| !failing.set.is_within(known.set));
            self.0.push((failing, place));
        }
    }

    /// Something was found for which nothing fails.
    pub fn is_clear(&self) -> bool {
        self.0.first().is_some_and(|(failing, _)| failing.set.is_empty())
    }

    pub fn iter(&self) -> impl Iterator<Item = &(Failing, P)> {
        self.0.iter()
    }

    pub fn into_vec(self) -> Vec<(Failing, P)> {
        self.0
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::check_set::CheckSet;
    use circuit::check::Check;

    fn failing(checks: &[Check], worst: f64) -> Failing {
        Failing { set: CheckSet::of(checks), worst }
    }

    #[test]
    fn a_smaller_set_takes_the_place_of_larger_ones() {
        let mut least = Antichain::new();
        least.insert(failing(&[Check::Dropout, Check::NoLoad], 1.1), 1);
        least.insert(failing(&[Check::SwingHigh], 1.2), 2);
        least.insert(failing(&[Check::Dropout], 9.0), 3);
        let places: Vec<i32> = least.iter().map(|(_, place)| *place).collect();
        assert_eq!(places, [2, 3]);
        assert!(least.covers(&failing(&[Check::SwingHigh, Check::NoLoad], 1.0)));
        assert!(!least.covers(&failing(&[Check::SwingHigh], 1.1)));
        least.insert(failing(&[], 0.0), 4);
        assert!(least.is_clear() && least.iter().count() == 1);
    }
}
