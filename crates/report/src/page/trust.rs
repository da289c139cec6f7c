//! What a list rests on: what was covered, assumed and left unchecked, and cautions.

use super::document::scrolling;
use super::shown;
use crate::look::grouped;
use crate::shortlist::Shortlist;
use crate::terminal::sections;
use maud::{Markup, html};

/// The places of this part of the page.
pub(super) fn contents(list: &Shortlist<'_>) -> Vec<(String, String)> {
    let mut places = vec![("cautions", "Cautions"), ("covered", "Covered"), ("assumed", "Assumed")];
    places.push(("not-checked", "Not checked"));
    if !list.unproven.is_empty() {
        places.push(("unproven", "Unproven parts"));
    }
    places.into_iter().map(|(id, name)| (id.to_owned(), name.to_owned())).collect()
}

/// All of it, of a list.
pub(super) fn of_list(list: &Shortlist<'_>) -> Markup {
    let assumed: Vec<String> =
        list.assumed.iter().cloned().chain(sections::leaned_on(list)).collect();
    html! {
        (cautions("cautions", &list.cautions))
        (covered(list))
        section id="assumed" { h2 { "Assumed" } (items(&assumed)) }
        section id="not-checked" { h2 { "Not checked" } (items(&list.not_checked)) }
        @if !list.unproven.is_empty() { (unproven(list)) }
    }
}

/// Cautions, in a frame.
pub(super) fn cautions(id: &str, cautions: &[&str]) -> Markup {
    html! {
        section id=(id) class="cautions" {
            h2 { "Cautions" }
            ul { @for caution in cautions { li { (caution) } } }
        }
    }
}

/// A list of short texts; a word where there is none.
pub(super) fn items<T: AsRef<str>>(texts: &[T]) -> Markup {
    html! {
        @if texts.is_empty() { p { "nothing" } } @else {
            ul { @for text in texts { li { (shown(text.as_ref())) } } }
        }
    }
}

fn covered(list: &Shortlist<'_>) -> Markup {
    html! {
        section id="covered" {
            h2 { "Covered" }
            p { (sections::covered(list)) }
            @if let Some(lost) = &list.combinations.lost {
                (scrolling("What combinations were lost to first", &html! {
                    table {
                        thead { tr {
                            th scope="col" { "lost first to" }
                            th scope="col" class="n" { "combinations" }
                        } }
                        tbody {
                            @for (check, count) in &lost.0 {
                                tr { th scope="row" { (check) } td class="n" { (grouped(count)) } }
                            }
                        }
                    }
                }))
            }
        }
    }
}

fn unproven(list: &Shortlist<'_>) -> Markup {
    html! {
        section id="unproven" {
            h2 { "Unproven parts (" (list.unproven.len()) ")" }
            p { "Blank cells leave checks of these parts open, so none of them was chosen." }
            (scrolling("Unproven parts", &html! {
                table {
                    thead { tr {
                        @for name in ["part", "maker", "place", "blank cells"] {
                            th scope="col" { (name) }
                        }
                    } }
                    tbody {
                        @for part in &list.unproven {
                            tr {
                                th scope="row" { (shown(part.part)) }
                                td { (shown(part.maker)) }
                                td { code { (shown(part.file)) ":" (part.line) } }
                                td { (part.lacks.join(", ")) }
                            }
                        }
                    }
                }
            }))
        }
    }
}
