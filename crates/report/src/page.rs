//! A page (HTML) of a list or of designs: one file that loads nothing and needs no script.
//!
//! | module | what it holds |
//! |---|---|
//! | `document` | the frame of a page: head, contents, files |
//! | `sheet` | its style sheet: light and dark, phone, paper |
//! | `ranking` | the table of candidates |
//! | `trust` | what was covered, assumed, left unchecked; cautions |
//! | `set` | one set of parts: pictures, parts, conditions |
//! | `proof` | its checks and figures, each with formula and source |
//!
//! Markup is written by `maud`, which escapes all that comes from files; a policy in the head of the
//! page keeps a browser from loading anything, whatever a file may have smuggled in.

mod document;
mod proof;
mod ranking;
mod set;
mod sheet;
mod trust;

use crate::look::Look;
use crate::proof::{Answer, DesignProof, Verification};
use crate::shortlist::{Candidate, Shortlist};
use document::Document;
use maud::html;
use picture::{Front, Subject};

/// One set of parts with all that is shown of it.
pub struct Set<'a> {
    /// Its proof.
    pub proof: &'a DesignProof,
    /// What its pictures are drawn from; None where figures are missing.
    pub subject: Option<Subject<'a>>,
    /// The front with it marked; None where the search for it gave up, or has nothing to search.
    pub front: Option<Front>,
}

/// The page of a shortlist. `sets` are those of its candidates, in their order.
pub fn shortlist(list: &Shortlist<'_>, sets: &[Set<'_>]) -> String {
    let mut contents = vec![("ranking".to_owned(), "Ranking".to_owned())];
    contents.extend(trust::contents(list));
    contents.extend(list.candidates.iter().map(|c| (c.id.clone(), title(c))));
    contents.push(("files".to_owned(), "Files".to_owned()));
    let body = html! {
        (ranking::section(list))
        (trust::of_list(list))
        @for (candidate, set) in list.candidates.iter().zip(sets) {
            (set::section(&candidate.id, &title(candidate), set, Some(list), Some(candidate)))
        }
        (document::files(&hashes(list)))
    };
    Document {
        title: list.rail,
        lead: &crate::terminal::sections::asked(list).join(", "),
        set: list.set,
        contents: &contents,
    }
    .around(&body)
}

/// The page of designs. `sets` are those of the designs, in their order.
pub fn verification(verification: &Verification, sets: &[Set<'_>]) -> String {
    let designs = &verification.designs;
    let several = designs.len() > 1;
    let id = |at: usize| format!("design-{}", at + 1);
    let name = |design: &DesignProof| design.name.clone().unwrap_or_else(|| design.file.clone());
    let mut contents = Vec::new();
    if several {
        contents.push(("designs".to_owned(), "Designs".to_owned()));
    }
    contents.extend(designs.iter().enumerate().map(|(at, d)| (id(at), name(d))));
    contents.push(("files".to_owned(), "Files".to_owned()));
    let body = html! {
        @if several { (ranking::designs(designs, &id)) }
        @for (at, set) in sets.iter().enumerate() {
            (set::section(&id(at), &name(set.proof), set, None, None))
        }
        (document::files(&verification.catalogs_sha256.0))
    };
    let (title, lead) = match designs.as_slice() {
        [only] => (name(only), format!("{}: {}", only.file, only.answer)),
        many => {
            let holding = many.iter().filter(|d| d.answer == Answer::Holds).count();
            (format!("{} designs", many.len()), format!("{holding} of {} hold", many.len()))
        }
    };
    Document { title: &title, lead: &lead, set: &verification.set, contents: &contents }
        .around(&body)
}

/// What a candidate is called.
fn title(candidate: &Candidate<'_>) -> String {
    format!("{}: {}", candidate.rank, candidate.id)
}

/// The files of a list with their hashes.
fn hashes(list: &Shortlist<'_>) -> Vec<(String, String)> {
    let sheet = ("the rail sheet".to_owned(), list.sheet_sha256.hex());
    let others = list.catalogs_sha256.0.iter().map(|(name, hash)| ((*name).to_owned(), hash.hex()));
    std::iter::once(sheet).chain(others).collect()
}

/// A text from a file as it can be shown: characters that act on a reader are replaced.
fn shown(text: &str) -> String {
    Look { width: usize::MAX, colour: false, ascii: false }.text(text)
}
