//! Railwright as a library: a shop and a rail sheet made in code, a shortlist, and its proof.
//!
//! ```text
//! cargo run -p report --example rail_in_code
//! ```

use catalog::{Catalog, Kind, Price, Row, Shop, Sink, Status};
use circuit::parts::*;
use quantity::points::Points;
use quantity::preferred::Series;
use select::ranking::{NO_SPREAD, shortlist};
use std::error::Error;
use std::fmt::Write as _;

fn main() -> Result<(), Box<dyn Error>> {
    print!("{}", story()?);
    Ok(())
}

/// What is wanted, as a rail sheet says it. `sheet::read` checks it like the text of a file.
const WANTED: &str = "
[rail]
name = 'Logger 5 V'
[feed]
min_v = 9
nominal_v = 11
max_v = 14
[output]
voltage_v = 5
tolerance_pct = 4
[load]
max_a = 0.3
[ambient]
min_c = 0
max_c = 40
";

/// The best candidates, and every check of the first.
pub fn story() -> Result<String, Box<dyn Error>> {
    // Faults never print themselves: they are gathered, and the caller tells them.
    let mut notices = Vec::new();
    let no_shop_file = sheet::ShopFile::empty();
    let sheet = sheet::read("logger", WANTED, &no_shop_file, &[], &mut notices);
    let (Some(sheet), []) = (sheet, notices.as_slice()) else {
        return Err(format!("the sheet is at fault: {notices:?}").into());
    };

    // Which parts may be chosen for this sheet, and the problem that the search solves.
    let shop = shop()?;
    let eligible = eligible::eligible(&sheet, &shop, false, &mut notices);
    let problem = eligible.problem();
    let best = shortlist(&problem, 3, &NO_SPREAD)?;

    let mut text = String::new();
    for (rank, candidate) in (1..).zip(&best) {
        let [rz, cost] = [candidate.rz.ohm, candidate.cost];
        writeln!(text, "{rank}: RZ {rz} ohm, {cost:.2} a board, score {:.4}", candidate.score)?;
    }
    let first = best.first().ok_or("nothing qualifies")?;
    let proof = first.prove(&problem).ok_or("a candidate of another problem")?;
    for finding in &proof.findings {
        writeln!(
            text,
            "{:<18} asked {:>9.4} allowed {:>9.4} {}: {:.1} %",
            finding.check.name(),
            finding.asked,
            finding.allowed,
            finding.check.unit(),
            100.0 * finding.utilisation()
        )?;
    }
    Ok(text)
}

/// A shop with one part of each kind, but two transistors.
fn shop() -> Result<Shop, Box<dyn Error>> {
    let rating = ResistorRating { power_w: 0.25, full_power_to_c: 70.0, zero_power_at_c: 155.0 };
    let line = ResistorLine {
        values_ohm: Series::E24.between(10.0, 1e6),
        tol: 0.01,
        tempco_per_c: 50e-6,
        rating,
        vmax_v: 250.0,
    };
    let sink = Sink {
        figures: Heatsink { rth_sa_c_per_w: 8.0, cth_j_per_c: None },
        fits: vec!["TO-220".into()],
    };
    let small = transistor(&[(0.1, 60.0), (1.0, 40.0), (4.0, 15.0)])?;
    let strong = transistor(&[(0.1, 120.0), (1.0, 90.0), (4.0, 40.0)])?;
    Ok(Shop {
        zeners: catalog(Kind::Zeners, vec![("reference 2.5 V", 0.22, REFERENCE)]),
        opamps: catalog(Kind::Opamps, vec![("single supply", 0.40, AMPLIFIER)]),
        transistors: catalog(
            Kind::Transistors,
            vec![("small", 0.65, small), ("strong", 0.90, strong)],
        ),
        resistors: catalog(Kind::Resistors, vec![("metal film", 0.02, line)]),
        pots: Catalog::empty(Kind::Pots),
        heatsinks: catalog(Kind::Heatsinks, vec![("8 degrees a watt", 0.95, sink)]),
    })
}

/// A catalog of parts of one kind, each with its name and price.
fn catalog<T>(kind: Kind, parts: Vec<(&str, f64, T)>) -> Catalog<T> {
    let row = |(line, (part, price, figures)): (u32, (&str, f64, T))| Row {
        // Where the part would stand in a file, for messages.
        file: 0,
        line,
        part: part.into(),
        maker: "Example Works".into(),
        price: Price::single(price),
        stock: None,
        lead_weeks: None,
        status: Status::Active,
        package: Some("TO-220".into()),
        pinout: None,
        figures,
    };
    Catalog { rows: (2..).zip(parts).map(row).collect(), ..Catalog::empty(kind) }
}

const REFERENCE: Zener = Zener {
    vz_v: 2.5,
    tol: 0.01,
    izt_a: 1e-3,
    zzt_ohm: 0.6,
    iz_min_a: 0.5e-3,
    pd_w: 0.5,
    tj_max_c: 150.0,
    tc_min_v_per_c: -0.2e-3,
    tc_max_v_per_c: 0.2e-3,
    zzk_ohm: None,
    izk_a: None,
    vz_at: MeasuredAt::Pulse,
};

const AMPLIFIER: Amplifier = Amplifier {
    vs_min_v: 4.0,
    vs_max_v: 32.0,
    vcm_low_v: 0.0,
    vcm_high_v: 2.0,
    swing_low_v: 0.05,
    swing_high_v: 2.0,
    iout_a: 15e-3,
    vos_max_v: 5e-3,
    ib_max_a: 200e-9,
    iq_max_a: 1.5e-3,
    tj_max_c: 150.0,
    rth_ja_c_per_w: 100.0,
    isc_max_a: Some(50e-3),
    isink_a: None,
    gain_min_db: Some(84.0),
    psrr_min_db: Some(65.0),
    cmrr_min_db: Some(65.0),
    vs_test_v: Some(5.0),
};

/// A transistor of 60 V and 4 A with this least gain over the collector current.
fn transistor(gain: &[(f64, f64)]) -> Result<Transistor, Box<dyn Error>> {
    let points = |points: &[(f64, f64)]| Points::new(points).map_err(|e| format!("{e:?}"));
    Ok(Transistor {
        junctions: 1,
        vceo_v: 60.0,
        ic_max_a: 4.0,
        pd_w: 40.0,
        tj_max_c: 150.0,
        rth_jc_c_per_w: 3.125,
        hfe_min: points(gain)?,
        vbe_max_v: OverCurrent::Points(points(&[(0.1, 0.9), (1.0, 1.1), (4.0, 1.8)])?),
        vce_sat_v: OverCurrent::Number(1.5),
        soa_dc: points(&[(10.0, 4.0), (40.0, 1.0), (60.0, 0.3)])?,
        soa_pulse: PulseCurves::default(),
        rth_ja_c_per_w: Some(62.5),
        cth_j_per_c: None,
        hfe_tempco_per_c: None,
        ileak_max_a: None,
    })
}
