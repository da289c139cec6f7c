//! Catalogs to begin with: every column in the header row, and one invented part.

use crate::kind::Kind;

/// The cells of the example of a kind; columns that are not named stay blank.
fn example(kind: Kind) -> &'static [(&'static str, &'static str)] {
    match kind {
        Kind::Zeners => &[
            ("part", "EX-REF25"),
            ("cost", "1:0.30;100:0.22"),
            ("package", "TO-92"),
            ("vz_v", "2.5"),
            ("tol_pct", "1"),
            ("izt_a", "1m"),
            ("zzt_ohm", "0.6"),
            ("iz_min_a", "0.5m"),
            ("pd_w", "0.5"),
            ("tj_max_c", "150"),
            ("tc_min_mv_per_c", "-0.2"),
            ("tc_max_mv_per_c", "0.2"),
            ("vz_at", "pulse"),
        ],
        Kind::Opamps => &[
            ("part", "EX-AMP1"),
            ("cost", "0.40"),
            ("package", "DIP-8"),
            ("pinout", "single-std"),
            ("vs_min_v", "4"),
            ("vs_max_v", "32"),
            ("vcm_low_v", "0"),
            ("vcm_high_v", "2"),
            ("swing_low_v", "50m"),
            ("swing_high_v", "2"),
            ("iout_a", "15m"),
            ("vos_max_v", "5m"),
            ("ib_max_a", "200n"),
            ("iq_max_a", "1.5m"),
            ("isc_max_a", "50m"),
            ("gain_min_db", "84"),
            ("psrr_min_db", "65"),
            ("cmrr_min_db", "65"),
            ("vs_test_v", "5"),
            ("tj_max_c", "150"),
            ("rth_ja_c_per_w", "100"),
        ],
        Kind::Transistors => &[
            ("part", "EX-NPN4"),
            ("cost", "1:0.80;25:0.65"),
            ("package", "TO-220"),
            ("pinout", "B-C-E"),
            ("polarity", "npn"),
            ("junctions", "1"),
            ("vceo_v", "60"),
            ("ic_max_a", "4"),
            ("pd_w", "40"),
            ("tj_max_c", "150"),
            ("rth_jc_c_per_w", "3.125"),
            ("rth_ja_c_per_w", "62.5"),
            ("hfe_min", "0.1:60;1:40;4:15"),
            ("vbe_max_v", "0.1:0.9;1:1.1;4:1.8"),
            ("vce_sat_v", "0.1:0.3;1:0.6;4:1.5"),
            ("soa_dc", "10:4;40:1;60:0.3"),
            ("hfe_tempco_pct_per_c", "0.5"),
            ("ileak_max_a", "0.2m"),
        ],
        Kind::Resistors => &[
            ("part", "EX-MF"),
            ("cost", "0.02"),
            ("series", "E24"),
            ("tol_pct", "1"),
            ("tempco_ppm", "50"),
            ("power_w", "0.25"),
            ("vmax_v", "250"),
            ("min_ohm", "10"),
            ("max_ohm", "1M"),
        ],
        Kind::Pots => &[
            ("part", "EX-POT10K"),
            ("cost", "2.10"),
            ("value_ohm", "10k"),
            ("tol_pct", "10"),
            ("end_ohm", "10"),
            ("tempco_ppm", "100"),
            ("power_w", "0.5"),
        ],
        Kind::Heatsinks => &[
            ("part", "EX-SINK8"),
            ("cost", "0.95"),
            ("rth_sa_c_per_w", "8"),
            ("cth_j_per_c", "40"),
            ("fits", "TO-220;TO-247"),
        ],
    }
}

/// What every example says besides.
const EVERY: [(&str, &str); 5] = [
    ("maker", "Example Works"),
    ("stock", "100"),
    ("lead_weeks", "2"),
    ("status", "active"),
    ("notes", "invented: put your own parts in its place"),
];

/// A catalog file of a kind with all its columns and the row of an invented part.
pub fn starting_file(kind: Kind) -> String {
    let names: Vec<&str> = kind.columns().iter().map(|column| column.name).collect();
    let cell = |name: &&str| {
        let cells = example(kind).iter().chain(&EVERY);
        cells.clone().find(|(column, _)| column == name).map_or("", |(_, cell)| *cell)
    };
    let cells: Vec<&str> = names.iter().map(cell).collect();
    format!("{}\n{}\n", names.join(","), cells.join(","))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::column::Need;
    use crate::plausible::plausibility;
    use crate::{ReadOptions, read_folder};

    #[test]
    fn examples_name_columns_that_are_there_and_give_what_is_needed() {
        for kind in Kind::ALL {
            let given = || example(kind).iter().chain(&EVERY);
            for (name, cell) in given() {
                assert!(kind.column(name).is_some(), "{} has no {name}", kind.file_name());
                assert!(!cell.contains([',', '"']), "a cell that would need quotes: {cell}");
            }
            for column in kind.columns() {
                let is_needed = matches!(column.need, Need::Always | Need::ToProve);
                let is_given = given().any(|(name, _)| *name == column.name);
                assert!(is_given || !is_needed, "{} lacks {}", kind.file_name(), column.name);
            }
        }
    }

    #[test]
    fn nothing_is_wrong_or_doubtful_with_them() {
        let folder = tempfile::tempdir().unwrap();
        for kind in Kind::ALL {
            std::fs::write(folder.path().join(kind.file_name()), starting_file(kind)).unwrap();
        }
        let mut notices = Vec::new();
        let options = ReadOptions { needs_pots: true, needs_heatsinks: true, ..Default::default() };
        let shop = read_folder(folder.path(), &options, &mut notices).expect("a sound shop");
        plausibility(&shop, &mut notices);
        notices.retain(|notice| notice.code != "column-gaps");
        assert_eq!(notices, []);
        assert_eq!(shop.unproven().count(), 0);
    }
}
