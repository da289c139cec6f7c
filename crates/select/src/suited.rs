//! What the references add at least beside each amplifier, for searches that go on for long.
//!
//! Where one check decides, an amplifier refuses most references, and others than its neighbour does.
//! What references add at least to any candidate is then far too hopeful: the same references are walked
//! for every power side, only to be refused again. So what suits an amplifier is found out once, whatever
//! the power side: the references that nothing beats beside it, made from those of the box that it is a
//! part of. Every reference that suits it adds at least as much as one of them, in every figure.

use crate::beside::References;
use crate::company::Sides;
use crate::grove::Share;
use crate::limit::SearchError;
use crate::problem::Ground;
use crate::rest::Rest;
use crate::unbeaten::{Clearly, Unbeaten};
use std::collections::HashMap;

/// The references that suit the amplifier nodes that were asked for.
pub(crate) struct Suited {
    clearly: Clearly,
    by_amplifier: HashMap<u32, (Unbeaten, Rest)>,
}

impl Suited {
    pub fn new(ground: &Ground<'_>) -> Self {
        Self { clearly: Clearly::of(ground.problem), by_amplifier: HashMap::new() }
    }

    /// Finds out which references suit an amplifier node.
    ///
    /// # Errors
    /// [`SearchError::TooLarge`] where that would take more memory than it may.
    pub fn find(
        &mut self,
        ground: &Ground<'_>,
        sides: &mut Sides<'_, '_>,
        amplifier: u32,
    ) -> Result<(), SearchError> {
        let known = |id: &u32| !self.by_amplifier.contains_key(id);
        let path = std::iter::successors(Some(amplifier), |&id| sides.amplifiers.parent(id));
        let unknown: Vec<u32> = path.take_while(known).collect();
        for &id in unknown.iter().rev() {
            let above = sides.amplifiers.parent(id).and_then(|id| self.by_amplifier.get(&id));
            let amp = *sides.amplifiers.get(id);
            let references = References { ground, amp, least_stress: 0.0 };
            let above = above.map(|(unbeaten, _)| unbeaten);
            let unbeaten = Unbeaten::beside(sides, &references, above, &self.clearly, |_| false)?;
            let rest = Rest::of(unbeaten.choices().map(|choice| choice.share));
            self.by_amplifier.insert(id, (unbeaten, rest));
        }
        Ok(())
    }

    /// A few shares of which every reference that suits an amplifier node adds at least one; None where
    /// it was not asked for.
    pub fn shares(&self, amplifier: u32) -> Option<&[Share]> {
        self.by_amplifier.get(&amplifier).map(|(_, rest)| rest.shares())
    }
}
