//! What is fed with inputs, and what must hold for every one of them.
//!
//! Of every input it is asked that reading it ends, without panic, and that
//!
//! * an input is refused if and only if there is a notice that is an error;
//! * every notice can be shown, and what is shown acts on no terminal;
//! * a figure that a reader accepts is a finite one, and a suggestion for a cell can itself be read;
//! * what is read makes a search, a count and the proof of every candidate possible, and each proof holds.
//!
//! [`crate::campaign`] adds that memory stays within a multiple of the input's size.

use crate::bundle;
use catalog::plausible::{gaps, plausibility};
use catalog::{Kind, ReadOptions, Shop, read_folder};
use design::parts::Parts;
use design::proof::{AtRail, Fitted};
use eligible::eligible;
use notice::{Notice, Severity, has_errors};
use quantity::digits::at_most;
use quantity::notation::{
    NotationError, Unit, engineering, parse, parse_bytes, quick, resistance, suggestion,
};
use report::look::Look;
use report::notices::{Warnings, render};
use select::count::count;
use select::ranking::{NO_SPREAD, shortlist};
use sheet::{Sheet, ShopFile};
use std::collections::BTreeSet;
use std::io;
use std::path::Path;

/// A reader, or the tool from its files to its answer.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Target {
    /// A catalog of each kind.
    Catalogs,
    /// A cell, in every unit.
    Cells,
    /// A rail sheet.
    Sheets,
    /// A design.
    Designs,
    /// A shop file, with a sheet that it serves.
    Shops,
    /// A bundle of sheet, shop file, catalogs and design, through search, count and proof.
    Answers,
}

/// What came of an input: words that tell one behaviour from another.
pub type Behaviour = BTreeSet<String>;

/// The word of an input that a reader did not refuse.
pub const ACCEPTED: &str = "accepted";

impl Target {
    /// Every target.
    pub const ALL: [Target; 6] =
        [Self::Catalogs, Self::Cells, Self::Sheets, Self::Designs, Self::Shops, Self::Answers];

    /// Its name, which is also that of its folder in the corpus.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Catalogs => "catalogs",
            Self::Cells => "cells",
            Self::Sheets => "sheets",
            Self::Designs => "designs",
            Self::Shops => "shops",
            Self::Answers => "answers",
        }
    }

    /// The target of a name.
    pub fn named(name: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|target| target.name() == name)
    }

    /// Feeds an input. `folder` is an empty one for files that are read from disk.
    ///
    /// # Errors
    /// Where a file can't be written into the folder.
    ///
    /// # Panics
    /// Where anything fails to hold that must hold.
    pub fn feed(self, input: &[u8], folder: &Path) -> io::Result<Behaviour> {
        match self {
            Self::Catalogs => catalogs(input, folder),
            Self::Cells => Ok(cells(input)),
            Self::Sheets => Ok(sheets(input)),
            Self::Designs => Ok(designs(input)),
            Self::Shops => Ok(shops(input)),
            Self::Answers => answers(input, folder),
        }
    }
}

/// Where texts are shown: narrow, without colours, so that no control character is ours.
const LOOK: Look = Look { width: 60, colour: false, ascii: false };

/// Notes what the notices say, and that they can be shown.
fn watch(notices: &[Notice], behaviour: &mut Behaviour) {
    for notice in notices {
        behaviour.insert(notice.code.to_owned());
    }
    let shown = render(notices, Warnings::Every, &LOOK);
    let acting = shown.chars().find(|c| c.is_control() && *c != '\n');
    assert_eq!(acting, None, "a control character reaches the terminal in {shown:?}");
    assert_eq!(shown.is_empty(), notices.is_empty(), "notices are shown if there are any");
}

/// Refused if and only if there is an error.
fn judged<T>(read: Option<&T>, notices: &[Notice], behaviour: &mut Behaviour) {
    assert_eq!(read.is_none(), has_errors(notices), "refused without an error, or the reverse");
    if read.is_some() {
        behaviour.insert(ACCEPTED.to_owned());
    }
    watch(notices, behaviour);
}

fn catalogs(input: &[u8], folder: &Path) -> io::Result<Behaviour> {
    let mut behaviour = Behaviour::new();
    for kind in Kind::ALL {
        let file = folder.join(kind.file_name());
        std::fs::write(&file, input)?;
        for skip_broken_rows in [false, true] {
            let options = ReadOptions { skip_broken_rows, ..ReadOptions::default() };
            let mut notices = Vec::new();
            let shop = read_folder(folder, &options, &mut notices);
            // The other files are missing on purpose.
            notices.retain(|n| n.code != "file-missing");
            assert!(shop.is_none() || !has_errors(&notices), "accepted with an error");
            if !has_errors(&notices) {
                behaviour.insert(ACCEPTED.to_owned());
            }
            watch(&notices, &mut behaviour);
        }
        std::fs::remove_file(&file)?;
    }
    Ok(behaviour)
}

fn cells(input: &[u8]) -> Behaviour {
    let mut behaviour = Behaviour::new();
    for unit in Unit::ALL {
        let read = parse_bytes(input, unit);
        if let Some(figure) = quick(input, unit) {
            assert_eq!(read, Ok(figure), "the quick way reads what the whole way reads");
        }
        let Ok(text) = std::str::from_utf8(input) else {
            assert!(read.is_err(), "no UTF-8, but a figure");
            continue;
        };
        assert_eq!(read, parse(text, unit), "bytes and text mean the same");
        match read {
            Ok(figure) => {
                assert!(figure.is_finite(), "{text:?} is {figure}");
                // Seventeen digits tell every double apart, so what is shown reads back.
                let shown = engineering(figure, unit.symbol(), 17);
                let again = parse(&shown, unit).unwrap_or(f64::NAN);
                let off = (again - figure).abs();
                assert!(
                    off <= 1e-15 * figure.abs(),
                    "{text:?} is shown as {shown:?}, which is {again}"
                );
                let _ = resistance(figure);
                behaviour.insert(format!("{unit:?} read"));
                behaviour.insert(ACCEPTED.to_owned());
            }
            Err(error) => {
                let kind = match error {
                    NotationError::OtherUnit { found, .. } => format!("other unit {found:?}"),
                    NotationError::Trailing { .. } => "trailing".to_owned(),
                    error => format!("{error:?}"),
                };
                behaviour.insert(format!("{unit:?} {kind}"));
                if let Some(mend) = suggestion(text, unit) {
                    assert!(parse(&mend, unit).is_ok(), "the suggestion {mend:?} can't be read");
                    behaviour.insert(format!("{unit:?} suggestion"));
                }
            }
        }
    }
    behaviour
}

fn sheets(input: &[u8]) -> Behaviour {
    let mut behaviour = Behaviour::new();
    let text = String::from_utf8_lossy(input);
    // The first line serves as an argument of the command line as well.
    let set: Vec<String> =
        text.lines().next().map(|line| vec![line.to_owned()]).unwrap_or_default();
    for set in [&[][..], &set] {
        let mut notices = Vec::new();
        let read = sheet::read("sheet.toml", &text, &ShopFile::empty(), set, &mut notices);
        judged(read.as_ref(), &notices, &mut behaviour);
        if let Some(sheet) = read {
            in_words(&sheet, &mut behaviour);
        }
    }
    behaviour
}

fn in_words(sheet: &Sheet, behaviour: &mut Behaviour) {
    let rail = &sheet.rail;
    let figures = [rail.feed.min_v, rail.feed.nominal_v, rail.feed.max_v, rail.feed.max_loaded_v];
    assert!(figures.iter().all(|f| f.is_finite() && *f > 0.0), "a feed of {figures:?}");
    assert!(figures.is_sorted() || at_most(rail.feed.max_loaded_v, rail.feed.max_v));
    assert!(sheet.boards >= 1, "no board");
    behaviour.insert(format!("adjustable {}", rail.is_adjustable()));
    behaviour.insert(format!("fault {}", rail.fault.is_some()));
}

fn designs(input: &[u8]) -> Behaviour {
    let mut behaviour = Behaviour::new();
    let text = String::from_utf8_lossy(input);
    let mut notices = Vec::new();
    let read = design::read("design.toml", &text, &mut notices);
    judged(read.as_ref(), &notices, &mut behaviour);
    behaviour
}

fn shops(input: &[u8]) -> Behaviour {
    const SHEET: &str = "[rail]\nname = \"r\"\n[feed]\nmin_v = 17\nnominal_v = 20\nmax_v = 25\n\
        [output]\nvoltage_v = 12\ntolerance_pct = 5\n[load]\nmax_a = 1\n[ambient]\nmin_c = 0\nmax_c = 40\n";
    let mut behaviour = Behaviour::new();
    let text = String::from_utf8_lossy(input);
    let mut notices = Vec::new();
    let shop = ShopFile::read("shop.toml", &text, &mut notices);
    judged(shop.as_ref(), &notices, &mut behaviour);
    if let Some(shop) = shop {
        let mut notices = Vec::new();
        let sheet = sheet::read("sheet.toml", SHEET, &shop, &[], &mut notices);
        judged(sheet.as_ref(), &notices, &mut behaviour);
    }
    behaviour
}

/// The files of a bundle, read as the program reads them.
fn answers(input: &[u8], folder: &Path) -> io::Result<Behaviour> {
    let mut behaviour = Behaviour::new();
    let files = bundle::files(input);
    for kind in Kind::ALL {
        let name = kind.file_name();
        let _ = std::fs::remove_file(folder.join(name));
        if let Some((_, bytes)) = files.iter().find(|(file, _)| *file == name.as_bytes()) {
            std::fs::write(folder.join(name), bytes)?;
        }
    }
    let text = |name: &str| {
        let found = files.iter().find(|(file, _)| *file == name.as_bytes());
        found.map(|(_, bytes)| String::from_utf8_lossy(bytes).into_owned())
    };
    let mut notices = Vec::new();
    let shop_file = match text("shop.toml") {
        Some(text) => ShopFile::read("shop.toml", &text, &mut notices),
        None => Some(ShopFile::empty()),
    };
    let sheet = shop_file.as_ref().and_then(|shop_file| {
        let text = text("sheet.toml").unwrap_or_default();
        sheet::read("sheet.toml", &text, shop_file, &[], &mut notices)
    });
    let options = ReadOptions {
        renamed: shop_file.as_ref().map(|s| s.columns.clone()).unwrap_or_default(),
        skip_broken_rows: true,
        ..ReadOptions::default()
    };
    let shop = read_folder(folder, &options, &mut notices);
    watch(&notices, &mut behaviour);
    if let (Some(sheet), Some(shop)) = (&sheet, &shop) {
        answer(sheet, shop, &mut behaviour);
        if let Some(design) = text("design.toml") {
            verify(&design, sheet, shop, &mut behaviour);
        }
    }
    Ok(behaviour)
}

/// Combinations beyond this are not counted one by one: the input is then about numbers, not about size.
const MOST_COMBINATIONS: usize = 20_000;

fn answer(sheet: &Sheet, shop: &Shop, behaviour: &mut Behaviour) {
    let mut notices = Vec::new();
    plausibility(shop, &mut notices);
    assert!(notices.iter().all(|n| n.severity == Severity::Warning), "doubts are no errors");
    let _ = gaps(shop);
    let eligible = eligible(sheet, shop, true, &mut notices);
    watch(&notices, behaviour);
    if has_errors(&notices) {
        return;
    }
    behaviour.insert(ACCEPTED.to_owned());
    let problem = eligible.problem();
    let Ok(list) = shortlist(&problem, 5, &NO_SPREAD) else {
        behaviour.insert("too large".to_owned());
        return;
    };
    behaviour.insert(format!("{} candidates", list.len()));
    for candidate in &list {
        let proof = candidate.prove(&problem).expect("a candidate can be proven");
        for finding in &proof.findings {
            assert!(at_most(finding.utilisation(), 1.0), "a candidate that fails: {finding:?}");
        }
        for score in [candidate.cost, candidate.loss, candidate.stress, candidate.score] {
            assert!(!score.is_nan(), "a figure that is none: {candidate:?}");
        }
        behaviour.insert(format!("{:?}", proof.stress.check));
        behaviour.insert(format!("{:?}", proof.tightness.check));
    }
    let sizes = [
        problem.zeners.len(),
        problem.bias_lines.len(),
        problem.amplifiers.len(),
        problem.divider_lines.len(),
        problem.pots.len().max(1),
        problem.transistors.len(),
        problem.heatsinks.len() + 1,
    ];
    let combinations = sizes.iter().fold(1usize, |product, n| product.saturating_mul(*n));
    if combinations <= MOST_COMBINATIONS {
        let counts = count(&problem, &|_| {});
        let feasible = counts.feasible.to_string() != "0";
        assert_eq!(feasible, !list.is_empty(), "the count and the list disagree");
    }
}

fn verify(text: &str, sheet: &Sheet, shop: &Shop, behaviour: &mut Behaviour) {
    let mut notices = Vec::new();
    let read = design::read("design.toml", text, &mut notices);
    judged(read.as_ref(), &notices, behaviour);
    let Some(design) = read else { return };
    let mut notices = Vec::new();
    let parts = Parts::find(&design, shop, &sheet.rail, &mut notices);
    watch(&notices, behaviour);
    let Some(parts) = parts else { return };
    let _ = design::condition::conditions(&parts, sheet, sheet.boards);
    for place in parts.places() {
        let _ = design::change::changes(&design, &place);
    }
    let fitted = Fitted::new(&parts, &sheet.rail);
    if let Some(at_rail) = fitted.and_then(|f| AtRail::new(&f, &parts, &sheet.rail)) {
        let proof = at_rail.prove();
        let fails = proof.findings.iter().find(|f| !at_most(f.utilisation(), 1.0));
        behaviour.insert(format!("design fails at {:?}", fails.map(|f| f.check)));
    }
}
