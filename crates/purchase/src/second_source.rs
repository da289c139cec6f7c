//! How many other parts could take a slot with nothing else changed.
//!
//! The part of one slot is replaced by each row that the sheet lets be chosen for it, every other part
//! and every resistor value stays, and every check is made. A line of resistors has to hold the values
//! that are fitted; transistor and heatsink have to fit each other.

use catalog::{Row, Sink};
use circuit::check::WhileHolding;
use circuit::divider::Divider;
use circuit::parts::{Amplifier, Pot, ResistorLine, Transistor, Zener};
use circuit::pass::{CaseTemperatures, Mounted, PassFigures, Unmounted};
use circuit::rail::Rail;
use circuit::reference::ZenerAtRail;
use circuit::resistor::{LineAtRail, PotAtRail, Resistance};
use circuit::slot::Slot;
use circuit::{amplifier::AmplifierAtRail, pass::Duty};
use design::parts::{Part, Parts};
use design::proof::{AtRail, Cooling, Fitted, Ohms};
use eligible::Eligible;
use quantity::digits::compare;
use rayon::prelude::*;

/// The other parts for a slot.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct SecondSources {
    /// With each of these every check holds.
    pub proven: usize,
    /// Of these, how many have the package of the part that they would replace, and no other pinout as
    /// far as the catalogs tell.
    pub same_package: usize,
}

/// For each slot that holds a part, by `Slot as usize`; None for an empty one.
pub type BySlot = [Option<SecondSources>; Slot::COUNT];

/// The rows behind a set of parts.
#[derive(Debug, Clone, Copy)]
pub struct Rows<'a> {
    zener: &'a Row<Zener>,
    bias_line: &'a Row<ResistorLine>,
    amplifier: &'a Row<Amplifier>,
    divider_line: &'a Row<ResistorLine>,
    pot: Option<&'a Row<Pot>>,
    pass: &'a Row<Transistor>,
    heatsink: Option<&'a Row<Sink>>,
    ohms: Ohms,
}

impl<'a> Rows<'a> {
    /// Those of a design; None where one of them can't be proven.
    pub fn of_design(parts: &Parts<'a>) -> Option<Self> {
        Some(Self {
            zener: parts.zener.row()?,
            bias_line: parts.bias_line.row()?,
            amplifier: parts.amplifier.row()?,
            divider_line: parts.divider_line.row()?,
            pot: of_option(&parts.pot)?,
            pass: parts.pass.row()?,
            heatsink: of_option(&parts.heatsink)?,
            ohms: parts.ohms(),
        })
    }

    /// Those of a candidate, given the place of each slot's part in the list of eligible rows; None where
    /// a place is not in its list.
    pub fn of_candidate(
        eligible: &Eligible<'a>,
        place: impl Fn(Slot) -> Option<usize>,
        ohms: Ohms,
    ) -> Option<Self> {
        Some(Self {
            zener: eligible.zeners.get(place(Slot::Zener)?)?,
            bias_line: eligible.bias_lines.get(place(Slot::BiasLine)?)?,
            amplifier: eligible.amplifiers.get(place(Slot::Amplifier)?)?,
            divider_line: eligible.divider_lines.get(place(Slot::DividerLine)?)?,
            pot: match place(Slot::Pot) {
                Some(at) => Some(eligible.pots.get(at)?),
                None => None,
            },
            pass: eligible.transistors.get(place(Slot::Pass)?)?,
            heatsink: match place(Slot::Heatsink) {
                Some(at) => Some(eligible.heatsinks.get(at)?),
                None => None,
            },
            ohms,
        })
    }

    fn at_rail<'r>(&self, rail: &'r Rail) -> Option<AtRail<'r>> {
        let cooling = match (self.heatsink, rail.thermal.sink_c_per_w) {
            (Some(sink), _) => Cooling::Heatsink(&sink.figures.figures),
            (None, Some(sink_c_per_w)) => Cooling::OwnSink(sink_c_per_w),
            (None, None) => Cooling::Unmounted(self.pass.figures.rth_ja_c_per_w?),
        };
        let fitted = Fitted {
            zener: &self.zener.figures,
            bias_line: &self.bias_line.figures,
            amplifier: &self.amplifier.figures,
            divider_line: &self.divider_line.figures,
            pot: self.pot.map(|row| &row.figures),
            pass: &self.pass.figures,
            cooling,
        };
        AtRail::with(&fitted, self.ohms, rail)
    }
}

/// The row of a slot that may be empty; None where it is filled by what can't be proven.
fn of_option<'a, T>(part: &Option<Part<'a, T>>) -> Option<Option<&'a Row<T>>> {
    match part {
        Some(part) => part.row().map(Some),
        None => Some(None),
    }
}

/// Counts the second sources of every slot among the rows that may be chosen.
///
/// None where the set as it stands can't be proven, because its transistor goes unmounted and gives no
/// thermal resistance for that.
pub fn second_sources(rows: &Rows<'_>, eligible: &Eligible<'_>) -> Option<BySlot> {
    let rail = &eligible.sheet.rail;
    let set = Set { rows, rail, duty: Duty::new(rail), at_rail: rows.at_rail(rail)? };
    let mut counts = BySlot::default();
    counts[Slot::Zener as usize] = Some(set.count(
        rows.zener,
        &eligible.zeners,
        |_| true,
        |at, zener| {
            at.zener = ZenerAtRail::new(zener, rail);
        },
    ));
    counts[Slot::BiasLine as usize] = Some(set.count(
        rows.bias_line,
        &eligible.bias_lines,
        |row| holds(&row.figures, rows.ohms.rz),
        |at, line| {
            at.bias_line = LineAtRail::new(line, rail);
            at.rz = set.resistance(line, rows.ohms.rz);
        },
    ));
    counts[Slot::Amplifier as usize] = Some(set.count(
        rows.amplifier,
        &eligible.amplifiers,
        |_| true,
        |at, amplifier| {
            at.amplifier = AmplifierAtRail::new(amplifier, rail);
        },
    ));
    counts[Slot::DividerLine as usize] = Some(set.count(
        rows.divider_line,
        &eligible.divider_lines,
        |row| {
            let Ohms { upper, ri, .. } = rows.ohms;
            (upper == 0.0 || holds(&row.figures, upper)) && holds(&row.figures, ri)
        },
        |at, line| {
            at.divider_line = LineAtRail::new(line, rail);
            at.divider = Divider {
                upper: set.resistance(line, rows.ohms.upper),
                ri: set.resistance(line, rows.ohms.ri),
            };
        },
    ));
    counts[Slot::Pot as usize] = rows.pot.map(|pot| {
        set.count(
            pot,
            &eligible.pots,
            |_| true,
            |at, pot| {
                at.pot = Some(PotAtRail::new(pot, rail));
            },
        )
    });
    counts[Slot::Pass as usize] = Some(set.transistors(&eligible.transistors));
    counts[Slot::Heatsink as usize] = rows.heatsink.map(|sink| {
        set.count(
            sink,
            &eligible.heatsinks,
            |row| fits(row, rows.pass),
            |at, sink| {
                let case = CaseTemperatures::on_heatsink(&sink.figures, &set.duty, rail);
                at.mounted = Mounted::on(case, &at.pass, &set.duty);
            },
        )
    });
    Some(counts)
}

/// A set of parts under the conditions of its rail.
struct Set<'a, 'r> {
    rows: &'a Rows<'a>,
    rail: &'r Rail,
    duty: Duty,
    at_rail: AtRail<'r>,
}

impl Set<'_, '_> {
    /// How many of the other rows hold in place of `chosen`: `suits` says what no check asks for, `put`
    /// puts the figures of a row in place of the chosen ones.
    fn count<T: Sync>(
        &self,
        chosen: &Row<T>,
        rows: &[&Row<T>],
        suits: impl Fn(&Row<T>) -> bool + Sync,
        put: impl Fn(&mut AtRail<'_>, &T) + Sync,
    ) -> SecondSources {
        let is_other = |row: &Row<T>| (&row.maker, &row.part) != (&chosen.maker, &chosen.part);
        rows.par_iter()
            // The lists of resistor values make a set dear to copy: each thread keeps one.
            .map_init(
                || self.at_rail.clone(),
                |at, row| {
                    if !is_other(row) || !suits(row) {
                        return SecondSources::default();
                    }
                    put(at, &row.figures);
                    let proven = holds_every_check(at);
                    let alike = proven && same_package(chosen, row);
                    SecondSources { proven: usize::from(proven), same_package: usize::from(alike) }
                },
            )
            .reduce(SecondSources::default, |a, b| SecondSources {
                proven: a.proven + b.proven,
                same_package: a.same_package + b.same_package,
            })
    }

    /// Other transistors on the same sink, or unmounted as the chosen one.
    fn transistors(&self, rows: &[&Row<Transistor>]) -> SecondSources {
        let (rail, duty) = (self.rail, &self.duty);
        let own_sink = CaseTemperatures::on_own_sink(duty, rail);
        let on_sink = self
            .rows
            .heatsink
            .map(|sink| CaseTemperatures::on_heatsink(&sink.figures.figures, duty, rail));
        let case = on_sink.or(own_sink);
        let suits = |row: &Row<Transistor>| match self.rows.heatsink {
            Some(sink) => fits(sink, row),
            None => case.is_some() || row.figures.rth_ja_c_per_w.is_some(),
        };
        self.count(self.rows.pass, rows, suits, |at, transistor| {
            at.pass = PassFigures::new(transistor, duty, rail);
            let mounted = match case {
                Some(case) => Some(Mounted::on(case, &at.pass, duty)),
                None => Unmounted::new(transistor, duty, rail).map(Mounted::from),
            };
            // Unmounted ones without a thermal resistance were passed over.
            if let Some(mounted) = mounted {
                at.mounted = mounted;
            }
        })
    }

    fn resistance(&self, line: &ResistorLine, ohm: f64) -> Resistance {
        Resistance::new(ohm, line.tol, line.tempco_per_c, self.rail.temperature_span_c())
    }
}

fn holds_every_check(at: &AtRail<'_>) -> bool {
    let assembly = at.assembly();
    WhileHolding::over(|tally| assembly.checks(tally)).is_ok()
}

/// A line has this value.
fn holds(line: &ResistorLine, ohm: f64) -> bool {
    line.values_ohm.binary_search_by(|value| compare(*value, ohm)).is_ok()
}

/// A heatsink takes a transistor's package.
fn fits(sink: &Row<Sink>, transistor: &Row<Transistor>) -> bool {
    transistor.package.as_ref().is_some_and(|package| sink.figures.fits.contains(package))
}

/// Both packages are told and equal, and the pinouts differ nowhere that both are told.
fn same_package<T>(chosen: &Row<T>, other: &Row<T>) -> bool {
    let same_pinout = match (&chosen.pinout, &other.pinout) {
        (Some(chosen), Some(other)) => chosen == other,
        _ => true,
    };
    chosen.package.is_some() && chosen.package == other.package && same_pinout
}
