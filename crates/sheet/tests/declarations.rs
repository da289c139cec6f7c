//! What every declaration promises, tried for each key as it is declared: a new key is covered by
//! being there.

mod common;

use std::collections::HashSet;

use circuit::slot::Slot;
use common::{ADJUSTABLE, FIXED, read, read_with, shop, sound, with};
use sheet::bounds::{Bounds, End};
use sheet::keys::{self, Applies, Fallback, Key, Kind, POLICY_FIELDS};
use sheet::{code, reference_markdown};

/// A sound sheet in which the key has a meaning.
fn home_of(key: &Key) -> String {
    match key.applies {
        Applies::AdjustableOutput => ADJUSTABLE.to_owned(),
        Applies::With(other) => with(FIXED, other.name, &sample(other)),
        Applies::Always | Applies::FixedOutput | Applies::Without(_) => FIXED.to_owned(),
    }
}

/// A value that the key takes, as TOML: its default, or one within its range.
fn sample(key: &Key) -> String {
    if let Some(default) = key.default_as_toml() {
        return default;
    }
    if let Some(line) = FIXED.lines().chain(ADJUSTABLE.lines()).find(|l| l.starts_with(key.name)) {
        return line.split_once('=').expect("a key and its value").1.trim().to_owned();
    }
    match (key.kind, key.fallback) {
        // Keys like these are limits beyond others: far out they collide with none.
        (Kind::Number(_), Fallback::Multiple(factor, of)) => {
            let of: f64 = sample(of).parse().expect("a number");
            (factor * of).to_string()
        }
        (Kind::Number(_), _) => "120".to_owned(),
        (Kind::Texts(_), _) => "[\"P1\"]".to_owned(),
        other => panic!("no sample for {}: {other:?}", key.name),
    }
}

/// Values just outside the bounds.
fn outside(bounds: Bounds) -> Vec<String> {
    let mut values = vec!["nan".to_owned(), "inf".to_owned(), "-inf".to_owned()];
    values.extend(bounds.low.map(|low| match low {
        End::Open(x) => x.to_string(),
        End::Closed(x) => (x - 0.001).to_string(),
    }));
    values.extend(bounds.high.map(|high| match high {
        End::Open(x) => x.to_string(),
        End::Closed(x) => (x + 0.001).to_string(),
    }));
    values
}

/// The codes of the notices that stand at the value of `key`, the last line of `text`.
fn codes_at_key(text: &str, key: &Key) -> Vec<&'static str> {
    let (sheet, notices) = read(text);
    assert!(sheet.is_none(), "{text}");
    let of_key = notices.iter().filter(|n| n.message.contains(&format!("`{}`", key.name)));
    of_key.map(|n| n.code).collect()
}

#[test]
fn every_key_takes_its_sample() {
    for key in keys::ALL {
        sound(&with(&home_of(key), key.name, &sample(key)));
    }
}

#[test]
fn a_default_written_out_changes_nothing() {
    for key in keys::ALL.iter().filter(|key| key.default_as_toml().is_some()) {
        let home = home_of(key);
        let left_out = sound(&home);
        let written = sound(&with(&home, key.name, &sample(key)));
        assert_eq!(written.rail, left_out.rail, "{}", key.name);
        assert_eq!(written.weights, left_out.weights, "{}", key.name);
        assert_eq!(written.boards, left_out.boards, "{}", key.name);
        assert_eq!(written.parts.allow_status, left_out.parts.allow_status, "{}", key.name);
        assert_eq!(written.parts.need_stock, left_out.parts.need_stock, "{}", key.name);
        let is_assumed = |sheet: &sheet::Sheet| sheet.assumed.iter().any(|a| a.key == key.name);
        assert!(is_assumed(&left_out), "{} is assumed where it is left out", key.name);
        assert!(!is_assumed(&written), "{} is not assumed where it is written", key.name);
    }
}

#[test]
fn what_the_shop_gives_is_not_assumed_and_means_the_same() {
    for key in keys::ALL {
        let home = home_of(key);
        let value = sample(key);
        let (from_shop, notices) =
            read_with(&home, &shop(&format!("{} = {value}\n", key.name)), &[]);
        assert_eq!(notices, [], "{}", key.name);
        let from_shop = from_shop.expect("a sound sheet");
        let from_sheet = sound(&with(&home, key.name, &value));
        assert_eq!(from_shop.rail, from_sheet.rail, "{}", key.name);
        assert_eq!(from_shop.assumed, from_sheet.assumed, "{}", key.name);
    }
}

#[test]
fn every_number_is_refused_out_of_range() {
    for key in keys::ALL {
        let (Kind::Number(bounds) | Kind::Duration(bounds)) = key.kind else { continue };
        for value in outside(bounds) {
            let codes = codes_at_key(&with(&home_of(key), key.name, &value), key);
            assert_eq!(codes, [code::OUT_OF_RANGE], "{} = {value}", key.name);
        }
    }
}

#[test]
fn every_key_refuses_another_kind_of_value() {
    for key in keys::ALL {
        let value = match key.kind {
            Kind::Number(_) | Kind::Duration(_) | Kind::Count(_) | Kind::Flag => "\"word\"",
            Kind::Text | Kind::Texts(_) | Kind::Words(_) | Kind::Policy => "1979-05-27",
        };
        let codes = codes_at_key(&with(&home_of(key), key.name, value), key);
        assert_eq!(codes, [code::WRONG_TYPE], "{} = {value}", key.name);
    }
}

#[test]
fn every_required_key_is_missed() {
    for key in keys::ALL.iter().filter(|key| matches!(key.fallback, Fallback::Required)) {
        let text = common::without(&home_of(key), key.name);
        assert_eq!(codes_at_key(&text, key), [code::MISSING_KEY], "{}", key.name);
    }
}

#[test]
fn every_key_is_suggested_for_a_slip() {
    for key in keys::ALL {
        let slip = format!("{}x", key.name);
        let (_, notices) = read(&with(FIXED, &slip, "1"));
        let mends: Vec<_> = notices.iter().filter_map(|n| n.mend.as_deref()).collect();
        assert!(mends.contains(&format!("did you mean `{}`?", key.name).as_str()), "{slip}");
    }
}

#[test]
fn every_policy_field_reaches_its_place_and_keeps_its_range() {
    let mut seen = HashSet::new();
    for field in POLICY_FIELDS {
        let name = field.key.name;
        let Kind::Number(bounds) = field.key.kind else { panic!("{name} is a number") };
        let derating =
            sound(&with(FIXED, "derating", &format!("{{ {name} = 0.125 }}"))).rail.derating;
        let shown = format!("{derating:?}");
        // `Derating` names its fields as policies do.
        let place = format!(" {name}: 0.125,");
        let capped = format!(" {name}: Some(0.125)");
        assert!(shown.contains(&place) || shown.contains(&capped), "{name}: {shown}");
        assert!(seen.insert(name), "{name} is declared twice");
        for value in outside(bounds) {
            let (sheet, notices) =
                read(&with(FIXED, "derating", &format!("{{ {name} = {value} }}")));
            assert!(sheet.is_none());
            assert_eq!(notices[0].code, code::OUT_OF_RANGE, "{name} = {value}");
        }
        if let Some(default) = field.key.default_as_toml() {
            let rail = sound(&with(FIXED, "derating", &format!("{{ {name} = {default} }}"))).rail;
            assert_eq!(rail, sound(FIXED).rail, "{name}");
        }
    }
    // 13 fields of `Derating`, none forgotten.
    assert_eq!(
        POLICY_FIELDS.len(),
        format!("{:?}", circuit::rail::Derating::NONE).matches(": ").count()
    );
}

#[test]
fn names_are_declared_once_and_pins_are_named_after_slots() {
    let names: HashSet<_> = keys::ALL.iter().map(|key| key.name).collect();
    assert_eq!(names.len(), keys::ALL.len());
    for slot in Slot::ALL {
        assert_eq!(keys::pin_of(slot).name, format!("parts.use.{}", slot.name()));
    }
    let pins = keys::ALL.iter().filter(|key| key.section() == "parts.use").count();
    assert_eq!(pins, Slot::COUNT);
}

#[test]
fn the_reference_shows_every_key_once() {
    let page = reference_markdown();
    for key in keys::ALL.iter().copied().chain(POLICY_FIELDS.iter().map(|f| &f.key)) {
        let rows = page.lines().filter(|line| line.starts_with(&format!("| `{}` |", key.name)));
        assert_eq!(rows.count(), 1, "{}", key.name);
    }
    let row = "| `divider.allow_bias_a` | A | the amplifier input current that the divider is \
               chosen for | at least 0 | 1e-6 |";
    assert!(page.lines().any(|line| line == row));
    for line in page.lines().filter(|line| line.starts_with('|')) {
        assert_eq!(line.replace("\\|", "").matches('|').count(), 6, "{line}");
    }
    assert!(page.contains("* `divider.min_a` is below `divider.max_a`\n"));
}
