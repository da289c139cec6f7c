//! Derating policies: built in, of the shop, or written in the sheet.

use circuit::rail::Derating;
use notice::Notice;
use toml::de::{DeTable, DeValue};

use crate::code;
use crate::keys::{POLICY_FIELDS, POLICY_SECTION};
use crate::near::nearest;
use crate::source::{Mark, Source, shortened};
use crate::value::{Cell, Value};

/// The fields of a policy; what is left out may be used in full. None with notices where a field
/// is unknown or faulty.
pub(crate) fn read_fields(
    label: &str,
    table: &DeTable<'_>,
    source: &Source<'_>,
    notices: &mut Vec<Notice>,
) -> Option<Derating> {
    let mut derating = Derating::NONE;
    let mut sound = true;
    for (name, value) in table {
        let label = format!("{label}.{}", shortened(name.get_ref()));
        let Some(field) = POLICY_FIELDS.iter().find(|f| f.key.name == name.get_ref()) else {
            let mark = source.mark(name.span());
            notices.push(unknown_field(&mark, &label, name.get_ref()));
            sound = false;
            continue;
        };
        match (Cell { key: &field.key, label: &label, value, source }).read(notices) {
            Some(Value::Number(figure)) => (field.set)(&mut derating, figure),
            _ => sound = false,
        }
    }
    sound.then_some(derating)
}

fn unknown_field(mark: &Mark, label: &str, name: &str) -> Notice {
    let known = || POLICY_FIELDS.iter().map(|field| field.key.name);
    let notice =
        mark.error(code::UNKNOWN_KEY, format!("`{label}` is no field of a derating policy"));
    match nearest(name, known()) {
        Some(near) => notice.mend(format!("did you mean `{near}`?")),
        None => notice.expected(format!("one of {}", known().collect::<Vec<_>>().join(", "))),
    }
}

/// The shop's section `[policy.NAME]`; faults become notices, and a faulty policy keeps its name
/// so that sheets that use it are not called wrong too.
pub(crate) fn read_section(
    section: &toml::Spanned<DeValue<'_>>,
    source: &Source<'_>,
    notices: &mut Vec<Notice>,
) -> Vec<(String, Derating)> {
    let DeValue::Table(table) = section.get_ref() else {
        let notice = source
            .mark(section.span())
            .error(code::WRONG_TYPE, format!("`{POLICY_SECTION}` is no section"))
            .expected(format!("`[{POLICY_SECTION}.NAME]` with the policy's fields"));
        notices.push(notice);
        return Vec::new();
    };
    let mut policies = Vec::with_capacity(table.len());
    for (name, value) in table {
        let label = format!("{POLICY_SECTION}.{}", shortened(name.get_ref()));
        if Derating::BUILT_IN.iter().any(|(built_in, _)| built_in == name.get_ref()) {
            let notice = source
                .mark(name.span())
                .error(
                    code::POLICY_NAME_TAKEN,
                    format!("`{}` is the name of a built-in policy", shortened(name.get_ref())),
                )
                .mend("give the shop's policy a name of its own");
            notices.push(notice);
        }
        let DeValue::Table(fields) = value.get_ref() else {
            let notice = source
                .mark(value.span())
                .error(code::WRONG_TYPE, format!("`{label}` is no policy"))
                .found(source.quoted(value.span()))
                .expected(format!("a section `[{label}]` with the policy's fields"));
            notices.push(notice);
            continue;
        };
        let derating = read_fields(&label, fields, source, notices).unwrap_or(Derating::NONE);
        policies.push((name.get_ref().to_string(), derating));
    }
    policies
}

/// The policy of this name, built in or the shop's.
pub(crate) fn named(name: &str, of_shop: &[(String, Derating)]) -> Option<Derating> {
    let built_in = Derating::BUILT_IN.iter().find(|(known, _)| *known == name).map(|(_, d)| *d);
    built_in.or_else(|| of_shop.iter().find(|(known, _)| known == name).map(|(_, d)| *d))
}

/// The fault of a policy that nobody defines.
pub(crate) fn unknown(mark: &Mark, name: &str, of_shop: &[(String, Derating)]) -> Notice {
    let known = || {
        let built_in = Derating::BUILT_IN.iter().map(|(name, _)| *name);
        built_in.chain(of_shop.iter().map(|(name, _)| name.as_str()))
    };
    let notice = mark
        .error(code::UNKNOWN_POLICY, "`derating` names a policy that nobody defines")
        .found(shortened(name));
    match nearest(name, known()) {
        Some(near) => notice.mend(format!("did you mean \"{near}\"?")),
        None => notice.expected(format!("one of {}", known().collect::<Vec<_>>().join(", "))),
    }
}
