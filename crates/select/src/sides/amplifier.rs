//! The amplifier as a side: one slot.

use crate::boxes::{Boxes, Item, Pieces};
use crate::grove::{Growth, Names, Node, Share, Slots, least_names};
use crate::problem::Ground;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::amplifier_checks;
use circuit::check::WhileHolding;
use circuit::slot::Slot;
use rayon::prelude::*;

/// An amplifier that holds wherever no other part takes part.
pub(crate) struct AmplifierItem {
    pub index: u32,
    at_rail: AmplifierAtRail,
    share: Share,
    rank: u32,
}

/// The best figures of a set of amplifiers.
#[derive(Clone, Copy)]
pub(crate) struct BestAmplifier {
    pub figures: AmplifierAtRail,
    pub share: Share,
    names: Names,
}

impl Item for AmplifierItem {
    type Best = BestAmplifier;

    fn best(&self) -> BestAmplifier {
        let mut names = Names::default();
        names[Slot::Amplifier as usize] = self.rank;
        BestAmplifier { figures: self.at_rail, share: self.share, names }
    }

    fn widen(best: &mut BestAmplifier, other: &BestAmplifier) {
        best.figures = best.figures.better_of(&other.figures);
        best.share.least(&other.share);
        least_names(&mut best.names, &other.names);
    }

    const AXES: usize = 8;

    fn axis(&self, axis: usize) -> f64 {
        let part = &self.at_rail.part;
        match axis {
            0 => self.share.cost.max(1e-3).ln(),
            1 => self.share.stress,
            2 => part.iq_max_a * 50.0,
            3 => part.iout_a.ln() * 0.5,
            4 => part.swing_high_v * 0.2,
            5 => self.at_rail.fixed_error_v * 10.0,
            6 => part.vcm_low_v * 0.1,
            _ => part.vcm_high_v * 0.1,
        }
    }
}

/// What an amplifier node stands for.
#[derive(Clone, Copy)]
pub(crate) enum AmplifierMark {
    Box(u32),
    One(u32),
}

/// The amplifiers that hold by themselves.
pub(crate) struct AmplifierSide {
    boxes: Boxes<AmplifierItem>,
}

impl AmplifierSide {
    pub fn new(ground: &Ground<'_>) -> Self {
        let rail = ground.rail();
        let items = ground
            .problem
            .amplifiers
            .par_iter()
            .enumerate()
            .filter_map(|(index, part)| {
                let at_rail = AmplifierAtRail::new(part.figures, rail);
                let stress = WhileHolding::over(|t| amplifier_checks(&at_rail, rail, t)).ok()?;
                Some(AmplifierItem {
                    index: index as u32,
                    at_rail,
                    share: Share { cost: part.price, current_a: part.figures.iq_max_a, stress },
                    rank: ground.ranks.of(Slot::Amplifier, index),
                })
            })
            .collect();
        Self { boxes: Boxes::new(items) }
    }

    /// The best figures of all amplifiers; None where there is none.
    pub fn best(&self) -> Option<&AmplifierAtRail> {
        self.boxes.root().map(|root| &self.boxes.get(root).best.figures)
    }

    /// The shares of all amplifiers.
    pub fn shares(&self) -> impl Iterator<Item = Share> {
        self.boxes.items().iter().map(|item| item.share)
    }

    /// Some amplifier `meets`, which must be true of the best figures of a box wherever it is true of
    /// an amplifier in it.
    pub fn any(&mut self, meets: impl Fn(&AmplifierAtRail) -> bool) -> bool {
        let mut open: Vec<u32> = self.boxes.root().into_iter().collect();
        while let Some(id) = open.pop() {
            if !meets(&self.boxes.get(id).best.figures) {
                continue;
            }
            match self.boxes.split(id) {
                Pieces::Halves(a, b) => open.extend([a, b]),
                Pieces::Items(range) => {
                    if self.boxes.items()[range].iter().any(|item| meets(&item.at_rail)) {
                        return true;
                    }
                }
            }
        }
        false
    }

    fn node(
        best: &BestAmplifier,
        size: u32,
        mark: AmplifierMark,
    ) -> Node<AmplifierAtRail, AmplifierMark> {
        let decided = match mark {
            AmplifierMark::Box(_) => Slots::default(),
            AmplifierMark::One(_) => Slots::default().with(Slot::Amplifier),
        };
        Node { share: best.share, figures: best.figures, names: best.names, decided, size, mark }
    }

    fn box_node(&self, id: u32) -> Node<AmplifierAtRail, AmplifierMark> {
        let part_box = self.boxes.get(id);
        // A box of one part is still to be opened.
        Self::node(&part_box.best, part_box.len().max(2), AmplifierMark::Box(id))
    }
}

impl Growth for AmplifierSide {
    type Figures = AmplifierAtRail;
    type Mark = AmplifierMark;

    fn root(&mut self) -> Option<Node<AmplifierAtRail, AmplifierMark>> {
        self.boxes.root().map(|id| self.box_node(id))
    }

    fn children(
        &mut self,
        node: &Node<AmplifierAtRail, AmplifierMark>,
        children: &mut Vec<Node<AmplifierAtRail, AmplifierMark>>,
    ) {
        let AmplifierMark::Box(id) = node.mark else { return };
        match self.boxes.split(id) {
            Pieces::Halves(a, b) => children.extend([a, b].map(|id| self.box_node(id))),
            Pieces::Items(range) => children.extend(
                self.boxes.items()[range]
                    .iter()
                    .map(|item| Self::node(&item.best(), 1, AmplifierMark::One(item.index))),
            ),
        }
    }

    fn memory(&self) -> usize {
        self.boxes.memory()
    }
}
