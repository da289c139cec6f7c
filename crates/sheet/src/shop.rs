//! The shop file: what all sheets of a shop share.

use circuit::rail::Derating;
use notice::{Notice, has_errors};
use toml::Spanned;
use toml::de::{DeString, DeValue};

use crate::code;
use crate::keys::{COLUMNS_SECTION, CURRENCY, DERATING, POLICY_SECTION};
use crate::policy;
use crate::settings::{self, Dialect, Settings};
use crate::source::{Mark, Source, shortened};
use crate::value::{Cell, Value};

/// What all sheets of a shop share: `shop.toml` in the folder of the catalogs.
#[derive(Debug, Clone, Default)]
pub struct ShopFile {
    /// The currency of every price, as it is to be shown.
    pub currency: Option<String>,
    /// The shop's own derating policies by name.
    pub policies: Vec<(String, Derating)>,
    /// Column names of the shop's catalogs, each with the name that the program knows it by.
    pub columns: Vec<(String, String)>,
    /// Where each of `columns` stands, in the same order: for faults found when catalogs are read.
    pub column_marks: Vec<Mark>,
    /// Sheet keys that hold where a sheet does not give them.
    pub(crate) defaults: Settings,
}

impl ShopFile {
    /// A shop that says nothing.
    pub fn empty() -> Self {
        Self::default()
    }

    /// Reads a shop file. `file_name` is what notices call it.
    ///
    /// # Errors
    ///
    /// None where the text has an error; every fault is in `notices`. A sheet read with
    /// [`ShopFile::empty`] instead misses what the faulty shop would have given it.
    pub fn read(file_name: &str, text: &str, notices: &mut Vec<Notice>) -> Option<ShopFile> {
        let mut found = Vec::new();
        let shop = read(&Source::file(file_name, text), &mut found);
        let sound = !has_errors(&found);
        found.sort_by(|a, b| a.place.cmp(&b.place));
        notices.append(&mut found);
        shop.filter(|_| sound)
    }
}

fn read(source: &Source<'_>, notices: &mut Vec<Notice>) -> Option<ShopFile> {
    let document = settings::parse(source, notices)?;
    let mut shop = ShopFile::empty();
    let mut sheet_keys: Vec<(&Spanned<DeString<'_>>, &Spanned<DeValue<'_>>)> = Vec::new();
    for (name, value) in &document {
        match name.get_ref().as_ref() {
            name if name == CURRENCY.name => {
                let cell = Cell { key: &CURRENCY, label: CURRENCY.name, value, source };
                if let Some(Value::Text(currency)) = cell.read(notices) {
                    shop.currency = Some(currency.trim().to_owned());
                }
            }
            POLICY_SECTION => shop.policies = policy::read_section(value, source, notices),
            COLUMNS_SECTION => read_columns(value, source, &mut shop, notices),
            _ => sheet_keys.push((name, value)),
        }
    }
    shop.defaults.collect("", sheet_keys, (source, Dialect::Shop), notices);
    if let Some(given) = shop.defaults.get(&DERATING)
        && let Value::PolicyName(name) = &given.value
        && policy::named(name, &shop.policies).is_none()
    {
        notices.push(policy::unknown(&given.value_mark, name, &shop.policies));
    }
    Some(shop)
}

fn read_columns(
    section: &Spanned<DeValue<'_>>,
    source: &Source<'_>,
    shop: &mut ShopFile,
    notices: &mut Vec<Notice>,
) {
    const EXPECTED: &str = "\"name in the file\" = \"name that the program knows\"";
    let DeValue::Table(table) = section.get_ref() else {
        let notice = source
            .mark(section.span())
            .error(code::WRONG_TYPE, format!("`{COLUMNS_SECTION}` is no section"))
            .expected(format!("`[{COLUMNS_SECTION}]` with lines {EXPECTED}"));
        notices.push(notice);
        return;
    };
    for (name, value) in table {
        match value.get_ref() {
            DeValue::String(known) if !known.trim().is_empty() => {
                let pair = (name.get_ref().trim().to_owned(), known.trim().to_owned());
                shop.columns.push(pair);
                shop.column_marks.push(source.mark(value.span()));
            }
            _ => {
                let name = shortened(name.get_ref());
                let notice = source
                    .mark(value.span())
                    .error(code::WRONG_TYPE, format!("column \"{name}\" is given no name"))
                    .found(source.quoted(value.span()))
                    .expected(EXPECTED);
                notices.push(notice);
            }
        }
    }
}
