//! The amplifier as a side: one slot.

use crate::boxes::{Boxes, Item, Pieces};
use crate::grove::{Growth, Names, Node, Share, Slots, least_names};
use crate::problem::Ground;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::supply_checks;
use circuit::check::{Tally, WhileHolding};
use circuit::drive;
use circuit::parts::Amplifier;
use circuit::slot::Slot;
use rayon::prelude::*;
use std::ops::ControlFlow::Continue;

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

/// An amplifier at least as good as both in every check: each figure the better of the two.
pub(crate) fn better_amplifier(a: &AmplifierAtRail, b: &AmplifierAtRail) -> AmplifierAtRail {
    // Where the sinking current is not given, it is not checked: nothing is better than that.
    let isink = |x: Option<f64>, y: Option<f64>| x.zip(y).map(|(x, y)| x.max(y));
    each_figure(a, b, f64::min, f64::max, isink)
}

/// An amplifier no better than either in any check: each figure the worse of the two.
pub(crate) fn worse_amplifier(a: &AmplifierAtRail, b: &AmplifierAtRail) -> AmplifierAtRail {
    let isink = |x: Option<f64>, y: Option<f64>| match (x, y) {
        (Some(x), Some(y)) => Some(x.min(y)),
        (one, other) => one.or(other),
    };
    each_figure(a, b, f64::max, f64::min, isink)
}

/// Joins two amplifiers figure by figure: `less` where less is better, `more` where more is.
fn each_figure(
    a: &AmplifierAtRail,
    b: &AmplifierAtRail,
    less: fn(f64, f64) -> f64,
    more: fn(f64, f64) -> f64,
    isink: impl Fn(Option<f64>, Option<f64>) -> Option<f64>,
) -> AmplifierAtRail {
    let (p, q) = (&a.part, &b.part);
    let part = Amplifier {
        vs_min_v: less(p.vs_min_v, q.vs_min_v),
        vs_max_v: more(p.vs_max_v, q.vs_max_v),
        vcm_low_v: less(p.vcm_low_v, q.vcm_low_v),
        vcm_high_v: less(p.vcm_high_v, q.vcm_high_v),
        swing_low_v: less(p.swing_low_v, q.swing_low_v),
        swing_high_v: less(p.swing_high_v, q.swing_high_v),
        iout_a: more(p.iout_a, q.iout_a),
        ib_max_a: less(p.ib_max_a, q.ib_max_a),
        iq_max_a: less(p.iq_max_a, q.iq_max_a),
        rth_ja_c_per_w: less(p.rth_ja_c_per_w, q.rth_ja_c_per_w),
        isink_a: isink(p.isink_a, q.isink_a),
        // The others work through the figures at the rail below.
        ..*p
    };
    AmplifierAtRail {
        part,
        fixed_error_v: less(a.fixed_error_v, b.fixed_error_v),
        common_mode: less(a.common_mode, b.common_mode),
        allowed_rise_c: more(a.allowed_rise_c, b.allowed_rise_c),
        allowed_fault_rise_c: more(a.allowed_fault_rise_c, b.allowed_fault_rise_c),
        fault_rise_c: less(a.fault_rise_c, b.fault_rise_c),
    }
}

impl Item for AmplifierItem {
    type Best = BestAmplifier;

    fn best(&self) -> BestAmplifier {
        let mut names = Names::default();
        names[Slot::Amplifier as usize] = self.rank;
        BestAmplifier { figures: self.at_rail, share: self.share, names }
    }

    fn widen(best: &mut BestAmplifier, other: &BestAmplifier) {
        best.figures = better_amplifier(&best.figures, &other.figures);
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
                let stress = WhileHolding::over(|t| {
                    supply_checks(&at_rail, rail, t)?;
                    t.take(drive::swing_low(&at_rail, rail))?;
                    drive::amp_fault(&at_rail, rail).map_or(Continue(()), |f| t.take(f))
                })
                .ok()?;
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
