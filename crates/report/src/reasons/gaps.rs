//! Blank cells that are worth filling, told in words.

use super::words::{self, INDENT};
use crate::look::{Look, grouped};
use quantity::notation::Unit;
use reasons::fill::Fill;
use reasons::gaps::{CellGap, Gap, Gaps, Span, Wanted};
use reasons::probe::Name;
use sheet::Sheet;

/// Blank cells that are worth filling for a sheet.
pub fn gaps(found: &Gaps, sheet: &Sheet, look: &Look) -> String {
    let rows = grouped(&found.top.to_string());
    let mut text = look.heading(&format!(
        "{}: unproven parts that could be among the first {rows} ({})",
        sheet.name,
        found.gaps.len()
    ));
    text.push('\n');
    if found.gaps.is_empty() {
        text += &look.paragraph("None.", INDENT, INDENT);
    }
    for gap in &found.gaps {
        text += &one(gap, look);
    }
    let mut counts = vec![format!("{} unproven parts looked at", found.looked_at)];
    if found.out_of_reach > 0 {
        counts.push(format!(
            "{} out of reach with every plausible value that was tried",
            found.out_of_reach
        ));
    }
    if found.barred > 0 {
        counts.push(format!("{} barred by status, stock, ban or pin", found.barred));
    }
    text.push('\n');
    text += &look.paragraph(&format!("{}.", counts.join("; ")), 0, INDENT);
    text
        + &look.paragraph(
            "Every threshold was tried on both sides and is rounded to the side that holds. For zeners, \
             lines and pots a span narrower than the steps that were tried may be missed.",
            0,
            INDENT,
        )
}

fn one(gap: &Gap, look: &Look) -> String {
    let name = Name { maker: gap.maker.clone(), part: gap.part.clone() };
    let mut text = look.paragraph(
        &format!(
            "{} ({}:{}): up to rank {}",
            words::full_name(&name),
            gap.file,
            gap.line,
            gap.rank
        ),
        INDENT,
        2 * INDENT,
    );
    for cell in &gap.cells {
        let mut told =
            format!("`{}` of row {}: on the list if {}", cell.column, gap.line, wanted(cell));
        if !cell.beside.is_empty() {
            let beside: Vec<String> =
                cell.beside.iter().map(|(column, text)| format!("{column} {text}")).collect();
            told += &format!(", with the other blanks at their best ({})", beside.join(", "));
        }
        text += &look.paragraph(&told, 2 * INDENT, 3 * INDENT);
    }
    text
}

fn wanted(cell: &CellGap) -> String {
    let spans = match &cell.wanted {
        Wanted::OneOf(texts) => return format!("it is {}", texts.join(" or ")),
        Wanted::Spans(spans) => spans,
    };
    let (unit, at) = match &cell.fill {
        Fill::Figure { unit, .. } => (*unit, String::new()),
        Fill::Gain { up_to_a, .. } => {
            let from = words::figure(up_to_a / 100.0, Unit::Ampere);
            (Unit::Plain, format!(" from {from} up to {}", words::figure(*up_to_a, Unit::Ampere)))
        }
        Fill::VoltageAt { at_a, .. } => {
            (Unit::Volt, format!(" at {}", words::figure(*at_a, Unit::Ampere)))
        }
        Fill::SafeCurrentAt { up_to_v } => {
            (Unit::Ampere, format!(" at {}", words::figure(*up_to_v, Unit::Volt)))
        }
        Fill::Texts(_) => (Unit::Plain, String::new()),
    };
    let told: Vec<String> = spans.iter().map(|s| span(s, unit)).collect();
    format!("{}{at}", told.join(", or "))
}

fn span(span: &Span, unit: Unit) -> String {
    let figure = |x: f64| words::figure(x, unit);
    match (span.low, span.high) {
        (None, None) => "it holds any plausible value".to_owned(),
        (Some(low), None) => format!("≥ {}", figure(low.value)),
        (None, Some(high)) => format!("≤ {}", figure(high.value)),
        (Some(low), Some(high)) => format!("{} to {}", figure(low.value), figure(high.value)),
    }
}
