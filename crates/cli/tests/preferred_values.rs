//! Preferred values of IEC 60063 and letter codes of IEC 60062, as the program offers them.

mod common;

use common::{run, tool};
use serde_json::Value;
use std::path::Path;
use std::process::Command;

/// The resistors of every line that `resistors` declares, Ω: a candidate each, as RZ.
///
/// Everything else in the shop takes any bias current, so no value is left out.
fn offered(folder: &Path, resistors: &str) -> Vec<(String, f64)> {
    let files = [
        (
            "zeners.csv",
            "part,cost,vz_v,tol_pct,izt_a,zzt_ohm,iz_min_a,pd_w,tj_max_c,tc_min_mv_per_c,tc_max_mv_per_c\nZ,1,5,0,1m,0,1e-12,1e9,175,0,0\n",
        ),
        (
            "opamps.csv",
            "part,cost,vs_min_v,vs_max_v,vcm_low_v,vcm_high_v,swing_low_v,swing_high_v,iout_a,vos_max_v,ib_max_a,iq_max_a,tj_max_c,rth_ja_c_per_w\nA,1,1,99,0,0,0,0,1,0,0,0,150,1\n",
        ),
        (
            "transistors.csv",
            "part,cost,polarity,junctions,vceo_v,ic_max_a,pd_w,tj_max_c,rth_jc_c_per_w,hfe_min,vbe_max_v,vce_sat_v,soa_dc\nQ,1,npn,1,99,9,99,150,1,1m:100;9:100,0.7,0.2,1:9;99:9\n",
        ),
        (
            "sheet.toml",
            "[rail]\nname = \"values\"\n[feed]\nmin_v = 20\nnominal_v = 20\nmax_v = 20\n[output]\nvoltage_v = 5\ntolerance_pct = 20\n[load]\nmax_a = 0.1\n[ambient]\nmin_c = 25\nmax_c = 25\n[thermal]\nsink_c_per_w = 1\n[divider]\nmin_a = 1e-4\nmax_a = 1e-2\n[parts.use]\ndivider_line = \"divider\"\n",
        ),
    ];
    for (name, text) in files {
        std::fs::write(folder.join(name), text).expect("a file");
    }
    let head = "part,cost,series,values,tol_pct,tempco_ppm,power_w,vmax_v,min_ohm,max_ohm";
    let divider = "divider,1,,10k,0,0,9,99,1,1M";
    std::fs::write(folder.join("resistors.csv"), format!("{head}\n{divider}\n{resistors}"))
        .expect("a file");
    let out = folder.join("list.json");
    let lines = resistors.lines().count() + 1;
    let top = lines.to_string();
    let arguments = [
        "shortlist",
        "sheet.toml",
        "--catalogs",
        ".",
        "--skip-broken-rows",
        "--overwrite",
        "--top",
        &top,
    ];
    let ran = run(folder, &[&arguments[..], &["--out", "list.json"]].concat());
    assert_eq!(ran.status, 0, "{}{}", ran.err, ran.out);
    let list: Value = serde_json::from_slice(&std::fs::read(out).expect("a list")).expect("JSON");
    let candidates = list["candidates"].as_array().expect("candidates");
    let mut offered: Vec<(String, f64)> = candidates
        .iter()
        .map(|c| {
            let line = c["slots"][1]["part"].as_str().expect("a line").to_owned();
            (line, c["values"]["rz_ohm"].as_f64().expect("a value"))
        })
        .filter(|(line, _)| line != "divider")
        .collect();
    offered.sort_by(|a, b| a.1.total_cmp(&b.1));
    offered
}

/// A line of one value only, if the series has it: nine hundred of them ask for every whole number of a
/// decade.
fn asked_one_by_one(series: &str) -> String {
    (100..1000).map(|n| format!("R{n},1,{series},,0,0,1e9,1e9,{n},{n}\n")).collect()
}

/// Source: the values of IEC 60063 as the Python package `eseries` holds them.
#[test]
fn every_series_is_that_of_an_independent_library() {
    const NAME: &str = "every_series_is_that_of_an_independent_library";
    let Some(python) = tool::python_with(NAME, &["eseries"]) else { return };
    let mut compared = 0;
    for series in ["E3", "E6", "E12", "E24", "E48", "E96", "E192"] {
        let code = format!("import eseries; print(*eseries.series(eseries.{series}))");
        let told = Command::new(&python).args(["-c", &code]).output().expect("Python runs");
        let told = String::from_utf8(told.stdout).expect("UTF-8");
        let mut theirs: Vec<f64> = told.split_whitespace().map(|n| n.parse().expect(n)).collect();
        assert_eq!(theirs.len(), series[1..].parse::<usize>().expect("a count"), "{told}");
        // The library writes E3 to E24 with two digits.
        let scale = if theirs[0] < 100.0 { 10.0 } else { 1.0 };
        theirs.iter_mut().for_each(|value| *value *= scale);

        let folder = tempfile::tempdir().expect("a folder");
        let ours: Vec<f64> =
            offered(folder.path(), &asked_one_by_one(series)).into_iter().map(|(_, v)| v).collect();
        assert_eq!(ours, theirs, "{series}");
        compared += ours.len();
    }
    println!("{compared} values of seven series");
}

/// Source: E24 and E96 share six values of a decade, E24 and E192 eleven (computed with `eseries` 1.2.1):
/// a line of one series holds nothing of another.
#[test]
fn a_fine_series_does_not_hold_the_coarse_ones() {
    let folder = tempfile::tempdir().expect("a folder");
    let e24: Vec<f64> =
        offered(folder.path(), &asked_one_by_one("E24")).iter().map(|v| v.1).collect();
    for (series, shared) in [("E96", 6), ("E192", 11)] {
        let fine = offered(folder.path(), &asked_one_by_one(series));
        let both = fine.iter().filter(|(_, v)| e24.contains(v)).count();
        assert_eq!(both, shared, "{series}");
    }
}

/// Source: Wikipedia, "RKM code" (CC BY-SA), table of examples; the last two from memory.
#[test]
fn letter_codes_mean_what_published_examples_say() {
    let published = [
        ("R47", 0.47),
        ("4R7", 4.7),
        ("4K7", 4700.0),
        ("47K", 47e3),
        ("470K", 470e3),
        ("4M7", 4.7e6),
        ("470R", 470.0),
        ("47K3", 47.3e3),
    ];
    let folder = tempfile::tempdir().expect("a folder");
    let lines: String = published
        .iter()
        .map(|(code, _)| format!("{code},1,,{code},0,0,1e9,1e9,0.1,10M\n"))
        .collect();
    let mut offered = offered(folder.path(), &lines);
    for (code, ohm) in published {
        let place = offered.iter().position(|(line, _)| line == code);
        let (_, found) = offered.remove(place.unwrap_or_else(|| panic!("{code} is offered")));
        assert_eq!(found, ohm, "{code}");
    }
}
