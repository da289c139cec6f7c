//! One TOML value, read as its key wants it.

use circuit::rail::Derating;
use notice::Notice;
use quantity::notation::{Unit, parse};
use toml::Spanned;
use toml::de::{DeFloat, DeInteger, DeValue};

use crate::bounds::{Bounds, figure};
use crate::code;
use crate::keys::{FOREVER, Key, Kind, LARGEST_COUNT};
use crate::near::nearest;
use crate::policy;
use crate::source::{Mark, Source, shortened};

/// A value of the kind that its key takes, within its range.
#[derive(Debug, Clone)]
pub(crate) enum Value {
    /// As written, in the key's unit; infinite for a duration without end.
    Number(f64),
    Count(u64),
    Flag(bool),
    Text(String),
    Texts(Vec<Entry>),
    PolicyName(String),
    PolicyFields(Derating),
}

/// One text of a list, without spaces round it.
#[derive(Debug, Clone)]
pub(crate) struct Entry {
    pub(crate) text: String,
    pub(crate) mark: Mark,
}

/// A TOML value with what is needed to speak of it.
pub(crate) struct Cell<'a> {
    pub(crate) key: &'a Key,
    /// What messages call the key: its name, but `policy.house.soa` for a policy's field.
    pub(crate) label: &'a str,
    pub(crate) value: &'a Spanned<DeValue<'a>>,
    pub(crate) source: &'a Source<'a>,
}

impl Cell<'_> {
    /// The value as the key's kind wants it; None with a notice where it is something else.
    pub(crate) fn read(&self, notices: &mut Vec<Notice>) -> Option<Value> {
        let read = match self.key.kind {
            Kind::Number(bounds) => self.number(bounds).map(Value::Number),
            Kind::Duration(bounds) => self.duration(bounds).map(Value::Number),
            Kind::Count(least) => self.count(least).map(Value::Count),
            Kind::Text => self.text().map(Value::Text),
            Kind::Flag => self.flag().map(Value::Flag),
            Kind::Texts(least) => return self.texts(least, notices).map(Value::Texts),
            Kind::Words(words) => return self.words(words, notices).map(Value::Texts),
            Kind::Policy => return self.policy(notices),
        };
        read.map_err(|notice| notices.push(*notice)).ok()
    }

    fn number(&self, bounds: Bounds) -> Result<f64, Box<Notice>> {
        let number = match self.value.get_ref() {
            DeValue::Integer(integer) => from_integer(integer),
            DeValue::Float(float) => from_float(float),
            DeValue::String(text) => return Err(self.number_in_quotes(text)),
            _ => return Err(self.wrong_type("is no number")),
        };
        match number {
            Some(number) if bounds.contain(number) => Ok(number),
            Some(number) if number.is_finite() => Err(self.out_of_range()),
            _ => Err(self.fault(code::OUT_OF_RANGE, "is no finite number")),
        }
    }

    fn duration(&self, bounds: Bounds) -> Result<f64, Box<Notice>> {
        match self.value.get_ref() {
            DeValue::String(text) if text.trim().eq_ignore_ascii_case(FOREVER) => Ok(f64::INFINITY),
            DeValue::Float(float) if from_float(float) == Some(f64::INFINITY) => {
                let mut notice = self.fault(code::OUT_OF_RANGE, "is no finite number");
                notice.mend = Some(format!("write \"{FOREVER}\" for a short without end"));
                Err(notice)
            }
            _ => self.number(bounds),
        }
    }

    fn count(&self, least: u64) -> Result<u64, Box<Notice>> {
        let number = self.number(Bounds::ANY)?;
        if number.fract() != 0.0 {
            return Err(self.fault(code::NOT_WHOLE, "is no whole number"));
        }
        // Both limits are whole numbers that a double holds exactly, so nothing is lost in `as`.
        if number < least as f64 || number > LARGEST_COUNT as f64 {
            return Err(self.out_of_range());
        }
        Ok(number as u64)
    }

    fn text(&self) -> Result<String, Box<Notice>> {
        match self.value.get_ref() {
            DeValue::String(text) if text.trim().is_empty() => {
                Err(self.fault(code::BLANK_TEXT, "is blank"))
            }
            DeValue::String(text) => Ok(text.to_string()),
            _ => Err(self.wrong_type("is no text")),
        }
    }

    fn flag(&self) -> Result<bool, Box<Notice>> {
        match self.value.get_ref() {
            DeValue::Boolean(flag) => Ok(*flag),
            _ => Err(self.wrong_type("is neither true nor false")),
        }
    }

    fn texts(&self, least: usize, notices: &mut Vec<Notice>) -> Option<Vec<Entry>> {
        let items = match self.value.get_ref() {
            DeValue::Array(items) => items.iter().collect(),
            _ => vec![self.value],
        };
        if items.len() < least {
            let notice = self.fault(code::EMPTY_LIST, "is an empty list");
            notices.push(*notice);
            return None;
        }
        let mut entries = Vec::with_capacity(items.len());
        let mut sound = true;
        for value in items {
            let item = Cell { value, ..*self };
            match item.text() {
                Ok(text) => {
                    let mark = self.source.mark(value.span());
                    entries.push(Entry { text: text.trim().to_owned(), mark });
                }
                Err(notice) => {
                    sound = false;
                    notices.push(*notice);
                }
            }
        }
        sound.then_some(entries)
    }

    fn words(&self, words: &[&'static str], notices: &mut Vec<Notice>) -> Option<Vec<Entry>> {
        let mut entries = self.texts(1, notices)?;
        let mut sound = true;
        for entry in &mut entries {
            if let Some(word) = words.iter().find(|word| word.eq_ignore_ascii_case(&entry.text)) {
                entry.text = (*word).to_owned();
                continue;
            }
            sound = false;
            let message = format!("`{}` holds a word that it does not know", self.label);
            let notice =
                entry.mark.error(code::UNKNOWN_WORD, message).found(shortened(&entry.text));
            notices.push(match nearest(&entry.text, words.iter().copied()) {
                Some(near) => notice.mend(format!("did you mean \"{near}\"?")),
                None => notice.expected(self.key.expects()),
            });
        }
        sound.then_some(entries)
    }

    fn policy(&self, notices: &mut Vec<Notice>) -> Option<Value> {
        match self.value.get_ref() {
            DeValue::Table(table) => policy::read_fields(self.label, table, self.source, notices)
                .map(Value::PolicyFields),
            DeValue::String(name) => Some(Value::PolicyName(name.trim().to_owned())),
            _ => {
                notices.push(*self.wrong_type("is no policy"));
                None
            }
        }
    }

    fn out_of_range(&self) -> Box<Notice> {
        self.fault(code::OUT_OF_RANGE, "is out of range")
    }

    fn wrong_type(&self, what: &str) -> Box<Notice> {
        self.fault(code::WRONG_TYPE, what)
    }

    /// A number written as a text: where the figure is clear the mend spells it.
    fn number_in_quotes(&self, text: &str) -> Box<Notice> {
        let mut notice = self.wrong_type("is no number");
        let unit = self.key.unit;
        let number = parse(text, unit).or_else(|_| parse(&text.replace(',', "."), unit));
        let duration = matches!(self.key.kind, Kind::Duration(_));
        notice.mend = Some(match number {
            Ok(number) if unit == Unit::Plain => format!("write `{}`", figure(number)),
            Ok(number) => {
                format!("write `{}`: the unit of this key is {}", figure(number), unit.symbol())
            }
            Err(_) if duration && nearest(text, [FOREVER]).is_some() => {
                format!("write \"{FOREVER}\"")
            }
            Err(_) => "write the bare figure, without quotes or unit".to_owned(),
        });
        notice
    }

    fn fault(&self, code: &'static str, what: &str) -> Box<Notice> {
        let span = self.value.span();
        let notice = self
            .source
            .mark(span.clone())
            .error(code, format!("`{}` {what}", self.label))
            .found(self.source.quoted(span))
            .expected(self.key.expects());
        Box::new(notice)
    }
}

fn from_integer(integer: &DeInteger<'_>) -> Option<f64> {
    // No double beyond 2^127 is a sensible figure in any unit.
    i128::from_str_radix(integer.as_str(), integer.radix()).ok().map(|whole| whole as f64)
}

fn from_float(float: &DeFloat<'_>) -> Option<f64> {
    float.as_str().parse().ok()
}
