//! The three sides together: their trees of choices, and what each has learned of the others.

use crate::candidate::Candidate;
use crate::grove::{Grove, Share};
use crate::problem::Ground;
use crate::rest::Rest;
use crate::score::score;
use crate::sides::amplifier::{AmplifierMark, AmplifierSide};
use crate::sides::power::{Mount, PowerMark, PowerNode, PowerSide};
use crate::sides::reference::{ReferenceFigures, ReferenceNode, ReferenceSide};
use crate::sides::{meet_power, meet_reference};
use circuit::amplifier::AmplifierAtRail;
use circuit::merit;
use circuit::slot::Slot;
use std::ops::Range;

/// The node with all choices of a side.
pub(crate) const ROOT: u32 = 0;

/// The trees of the three sides.
pub(crate) struct Sides<'g, 'p> {
    ground: &'g Ground<'p>,
    pub references: Grove<ReferenceSide<'g, 'p>>,
    pub amplifiers: Grove<AmplifierSide>,
    pub powers: Grove<PowerSide<'g, 'p>>,
    pub rest: RestOfSides,
}

/// What sides that have not been looked into add at least.
pub(crate) struct RestOfSides {
    pub references: Rest,
    amplifiers: Rest,
    /// References and amplifiers together.
    pub both: Rest,
    /// How many reference nodes there will be when it is worth while to look at them again.
    next_look: usize,
}

/// So many reference nodes before the first look.
const FIRST_LOOK: usize = 512;

impl<'g, 'p> Sides<'g, 'p> {
    pub fn new(ground: &'g Ground<'p>) -> Self {
        let amplifiers = AmplifierSide::new(ground);
        let ((references, rest), powers) = rayon::join(
            || {
                let side = ReferenceSide::new(ground, &amplifiers);
                let references = Rest::of(side.shares());
                let amplifiers = Rest::of(amplifiers.shares());
                let both = references.with(&amplifiers);
                (side, RestOfSides { references, amplifiers, both, next_look: FIRST_LOOK })
            },
            || PowerSide::new(ground, &amplifiers),
        );
        Self {
            ground,
            references: Grove::new(references),
            amplifiers: Grove::new(amplifiers),
            powers: Grove::new(powers),
            rest,
        }
    }

    /// The nodes with all choices of reference, amplifier and power side; None where a side has none.
    pub fn roots(&mut self) -> Option<[u32; 3]> {
        Some([self.references.root()?, self.amplifiers.root()?, self.powers.root()?])
    }

    /// The parts of a reference node, but for those that no amplifier is found for.
    pub fn reference_parts(&mut self, id: u32) -> Range<u32> {
        let ground = self.ground;
        let amplifiers = &mut self.amplifiers.growth;
        let stands = |child: &ReferenceNode| {
            amplifiers.any(|amp| meet_reference(ground, &child.figures, amp).is_some())
        };
        let parts = self.references.children(id, stands);
        // Whenever references have grown by half, what they add at least is looked up again.
        if self.references.count() >= self.rest.next_look {
            self.learn();
        }
        parts
    }

    /// The parts of an amplifier node, but for those that no reference suits.
    pub fn amplifier_parts(&mut self, id: u32) -> Range<u32> {
        let ground = self.ground;
        let references = &mut self.references;
        self.amplifiers
            .children(id, |child| child.size > 1 || suits_any(ground, references, &child.figures))
    }

    /// The parts of a power node, but for those that no amplifier drives.
    pub fn power_parts(&mut self, id: u32) -> Range<u32> {
        let ground = self.ground;
        let amplifiers = &mut self.amplifiers.growth;
        // A mounting is driven as its transistor is.
        let is_mounting = self.powers.get(id).decided.has(Slot::Pass);
        self.powers.children(id, |child: &PowerNode| {
            is_mounting || amplifiers.any(|amp| meet_power(ground, amp, &child.figures).is_some())
        })
    }

    /// Takes in what has become known of the references.
    pub fn learn(&mut self) {
        self.rest.next_look = (self.references.count() * 3 / 2).max(FIRST_LOOK);
        self.rest.references = Rest::of(self.references.frontier());
        self.rest.both = self.rest.references.with(&self.rest.amplifiers);
    }

    /// What ranks candidates that add these shares, with this stress where the sides meet.
    pub fn merits(&self, [r, a, p]: [&Share; 3], meeting: f64) -> Merits {
        let cost = r.cost + a.cost + p.cost;
        let loss = merit::loss(self.ground.rail(), r.current_a + a.current_a);
        let stress = r.stress.max(a.stress).max(p.stress).max(meeting);
        let score = score(&self.ground.problem.weights, cost, loss, stress);
        Merits { cost, loss, stress, score }
    }

    /// The candidate that three choices made stand for: a reference, an amplifier and a power node.
    pub fn candidate(
        &self,
        [reference, amplifier, power]: [u32; 3],
        meeting: f64,
    ) -> Option<Candidate> {
        let r = self.references.get(reference);
        let a = self.amplifiers.get(amplifier);
        let p = self.powers.get(power);
        let ReferenceFigures::Complete(complete) = &r.figures else { return None };
        let AmplifierMark::One(amplifier) = a.mark else { return None };
        let PowerMark::Done(pass, mount) = p.mark else { return None };
        let mut places = [None; Slot::COUNT];
        places[Slot::Zener as usize] = Some(complete.zener);
        places[Slot::BiasLine as usize] = Some(complete.bias_line);
        places[Slot::Amplifier as usize] = Some(amplifier);
        places[Slot::DividerLine as usize] = Some(complete.divider_line);
        places[Slot::Pot as usize] = complete.pot;
        places[Slot::Pass as usize] = Some(pass);
        places[Slot::Heatsink as usize] = match mount {
            Mount::Sink(sink) => Some(sink),
            Mount::Own | Mount::None => None,
        };
        let merits = self.merits([&r.share, &a.share, &p.share], meeting);
        Some(Candidate {
            places,
            rz: complete.bias.rz,
            divider: complete.divider,
            cost: merits.cost,
            loss: merits.loss,
            stress: merits.stress,
            score: merits.score,
        })
    }

    /// Memory in use, bytes.
    pub fn memory(&self) -> usize {
        self.references.memory() + self.amplifiers.memory() + self.powers.memory()
    }
}

/// Some reference side suits an amplifier. Grows the tree of references where it looks.
fn suits_any(
    ground: &Ground<'_>,
    references: &mut Grove<ReferenceSide<'_, '_>>,
    amp: &AmplifierAtRail,
) -> bool {
    let mut open: Vec<u32> = references.root().into_iter().collect();
    while let Some(id) = open.pop() {
        let node = references.get(id);
        if node.share.is_impossible() || meet_reference(ground, &node.figures, amp).is_none() {
            continue;
        }
        if node.size == 1 {
            return true;
        }
        open.extend(references.children(id, |_| true));
    }
    false
}

/// The figures that rank a candidate, in full.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Merits {
    pub cost: f64,
    pub loss: f64,
    pub stress: f64,
    pub score: f64,
}
