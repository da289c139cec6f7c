//! Reading a design file: every fault at its place, all of them gathered.
//!
//! The codes of the notices, for scripts:
//!
//! | code | what it says |
//! |---|---|
//! | `toml-syntax` | the text is no TOML |
//! | `unknown-key` | a key, section, slot or column that nothing reads |
//! | `missing-key` | `design`, `name`, or a value that every circuit has |
//! | `wrong-type` | a value of another kind than its key takes |
//! | `out-of-range` | a number that its key doesn't take |
//! | `design-format` | the file is of a format that this program doesn't know |
//! | `cell-…`, `row-…` | cells of an inline part, as in a catalog |

use crate::file::{Design, Given, Inline, SlotEntry};
use crate::keys::{self, Resistor};
use crate::text::{Mark, Source, nearest, shortened};
use catalog::Kind;
use catalog::read::read_inline;
use circuit::slot::Slot;
use notice::{Notice, has_errors};
use quantity::notation::{Unit, parse};
use std::ops::Range;
use toml::Spanned;
use toml::de::{DeString, DeTable, DeValue};

const SYNTAX: &str = "toml-syntax";
const UNKNOWN_KEY: &str = "unknown-key";
const MISSING_KEY: &str = "missing-key";
const WRONG_TYPE: &str = "wrong-type";
const OUT_OF_RANGE: &str = "out-of-range";
const FORMAT: &str = "design-format";

/// At most so many faults of TOML itself are told: after a slip the parser stumbles on.
const MOST_SYNTAX_FAULTS: usize = 5;

/// Once a file has so many faults no further unknown key is told.
const MOST_UNKNOWN: usize = 200;

/// Reads a design. `file_name` is what notices call the file.
///
/// # Errors
/// None where the file has an error. All faults are in `notices`.
pub fn read(file_name: &str, text: &str, notices: &mut Vec<Notice>) -> Option<Design> {
    let source = Source::new(file_name, text);
    let mut found = Vec::new();
    let design = parsed(&source, &mut found)
        .and_then(|document| Reader { source: &source, notices: &mut found }.design(&document));
    let sound = !has_errors(&found);
    found.sort_by(|a, b| a.place.cmp(&b.place));
    notices.append(&mut found);
    design.filter(|_| sound)
}

/// The text of a file is that of a design: it has the key `design` at its top. A rail sheet has not, nor
/// has a text that is no TOML.
///
/// ```
/// assert!(design::is_design("design = 1\nname = \"x\""));
/// assert!(!design::is_design("[rail]\nname = \"x\""));
/// ```
pub fn is_design(text: &str) -> bool {
    let source = Source::new("", text);
    let document = DeTable::parse_recoverable(source.text()).0.into_inner();
    document.iter().any(|(name, _)| name.get_ref() == keys::DESIGN)
}

/// The document; None with the parser's faults as notices.
fn parsed<'a>(source: &Source<'a>, notices: &mut Vec<Notice>) -> Option<DeTable<'a>> {
    let (document, faults) = DeTable::parse_recoverable(source.text());
    if faults.is_empty() {
        return Some(document.into_inner());
    }
    let mut faults: Vec<(Range<usize>, &str)> =
        faults.iter().map(|fault| (fault.span().unwrap_or_default(), fault.message())).collect();
    faults.sort_by_key(|(span, _)| span.start);
    let mut last_line = None;
    for (span, message) in faults.into_iter().take(MOST_SYNTAX_FAULTS) {
        let mark = source.mark(span);
        // What follows a slip on the same line is the parser finding its way back.
        if last_line.replace(mark.place.line) != Some(mark.place.line) {
            notices.push(mark.error(SYNTAX, message));
        }
    }
    None
}

struct Reader<'r, 'a> {
    source: &'r Source<'a>,
    notices: &'r mut Vec<Notice>,
}

impl Reader<'_, '_> {
    fn design(&mut self, document: &DeTable<'_>) -> Option<Design> {
        let mut design = Design {
            file: self.source.whole().place.file,
            name: String::new(),
            sheet: None,
            sheet_sha256: None,
            boards: None,
            slots: Default::default(),
            values: Default::default(),
        };
        let mut given = Vec::new();
        for (key, value) in document {
            let name = key.get_ref().as_ref();
            given.push(name);
            match name {
                keys::DESIGN => self.format(value),
                keys::NAME => design.name = self.text(keys::NAME, value).unwrap_or_default(),
                keys::SHEET => {
                    let mark = self.mark(value);
                    design.sheet = self.text(name, value).map(|value| Given { value, mark });
                }
                keys::SHEET_SHA256 => {
                    design.sheet_sha256 = self.text(name, value).map(|t| t.to_lowercase());
                }
                keys::BOARDS => design.boards = self.boards(value),
                keys::SLOTS => self.slots(value, &mut design.slots),
                keys::VALUES => self.values(value, &mut design.values),
                keys::INLINE | keys::PROVEN => {}
                _ => self.unknown(key, name, keys::OUTSIDE),
            }
        }
        // Inline parts are called as their slots call them, and inline lines hold the values that are
        // fitted, so slots and values come first.
        for (section, value) in [keys::INLINE, keys::PROVEN].map(|s| (s, document.get(s))) {
            let Some(value) = value else { continue };
            self.by_slot(section, value, |reader, slot, value| {
                if section == keys::INLINE {
                    let name = design.slots[slot as usize].part.as_ref();
                    let implied = implied(slot, name.map(|n| n.value.as_str()), &design.values);
                    design.slots[slot as usize].inline = reader.inline(slot, value, &implied);
                } else {
                    design.slots[slot as usize].proven = reader.proven(slot, value);
                }
            });
        }
        self.missing(&given, &design);
        Some(design)
    }

    fn missing(&mut self, given: &[&str], design: &Design) {
        for key in [keys::DESIGN, keys::NAME] {
            if !given.contains(&key) {
                let notice = self.source.whole().error(MISSING_KEY, format!("`{key}` is missing"));
                self.notices.push(match key {
                    keys::DESIGN => notice.mend(format!("write `design = {}`", keys::FORMAT)),
                    _ => notice.expected("what the design is called"),
                });
            }
        }
        let blamed = self.notices.iter().any(|n| n.message.contains("values"));
        for resistor in [Resistor::Rz, Resistor::Ri] {
            if design.value(resistor).is_none() && !blamed {
                let message = format!("`{}.{}` is missing", keys::VALUES, resistor.key());
                let notice = self.source.whole().error(MISSING_KEY, message);
                self.notices.push(notice.expected("the resistance as fitted, in Ω"));
            }
        }
    }

    fn format(&mut self, value: &Spanned<DeValue<'_>>) {
        if number_of(value.get_ref()) != Some(keys::FORMAT as f64) {
            let notice = self
                .mark(value)
                .error(FORMAT, "the file is of a format that this program doesn't know")
                .found(self.source.quoted(value.span()))
                .expected(keys::FORMAT.to_string());
            self.notices.push(notice);
        }
    }

    fn boards(&mut self, value: &Spanned<DeValue<'_>>) -> Option<u64> {
        /// Up to here every whole number is an exact double.
        const MOST: f64 = 9_007_199_254_740_992.0;
        match number_of(value.get_ref()) {
            Some(n) if n.fract() == 0.0 && (1.0..=MOST).contains(&n) => Some(n as u64),
            _ => {
                self.fault(value, OUT_OF_RANGE, keys::BOARDS, "a whole number, at least 1");
                None
            }
        }
    }

    fn slots(&mut self, value: &Spanned<DeValue<'_>>, slots: &mut [SlotEntry; Slot::COUNT]) {
        self.by_slot(keys::SLOTS, value, |reader, slot, value| {
            let label = format!("{}.{}", keys::SLOTS, slot.name());
            let mark = reader.mark(value);
            slots[slot as usize].part =
                reader.text(&label, value).map(|value| Given { value, mark });
        });
    }

    fn values(
        &mut self,
        value: &Spanned<DeValue<'_>>,
        values: &mut [Option<Given<f64>>; Resistor::ALL.len()],
    ) {
        let Some(table) = self.table(keys::VALUES, value) else { return };
        for (key, value) in table {
            let name = key.get_ref().as_ref();
            let Some(resistor) = Resistor::ALL.into_iter().find(|r| r.key() == name) else {
                let label = format!("{}.{}", keys::VALUES, shortened(name));
                self.unknown(key, &label, Resistor::ALL.map(Resistor::key));
                continue;
            };
            let ohm = match value.get_ref() {
                DeValue::String(text) => parse(text, Unit::Ohm).ok(),
                other => number_of(other),
            };
            let least_is_zero = resistor.may_be_link();
            let sound =
                |ohm: &f64| ohm.is_finite() && (*ohm > 0.0 || (least_is_zero && *ohm == 0.0));
            match ohm.filter(sound) {
                Some(ohm) => {
                    values[resistor as usize] = Some(Given { value: ohm, mark: self.mark(value) });
                }
                None => {
                    let label = format!("{}.{name}", keys::VALUES);
                    let expected = if least_is_zero {
                        "a resistance in Ω, or 0 for a link"
                    } else {
                        "a resistance in Ω, > 0"
                    };
                    self.fault(value, OUT_OF_RANGE, &label, expected);
                }
            }
        }
    }

    /// Calls `each` with every slot that a section names.
    fn by_slot(
        &mut self,
        section: &str,
        value: &Spanned<DeValue<'_>>,
        mut each: impl FnMut(&mut Self, Slot, &Spanned<DeValue<'_>>),
    ) {
        let Some(table) = self.table(section, value) else { return };
        for (key, value) in table {
            match Slot::named(key.get_ref()) {
                Some(slot) => each(self, slot, value),
                None => {
                    let label = format!("{section}.{}", shortened(key.get_ref()));
                    self.unknown(key, &label, Slot::ALL.map(Slot::name));
                }
            }
        }
    }

    /// The cells of `[inline.SLOT]` or `[proven.SLOT]`, each with its column and its mark.
    fn cells<'t>(
        &mut self,
        section: &str,
        slot: Slot,
        value: &'t Spanned<DeValue<'_>>,
    ) -> Option<Vec<(&'t str, String, Mark)>> {
        let kind = eligible::kind_of(slot);
        let section = format!("{section}.{}", slot.name());
        let table = self.table(&section, value)?;
        let mut cells = Vec::with_capacity(table.len());
        for (key, value) in table {
            let name = key.get_ref().as_ref();
            if kind.column(name).is_none() {
                let label = format!("{section}.{}", shortened(name));
                self.unknown(key, &label, kind.columns().iter().map(|c| c.name));
                continue;
            }
            match cell_text(value.get_ref(), self.source, value.span()) {
                Some(text) => cells.push((name, text, self.mark(value))),
                None => {
                    let label = format!("{section}.{name}");
                    self.fault(value, WRONG_TYPE, &label, "a number, a text, or a list of them");
                }
            }
        }
        Some(cells)
    }

    fn proven(
        &mut self,
        slot: Slot,
        value: &Spanned<DeValue<'_>>,
    ) -> Option<Vec<(String, String)>> {
        let cells = self.cells(keys::PROVEN, slot, value)?;
        Some(cells.into_iter().map(|(column, text, _)| (column.to_owned(), text)).collect())
    }

    fn inline(
        &mut self,
        slot: Slot,
        value: &Spanned<DeValue<'_>>,
        implied: &[(&'static str, String)],
    ) -> Option<Inline> {
        let kind = eligible::kind_of(slot);
        let cells = self.cells(keys::INLINE, slot, value)?;
        let mut texts: Vec<(&str, &str)> =
            cells.iter().map(|(column, text, _)| (*column, text.as_str())).collect();
        for (column, text) in implied {
            if !texts.iter().any(|(given, _)| given == column) {
                texts.push((column, text));
            }
        }
        let mut faults = Vec::new();
        let shop = read_inline(kind, &texts, &mut faults);
        let section = self.mark(value);
        for fault in faults {
            let cell = fault.cell.and_then(|at| cells.get(at));
            let mark = cell.map_or(&section, |(_, _, mark)| mark);
            self.notices.push(mark.take(fault.notice));
        }
        let cells = cells.into_iter().map(|(c, _, mark)| (c.to_owned(), mark)).collect();
        Some(Inline { shop, mark: section, cells })
    }

    fn table<'t, 'v>(
        &mut self,
        section: &str,
        value: &'t Spanned<DeValue<'v>>,
    ) -> Option<&'t DeTable<'v>> {
        match value.get_ref() {
            DeValue::Table(table) => Some(table),
            _ => {
                let notice = self
                    .mark(value)
                    .error(WRONG_TYPE, format!("`{section}` is a section"))
                    .found(self.source.quoted(value.span()))
                    .expected(format!("`[{section}]` with its keys below"));
                self.notices.push(notice);
                None
            }
        }
    }

    fn text(&mut self, label: &str, value: &Spanned<DeValue<'_>>) -> Option<String> {
        match value.get_ref() {
            DeValue::String(text) if !text.trim().is_empty() => Some(text.trim().to_owned()),
            _ => {
                self.fault(value, WRONG_TYPE, label, "a text in quotes");
                None
            }
        }
    }

    fn fault(
        &mut self,
        value: &Spanned<DeValue<'_>>,
        code: &'static str,
        label: &str,
        expected: &str,
    ) {
        let notice = self
            .mark(value)
            .error(code, format!("`{label}` doesn't take this"))
            .found(self.source.quoted(value.span()))
            .expected(expected);
        self.notices.push(notice);
    }

    fn unknown<'n>(
        &mut self,
        key: &Spanned<DeString<'_>>,
        label: &str,
        known: impl IntoIterator<Item = &'n str>,
    ) {
        // A place is found by walking there, so of very many unknown keys not each is told.
        if self.notices.len() >= MOST_UNKNOWN {
            return;
        }
        let known: Vec<&str> = known.into_iter().collect();
        let message = format!("`{}` is no key or section of a design file", shortened(label));
        let notice = self.source.mark(key.span()).error(UNKNOWN_KEY, message);
        self.notices.push(match nearest(key.get_ref(), known.iter().copied()) {
            Some(near) => notice.mend(format!("did you mean `{near}`?")),
            None => notice.expected(format!("one of {}", known.join(", "))),
        });
    }

    fn mark(&self, value: &Spanned<DeValue<'_>>) -> Mark {
        self.source.mark(value.span())
    }
}

/// The cells that an inline part need not give: its name as the slot names it, a price that no check
/// asks for, and, of a line of resistors, the values that are fitted.
fn implied(
    slot: Slot,
    name: Option<&str>,
    fitted: &[Option<Given<f64>>; Resistor::ALL.len()],
) -> Vec<(&'static str, String)> {
    let name = name.unwrap_or(slot.name());
    let (maker, part) = name.split_once('/').unwrap_or(("", name));
    let mut cells =
        vec![("part", part.to_owned()), ("maker", maker.to_owned()), ("cost", "0".to_owned())];
    if eligible::kind_of(slot) == Kind::Resistors {
        let from_line = match slot {
            Slot::BiasLine => &[Resistor::Rz][..],
            _ => &[Resistor::Rf, Resistor::Ri, Resistor::Rx],
        };
        let ohms: Vec<f64> = from_line
            .iter()
            .filter_map(|r| fitted[*r as usize].as_ref().map(|given| given.value))
            .filter(|ohm| *ohm > 0.0)
            .collect();
        let least = ohms.iter().copied().fold(f64::INFINITY, f64::min);
        let most = ohms.iter().copied().fold(0.0, f64::max);
        if !ohms.is_empty() {
            let list: Vec<String> = ohms.iter().map(f64::to_string).collect();
            cells.push(("values", list.join(";")));
            cells.push(("min_ohm", least.to_string()));
            cells.push(("max_ohm", most.to_string()));
        }
    }
    cells
}

/// A TOML value as the text of a cell; a list becomes one with `;` between its items. None where it is
/// neither number, text, nor list of them.
fn cell_text(value: &DeValue<'_>, source: &Source<'_>, span: Range<usize>) -> Option<String> {
    match value {
        DeValue::String(text) => Some(text.trim().to_owned()),
        // As it is written, so that a cell stays comparable with that of a catalog.
        DeValue::Integer(_) | DeValue::Float(_) => {
            number_of(value)?;
            let written = source.text().get(span)?;
            Some(written.replace('_', ""))
        }
        DeValue::Array(items) => items
            .iter()
            .map(|item| match item.get_ref() {
                DeValue::Array(_) => None,
                plain => cell_text(plain, source, item.span()),
            })
            .collect::<Option<Vec<_>>>()
            .map(|items| items.join(";")),
        _ => None,
    }
}

/// A finite decimal number.
fn number_of(value: &DeValue<'_>) -> Option<f64> {
    match value {
        DeValue::Integer(integer) if integer.radix() == 10 => integer.as_str().parse().ok(),
        DeValue::Float(float) => float.as_str().parse().ok().filter(|x: &f64| x.is_finite()),
        _ => None,
    }
}
