//! The certificate of a shortlist as JSON, format 1: its rows, with claims about all that it leaves out.
//!
//! What the claims say is on the page `docs/certificate.md`; they are found by
//! [`select::certificate`].

use crate::figure::Pairs;
use crate::hash::HashOf;
use crate::shortlist::{self, Shortlist};
use circuit::slot::Slot;
use select::certificate::{Because, Claims, Step};
use serde::Serialize;
use serde::ser::{SerializeMap, Serializer};
use std::ops::Range;

/// The format that is written here.
pub const FORMAT: u32 = 1;

/// How the list was asked for, as far as the sheet does not say it.
#[derive(Debug, Clone, Copy)]
pub struct Asked {
    /// The criterion of `--by`.
    pub by: Option<&'static str>,
    /// Rows with faults were left out.
    pub skip_broken_rows: bool,
    /// How many rows were asked for.
    pub top: usize,
}

#[derive(Serialize)]
struct Certificate<'a> {
    certificate: u32,
    sheet_sha256: HashOf<'a>,
    catalogs_sha256: &'a Pairs<&'a str, HashOf<'a>>,
    set: &'a [String],
    by: Option<&'a str>,
    skip_broken_rows: bool,
    top: usize,
    rows: Vec<Row<'a>>,
    claims: ClaimsOut<'a>,
}

#[derive(Serialize)]
struct Row<'a> {
    cost: f64,
    loss: f64,
    stress: f64,
    parts: Vec<Option<[&'a str; 2]>>,
    values_ohm: [f64; 3],
}

impl<'a> Row<'a> {
    fn new(candidate: &shortlist::Candidate<'a>) -> Self {
        let values = &candidate.values;
        let upper = values.rf_ohm.or(values.rx_ohm).map_or(0.0, |figure| figure.0);
        let part = |slot| {
            let row = candidate.slot(slot)?;
            Some([row.maker?, row.part?])
        };
        Self {
            cost: candidate.cost.0,
            loss: candidate.loss.0,
            stress: candidate.stress.0,
            parts: Slot::ALL.map(part).to_vec(),
            values_ohm: [values.rz_ohm.0, upper, values.ri_ohm.0],
        }
    }
}

/// Claims in the order of their fields.
struct ClaimsOut<'a>(&'a Claims);

impl Serialize for ClaimsOut<'_> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let Claims { least_amplifier, least_power, amplifier_order, groups, pairs } = self.0;
        let steps = |steps: &[Step]| -> Vec<[f64; 3]> {
            steps.iter().map(|step| [step.cost, step.current_a, step.stress]).collect()
        };
        let mut map = serializer.serialize_map(Some(5))?;
        map.serialize_entry("least_amplifier", &steps(least_amplifier))?;
        map.serialize_entry("least_power", &steps(least_power))?;
        map.serialize_entry("amplifier_order", amplifier_order)?;
        let groups: Vec<Group> = groups.iter().map(Group::new).collect();
        map.serialize_entry("groups", &groups)?;
        map.serialize_entry("pairs", pairs)?;
        map.end()
    }
}

#[derive(Serialize)]
struct Group {
    because: &'static str,
    amplifiers: [u32; 2],
    references: Vec<[u32; 2]>,
}

impl Group {
    fn new(group: &select::certificate::Group) -> Self {
        let ends = |range: &Range<u32>| [range.start, range.end];
        Self {
            because: match group.because {
                Because::Fails(check) => check.name(),
                Because::RanksAfter => "rank",
            },
            amplifiers: ends(&group.amplifiers),
            references: group.references.iter().map(ends).collect(),
        }
    }
}

/// The text of the JSON file.
///
/// # Errors
/// As serde_json does; values of this crate give it no reason to.
pub fn certificate(
    list: &Shortlist<'_>,
    claims: &Claims,
    asked: Asked,
) -> Result<Vec<u8>, serde_json::Error> {
    let mut text = serde_json::to_vec(&Certificate {
        certificate: FORMAT,
        sheet_sha256: list.sheet_sha256,
        catalogs_sha256: &list.catalogs_sha256,
        set: list.set,
        by: asked.by,
        skip_broken_rows: asked.skip_broken_rows,
        top: asked.top,
        rows: list.candidates.iter().map(Row::new).collect(),
        claims: ClaimsOut(claims),
    })?;
    text.push(b'\n');
    Ok(text)
}
