//! The table of candidates, and that of designs.

use super::document::scrolling;
use super::shown;
use crate::figure::Figure;
use crate::proof::DesignProof;
use crate::proof::book::spelled;
use crate::shortlist::{Candidate, Shortlist};
use circuit::slot::Slot;
use maud::{Markup, html};
use quantity::notation::{engineering, resistance};

/// Slots with a column of their own, in their order.
const SLOTS: [Slot; 5] = [Slot::Zener, Slot::Amplifier, Slot::Pass, Slot::Heatsink, Slot::Pot];

/// The ranking, or that there is none.
pub(super) fn section(list: &Shortlist<'_>) -> Markup {
    html! {
        section id="ranking" {
            h2 { "Ranking" }
            @if list.candidates.is_empty() {
                p class="verdict" { "Nothing qualifies." }
            } @else {
                (scrolling("The ranked candidates", &table(list)))
            }
        }
    }
}

fn table(list: &Shortlist<'_>) -> Markup {
    let adjustable = list.sheet.rail.is_adjustable();
    let upper = if adjustable { "RX" } else { "RF" };
    let slots = || SLOTS.into_iter().filter(|slot| adjustable || *slot != Slot::Pot);
    let cost = list.currency.map_or("cost".to_owned(), |c| format!("cost, {c}"));
    html! {
        table class="ranking" {
            thead {
                tr {
                    th scope="col" class="n" { "#" }
                    th scope="col" { "id" }
                    @for slot in slots() { th scope="col" { (slot.name()) } }
                    @for name in ["RZ", upper, "RI", cost.as_str(), "score", "efficiency"] {
                        th scope="col" class="n" { (shown(name)) }
                    }
                    th scope="col" { "margin, set by" }
                    th scope="col" { "slack, set by" }
                    th scope="col" { "output" }
                }
            }
            tbody { @for candidate in &list.candidates { (row(candidate, list, slots())) } }
        }
    }
}

fn row(
    candidate: &Candidate<'_>,
    list: &Shortlist<'_>,
    slots: impl Iterator<Item = Slot>,
) -> Markup {
    let values = &candidate.values;
    let upper = values.rf_ohm.or(values.rx_ohm).unwrap_or(Figure(0.0));
    html! {
        tr {
            td class="n" { (candidate.rank) }
            th scope="row" { a href={ "#" (candidate.id) } { (candidate.id) } }
            @for slot in slots { td { (part(candidate, slot, list)) } }
            @for ohm in [values.rz_ohm, upper, values.ri_ohm] { td class="n" { (ohms(ohm)) } }
            td class="n" { (money(candidate.cost)) }
            td class="n" { (spelled(candidate.score.0, 4)) }
            td class="n" { (percent(candidate.efficiency)) }
            td class="w" { (percent(candidate.margin)) " " (candidate.binding.damage.unwrap_or_default()) }
            td class="w" { (percent(candidate.slack)) " " (candidate.binding.function.unwrap_or_default()) }
            td class="w" { (output(candidate)) }
        }
    }
}

fn part(candidate: &Candidate<'_>, slot: Slot, list: &Shortlist<'_>) -> Markup {
    match candidate.slot(slot).map(|row| (row.part, row.maker)) {
        Some((Some(part), maker)) => html! {
            (shown(part))
            span class="maker" { (shown(maker.unwrap_or_default())) }
        },
        _ if slot == Slot::Heatsink && list.sheet.rail.chooses_heatsink() => {
            html! { "unmounted" }
        }
        _ if slot == Slot::Heatsink => html! { "own sink" },
        _ => html! { "none" },
    }
}

/// The corners of the output, from the lowest to the highest.
pub(super) fn output(candidate: &Candidate<'_>) -> String {
    let figures = candidate.output.figures();
    let ends = [figures.first(), figures.last()].into_iter().flatten();
    ends.map(|v| engineering(v.0, "V", 4)).collect::<Vec<_>>().join(" … ")
}

/// A resistor; a link where there is none.
pub(super) fn ohms(ohm: Figure) -> String {
    if ohm.0 == 0.0 { "link".to_owned() } else { resistance(ohm.0) }
}

/// An amount of money: to the hundredth part, smaller ones to three digits.
pub(super) fn money(amount: Figure) -> String {
    if amount.0 >= 1.0 || amount.0 == 0.0 {
        format!("{:.2}", amount.0)
    } else {
        spelled(amount.0, 3)
    }
}

/// A share in percent.
pub(super) fn percent(share: Figure) -> String {
    format!("{:.1} %", share.0 * 100.0)
}

/// A line for each of several designs.
pub(super) fn designs(designs: &[DesignProof], id: &impl Fn(usize) -> String) -> Markup {
    let share = |of: Option<Figure>| of.map_or("–".to_owned(), percent);
    html! {
        section id="designs" {
            h2 { "Designs" }
            (scrolling("The designs", &html! {
                table {
                    thead {
                        tr {
                            @for name in ["design", "answer", "file"] { th scope="col" { (name) } }
                            th scope="col" { "margin, set by" }
                            th scope="col" { "slack, set by" }
                        }
                    }
                    tbody {
                        @for (at, design) in designs.iter().enumerate() {
                            @let summary = design.summary.as_ref();
                            @let name = design.name.as_deref().unwrap_or(&design.file);
                            tr {
                                th scope="row" { a href={ "#" (id(at)) } { (shown(name)) } }
                                td class="verdict" { (design.answer) }
                                td { code { (shown(&design.file)) } }
                                td {
                                    (share(summary.map(|s| s.margin))) " "
                                    (summary.and_then(|s| s.binding.damage).unwrap_or_default())
                                }
                                td {
                                    (share(summary.map(|s| s.slack))) " "
                                    (summary.and_then(|s| s.binding.function).unwrap_or_default())
                                }
                            }
                        }
                    }
                }
            }))
        }
    }
}
