//! Keys, parts, findings and changes, as every reason names them.

use crate::look::Look;
use circuit::check::{Check, Finding};
use circuit::rail::Rail;
use circuit::slot::Slot;
use quantity::digits::rounded;
use quantity::notation::{Unit, engineering, resistance};
use reasons::change::{Change, KeyChanges, Side, Threshold};
use reasons::lever::Lever;
use reasons::probe::{Admitted, Name, name_at};
use reasons::survey::Miss;
use select::problem::Problem;

/// Columns by which the text below a heading is indented.
pub(super) const INDENT: usize = 2;

/// Digits in which figures of checks are told.
const DIGITS: usize = 4;

/// `maker/part`, or the part alone where it has no maker.
pub(super) fn full_name(name: &Name) -> String {
    if name.maker.is_empty() { name.part.clone() } else { format!("{}/{}", name.maker, name.part) }
}

/// A figure in a unit: with an SI prefix where the unit takes one.
pub(super) fn figure(x: f64, unit: Unit) -> String {
    match unit {
        Unit::Volt | Unit::Ampere | Unit::Watt | Unit::Second | Unit::Hertz if x.is_finite() => {
            engineering(x, unit.symbol(), 10)
        }
        Unit::Ohm if x.is_finite() => resistance(x),
        Unit::Second if x == f64::INFINITY => "forever".to_owned(),
        Unit::Plain => plain(x),
        _ => format!("{} {}", plain(x), unit.symbol()),
    }
}

fn plain(x: f64) -> String {
    let text = format!("{:?}", rounded(x));
    text.strip_suffix(".0").map(str::to_owned).unwrap_or(text)
}

/// A figure of a check in the check's unit.
fn of_check(x: f64, unit: &str) -> String {
    match unit {
        _ if x == f64::INFINITY => "infinite".to_owned(),
        _ if !x.is_finite() => "nothing".to_owned(),
        "°C" => format!("{x:.1} °C"),
        unit => engineering(x, unit, DIGITS),
    }
}

/// `swing-high: asked 12.9 V, allowed 12 V, short by 900 mV`.
pub(super) fn failed(finding: &Finding) -> String {
    let unit = finding.check.unit();
    let asked = of_check(finding.asked, unit);
    let allowed = of_check(finding.allowed, unit);
    let name = finding.check.name();
    if finding.check == Check::DividerWindow && !finding.asked.is_finite() {
        return format!("{name}: the line has no value in the window");
    }
    if !finding.asked.is_finite() || !finding.allowed.is_finite() {
        return format!("{name}: asked {asked}, allowed {allowed}");
    }
    let short = of_check(finding.asked - finding.allowed, unit);
    format!("{name}: asked {asked}, allowed {allowed}, short by {short}")
}

/// The parts of a combination, in the order of slots.
pub(super) fn parts_of_miss(miss: &Miss, problem: &Problem<'_>) -> String {
    let name = |slot: Slot| name_at(problem, slot, miss.places[slot as usize]? as usize);
    parts(&Slot::ALL.map(name), problem.rail.chooses_heatsink())
}

/// Findings of checks that fail.
pub(super) fn failures<'f>(findings: impl IntoIterator<Item = &'f Finding>) -> String {
    findings.into_iter().map(failed).collect::<Vec<_>>().join("; ")
}

/// The parts of a candidate with its resistors and its cost.
pub(super) fn candidate(
    admitted: &Admitted,
    chooses_sink: bool,
    currency: &Currency<'_>,
) -> String {
    let values = [admitted.rz.ohm, admitted.upper_ohm, admitted.ri_ohm].map(|ohm| match ohm {
        0.0 => "link".to_owned(),
        ohm => resistance(ohm),
    });
    format!(
        "{}; RZ {}, {} {}, RI {}; {}",
        parts(&admitted.parts, chooses_sink),
        values[0],
        if admitted.parts[Slot::Pot as usize].is_some() { "RX" } else { "RF" },
        values[1],
        values[2],
        currency.cost(admitted.cost)
    )
}

pub(super) fn parts(parts: &[Option<Name>; Slot::COUNT], chooses_sink: bool) -> String {
    let mut told: Vec<String> = parts.iter().flatten().map(full_name).collect();
    if parts[Slot::Heatsink as usize].is_none() && chooses_sink {
        told.push("unmounted".to_owned());
    }
    told.join(" + ")
}

/// How costs are told.
#[derive(Debug, Clone, Copy)]
pub(super) struct Currency<'a>(pub Option<&'a str>);

impl Currency<'_> {
    pub fn cost(&self, cost: f64) -> String {
        match self.0 {
            Some(currency) => format!("{cost:.2} {currency}"),
            None => format!("cost {cost:.2}"),
        }
    }
}

/// `load.max_a 3 A → 1.5 A or less`.
fn change(key: &KeyChanges, change: &Change) -> String {
    let unit = key.lever.key.unit;
    let from = match key.from {
        Some(from) => figure(from, unit),
        None => "not given".to_owned(),
    };
    let side = match change.side {
        Side::Below => "down to",
        Side::Above => "up to",
    };
    let to = figure(change.value, unit);
    let value = format!("{} from {from} {side} {to}", key.lever.name());
    match change.threshold {
        Threshold::Exact { check, .. } => format!("{value} (exact, {} decides)", check.name()),
        Threshold::Bracket { short } if short.is_finite() => {
            format!("{value} (bracket: nothing qualifies at {})", figure(short, unit))
        }
        Threshold::Bracket { .. } => format!("{value} (the first value that was tried)"),
    }
}

/// The changes of each key by itself, each with its candidate. Empty where there are none.
pub(super) fn key_changes(
    keys: &[KeyChanges],
    rail: &Rail,
    currency: &Currency<'_>,
    indent: usize,
    look: &Look,
) -> String {
    let mut text = String::new();
    for key in keys {
        for of_key in &key.changes {
            text += &look.paragraph(&change(key, of_key), indent, indent + INDENT);
            // A sink of the sheet's own is mounted on, not chosen.
            let chooses_sink =
                rail.chooses_heatsink() && key.lever.key != &sheet::keys::THERMAL_SINK_C_PER_W;
            let told = candidate(&of_key.candidate, chooses_sink, currency);
            text += &look.paragraph(&told, indent + INDENT, indent + 2 * INDENT);
        }
    }
    text
}

/// The keys of which no value admits a candidate.
pub(super) fn keys_in_vain(keys: &[KeyChanges], look: &Look) -> String {
    let in_vain = |tried: bool| {
        let keys = keys.iter().filter(move |k| k.changes.is_empty() && k.was_tried == tried);
        names(keys.map(|k| k.lever))
    };
    let (tried, untried) = (in_vain(true), in_vain(false));
    let mut text = String::new();
    if !tried.is_empty() {
        text += &look.paragraph(&format!("No value found: {tried}."), INDENT, 2 * INDENT);
    }
    if !untried.is_empty() {
        let told = format!("Can't help alone, for something else always fails: {untried}.");
        text += &look.paragraph(&told, INDENT, 2 * INDENT);
    }
    text
}

/// What the words beside changes mean, and what may be missed.
pub(super) fn how_changes_are_found(keys: &[KeyChanges], look: &Look) -> String {
    let thresholds = || keys.iter().flat_map(|key| &key.changes).map(|change| change.threshold);
    let mut told = Vec::new();
    if thresholds().any(|t| matches!(t, Threshold::Exact { .. })) {
        told.push("Exact: nothing qualifies just short of it; rounded to the side that holds.");
    }
    if thresholds().any(|t| matches!(t, Threshold::Bracket { .. })) {
        told.push("Bracket: the limit lies between the two values.");
    }
    told.push("A range narrower than the steps that were tried may be missed.");
    look.paragraph(&told.join(" "), INDENT, INDENT)
}

/// The names of keys, fractions of the derating policy behind the others.
fn names<'k>(levers: impl Iterator<Item = &'k Lever>) -> String {
    let (fractions, keys): (Vec<&Lever>, Vec<&Lever>) = levers.partition(|lever| lever.in_policy);
    let mut told: Vec<String> = Vec::new();
    if !keys.is_empty() {
        told.push(keys.into_iter().map(Lever::name).collect::<Vec<_>>().join(", "));
    }
    match fractions.as_slice() {
        [] => {}
        [one] => told.push(one.name()),
        several => {
            let fields: Vec<&str> = several.iter().map(|lever| lever.key.name).collect();
            told.push(format!("derating: {}", fields.join(", ")));
        }
    }
    told.join("; ")
}
