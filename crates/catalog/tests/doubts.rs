//! Values that can be read but hardly be meant, one test each.

mod common;

use catalog::plausible::{gaps, plausibility};
use catalog::{Kind, ReadOptions};
use common::{read_at, read_file, sound, spoiled};
use notice::{Notice, Severity};

/// The doubts about a sound file with these cells replaced, gaps aside.
fn doubts(kind: Kind, cells: &[(&str, &str)]) -> Vec<Notice> {
    let (header, row) = sound(kind).split_once('\n').unwrap();
    let mut row: Vec<&str> = row.trim_end().split(',').collect();
    for (column, cell) in cells {
        row[header.split(',').position(|n| n == *column).unwrap()] = cell;
    }
    let shop = read_file(kind, &format!("{header}\n{}\n", row.join(","))).clean();
    let mut notices = Vec::new();
    plausibility(&shop, &mut notices);
    notices.retain(|n| n.code != "column-gaps");
    notices
}

#[track_caller]
fn one_doubt(kind: Kind, cells: &[(&str, &str)], column: &str, says: &str) {
    let found = doubts(kind, cells);
    assert_eq!(found.len(), 1, "{found:#?}");
    assert_eq!(found[0].severity, Severity::Warning);
    assert_eq!(found[0].code, "value-implausible");
    assert!(found[0].message.contains(says), "{}", found[0]);
    let header = sound(kind).lines().next().unwrap();
    let place = header.split(',').position(|n| n == column).unwrap();
    let row: Vec<&str> = sound(kind).lines().nth(1).unwrap().split(',').collect();
    let cell = cells.iter().find(|(c, _)| *c == column).map_or(row[place], |(_, cell)| cell);
    assert_eq!(found[0].found.as_deref(), Some(cell));
    assert_eq!(found[0].place.line, 2);
}

#[test]
fn sound_rows_raise_no_doubt() {
    for kind in Kind::ALL {
        assert_eq!(doubts(kind, &[]), [], "{kind:?}");
    }
}

#[test]
fn a_zener_of_two_megavolts() {
    one_doubt(Kind::Zeners, &[("vz_v", "2M")], "vz_v", "2000000 V is hard to believe");
}

#[test]
fn the_sign_of_a_zeners_temperature_coefficient() {
    one_doubt(
        Kind::Zeners,
        &[("vz_v", "3.3"), ("tc_min_mv_per_c", "1")],
        "tc_min_mv_per_c",
        "falls",
    );
    let warm = [("vz_v", "9.1"), ("tc_min_mv_per_c", "-3"), ("tc_max_mv_per_c", "-2")];
    one_doubt(Kind::Zeners, &warm, "tc_max_mv_per_c", "rises");
    let exchanged = [("tc_min_mv_per_c", "2.5"), ("tc_max_mv_per_c", "-0.5")];
    one_doubt(Kind::Zeners, &exchanged, "tc_min_mv_per_c", "above the greatest");
}

#[test]
fn supplies_that_are_exchanged() {
    one_doubt(Kind::Opamps, &[("vs_min_v", "36"), ("vs_max_v", "5")], "vs_min_v", "lies above");
}

#[test]
fn figures_of_a_transistor_that_contradict_each_other() {
    one_doubt(Kind::Transistors, &[("pd_w", "2")], "pd_w", "should agree");
    one_doubt(Kind::Transistors, &[("vbe_max_v", "1.0")], "vbe_max_v", "two junctions");
    one_doubt(Kind::Transistors, &[("hfe_min", "0.1:500;5:750")], "hfe_min", "up to 5 A");
    one_doubt(Kind::Transistors, &[("soa_dc", "10:10;90:0.5")], "soa_dc", "beyond `vceo_v`");
    one_doubt(Kind::Transistors, &[("soa_dc", "10:12;80:0.5")], "soa_dc", "above `ic_max_a`");
    let free_air = [("package", "TO-220"), ("rth_jc_c_per_w", "62.5"), ("pd_w", "2")];
    one_doubt(Kind::Transistors, &free_air, "rth_jc_c_per_w", "far out");
}

#[test]
fn a_polarity_that_is_neither() {
    let text = spoiled(Kind::Transistors, "polarity", "nnp");
    let shop = read_file(Kind::Transistors, &text).clean();
    let mut notices = Vec::new();
    plausibility(&shop, &mut notices);
    assert!(notices.iter().any(|n| n.message.contains("`nnp` is neither")), "{notices:#?}");
}

#[test]
fn blank_optional_figures_are_counted() {
    let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/tests/data/fixed-12v");
    let shop = read_at(folder.as_ref(), &ReadOptions::default()).clean();
    let count = |kind, column| {
        let all = gaps(&shop);
        all.iter().find(|g| g.kind == kind && g.column == column).map(|g| (g.blank, g.rows))
    };
    assert_eq!(count(Kind::Zeners, "zzk_ohm"), Some((2, 4)));
    assert_eq!(count(Kind::Opamps, "cmrr_min_db"), Some((1, 3)));
    assert_eq!(count(Kind::Opamps, "gain_min_db"), None);
    // The pnp row is none of the rows; a column that the file lacks is blank in all of them.
    assert_eq!(count(Kind::Transistors, "soa_1ms"), Some((3, 3)));
    assert_eq!(count(Kind::Zeners, "tj_max_c"), None, "a needed column is no gap");
}
