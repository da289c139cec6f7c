//! Certificates that must be accepted.

use crate::made::{made, samples, with_random_shop, with_sheet};
use certificate_check::files::prove_files;
use certificate_check::prove;
use report::shortlist::Files;
use twin::shops::RandomShop;

#[test]
fn those_of_the_sample_sheets() {
    let mut sheets = 0;
    for entry in std::fs::read_dir(samples().join("sheets")).expect("there are sample sheets") {
        let sheet = entry.expect("the folder can be read").path();
        let is_impossible =
            sheet.file_name().is_some_and(|n| n.to_string_lossy().starts_with("imp"));
        for top in [1, 10, 200] {
            let text = with_sheet(&sheet, &samples(), |rows, files| made(rows, files, top));
            let rows = prove_files(&text, &sheet, &samples()).unwrap_or_else(|e| panic!("{e}"));
            assert_eq!(rows.is_empty(), is_impossible, "{sheet:?}");
            assert!(rows.len() <= top);
        }
        sheets += 1;
    }
    assert!(sheets >= 7);
}

#[test]
fn those_of_random_shops_with_full_and_with_short_lists() {
    let (mut full, mut short, mut empty) = (0, 0, 0);
    for seed in 0..1_500 {
        let shop = RandomShop::from_seed(seed);
        let top = 1 + (seed % 9) as usize;
        with_random_shop(&shop, |rows| {
            let files = Files { sheet: b"", shop: None };
            let text = made(rows, files, top);
            let listed = prove(&text, rows).unwrap_or_else(|e| panic!("seed {seed}: {e}"));
            match listed.len() {
                0 => empty += 1,
                n if n == top => full += 1,
                _ => short += 1,
            }
        });
    }
    assert!(full > 100 && short > 20 && empty > 100, "{full} full, {short} short, {empty} empty");
}
