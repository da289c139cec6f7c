//! The shortlist as one typed value; JSON, CSV and the table are all made from it.
//!
//! Field names, their order and their meaning are format 1 of the JSON output: other programs read it.
//! Fields that only serve the other outputs are not written to JSON.

use crate::choice::{Choice, choice};
use crate::figure::{Figure, Pairs};
use crate::hash::HashOf;
use crate::{identity, remark};
use catalog::Kind;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::OutputFigures;
use circuit::check::Finding;
use circuit::slot::Slot;
use eligible::Eligible;
use quantity::digits::compare;
use select::candidate::Proof;
use select::count::Counts;
use select::problem::Problem;
use serde::Serialize;
use sheet::Sheet;
use std::cmp::Ordering;
use std::fmt;

/// The format that these types write.
pub const FORMAT: u32 = 1;

/// The files that a result was made from.
#[derive(Debug, Clone, Copy)]
pub struct Files<'a> {
    /// The rail sheet as read.
    pub sheet: &'a [u8],
    /// The shop file as read, with its name, where there is one.
    pub shop: Option<(&'a str, &'a [u8])>,
}

/// The ranked candidates for a sheet, with all that a reader needs in order to trust them.
#[derive(Debug, Clone, Serialize)]
pub struct Shortlist<'a> {
    /// [`FORMAT`].
    pub format: u32,
    /// What the rail is called.
    pub rail: &'a str,
    /// The currency of every price.
    pub currency: Option<&'a str>,
    /// Boards to build.
    pub boards: u64,
    /// Hash of the sheet.
    pub sheet_sha256: HashOf<'a>,
    /// What `--set` changed.
    pub set: &'a [String],
    /// Hashes of the catalogs, and of the shop file where there is one.
    pub catalogs_sha256: Pairs<&'a str, HashOf<'a>>,
    /// How many combinations there are.
    pub combinations: Combinations,
    /// Defaults and stand-ins in use, each as `key = value`.
    pub assumed: Vec<String>,
    /// What is not checked.
    pub not_checked: Vec<String>,
    /// Cautions that apply.
    pub cautions: Vec<&'static str>,
    /// Parts that blank cells leave unproven.
    pub unproven: Vec<Unproven<'a>>,
    /// The rows, by rank.
    pub candidates: Vec<Candidate<'a>>,
    /// The sheet behind it.
    #[serde(skip)]
    pub sheet: &'a Sheet,
}

/// How many combinations there are, and what became of them.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Combinations {
    /// All of them, in digits.
    pub covered: String,
    /// Those for which every check holds; None where they were not counted.
    pub feasible: Option<String>,
    /// Those that were lost, by what they were lost to first, in page order; None as above.
    pub lost: Option<Pairs<&'static str, String>>,
}

/// A part that blank cells leave unproven.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Unproven<'a> {
    /// Its catalog.
    pub file: &'a str,
    /// Its line.
    pub line: u32,
    /// Its name.
    pub part: &'a str,
    /// The blank columns.
    pub lacks: Vec<&'static str>,
    /// Its maker; may be empty.
    #[serde(skip)]
    pub maker: &'a str,
}

/// One row of the list.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Candidate<'a> {
    /// The number of the row, from 1.
    pub rank: usize,
    /// A letter and hexadecimal digits, made from parts and values alone.
    pub id: String,
    /// Ratio to the first row's score.
    pub score: Figure,
    /// Cost of one board.
    pub cost: Figure,
    /// η.
    pub efficiency: Figure,
    /// 1/η − 1.
    pub loss: Figure,
    /// Greatest utilisation of the damage checks.
    pub stress: Figure,
    /// 1 − stress.
    pub margin: Figure,
    /// Greatest utilisation of the function checks.
    pub tightness: Figure,
    /// 1 − tightness.
    pub slack: Figure,
    /// The checks that set stress and tightness.
    pub binding: Binding,
    /// What each slot holds.
    pub slots: Vec<SlotRow<'a>>,
    /// The resistors.
    pub values: Values,
    /// The output at the corners.
    pub output: Output,
    /// The lowest feed with headroom, V.
    pub lowest_feed_v: Figure,
    /// The least current gain with which the amplifier drives full load.
    pub least_gain: Figure,
    /// Stand-ins that this candidate leans on, and checks that blank cells leave out.
    pub assumed: Vec<&'static str>,
    /// Every check, in page order.
    pub checks: Vec<CheckRow>,
}

/// The checks that bind.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct Binding {
    /// The damage check used most.
    pub damage: Option<&'static str>,
    /// The function check used most.
    pub function: Option<&'static str>,
}

/// A slot with its part; everything but the slot is None where it holds none.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct SlotRow<'a> {
    /// The slot's name.
    pub slot: &'static str,
    /// The part.
    pub part: Option<&'a str>,
    /// Its maker.
    pub maker: Option<&'a str>,
    /// Price of one piece.
    pub price: Option<Figure>,
    /// Its catalog.
    pub file: Option<&'a str>,
    /// Its line.
    pub line: Option<u32>,
    /// The kind of its catalog and which of its files, to find its cells again.
    #[serde(skip)]
    pub(crate) source: Option<(Kind, u16)>,
}

/// The resistors of a candidate, Ω. A link is 0.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct Values {
    /// RZ.
    pub rz_ohm: Figure,
    /// RF of a fixed output.
    pub rf_ohm: Option<Figure>,
    /// RI.
    pub ri_ohm: Figure,
    /// RX, the fixed part of an adjustable output.
    pub rx_ohm: Option<Figure>,
}

impl Values {
    /// The names of the values, in their order.
    pub const NAMES: [&str; 4] = ["rz_ohm", "rf_ohm", "ri_ohm", "rx_ohm"];

    /// Each value with its name; None where the output has no such resistor.
    pub fn named(&self) -> impl Iterator<Item = (&'static str, Option<Figure>)> {
        let values = [Some(self.rz_ohm), self.rf_ohm, Some(self.ri_ohm), self.rx_ohm];
        Self::NAMES.into_iter().zip(values)
    }
}

/// The output at the corners, V.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
#[serde(untagged)]
pub enum Output {
    /// A fixed output.
    Fixed {
        /// VLlo.
        low_v: Figure,
        /// VLn.
        nominal_v: Figure,
        /// VLhi.
        high_v: Figure,
    },
    /// An adjustable one.
    Adjustable {
        /// Vlow.
        low_v: Figure,
        /// Vfloor.
        floor_v: Figure,
        /// Vreach.
        reach_v: Figure,
        /// Vtop.
        top_v: Figure,
    },
}

/// The names of a fixed output's figures, in their order.
pub(crate) const FIXED_OUTPUT: [&str; 3] = ["low_v", "nominal_v", "high_v"];
/// The names of an adjustable output's figures, in their order.
pub(crate) const ADJUSTABLE_OUTPUT: [&str; 4] = ["low_v", "floor_v", "reach_v", "top_v"];

impl Output {
    /// The figures in the order of their names.
    pub(crate) fn figures(&self) -> Vec<Figure> {
        match *self {
            Output::Fixed { low_v, nominal_v, high_v } => vec![low_v, nominal_v, high_v],
            Output::Adjustable { low_v, floor_v, reach_v, top_v } => {
                vec![low_v, floor_v, reach_v, top_v]
            }
        }
    }
}

/// One check of a candidate.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct CheckRow {
    /// Its name.
    pub name: &'static str,
    /// `damage` or `function`.
    pub kind: &'static str,
    /// What is asked.
    pub asked: Figure,
    /// What is allowed.
    pub allowed: Figure,
    /// asked/allowed.
    pub utilisation: Figure,
    /// The unit of asked and allowed.
    pub unit: &'static str,
}

/// A candidate does not belong to the problem that it was said to answer.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct ForeignCandidate;

impl fmt::Display for ForeignCandidate {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "a candidate names a part that is not among those to choose from")
    }
}

impl std::error::Error for ForeignCandidate {}

impl<'a> Shortlist<'a> {
    /// Tells the candidates of a problem, in the order given, each with its full proof.
    ///
    /// # Errors
    /// Where a candidate is not one of this problem.
    pub fn new(
        files: Files<'a>,
        eligible: &Eligible<'a>,
        problem: &Problem<'_>,
        candidates: &[select::candidate::Candidate],
        counts: Option<&Counts>,
    ) -> Result<Self, ForeignCandidate> {
        let sheet = eligible.sheet;
        let catalogs = eligible.shop.files().map(|f| (f.name.as_str(), HashOf(&f.bytes)));
        let shop_file = files.shop.map(|(name, bytes)| (name, HashOf(bytes)));
        let first_score = candidates.first().map_or(1.0, |c| c.score);
        let rows = (1..).zip(candidates).map(|(rank, c)| {
            let proof = c.prove(problem).ok_or(ForeignCandidate)?;
            Candidate::new(rank, c, &proof, first_score, eligible)
        });
        Ok(Self {
            format: FORMAT,
            rail: &sheet.name,
            currency: sheet.currency.as_deref(),
            boards: sheet.boards,
            sheet_sha256: HashOf(files.sheet),
            set: &sheet.set,
            catalogs_sha256: Pairs(catalogs.chain(shop_file).collect()),
            combinations: Combinations::new(problem, counts),
            assumed: sheet.assumed.iter().map(|a| format!("{} = {}", a.key, a.value)).collect(),
            not_checked: remark::not_checked(&sheet.rail),
            cautions: remark::cautions(&sheet.rail),
            unproven: eligible
                .unproven
                .iter()
                .map(|u| Unproven {
                    file: u.file,
                    line: u.line,
                    part: u.part,
                    lacks: u.lacks.clone(),
                    maker: u.maker,
                })
                .collect(),
            candidates: rows.collect::<Result<_, _>>()?,
            sheet,
        })
    }

    /// The candidate of this rank or id.
    pub fn named(&self, rank_or_id: &str) -> Option<&Candidate<'a>> {
        self.candidates.iter().find(|c| c.id == rank_or_id || c.rank.to_string() == rank_or_id)
    }
}

impl Combinations {
    fn new(problem: &Problem<'_>, counts: Option<&Counts>) -> Self {
        Self {
            covered: problem.covered().to_string(),
            feasible: counts.map(|c| c.feasible.to_string()),
            lost: counts.map(lost),
        }
    }
}

/// What combinations were lost to first, each with its count in digits, in page order.
pub fn lost(counts: &Counts) -> Pairs<&'static str, String> {
    Pairs(counts.lost.iter().map(|(to, count)| (to.name(), count.to_string())).collect())
}

impl<'a> Candidate<'a> {
    fn new(
        rank: usize,
        candidate: &select::candidate::Candidate,
        proof: &Proof,
        first_score: f64,
        eligible: &Eligible<'a>,
    ) -> Result<Self, ForeignCandidate> {
        let mut slots = Vec::with_capacity(Slot::COUNT);
        for slot in Slot::ALL {
            let choice = match candidate.place(slot) {
                Some(place) => Some(choice(eligible, slot, place).ok_or(ForeignCandidate)?),
                None => None,
            };
            slots.push(SlotRow::new(slot, choice));
        }
        let upper = Figure(candidate.divider.upper.ohm);
        let adjustable = eligible.sheet.rail.is_adjustable();
        let values = Values {
            rz_ohm: Figure(candidate.rz.ohm),
            rf_ohm: (!adjustable).then_some(upper),
            ri_ohm: Figure(candidate.divider.ri.ohm),
            rx_ohm: adjustable.then_some(upper),
        };
        let parts = slots.iter().filter_map(|s| Some((s.slot, s.maker?, s.part?)));
        let resistors = values.named().filter_map(|(name, ohm)| Some((name, ohm?.0)));
        Ok(Self {
            rank,
            id: identity::id(parts, resistors),
            score: Figure(relative_score(candidate.score, first_score)),
            cost: Figure(candidate.cost),
            efficiency: Figure(proof.efficiency),
            loss: Figure(proof.loss),
            stress: Figure(proof.stress.utilisation),
            margin: Figure(1.0 - proof.stress.utilisation),
            tightness: Figure(proof.tightness.utilisation),
            slack: Figure(1.0 - proof.tightness.utilisation),
            binding: Binding {
                damage: proof.stress.check.map(|c| c.name()),
                function: proof.tightness.check.map(|c| c.name()),
            },
            slots,
            values,
            output: Output::new(&proof.output),
            lowest_feed_v: Figure(proof.lowest_feed_v),
            least_gain: Figure(proof.least_gain),
            assumed: leaned_on(candidate, eligible).ok_or(ForeignCandidate)?,
            checks: proof.findings.iter().map(CheckRow::new).collect(),
        })
    }

    /// What a slot holds.
    pub fn slot(&self, slot: Slot) -> Option<&SlotRow<'a>> {
        self.slots.iter().find(|row| row.slot == slot.name())
    }
}

/// A score as the ratio to the first row's; where that is 0 equal ones show 1, others are infinite.
fn relative_score(score: f64, first: f64) -> f64 {
    if first > 0.0 {
        score / first
    } else if compare(score, first) == Ordering::Equal {
        1.0
    } else {
        f64::INFINITY
    }
}

/// Said where the transistor's leakage is known and what the amplifier sinks is not.
const NO_LEAKAGE_SINK: &str = "leakage-sink is not checked: isink_a of the amplifier is blank";

/// The stand-ins that a candidate's parts lean on. None where a place is not in its list.
fn leaned_on(
    candidate: &select::candidate::Candidate,
    eligible: &Eligible<'_>,
) -> Option<Vec<&'static str>> {
    let zener = &eligible.zeners.get(candidate.place(Slot::Zener)?)?.figures;
    let amplifier = &eligible.amplifiers.get(candidate.place(Slot::Amplifier)?)?.figures;
    let pass = &eligible.transistors.get(candidate.place(Slot::Pass)?)?.figures;
    let knee = zener.leans_on_knee().then_some("assume.zener_knee");
    let at_rail = AmplifierAtRail::new(amplifier, &eligible.sheet.rail);
    let tempco =
        pass.hfe_tempco_per_c.is_none().then_some(sheet::keys::ASSUME_HFE_TEMPCO_PCT_PER_C.name);
    let unsunk = pass.ileak_max_a.is_some() && amplifier.isink_a.is_none();
    let mut list: Vec<&'static str> = Vec::new();
    list.extend(knee);
    list.extend(at_rail.stand_ins_used());
    list.extend(tempco);
    list.extend(unsunk.then_some(NO_LEAKAGE_SINK));
    Some(list)
}

impl<'a> SlotRow<'a> {
    fn new(slot: Slot, choice: Option<Choice<'a>>) -> Self {
        Self {
            slot: slot.name(),
            part: choice.map(|c| c.part),
            maker: choice.map(|c| c.maker),
            price: choice.map(|c| Figure(c.price)),
            file: choice.map(|c| c.file_name),
            line: choice.map(|c| c.line),
            source: choice.map(|c| (c.kind, c.file)),
        }
    }
}

impl Output {
    pub(crate) fn new(output: &OutputFigures) -> Self {
        match output {
            OutputFigures::Fixed(o) => Output::Fixed {
                low_v: Figure(o.lo_v),
                nominal_v: Figure(o.nominal_v),
                high_v: Figure(o.hi_v),
            },
            OutputFigures::Adjustable(o) => Output::Adjustable {
                low_v: Figure(o.low_v),
                floor_v: Figure(o.floor_v),
                reach_v: Figure(o.reach_v),
                top_v: Figure(o.top_v),
            },
        }
    }
}

impl CheckRow {
    pub(crate) fn new(finding: &Finding) -> Self {
        Self {
            name: finding.check.name(),
            kind: finding.check.kind().name(),
            asked: Figure(finding.asked),
            allowed: Figure(finding.allowed),
            utilisation: Figure(finding.utilisation()),
            unit: finding.check.unit(),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn scores_are_ratios_to_the_first() {
        assert_eq!(relative_score(3.0, 2.0), 1.5);
        assert_eq!(relative_score(0.0, 0.0), 1.0);
        assert_eq!(relative_score(0.1, 0.0), f64::INFINITY);
    }
}
