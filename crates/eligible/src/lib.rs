//! Which rows of the catalogs may be chosen for a sheet, and why the others may not.
//!
//! A row may be chosen when its life-cycle word is allowed, it is not banned, its slot is not pinned
//! to other parts, there are enough pieces where stock is asked for, and no cell that this sheet
//! needs is blank. The rest is for the checks of the circuit to say.

mod names;

use catalog::{Catalog, Kind, Row, Shop, Sink, Status};
use circuit::parts::{Amplifier, Pot, ResistorLine, Transistor, Zener};
use circuit::slot::Slot;
use names::Named;
pub use names::kind_of;
use notice::{Notice, Severity};
use rayon::prelude::*;
use select::problem::{Part, PassPart, Problem, SinkPart, Weights};
use sheet::Sheet;

/// Why a row may not be chosen.
#[derive(Debug, Clone, PartialEq)]
pub enum Bar {
    /// Its life-cycle word is not allowed.
    Status(Status),
    /// The sheet or the shop bans it.
    Banned,
    /// Its slot is pinned to other parts.
    NotPinned,
    /// Fewer pieces in stock than boards, or a blank stock (None).
    Stock(Option<f64>),
    /// Cells are blank that this sheet needs.
    Lacks(Vec<&'static str>),
}

/// The rows that may be chosen, slot by slot, in the order of their files.
#[derive(Debug)]
pub struct Eligible<'a> {
    /// The requirement.
    pub sheet: &'a Sheet,
    /// The catalogs.
    pub shop: &'a Shop,
    /// Rows for the zener.
    pub zeners: Vec<&'a Row<Zener>>,
    /// Rows for the bias line.
    pub bias_lines: Vec<&'a Row<ResistorLine>>,
    /// Rows for the amplifier.
    pub amplifiers: Vec<&'a Row<Amplifier>>,
    /// Rows for the divider line.
    pub divider_lines: Vec<&'a Row<ResistorLine>>,
    /// Rows for the pot; none with a fixed output.
    pub pots: Vec<&'a Row<Pot>>,
    /// Rows for the pass transistor.
    pub transistors: Vec<&'a Row<Transistor>>,
    /// Rows for the heatsink; none where the sheet brings its own.
    pub heatsinks: Vec<&'a Row<Sink>>,
    /// Parts that blank cells leave unproven, whatever their status.
    pub unproven: Vec<UnprovenPart<'a>>,
}

/// A part that blank cells leave unproven.
#[derive(Debug, Clone, PartialEq)]
pub struct UnprovenPart<'a> {
    /// Its catalog.
    pub kind: Kind,
    /// The file within the folder.
    pub file: &'a str,
    /// The line on which its record starts.
    pub line: u32,
    /// Its maker; may be empty.
    pub maker: &'a str,
    /// Its name.
    pub part: &'a str,
    /// The columns that it lacks.
    pub lacks: Vec<&'static str>,
}

/// Sorts out which rows may be chosen.
///
/// Faults of names go to `notices`: a pinned part that its slot's catalog does not hold is an error, a
/// banned part that no catalog holds a warning. Lines and pots that the rail's temperatures leave no
/// resistance are errors, or warnings where `skip_broken_rows` leaves them out.
pub fn eligible<'a>(
    sheet: &'a Sheet,
    shop: &'a Shop,
    skip_broken_rows: bool,
    notices: &mut Vec<Notice>,
) -> Eligible<'a> {
    let rail = &sheet.rail;
    let named = Named::new(sheet, shop, notices);
    let fault_heats = rail.fault.is_some_and(|f| f.heats_junctions());
    let span_c = rail.temperature_span_c();
    let sifted = Sift { sheet, named: &named };

    let amplifier_lacks = |row: &Row<Amplifier>| {
        if fault_heats { catalog::lacks_for_fault(&row.figures) } else { None }
    };
    let transistor_lacks = |row: &Row<Transistor>| {
        if rail.chooses_heatsink() { catalog::lacks_for_sink(row) } else { None }
    };
    let mut refuse = |kind: Kind, row_line: u32, file: Option<&str>, part: &str| {
        notices.push(names::no_resistance(kind, row_line, file, part, span_c, skip_broken_rows));
    };
    let mut line_stands = |row: &Row<ResistorLine>| {
        let none =
            catalog::shop::leaves_no_resistance(row.figures.tol, row.figures.tempco_per_c, span_c);
        if none {
            let file = shop.resistors.file(row.file).map(|f| f.name.as_str());
            refuse(Kind::Resistors, row.line, file, &row.part);
        }
        !none
    };
    let lines: Vec<&Row<ResistorLine>> =
        shop.resistors.rows.iter().filter(|row| line_stands(row)).collect();
    let pots = if rail.is_adjustable() { shop.pots.rows.as_slice() } else { &[] };
    let pots: Vec<&Row<Pot>> = pots
        .iter()
        .filter(|row| {
            let none = catalog::shop::leaves_no_resistance(
                row.figures.tol,
                row.figures.tempco_per_c,
                span_c,
            );
            if none {
                let file = shop.pots.file(row.file).map(|f| f.name.as_str());
                refuse(Kind::Pots, row.line, file, &row.part);
            }
            !none
        })
        .collect();
    let heatsinks = if rail.chooses_heatsink() { shop.heatsinks.rows.as_slice() } else { &[] };

    Eligible {
        sheet,
        shop,
        zeners: sifted.rows(&shop.zeners.rows, Slot::Zener, |_| None),
        bias_lines: sifted.rows(lines.par_iter().copied(), Slot::BiasLine, |_| None),
        amplifiers: sifted.rows(&shop.opamps.rows, Slot::Amplifier, amplifier_lacks),
        divider_lines: sifted.rows(lines.par_iter().copied(), Slot::DividerLine, |_| None),
        pots: sifted.rows(pots, Slot::Pot, |_| None),
        transistors: sifted.rows(&shop.transistors.rows, Slot::Pass, transistor_lacks),
        heatsinks: sifted.rows(heatsinks, Slot::Heatsink, |_| None),
        unproven: unproven(sheet, shop, amplifier_lacks, transistor_lacks),
    }
}

/// The rules of a sheet, applied to rows.
struct Sift<'a> {
    sheet: &'a Sheet,
    named: &'a Named,
}

impl<'a> Sift<'a> {
    fn rows<'r, T: Sync + 'r>(
        &self,
        rows: impl IntoParallelIterator<Item = &'r Row<T>>,
        slot: Slot,
        lacks: impl Fn(&Row<T>) -> Option<&'static str> + Sync,
    ) -> Vec<&'r Row<T>> {
        rows.into_par_iter().filter(|row| self.bar(row, slot, &lacks).is_none()).collect()
    }

    /// What bars a row from a slot; None where it may be chosen.
    fn bar<T>(
        &self,
        row: &Row<T>,
        slot: Slot,
        lacks: impl Fn(&Row<T>) -> Option<&'static str>,
    ) -> Option<Bar> {
        let rules = &self.sheet.parts;
        if let Some(column) = lacks(row) {
            return Some(Bar::Lacks(vec![column]));
        }
        if !rules.allow_status.iter().any(|word| word == row.status.name()) {
            return Some(Bar::Status(row.status));
        }
        if self.named.is_banned(&row.maker, &row.part) {
            return Some(Bar::Banned);
        }
        if !self.named.is_let_in(slot, &row.maker, &row.part) {
            return Some(Bar::NotPinned);
        }
        let is_line = matches!(slot, Slot::BiasLine | Slot::DividerLine);
        let enough = row.stock.is_some_and(|pieces| pieces >= self.sheet.boards as f64);
        if rules.need_stock && !is_line && !enough {
            return Some(Bar::Stock(row.stock));
        }
        None
    }
}

/// Every part that blank cells leave unproven for this sheet, in the order of kinds and files.
fn unproven<'a>(
    sheet: &Sheet,
    shop: &'a Shop,
    amplifier_lacks: impl Fn(&Row<Amplifier>) -> Option<&'static str>,
    transistor_lacks: impl Fn(&Row<Transistor>) -> Option<&'static str>,
) -> Vec<UnprovenPart<'a>> {
    let rail = &sheet.rail;
    let mut parts = Vec::new();
    for (kind, row) in shop.unproven() {
        let asked = match kind {
            Kind::Pots => rail.is_adjustable(),
            Kind::Heatsinks => rail.chooses_heatsink(),
            _ => true,
        };
        if asked {
            parts.push(UnprovenPart {
                kind,
                file: file_name(shop, kind, row.file),
                line: row.line,
                maker: &row.maker,
                part: &row.part,
                lacks: row.lacks.clone(),
            });
        }
    }
    lacking(&shop.opamps, shop, amplifier_lacks, &mut parts);
    lacking(&shop.transistors, shop, transistor_lacks, &mut parts);
    parts.sort_by_key(|p| (p.kind, p.file, p.line));
    parts
}

/// Rows of a catalog that lack something only for this sheet.
fn lacking<'a, T>(
    catalog: &'a Catalog<T>,
    shop: &'a Shop,
    lacks: impl Fn(&Row<T>) -> Option<&'static str>,
    parts: &mut Vec<UnprovenPart<'a>>,
) {
    for row in &catalog.rows {
        if let Some(column) = lacks(row) {
            parts.push(UnprovenPart {
                kind: catalog.kind,
                file: file_name(shop, catalog.kind, row.file),
                line: row.line,
                maker: &row.maker,
                part: &row.part,
                lacks: vec![column],
            });
        }
    }
}

/// Warns of pins and bans of a sheet that mean nothing, where nothing is chosen by them.
pub fn doubt_names(sheet: &Sheet, shop: &Shop, notices: &mut Vec<Notice>) {
    let mut found = Vec::new();
    Named::new(sheet, shop, &mut found);
    notices.extend(found.into_iter().map(|n| Notice { severity: Severity::Warning, ..n }));
}

/// The name of a catalog's file.
pub fn file_name(shop: &Shop, kind: Kind, file: u16) -> &str {
    shop.file(kind, file).map_or(kind.file_name(), |f| &f.name)
}

impl<'a> Eligible<'a> {
    /// The problem that the search solves: each part at the price of one piece for all boards.
    pub fn problem(&self) -> Problem<'a> {
        let boards = self.sheet.boards;
        let weights = self.sheet.weights;
        Problem {
            rail: &self.sheet.rail,
            weights: Weights { cost: weights.cost, loss: weights.loss, stress: weights.stress },
            zeners: parts(&self.zeners, boards),
            bias_lines: parts(&self.bias_lines, boards),
            amplifiers: parts(&self.amplifiers, boards),
            divider_lines: parts(&self.divider_lines, boards),
            pots: parts(&self.pots, boards),
            transistors: self
                .transistors
                .par_iter()
                .zip(parts(&self.transistors, boards))
                .map(|(row, part)| PassPart { part, package: row.package.as_deref() })
                .collect(),
            heatsinks: (0..)
                .zip(&self.heatsinks)
                .map(|(place, row)| SinkPart {
                    part: part(place, row, &row.figures.figures, boards),
                    fits: row.figures.fits.iter().map(|p| p.as_str()).collect(),
                })
                .collect(),
            may_go_unmounted: self.sheet.parts.pins[Slot::Heatsink as usize].is_none(),
        }
    }
}

fn part<'a, T, F>(place: u32, row: &'a Row<T>, figures: &'a F, boards: u64) -> Part<'a, F> {
    Part { maker: &row.maker, part: &row.part, price: row.price.at(boards), row: place, figures }
}

fn parts<'a, F: Sync>(rows: &[&'a Row<F>], boards: u64) -> Vec<Part<'a, F>> {
    rows.par_iter()
        .enumerate()
        .map(|(place, row)| part(place as u32, row, &row.figures, boards))
        .collect()
}
