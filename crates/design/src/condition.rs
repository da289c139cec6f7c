//! What is asked of a design's parts besides the checks of the circuit.

use crate::parts::{Found, Part, Parts};
use catalog::{Status, lacks_for_fault, leaves_no_resistance};
use circuit::slot::Slot;
use sheet::{NamedPart, PartRules, Sheet};

/// A demand that is not electrical.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Rule {
    /// The transistor is npn.
    Polarity,
    /// No cell is blank that a check needs.
    Blanks,
    /// Tolerance and tempco leave some resistance at the rail's temperatures.
    Resistance,
    /// The heatsink takes the transistor's package.
    Footprint,
    /// The life-cycle word is one that the sheet allows.
    Status,
    /// Neither sheet nor shop bans the part.
    Ban,
    /// The slot is not pinned to other parts.
    Pin,
    /// There are as many pieces in stock as boards, where the sheet asks for that.
    Stock,
}

impl Rule {
    /// Every rule, in the order in which they are told.
    pub const ALL: [Rule; 8] = [
        Rule::Polarity,
        Rule::Blanks,
        Rule::Resistance,
        Rule::Footprint,
        Rule::Status,
        Rule::Ban,
        Rule::Pin,
        Rule::Stock,
    ];

    /// The name used in results.
    pub const fn name(self) -> &'static str {
        match self {
            Rule::Polarity => "polarity",
            Rule::Blanks => "blank-cells",
            Rule::Resistance => "resistance-left",
            Rule::Footprint => "heatsink-fit",
            Rule::Status => "status",
            Rule::Ban => "ban",
            Rule::Pin => "pin",
            Rule::Stock => "stock",
        }
    }
}

/// What was found under a rule.
#[derive(Debug, Clone, PartialEq)]
pub enum Fact {
    /// The polarity as it is written.
    Polarity(String),
    /// The blank columns; none where all is given.
    Lacks(Vec<&'static str>),
    /// The resistor or pot may measure nothing at all so far from 25 °C, °C; None: it keeps some.
    NoResistance(Option<f64>),
    /// The transistor's package and those that the heatsink takes.
    Fit {
        /// None: blank, so that no heatsink is known to fit.
        package: Option<String>,
        /// The heatsink's packages.
        fits: Vec<String>,
    },
    /// No heatsink: the transistor goes unmounted.
    Unmounted,
    /// No heatsink: the sheet brings its own sink, so nothing tells whether the transistor fits.
    OwnSink,
    /// The life-cycle word.
    Status(Status),
    /// Banned or not.
    Ban,
    /// Let in by a pin or not.
    Pin,
    /// Pieces in stock (None: blank) and boards to build.
    Stock {
        /// None: blank.
        pieces: Option<f64>,
        /// Pieces that are needed.
        boards: u64,
    },
}

/// A rule applied to the part of a slot.
#[derive(Debug, Clone, PartialEq)]
pub struct Verdict {
    /// The rule.
    pub rule: Rule,
    /// The slot.
    pub slot: Slot,
    /// The rule holds.
    pub holds: bool,
    /// What was found.
    pub fact: Fact,
}

/// Applies every rule that concerns the design's parts, in the order of [`Rule::ALL`].
///
/// `boards` are those of the design where it gives them, else the sheet's.
pub fn conditions(parts: &Parts<'_>, sheet: &Sheet, boards: u64) -> Vec<Verdict> {
    let mut verdicts = Vec::new();
    verdicts.push(polarity(parts));
    blanks(parts, sheet, &mut verdicts);
    resistance(parts, sheet, &mut verdicts);
    verdicts.extend(footprint(parts, sheet));
    let asked = Asked { rules: &sheet.parts, boards };
    rules(Slot::Zener, &parts.zener, &asked, &mut verdicts);
    rules(Slot::BiasLine, &parts.bias_line, &asked, &mut verdicts);
    rules(Slot::Amplifier, &parts.amplifier, &asked, &mut verdicts);
    rules(Slot::DividerLine, &parts.divider_line, &asked, &mut verdicts);
    if let Some(pot) = &parts.pot {
        rules(Slot::Pot, pot, &asked, &mut verdicts);
    }
    rules(Slot::Pass, &parts.pass, &asked, &mut verdicts);
    if let Some(sink) = &parts.heatsink {
        rules(Slot::Heatsink, sink, &asked, &mut verdicts);
    }
    // A stable sort: slots stay in their order within a rule.
    verdicts.sort_by_key(|verdict| verdict.rule);
    verdicts
}

fn polarity(parts: &Parts<'_>) -> Verdict {
    let (holds, found) = match parts.pass.found {
        Found::LeftOut(row) => (false, row.polarity.to_string()),
        _ => (true, "npn".to_owned()),
    };
    Verdict { rule: Rule::Polarity, slot: Slot::Pass, holds, fact: Fact::Polarity(found) }
}

/// The blank cells that this sheet makes needed, beside those that every use of a part needs.
fn blanks(parts: &Parts<'_>, sheet: &Sheet, verdicts: &mut Vec<Verdict>) {
    let rail = &sheet.rail;
    let mut told = |slot: Slot, lacks: &[&'static str], more: Option<&'static str>| {
        let lacks: Vec<&'static str> = lacks.iter().copied().chain(more).collect();
        let (holds, fact) = (lacks.is_empty(), Fact::Lacks(lacks));
        verdicts.push(Verdict { rule: Rule::Blanks, slot, holds, fact });
    };
    let heats = rail.fault.is_some_and(|f| f.heats_junctions());
    let for_fault = parts.amplifier.row().filter(|_| heats);
    let for_fault = for_fault.and_then(|row| lacks_for_fault(&row.figures));
    // In free air only rth_ja tells how hot the transistor gets.
    let in_free_air = parts.heatsink.is_none() && rail.chooses_heatsink();
    let needs_rth_ja = parts.pass.row().filter(|_| in_free_air);
    let for_air = needs_rth_ja.filter(|row| row.figures.rth_ja_c_per_w.is_none());
    let for_air = for_air.map(|_| "rth_ja_c_per_w");
    told(Slot::Zener, parts.zener.lacks(), None);
    told(Slot::BiasLine, parts.bias_line.lacks(), None);
    told(Slot::Amplifier, parts.amplifier.lacks(), for_fault);
    told(Slot::DividerLine, parts.divider_line.lacks(), None);
    if let Some(pot) = &parts.pot {
        told(Slot::Pot, pot.lacks(), None);
    }
    told(Slot::Pass, parts.pass.lacks(), for_air);
    if let Some(sink) = &parts.heatsink {
        told(Slot::Heatsink, sink.lacks(), None);
    }
}

fn resistance(parts: &Parts<'_>, sheet: &Sheet, verdicts: &mut Vec<Verdict>) {
    let span_c = sheet.rail.temperature_span_c();
    let mut told = |slot: Slot, tol: f64, tempco_per_c: f64| {
        let none = leaves_no_resistance(tol, tempco_per_c, span_c);
        let fact = Fact::NoResistance(none.then_some(span_c));
        verdicts.push(Verdict { rule: Rule::Resistance, slot, holds: !none, fact });
    };
    for (slot, line) in
        [(Slot::BiasLine, &parts.bias_line), (Slot::DividerLine, &parts.divider_line)]
    {
        if let Some(row) = line.row() {
            told(slot, row.figures.tol, row.figures.tempco_per_c);
        }
    }
    if let Some(row) = parts.pot.as_ref().and_then(Part::row) {
        told(Slot::Pot, row.figures.tol, row.figures.tempco_per_c);
    }
}

fn footprint(parts: &Parts<'_>, sheet: &Sheet) -> Option<Verdict> {
    let row = parts.pass.row()?;
    let verdict =
        |holds, fact| Some(Verdict { rule: Rule::Footprint, slot: Slot::Heatsink, holds, fact });
    let Some(sink) = &parts.heatsink else {
        let unmounted = sheet.rail.chooses_heatsink();
        return verdict(true, if unmounted { Fact::Unmounted } else { Fact::OwnSink });
    };
    let fits = &sink.row()?.figures.fits;
    let holds = row.package.as_ref().is_some_and(|package| fits.contains(package));
    let fits = fits.iter().map(|p| p.to_string()).collect();
    verdict(holds, Fact::Fit { package: row.package.as_ref().map(|p| p.to_string()), fits })
}

/// What the catalogs say of a part beside its figures.
struct Standing {
    status: Status,
    stock: Option<f64>,
}

fn standing<T>(part: &Part<'_, T>) -> Option<Standing> {
    match part.found {
        Found::Row(row) => Some(Standing { status: row.status, stock: row.stock }),
        Found::Unproven(row) => Some(Standing { status: row.status, stock: row.stock }),
        // Of a row that was left out nothing more was read.
        Found::LeftOut(_) => None,
    }
}

/// Which parts the sheet allows: status, ban, pin, stock.
fn rules<T>(slot: Slot, part: &Part<'_, T>, asked: &Asked<'_>, verdicts: &mut Vec<Verdict>) {
    let rules = asked.rules;
    let mut told = |rule, holds, fact| verdicts.push(Verdict { rule, slot, holds, fact });
    let is_named = |names: &[NamedPart]| names.iter().any(|name| part.is_named(&name.text));
    if let Some(Standing { status, stock }) = standing(part) {
        let allowed = rules.allow_status.iter().any(|word| word == status.name());
        told(Rule::Status, allowed, Fact::Status(status));
        // Lines of resistors are exempt: a catalog counts no stock of each of their values.
        let is_line = matches!(slot, Slot::BiasLine | Slot::DividerLine);
        if rules.need_stock && !is_line {
            let enough = stock.is_some_and(|pieces| pieces >= asked.boards as f64);
            told(Rule::Stock, enough, Fact::Stock { pieces: stock, boards: asked.boards });
        }
    }
    told(Rule::Ban, !is_named(&rules.bans), Fact::Ban);
    if let Some(pins) = &rules.pins[slot as usize] {
        told(Rule::Pin, is_named(pins), Fact::Pin);
    }
}

/// What the sheet asks of every part.
struct Asked<'a> {
    rules: &'a PartRules,
    boards: u64,
}
