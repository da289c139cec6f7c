//! The keys that a file gives, each read as its declaration wants it.

use notice::Notice;
use toml::Spanned;
use toml::de::{DeString, DeTable, DeValue};

use crate::code;
use crate::keys::{self, Key};
use crate::near::nearest_key;
use crate::source::{Mark, Source, shortened};
use crate::value::{Cell, Value};

/// At most so many faults of TOML itself are told: after a slip the parser stumbles on.
const MOST_SYNTAX_FAULTS: usize = 20;

/// What kind of file is read.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Dialect {
    Sheet,
    Shop,
}

impl Dialect {
    fn name(self) -> &'static str {
        match self {
            Dialect::Sheet => "a rail sheet",
            Dialect::Shop => "a shop file",
        }
    }
}

/// One key with its value.
#[derive(Debug, Clone)]
pub(crate) struct Given {
    pub(crate) key: &'static Key,
    pub(crate) value: Value,
    /// Where the key stands.
    pub(crate) key_mark: Mark,
    /// Where the value stands.
    pub(crate) value_mark: Mark,
}

/// The keys that one file gives.
#[derive(Debug, Clone, Default)]
pub(crate) struct Settings {
    given: Vec<Given>,
    /// Keys and sections that were meant but are faulty or misspelt, and where; they aren't missing.
    attempted: Vec<(&'static str, Mark)>,
    sections: Vec<(&'static str, Mark)>,
}

impl Settings {
    /// The value of a key.
    pub(crate) fn get(&self, key: &Key) -> Option<&Given> {
        self.given.iter().find(|given| given.key == key)
    }

    pub(crate) fn iter(&self) -> impl Iterator<Item = &Given> {
        self.given.iter()
    }

    /// The key, or its section, was meant but is faulty or misspelt.
    pub(crate) fn attempted(&self, key: &Key) -> bool {
        self.attempted.iter().any(|(name, _)| *name == key.name || *name == key.section())
    }

    /// Where the key stands, be its value sound or not.
    pub(crate) fn place_of(&self, key: &Key) -> Option<&Mark> {
        let attempt = || self.attempted.iter().find(|(name, _)| *name == key.name);
        let given = self.get(key).map(|given| &given.key_mark);
        given.or_else(|| attempt().map(|(_, mark)| mark))
    }

    /// Where the section stands.
    pub(crate) fn section(&self, name: &str) -> Option<&Mark> {
        self.sections.iter().find(|(known, _)| *known == name).map(|(_, mark)| mark)
    }

    /// Puts a value in place of the one that the file gives.
    pub(crate) fn replace(&mut self, new: Given) {
        self.given.retain(|given| given.key != new.key);
        self.given.push(new);
    }

    /// Notes that a key was meant, though it could not be read.
    pub(crate) fn note_attempt(&mut self, name: &'static str, mark: Mark) {
        self.attempted.push((name, mark));
    }

    /// Reads the entries of a table that stands under `section` (empty for the file as a whole).
    /// Descends no deeper than declared sections do, so deep nesting costs no stack.
    pub(crate) fn collect<'a>(
        &mut self,
        section: &str,
        entries: impl IntoIterator<Item = (&'a Spanned<DeString<'a>>, &'a Spanned<DeValue<'a>>)>,
        file: (&Source<'_>, Dialect),
        notices: &mut Vec<Notice>,
    ) {
        let (source, dialect) = file;
        for (segment, value) in entries {
            let name = dotted(section, segment.get_ref());
            if let Some(key) = keys::named(&name) {
                self.read_key(key, segment, value, source, notices);
            } else if let Some(known) = keys::sections().find(|s| *s == name) {
                let DeValue::Table(table) = value.get_ref() else {
                    notices.push(no_section(source, known, value));
                    self.note_attempt(known, source.mark(segment.span()));
                    continue;
                };
                self.sections.push((known, source.mark(segment.span())));
                self.collect(known, table, file, notices);
            } else {
                let mark = source.mark(segment.span());
                let (notice, meant) = unknown_key(&mark, &name, dialect);
                notices.push(notice);
                self.attempted.extend(meant.map(|name| (name, mark)));
            }
        }
    }

    fn read_key(
        &mut self,
        key: &'static Key,
        segment: &Spanned<DeString<'_>>,
        value: &Spanned<DeValue<'_>>,
        source: &Source<'_>,
        notices: &mut Vec<Notice>,
    ) {
        let key_mark = source.mark(segment.span());
        match (Cell { key, label: key.name, value, source }).read(notices) {
            Some(value_read) => {
                let value_mark = source.mark(value.span());
                self.given.push(Given { key, value: value_read, key_mark, value_mark });
            }
            None => self.note_attempt(key.name, key_mark),
        }
    }
}

/// The document, or None with the parser's faults as notices.
///
/// The parser itself refuses nesting beyond 80 levels, so no text can exhaust the stack.
pub(crate) fn parse<'a>(source: &Source<'a>, notices: &mut Vec<Notice>) -> Option<DeTable<'a>> {
    let (document, faults) = DeTable::parse_recoverable(source.text());
    if faults.is_empty() {
        return Some(document.into_inner());
    }
    let mut faults: Vec<_> =
        faults.iter().map(|fault| (fault.span().unwrap_or_default(), fault.message())).collect();
    faults.sort_by_key(|(span, _)| span.start);
    let mut last_line = None;
    for (span, message) in faults.into_iter().take(MOST_SYNTAX_FAULTS) {
        let mark = source.mark(span.clone());
        // What follows a slip on the same line is the parser finding its way back.
        if last_line.replace(mark.place.line) == Some(mark.place.line) {
            continue;
        }
        let notice = mark.error(code::SYNTAX, message);
        let begins_as_number = source.quoted(span).starts_with(|c: char| c.is_ascii_digit());
        notices.push(if begins_as_number {
            notice.mend("write numbers without their unit, and texts in quotes")
        } else {
            notice
        });
    }
    None
}

/// The notice for a key that nobody knows, and the name that was probably meant.
pub(crate) fn unknown_key(
    mark: &Mark,
    name: &str,
    dialect: Dialect,
) -> (Notice, Option<&'static str>) {
    if dialect == Dialect::Sheet && keys::SHOP_ONLY.contains(&name) {
        let notice = mark
            .error(code::SHOP_KEY_IN_SHEET, format!("`{name}` is a key of the shop, not of a rail"))
            .mend("move it to shop.toml in the folder of the catalogs");
        return (notice, None);
    }
    let of_shop = match dialect {
        Dialect::Sheet => &[][..],
        Dialect::Shop => &keys::SHOP_ONLY[..],
    };
    let known = keys::ALL.iter().map(|key| key.name);
    let known = known.chain(keys::sections()).chain(of_shop.iter().copied());
    let notice = mark.error(
        code::UNKNOWN_KEY,
        format!("`{}` is no key or section of {}", shortened(name), dialect.name()),
    );
    match nearest_key(name, known) {
        Some(near) => (notice.mend(format!("did you mean `{near}`?")), Some(near)),
        None => (notice.expected(neighbours(name, of_shop)), None),
    }
}

/// The keys that stand beside an unknown one.
fn neighbours(name: &str, of_shop: &[&'static str]) -> String {
    let section = name.rsplit_once('.').map_or("", |(section, _)| section);
    let beside = keys::ALL.iter().filter(|key| !section.is_empty() && key.section() == section);
    let mut names: Vec<&str> = beside.map(|key| key.name).collect();
    if names.is_empty() {
        let plain = keys::ALL.iter().filter(|key| key.section().is_empty()).map(|key| key.name);
        names = plain.chain(keys::sections()).chain(of_shop.iter().copied()).collect();
    }
    format!("one of {}", names.join(", "))
}

fn no_section(source: &Source<'_>, name: &str, value: &Spanned<DeValue<'_>>) -> Notice {
    source
        .mark(value.span())
        .error(code::WRONG_TYPE, format!("`{name}` is a section"))
        .found(source.quoted(value.span()))
        .expected(format!("`[{name}]`, once, with its keys below"))
}

/// The dotted name of a key. A part that holds a dot itself stays in quotes: it is one part, and
/// no declared key.
fn dotted(section: &str, part: &str) -> String {
    let part = if part.contains('.') { format!("\"{part}\"") } else { part.to_owned() };
    if section.is_empty() { part } else { format!("{section}.{part}") }
}
