//! What the names of a design mean: catalog rows, or the part's own cells where no catalog holds it.

use crate::file::{Design, Given, Inline};
use crate::keys::Resistor;
use crate::proof::Ohms;
use crate::text::Mark;
use crate::write::full_name;
use catalog::{Catalog, Kind, LeftOut, Row, Shop, Sink, Unproven};
use circuit::parts::{Amplifier, Pot, ResistorLine, Transistor, Zener};
use circuit::rail::Rail;
use circuit::slot::Slot;
use eligible::kind_of;
use notice::Notice;

const UNKNOWN_PART: &str = "part-unknown";
const AMBIGUOUS_PART: &str = "part-ambiguous";
const MISSING_PART: &str = "part-missing";
const WITHOUT_MEANING: &str = "key-without-meaning";
const MISSING_VALUE: &str = "missing-key";

/// At most so many makers of an ambiguous part are named.
const MOST_NAMED: usize = 6;

/// What a name stands for in a catalog.
#[derive(Debug)]
pub enum Found<'a, T> {
    /// A row that can be used.
    Row(&'a Row<T>),
    /// A row of which needed cells are blank.
    Unproven(&'a Unproven),
    /// A transistor that is not npn.
    LeftOut(&'a LeftOut),
}

impl<T> Clone for Found<'_, T> {
    fn clone(&self) -> Self {
        *self
    }
}

impl<T> Copy for Found<'_, T> {}

impl<'a, T> Found<'a, T> {
    /// Maker and name.
    fn names(&self) -> (&'a str, &'a str) {
        match self {
            Found::Row(row) => (&row.maker, &row.part),
            Found::Unproven(row) => (&row.maker, &row.part),
            Found::LeftOut(row) => (&row.maker, &row.part),
        }
    }
}

/// The part of a slot.
#[derive(Debug)]
pub struct Part<'a, T> {
    /// What was found.
    pub found: Found<'a, T>,
    /// Where it was found.
    pub catalog: &'a Catalog<T>,
    /// The shop that holds the catalog: the user's, or that of the design's own cells.
    pub shop: &'a Shop,
    /// The design's own cells, where they describe the part.
    pub inline: Option<&'a Inline>,
    /// The design names it in its slots; else it goes by the name of the slot.
    pub is_named_in_slots: bool,
}

impl<T> Clone for Part<'_, T> {
    fn clone(&self) -> Self {
        *self
    }
}

impl<T> Copy for Part<'_, T> {}

/// Where a part stands and what it is called, whatever its kind.
#[derive(Debug, Clone, Copy)]
pub struct PartPlace<'a> {
    /// The slot.
    pub slot: Slot,
    /// The part's maker; may be empty.
    pub maker: &'a str,
    /// The part's name.
    pub part: &'a str,
    /// The design's own cells, where they describe the part; None: a catalog does.
    pub inline: Option<&'a Inline>,
    /// The shop that holds the row.
    pub shop: &'a Shop,
    file: u16,
    /// The line of the row in its catalog.
    pub line: u32,
}

impl<'a> PartPlace<'a> {
    /// The file that describes the part.
    pub fn file_name(&self) -> &'a str {
        eligible::file_name(self.shop, kind_of(self.slot), self.file)
    }

    /// The cells of the row with the names of their columns, as they are written.
    pub fn cells(&self) -> Vec<(String, String)> {
        match kind_of(self.slot) {
            Kind::Zeners => self.shop.zeners.cells(self.file, self.line),
            Kind::Opamps => self.shop.opamps.cells(self.file, self.line),
            Kind::Transistors => self.shop.transistors.cells(self.file, self.line),
            Kind::Resistors => self.shop.resistors.cells(self.file, self.line),
            Kind::Pots => self.shop.pots.cells(self.file, self.line),
            Kind::Heatsinks => self.shop.heatsinks.cells(self.file, self.line),
        }
    }

    /// `maker/part`, or the part alone where no maker is named.
    pub fn full_name(&self) -> String {
        full_name(self.maker, self.part)
    }
}

impl<'a, T> Part<'a, T> {
    /// The row, where it can be used.
    pub fn row(&self) -> Option<&'a Row<T>> {
        match self.found {
            Found::Row(row) => Some(row),
            _ => None,
        }
    }

    /// The columns that are blank though every use of the part needs them.
    pub fn lacks(&self) -> &'a [&'static str] {
        match self.found {
            Found::Unproven(part) => &part.lacks,
            _ => &[],
        }
    }

    /// A name of a sheet or shop means this part: looked up as a part of every maker in the catalog
    /// that holds it, else as `maker/part`.
    pub fn is_named(&self, name: &str) -> bool {
        let own = self.found.names();
        look_up(self.catalog, name).iter().any(|found| found.names() == own)
    }

    fn place(&self, slot: Slot) -> PartPlace<'a> {
        let (maker, part) = self.found.names();
        let (file, line) = match self.found {
            Found::Row(row) => (row.file, row.line),
            Found::Unproven(row) => (row.file, row.line),
            Found::LeftOut(row) => (row.file, row.line),
        };
        PartPlace { slot, maker, part, inline: self.inline, shop: self.shop, file, line }
    }
}

/// The parts of a design, and its resistors as fitted.
#[derive(Debug, Clone, Copy)]
pub struct Parts<'a> {
    /// The zener.
    pub zener: Part<'a, Zener>,
    /// The line that RZ comes from.
    pub bias_line: Part<'a, ResistorLine>,
    /// The amplifier.
    pub amplifier: Part<'a, Amplifier>,
    /// The line that RF, RI and RX come from.
    pub divider_line: Part<'a, ResistorLine>,
    /// The pot of an adjustable output.
    pub pot: Option<Part<'a, Pot>>,
    /// The pass transistor.
    pub pass: Part<'a, Transistor>,
    /// The heatsink; None: unmounted, or the sheet's own sink.
    pub heatsink: Option<Part<'a, Sink>>,
    /// RZ, Ω.
    pub rz_ohm: f64,
    /// RF of a fixed output, RX of an adjustable one, Ω; 0 for a link.
    pub upper_ohm: f64,
    /// RI, Ω.
    pub ri_ohm: f64,
}

impl<'a> Parts<'a> {
    /// Looks up every name of a design for a rail.
    ///
    /// # Errors
    /// None where a name is unknown or ambiguous, a slot or value that the rail needs is not given, or
    /// one is given that it has no place for. All faults go to `notices`.
    pub fn find(
        design: &'a Design,
        shop: &'a Shop,
        rail: &Rail,
        notices: &mut Vec<Notice>,
    ) -> Option<Self> {
        let find = Find { design, notices };
        find.parts(shop, rail)
    }

    /// The resistors as fitted.
    pub fn ohms(&self) -> Ohms {
        Ohms { rz: self.rz_ohm, upper: self.upper_ohm, ri: self.ri_ohm }
    }

    /// Every part, in the order of slots.
    pub fn places(&self) -> Vec<PartPlace<'a>> {
        let mut places = vec![
            self.zener.place(Slot::Zener),
            self.bias_line.place(Slot::BiasLine),
            self.amplifier.place(Slot::Amplifier),
            self.divider_line.place(Slot::DividerLine),
        ];
        places.extend(self.pot.map(|p| p.place(Slot::Pot)));
        places.push(self.pass.place(Slot::Pass));
        places.extend(self.heatsink.map(|p| p.place(Slot::Heatsink)));
        places
    }
}

struct Find<'a, 'n> {
    design: &'a Design,
    notices: &'n mut Vec<Notice>,
}

impl<'a> Find<'a, '_> {
    fn parts(mut self, shop: &'a Shop, rail: &Rail) -> Option<Parts<'a>> {
        let adjustable = rail.is_adjustable();
        let zener = self.needed(Slot::Zener, shop, |s| &s.zeners);
        let bias_line = self.needed(Slot::BiasLine, shop, |s| &s.resistors);
        let amplifier = self.needed(Slot::Amplifier, shop, |s| &s.opamps);
        let divider_line = self.needed(Slot::DividerLine, shop, |s| &s.resistors);
        let pass = self.needed(Slot::Pass, shop, |s| &s.transistors);
        let pot = if adjustable {
            Some(self.needed(Slot::Pot, shop, |s| &s.pots))
        } else {
            self.refuse_slot(Slot::Pot, "with a fixed output");
            None
        };
        let heatsink = if rail.chooses_heatsink() {
            let given = self.is_given(Slot::Heatsink);
            given.then(|| self.needed(Slot::Heatsink, shop, |s| &s.heatsinks))
        } else {
            self.refuse_slot(Slot::Heatsink, "where the sheet gives `thermal.sink_c_per_w`");
            None
        };
        let (upper, other) = match adjustable {
            true => (Resistor::Rx, Resistor::Rf),
            false => (Resistor::Rf, Resistor::Rx),
        };
        let form = if adjustable { "with an adjustable output" } else { "with a fixed output" };
        self.refuse_value(other, form);
        let upper = self.value(upper);
        let rz = self.value(Resistor::Rz);
        let ri = self.value(Resistor::Ri);
        Some(Parts {
            zener: zener?,
            bias_line: bias_line?,
            amplifier: amplifier?,
            divider_line: divider_line?,
            pot: match pot {
                Some(pot) => Some(pot?),
                None => None,
            },
            pass: pass?,
            heatsink: match heatsink {
                Some(heatsink) => Some(heatsink?),
                None => None,
            },
            rz_ohm: rz?,
            upper_ohm: upper?,
            ri_ohm: ri?,
        })
        .filter(|_| !notice::has_errors(self.notices))
    }

    fn is_given(&self, slot: Slot) -> bool {
        let entry = self.design.slot(slot);
        entry.part.is_some() || entry.inline.is_some()
    }

    /// The part of a slot that this rail needs.
    fn needed<T>(
        &mut self,
        slot: Slot,
        shop: &'a Shop,
        catalog: impl Fn(&'a Shop) -> &'a Catalog<T>,
    ) -> Option<Part<'a, T>> {
        let entry = self.design.slot(slot);
        let own = || {
            let inline = entry.inline.as_ref()?;
            let catalog = catalog(&inline.shop);
            let found = holdings(catalog).next()?;
            let is_named_in_slots = entry.part.is_some();
            Some(Part {
                found,
                catalog,
                shop: &inline.shop,
                inline: Some(inline),
                is_named_in_slots,
            })
        };
        let Some(name) = &entry.part else {
            let own = own();
            if own.is_none() {
                let message = format!("no part is named for the slot `{}`", slot.name());
                self.notices.push(self.whole().error(MISSING_PART, message).expected(format!(
                    "`{} = \"maker/part\"` in [slots], or the part's own figures in [inline.{}]",
                    slot.name(),
                    slot.name()
                )));
            }
            return own;
        };
        let catalog = catalog(shop);
        match look_up(catalog, &name.value).as_slice() {
            [found] => {
                Some(Part { found: *found, catalog, shop, inline: None, is_named_in_slots: true })
            }
            [] => {
                let own = own();
                if own.is_none() {
                    self.notices.push(unknown(catalog, name, slot));
                }
                own
            }
            several => {
                self.notices.push(ambiguous(several.iter().map(Found::names), name));
                None
            }
        }
    }

    fn value(&mut self, resistor: Resistor) -> Option<f64> {
        let given = self.design.value(resistor);
        if given.is_none() {
            let message = format!("`values.{}` is missing", resistor.key());
            let expected = match resistor.may_be_link() {
                true => "the resistance as fitted, in Ω; 0 for a link",
                false => "the resistance as fitted, in Ω",
            };
            self.notices.push(self.whole().error(MISSING_VALUE, message).expected(expected));
        }
        given.map(|given| given.value)
    }

    fn refuse_slot(&mut self, slot: Slot, why: &str) {
        let entry = self.design.slot(slot);
        let part = entry.part.as_ref().map(|part| ("slots", &part.mark));
        let inline = entry.inline.as_ref().map(|inline| ("inline", &inline.mark));
        if let Some((section, mark)) = part.or(inline) {
            self.without_meaning(&format!("{section}.{}", slot.name()), why, mark);
        }
    }

    fn refuse_value(&mut self, resistor: Resistor, why: &str) {
        if let Some(given) = self.design.value(resistor) {
            self.without_meaning(&format!("values.{}", resistor.key()), why, &given.mark);
        }
    }

    fn without_meaning(&mut self, label: &str, why: &str, mark: &Mark) {
        let message = format!("`{label}` has no meaning {why}");
        self.notices.push(mark.error(WITHOUT_MEANING, message).mend("remove it"));
    }

    fn whole(&self) -> Mark {
        Mark { place: notice::Place::file(&self.design.file), excerpt: None }
    }
}

/// Every row of a catalog, also those that can't be used.
fn holdings<T>(catalog: &Catalog<T>) -> impl Iterator<Item = Found<'_, T>> {
    let rows = catalog.rows.iter().map(Found::Row);
    let unproven = catalog.unproven.iter().map(Found::Unproven);
    rows.chain(unproven).chain(catalog.left_out.iter().map(Found::LeftOut))
}

/// What a name may mean: a part of any maker, else `maker/part`.
///
/// A maker's or a part's name may hold a stroke of its own, so whole names are compared.
fn look_up<'a, T>(catalog: &'a Catalog<T>, name: &str) -> Vec<Found<'a, T>> {
    let as_part: Vec<_> = holdings(catalog).filter(|found| found.names().1 == name).collect();
    if !as_part.is_empty() {
        return as_part;
    }
    let is_whole_name = |(maker, part): (&str, &str)| {
        name.strip_prefix(maker).and_then(|rest| rest.strip_prefix('/')) == Some(part)
    };
    holdings(catalog).filter(|found| is_whole_name(found.names())).collect()
}

fn unknown<T>(catalog: &Catalog<T>, name: &Given<String>, slot: Slot) -> Notice {
    let file = catalog.kind.file_name();
    let message = format!("{file} holds no such part, and [inline.{}] is not given", slot.name());
    let notice = name.mark.error(UNKNOWN_PART, message).found(&name.value);
    let likeness = |(maker, part): (&str, &str)| {
        let whole = full_name(maker, part);
        let like = |known: &str| strsim::normalized_damerau_levenshtein(&name.value, known);
        let like = like(part).max(like(&whole));
        (like, whole)
    };
    let nearest =
        holdings(catalog).map(|found| likeness(found.names())).max_by(|a, b| a.0.total_cmp(&b.0));
    match nearest {
        Some((_, whole)) => notice.mend(format!("the nearest name is `{whole}`")),
        None => notice,
    }
}

fn ambiguous<'m>(names: impl Iterator<Item = (&'m str, &'m str)>, name: &Given<String>) -> Notice {
    let whole: Vec<String> =
        names.map(|(maker, part)| format!("`{}`", full_name(maker, part))).collect();
    let (shown, more) = whole.split_at(whole.len().min(MOST_NAMED));
    let more = if more.is_empty() { String::new() } else { format!(" and {} more", more.len()) };
    name.mark
        .error(AMBIGUOUS_PART, "several makers have a part of this name")
        .found(&name.value)
        .expected(format!("one of {}{more}", shown.join(", ")))
}
