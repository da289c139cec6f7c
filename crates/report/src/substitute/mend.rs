//! One way to mend a design: what changes, and what comes of it.

use super::Subject;
use super::fit::Fit;
use crate::figure::Figure;
use ::substitute::built::Choice;
use ::substitute::change::{Board, Extent};
use ::substitute::desk::{Desk, Difference, Names, Offer, changed_slots, differences};
use ::substitute::replace::Replacement;
use catalog::Status;
use circuit::slot::Slot;
use design::keys::Resistor;
use design::parts::{PartPlace, Parts};
use serde::Serialize;

/// One way to mend a design.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Mend {
    /// Its place in the list, from 1.
    pub rank: usize,
    /// What changes beside the part that is gone.
    pub level: Level,
    /// How much changes.
    pub extent: ExtentCounts,
    /// Parts that change, those that are gone first.
    pub parts: Vec<PartChange>,
    /// Resistors that change.
    pub values: Vec<ValueChange>,
    /// cost^wc · loss^wl · stress^ws.
    pub score: Figure,
    /// What comes of it.
    pub after: Fit,
}

/// What changes beside the part that is gone.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
pub enum Level {
    /// Nothing.
    Nothing,
    /// Resistor values.
    Values,
    /// Further parts, and values perhaps.
    Parts,
}

/// How much changes, in the order in which it counts.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
pub struct ExtentCounts {
    /// Further parts.
    pub further_parts: u8,
    /// Changed parts not known to have the package of the part before.
    pub other_packages: u8,
    /// Changed parts of the same package not known to have the same pinout.
    pub other_pinouts: u8,
    /// Resistors of another value.
    pub values: u8,
}

impl From<Extent> for ExtentCounts {
    fn from(extent: Extent) -> Self {
        let Extent { further_parts, other_packages, other_pinouts, values } = extent;
        Self { further_parts, other_packages, other_pinouts, values }
    }
}

/// A part that changes.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct PartChange {
    /// The slot.
    pub slot: &'static str,
    /// The part before was gone; else this is a further change.
    pub was_gone: bool,
    /// The part before, `maker/part`; None: there was none.
    pub was: Option<String>,
    /// The part that goes in; None: none does.
    pub is: Option<String>,
    /// The file and line that describe it.
    pub file: Option<String>,
    /// The line.
    pub line: Option<u32>,
    /// What it does to the board.
    pub board: &'static str,
    /// Price of one piece for all boards.
    pub price: Option<Figure>,
    /// Pieces in stock; None: blank.
    pub stock: Option<Figure>,
    /// Weeks until an order arrives; None: blank.
    pub lead_weeks: Option<Figure>,
    /// The life-cycle word.
    pub status: Option<&'static str>,
    /// The same trouble again: see [`trouble`].
    pub trouble: Vec<String>,
    /// Another maker's part of the same number: the cells that checks rest on in which the two differ.
    pub same_number_differs: Option<Vec<DifferenceLine>>,
    /// What it does to the board, as a value.
    #[serde(skip)]
    pub on_board: Board,
}

/// A cell that differs; None: blank.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct DifferenceLine {
    /// The column.
    pub column: String,
    /// The cell of the part before.
    pub was: Option<String>,
    /// The cell of the part that goes in.
    pub is: Option<String>,
}

/// A resistor that changes.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct ValueChange {
    /// Its key in a design file.
    pub key: &'static str,
    /// Ω before; 0 for a link.
    pub was: Figure,
    /// Ω now.
    pub is: Figure,
}

impl Mend {
    /// A replacement, told for a design; `gone` are the names of what is gone. None for a replacement
    /// of which not every figure is known, which none is that a search has found.
    pub fn new(
        rank: usize,
        replacement: &Replacement,
        subject: &Subject<'_, '_>,
        gone: &Names,
    ) -> Option<Self> {
        let desk = subject.desk;
        let sheet = desk.eligible.sheet;
        let mended = desk.mended(subject.parts, replacement);
        let places = (subject.parts.places(), mended.places());
        let mut parts: Vec<PartChange> = changed_slots(&replacement.choices)
            .map(|slot| {
                let choice = replacement.choices[slot as usize];
                part_change(slot, choice, subject, &places, gone)
            })
            .collect();
        parts.sort_by_key(|part| !part.was_gone);
        let values = changed_values(subject.parts, &mended, sheet.rail.is_adjustable());
        let level = match replacement.extent {
            Extent { further_parts: 1.., .. } => Level::Parts,
            Extent { values: 1.., .. } => Level::Values,
            _ => Level::Nothing,
        };
        Some(Self {
            rank,
            level,
            extent: replacement.extent.into(),
            parts,
            values,
            score: Figure(replacement.score),
            after: Fit::of(&mended, sheet)?,
        })
    }

    /// The parts that go in for what is gone.
    pub fn replacing(&self) -> impl Iterator<Item = &PartChange> {
        self.parts.iter().filter(|part| part.was_gone)
    }

    /// The parts that change beside them.
    pub fn further(&self) -> impl Iterator<Item = &PartChange> {
        self.parts.iter().filter(|part| !part.was_gone)
    }
}

fn part_change(
    slot: Slot,
    choice: Choice,
    subject: &Subject<'_, '_>,
    (before, after): &(Vec<PartPlace<'_>>, Vec<PartPlace<'_>>),
    gone: &Names,
) -> PartChange {
    let desk: &Desk<'_> = subject.desk;
    let is_here = |place: &&PartPlace<'_>| place.slot == slot;
    let (was, is) = (before.iter().find(is_here), after.iter().find(is_here));
    let was_gone = was.is_some_and(|p| gone.mean(p.maker, p.part));
    let offer = desk.offer(slot, choice);
    let board = match choice {
        Choice::Row(place) => desk.board(subject.parts, slot, Some(place)),
        Choice::Kept | Choice::Without => desk.board(subject.parts, slot, None),
    };
    let same_number = match (was, is) {
        (Some(was), Some(is)) if was.part == is.part => Some(differences(was, is)),
        _ => None,
    };
    let line = |d: Difference| DifferenceLine { column: d.column, was: d.was, is: d.is };
    PartChange {
        slot: slot.name(),
        was_gone,
        was: was.map(|p| p.full_name()),
        is: is.map(|p| p.full_name()),
        file: is.map(|p| p.file_name().to_owned()),
        line: is.map(|p| p.line),
        board: board.name(),
        price: offer.as_ref().map(|o| Figure(o.price)),
        stock: offer.as_ref().and_then(|o| o.stock).map(Figure),
        lead_weeks: offer.as_ref().and_then(|o| o.lead_weeks).map(Figure),
        status: offer.as_ref().map(|o| o.status.name()),
        trouble: offer.map(|o| trouble(slot, &o, desk.eligible.sheet.boards)).unwrap_or_default(),
        same_number_differs: same_number.map(|list| list.into_iter().map(line).collect()),
        on_board: board,
    }
}

/// What is amiss with a part that goes in as with the one that is gone: too few pieces in stock, or a
/// life-cycle word that says that it is going. A blank stock is told as such. Lines of resistors are
/// not counted in pieces.
pub fn trouble(slot: Slot, offer: &Offer, boards: u64) -> Vec<String> {
    let is_line = matches!(slot, Slot::BiasLine | Slot::DividerLine);
    let mut list = Vec::new();
    match offer.stock {
        _ if is_line => {}
        Some(pieces) if pieces < boards as f64 => {
            list.push(format!("{pieces} in stock, {boards} needed"));
        }
        Some(_) => {}
        None => list.push("stock is blank".to_owned()),
    }
    match offer.status {
        Status::NotRecommended | Status::LastBuy | Status::Obsolete => {
            list.push(offer.status.to_string());
        }
        Status::Active | Status::Unknown => {}
    }
    list
}

/// The resistors whose value differs.
fn changed_values(was: &Parts<'_>, is: &Parts<'_>, is_adjustable: bool) -> Vec<ValueChange> {
    let upper = if is_adjustable { Resistor::Rx } else { Resistor::Rf };
    [
        (Resistor::Rz, was.rz_ohm, is.rz_ohm),
        (upper, was.upper_ohm, is.upper_ohm),
        (Resistor::Ri, was.ri_ohm, is.ri_ohm),
    ]
    .into_iter()
    .filter(|(_, was, is)| quantity::digits::compare(*was, *is).is_ne())
    .map(|(resistor, was, is)| ValueChange {
        key: resistor.key(),
        was: Figure(was),
        is: Figure(is),
    })
    .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn offer(stock: Option<f64>, status: Status) -> Offer {
        Offer {
            maker: "M".to_owned(),
            part: "P".to_owned(),
            price: 1.0,
            stock,
            lead_weeks: None,
            status,
        }
    }

    #[test]
    fn the_same_trouble_again_is_told() {
        let told = |offer: &Offer| trouble(Slot::Pass, offer, 25).join("; ");
        assert_eq!(told(&offer(Some(24.0), Status::Active)), "24 in stock, 25 needed");
        assert_eq!(told(&offer(Some(25.0), Status::LastBuy)), "last-buy");
        assert_eq!(told(&offer(None, Status::Unknown)), "stock is blank");
        assert_eq!(told(&offer(Some(25.0), Status::Active)), "");
        assert_eq!(trouble(Slot::BiasLine, &offer(None, Status::Active), 25), [""; 0]);
    }
}
