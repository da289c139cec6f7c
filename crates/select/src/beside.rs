//! The sides as they stand beside a node of amplifiers: what suits them, and with how much stress.

use crate::company::Sides;
use crate::grove::{Names, Node, Share};
use crate::problem::Ground;
use crate::sides::amplifier::AmplifierMark;
use crate::sides::{meet_power, meet_reference};
use crate::unbeaten::Choice;
use circuit::amplifier::AmplifierAtRail;
use std::ops::Range;

/// A side as it stands beside a node of amplifiers.
pub(crate) trait Beside {
    /// Stress that every choice has at least, whatever it adds itself.
    fn least_stress(&self) -> f64;

    /// A node beside the amplifiers; None where it holds no choice that may stand beside one of them.
    fn choice(&self, sides: &Sides<'_, '_>, node: u32) -> Option<Choice>;

    /// A few shares of which every choice of a node adds at least one.
    fn shares<'s>(&self, sides: &'s Sides<'_, '_>, node: u32) -> &'s [Share];

    /// The node is a choice made.
    fn is_made(&self, sides: &Sides<'_, '_>, node: u32) -> bool;

    /// What a node falls into.
    fn parts(&self, sides: &mut Sides<'_, '_>, node: u32) -> Range<u32>;
}

pub(crate) type AmplifierNode = Node<AmplifierAtRail, AmplifierMark>;

/// The power sides beside an amplifier node.
pub(crate) struct Powers<'g, 'p> {
    pub ground: &'g Ground<'p>,
    pub amp: AmplifierNode,
}

impl Beside for Powers<'_, '_> {
    fn least_stress(&self) -> f64 {
        self.amp.share.stress
    }

    fn choice(&self, sides: &Sides<'_, '_>, id: u32) -> Option<Choice> {
        let node = sides.powers.get(id);
        let meeting = meet_power(self.ground, &self.amp.figures, &node.figures)?;
        choice(id, &node.share, node.names, meeting.max(self.least_stress()))
    }

    fn shares<'s>(&self, sides: &'s Sides<'_, '_>, id: u32) -> &'s [Share] {
        sides.powers.shares(id)
    }

    fn is_made(&self, sides: &Sides<'_, '_>, id: u32) -> bool {
        sides.powers.get(id).size == 1
    }

    fn parts(&self, sides: &mut Sides<'_, '_>, id: u32) -> Range<u32> {
        sides.power_parts(id)
    }
}

/// The reference sides beside an amplifier node. Stress below the least of any power side is of no use.
pub(crate) struct References<'g, 'p> {
    pub ground: &'g Ground<'p>,
    pub amp: AmplifierNode,
    pub least_stress: f64,
}

impl Beside for References<'_, '_> {
    fn least_stress(&self) -> f64 {
        self.least_stress
    }

    fn choice(&self, sides: &Sides<'_, '_>, id: u32) -> Option<Choice> {
        let node = sides.references.get(id);
        let meeting = meet_reference(self.ground, &node.figures, &self.amp.figures)?;
        choice(id, &node.share, node.names, meeting.max(self.least_stress))
    }

    fn shares<'s>(&self, sides: &'s Sides<'_, '_>, id: u32) -> &'s [Share] {
        sides.references.shares(id)
    }

    fn is_made(&self, sides: &Sides<'_, '_>, id: u32) -> bool {
        sides.references.get(id).size == 1
    }

    fn parts(&self, sides: &mut Sides<'_, '_>, id: u32) -> Range<u32> {
        sides.reference_parts(id)
    }
}

fn choice(node: u32, share: &Share, names: Names, stress: f64) -> Option<Choice> {
    let stress = share.stress.max(stress);
    (!share.is_impossible()).then_some(Choice { node, share: Share { stress, ..*share }, names })
}
