//! The ranking alone, as CSV: a row a candidate.

use crate::figure::Figure;
use crate::shortlist::{ADJUSTABLE_OUTPUT, Candidate, FIXED_OUTPUT, Shortlist, Values};
use crate::spreadsheet::safe_text;
use circuit::slot::Slot;

/// The text of a CSV file with a header row; without candidates the header alone.
///
/// # Errors
/// As the CSV writer does; writing to memory gives it no reason to.
pub fn ranking(list: &Shortlist<'_>) -> Result<Vec<u8>, csv::Error> {
    let mut writer = csv::Writer::from_writer(Vec::new());
    writer.write_record(header(list))?;
    for candidate in &list.candidates {
        writer.write_record(row(candidate))?;
    }
    writer.into_inner().map_err(|e| csv::Error::from(e.into_error()))
}

fn header(list: &Shortlist<'_>) -> Vec<String> {
    let names = [
        "rank",
        "id",
        "score",
        "cost",
        "efficiency",
        "margin",
        "slack",
        "binding_damage",
        "binding_function",
    ];
    let mut header: Vec<String> = names.map(str::to_owned).into();
    for slot in Slot::ALL {
        header.push(format!("{}_part", slot.name()));
        header.push(format!("{}_maker", slot.name()));
    }
    header.extend(Values::NAMES.map(str::to_owned));
    let output =
        if list.sheet.rail.is_adjustable() { &ADJUSTABLE_OUTPUT[..] } else { &FIXED_OUTPUT };
    header.extend(output.iter().map(|name| (*name).to_owned()));
    header
}

fn row(candidate: &Candidate<'_>) -> Vec<String> {
    let text = |text: Option<&str>| safe_text(text.unwrap_or_default()).into_owned();
    let number = |figure: Figure| figure.to_string();
    let mut row = vec![candidate.rank.to_string(), candidate.id.clone()];
    let Candidate { score, cost, efficiency, margin, slack, binding, .. } = candidate;
    row.extend([*score, *cost, *efficiency, *margin, *slack].map(number));
    row.extend([text(binding.damage), text(binding.function)]);
    for slot in &candidate.slots {
        row.extend([text(slot.part), text(slot.maker)]);
    }
    row.extend(candidate.values.named().map(|(_, ohm)| ohm.map(number).unwrap_or_default()));
    row.extend(candidate.output.figures().into_iter().map(number));
    row
}
