//! The choice of resistor values, by trying every one.
//!
//! Model page, sections 4.1 (RZ), 4.2 (window), 4.3 (RF, RI), 4.4 (RX, RI).

use circuit::amplifier::InputError;
use circuit::assembly::Aim;
use circuit::check::Finding;
use circuit::divider::adjustable::{self, AdjustableAim};
use circuit::divider::fixed::{self, FixedAim};
use circuit::divider::{Divider, DividerCurrent};
use circuit::rail::Rail;
use circuit::reference::{Bias, ZenerAtRail};
use circuit::resistor::{LineAtRail, PotAtRail, Resistance};
use quantity::digits::{at_most, compare, rounded};
use std::cmp::Ordering;

/// The reference with the value that was taken for RZ.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PlainRz {
    /// The zener with RZ.
    pub bias: Bias,
    /// All five checks of section 4.1 hold.
    pub holds: bool,
}

/// How a divider was come by.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum State {
    /// With the allowances all its checks hold.
    Holds,
    /// With the allowances no pair holds all of them; this one is strained least.
    Strained,
}

/// The pair of values that was taken from a line.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PlainDivider {
    /// The pair.
    pub divider: Divider,
    /// Whether it holds.
    pub state: State,
}

/// RZ: of the values with which all five checks hold the one whose IZn is nearest to the target in
/// |ln(IZn/target)|; where there is none, the one whose greatest utilisation is least. On a tie the
/// larger. None for a line without values.
pub fn plain_rz(zener: &ZenerAtRail, line: &LineAtRail, rail: &Rail) -> Option<PlainRz> {
    struct Tried {
        bias: Bias,
        findings: Vec<Finding>,
    }
    let tried: Vec<Tried> = line
        .values
        .iter()
        .map(|&value| {
            let bias = zener.bias(value, rail);
            let mut findings = Vec::new();
            let _ = zener.checks(&bias, line, &mut findings);
            Tried { bias, findings }
        })
        .collect();

    let target_a = rail.bias_a.unwrap_or(zener.zener().izt_a);
    let distance = |t: &Tried| {
        if t.bias.iz_nominal_a <= 0.0 {
            f64::INFINITY
        } else {
            (t.bias.iz_nominal_a / target_a).ln().abs()
        }
    };
    let larger_first = |a: &Tried, b: &Tried| compare(b.bias.rz.ohm, a.bias.rz.ohm);

    let nearest = tried
        .iter()
        .filter(|t| all_hold(&t.findings))
        .min_by(|a, b| compare(distance(a), distance(b)).then_with(|| larger_first(a, b)));
    if let Some(t) = nearest {
        return Some(PlainRz { bias: t.bias, holds: true });
    }
    let least_bad = tried.iter().min_by(|a, b| {
        compare(greatest(&a.findings), greatest(&b.findings)).then_with(|| larger_first(a, b))
    });
    least_bad.map(|t| PlainRz { bias: t.bias, holds: false })
}

/// The divider for a reference, a line and, where the output is adjustable, a pot. None where no
/// value of the line lies in the window, or an adjustable output has no pot.
pub fn plain_divider(
    aim: &Aim,
    bias: &Bias,
    line: &LineAtRail,
    pot: Option<&PotAtRail>,
    rail: &Rail,
) -> Option<PlainDivider> {
    match (aim, pot) {
        (Aim::Fixed(aim), _) => fixed_divider(aim, bias, line, rail),
        (Aim::Adjustable(aim), Some(pot)) => adjustable_divider(aim, bias, line, pot, rail),
        (Aim::Adjustable(_), None) => None,
    }
}

/// A pair of values with what its checks find under the allowances.
struct Pair {
    divider: Divider,
    findings: Vec<Finding>,
    /// What is made least among pairs that hold: the utilisation of `output-error` of a fixed output,
    /// the overshoot of an adjustable one.
    figure: f64,
    /// |VLn − V| of a fixed output, between rounded figures; 0 for an adjustable one, whose ties it
    /// does not decide.
    off_nominal_v: f64,
}

fn fixed_divider(
    aim: &FixedAim,
    bias: &Bias,
    line: &LineAtRail,
    rail: &Rail,
) -> Option<PlainDivider> {
    let input = InputError::allowance(rail);
    best_pair(pairs(bias, line, rail).map(|divider| {
        let output = fixed::output(bias, &divider, input);
        let mut findings = Vec::new();
        let _ = fixed::checks(aim, bias, &divider, line, input, &mut findings);
        Pair {
            divider,
            findings,
            figure: fixed::output_error(aim, &output).utilisation(),
            off_nominal_v: (rounded(output.nominal_v) - rounded(aim.voltage_v)).abs(),
        }
    }))
}

fn adjustable_divider(
    aim: &AdjustableAim,
    bias: &Bias,
    line: &LineAtRail,
    pot: &PotAtRail,
    rail: &Rail,
) -> Option<PlainDivider> {
    let input = InputError::allowance(rail);
    best_pair(pairs(bias, line, rail).map(|divider| {
        let output = adjustable::output(bias, &divider, pot, input);
        let mut findings = Vec::new();
        let _ = adjustable::checks(aim, bias, &divider, line, pot, input, &mut findings);
        Pair {
            divider,
            findings,
            figure: (output.top_v - aim.to_v) / aim.to_v + (aim.from_v - output.low_v) / aim.from_v,
            off_nominal_v: 0.0,
        }
    }))
}

/// Every pair of a link or value of the line above a value of the line that lies in the window.
fn pairs<'a>(
    bias: &'a Bias,
    line: &'a LineAtRail,
    rail: &'a Rail,
) -> impl Iterator<Item = Divider> + 'a {
    let input = InputError::allowance(rail);
    let in_window = move |ri: &&Resistance| {
        let current = DividerCurrent::new(bias, ri, input);
        at_most(rail.divider.min_a, current.lo_a) && at_most(current.hi_a, rail.divider.max_a)
    };
    line.values.iter().filter(in_window).flat_map(|&ri| {
        let uppers = std::iter::once(Resistance::LINK).chain(line.values.iter().copied());
        uppers.map(move |upper| Divider { upper, ri })
    })
}

/// Of the pairs that hold the one with the least figure, else the one whose greatest utilisation is
/// least. Ties: the least |VLn − V|, then the larger RI, then the larger upper resistor.
fn best_pair(pairs: impl Iterator<Item = Pair>) -> Option<PlainDivider> {
    let pairs: Vec<Pair> = pairs.collect();
    let on_a_tie = |a: &Pair, b: &Pair| -> Ordering {
        compare(a.off_nominal_v, b.off_nominal_v)
            .then_with(|| compare(b.divider.ri.ohm, a.divider.ri.ohm))
            .then_with(|| compare(b.divider.upper.ohm, a.divider.upper.ohm))
    };
    let holding = pairs
        .iter()
        .filter(|p| all_hold(&p.findings))
        .min_by(|a, b| compare(a.figure, b.figure).then_with(|| on_a_tie(a, b)));
    if let Some(pair) = holding {
        return Some(PlainDivider { divider: pair.divider, state: State::Holds });
    }
    let least_strained = pairs.iter().min_by(|a, b| {
        compare(greatest(&a.findings), greatest(&b.findings)).then_with(|| on_a_tie(a, b))
    });
    least_strained.map(|pair| PlainDivider { divider: pair.divider, state: State::Strained })
}

fn all_hold(findings: &[Finding]) -> bool {
    findings.iter().all(Finding::holds)
}

fn greatest(findings: &[Finding]) -> f64 {
    findings.iter().map(Finding::utilisation).fold(0.0, f64::max)
}
