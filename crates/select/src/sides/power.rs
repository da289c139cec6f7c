//! The power side: the transistor, then what it is mounted on.

use crate::boxes::{Boxes, Item, Pieces};
use crate::grove::{Growth, Names, Node, Share, Slots, least_names};
use crate::problem::Ground;
use crate::sides::amplifier::AmplifierSide;
use crate::sides::meet_power;
use circuit::check::WhileHolding;
use circuit::pass::{CaseTemperatures, Mounted, PassFigures, Unmounted};
use circuit::slot::Slot;
use rayon::prelude::*;

/// A heatsink as the case sees it.
struct SinkItem {
    index: u32,
    price: f64,
    case: CaseTemperatures,
    rank: u32,
}

/// The best figures of a set of heatsinks.
#[derive(Clone, Copy)]
struct BestSink {
    price: f64,
    case: CaseTemperatures,
    rank: u32,
}

fn cooler(a: &CaseTemperatures, b: &CaseTemperatures) -> CaseTemperatures {
    CaseTemperatures { service_c: a.service_c.min(b.service_c), fault_c: a.fault_c.min(b.fault_c) }
}

impl Item for SinkItem {
    type Best = BestSink;

    fn best(&self) -> BestSink {
        BestSink { price: self.price, case: self.case, rank: self.rank }
    }

    fn widen(best: &mut BestSink, other: &BestSink) {
        best.price = best.price.min(other.price);
        best.case = cooler(&best.case, &other.case);
        best.rank = best.rank.min(other.rank);
    }

    const AXES: usize = 3;

    fn axis(&self, axis: usize) -> f64 {
        match axis {
            0 => self.price.max(1e-3).ln(),
            1 => self.case.service_c * 0.02,
            _ => self.case.fault_c * 0.02,
        }
    }
}

/// A transistor that holds on the best mounting that it may have.
struct PassItem {
    index: u32,
    figures: PassFigures,
    share: Share,
    names: Names,
}

/// The best figures of a set of transistors.
#[derive(Clone, Copy)]
struct BestPass {
    figures: PassFigures,
    share: Share,
    names: Names,
}

/// A transistor at least as good as both wherever the amplifier meets it.
pub(crate) fn better_to_drive(a: &PassFigures, b: &PassFigures) -> PassFigures {
    // Where the leakage is not given, nothing of it is checked: nothing is better than that.
    let ileak = |x: Option<f64>, y: Option<f64>| x.zip(y).map(|(x, y)| x.min(y));
    each_figure(a, b, f64::min, a.junctions.min(b.junctions), ileak)
}

/// A transistor no better than either wherever the amplifier meets it.
pub(crate) fn worse_to_drive(a: &PassFigures, b: &PassFigures) -> PassFigures {
    let ileak = |x: Option<f64>, y: Option<f64>| match (x, y) {
        (Some(x), Some(y)) => Some(x.max(y)),
        (one, other) => one.or(other),
    };
    each_figure(a, b, f64::max, a.junctions.max(b.junctions), ileak)
}

/// Joins the figures that [`circuit::drive`] asks for; all others are those of `a` and serve nobody,
/// for a box of transistors is never put on a heatsink.
fn each_figure(
    a: &PassFigures,
    b: &PassFigures,
    pick: fn(f64, f64) -> f64,
    junctions: u8,
    ileak: impl Fn(Option<f64>, Option<f64>) -> Option<f64>,
) -> PassFigures {
    let mut joined = *a;
    joined.base.most_a = pick(a.base.most_a, b.base.most_a);
    joined.vbe_hi_v = pick(a.vbe_hi_v, b.vbe_hi_v);
    joined.drive_power_w = pick(a.drive_power_w, b.drive_power_w);
    joined.junctions = junctions;
    joined.ileak_a = ileak(a.ileak_a, b.ileak_a);
    joined
}

impl Item for PassItem {
    type Best = BestPass;

    fn best(&self) -> BestPass {
        BestPass { figures: self.figures, share: self.share, names: self.names }
    }

    fn widen(best: &mut BestPass, other: &BestPass) {
        best.figures = better_to_drive(&best.figures, &other.figures);
        best.share.least(&other.share);
        least_names(&mut best.names, &other.names);
    }

    const AXES: usize = 5;

    fn axis(&self, axis: usize) -> f64 {
        match axis {
            0 => self.share.cost.max(1e-3).ln(),
            1 => self.share.stress * 2.0,
            2 => self.figures.base.most_a.max(1e-9).ln() * 0.5,
            3 => self.figures.vbe_hi_v * 0.5,
            _ => self.figures.ileak_a.unwrap_or(0.0).max(1e-9).ln() * 0.1,
        }
    }
}

/// What a transistor is mounted on.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Mount {
    /// The sheet's own sink.
    Own,
    /// Nothing.
    None,
    /// The heatsink at this place of the problem.
    Sink(u32),
}

/// What a power node stands for.
#[derive(Clone, Copy)]
pub(crate) enum PowerMark {
    /// A box of transistors.
    Box(u32),
    /// A transistor (place among the items) that is not mounted yet.
    Pass(u32),
    /// The same on any of a box of sinks of its class.
    Sinks(u32, u32, u32),
    /// A transistor (place in the problem) with its mounting.
    Done(u32, Mount),
}

pub(crate) type PowerNode = Node<PassFigures, PowerMark>;

/// Transistors and what they may be mounted on.
pub(crate) struct PowerSide<'g, 'p> {
    ground: &'g Ground<'p>,
    boxes: Boxes<PassItem>,
    /// The heatsinks of each package class.
    sinks: Vec<Boxes<SinkItem>>,
    /// The same in a few groups from cheap and hot to dear and cool, with the best of each.
    groups: Vec<Vec<BestSink>>,
    own_sink: Option<CaseTemperatures>,
}

/// How many groups a class of heatsinks is put into.
const GROUPS: usize = 5;

/// The heatsinks of a class in a few groups by price. Those that another beats in price and
/// temperatures are left out: what holds for the other's group bounds them too.
fn groups(sinks: &Boxes<SinkItem>) -> Vec<BestSink> {
    let mut best: Vec<BestSink> = sinks.items().iter().map(Item::best).collect();
    best.sort_by(|a, b| a.price.total_cmp(&b.price));
    let mut unbeaten: Vec<BestSink> = Vec::new();
    for sink in best {
        let beaten = unbeaten.iter().any(|other| {
            other.case.service_c <= sink.case.service_c && other.case.fault_c <= sink.case.fault_c
        });
        if !beaten {
            unbeaten.push(sink);
        }
    }
    let size = unbeaten.len().div_ceil(GROUPS).max(1);
    let joined = |group: &[BestSink]| {
        let mut best = group[0];
        group.iter().for_each(|sink| SinkItem::widen(&mut best, sink));
        best
    };
    unbeaten.chunks(size).map(joined).collect()
}

impl<'g, 'p> PowerSide<'g, 'p> {
    /// Transistors that hold on some mounting and that the best figures of all amplifiers drive.
    pub fn new(ground: &'g Ground<'p>, amplifiers: &AmplifierSide) -> Self {
        let best_amplifier = amplifiers.best();
        let rail = ground.rail();
        let duty = &ground.duty;
        let sinks: Vec<Boxes<SinkItem>> = ground
            .classes
            .sinks
            .iter()
            .map(|places| {
                let items = places.iter().map(|&index| {
                    let part = &ground.problem.heatsinks[index as usize].part;
                    SinkItem {
                        index,
                        price: part.price,
                        case: CaseTemperatures::on_heatsink(part.figures, duty, rail),
                        rank: ground.ranks.of(Slot::Heatsink, index as usize),
                    }
                });
                Boxes::new(items.collect())
            })
            .collect();
        let own_sink = CaseTemperatures::on_own_sink(duty, rail);
        let items = ground
            .problem
            .transistors
            .par_iter()
            .enumerate()
            .filter_map(|(index, t)| {
                let figures = PassFigures::new(t.part.figures, duty, rail);
                meet_power(ground, best_amplifier?, &figures)?;
                let verdict = |mounted: &Mounted| {
                    WhileHolding::over(|tally| figures.checks(mounted, duty, rail, tally)).ok()
                };
                let unmounted = ground
                    .problem
                    .can_go_unmounted(t.part.figures)
                    .then(|| Unmounted::new(t.part.figures, duty, rail))
                    .flatten()
                    .and_then(|u| verdict(&u.into()));
                let best_sink = ground
                    .classes
                    .of(index)
                    .and_then(|class| sinks.get(class as usize))
                    .and_then(|sinks| sinks.root().map(|root| sinks.get(root).best));
                let (case, sink_price) = match own_sink {
                    Some(case) => (Some(case), 0.0),
                    None => (best_sink.map(|s| s.case), best_sink.map_or(0.0, |s| s.price)),
                };
                let on_sink = case.and_then(|case| verdict(&Mounted::on(case, &figures, duty)));
                let stress = match (unmounted, on_sink) {
                    (None, None) => return None,
                    (Some(s), None) | (None, Some(s)) => s,
                    (Some(a), Some(b)) => a.min(b),
                };
                let mounting = if unmounted.is_some() { 0.0 } else { sink_price };
                let mut names = Names::default();
                names[Slot::Pass as usize] = ground.ranks.of(Slot::Pass, index);
                names[Slot::Heatsink as usize] = match (unmounted, best_sink) {
                    (None, Some(sink)) if own_sink.is_none() => sink.rank,
                    _ => 0,
                };
                Some(PassItem {
                    index: index as u32,
                    figures,
                    share: Share { cost: t.part.price + mounting, current_a: 0.0, stress },
                    names,
                })
            })
            .collect();
        let groups = sinks.iter().map(groups).collect();
        Self { ground, boxes: Boxes::new(items), sinks, groups, own_sink }
    }

    fn box_node(&self, id: u32) -> PowerNode {
        let part_box = self.boxes.get(id);
        let best = &part_box.best;
        Node {
            share: best.share,
            figures: best.figures,
            names: best.names,
            decided: Slots::default(),
            size: part_box.len().saturating_mul(8).max(2),
            mark: PowerMark::Box(id),
        }
    }

    fn pass_node(&self, item: usize) -> PowerNode {
        let PassItem { figures, share, names, .. } = self.boxes.items()[item];
        Node {
            share,
            figures,
            names,
            decided: Slots::default().with(Slot::Pass),
            size: 8,
            mark: PowerMark::Pass(item as u32),
        }
    }

    /// The transistor at `item` mounted at these temperatures; None where a check fails.
    fn mounted_node(
        &self,
        item: u32,
        mounted: &Mounted,
        price: f64,
        sink_rank: u32,
        (mark, size): (PowerMark, u32),
    ) -> Option<PowerNode> {
        let PassItem { index, figures, mut names, .. } = self.boxes.items()[item as usize];
        let stress = WhileHolding::over(|t| {
            figures.checks(mounted, &self.ground.duty, self.ground.rail(), t)
        })
        .ok()?;
        names[Slot::Heatsink as usize] = sink_rank;
        let decided = Slots::default().with(Slot::Pass);
        let decided = match mark {
            PowerMark::Done(..) => decided.with(Slot::Heatsink),
            _ => decided,
        };
        let cost = self.ground.problem.transistors[index as usize].part.price + price;
        Some(Node {
            share: Share { cost, current_a: 0.0, stress },
            figures,
            names,
            decided,
            size,
            mark,
        })
    }

    fn on_case(&self, item: u32, case: CaseTemperatures) -> Mounted {
        Mounted::on(case, &self.boxes.items()[item as usize].figures, &self.ground.duty)
    }

    fn sinks_node(&self, item: u32, class: u32, id: u32) -> Option<PowerNode> {
        let part_box = self.sinks[class as usize].get(id);
        let BestSink { price, case, rank } = part_box.best;
        let mark = PowerMark::Sinks(item, class, id);
        let size = part_box.len().max(2);
        self.mounted_node(item, &self.on_case(item, case), price, rank, (mark, size))
    }

    fn mountings(&mut self, item: u32, children: &mut Vec<PowerNode>) {
        let index = self.boxes.items()[item as usize].index;
        if let Some(case) = self.own_sink {
            let done = (PowerMark::Done(index, Mount::Own), 1);
            children.extend(self.mounted_node(item, &self.on_case(item, case), 0.0, 0, done));
            return;
        }
        let part = self.ground.problem.transistors[index as usize].part.figures;
        if self.ground.problem.can_go_unmounted(part) {
            let done = (PowerMark::Done(index, Mount::None), 1);
            let unmounted = Unmounted::new(part, &self.ground.duty, self.ground.rail());
            children
                .extend(unmounted.and_then(|u| self.mounted_node(item, &u.into(), 0.0, 0, done)));
        }
        if let Some(class) = self.ground.classes.of(index as usize)
            && let Some(root) = self.sinks[class as usize].root()
        {
            children.extend(self.sinks_node(item, class, root));
        }
    }

    fn sink_pieces(&mut self, item: u32, class: u32, id: u32, children: &mut Vec<PowerNode>) {
        let index = self.boxes.items()[item as usize].index;
        match self.sinks[class as usize].split(id) {
            Pieces::Halves(a, b) => {
                children
                    .extend([a, b].into_iter().filter_map(|id| self.sinks_node(item, class, id)));
            }
            Pieces::Items(range) => {
                for sink in &self.sinks[class as usize].items()[range] {
                    let done = (PowerMark::Done(index, Mount::Sink(sink.index)), 1);
                    let mounted = self.on_case(item, sink.case);
                    children.extend(self.mounted_node(item, &mounted, sink.price, sink.rank, done));
                }
            }
        }
    }
}

impl Growth for PowerSide<'_, '_> {
    type Figures = PassFigures;
    type Mark = PowerMark;

    fn root(&mut self) -> Option<PowerNode> {
        self.boxes.root().map(|id| self.box_node(id))
    }

    fn children(&mut self, node: &PowerNode, children: &mut Vec<PowerNode>) {
        match node.mark {
            PowerMark::Box(id) => match self.boxes.split(id) {
                Pieces::Halves(a, b) => children.extend([a, b].map(|id| self.box_node(id))),
                Pieces::Items(range) => children.extend(range.map(|item| self.pass_node(item))),
            },
            PowerMark::Pass(item) => self.mountings(item, children),
            PowerMark::Sinks(item, class, id) => self.sink_pieces(item, class, id, children),
            PowerMark::Done(..) => {}
        }
    }

    /// Of a transistor: what it adds on each group of its heatsinks, and unmounted.
    fn closer(&self, node: &PowerNode) -> Vec<Share> {
        let PowerMark::Pass(item) = node.mark else { return Vec::new() };
        let PassItem { index, figures, .. } = &self.boxes.items()[item as usize];
        if self.own_sink.is_some() {
            return Vec::new();
        }
        let (ground, duty) = (self.ground, &self.ground.duty);
        let transistor = &ground.problem.transistors[*index as usize].part;
        let share = |mounted: Mounted, price: f64| {
            let stress =
                WhileHolding::over(|t| figures.checks(&mounted, duty, ground.rail(), t)).ok()?;
            Some(Share { cost: transistor.price + price, current_a: 0.0, stress })
        };
        let unmounted = ground
            .problem
            .can_go_unmounted(transistor.figures)
            .then(|| Unmounted::new(transistor.figures, duty, ground.rail()))
            .flatten()
            .and_then(|unmounted| share(unmounted.into(), 0.0));
        let groups = ground.classes.of(*index as usize).map(|class| &self.groups[class as usize]);
        let on_sinks = groups
            .into_iter()
            .flatten()
            .filter_map(|sink| share(Mounted::on(sink.case, figures, duty), sink.price));
        unmounted.into_iter().chain(on_sinks).collect()
    }

    fn memory(&self) -> usize {
        self.boxes.memory() + self.sinks.iter().map(Boxes::memory).sum::<usize>()
    }
}
