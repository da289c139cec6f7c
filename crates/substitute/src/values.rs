//! Resistor values beside given parts: the fewest changed, and of these every one that nothing beats.
//!
//! A resistor keeps its value, or takes another of its line; RF and RX may also become a link. Where a
//! line is replaced a resistor keeps its value only if the new line stocks it.

use crate::built::same_ohm;
use crate::ground::Line;
use circuit::amplifier::{AmplifierAtRail, InputError};
use circuit::assembly::{Aim, Network, choose_divider, input_checks};
use circuit::check::WhileHolding;
use circuit::divider::{self, Divider, DividerCurrent, adjustable, fixed};
use circuit::rail::Rail;
use circuit::reference::{Bias, ZenerAtRail, choose_rz};
use circuit::resistor::{LineAtRail, PotAtRail, Resistance};
use quantity::digits::at_most;
use std::ops::ControlFlow::{self, Break, Continue};

/// Room left for rounding where values are passed over without a check.
const ROUNDING_ROOM: f64 = 1e-8;

/// A bias resistor with which a zener by itself holds, whatever the amplifier and the divider.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HeldRz {
    /// The zener with this RZ.
    pub bias: Bias,
    /// Greatest utilisation of the damage checks of the two.
    pub stress: f64,
    /// RZ has the value as built.
    pub as_built: bool,
}

/// Every RZ with which a zener by itself holds: the one as built, then other values of the line, the
/// larger first. `built` is None where the line does not stock that value.
pub fn held_rz(
    zener: &ZenerAtRail,
    line: &Line,
    built: Option<Resistance>,
    built_ohm: f64,
    rail: &Rail,
) -> Box<[HeldRz]> {
    let values = &line.at_rail.values;
    let (least, most) = (zener.smallest_rz_ohm(rail), zener.largest_rz_ohm(rail));
    let from = values.partition_point(|v| v.lo_ohm < least);
    let to = values.partition_point(|v| v.hi_ohm <= most);
    let possible = values.get(from..to).unwrap_or_default();
    let others = possible.iter().rev().filter(|rz| !same_ohm(rz.ohm, built_ohm));
    let all = built.iter().map(|rz| (*rz, true)).chain(others.map(|rz| (*rz, false)));
    let held = |(rz, as_built)| {
        let bias = zener.bias(rz, rail);
        let stress = zener.verdict(&bias, &line.at_rail).ok()?;
        Some(HeldRz { bias, stress, as_built })
    };
    all.filter_map(held).collect()
}

/// A zener may serve beside an amplifier with some RZ and divider of a line; false only where none does.
///
/// At no power V0lo is the highest and V0hi the lowest that any RZ leaves: see
/// [`ZenerAtRail::test_voltage`]; a droop only lowers VZlo, and impedance only raises VZhi.
pub fn may_serve(
    zener: &ZenerAtRail,
    amplifier: &AmplifierAtRail,
    (aim, spread): (&Aim, f64),
    rail: &Rail,
) -> bool {
    let v0 = zener.test_voltage(0.0, rail);
    amplifier.amp_input_low(v0.lo_v).holds()
        && amplifier.amp_input_high(v0.hi_v, rail).holds()
        && aim.may_suit(v0.lo_v, v0.hi_v, amplifier.input_error(v0.hi_v).error_v, spread)
}

/// The parts that resistors are chosen beside, and the resistors as built.
#[derive(Debug, Clone, Copy)]
pub struct Beside<'r> {
    /// The requirement.
    pub rail: &'r Rail,
    /// What the divider is asked.
    pub aim: &'r Aim,
    /// The zener.
    pub zener: &'r ZenerAtRail,
    /// The line of RZ.
    pub bias_line: &'r Line,
    /// The line of the divider.
    pub divider_line: &'r Line,
    /// The pot.
    pub pot: Option<&'r PotAtRail>,
    /// The amplifier.
    pub amplifier: &'r AmplifierAtRail,
    /// Every RZ with which zener and line by themselves hold.
    pub held: &'r [HeldRz],
    /// RF or RX as built; None where its line does not stock it.
    pub upper: Option<Resistance>,
    /// RI as built.
    pub ri: Option<Resistance>,
    /// RF or RX, and RI as built, Ω.
    pub built_ohm: [f64; 2],
}

/// Values with which every check holds that they have a part in.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ValueFit {
    /// RZ.
    pub rz: Resistance,
    /// RF or RX, and RI.
    pub divider: Divider,
    /// How many differ from those built.
    pub changed: u8,
    /// Greatest utilisation of the damage checks of reference and divider.
    pub stress: f64,
    /// What zener and divider draw, A.
    pub current_a: f64,
}

impl ValueFit {
    /// Draws no more, is stressed no more and costs no more than another.
    fn is_as_good_as(&self, other: &ValueFit) -> bool {
        let costs_no_more = self.divider.upper.is_link() || !other.divider.upper.is_link();
        costs_no_more && self.stress <= other.stress && self.current_a <= other.current_a
    }
}

/// Which resistors take another value.
#[derive(Debug, Clone, Copy)]
struct Changes {
    rz: bool,
    upper: bool,
    ri: bool,
}

impl Changes {
    /// Every set of so many resistors.
    fn of(count: u32) -> impl Iterator<Item = Changes> {
        (0u8..8).filter(move |bits| bits.count_ones() == count).map(|bits| Changes {
            rz: bits & 1 != 0,
            upper: bits & 2 != 0,
            ri: bits & 4 != 0,
        })
    }
}

impl<'r> Beside<'r> {
    /// The values with the fewest changes with which all checks hold: of several those that no other
    /// equals or beats in cost, stress and current. Empty where no values hold.
    pub fn fewest_changes(&self) -> Vec<ValueFit> {
        let mut front: Vec<ValueFit> = Vec::new();
        for count in 0..=3 {
            for changes in Changes::of(count) {
                // Never broken off: all of them are asked for.
                let _ = self.each(changes, &mut |fit| {
                    if !front.iter().any(|kept| kept.is_as_good_as(&fit)) {
                        front.retain(|kept| !fit.is_as_good_as(kept));
                        front.push(fit);
                    }
                    Continue(())
                });
            }
            if !front.is_empty() {
                break;
            }
        }
        front
    }

    /// Some values hold.
    pub fn some_hold(&self) -> bool {
        let as_built = Changes::of(0).any(|none| self.each(none, &mut |_| Break(())).is_break());
        as_built
            || self.usual_values_hold()
            || (1..=3).any(|count| {
                Changes::of(count).any(|changes| self.each(changes, &mut |_| Break(())).is_break())
            })
    }

    /// The values that a search would choose hold: quickly found, and mostly the answer.
    fn usual_values_hold(&self) -> bool {
        let Some((bias, _)) = choose_rz(self.zener, &self.bias_line.at_rail, self.rail) else {
            // No value of the line holds, but one as built that it does not stock may.
            return false;
        };
        let line = &self.divider_line.at_rail;
        let divider = choose_divider(self.aim, &bias, line, self.pot, self.rail).divider();
        divider.is_some_and(|divider| self.holds(&bias, divider).is_some())
    }

    /// Hands on every set of values that holds, in which just these differ from those built; larger
    /// values first.
    fn each(
        &self,
        changes: Changes,
        found: &mut impl FnMut(ValueFit) -> ControlFlow<()>,
    ) -> ControlFlow<()> {
        let of_these = |held: &&HeldRz| held.as_built != changes.rz;
        self.held
            .iter()
            .filter(of_these)
            .try_for_each(|held| self.each_beside(held, changes, found))
    }

    /// As [`Beside::each`], for one RZ.
    fn each_beside(
        &self,
        held: &HeldRz,
        changes: Changes,
        found: &mut impl FnMut(ValueFit) -> ControlFlow<()>,
    ) -> ControlFlow<()> {
        let HeldRz { bias, stress: reference_stress, .. } = *held;
        let input = self.amplifier.input_error(bias.vz_hi_v);
        let spread = self.divider_line.spread;
        if !self.aim.may_suit(bias.vz_lo_v, bias.vz_hi_v, input.error_v, spread) {
            return Continue(());
        }
        let [upper_ohm, ri_ohm] = self.built_ohm;
        let line = &self.divider_line.at_rail;
        let mut take = |upper: Resistance, ri: Resistance| {
            let divider = Divider { upper, ri };
            let Some(stress) = self.holds(&bias, divider) else { return Continue(()) };
            found(ValueFit {
                rz: bias.rz,
                divider,
                changed: u8::from(changes.rz) + u8::from(changes.upper) + u8::from(changes.ri),
                stress: stress.max(reference_stress),
                current_a: divider::nominal_current_a(&bias, &divider) + bias.iz_nominal_a,
            })
        };
        let mut beside_ri = |ri: Resistance| {
            if !changes.upper {
                return match self.upper {
                    Some(upper) => take(upper, ri),
                    None => Continue(()),
                };
            }
            for upper in self.possible_uppers(&bias, &ri, input).iter().rev() {
                if !same_ohm(upper.ohm, upper_ohm) {
                    take(*upper, ri)?;
                }
            }
            if upper_ohm == 0.0 { Continue(()) } else { take(Resistance::LINK, ri) }
        };
        if !changes.ri {
            return self.ri.map_or(Continue(()), beside_ri);
        }
        for ri in in_window(&bias, line, input, self.rail).iter().rev() {
            if !same_ohm(ri.ohm, ri_ohm) {
                beside_ri(*ri)?;
            }
        }
        Continue(())
    }

    /// The stress where amplifier and divider hold beside a reference.
    fn holds(&self, bias: &Bias, divider: Divider) -> Option<f64> {
        let network = Network { line: &self.divider_line.at_rail, divider, pot: self.pot };
        WhileHolding::over(|t| input_checks(self.amplifier, bias, &network, self.aim, self.rail, t))
            .ok()
    }

    /// The values of RF or RX beside RI that may keep the output where it is asked: necessary
    /// conditions alone.
    ///
    /// Every output of the divider is a straight line in the value, since both ends of its tolerance
    /// are in proportion to it; those that must stay low never fall. So each condition leaves values
    /// that lie together.
    fn possible_uppers(&self, bias: &Bias, ri: &Resistance, input: InputError) -> &'r [Resistance] {
        let values = &self.divider_line.at_rail.values;
        let divider = |upper: &Resistance| Divider { upper: *upper, ri: *ri };
        let above = |v: f64, limit: f64| v > limit * (1.0 + ROUNDING_ROOM);
        let short = |v: f64, limit: f64| v < limit * (1.0 - ROUNDING_ROOM);
        let (from, to) = match (self.aim, self.pot) {
            (Aim::Fixed(_), _) => {
                let output = |upper: &Resistance| fixed::output(bias, &divider(upper), input);
                let most_v = self.rail.highest_output_v();
                let least_v = self.rail.lowest_output_v();
                (
                    first_not_short(values, |v| output(v).lo_v, least_v, short),
                    values.partition_point(|v| !above(output(v).hi_v, most_v)),
                )
            }
            (Aim::Adjustable(aim), Some(pot)) => {
                let output =
                    |upper: &Resistance| adjustable::output(bias, &divider(upper), pot, input);
                let ceiling_v = aim.ceiling_v.unwrap_or(f64::INFINITY);
                let reach = first_not_short(values, |v| output(v).reach_v, aim.to_v, short);
                let stop = first_not_short(values, |v| output(v).low_v, aim.low_stop_v, short);
                let to = values.partition_point(|v| {
                    let output = output(v);
                    !above(output.floor_v, aim.from_v) && !above(output.top_v, ceiling_v)
                });
                (reach.max(stop), to)
            }
            (Aim::Adjustable(_), None) => (0, 0),
        };
        values.get(from..to).unwrap_or_default()
    }
}

/// The first place from which on a straight line is not short of its limit; 0 where it falls, for then
/// nothing can be cut away at this end.
fn first_not_short(
    values: &[Resistance],
    line: impl Fn(&Resistance) -> f64,
    limit: f64,
    short: impl Fn(f64, f64) -> bool,
) -> usize {
    let rises = match (values.first(), values.last()) {
        (Some(first), Some(last)) => line(first) <= line(last),
        _ => false,
    };
    if rises { values.partition_point(|v| short(line(v), limit)) } else { 0 }
}

/// The values that keep the divider current in its window beside this amplifier: both corner currents
/// fall as RI rises, so they lie together.
fn in_window<'l>(
    bias: &Bias,
    line: &'l LineAtRail,
    input: InputError,
    rail: &Rail,
) -> &'l [Resistance] {
    let current = |ri: &Resistance| DividerCurrent::new(bias, ri, input);
    let from = line.values.partition_point(|ri| !at_most(current(ri).hi_a, rail.divider.max_a));
    let to = line.values.partition_point(|ri| at_most(rail.divider.min_a, current(ri).lo_a));
    line.values.get(from..to).unwrap_or_default()
}
