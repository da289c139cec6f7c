//! `--set KEY=VALUE`: a sheet value for this run.

use notice::Notice;
use toml::Spanned;
use toml::de::DeValue;

use crate::code;
use crate::keys::{self, Key, Kind};
use crate::settings::{Dialect, Given, Settings, unknown_key};
use crate::source::{Mark, Source};
use crate::value::Cell;

/// Puts the arguments of `--set` in place of what the sheet gives.
pub(crate) fn apply(arguments: &[String], own: &mut Settings, notices: &mut Vec<Notice>) {
    let mut seen: Vec<&Key> = Vec::new();
    for argument in arguments {
        let name = format!("--set {argument}");
        let mark = Source::argument(&name, "").whole();
        let Some((key_name, value)) = argument.split_once('=') else {
            notices.push(
                mark.error(code::SET_MALFORMED, "there is no `=`")
                    .expected("KEY=VALUE, for example load.max_a=1.5"),
            );
            continue;
        };
        let key_name = key_name.trim();
        let Some(key) = keys::named(key_name) else {
            notices.push(unknown(&mark, key_name));
            continue;
        };
        if seen.contains(&key) {
            let message = format!("`{}` is set twice", key.name);
            notices.push(mark.error(code::SET_TWICE, message).mend("leave one of them out"));
            continue;
        }
        seen.push(key);
        apply_one(key, &Source::argument(&name, value.trim()), own, notices);
    }
}

fn apply_one(
    key: &'static Key,
    source: &Source<'_>,
    own: &mut Settings,
    notices: &mut Vec<Notice>,
) {
    let value = match value_of(key, source.text()) {
        Ok(value) => value,
        Err(fault) => {
            notices.push(
                source
                    .whole()
                    .error(code::SYNTAX, fault)
                    .found(source.quoted(0..source.text().len()))
                    .expected(key.expects()),
            );
            own.note_attempt(key.name, source.whole());
            return;
        }
    };
    match (Cell { key, label: key.name, value: &value, source }).read(notices) {
        Some(value) => {
            let mark = source.whole();
            own.replace(Given { key, value, key_mark: mark.clone(), value_mark: mark });
        }
        None => own.note_attempt(key.name, source.whole()),
    }
}

/// The value as TOML, or the words themselves where they are no TOML: shells take quotes away, so
/// `rail.name=Spare rail`, `parts.use.pass=2955` and `parts.ban=[AX101, AY7]` are understood too.
fn value_of<'a>(key: &Key, text: &'a str) -> Result<Spanned<DeValue<'a>>, String> {
    let whole = 0..text.len();
    let word = |text: &'a str| DeValue::String(text.into());
    let takes_text =
        matches!(key.kind, Kind::Text | Kind::Texts(_) | Kind::Words(_) | Kind::Policy);
    match DeValue::parse(text) {
        Ok(value) => {
            let is_bare = !matches!(
                value.get_ref(),
                DeValue::String(_) | DeValue::Array(_) | DeValue::Table(_)
            );
            Ok(if takes_text && is_bare { Spanned::new(whole, word(text)) } else { value })
        }
        Err(fault) => {
            if text.contains(['"', '\'', '\n']) || text.starts_with('{') {
                return Err(fault.message().to_owned());
            }
            let Some(items) = text.strip_prefix('[') else {
                return Ok(Spanned::new(whole, word(text)));
            };
            let Some(items) = items.strip_suffix(']') else {
                return Err("the list has no end".to_owned());
            };
            let items = items.split(',').map(|item| Spanned::new(whole.clone(), word(item.trim())));
            Ok(Spanned::new(whole.clone(), DeValue::Array(items.collect())))
        }
    }
}

fn unknown(mark: &Mark, name: &str) -> Notice {
    let (mut notice, _) = unknown_key(mark, name, Dialect::Sheet);
    if name.strip_prefix(keys::DERATING.name).is_some_and(|rest| rest.starts_with('.')) {
        notice.expected = None;
        notice.mend = Some("set the policy as a whole: --set 'derating={soa=0.8}'".to_owned());
    }
    notice
}
