//! One set of parts: what sums it up, its pictures, its parts, the conditions on them.

use super::document::scrolling;
use super::ranking::{money, ohms, output, percent};
use super::{Set, proof, shown, trust};
use crate::figure::Figure;
use crate::proof::book::spelled;
use crate::proof::terminal::alike;
use crate::proof::{Answer, ChangeLine, DesignProof};
use crate::shortlist::{Candidate, Shortlist};
use maud::{Markup, html};
use picture::{Kind, draw, draw_front};
use quantity::notation::engineering;

/// The section of a set. A candidate brings its list and its own row, for the prices.
pub(super) fn section(
    id: &str,
    title: &str,
    set: &Set<'_>,
    list: Option<&Shortlist<'_>>,
    candidate: Option<&Candidate<'_>>,
) -> Markup {
    let design = set.proof;
    html! {
        section class="set" id=(id) {
            h2 { (shown(title)) }
            @if candidate.is_none() { (answer(design)) }
            (summary(design, list, candidate))
            (pictures(id, set))
            @if !design.slots.is_empty() { h3 { "Parts" } (parts(title, design, candidate)) }
            @if !design.conditions.is_empty() {
                h3 { "Conditions" } (conditions(title, design))
            }
            @if !design.changes.is_empty() {
                h3 { "Changed since it was kept" } (changes(title, &design.changes))
            }
            (proof::sections(id, title, design))
            @match candidate {
                Some(candidate) if !candidate.assumed.is_empty() => {
                    h3 { "Leans on" } (trust::items(&candidate.assumed))
                }
                Some(_) => {}
                None => { (own_trust(id, design)) }
            }
        }
    }
}

/// What was found of a design, and why one can't be checked.
fn answer(design: &DesignProof) -> Markup {
    let sheet = design.sheet.as_ref();
    html! {
        p {
            code { (shown(&design.file)) } " "
            span class="verdict" { (design.answer) }
            @if design.answer == Answer::Fails { " in " (design.failures()) " points" }
            @if let Some(sheet) = sheet {
                "; rail sheet " code { (shown(&sheet.file)) }
                @match sheet.changed {
                    Some(true) => ", which has changed since the design was kept",
                    Some(false) => ", the same as when the design was kept",
                    None => "",
                }
            }
        }
        @if !design.faults.is_empty() { (trust::items(&design.faults)) }
    }
}

/// The figures that sum a set up.
fn summary(
    design: &DesignProof,
    list: Option<&Shortlist<'_>>,
    candidate: Option<&Candidate<'_>>,
) -> Markup {
    let Some(summary) = &design.summary else { return html! {} };
    let by = |share: Figure, check: Option<&str>| match check {
        Some(check) => format!("{} ({check})", percent(share)),
        None => percent(share),
    };
    let mut rows: Vec<(&str, String)> = Vec::new();
    if let Some(candidate) = candidate {
        let currency = list.and_then(|l| l.currency).unwrap_or_default();
        let cost = format!("{} {currency}", money(candidate.cost));
        rows.push(("cost of a board", cost.trim_end().to_owned()));
        rows.push(("output at the corners", output(candidate)));
    }
    rows.extend([
        ("margin, set by", by(summary.margin, summary.binding.damage)),
        ("slack, set by", by(summary.slack, summary.binding.function)),
        ("efficiency", percent(summary.efficiency)),
        ("lowest feed with headroom", engineering(summary.lowest_feed_v.0, "V", 4)),
        ("least current gain", format!("{:.0}", summary.least_gain.0)),
    ]);
    html! {
        dl class="figures" {
            @for (name, value) in &rows { div { dt { (name) } dd { (shown(value)) } } }
        }
    }
}

fn pictures(id: &str, set: &Set<'_>) -> Markup {
    let Some(subject) = &set.subject else {
        return html! { p { "Figures are missing, so nothing is drawn." } };
    };
    html! {
        div class="pictures" {
            @for kind in Kind::ALL {
                @let drawn = match (kind.of_one_set(), &set.front) {
                    (Some(kind), _) => Some(draw(kind, subject, id)),
                    (None, Some(front)) => Some(draw_front(front, id)),
                    (None, None) => None,
                };
                @if let Some(drawn) = drawn {
                    figure { (drawn) figcaption { (caption(kind)) } }
                }
            }
        }
    }
}

/// What to look for in a picture.
fn caption(kind: Kind) -> &'static str {
    match kind {
        Kind::Circuit => "The circuit with its parts and values.",
        Kind::OperatingArea => {
            "Safe operating area: the load line must stay below the heavy line in service, the short \
             below a heavy line for the short."
        }
        Kind::Headroom => "Headroom: what each part takes, and what is left up to the lowest feed.",
        Kind::Output => "Output at the worst corners, against what is asked.",
        Kind::Stress => "Use of every limit: stress of damage checks, slack of function checks.",
        Kind::Front => "The front of cost, loss and stress, with this set marked.",
    }
}

fn parts(title: &str, design: &DesignProof, candidate: Option<&Candidate<'_>>) -> Markup {
    let price = |slot: &str| {
        let row = candidate.and_then(|c| c.slots.iter().find(|row| row.slot == slot));
        row.and_then(|row| row.price).map(money).unwrap_or_default()
    };
    html! {
        (scrolling(&format!("Parts of {title}"), &html! {
            table {
                thead { tr {
                    @for name in ["slot", "part", "maker"] { th scope="col" { (name) } }
                    @if candidate.is_some() { th scope="col" class="n" { "price of one" } }
                    th scope="col" { "place" }
                    th scope="col" { "source of its figures" }
                } }
                tbody {
                    @for slot in &design.slots {
                        tr {
                            th scope="row" { (slot.slot) }
                            td { (shown(&slot.part)) }
                            td { (shown(&slot.maker)) }
                            @if candidate.is_some() { td class="n" { (price(slot.slot)) } }
                            td { code { (shown(&slot.file)) ":" (slot.line) } }
                            td {
                                @if slot.source.is_empty() { span class="quiet" { "not stated" } }
                                @else { (shown(&slot.source)) }
                            }
                        }
                    }
                    @for (name, ohm) in &design.values.0 {
                        tr {
                            th scope="row" { (name) }
                            td { (ohms(*ohm)) }
                            td {}
                            @if candidate.is_some() { td {} }
                            td {}
                            td {}
                        }
                    }
                }
            }
        }))
    }
}

fn conditions(title: &str, design: &DesignProof) -> Markup {
    html! {
        (scrolling(&format!("Conditions of {title}"), &html! {
            table {
                thead { tr {
                    @for name in ["condition", "verdict", "found", "of"] {
                        th scope="col" { (name) }
                    }
                } }
                tbody {
                    @for line in alike(design) {
                        tr class=[(!line.holds).then_some("fails")] {
                            th scope="row" { (line.rule) }
                            td { @if line.holds { "holds" } @else { span class="verdict" { "fails" } } }
                            td { (shown(line.told)) }
                            td { @if line.slots.is_empty() { "all" } @else { (line.slots.join(", ")) } }
                        }
                    }
                }
            }
        }))
    }
}

fn changes(title: &str, changes: &[ChangeLine]) -> Markup {
    let cell = |text: &Option<String>| text.as_deref().map_or("blank".to_owned(), shown);
    html! {
        (scrolling(&format!("Changes of {title}"), &html! {
            table {
                thead { tr {
                    @for name in ["slot", "column", "was", "is"] { th scope="col" { (name) } }
                } }
                tbody {
                    @for change in changes {
                        tr {
                            th scope="row" { (change.slot) }
                            td { (shown(&change.column)) }
                            td { (cell(&change.was)) }
                            td { (cell(&change.is)) }
                        }
                    }
                }
            }
        }))
    }
}

/// What a design rests on; a list tells it once for all its candidates.
fn own_trust(id: &str, design: &DesignProof) -> Markup {
    html! {
        @if design.summary.is_some() {
            h3 { "Assumed" } (trust::items(&design.assumed))
            h3 { "Not checked" } (trust::items(&design.not_checked))
        }
        @if !design.cautions.is_empty() {
            (trust::cautions(&format!("{id}-cautions"), &design.cautions))
        }
    }
}

/// A utilisation to three digits.
pub(super) fn share(u: Figure) -> String {
    spelled(u.0, 3)
}
