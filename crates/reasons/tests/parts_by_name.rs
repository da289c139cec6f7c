//! Parts by name, and the rules that bar them.

use catalog::{ReadOptions, Shop, read_folder};
use circuit::slot::Slot;
use eligible::eligible;
use reasons::names::{State, look_up};
use reasons::part::{BarredBy, Reason, why_not};
use sheet::{Sheet, ShopFile};
use std::path::{Path, PathBuf};

fn case(path: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../../tests/worked-cases/fixed-12v").join(path)
}

fn shop() -> Shop {
    let mut notices = Vec::new();
    let options = ReadOptions::default();
    read_folder(&case("catalogs"), &options, &mut notices).unwrap_or_else(|| panic!("{notices:?}"))
}

fn sheet(set: &[&str]) -> Sheet {
    let text = std::fs::read_to_string(case("sheet.toml")).expect("the sheet");
    let set: Vec<String> = set.iter().map(|&s| s.to_owned()).collect();
    let mut notices = Vec::new();
    sheet::read("sheet.toml", &text, &ShopFile::empty(), &set, &mut notices)
        .unwrap_or_else(|| panic!("{notices:?}"))
}

fn reason(name: &str, set: &[&str]) -> Reason {
    let (shop, sheet) = (shop(), sheet(set));
    let rows = eligible(&sheet, &shop, true, &mut Vec::new());
    let entries = look_up(name, &shop).expect("a part");
    let [entry] = entries.as_slice() else { panic!("{name} is one part") };
    let mut reasons = why_not(entry, &rows, &rows.problem()).expect("a small search");
    let (slot, reason) = reasons.pop().expect("a reason");
    assert_eq!(slot, Slot::Pass);
    reason
}

#[test]
fn every_rule_that_bars_a_part_is_told_and_no_other() {
    let barred = |set: &[&str]| match reason("PN-140", set) {
        Reason::Barred(rules) => rules,
        other => panic!("{other:?}"),
    };
    assert_eq!(barred(&["parts.ban=PN-140"]), [BarredBy::Ban]);
    assert_eq!(barred(&["parts.use.pass=PN-65"]), [BarredBy::Pin]);
    assert_eq!(barred(&["parts.allow_status=obsolete"]), [BarredBy::Status("active")]);
    // 120 in stock.
    assert_eq!(
        barred(&["parts.need_stock=true", "rail.boards=121", "parts.ban=Ostmere/PN-140"]),
        [BarredBy::Ban, BarredBy::Stock(Some(120.0))]
    );
    let enough = reason("PN-140", &["parts.need_stock=true", "rail.boards=120"]);
    assert!(!matches!(enough, Reason::Barred(_)), "{enough:?}");
}

#[test]
fn polarity_and_rank_are_told() {
    assert!(matches!(reason("PP-90S", &[]), Reason::Polarity(p) if p == "pnp"));
    assert!(matches!(reason("PN-140", &[]), Reason::Listed { rank: 1, .. }));
}

#[test]
fn a_name_is_a_part_of_every_maker_else_maker_and_part_else_unknown() {
    let shop = shop();
    let whole = look_up("Tarnholt/PN-90S", &shop).expect("maker and part");
    assert_eq!((whole.len(), whole[0].state.clone()), (1, State::Complete));
    assert_eq!(look_up("PN-90S", &shop), Ok(whole));
    let unknown = look_up("PN-90", &shop).expect_err("no such part");
    assert_eq!(unknown.nearest.as_deref(), Some("PN-90S"));
    assert_eq!(look_up("quite something else", &shop).expect_err("none").nearest, None);
}
