//! Running the search for another rail.

use circuit::rail::Rail;
use circuit::resistor::Resistance;
use circuit::slot::Slot;
use eligible::eligible;
use select::SearchError;
use select::candidate::Candidate;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, shortlist};
use sheet::Sheet;

/// What may be chosen for a rail; another rail may let other rows in.
pub trait Market {
    /// Gives the problem of this rail to `look`.
    fn with_problem<R>(&self, rail: &Rail, look: impl FnOnce(&Problem<'_>) -> R) -> R;
}

/// The rows of a shop, under the rules of a sheet.
///
/// Of several combinations that would serve as an example the first is taken, in the order of rows: where
/// these are sorted by name ([`catalog::Shop::sort_by_name`]), what is told does not depend on the order of
/// the files' rows.
#[derive(Debug, Clone, Copy)]
pub struct ShopMarket<'a> {
    /// The sheet.
    pub sheet: &'a Sheet,
    /// The catalogs.
    pub shop: &'a catalog::Shop,
    /// Only this part in this slot: slot, maker and part.
    pub only: Option<(Slot, &'a str, &'a str)>,
}

impl Market for ShopMarket<'_> {
    fn with_problem<R>(&self, rail: &Rail, look: impl FnOnce(&Problem<'_>) -> R) -> R {
        let sheet = Sheet { rail: rail.clone(), ..self.sheet.clone() };
        // Faults of names were told when the sheet was read; lines without a resistance stay out.
        let rows = eligible(&sheet, self.shop, true, &mut Vec::new());
        let mut problem = rows.problem();
        if let Some((slot, maker, part)) = self.only {
            keep_only(&mut problem, slot, maker, part);
        }
        look(&problem)
    }
}

/// Leaves one part in a slot. A heatsink that is pinned rules out a transistor without one.
pub fn keep_only(problem: &mut Problem<'_>, slot: Slot, maker: &str, part: &str) {
    macro_rules! keep {
        ($list:ident) => {
            problem.$list.retain(|p| p.maker == maker && p.part == part)
        };
    }
    match slot {
        Slot::Zener => keep!(zeners),
        Slot::BiasLine => keep!(bias_lines),
        Slot::Amplifier => keep!(amplifiers),
        Slot::DividerLine => keep!(divider_lines),
        Slot::Pot => keep!(pots),
        Slot::Pass => problem.transistors.retain(|t| t.part.maker == maker && t.part.part == part),
        Slot::Heatsink => {
            problem.heatsinks.retain(|s| s.part.maker == maker && s.part.part == part);
            problem.may_go_unmounted = false;
        }
    }
}

/// A part by its names.
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Name {
    /// Its maker; may be empty.
    pub maker: String,
    /// Its name.
    pub part: String,
}

/// A candidate by the names of its parts, apart from the lists that it was found in.
#[derive(Debug, Clone, PartialEq)]
pub struct Admitted {
    /// By `Slot as usize`; None for no part.
    pub parts: [Option<Name>; Slot::COUNT],
    /// RZ.
    pub rz: Resistance,
    /// RF or RX, Ω; 0 for a link.
    pub upper_ohm: f64,
    /// RI, Ω.
    pub ri_ohm: f64,
    /// Cost of one board.
    pub cost: f64,
    /// 1/η − 1.
    pub loss: f64,
    /// Greatest utilisation of the damage checks.
    pub stress: f64,
    /// cost^wc · loss^wl · stress^ws.
    pub score: f64,
}

impl Admitted {
    /// A candidate of a problem by name.
    pub fn of(candidate: &Candidate, problem: &Problem<'_>) -> Self {
        Self {
            parts: Slot::ALL.map(|slot| name_at(problem, slot, candidate.place(slot)?)),
            rz: candidate.rz,
            upper_ohm: candidate.divider.upper.ohm,
            ri_ohm: candidate.divider.ri.ohm,
            cost: candidate.cost,
            loss: candidate.loss,
            stress: candidate.stress,
            score: candidate.score,
        }
    }
}

/// The names of a part in a problem's list for a slot.
pub fn name_at(problem: &Problem<'_>, slot: Slot, place: usize) -> Option<Name> {
    let (maker, part) = match slot {
        Slot::Zener => problem.zeners.get(place).map(|p| (p.maker, p.part))?,
        Slot::BiasLine => problem.bias_lines.get(place).map(|p| (p.maker, p.part))?,
        Slot::Amplifier => problem.amplifiers.get(place).map(|p| (p.maker, p.part))?,
        Slot::DividerLine => problem.divider_lines.get(place).map(|p| (p.maker, p.part))?,
        Slot::Pot => problem.pots.get(place).map(|p| (p.maker, p.part))?,
        Slot::Pass => problem.transistors.get(place).map(|t| (t.part.maker, t.part.part))?,
        Slot::Heatsink => problem.heatsinks.get(place).map(|s| (s.part.maker, s.part.part))?,
    };
    Some(Name { maker: maker.to_owned(), part: part.to_owned() })
}

/// The best candidate for a rail; None where nothing qualifies.
///
/// # Errors
/// What the search gives up with.
pub fn best(market: &impl Market, rail: &Rail) -> Result<Option<Admitted>, SearchError> {
    market.with_problem(rail, |problem| {
        let list = shortlist(problem, 1, &NO_SPREAD)?;
        Ok(list.first().map(|candidate| Admitted::of(candidate, problem)))
    })
}
