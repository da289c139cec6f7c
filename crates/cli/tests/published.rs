//! Published worked examples, in through sheet and catalogs and out through the program.
//!
//! Books work with nominal values, so the catalogs of these cases have no tolerances and the sheets no
//! margins. What the book prints is compared at the digits that it prints.

use serde_json::Value;
use std::path::{Path, PathBuf};
use std::process::Command;

fn case(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../../tests/published").join(name)
}

/// The first candidate of a case's shortlist.
fn first_candidate(name: &str) -> Value {
    let folder = case(name);
    let out = tempfile::tempdir().expect("a folder for the output");
    let file = out.path().join("list.json");
    let ran = Command::new(env!("CARGO_BIN_EXE_railwright"))
        .arg("shortlist")
        .arg(folder.join("sheet.toml"))
        .arg("--catalogs")
        .arg(folder.join("catalogs"))
        .arg("--out")
        .arg(&file)
        .output()
        .expect("the program runs");
    assert!(ran.status.success(), "{}", String::from_utf8_lossy(&ran.stderr));
    let text = std::fs::read_to_string(&file).expect("the list was written");
    let list: Value = serde_json::from_str(&text).expect("the list is JSON");
    list["candidates"][0].clone()
}

/// A figure of a check: `asked`, `allowed` or `utilisation`.
fn of_check(candidate: &Value, check: &str, figure: &str) -> f64 {
    candidate["checks"]
        .as_array()
        .and_then(|checks| checks.iter().find(|c| c["name"] == check))
        .and_then(|c| c[figure].as_f64())
        .unwrap_or_else(|| panic!("the candidate has no {figure} of {check}"))
}

#[track_caller]
fn near(found: f64, published: f64, fraction: f64) {
    let off = (found - published).abs();
    assert!(off <= fraction * published.abs(), "found {found}, published {published}");
}

/// Source: James M. Fiore, "Op Amps & Linear Integrated Circuits", examples 8.1 and 8.2: output 11.70 V,
/// collector-emitter voltage 8.30 V, dissipation 4.86 W, current gain needed 29.25, efficiency 58.5 %.
#[test]
fn an_op_amp_regulator_of_a_textbook() {
    let first = first_candidate("fiore-8-1-8-2");
    assert_eq!(first["values"]["rz_ohm"], 5000.0);
    assert_eq!(first["values"]["rf_ohm"], 20000.0);
    assert_eq!(first["values"]["ri_ohm"], 10000.0);
    near(first["output"]["nominal_v"].as_f64().expect("a figure"), 11.70, 5e-4);
    near(of_check(&first, "pass-power", "asked"), 4.86, 1e-3);
    // The book takes IC/IB, the model IE/IB − 1: exactly one less.
    near(first["least_gain"].as_f64().expect("a figure"), 29.25 - 1.0, 1e-9);
    // The book leaves out what divider, zener and amplifier draw.
    let efficiency = first["efficiency"].as_f64().expect("a figure");
    assert!(efficiency < 0.585 && efficiency > 0.58, "{efficiency}");
    // 16.1 V on 5 kΩ.
    near(of_check(&first, "rz-power", "asked"), 16.1 * 16.1 / 5000.0, 1e-9);
    // The operating area of the case lies on the 115 W line, so it is used as the power rating is.
    let by_power = of_check(&first, "pass-power", "utilisation");
    near(of_check(&first, "soa-load", "utilisation"), by_power, 1e-8);
}
