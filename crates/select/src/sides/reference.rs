//! The reference side: zener, bias line with RZ, divider line with its values, pot.

use crate::boxes::{Boxes, Item, Pieces};
use crate::grove::{Growth, Names, Node, Share, Slots};
use crate::problem::Ground;
use crate::sides::amplifier::AmplifierSide;
use crate::sides::meet_reference;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{PotSpan, choose_divider, may_hold};
use circuit::divider::{Divider, nominal_current_a};
use circuit::parts::Zener;
use circuit::reference::{Bias, ZenerAtRail, choose_rz};
use circuit::slot::Slot;
use rayon::prelude::*;
use std::sync::Arc;

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

/// Pots that may serve beside a biased zener, the cheapest first.
struct PotRow {
    index: u32,
    /// The least place by name from here on.
    least_rank: u32,
    /// The longest track from here on, at its low end, Ω.
    longest_ohm: f64,
}

/// A zener with the RZ of a line.
struct Biased {
    item: u32,
    line: u32,
    bias: Bias,
    share_without_divider: Share,
    /// Pots that may serve beside it; made when they are first asked for.
    pots: Option<Arc<[PotRow]>>,
}

/// Of the pots that may serve beside a biased zener and a divider line, the dearer ones.
#[derive(Clone, Copy)]
pub(crate) struct PotsLeft {
    /// Place among the biased.
    biased: u32,
    line: u32,
    /// The cheapest of them: its place in the list of the biased zener.
    from: u32,
    /// How many cheaper ones have been taken.
    taken: u32,
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
    /// The same with a divider line, and some of the pots that may serve.
    Pots(PotsLeft),
    /// All values chosen.
    Done,
}

pub(crate) type ReferenceNode = Node<ReferenceFigures, ReferenceMark>;

/// Zeners, lines and pots.
pub(crate) struct ReferenceSide<'g, 'p> {
    ground: &'g Ground<'p>,
    boxes: Boxes<ZenerItem>,
    /// Pots that may serve at all, the cheapest first.
    pots: Vec<u32>,
    biased: Vec<Biased>,
    least: LeastPrices,
    /// The best figures of all amplifiers.
    best_amplifier: Option<AmplifierAtRail>,
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
    fn new(ground: &Ground<'_>, pots: &[u32]) -> Self {
        let least = |prices: &mut dyn Iterator<Item = f64>| prices.fold(f64::INFINITY, f64::min);
        let problem = ground.problem;
        let first = |any: bool| u32::from(any);
        Self {
            bias_line: least(&mut problem.bias_lines.iter().map(|p| p.price)),
            divider_line: least(&mut problem.divider_lines.iter().map(|p| p.price)),
            pot: pots.first().map_or(0.0, |&p| problem.pots[p as usize].price),
            bias_line_rank: first(!problem.bias_lines.is_empty()),
            divider_line_rank: first(!problem.divider_lines.is_empty()),
            pot_rank: u32::from(!pots.is_empty()),
        }
    }
}

/// The least nominal divider current of a zener whose voltage is at most `vz_lo_v` at the low corner.
///
/// RI lies in the window with the allowances, so RI ≤ RIhi ≤ (VZlo − εd)/(divider.min_a + ibd); and
/// VZn ≥ vz − zzt·izt.
fn least_divider_current_a(ground: &Ground<'_>, zener: &Zener, vz_lo_v: f64) -> f64 {
    least_current_a(ground, zener.vz_v - zener.zzt_ohm * zener.izt_a, vz_lo_v)
}

fn least_current_a(ground: &Ground<'_>, vz_nominal_v: f64, vz_lo_v: f64) -> f64 {
    let rules = &ground.rail().divider;
    let across_v = vz_lo_v - rules.allow_error_v;
    if across_v <= 0.0 {
        return 0.0;
    }
    let least = vz_nominal_v / across_v * (rules.min_a + rules.allow_bias_a);
    // Room for the ten digits at which the window is compared.
    (least * (1.0 - 1e-8)).max(0.0)
}

/// What a pot is asked beside a reference and the best amplifier; None with a fixed output.
fn pot_span(
    ground: &Ground<'_>,
    volts: (f64, f64),
    best_amplifier: &AmplifierAtRail,
    line_spread: f64,
) -> Option<PotSpan> {
    let error_v = best_amplifier.input_error(volts.1).error_v;
    ground.aim.pot_span(volts, error_v, &ground.rail().divider, line_spread)
}

/// Pieces of a divider line that a board takes: RI, and RF or RX where it is no link.
fn pieces(divider: &Divider) -> f64 {
    if divider.upper.is_link() { 1.0 } else { 2.0 }
}

impl<'g, 'p> ReferenceSide<'g, 'p> {
    /// References that may suit the best figures of all amplifiers.
    pub fn new(ground: &'g Ground<'p>, amplifiers: &AmplifierSide) -> Self {
        let best_amplifier = amplifiers.best();
        let rail = ground.rail();
        let mut pots: Vec<u32> =
            if rail.is_adjustable() { (0..ground.pots.len() as u32).collect() } else { Vec::new() };
        pots.sort_by(|a, b| {
            let price = |p: &u32| ground.problem.pots[*p as usize].price;
            price(a).total_cmp(&price(b)).then(a.cmp(b))
        });
        let least = LeastPrices::new(ground, &pots);
        let fillable = !ground.problem.bias_lines.is_empty()
            && !ground.problem.divider_lines.is_empty()
            && (!rail.is_adjustable() || !pots.is_empty());
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
                if v0.lo_v <= 0.0 || !outlook.may_suit(best_amplifier?, ground) {
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
                        current_a: at_rail.least_nominal_current_a(rail)
                            + least_divider_current_a(ground, at_rail.zener(), v0.lo_v),
                        stress: 0.0,
                    },
                    rank: ground.ranks.of(Slot::Zener, index),
                })
            })
            .collect();
        let best_amplifier = best_amplifier.copied();
        Self { ground, boxes: Boxes::new(items), pots, biased: Vec::new(), least, best_amplifier }
    }

    /// At most the shares of all reference sides, zener by zener.
    pub fn shares(&self) -> impl Iterator<Item = Share> {
        self.boxes.items().iter().map(|item| item.share)
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
                    current_a: without.current_a
                        + least_current_a(ground, bias.vz_nominal_v, bias.vz_lo_v),
                    stress,
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
                pots: None,
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
        let lines = 0..self.ground.divider_lines.len() as u32;
        if self.ground.rail().is_adjustable() {
            let pots = self.pots_of(biased);
            children.extend(lines.filter_map(|line| {
                let all = PotsLeft { biased, line, from: 0, taken: 0 };
                let from = self.first_serving(&pots, &all)?;
                self.pots_node(node, &pots, PotsLeft { from, ..all })
            }));
        } else {
            children.extend(lines.filter_map(|line| self.complete(node, biased, line, None)));
        }
    }

    /// The pots that may serve beside a biased zener.
    fn pots_of(&mut self, biased: u32) -> Arc<[PotRow]> {
        let ground = self.ground;
        let Biased { bias, pots, .. } = &mut self.biased[biased as usize];
        let volts = (bias.vz_lo_v, bias.vz_hi_v);
        let best = self.best_amplifier.as_ref();
        let span = best.and_then(|amp| pot_span(ground, volts, amp, ground.least_line_spread));
        let all = &self.pots;
        let rows = pots.get_or_insert_with(|| {
            let mut rows: Vec<PotRow> = all
                .iter()
                .filter(|p| span.is_none_or(|s| s.may_serve(&ground.pots[**p as usize])))
                .map(|&index| PotRow {
                    index,
                    least_rank: ground.ranks.of(Slot::Pot, index as usize),
                    longest_ohm: ground.pots[index as usize].track.lo_ohm,
                })
                .collect();
            for place in (1..rows.len()).rev() {
                rows[place - 1].least_rank = rows[place - 1].least_rank.min(rows[place].least_rank);
                rows[place - 1].longest_ohm =
                    rows[place - 1].longest_ohm.max(rows[place].longest_ohm);
            }
            rows.into()
        });
        Arc::clone(rows)
    }

    /// The first place from `from` on of a pot that may hold; None behind the last.
    fn first_serving(&self, pots: &[PotRow], left: &PotsLeft) -> Option<u32> {
        let ground = self.ground;
        let bias = &self.biased[left.biased as usize].bias;
        let best = self.best_amplifier.as_ref()?;
        let line = &ground.divider_lines[left.line as usize];
        let span = pot_span(ground, (bias.vz_lo_v, bias.vz_hi_v), best, line.spread())?;
        let input = best.input_error(bias.vz_hi_v);
        let holds = |row: &PotRow| {
            let pot = &ground.pots[row.index as usize];
            span.may_serve(pot)
                && may_hold(&ground.aim, bias, line, Some(pot), input, ground.rail())
        };
        let ahead = pots.get(left.from as usize..)?.iter().position(holds)?;
        Some(left.from + ahead as u32)
    }

    /// The pots left, of which the first may hold.
    fn pots_node(
        &self,
        node: &ReferenceNode,
        pots: &[PotRow],
        left: PotsLeft,
    ) -> Option<ReferenceNode> {
        let ground = self.ground;
        let PotsLeft { biased, line, from, .. } = left;
        let Biased { bias, share_without_divider: without, .. } = &self.biased[biased as usize];
        let at_rail = &ground.divider_lines[line as usize];
        let volts = (bias.vz_lo_v, bias.vz_hi_v);
        let span = pot_span(ground, volts, self.best_amplifier.as_ref()?, at_rail.spread())?;
        let first = pots.get(from as usize)?;
        let price = ground.problem.pots[first.index as usize].price;
        let line_price = ground.problem.divider_lines[line as usize].price;
        let pieces = if ground.aim.may_follow(bias.vz_lo_v, bias.vz_hi_v) { 1.0 } else { 2.0 };
        let by_window = least_current_a(ground, bias.vz_nominal_v, bias.vz_lo_v);
        let by_track = span.least_current_a(bias.vz_nominal_v, first.longest_ohm);
        let mut names = node.names;
        names[Slot::DividerLine as usize] = ground.ranks.of(Slot::DividerLine, line as usize);
        names[Slot::Pot as usize] = first.least_rank;
        Some(Node {
            share: Share {
                cost: without.cost + pieces * line_price + price,
                current_a: without.current_a + by_window.max(by_track),
                stress: without.stress,
            },
            figures: node.figures,
            names,
            decided: node.decided.with(Slot::DividerLine),
            size: (pots.len() as u32 - from).max(2),
            mark: ReferenceMark::Pots(left),
        })
    }

    /// The cheapest of the pots left, as many as were taken before, and a node for those behind them:
    /// a few at first, for a list needs few, and a short chain of nodes where a thousand serve.
    fn next_pots(
        &self,
        node: &ReferenceNode,
        mut left: PotsLeft,
        children: &mut Vec<ReferenceNode>,
    ) {
        let Some(pots) = self.biased[left.biased as usize].pots.as_deref() else { return };
        for _ in 0..left.taken.max(1) {
            let Some(row) = pots.get(left.from as usize) else { return };
            children.extend(self.complete(node, left.biased, left.line, Some(row.index)));
            left.taken += 1;
            left.from += 1;
            let Some(from) = self.first_serving(pots, &left) else { return };
            left.from = from;
        }
        children.extend(self.pots_node(node, pots, left));
    }

    /// All values chosen; None where no value of the line lies in the divider's window, or where it does
    /// not even suit the best figures of all amplifiers. Stress beside those is part of its share, for
    /// beside any amplifier it is at least as much.
    fn complete(
        &self,
        node: &ReferenceNode,
        biased: u32,
        line: u32,
        pot: Option<u32>,
    ) -> Option<ReferenceNode> {
        let ground = self.ground;
        let Biased { item, line: bias_line, bias, share_without_divider: without, .. } =
            &self.biased[biased as usize];
        let choice = choose_divider(
            &ground.aim,
            bias,
            &ground.divider_lines[line as usize],
            pot.map(|p| &ground.pots[p as usize]),
            ground.rail(),
        );
        let complete = CompleteReference {
            zener: self.boxes.items()[*item as usize].index,
            bias_line: *bias_line,
            bias: *bias,
            divider_line: line,
            divider: choice.divider()?,
            pot,
        };
        let figures = ReferenceFigures::Complete(complete);
        let meeting = meet_reference(ground, &figures, self.best_amplifier.as_ref()?)?;
        let divider = &complete.divider;
        let pot_price = pot.map_or(0.0, |p| ground.problem.pots[p as usize].price);
        let line_price = ground.problem.divider_lines[line as usize].price;
        let mut names = node.names;
        names[Slot::DividerLine as usize] = ground.ranks.of(Slot::DividerLine, line as usize);
        names[Slot::Pot as usize] = pot.map_or(0, |p| ground.ranks.of(Slot::Pot, p as usize));
        Some(Node {
            share: Share {
                cost: without.cost + pieces(divider) * line_price + pot_price,
                current_a: without.current_a + nominal_current_a(bias, divider),
                stress: without.stress.max(meeting),
            },
            figures,
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
            ReferenceMark::Pots(left) => self.next_pots(node, left, children),
            ReferenceMark::Done => {}
        }
    }

    fn memory(&self) -> usize {
        self.boxes.memory() + self.biased.capacity() * size_of::<Biased>()
    }
}
