//! Cases made of catalogs and design files, and replacements turned into parts again.

use crate::built::{ALL_KEPT, BoardOf, Built, BuiltSink, Case, Choice, Choices};
use crate::change::Board;
use crate::ground::Ground;
use crate::replace::Replacement;
use catalog::{Catalog, Row, Shop, Sink, leaves_no_resistance};
use circuit::slot::Slot;
use design::keys::bears_on_proof;
use design::parts::{Found, Part as DesignPart, PartPlace, Parts};
use design::proof::{AtRail, Fitted};
use eligible::{Eligible, kind_of};
use select::candidate::Proof;
use select::problem::{Part, PassPart, SinkPart};
use std::collections::{BTreeSet, HashMap};

/// Names of parts that are not to be had: a part of every maker, or `maker/part`.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Names(pub Vec<String>);

impl Names {
    /// Some name means this part.
    pub fn mean(&self, maker: &str, part: &str) -> bool {
        self.0.iter().any(|name| {
            name == part
                || name.strip_prefix(maker).and_then(|rest| rest.strip_prefix('/')) == Some(part)
        })
    }
}

/// A sheet with what may be chosen for it.
pub struct Desk<'a> {
    /// The rows that may be chosen.
    pub eligible: Eligible<'a>,
    /// They at the conditions of the sheet.
    pub ground: Ground<'a>,
    /// Of each slot, by `Slot as usize`, the places of the parts of a name; several makers may share one.
    named: [HashMap<&'a str, Vec<u32>>; Slot::COUNT],
}

impl<'a> Desk<'a> {
    /// Reads every part at the rail of the sheet.
    pub fn new(eligible: Eligible<'a>) -> Self {
        let ground = Ground::new(eligible.problem());
        let named = Slot::ALL.map(|slot| {
            let mut named: HashMap<&'a str, Vec<u32>> = HashMap::new();
            for place in places(&ground, slot) {
                if let Some((_, part)) = ground.name(slot, place) {
                    named.entry(part).or_default().push(place);
                }
            }
            named
        });
        Self { eligible, ground, named }
    }

    /// The places of a slot's list whose part a name means, rising.
    fn meant(&self, slot: Slot, names: &Names) -> BTreeSet<u32> {
        // A part or a maker may hold a slash, so every end of the name may be the part.
        let ends = names.0.iter().flat_map(|name| {
            let rests = name.match_indices('/').filter_map(|(at, _)| name.get(at + 1..));
            std::iter::once(name.as_str()).chain(rests)
        });
        let of_name = ends.filter_map(|part| self.named[slot as usize].get(part)).flatten();
        let means = |place: &u32| {
            let name = self.ground.name(slot, *place);
            name.is_some_and(|(maker, part)| names.mean(maker, part))
        };
        of_name.copied().filter(means).collect()
    }

    /// The slots of a design whose part a name means.
    pub fn gone(parts: &Parts<'_>, names: &Names) -> [bool; Slot::COUNT] {
        let mut gone = [false; Slot::COUNT];
        for place in parts.places() {
            gone[place.slot as usize] = names.mean(place.maker, place.part);
        }
        gone
    }

    /// What is asked where parts of a design are gone; `with`: only parts of these names go in.
    pub fn case<'c>(
        &'c self,
        parts: &'c Parts<'a>,
        gone: &Names,
        with: Option<&Names>,
    ) -> Case<'c, 'a> {
        let gone_slots = Self::gone(parts, gone);
        let built = self.built(parts, &gone_slots);
        let at = parts.places();
        let may_be = |slot: Slot| {
            let here = at.iter().find(|place| place.slot == slot);
            let mut barred = self.meant(slot, gone);
            if let Some(here) = here {
                let it = Some((here.maker, here.part));
                let of_name = self.named[slot as usize].get(here.part).into_iter().flatten();
                barred.extend(of_name.filter(|p| self.ground.name(slot, **p) == it));
            }
            let may = |place: &u32| !barred.contains(place);
            match with.filter(|_| gone_slots[slot as usize]) {
                Some(with) => self.meant(slot, with).into_iter().filter(may).collect(),
                None => places(&self.ground, slot).filter(may).collect::<Vec<u32>>(),
            }
        };
        let name = |slot: Slot| at.iter().find(|p| p.slot == slot).map(|p| (p.maker, p.part));
        let line_gone_twice = gone_slots[Slot::BiasLine as usize]
            && gone_slots[Slot::DividerLine as usize]
            && name(Slot::BiasLine) == name(Slot::DividerLine);
        let board: Box<BoardOf<'c>> = Box::new(move |slot, place| self.board(parts, slot, place));
        Case {
            ground: &self.ground,
            built,
            gone: gone_slots,
            line_gone_twice,
            places: Slot::ALL.map(may_be),
            board,
        }
    }

    fn built(&self, parts: &Parts<'a>, gone: &[bool; Slot::COUNT]) -> Built<'a> {
        let boards = self.eligible.sheet.boards;
        let span_c = self.eligible.sheet.rail.temperature_span_c();
        let stays = |slot: Slot| !gone[slot as usize];
        let line = |slot: Slot, part: &DesignPart<'a, _>| {
            let row: &'a Row<circuit::parts::ResistorLine> = part.row()?;
            let none = leaves_no_resistance(row.figures.tol, row.figures.tempco_per_c, span_c);
            (stays(slot) && !none).then(|| bought(row, &row.figures, boards))
        };
        let pot = parts.pot.as_ref().and_then(DesignPart::row).filter(|row| {
            stays(Slot::Pot)
                && !leaves_no_resistance(row.figures.tol, row.figures.tempco_per_c, span_c)
        });
        Built {
            zener: kept(&parts.zener, stays(Slot::Zener), boards),
            bias_line: line(Slot::BiasLine, &parts.bias_line),
            amplifier: kept(&parts.amplifier, stays(Slot::Amplifier), boards),
            divider_line: line(Slot::DividerLine, &parts.divider_line),
            pot: pot.map(|row| bought(row, &row.figures, boards)),
            pass: parts.pass.row().filter(|_| stays(Slot::Pass)).map(|row| PassPart {
                part: bought(row, &row.figures, boards),
                package: row.package.as_deref(),
            }),
            heatsink: match &parts.heatsink {
                None => BuiltSink::None,
                Some(sink) => match sink.row().filter(|_| stays(Slot::Heatsink)) {
                    Some(row) => BuiltSink::On(SinkPart {
                        part: bought(row, &row.figures.figures, boards),
                        fits: row.figures.fits.iter().map(|p| p.as_str()).collect(),
                    }),
                    None => BuiltSink::CannotStay,
                },
            },
            rz_ohm: parts.rz_ohm,
            upper_ohm: parts.upper_ohm,
            ri_ohm: parts.ri_ohm,
        }
    }

    /// What a part of the slot's list, or none, does to the board of a design.
    pub fn board(&self, parts: &Parts<'_>, slot: Slot, place: Option<u32>) -> Board {
        let Some(place) = place else { return Board::Removed };
        let rows = &self.eligible;
        let at = place as usize;
        let is = match slot {
            Slot::Zener => rows.zeners.get(at).map(footprint),
            Slot::BiasLine => rows.bias_lines.get(at).map(footprint),
            Slot::Amplifier => rows.amplifiers.get(at).map(footprint),
            Slot::DividerLine => rows.divider_lines.get(at).map(footprint),
            Slot::Pot => rows.pots.get(at).map(footprint),
            Slot::Pass => rows.transistors.get(at).map(footprint),
            Slot::Heatsink => rows.heatsinks.get(at).map(footprint),
        };
        let was = match slot {
            Slot::Zener => parts.zener.row().map(|r| footprint(&r)),
            Slot::BiasLine => parts.bias_line.row().map(|r| footprint(&r)),
            Slot::Amplifier => parts.amplifier.row().map(|r| footprint(&r)),
            Slot::DividerLine => parts.divider_line.row().map(|r| footprint(&r)),
            Slot::Pot => parts.pot.as_ref().and_then(DesignPart::row).map(|r| footprint(&r)),
            Slot::Pass => parts.pass.row().map(|r| footprint(&r)),
            Slot::Heatsink => match &parts.heatsink {
                Some(sink) => sink.row().map(|r| footprint(&r)),
                None => return Board::Added,
            },
        };
        let has_pinout = !matches!(slot, Slot::BiasLine | Slot::DividerLine | Slot::Heatsink);
        Board::between(was.unwrap_or_default(), is.unwrap_or_default(), has_pinout)
    }

    /// The parts and values of a design with a replacement in it.
    pub fn mended(&self, parts: &Parts<'a>, with: &Replacement) -> Parts<'a> {
        self.fitted_with(parts, &with.choices, [with.rz_ohm, with.upper_ohm, with.ri_ohm])
    }

    fn fitted_with(
        &self,
        parts: &Parts<'a>,
        choices: &Choices,
        [rz_ohm, upper_ohm, ri_ohm]: [f64; 3],
    ) -> Parts<'a> {
        let shop = self.eligible.shop;
        let rows = &self.eligible;
        let choice = |slot: Slot| choices[slot as usize];
        Parts {
            zener: put(parts.zener, choice(Slot::Zener), &rows.zeners, shop, &shop.zeners),
            bias_line: put(
                parts.bias_line,
                choice(Slot::BiasLine),
                &rows.bias_lines,
                shop,
                &shop.resistors,
            ),
            amplifier: put(
                parts.amplifier,
                choice(Slot::Amplifier),
                &rows.amplifiers,
                shop,
                &shop.opamps,
            ),
            divider_line: put(
                parts.divider_line,
                choice(Slot::DividerLine),
                &rows.divider_lines,
                shop,
                &shop.resistors,
            ),
            pot: parts.pot.map(|pot| put(pot, choice(Slot::Pot), &rows.pots, shop, &shop.pots)),
            pass: put(parts.pass, choice(Slot::Pass), &rows.transistors, shop, &shop.transistors),
            heatsink: match choice(Slot::Heatsink) {
                Choice::Kept => parts.heatsink,
                Choice::Without => None,
                Choice::Row(place) => rows.heatsinks.get(place as usize).map(|row| {
                    let (catalog, found) = (&shop.heatsinks, Found::Row(*row));
                    DesignPart::<Sink> {
                        found,
                        catalog,
                        shop,
                        inline: None,
                        is_named_in_slots: true,
                    }
                }),
            },
            rz_ohm,
            upper_ohm,
            ri_ohm,
        }
    }

    /// The parts of a design with the first part that may go in for each that is gone, and nothing else
    /// changed. None where nothing may go in.
    pub fn exchanged(&self, parts: &Parts<'a>, case: &Case<'_, '_>) -> Option<Parts<'a>> {
        let mut choices = ALL_KEPT;
        for slot in Slot::ALL.into_iter().filter(|slot| case.is_gone(*slot)) {
            choices[slot as usize] = Choice::Row(*case.places(slot).first()?);
        }
        Some(self.fitted_with(parts, &choices, [parts.rz_ohm, parts.upper_ohm, parts.ri_ohm]))
    }

    /// The row behind a choice: stock, lead time, life-cycle word, price.
    pub fn offer(&self, slot: Slot, choice: Choice) -> Option<Offer> {
        let Choice::Row(place) = choice else { return None };
        let rows = &self.eligible;
        let (at, boards) = (place as usize, rows.sheet.boards);
        match slot {
            Slot::Zener => rows.zeners.get(at).map(|r| Offer::of(r, boards)),
            Slot::BiasLine => rows.bias_lines.get(at).map(|r| Offer::of(r, boards)),
            Slot::Amplifier => rows.amplifiers.get(at).map(|r| Offer::of(r, boards)),
            Slot::DividerLine => rows.divider_lines.get(at).map(|r| Offer::of(r, boards)),
            Slot::Pot => rows.pots.get(at).map(|r| Offer::of(r, boards)),
            Slot::Pass => rows.transistors.get(at).map(|r| Offer::of(r, boards)),
            Slot::Heatsink => rows.heatsinks.get(at).map(|r| Offer::of(r, boards)),
        }
    }
}

/// The places of a slot's list.
fn places(ground: &Ground<'_>, slot: Slot) -> std::ops::Range<u32> {
    0..u32::try_from(ground.rows(slot)).unwrap_or(u32::MAX)
}

/// Package and pinout of a row; None: blank.
type Footprint<'a> = (Option<&'a str>, Option<&'a str>);

fn footprint<'r, T>(row: &&'r Row<T>) -> Footprint<'r> {
    (row.package.as_deref(), row.pinout.as_deref())
}

/// A row as a part that is bought for so many boards.
fn bought<'a, T, F>(row: &'a Row<T>, figures: &'a F, boards: u64) -> Part<'a, F> {
    Part { maker: &row.maker, part: &row.part, price: row.price.at(boards), row: 0, figures }
}

/// The part of a slot where it stays and its figures are known.
fn kept<'a, F>(part: &DesignPart<'a, F>, stays: bool, boards: u64) -> Option<Part<'a, F>> {
    part.row().filter(|_| stays).map(|row| bought(row, &row.figures, boards))
}

fn put<'a, T>(
    part: DesignPart<'a, T>,
    choice: Choice,
    rows: &[&'a Row<T>],
    shop: &'a Shop,
    catalog: &'a Catalog<T>,
) -> DesignPart<'a, T> {
    match choice {
        Choice::Row(place) => match rows.get(place as usize) {
            Some(row) => DesignPart {
                found: Found::Row(row),
                catalog,
                shop,
                inline: None,
                is_named_in_slots: true,
            },
            None => part,
        },
        Choice::Kept | Choice::Without => part,
    }
}

/// What a catalog says of a part beside its figures.
#[derive(Debug, Clone, PartialEq)]
pub struct Offer {
    /// Its maker; may be empty.
    pub maker: String,
    /// Its name.
    pub part: String,
    /// Price of one piece for all boards.
    pub price: f64,
    /// Pieces in stock; None: blank.
    pub stock: Option<f64>,
    /// Weeks until an order arrives; None: blank.
    pub lead_weeks: Option<f64>,
    /// The life-cycle word.
    pub status: catalog::Status,
}

impl Offer {
    /// A row at the price for so many boards.
    pub fn of<T>(row: &Row<T>, boards: u64) -> Self {
        Self {
            maker: row.maker.to_string(),
            part: row.part.to_string(),
            price: row.price.at(boards),
            stock: row.stock,
            lead_weeks: row.lead_weeks,
            status: row.status,
        }
    }
}

/// The resistors of a design that its lines do not stock, each with its key, Ω. A design may hold odd
/// values; a line that goes in for another one has only its own.
pub fn not_stocked(parts: &Parts<'_>) -> Vec<(&'static str, f64)> {
    use design::keys::Resistor;
    let upper = if parts.pot.is_some() { Resistor::Rx } else { Resistor::Rf };
    [
        (Resistor::Rz, &parts.bias_line, parts.rz_ohm),
        (upper, &parts.divider_line, parts.upper_ohm),
        (Resistor::Ri, &parts.divider_line, parts.ri_ohm),
    ]
    .into_iter()
    .filter(|(_, line, ohm)| {
        let stocked = line.row().is_some_and(|row| {
            row.figures.values_ohm.iter().any(|value| crate::built::same_ohm(*value, *ohm))
        });
        *ohm != 0.0 && !stocked
    })
    .map(|(resistor, _, ohm)| (resistor.key(), ohm))
    .collect()
}

/// Makes every check of a design's parts and values; None where figures are not known.
pub fn prove(parts: &Parts<'_>, rail: &circuit::rail::Rail) -> Option<Proof> {
    let fitted = Fitted::new(parts, rail)?;
    Some(AtRail::new(&fitted, parts, rail)?.prove())
}

/// What one board costs with these parts; None where a part is described by the design itself, which
/// gives no price.
pub fn cost(parts: &Parts<'_>, boards: u64) -> Option<f64> {
    fn price<T>(part: &DesignPart<'_, T>, boards: u64) -> Option<f64> {
        part.row().filter(|_| part.inline.is_none()).map(|row| row.price.at(boards))
    }
    let piece = price(&parts.divider_line, boards)?;
    let upper = if parts.upper_ohm == 0.0 { 0.0 } else { piece };
    let pot = match &parts.pot {
        Some(pot) => price(pot, boards)?,
        None => 0.0,
    };
    let sink = match &parts.heatsink {
        Some(sink) => price(sink, boards)?,
        None => 0.0,
    };
    let rest = price(&parts.zener, boards)?
        + price(&parts.bias_line, boards)?
        + price(&parts.amplifier, boards)?
        + price(&parts.pass, boards)?;
    Some(rest + piece + upper + pot + sink)
}

/// A cell that differs between two parts; None: blank.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Difference {
    /// The column.
    pub column: String,
    /// The cell of the part before.
    pub was: Option<String>,
    /// The cell of the part that goes in.
    pub is: Option<String>,
}

/// The cells that checks rest on in which two parts differ.
pub fn differences(was: &PartPlace<'_>, is: &PartPlace<'_>) -> Vec<Difference> {
    let kind = kind_of(is.slot);
    let (before, after) = (was.cells(), is.cells());
    let text = |cells: &[(String, String)], column: &str| {
        let cell = cells.iter().find(|(name, _)| name == column);
        cell.map(|(_, text)| text.clone()).filter(|text| !text.is_empty())
    };
    let columns = kind.columns().iter().filter(|column| bears_on_proof(kind, column.name));
    columns
        .filter_map(|column| {
            let (was, is) = (text(&before, column.name), text(&after, column.name));
            (was != is).then(|| Difference { column: column.name.to_owned(), was, is })
        })
        .collect()
}

/// The slots in which a replacement puts another part, or none.
pub fn changed_slots(choices: &Choices) -> impl Iterator<Item = Slot> + '_ {
    Slot::ALL.into_iter().filter(|slot| choices[*slot as usize] != Choice::Kept)
}
