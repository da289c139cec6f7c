//! Whole folders of catalogs, with the notation, separators and renamed columns that occur in shops.

mod common;

use catalog::{Kind, ReadOptions, Status, lacks_for_fault, lacks_for_sink};
use circuit::parts::{MeasuredAt, OverCurrent};
use common::read_at;
use std::path::PathBuf;

fn data(folder: &str) -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR")).join("tests/data").join(folder)
}

#[test]
fn figures_of_a_folder_with_commas() {
    let shop = read_at(&data("fixed-12v"), &ReadOptions::default()).clean();

    let warm = &shop.zeners.rows[1];
    assert_eq!((warm.part.as_str(), warm.maker.as_str(), warm.line), ("ZQ6V2-2", "Brindlow", 3));
    assert_eq!((warm.price.at(1), warm.price.at(49), warm.price.at(50)), (0.10, 0.10, 0.07));
    assert_eq!(warm.stock, Some(400.0));
    let z = &warm.figures;
    assert_eq!((z.vz_v, z.tol, z.izt_a, z.iz_min_a), (6.2, 0.02, 0.005, 0.0005));
    assert_eq!((z.tc_min_v_per_c, z.tc_max_v_per_c), (0.001, 3.7 / 1000.0));
    assert_eq!((z.zzk_ohm, z.izk_a, z.vz_at), (Some(150.0), Some(0.001), MeasuredAt::Warm));
    assert_eq!(shop.zeners.rows[2].status, Status::Unknown);
    assert_eq!(shop.zeners.rows[2].figures.zzk_ohm, None);

    let unproven = &shop.zeners.unproven;
    assert_eq!(unproven.len(), 1);
    assert_eq!((unproven[0].part.as_str(), unproven[0].line), ("ZQ6V8-2", 5));
    assert_eq!(unproven[0].lacks, ["tj_max_c"]);

    assert_eq!(shop.opamps.rows[2].status, Status::NotRecommended);
    assert_eq!(shop.opamps.rows[0].figures.iout_a, 0.02);
    assert_eq!(shop.opamps.rows[0].figures.ib_max_a, 2e-7);
    assert_eq!(shop.opamps.rows[1].figures.cmrr_min_db, None);
    assert_eq!(lacks_for_fault(&shop.opamps.rows[0].figures), None);

    let names: Vec<&str> = shop.transistors.rows.iter().map(|r| r.part.as_str()).collect();
    assert_eq!(names, ["PN-140", "PN-65", "PN-90S"]);
    let left_out = &shop.transistors.left_out;
    assert_eq!(left_out.len(), 1);
    assert_eq!((left_out[0].part.as_str(), left_out[0].line), ("PP-90S", 5));
    let q = &shop.transistors.rows[0];
    assert_eq!(q.package.as_deref(), Some("TO-247"));
    assert_eq!(q.figures.hfe_min.as_slice(), [(0.1, 500.0), (1.0, 1000.0), (5.0, 750.0)]);
    assert_eq!(q.figures.soa_pulse.s1.as_ref().map(|p| p.last()), Some((80.0, 1.0)));
    assert_eq!(q.figures.hfe_tempco_per_c, Some(0.7 / 100.0));
    assert_eq!(q.figures.vbe_max_v, OverCurrent::Number(2.5));
    assert!(matches!(shop.transistors.rows[2].figures.vce_sat_v, OverCurrent::Points(_)));
    assert_eq!(lacks_for_sink(q), None);

    let shelf = &shop.resistors.rows[2].figures;
    assert_eq!(shelf.values_ohm, [680.0, 1000.0, 2200.0, 2700.0, 3300.0, 4700.0, 5600.0, 10_000.0]);
    assert_eq!((shelf.rating.full_power_to_c, shelf.rating.zero_power_at_c), (70.0, 155.0));
    assert_eq!(shop.resistors.rows[0].figures.values_ohm.len(), 73);
    assert_eq!(shop.resistors.rows[0].figures.tempco_per_c, 5e-5);

    let fin = &shop.heatsinks.rows[1];
    assert_eq!(fin.figures.figures.cth_j_per_c, Some(120.0));
    assert_eq!(fin.figures.fits, ["TO-220", "TO-247"]);
    assert!(shop.pots.files.is_empty() && shop.pots.rows.is_empty());
}

#[test]
fn a_folder_with_semicolons_and_renamed_columns() {
    let renamed = [("price each", "cost"), ("U zener", "vz_v"), ("I supply", "iq_max_a")];
    let options = ReadOptions {
        renamed: renamed.map(|(file, page)| (file.to_owned(), page.to_owned())).to_vec(),
        ..ReadOptions::default()
    };
    let shop = read_at(&data("shop-rules"), &options).clean();
    let line = &shop.resistors.rows[1];
    assert_eq!((line.price.at(1), line.price.at(20)), (0.07, 0.05));
    assert_eq!(shop.resistors.rows[2].figures.values_ohm.len(), 7);
    assert_eq!(shop.zeners.rows[0].figures.vz_v, 5.1);
    assert_eq!(shop.opamps.rows[3].figures.iq_max_a, 0.002);
    assert_eq!(shop.transistors.rows[0].package, None);
    assert!(shop.heatsinks.files.is_empty());
    // Two makers may have a part of the same name.
    assert_eq!(shop.transistors.rows[2].part, shop.transistors.rows[3].part);
    assert_eq!(shop.zeners.cell(0, 2, "vz_v").as_deref(), Some("5.1 V"));
}

#[test]
fn without_the_renaming_every_part_lacks_its_price() {
    let outcome = read_at(&data("shop-rules"), &ReadOptions::default());
    let missing: Vec<&str> = outcome.notices.iter().map(|n| n.code).collect();
    assert!(missing.iter().all(|code| *code == "column-missing"), "{missing:?}");
    let shop = outcome.shop.expect("blanks are no errors");
    assert!(shop.zeners.rows.is_empty());
    assert_eq!(shop.zeners.unproven[0].lacks, ["cost", "vz_v"]);
}

#[test]
fn pots_belong_to_an_adjustable_output() {
    let needs_pots = ReadOptions { needs_pots: true, ..ReadOptions::default() };
    let outcome = read_at(&data("fixed-12v"), &needs_pots);
    assert_eq!(outcome.only().code, "file-missing");
    assert_eq!(outcome.only().place.to_string(), "pots.csv");
    assert!(outcome.shop.is_none());

    let shop = read_at(&data("adjustable-5-15v"), &needs_pots).clean();
    let wide = &shop.pots.rows[2].figures;
    assert_eq!((wide.value_ohm, wide.end_ohm, wide.vmax_v), (10e3, 50.0, None));
    assert_eq!((wide.rating.full_power_to_c, wide.rating.zero_power_at_c), (40.0, 125.0));
    assert_eq!(lacks_for_fault(&shop.opamps.rows[1].figures), Some("isc_max_a"));
}

#[test]
fn other_files_must_be_there() {
    let empty = tempfile::tempdir().unwrap();
    let outcome = read_at(empty.path(), &ReadOptions::default());
    let missing: Vec<&str> = outcome.notices.iter().map(|n| n.place.file.as_str()).collect();
    let needed = [Kind::Zeners, Kind::Opamps, Kind::Transistors, Kind::Resistors];
    assert_eq!(missing, needed.map(Kind::file_name));
}
