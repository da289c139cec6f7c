//! Whole sheets, read to the figures that were asked for.

mod common;

use circuit::rail::{Derating, Fault, Feed, Load, Output, Thermal};
use circuit::slot::Slot;
use sheet::{NamedPart, ShopFile, Weights};

use common::{read_with, shop, sound};

fn assumed_keys(sheet: &sheet::Sheet) -> Vec<&str> {
    sheet.assumed.iter().map(|a| a.key.as_str()).collect()
}

const ASSUMED_STAND_INS: [&str; 5] =
    ["assume.gain_db", "assume.psrr_db", "assume.cmrr_db", "assume.vs_test_v", "assume.zener_knee"];

const ASSUMED_DIVIDER: [&str; 4] =
    ["divider.min_a", "divider.max_a", "divider.allow_error_v", "divider.allow_bias_a"];

#[test]
fn fixed_output_with_a_short() {
    let sheet = sound(include_str!("data/fixed-12v/sheet.toml"));
    assert_eq!((sheet.name.as_str(), sheet.boards), ("Rack 12 V", 10));
    let rail = &sheet.rail;
    assert_eq!(rail.feed, Feed { min_v: 18.0, nominal_v: 21.0, max_v: 25.0, max_loaded_v: 23.0 });
    assert_eq!(rail.output, Output::Fixed { voltage_v: 12.0, tolerance: 0.08 });
    assert_eq!(rail.load, Load { max_a: 0.8, min_a: 0.0 });
    assert_eq!((rail.ambient.min_c, rail.ambient.max_c), (0.0, 45.0));
    assert_eq!(rail.fault, Some(Fault { limit_a: 1.0, lasts_s: 5.0 }));
    assert_eq!(rail.bias_a, None);
    assert_eq!((rail.divider.min_a, rail.divider.max_a), (0.0005, 0.002));
    assert_eq!((rail.divider.allow_error_v, rail.divider.allow_bias_a), (0.05, 1e-6));
    assert_eq!(rail.thermal, Thermal { interface_c_per_w: 1.0, sink_c_per_w: None });
    assert_eq!(rail.derating, Derating::NONE);
    assert_eq!(rail.stand_ins, circuit::rail::StandIns::default());
    assert_eq!(sheet.weights, Weights { cost: 1.0, loss: 1.0, stress: 1.0 });
    assert_eq!(sheet.parts.allow_status, ["active", "unknown"]);
    assert!(!sheet.parts.need_stock);
    assert_eq!(sheet.currency, None);
    let mut expected = vec!["load.min_a", "reference.bias_a"];
    expected.extend(ASSUMED_DIVIDER);
    expected.extend(["thermal.interface_c_per_w", "derating"]);
    expected.extend(ASSUMED_STAND_INS);
    expected.extend(["parts.allow_status", "parts.need_stock", "parts.ban"]);
    expected.extend(["rank.cost", "rank.loss", "rank.stress"]);
    assert_eq!(assumed_keys(&sheet), expected);
}

#[test]
fn adjustable_output_without_a_fault() {
    let sheet = sound(include_str!("data/adjustable-5-15v/sheet.toml"));
    assert_eq!(
        sheet.rail.output,
        Output::Adjustable { from_v: 5.0, to_v: 15.0, low_stop_v: 3.75, ceiling_v: Some(24.0) }
    );
    assert_eq!(sheet.rail.fault, None);
    assert_eq!(sheet.rail.derating, Derating::BENCH);
    assert_eq!(sheet.weights, Weights { cost: 1.0, loss: 0.5, stress: 2.0 });
    let mut expected = vec!["rail.boards", "output.low_stop_v", "reference.bias_a"];
    expected.extend(ASSUMED_DIVIDER);
    expected.push("thermal.interface_c_per_w");
    expected.extend(ASSUMED_STAND_INS);
    expected.extend(["parts.allow_status", "parts.need_stock", "parts.ban"]);
    assert_eq!(assumed_keys(&sheet), expected);
    let low_stop = sheet.assumed.iter().find(|a| a.key == "output.low_stop_v");
    assert_eq!(low_stop.map(|a| a.value.as_str()), Some("3.75"));
}

#[test]
fn defaults_for_feed_and_fault() {
    let sheet = sound(include_str!("data/nothing-qualifies/sheet.toml"));
    assert_eq!(sheet.rail.feed.max_loaded_v, 20.0);
    assert_eq!(sheet.rail.fault, Some(Fault { limit_a: 3.0, lasts_s: f64::INFINITY }));
    let lines: Vec<String> =
        sheet.assumed.iter().map(|a| format!("{} = {}", a.key, a.value)).collect();
    assert_eq!(
        lines[..4],
        [
            "feed.max_loaded_v = 20",
            "load.min_a = 0",
            "fault.lasts_s = \"forever\"",
            "reference.bias_a = each zener's izt_a",
        ]
    );
    assert!(lines.contains(&"divider.allow_bias_a = 1e-6".to_owned()));
    assert!(lines.contains(&"parts.allow_status = [\"active\", \"unknown\"]".to_owned()));
}

#[test]
fn pins_and_bans() {
    let sheet = sound(include_str!("data/soft-feed/sheet.toml"));
    let texts = |parts: &[NamedPart]| parts.iter().map(|p| p.text.clone()).collect::<Vec<_>>();
    let pinned = |slot: Slot| sheet.parts.pins[slot as usize].as_deref().map(texts);
    assert_eq!(pinned(Slot::Zener), Some(vec!["ZQ5V6-2".to_owned(), "ZQ6V2-2".to_owned()]));
    assert_eq!(pinned(Slot::Pass), Some(vec!["PN-65".to_owned(), "PN-70D".to_owned()]));
    assert_eq!(pinned(Slot::Amplifier), None);
    assert_eq!(texts(&sheet.parts.bans), ["Ivory Gate/PN-65"]);
    let second = &sheet.parts.pins[Slot::Zener as usize].as_ref().expect("a pin")[1];
    assert_eq!(second.place.to_string(), "rail.toml:31:21");
    assert!(!second.from_shop);
    assert!(!assumed_keys(&sheet).contains(&"parts.ban"));
}

#[test]
fn a_shop_behind_the_sheet() {
    let shop = shop(include_str!("data/shop-rules/shop.toml"));
    let text = include_str!("data/shop-rules/sheet.toml");
    let (sheet, notices) = read_with(text, &shop, &[]);
    assert_eq!(notices, []);
    let sheet = sheet.expect("a sound sheet");
    assert_eq!(sheet.currency.as_deref(), Some("EUR"));
    assert_eq!(
        sheet.rail.derating,
        Derating {
            collector_voltage: 0.8,
            pass_power: 0.75,
            soa: 0.85,
            amp_current: 0.8,
            zener_power: 0.6,
            resistor_power: 0.6,
            resistor_voltage: 0.8,
            junction_below_max_c: 20.0,
            fault_junction_below_max_c: 5.0,
            junction_cap_c: Some(125.0),
            ..Derating::NONE
        }
    );
    assert_eq!(sheet.rail.thermal, Thermal { interface_c_per_w: 0.6, sink_c_per_w: Some(2.5) });
    // The sheet's value, the sheet's value, the sheet's value, the shop's value.
    let divider = sheet.rail.divider;
    assert_eq!((divider.min_a, divider.max_a), (0.0009, 0.0016));
    assert_eq!((divider.allow_error_v, divider.allow_bias_a), (0.03, 5e-6));
    let bans: Vec<_> = sheet.parts.bans.iter().map(|b| (b.text.as_str(), b.from_shop)).collect();
    assert_eq!(bans, [("AY7", false), ("Tarnholt/PS-55", true)]);
    assert!(sheet.parts.need_stock);
    assert_eq!(sheet.weights.loss, 0.0);
    let columns: Vec<_> =
        shop.columns.iter().map(|(file, page)| (file.as_str(), page.as_str())).collect();
    assert_eq!(columns, [("price each", "cost"), ("U zener", "vz_v"), ("I supply", "iq_max_a")]);
    let mut expected = vec!["reference.bias_a"];
    expected.extend(ASSUMED_STAND_INS);
    expected.extend(["parts.allow_status", "rank.cost", "rank.stress"]);
    assert_eq!(assumed_keys(&sheet), expected);
}

#[test]
fn an_empty_shop_gives_nothing() {
    let mut notices = Vec::new();
    let shop = ShopFile::read("shop.toml", "", &mut notices).expect("an empty file is sound");
    assert_eq!((shop.currency, shop.columns.len(), shop.policies.len()), (None, 0, 0));
}
