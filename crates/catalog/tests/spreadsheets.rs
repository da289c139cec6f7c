//! What spreadsheet programs and countries make of a catalog: read where that is no guess, told where it
//! is.

mod common;

use catalog::plausible::plausibility;
use catalog::{Kind, ReadOptions, Shop};
use common::{Outcome, read_file, read_with, sound, spoiled};
use notice::{Notice, Severity};

/// Zeners as a spreadsheet of a country with decimal commas writes them.
const COMMAS: &str = "part;maker;cost;vz_v;tol_pct;izt_a;zzt_ohm;iz_min_a;pd_w;tj_max_c;\
                      tc_min_mv_per_c;tc_max_mv_per_c;source\n\
                      ZA;Brindlow;\"1:0,09;100:0,07\";5,6;2;0,005;30;0,5m;0,5;175;-0,5;2,5;rev 3.1\n";

/// The same as a plain catalog.
const POINTS: &str = "part,maker,cost,vz_v,tol_pct,izt_a,zzt_ohm,iz_min_a,pd_w,tj_max_c,\
                      tc_min_mv_per_c,tc_max_mv_per_c,source\n\
                      ZA,Brindlow,1:0.09;100:0.07,5.6,2,0.005,30,0.5m,0.5,175,-0.5,2.5,rev 3.1\n";

fn zeners(bytes: &[u8]) -> Outcome {
    read_with(&[(Kind::Zeners, bytes)], &ReadOptions::default())
}

fn doubts(shop: &Shop) -> Vec<Notice> {
    let mut notices = Vec::new();
    plausibility(shop, &mut notices);
    notices.retain(|n| n.code != "column-gaps");
    notices
}

/// The one notice, which is a warning of this code, and the shop all the same.
#[track_caller]
fn warned(outcome: Outcome, code: &str) -> (Notice, Shop) {
    let notice = outcome.only().clone();
    assert_eq!((notice.code, notice.severity), (code, Severity::Warning), "{notice}");
    (notice, outcome.shop.expect("a warning stops nothing"))
}

#[test]
fn decimal_commas_are_read_where_no_figure_has_a_point() {
    let plain = read_file(Kind::Zeners, POINTS).clean();
    for text in [
        COMMAS.to_owned(),
        COMMAS
            .replace("\"1:0,09;100:0,07\"", "1:0,09|100:0,07")
            .replace(';', "\t")
            .replace('|', ";"),
    ] {
        let shop = read_file(Kind::Zeners, &text).clean();
        assert_eq!(shop.zeners.rows, plain.zeners.rows, "{text}");
        assert_eq!(doubts(&shop), [], "figures with commas are no doubt");
        assert_eq!(shop.zeners.cell(0, 2, "vz_v").as_deref(), Some("5.6"), "as others read it");
        assert_eq!(shop.zeners.cell(0, 2, "source").as_deref(), Some("rev 3.1"));
    }
}

#[test]
fn one_decimal_point_makes_every_comma_a_fault_that_names_it() {
    let outcome =
        read_file(Kind::Zeners, &COMMAS.replace(";175;", ";175.0;").replace("rev 3.1", "x"));
    assert_eq!(outcome.notices.len(), 8, "{:#?}", outcome.notices);
    let notice = outcome.notices.iter().find(|n| n.found.as_deref() == Some("5,6")).unwrap();
    assert_eq!((notice.code, notice.place.line), ("cell-notation", 2));
    assert!(notice.message.contains("decimal points too: `175.0` on line 2"), "{notice}");
    assert_eq!(notice.mend.as_deref(), Some("try `5.6`"));
    assert!(outcome.shop.is_none());
}

#[test]
fn a_comma_between_commas_is_never_a_decimal_one() {
    let outcome = read_file(Kind::Zeners, &spoiled(Kind::Zeners, "vz_v", "\"5,6\""));
    assert_eq!(outcome.only().code, "cell-notation");
}

#[test]
fn three_digits_behind_a_comma_are_no_guess() {
    for (cell, mends) in [("1,000", "`1,0`"), ("4,700", "`4,7`"), ("5,125 V", "`5,1250 V`")] {
        let outcome = read_file(Kind::Zeners, &COMMAS.replace("5,6", cell));
        let notice = outcome.only();
        assert_eq!((notice.code, notice.found.as_deref()), ("cell-thousands", Some(cell)));
        assert!(notice.mend.as_ref().unwrap().ends_with(mends), "{notice}");
        assert!(outcome.shop.is_none(), "an error");
    }
    let breaks = COMMAS.replace("100:0,07", "100:1,250");
    let outcome = read_file(Kind::Zeners, &breaks);
    assert_eq!(outcome.only().found.as_deref(), Some("1,250"), "in a list too");
}

#[test]
fn a_suggestion_keeps_to_the_mark_of_the_file() {
    let outcome = read_file(Kind::Zeners, &COMMAS.replace("5,6", "5,6 Volt"));
    assert_eq!(outcome.only().mend.as_deref(), Some("try `5,6`"));
}

#[test]
fn latin_1_is_read_and_told() {
    let text = sound(Kind::Zeners).replace("0.5m", "500@A").replace("Brindlow", "Br#ndlow");
    let bytes: Vec<u8> = text
        .bytes()
        .map(|b| match b {
            b'@' => 0xB5, // µ
            b'#' => 0xFC, // ü
            b => b,
        })
        .collect();
    let (notice, shop) = warned(zeners(&bytes), "file-encoding");
    assert!(notice.message.contains("Windows-1252"), "{notice}");
    assert_eq!(
        (notice.place.to_string().as_str(), notice.found.as_deref()),
        ("zeners.csv:2:6", Some("ü"))
    );
    let row = &shop.zeners.rows[0];
    assert_eq!((row.maker.as_str(), row.figures.iz_min_a), ("Bründlow", 500e-6));
    assert_eq!(shop.zeners.files[0].bytes, bytes, "the hash is that of the file");
    assert_eq!(shop.zeners.cell(0, 2, "iz_min_a").as_deref(), Some("500µA"));
}

#[test]
fn a_heading_in_latin_1_is_read() {
    let text =
        sound(Kind::Pots).replace("power_w\n", "power_w,gr@sse\n").replace("0.5\n", "0.5,9\n");
    let bytes: Vec<u8> = text.bytes().map(|b| if b == b'@' { 0xF6 } else { b }).collect();
    let (_, shop) =
        warned(read_with(&[(Kind::Pots, &bytes)], &ReadOptions::default()), "file-encoding");
    assert_eq!(shop.pots.cell(0, 2, "grösse").as_deref(), Some("9"));
}

#[test]
fn a_file_that_mixes_encodings_is_not_guessed_at() {
    let text = sound(Kind::Zeners).replace("0.5m", "500@A").replace("Brindlow", "Bründlow");
    let bytes: Vec<u8> = text.bytes().map(|b| if b == b'@' { 0xB5 } else { b }).collect();
    let outcome = zeners(&bytes);
    let notice = outcome.only();
    assert_eq!((notice.code, notice.severity), ("cell-not-utf8", Severity::Error));
    assert!(notice.mend.as_ref().unwrap().contains("500µA"), "{notice}");
}

#[test]
fn utf_16_tells_itself() {
    let text = sound(Kind::Zeners).replace("30,", "30 Ω,").replace(',', "\t");
    let mut bytes = vec![0xFF, 0xFE];
    bytes.extend(text.encode_utf16().flat_map(u16::to_le_bytes));
    let (_, shop) = warned(zeners(&bytes), "file-encoding");
    assert_eq!(shop.zeners.rows[0].figures.zzt_ohm, 30.0);
    bytes.pop();
    assert_eq!(zeners(&bytes).only().severity, Severity::Error, "half a character at the end");
}

#[test]
fn both_signs_of_ohm_and_of_micro_are_read() {
    for (ohm, micro) in [("\u{2126}", "\u{b5}"), ("\u{3a9}", "\u{3bc}")] {
        let text = sound(Kind::Zeners)
            .replace(",30,", &format!(",30 {ohm},"))
            .replace("0.5m", &format!("500{micro}A"));
        let shop = read_file(Kind::Zeners, &text).clean();
        let figures = &shop.zeners.rows[0].figures;
        assert_eq!((figures.zzt_ohm, figures.iz_min_a), (30.0, 500e-6));
    }
}

#[test]
fn a_first_line_that_tells_the_separator_is_understood() {
    for end in ["\n", "\r\n"] {
        let text = format!("\u{feff}sep=;{end}{}", sound(Kind::Pots).replace(',', ";"));
        let shop = read_file(Kind::Pots, &text).clean();
        assert_eq!((shop.pots.rows.len(), shop.pots.rows[0].line), (1, 3));
    }
}

#[test]
fn lines_that_end_in_carriage_returns_are_lines() {
    let text = format!("{}PB,Lodenby,x,10k,10,20,100,0.5\n", sound(Kind::Pots)).replace('\n', "\r");
    assert_eq!(read_file(Kind::Pots, &text).only().place.to_string(), "pots.csv:3:12");
}

#[test]
fn cleared_rows_are_passed_over() {
    let shop = read_file(Kind::Pots, &format!("{},,,,,,,\n, ,\n", sound(Kind::Pots))).clean();
    assert_eq!((shop.pots.rows.len(), shop.pots.broken), (1, 0));
}

/// Spoils one cell and expects one error that explains what a spreadsheet did.
#[track_caller]
fn explained(kind: Kind, column: &str, cell: &str, says: &str) {
    let outcome = read_file(kind, &spoiled(kind, column, cell));
    let notice = outcome.only();
    assert_eq!((notice.severity, notice.found.as_deref()), (Severity::Error, Some(cell)));
    assert!(notice.to_string().contains(says), "{notice}");
    assert!(notice.mend.is_some(), "{notice}");
    assert!(outcome.shop.is_none());
}

#[test]
fn dates_made_of_figures_and_lists_are_explained() {
    for cell in ["06-May", "2024-05-06", "01.05.2024", "01.05", "01. Mai", "1/5/2024"] {
        explained(Kind::Zeners, "vz_v", cell, "looks like a date");
    }
}

#[test]
fn times_made_of_points_and_price_breaks_are_explained() {
    for cell in ["01:40:00", "10:05", "1:42 AM"] {
        explained(Kind::Transistors, "hfe_min", cell, "time of day");
        explained(Kind::Transistors, "vbe_max_v", cell, "time of day");
        explained(Kind::Zeners, "cost", cell, "time of day");
    }
    let text = spoiled(Kind::Transistors, "hfe_min", "5:30");
    assert_eq!(read_file(Kind::Transistors, &text).clean().transistors.rows.len(), 1, "no time");
}

#[test]
fn failed_formulas_are_explained() {
    for cell in ["#N/A", "#DIV/0!", "####"] {
        explained(Kind::Zeners, "vz_v", cell, "formula failed");
    }
}

#[test]
fn thousands_parted_by_spaces_are_explained() {
    explained(Kind::Resistors, "max_ohm", "100\u{a0}000", "try `100000`");
}

#[test]
fn a_power_of_ten_is_read_with_a_warning() {
    let (notice, shop) = warned(
        read_file(Kind::Resistors, &spoiled(Kind::Resistors, "max_ohm", "1E+04")),
        "cell-spreadsheet",
    );
    assert_eq!(
        (notice.place.to_string().as_str(), notice.found.as_deref()),
        ("resistors.csv:2:41", Some("1E+04"))
    );
    assert!(notice.message.contains("read as 10000"), "{notice}");
    assert_eq!(shop.resistors.rows[0].figures.values_ohm.last(), Some(&10e3));
    for plain in ["1e4", "1e+4", "1E4"] {
        read_file(Kind::Resistors, &spoiled(Kind::Resistors, "max_ohm", plain)).clean();
    }
}

#[test]
fn names_that_a_spreadsheet_changed_are_told() {
    for (column, cell) in
        [("part", "1E+04"), ("part", "1-Mar"), ("part", "#NAME?"), ("maker", "2003-02-01")]
    {
        let outcome = read_file(Kind::Pots, &spoiled(Kind::Pots, column, cell));
        let (notice, shop) = warned(outcome, "cell-spreadsheet");
        assert_eq!(notice.found.as_deref(), Some(cell));
        assert!(notice.message.starts_with(&format!("`{column}`")), "{notice}");
        assert_eq!(shop.pots.rows.len(), 1);
    }
    let (notice, _) = warned(
        read_file(Kind::Heatsinks, &spoiled(Kind::Heatsinks, "fits", "TO-220;03-Mar")),
        "cell-spreadsheet",
    );
    assert_eq!(notice.found.as_deref(), Some("03-Mar"), "an item of a list");
    read_file(Kind::Pots, &spoiled(Kind::Pots, "part", "2N3055")).clean();
    read_file(Kind::Transistors, &spoiled(Kind::Transistors, "package", "TO-220")).clean();
}

#[test]
fn a_flood_of_warnings_hides_no_error() {
    let mut text = sound(Kind::Pots).to_owned();
    for n in 0..300 {
        text += &format!("P{n},Lodenby,1E+00,10k,10,20,100,0.5\n");
    }
    text += "PX,Lodenby,x,10k,10,20,100,0.5\n";
    let outcome = read_file(Kind::Pots, &text);
    assert!(outcome.notices.iter().any(|n| n.code == "cell-notation" && n.place.line == 303));
    assert!(outcome.shop.is_none());
}

#[test]
fn white_space_at_the_ends_of_cells_is_counted() {
    let text = sound(Kind::Pots).replace("PA,Lodenby,2.40", "PA ,Lodenby\u{a0}, 2.40");
    let shop = read_file(Kind::Pots, &text).clean();
    let row = &shop.pots.rows[0];
    assert_eq!((row.part.as_str(), row.maker.as_str(), row.price.at(1)), ("PA", "Lodenby", 2.4));
    let found = doubts(&shop);
    assert_eq!(found.len(), 1, "{found:#?}");
    assert_eq!((found[0].code, found[0].place.to_string().as_str()), ("cell-spaces", "pots.csv:2"));
    assert!(found[0].message.starts_with("3 cells"), "{}", found[0]);
}
