//! Shortlisted candidates in a circuit simulator: the nominal circuit and its corners lie inside what the
//! tool states.
//!
//! The netlist is written from the JSON output and the catalog rows alone, and the simulator solves it:
//! nothing here computes an operating point. Every part is at the end of its tolerance in every
//! combination, with the least and the highest feed, the least and the full load, in the cold and the heat,
//! and, for an adjustable output, with the knob at both ends.
//!
//! | module | what it holds |
//! |---|---|
//! | `stage` | a candidate of the JSON output with the figures of its catalog rows |
//! | `corner` | which end each part is at |
//! | `netlist` | the circuit of a stage at a corner, as the simulator reads it |
//! | `ngspice` | running the simulator, and what it found |
//! | `bounds` | what the tool states, held against what the simulator found |

#[path = "../common/mod.rs"]
mod common;

mod bounds;
mod corner;
mod netlist;
mod ngspice;
mod stage;

use bounds::Bounds;
use common::{repository, run, tool};
use corner::Corner;
use netlist::Swing;
use ngspice::Operating;
use serde_json::Value;
use stage::{Shop, Stage};
use std::path::PathBuf;

/// Candidates of each sheet that are simulated.
const FIRST: usize = 3;

/// The sample sheets for which something holds, in order of name.
fn sheets() -> Vec<PathBuf> {
    let files = std::fs::read_dir(repository("catalogs-sample/sheets")).expect("the sheets");
    let mut sheets: Vec<PathBuf> = files
        .map(|entry| entry.expect("an entry").path())
        .filter(|path| {
            !path.file_name().is_some_and(|n| n.as_encoded_bytes().starts_with(b"impossible"))
        })
        .collect();
    sheets.sort();
    sheets
}

/// The first candidates of a sheet as the program writes them.
fn candidates(sheet: &str) -> Vec<Value> {
    let out = tempfile::tempdir().expect("a folder");
    let file = out.path().join("list.json");
    let file_name = file.to_str().expect("a plain path");
    let top = FIRST.to_string();
    let ran = run(
        &repository(""),
        &["shortlist", sheet, "--catalogs", "catalogs-sample", "--top", &top, "--out", file_name],
    );
    assert_eq!(ran.status, 0, "{}", ran.err);
    let list: Value = serde_json::from_slice(&std::fs::read(file).expect("a list")).expect("JSON");
    list["candidates"].as_array().expect("candidates").clone()
}

/// The operating points at corners. The solver finds its way more easily without the ends of the
/// amplifier's swing, so they are put in where the drive goes beyond them.
fn simulated(simulator: &str, stage: &Stage<'_>, corners: &[Corner]) -> Vec<Operating> {
    let circuits = |corners: &[Corner], swing: Swing| -> Vec<String> {
        corners.iter().map(|corner| netlist::of(stage, corner, swing)).collect()
    };
    let mut points = ngspice::operating_points(simulator, &circuits(corners, Swing::Unlimited));
    let amplifier = stage.amplifier;
    let is_beyond = |p: &Operating| {
        p.drive_v < amplifier.swing_low_v || p.drive_v > p.feed_v - amplifier.swing_high_v
    };
    let beyond: Vec<usize> = (0..points.len()).filter(|n| is_beyond(&points[*n])).collect();
    let those: Vec<Corner> = beyond.iter().map(|n| corners[*n]).collect();
    let limited = ngspice::operating_points(simulator, &circuits(&those, Swing::Limited));
    for (n, point) in beyond.into_iter().zip(limited) {
        points[n] = point;
    }
    points
}

#[test]
fn every_corner_lies_inside_what_the_tool_states() {
    let name = "every_corner_lies_inside_what_the_tool_states";
    let Some(simulator) = tool::program(name, &["ngspice"]) else { return };
    let shop = Shop::sample();
    let mut points = 0;
    let mut reach = bounds::Reach::default();
    for sheet in sheets() {
        let path = sheet.to_str().expect("a plain path");
        let rail = shop.rail(&sheet);
        for candidate in candidates(path) {
            let stage = Stage::new(&candidate, &shop, &rail);
            let at = format!("{} rank {}", sheet.display(), candidate["rank"]);
            let bounds = Bounds::of(&candidate, &stage);

            let nominal = simulated(&simulator, &stage, &[Corner::NOMINAL]);
            let off = bounds.nominal(&nominal[0]);
            assert!(off.is_empty(), "{at}, nominal:\n{}", off.join("\n"));

            let corners = Corner::all(rail.is_adjustable());
            let found = simulated(&simulator, &stage, &corners);
            let off: Vec<String> = corners
                .iter()
                .zip(&found)
                .flat_map(|(corner, point)| bounds.outside(corner, point))
                .collect();
            assert!(
                off.is_empty(),
                "{at}: {} outside\n{}",
                off.len(),
                off[..off.len().min(20)].join("\n")
            );
            reach.join(&bounds, &found);
            points += 1 + corners.len();
        }
    }
    // Bounds that nothing comes near would be no bounds: extreme values must nearly be reached somewhere.
    println!("{points} operating points; {reach}");
    assert!(points > 5000, "{points}");
    reach.must_be_near();
}

#[test]
fn the_simulation_refuses_a_candidate_with_other_values() {
    let name = "the_simulation_refuses_a_candidate_with_other_values";
    let Some(simulator) = tool::program(name, &["ngspice"]) else { return };
    let shop = Shop::sample();
    let sheet = repository("catalogs-sample/sheets/tide-gauge-12v.toml");
    let rail = shop.rail(&sheet);
    let candidate = candidates(sheet.to_str().expect("a plain path")).swap_remove(0);
    let corners = Corner::all(false);
    for (value, factor) in [("rz_ohm", 0.8), ("rz_ohm", 1.5), ("rf_ohm", 1.05), ("ri_ohm", 1.05)] {
        let mut other = candidate.clone();
        let ohm = other["values"][value].as_f64().expect("a value");
        other["values"][value] = (factor * ohm).into();
        let stage = Stage::new(&other, &shop, &rail);
        let bounds = Bounds::of(&candidate, &stage);
        let found = simulated(&simulator, &stage, &corners);
        let outside =
            corners.iter().zip(&found).any(|(c, point)| !bounds.outside(c, point).is_empty());
        assert!(outside, "{value} times {factor} goes unnoticed");
    }
}
