//! The reference side: zener, bias line with RZ, divider line with its values, pot.

use crate::boxes::{Boxes, Item, Pieces};
use crate::grove::{Growth, Names, Node, Share, Slots};
use crate::problem::Ground;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::choose_divider;
use circuit::divider::{Divider, nominal_current_a};
use circuit::reference::{Bias, ZenerAtRail, choose_rz};
use circuit::slot::Slot;
use rayon::prelude::*;

/// What is known of references before their values are chosen: each figure at least as good as
/// that of any of them.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Outlook {
    vz_lo_v: f64,
    vz_hi_v: f64,
    /// Least VZhi/VZlo.
    spread: f64,
    /// It speaks of one zener, so that its voltages belong together.
    single: bool,
}

impl Outlook {
    /// Necessary conditions; false only where no value makes any of the references suit.
    pub fn may_suit(&self, amp: &AmplifierAtRail, ground: &Ground<'_>) -> bool {
        let &Outlook { vz_lo_v, vz_hi_v, spread, single } = self;
        let error_v = amp.input_error(vz_hi_v).error_v;
        amp.amp_input_low(vz_lo_v).holds()
            && amp.amp_input_high(vz_hi_v, ground.rail()).holds()
            && if single {
                ground.aim.may_suit(vz_lo_v, vz_hi_v, error_v, ground.least_line_spread)
            } else {
                ground.aim.may_suit_any(vz_lo_v, vz_hi_v, spread, error_v)
            }
    }
}

/// A reference side with all its values.
#[derive(Debug, Clone, Copy)]
pub(crate) struct CompleteReference {
    pub zener: u32,
    pub bias_line: u32,
    pub bias: Bias,
    pub divider_line: u32,
    pub divider: Divider,
    pub pot: Option<u32>,
}

/// What the amplifier needs to know of a reference side.
#[derive(Debug, Clone, Copy)]
pub(crate) enum ReferenceFigures {
    Outlook(Outlook),
    Complete(CompleteReference),
}

/// A zener with what can be said before RZ is chosen.
struct ZenerItem {
    index: u32,
    at_rail: ZenerAtRail,
    outlook: Outlook,
    share: Share,
    rank: u32,
}

#[derive(Clone, Copy)]
struct BestZener {
    outlook: Outlook,
    share: Share,
    rank: u32,
}

impl Item for ZenerItem {
    type Best = BestZener;

    fn best(&self) -> BestZener {
        BestZener { outlook: self.outlook, share: self.share, rank: self.rank }
    }

    fn widen(best: &mut BestZener, other: &BestZener) {
        let (a, b) = (&mut best.outlook, &other.outlook);
        a.vz_lo_v = a.vz_lo_v.max(b.vz_lo_v);
        a.vz_hi_v = a.vz_hi_v.min(b.vz_hi_v);
        a.spread = a.spread.min(b.spread);
        a.single = false;
        best.share.least(&other.share);
        best.rank = best.rank.min(other.rank);
    }

    const AXES: usize = 4;

    fn axis(&self, axis: usize) -> f64 {
        match axis {
            0 => self.share.cost.max(1e-3).ln(),
            1 => self.share.current_a * 50.0,
            2 => self.outlook.vz_lo_v.max(1e-3).ln(),
            _ => self.outlook.spread * 5.0,
        }
    }
}

/// A pot as a box sees it: it is chosen by price first, and only some values may serve.
struct PotItem {
    index: u32,
    price: f64,
    rank: u32,
    value_ohm: f64,
}

#[derive(Clone, Copy)]
struct BestPot {
    price: f64,
    rank: u32,
}

impl Item for PotItem {
    type Best = BestPot;

    fn best(&self) -> BestPot {
        BestPot { price: self.price, rank: self.rank }
    }

    fn widen(best: &mut BestPot, other: &BestPot) {
        best.price = best.price.min(other.price);
        best.rank = best.rank.min(other.rank);
    }

    const AXES: usize = 2;

    fn axis(&self, axis: usize) -> f64 {
        if axis == 0 { self.price.max(1e-3).ln() } else { self.value_ohm.ln() * 0.1 }
    }
}

/// A zener with the RZ of a line.
struct Biased {
    item: u32,
    line: u32,
    bias: Bias,
    share_without_divider: Share,
}

/// What a reference node stands for.
#[derive(Clone, Copy)]
pub(crate) enum ReferenceMark {
    /// A box of zeners.
    Box(u32),
    /// A zener (place among the items) without values.
    Zener(u32),
    /// A zener with its RZ (place among the biased).
    Biased(u32),
    /// The same with a divider line and any of a box of pots.
    Pots(u32, u32, u32),
    /// All values chosen.
    Done,
}

pub(crate) type ReferenceNode = Node<ReferenceFigures, ReferenceMark>;

/// Zeners, lines and pots.
pub(crate) struct ReferenceSide<'g, 'p> {
    ground: &'g Ground<'p>,
    boxes: Boxes<ZenerItem>,
    pots: Boxes<PotItem>,
    biased: Vec<Biased>,
    least: LeastPrices,
}

/// The least that lines and pots add.
#[derive(Clone, Copy)]
struct LeastPrices {
    bias_line: f64,
    divider_line: f64,
    pot: f64,
    bias_line_rank: u32,
    divider_line_rank: u32,
    pot_rank: u32,
}

impl LeastPrices {
    fn new(ground: &Ground<'_>) -> Self {
        let least = |prices: &mut dyn Iterator<Item = f64>| prices.fold(f64::INFINITY, f64::min);
        let problem = ground.problem;
        let adjustable = ground.rail().is_adjustable();
        let first = |any: bool| u32::from(any);
        Self {
            bias_line: least(&mut problem.bias_lines.iter().map(|p| p.price)),
            divider_line: least(&mut problem.divider_lines.iter().map(|p| p.price)),
            pot: if adjustable { least(&mut problem.pots.iter().map(|p| p.price)) } else { 0.0 },
            bias_line_rank: first(!problem.bias_lines.is_empty()),
            divider_line_rank: first(!problem.divider_lines.is_empty()),
            pot_rank: first(adjustable && !problem.pots.is_empty()),
        }
    }
}

/// Pieces of a divider line that a board takes: RI, and RF or RX where it is no link.
fn pieces(divider: &Divider) -> f64 {
    if divider.upper.is_link() { 1.0 } else { 2.0 }
}

impl<'g, 'p> ReferenceSide<'g, 'p> {
    pub fn new(ground: &'g Ground<'p>) -> Self {
        let rail = ground.rail();
        let least = LeastPrices::new(ground);
        let fillable = !ground.problem.bias_lines.is_empty()
            && !ground.problem.divider_lines.is_empty()
            && (!rail.is_adjustable() || !ground.problem.pots.is_empty());
        let zeners = if fillable { ground.problem.zeners.as_slice() } else { &[] };
        let items = zeners
            .par_iter()
            .enumerate()
            .filter_map(|(index, part)| {
                let at_rail = ZenerAtRail::new(part.figures, rail);
                let largest = at_rail.largest_rz_ohm(rail);
                if !(largest > 0.0 && at_rail.smallest_rz_ohm(rail) <= largest) {
                    return None;
                }
                let v0 = at_rail.test_voltage(0.0, rail);
                let single = true;
                let outlook = Outlook {
                    vz_lo_v: v0.lo_v,
                    vz_hi_v: v0.hi_v,
                    spread: v0.hi_v / v0.lo_v,
                    single,
                };
                let wide = v0.lo_v <= 0.0
                    || !ground.aim.may_suit(v0.lo_v, v0.hi_v, 0.0, ground.least_line_spread);
                if wide {
                    return None;
                }
                let pieces = if ground.aim.may_follow(v0.lo_v, v0.hi_v) { 1.0 } else { 2.0 };
                let cost = part.price + least.bias_line + pieces * least.divider_line + least.pot;
                Some(ZenerItem {
                    index: index as u32,
                    at_rail,
                    outlook,
                    share: Share {
                        cost,
                        current_a: at_rail.least_nominal_current_a(rail),
                        stress: 0.0,
                    },
                    rank: ground.ranks.of(Slot::Zener, index),
                })
            })
            .collect();
        let pots = if rail.is_adjustable() { ground.problem.pots.as_slice() } else { &[] };
        let pots = pots.iter().enumerate().map(|(index, part)| PotItem {
            index: index as u32,
            price: part.price,
            rank: ground.ranks.of(Slot::Pot, index),
            value_ohm: part.figures.value_ohm,
        });
        Self {
            ground,
            boxes: Boxes::new(items),
            pots: Boxes::new(pots.collect()),
            biased: Vec::new(),
            least,
        }
    }

    fn names(&self, zener: u32) -> Names {
        let mut names = Names::default();
        names[Slot::Zener as usize] = zener;
        names[Slot::BiasLine as usize] = self.least.bias_line_rank;
        names[Slot::DividerLine as usize] = self.least.divider_line_rank;
        names[Slot::Pot as usize] = self.least.pot_rank;
        names
    }

    fn box_node(&self, id: u32) -> ReferenceNode {
        let part_box = self.boxes.get(id);
        let BestZener { outlook, share, rank } = part_box.best;
        Node {
            share,
            figures: ReferenceFigures::Outlook(outlook),
            names: self.names(rank),
            decided: Slots::default(),
            size: part_box.len().saturating_mul(16).max(2),
            mark: ReferenceMark::Box(id),
        }
    }

    fn zener_node(&self, item: usize) -> ReferenceNode {
        let ZenerItem { outlook, share, rank, .. } = self.boxes.items()[item];
        Node {
            share,
            figures: ReferenceFigures::Outlook(outlook),
            names: self.names(rank),
            decided: Slots::default().with(Slot::Zener),
            size: 16,
            mark: ReferenceMark::Zener(item as u32),
        }
    }

    /// The zener with the RZ of each line.
    fn bias_lines(&mut self, item: u32, children: &mut Vec<ReferenceNode>) {
        let ground = self.ground;
        for (line, at_rail) in ground.bias_lines.iter().enumerate() {
            let zener = &self.boxes.items()[item as usize];
            let Some((bias, stress)) = choose_rz(&zener.at_rail, at_rail, ground.rail()) else {
                continue;
            };
            let (rank, index) = (zener.rank, zener.index as usize);
            let single = true;
            let outlook = Outlook {
                vz_lo_v: bias.vz_lo_v,
                vz_hi_v: bias.vz_hi_v,
                spread: bias.vz_hi_v / bias.vz_lo_v,
                single,
            };
            let problem = ground.problem;
            let cost = problem.zeners[index].price + problem.bias_lines[line].price;
            let without = Share { cost, current_a: bias.iz_nominal_a, stress };
            let pieces = if ground.aim.may_follow(bias.vz_lo_v, bias.vz_hi_v) { 1.0 } else { 2.0 };
            let mut names = self.names(rank);
            names[Slot::BiasLine as usize] = ground.ranks.of(Slot::BiasLine, line);
            children.push(Node {
                share: Share {
                    cost: cost + pieces * self.least.divider_line + self.least.pot,
                    ..without
                },
                figures: ReferenceFigures::Outlook(outlook),
                names,
                decided: Slots::default().with(Slot::Zener).with(Slot::BiasLine),
                size: 8,
                mark: ReferenceMark::Biased(self.biased.len() as u32),
            });
            self.biased.push(Biased {
                item,
                line: line as u32,
                bias,
                share_without_divider: without,
            });
        }
    }

    /// The biased zener with each divider line.
    fn divider_lines(
        &mut self,
        node: &ReferenceNode,
        biased: u32,
        children: &mut Vec<ReferenceNode>,
    ) {
        for line in 0..self.ground.divider_lines.len() as u32 {
            if self.ground.rail().is_adjustable() {
                if let Some(root) = self.pots.root() {
                    children.push(self.pots_node(node, biased, line, root));
                }
            } else {
                children.extend(self.complete(node, biased, line, None));
            }
        }
    }

    fn pots_node(&self, node: &ReferenceNode, biased: u32, line: u32, id: u32) -> ReferenceNode {
        let part_box = self.pots.get(id);
        let BestPot { price, rank } = part_box.best;
        let line_price = self.ground.problem.divider_lines[line as usize].price;
        let without = self.biased[biased as usize].share_without_divider;
        let mut names = node.names;
        names[Slot::DividerLine as usize] = self.ground.ranks.of(Slot::DividerLine, line as usize);
        names[Slot::Pot as usize] = rank;
        Node {
            // RX may be a link.
            share: Share { cost: without.cost + line_price + price, ..without },
            figures: node.figures,
            names,
            decided: node.decided.with(Slot::DividerLine),
            size: part_box.len().max(2),
            mark: ReferenceMark::Pots(biased, line, id),
        }
    }

    fn pot_pieces(
        &mut self,
        node: &ReferenceNode,
        (biased, line, id): (u32, u32, u32),
        children: &mut Vec<ReferenceNode>,
    ) {
        match self.pots.split(id) {
            Pieces::Halves(a, b) => {
                children.extend([a, b].map(|id| self.pots_node(node, biased, line, id)));
            }
            Pieces::Items(range) => {
                for place in range {
                    children.extend(self.complete(node, biased, line, Some(place)));
                }
            }
        }
    }

    /// All values chosen; None where no value of the line lies in the divider's window.
    fn complete(
        &self,
        node: &ReferenceNode,
        biased: u32,
        line: u32,
        pot: Option<usize>,
    ) -> Option<ReferenceNode> {
        let ground = self.ground;
        let Biased { item, line: bias_line, bias, share_without_divider: without } =
            &self.biased[biased as usize];
        let pot = pot.map(|place| &self.pots.items()[place]);
        let choice = choose_divider(
            &ground.aim,
            bias,
            &ground.divider_lines[line as usize],
            pot.map(|p| &ground.pots[p.index as usize]),
            ground.rail(),
        );
        let divider = choice.divider()?;
        let line_price = ground.problem.divider_lines[line as usize].price;
        let mut names = node.names;
        names[Slot::DividerLine as usize] = ground.ranks.of(Slot::DividerLine, line as usize);
        names[Slot::Pot as usize] = pot.map_or(0, |p| p.rank);
        Some(Node {
            share: Share {
                cost: without.cost + pieces(&divider) * line_price + pot.map_or(0.0, |p| p.price),
                current_a: without.current_a + nominal_current_a(bias, &divider),
                stress: without.stress,
            },
            figures: ReferenceFigures::Complete(CompleteReference {
                zener: self.boxes.items()[*item as usize].index,
                bias_line: *bias_line,
                bias: *bias,
                divider_line: line,
                divider,
                pot: pot.map(|p| p.index),
            }),
            names,
            decided: node.decided.with(Slot::DividerLine).with(Slot::Pot),
            size: 1,
            mark: ReferenceMark::Done,
        })
    }
}

impl Growth for ReferenceSide<'_, '_> {
    type Figures = ReferenceFigures;
    type Mark = ReferenceMark;

    fn root(&mut self) -> Option<ReferenceNode> {
        self.boxes.root().map(|id| self.box_node(id))
    }

    fn children(&mut self, node: &ReferenceNode, children: &mut Vec<ReferenceNode>) {
        match node.mark {
            ReferenceMark::Box(id) => match self.boxes.split(id) {
                Pieces::Halves(a, b) => children.extend([a, b].map(|id| self.box_node(id))),
                Pieces::Items(range) => children.extend(range.map(|item| self.zener_node(item))),
            },
            ReferenceMark::Zener(item) => self.bias_lines(item, children),
            ReferenceMark::Biased(biased) => self.divider_lines(node, biased, children),
            ReferenceMark::Pots(biased, line, id) => {
                self.pot_pieces(node, (biased, line, id), children);
            }
            ReferenceMark::Done => {}
        }
    }

    fn memory(&self) -> usize {
        self.boxes.memory() + self.pots.memory() + self.biased.capacity() * size_of::<Biased>()
    }
}
