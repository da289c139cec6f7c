//! Conditions in words.

use design::condition::{Fact, Verdict};
use sheet::Sheet;

/// What was found under a rule, and where it fails what is asked.
pub(crate) fn fact(verdict: &Verdict, sheet: &Sheet) -> String {
    let holds = verdict.holds;
    match &verdict.fact {
        Fact::Polarity(found) if holds => found.clone(),
        Fact::Polarity(found) => format!("{found}; the circuit takes npn alone"),
        Fact::Lacks(_) if holds => "no needed cell is blank".to_owned(),
        Fact::Lacks(columns) => format!("blank: {}", columns.join(", ")),
        Fact::NoResistance(None) => "some resistance is left".to_owned(),
        Fact::NoResistance(Some(span_c)) => format!(
            "may measure nothing {span_c} °C away from 25 °C: tolerance or tempco leave no resistance"
        ),
        Fact::Fit { package, fits } => {
            let fits = fits.join(", ");
            match package {
                Some(package) if holds => format!("{package} is among {fits}"),
                Some(package) => format!("the transistor's {package} is not among {fits}"),
                None => format!("the transistor's package is blank; the heatsink takes {fits}"),
            }
        }
        Fact::Unmounted => "no heatsink: the transistor is unmounted".to_owned(),
        Fact::OwnSink => "on the sheet's own sink, whose shape nobody states".to_owned(),
        Fact::Status(status) if holds => status.to_string(),
        Fact::Status(status) => {
            format!("{status}; allowed: {}", sheet.parts.allow_status.join(", "))
        }
        Fact::Ban if holds => "not banned".to_owned(),
        Fact::Ban => "banned by `parts.ban`".to_owned(),
        Fact::Pin if holds => "named in `parts.use`".to_owned(),
        Fact::Pin => {
            format!("`parts.use.{}` names other parts alone", verdict.slot.name())
        }
        Fact::Stock { pieces, boards } => {
            let stock = match pieces {
                Some(pieces) => format!("{pieces} in stock"),
                None => "stock is blank".to_owned(),
            };
            format!("{stock}, {boards} needed")
        }
    }
}
