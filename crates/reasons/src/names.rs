//! Finding a part by the name that somebody types.

use catalog::{Catalog, Kind, Shop};

/// A row of some catalog that goes by a name.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Entry {
    /// Its catalog.
    pub kind: Kind,
    /// Index into the catalog's files.
    pub file: u16,
    /// The line on which it starts.
    pub line: u32,
    /// Its maker; may be empty.
    pub maker: String,
    /// Its name.
    pub part: String,
    /// What was read of it.
    pub state: State,
}

/// What was read of a row.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum State {
    /// Every cell that is needed whatever the sheet.
    Complete,
    /// Some of these are blank.
    Unproven(Vec<&'static str>),
    /// It was left out for its polarity.
    LeftOut(String),
}

/// No row goes by a name.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Unknown {
    /// The name.
    pub text: String,
    /// The name most like it, where one is.
    pub nearest: Option<String>,
}

/// How like a name has to be for a suggestion, 0 … 1.
const LIKE: f64 = 0.7;

/// Every row that a name means: a part of every maker, else `maker/part`.
///
/// # Errors
/// [`Unknown`] where there is none.
pub fn look_up(text: &str, shop: &Shop) -> Result<Vec<Entry>, Unknown> {
    let all = entries(shop);
    let as_part: Vec<Entry> = all.iter().filter(|e| e.part == text).cloned().collect();
    if !as_part.is_empty() {
        return Ok(as_part);
    }
    // A maker's or a part's name may hold a stroke of its own, so whole names are compared.
    let is_whole = |e: &&Entry| {
        text.strip_prefix(e.maker.as_str()).and_then(|rest| rest.strip_prefix('/'))
            == Some(e.part.as_str())
    };
    let whole: Vec<Entry> = all.iter().filter(is_whole).cloned().collect();
    if !whole.is_empty() {
        return Ok(whole);
    }
    let written = |e: &Entry| {
        if text.contains('/') && !e.maker.is_empty() {
            format!("{}/{}", e.maker, e.part)
        } else {
            e.part.clone()
        }
    };
    let lower = text.to_lowercase();
    let likeness = |name: &str| strsim::jaro_winkler(&lower, &name.to_lowercase());
    let names = all.iter().map(written);
    let nearest = names.max_by(|a, b| {
        // Of equally like names the first by code points.
        likeness(a).total_cmp(&likeness(b)).then_with(|| b.cmp(a))
    });
    let nearest = nearest.filter(|name| likeness(name) >= LIKE);
    Err(Unknown { text: text.to_owned(), nearest })
}

fn entries(shop: &Shop) -> Vec<Entry> {
    let Shop { zeners, opamps, transistors, resistors, pots, heatsinks } = shop;
    let mut all = Vec::new();
    of_catalog(zeners, &mut all);
    of_catalog(opamps, &mut all);
    of_catalog(transistors, &mut all);
    of_catalog(resistors, &mut all);
    of_catalog(pots, &mut all);
    of_catalog(heatsinks, &mut all);
    all
}

fn of_catalog<T>(catalog: &Catalog<T>, all: &mut Vec<Entry>) {
    let mut push = |file, line, maker: &str, part: &str, state| {
        all.push(Entry {
            kind: catalog.kind,
            file,
            line,
            maker: maker.to_owned(),
            part: part.to_owned(),
            state,
        });
    };
    for r in &catalog.rows {
        push(r.file, r.line, &r.maker, &r.part, State::Complete);
    }
    for u in &catalog.unproven {
        push(u.file, u.line, &u.maker, &u.part, State::Unproven(u.lacks.clone()));
    }
    for l in &catalog.left_out {
        push(l.file, l.line, &l.maker, &l.part, State::LeftOut(l.polarity.to_string()));
    }
}
