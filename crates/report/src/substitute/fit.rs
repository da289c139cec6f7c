//! Parts and values with what comes of them: every check, output, heat, cost, and what a bench test
//! should read.

use crate::figure::Figure;
use crate::proof::told;
use crate::shortlist::{CheckRow, Output};
use circuit::check::Kind;
use circuit::divider::DividerCurrent;
use circuit::merit::binding;
use design::condition::{Rule, conditions};
use design::parts::Parts;
use design::proof::{AtRail, Fitted};
use serde::Serialize;
use sheet::Sheet;

/// Parts and values with what comes of them.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Fit {
    /// Every check holds, and the heatsink takes the transistor.
    pub holds: bool,
    /// Demands that are not electrical and fail, a clause each: told, and no matter of replacement.
    pub conditions: Vec<String>,
    /// Cost of one board; None where a part is described by the design itself.
    pub cost: Option<Figure>,
    /// η.
    pub efficiency: Figure,
    /// 1 − the greatest utilisation of the damage checks.
    pub margin: Figure,
    /// 1 − the greatest utilisation of the function checks but `divider-window`.
    pub slack: Figure,
    /// The damage check used most.
    pub binding_damage: Option<&'static str>,
    /// The function check used most.
    pub binding_function: Option<&'static str>,
    /// The output at the corners.
    pub output: Output,
    /// The lowest feed with headroom, V.
    pub lowest_feed_v: Figure,
    /// What the transistor turns into heat at the hottest load, W.
    pub heat_w: Figure,
    /// Its case then, °C.
    pub case_c: Figure,
    /// Its junction then, °C.
    pub junction_c: Figure,
    /// Every check that the rail calls for, in page order.
    pub checks: Vec<CheckRow>,
    /// What a bench test should read.
    pub bench: Vec<Reading>,
}

/// A figure that can be measured, with the limits that all corners leave it; None: no limit.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct Reading {
    /// What is measured, and where.
    pub what: &'static str,
    /// Under which conditions.
    pub when: &'static str,
    /// At least.
    pub least: Option<Figure>,
    /// At most.
    pub most: Option<Figure>,
    /// The unit.
    pub unit: &'static str,
}

impl Fit {
    /// Makes every check; None where figures are not known that checks need.
    pub fn of(parts: &Parts<'_>, sheet: &Sheet) -> Option<Self> {
        let rail = &sheet.rail;
        let fitted = Fitted::new(parts, rail)?;
        let at_rail = AtRail::new(&fitted, parts, rail)?;
        let proof = at_rail.prove();
        let (damage, function) =
            (binding(&proof.findings, Kind::Damage), binding(&proof.findings, Kind::Function));
        let verdicts = conditions(parts, sheet, sheet.boards);
        // Of these the proof itself depends; the others are the sheet's wishes.
        let bears = |rule| {
            matches!(rule, Rule::Footprint | Rule::Blanks | Rule::Polarity | Rule::Resistance)
        };
        let fails = || verdicts.iter().filter(|v| !v.holds);
        let holds = proof.findings.iter().all(circuit::check::Finding::holds)
            && fails().all(|v| !bears(v.rule));
        let clause = |v: &design::condition::Verdict| {
            format!("{} of {}: {}", v.rule.name(), v.slot.name(), told::fact(v, sheet))
        };
        Some(Self {
            holds,
            conditions: fails().map(clause).collect(),
            cost: substitute::desk::cost(parts, sheet.boards).map(Figure),
            efficiency: Figure(proof.efficiency),
            margin: Figure(1.0 - damage.utilisation),
            slack: Figure(1.0 - function.utilisation),
            binding_damage: damage.check.map(|c| c.name()),
            binding_function: function.check.map(|c| c.name()),
            output: Output::new(&proof.output),
            lowest_feed_v: Figure(proof.lowest_feed_v),
            heat_w: Figure(at_rail.duty.power_w),
            case_c: Figure(at_rail.mounted.case.service_c),
            junction_c: Figure(at_rail.mounted.junction_c),
            checks: proof.findings.iter().map(CheckRow::new).collect(),
            bench: readings(&at_rail),
        })
    }

    /// A check by its name.
    pub fn check(&self, name: &str) -> Option<&CheckRow> {
        self.checks.iter().find(|check| check.name == name)
    }

    /// The name is that of a check that binds.
    pub fn is_bound_by(&self, name: &str) -> bool {
        self.binding_damage == Some(name) || self.binding_function == Some(name)
    }
}

/// The check holds, as far as both its sides tell.
pub(crate) fn row_holds(check: &CheckRow) -> bool {
    quantity::digits::at_most(check.utilisation.0, 1.0)
}

/// What can be measured, with its limits at all corners.
fn readings(at: &AtRail<'_>) -> Vec<Reading> {
    let assembly = at.assembly();
    let (bias, input) = (assembly.bias, assembly.input_error());
    let divider = DividerCurrent::new(&bias, &assembly.network.divider.ri, input);
    let both = |what, when, (least, most): (f64, f64), unit| Reading {
        what,
        when,
        least: Some(Figure(least)),
        most: Some(Figure(most)),
        unit,
    };
    let at_most = |what, when, most: f64, unit| Reading {
        what,
        when,
        least: None,
        most: Some(Figure(most)),
        unit,
    };
    const ANY: &str = "any feed, load and ambient of the sheet";
    let mut list = match assembly.output() {
        circuit::assembly::OutputFigures::Fixed(o) => {
            vec![both("output voltage", ANY, (o.lo_v, o.hi_v), "V")]
        }
        circuit::assembly::OutputFigures::Adjustable(o) => vec![
            both("output voltage", "knob at its low end", (o.low_v, o.floor_v), "V"),
            both("output voltage", "knob at its high end", (o.reach_v, o.top_v), "V"),
        ],
    };
    list.extend([
        both("voltage on the zener", ANY, (bias.vz_lo_v, bias.vz_hi_v), "V"),
        both("current of the zener, by the drop on RZ", ANY, (bias.iz_lo_a, bias.iz_hi_a), "A"),
        both("current of the divider, by the drop on RI", ANY, (divider.lo_a, divider.hi_a), "A"),
        at_most(
            "feed at which regulation is lost",
            "full load, feed turned down",
            assembly.lowest_feed_v(),
            "V",
        ),
        at_most(
            "base current of the transistor",
            "full load, coldest ambient",
            at.pass.base.most_a,
            "A",
        ),
        at_most(
            "case of the transistor",
            "hottest load, highest feed and ambient",
            at.mounted.case.service_c,
            "°C",
        ),
    ]);
    if at.rail.fault.is_some() {
        list.push(at_most(
            "case of the transistor",
            "output shorted as the sheet says, from the hottest load",
            at.mounted.case.fault_c,
            "°C",
        ));
    }
    list
}
