//! The checks of a set and the figures that they rest on: each with its formula, its numbers put in, and
//! where it comes from.

use super::document::scrolling;
use super::set::share;
use super::shown;
use crate::proof::DesignProof;
use crate::proof::book::{Expression, Figure, Origin, spelled};
use crate::proof::checks::CheckLine;
use crate::proof::terminal::{origin, worked};
use maud::{Markup, html};

/// The sections of a proof.
pub(super) fn sections(id: &str, title: &str, design: &DesignProof) -> Markup {
    if design.checks.is_empty() {
        return html! {};
    }
    let page = Page { id, design };
    html! {
        h3 { "Checks" }
        (scrolling(&format!("Checks of {title}"), &page.checks()))
        h3 { "Figures that are given" }
        (scrolling(&format!("Given figures of {title}"), &page.given()))
        h3 { "Figures that are worked out" }
        (scrolling(&format!("Worked figures of {title}"), &page.worked_out()))
    }
}

/// A design with the ids of its figures on the page.
struct Page<'a> {
    id: &'a str,
    design: &'a DesignProof,
}

impl Page<'_> {
    fn checks(&self) -> Markup {
        html! {
            table class="checks" {
                thead { tr {
                    th scope="col" { "check" }
                    th scope="col" class="n" { "use" }
                    @for name in ["asked", "allowed", "rests on"] { th scope="col" { (name) } }
                } }
                tbody { @for check in &self.design.checks { (self.check(check)) } }
            }
        }
    }

    fn check(&self, check: &CheckLine) -> Markup {
        let sides = [&check.asked_by, &check.allowed_by];
        let mut ids: Vec<&str> = Vec::new();
        for figure in sides.iter().flat_map(|side| &side.figures) {
            if !ids.contains(&figure.as_str()) {
                ids.push(figure);
            }
        }
        html! {
            tr class=[(!check.holds).then_some("fails")] data-check=(check.name)
                data-asked=(check.asked.0) data-allowed=(check.allowed.0) {
                th scope="row" {
                    (check.name)
                    span class="maker" { (check.kind) @if !check.holds { ", fails" } }
                }
                td class="n" { (share(check.utilisation)) }
                @for side in sides { td class="sum" { (shown(&worked(side, check.unit))) } }
                td class="rests" { (self.links(&ids)) }
            }
        }
    }

    /// Links to figures, by their symbols.
    fn links(&self, ids: &[&str]) -> Markup {
        html! {
            @for id in ids {
                @if let Some((at, figure)) = self.figure(id) {
                    a href={ "#" (self.anchor(at)) } { (figure.symbol) } " "
                }
            }
        }
    }

    fn figure(&self, id: &str) -> Option<(usize, &Figure)> {
        self.design.figures.iter().enumerate().find(|(_, figure)| figure.id == id)
    }

    fn anchor(&self, at: usize) -> String {
        format!("{}-figure-{}", self.id, at + 1)
    }

    /// The figures that are given, or that are worked out, with their places on the page.
    fn figures(&self, worked_out: bool) -> impl Iterator<Item = (usize, &Figure)> {
        let wanted = move |f: &&Figure| f.worked_out.is_some() == worked_out;
        self.design.figures.iter().enumerate().filter(move |(_, f)| wanted(f))
    }

    fn given(&self) -> Markup {
        html! {
            table {
                thead { tr {
                    @for name in ["figure", "of"] { th scope="col" { (name) } }
                    th scope="col" class="n" { "value" }
                    @for name in ["given by", "place", "source"] { th scope="col" { (name) } }
                } }
                tbody {
                    @for (at, figure) in self.figures(false) {
                        @let (place, source) = self.place(figure);
                        tr id=(self.anchor(at)) {
                            th scope="row" { (figure.symbol) }
                            td { (of(figure)) }
                            td class="n" { (value(figure)) }
                            td class="any" { (shown(&given_by(figure))) }
                            td { code { (shown(&place)) } }
                            td { (shown(&source)) }
                        }
                    }
                }
            }
        }
    }

    /// File and line of a given figure, and the source that its row states.
    fn place(&self, figure: &Figure) -> (String, String) {
        let of_key = |key: &crate::proof::origin::KeyOrigin| match (&key.file, key.line) {
            (Some(file), Some(line)) => format!("{file}:{line}"),
            (Some(file), None) => file.clone(),
            _ => String::new(),
        };
        let slot = figure.slot.and_then(|slot| self.design.slot(slot));
        match (&figure.origin, slot) {
            (Origin::Key(key) | Origin::StandIn { key, .. }, _) => (of_key(key), String::new()),
            (Origin::Cell { .. } | Origin::ColumnDefault { .. }, Some(slot)) => {
                (format!("{}:{}", slot.file, slot.line), slot.source.clone())
            }
            _ => (String::new(), String::new()),
        }
    }

    fn worked_out(&self) -> Markup {
        html! {
            table {
                thead { tr {
                    @for name in ["figure", "of", "worked out", "rests on", "read from"] {
                        th scope="col" { (name) }
                    }
                } }
                tbody {
                    @for (at, figure) in self.figures(true) {
                        @if let Some(expression) = &figure.worked_out {
                            (self.worked_figure(at, figure, expression))
                        }
                    }
                }
            }
        }
    }

    fn worked_figure(&self, at: usize, figure: &Figure, expression: &Expression) -> Markup {
        let ids: Vec<&str> = expression.figures.iter().map(String::as_str).collect();
        let slot = figure.slot.and_then(|slot| self.design.slot(slot));
        html! {
            tr id=(self.anchor(at)) {
                th scope="row" { (figure.symbol) }
                td { (of(figure)) }
                td class="sum" {
                    (shown(&worked(expression, figure.unit)))
                    @if let Some(note) = &figure.note { span class="maker" { (shown(note)) } }
                }
                td class="rests" { (self.links(&ids)) }
                td {
                    @if let (Origin::Cell { column, .. }, Some(slot)) = (&figure.origin, slot) {
                        (column) ", " code { (shown(&slot.file)) ":" (slot.line) }
                        span class="maker" { (shown(&slot.source)) }
                    }
                }
            }
        }
    }
}

/// Who gives a figure. Its file has a column of its own.
fn given_by(figure: &Figure) -> String {
    let file = match &figure.origin {
        Origin::Key(key) | Origin::StandIn { key, .. } => key.file.as_deref(),
        _ => None,
    };
    origin(&figure.origin, file.unwrap_or_default())
}

fn of(figure: &Figure) -> String {
    figure.slot.unwrap_or("rail").replace('_', " ")
}

fn value(figure: &Figure) -> String {
    let number = spelled(figure.value.0, 6);
    if figure.unit.is_empty() { number } else { format!("{number} {}", figure.unit) }
}
