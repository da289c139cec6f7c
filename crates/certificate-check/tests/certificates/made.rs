//! Certificates, made as `railwright shortlist --certificate` does.

use catalog::{Catalog, Kind, Price, ReadOptions, Row, Shop, Sink, Status, read_folder};
use eligible::{Eligible, eligible};
use report::certificate::{Asked, certificate};
use report::shortlist::{Files, Shortlist};
use select::certificate::certify;
use select::ranking::{NO_SPREAD, shortlist};
use serde_json::Value;
use sheet::{PartRules, Sheet, ShopFile};
use std::path::{Path, PathBuf};
use twin::shops::RandomShop;

/// The folder of the sample shop.
pub fn samples() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../../catalogs-sample")
}

/// Writes the certificate of the first `top` rows.
pub fn made(eligible: &Eligible<'_>, files: Files<'_>, top: usize) -> Vec<u8> {
    let problem = eligible.problem();
    let rows = shortlist(&problem, top, &NO_SPREAD).expect("the search ends");
    let claims = certify(&problem, &rows, top).expect("the list can be certified");
    let list = Shortlist::new(files, eligible, &problem, &rows, None).expect("rows have parts");
    let asked = Asked { by: None, skip_broken_rows: false, top };
    certificate(&list, &claims, asked).expect("claims can be written")
}

/// Runs a test on the rows that may be chosen for a sheet of a folder of catalogs.
pub fn with_sheet<T>(
    sheet: &Path,
    catalogs: &Path,
    test: impl Fn(&Eligible<'_>, Files<'_>) -> T,
) -> T {
    let mut notices = Vec::new();
    let bytes = |path: &Path| std::fs::read(path).unwrap_or_else(|e| panic!("{path:?}: {e}"));
    let text = |bytes: &[u8]| String::from_utf8(bytes.to_vec()).expect("files are in UTF-8");
    let (sheet_bytes, shop_bytes) = (bytes(sheet), bytes(&catalogs.join("shop.toml")));
    let shop_file = ShopFile::read("shop.toml", &text(&shop_bytes), &mut notices);
    let shop_file = shop_file.expect("the shop file is sound");
    let sheet = sheet::read("sheet", &text(&sheet_bytes), &shop_file, &[], &mut notices);
    let sheet = sheet.unwrap_or_else(|| panic!("{notices:?}"));
    let options = ReadOptions { renamed: shop_file.columns.clone(), ..ReadOptions::default() };
    let shop = read_folder(catalogs, &options, &mut notices).expect("the catalogs are sound");
    let rows = eligible(&sheet, &shop, false, &mut notices);
    test(&rows, Files { sheet: &sheet_bytes, shop: Some(("shop.toml", &shop_bytes)) })
}

/// The certificate of a sample sheet.
pub fn of_sample(name: &str, top: usize) -> Value {
    let sheet = samples().join("sheets").join(name);
    let text = with_sheet(&sheet, &samples(), |rows, files| made(rows, files, top));
    serde_json::from_slice(&text).expect("a certificate is JSON")
}

/// Runs a test on a random shop as if it had been read from files.
pub fn with_random_shop<T>(random: &RandomShop, test: impl FnOnce(&Eligible<'_>) -> T) -> T {
    fn rows<F: Clone, G>(
        rows: &[twin::shops::Row<F>],
        figures: impl Fn(usize, F) -> G,
        package: impl Fn(usize) -> Option<String>,
    ) -> Vec<Row<G>> {
        let row = |(place, row): (usize, &twin::shops::Row<F>)| Row {
            file: 0,
            line: place as u32 + 2,
            part: row.part.as_str().into(),
            maker: row.maker.as_str().into(),
            price: Price::single(row.price),
            stock: None,
            lead_weeks: None,
            status: Status::Active,
            package: package(place).map(Into::into),
            pinout: None,
            figures: figures(place, row.figures.clone()),
        };
        rows.iter().enumerate().map(row).collect()
    }
    fn plain<F: Clone>(of: &[twin::shops::Row<F>]) -> Vec<Row<F>> {
        rows(of, |_, figures| figures, |_| None)
    }
    let mut sheet = sheet::read("sheet", SHEET, &ShopFile::empty(), &[], &mut Vec::new())
        .expect("the sheet is sound");
    sheet.rail = random.rail.clone();
    let twin::shops::RandomShop { weights, .. } = random;
    sheet.weights =
        sheet::Weights { cost: weights.cost, loss: weights.loss, stress: weights.stress };
    // A pin of the heatsink slot rules out transistors without one.
    sheet.parts = PartRules {
        pins: std::array::from_fn(|slot| {
            let is_heatsink = slot == circuit::slot::Slot::Heatsink as usize;
            (is_heatsink && !random.may_go_unmounted).then(Vec::new)
        }),
        ..sheet.parts
    };
    let shop = Shop {
        zeners: Catalog::empty(Kind::Zeners),
        opamps: Catalog::empty(Kind::Opamps),
        transistors: Catalog::empty(Kind::Transistors),
        resistors: Catalog::empty(Kind::Resistors),
        pots: Catalog::empty(Kind::Pots),
        heatsinks: Catalog::empty(Kind::Heatsinks),
    };
    let sink = |place: usize, figures| Sink {
        figures,
        fits: random.fits[place].iter().map(|p| p.as_str().into()).collect(),
    };
    let (zeners, bias_lines) = (plain(&random.zeners), plain(&random.bias_lines));
    let (amplifiers, divider_lines) = (plain(&random.amplifiers), plain(&random.divider_lines));
    let pots = plain(&random.pots);
    let transistors = rows(&random.transistors, |_, t| t, |place| random.packages[place].clone());
    let heatsinks = rows(&random.heatsinks, sink, |_| None);
    let chooses = sheet.rail.chooses_heatsink();
    let sheet: &Sheet = &sheet;
    test(&Eligible {
        sheet,
        shop: &shop,
        zeners: zeners.iter().collect(),
        bias_lines: bias_lines.iter().collect(),
        amplifiers: amplifiers.iter().collect(),
        divider_lines: divider_lines.iter().collect(),
        pots: pots.iter().collect(),
        transistors: transistors.iter().collect(),
        heatsinks: heatsinks.iter().filter(|_| chooses).collect(),
        unproven: Vec::new(),
    })
}

/// A sheet that lends its rules to random rails.
const SHEET: &str = r#"
[rail]
name = "Random"
[feed]
min_v = 16
nominal_v = 18
max_v = 20
[output]
voltage_v = 12
tolerance_pct = 5
[load]
max_a = 0.1
[ambient]
min_c = 0
max_c = 40
"#;
