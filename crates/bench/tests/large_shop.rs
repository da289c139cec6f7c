//! The generator of large shops makes what it promises: the same bytes always, catalogs that can be
//! read, sheets that parts can meet, and hard shops that are hard in the way that they are named for.

use bench::large::{Hard, Order, Sizes, catalog_bytes, rail_sheets, write_shop};
use bench::workload::{read_shop, take_sheet};
use catalog::{Kind, Shop, plausible};
use circuit::check::Check;
use eligible::eligible;
use num_bigint::BigUint;
use select::count::{Counts, LostTo, count};
use select::ranking::{NO_SPREAD, shortlist};
use sha2::{Digest, Sha256};

type Outcome = Result<(), Box<dyn std::error::Error>>;

fn plain(rows: usize) -> Order {
    Order { sizes: Sizes::alike(rows), seed: 1, hard: None }
}

fn hard(rows: usize, kind: Hard) -> Order {
    Order { hard: Some(kind), ..plain(rows) }
}

fn shop(order: &Order) -> Result<Shop, Box<dyn std::error::Error>> {
    let folder = tempfile::tempdir()?;
    write_shop(folder.path(), order)?;
    Ok(read_shop(folder.path())?)
}

/// Exact counts of a shop and one of its sheets.
fn counts(order: &Order, sheet_name: &str) -> Result<Counts, Box<dyn std::error::Error>> {
    let shop = shop(order)?;
    let sheets = rail_sheets(order);
    let text = sheets.iter().find(|(name, _)| *name == sheet_name).map(|(_, text)| text);
    let sheet = take_sheet(sheet_name, text.ok_or("no such sheet")?)?;
    let rows = eligible(&sheet, &shop, false, &mut Vec::new());
    Ok(count(&rows.problem(), &|_| ()))
}

/// A number of combinations as a share of all.
fn share(part: &BigUint, counts: &Counts) -> f64 {
    let thousandths = part * 1000u32 / &counts.covered;
    thousandths.to_string().parse().unwrap_or(f64::NAN) / 1000.0
}

fn share_lost(check: Check, counts: &Counts) -> f64 {
    counts.lost.get(&LostTo::Check(check)).map_or(0.0, |lost| share(lost, counts))
}

fn digest(order: &Order) -> Result<String, Box<dyn std::error::Error>> {
    let mut sha = Sha256::new();
    for kind in Kind::ALL {
        sha.update(catalog_bytes(kind, order)?);
    }
    for (_, text) in rail_sheets(order) {
        sha.update(text);
    }
    Ok(sha.finalize().iter().take(8).map(|byte| format!("{byte:02x}")).collect())
}

/// Published figures name a seed and sizes: the shop behind them must stay what it was, on every
/// machine. A wanted change of the generator changes these digests, and voids the published figures.
#[test]
fn a_seed_gives_the_same_bytes_for_ever() -> Outcome {
    assert_eq!(digest(&plain(200))?, "a19469ef2938e64a");
    assert_eq!(digest(&hard(200, Hard::Undominated))?, "0b4632372c8257bd");
    Ok(())
}

#[test]
fn another_seed_gives_another_shop() -> Outcome {
    let other = Order { seed: 2, ..plain(50) };
    for kind in [Kind::Zeners, Kind::Opamps, Kind::Transistors, Kind::Pots, Kind::Heatsinks] {
        assert_ne!(catalog_bytes(kind, &plain(50))?, catalog_bytes(kind, &other)?, "{kind:?}");
    }
    Ok(())
}

#[test]
fn a_larger_shop_begins_with_the_smaller_one() -> Outcome {
    for kind in Kind::ALL {
        let (small, large) = (catalog_bytes(kind, &plain(40))?, catalog_bytes(kind, &plain(400))?);
        assert!(large.starts_with(&small), "{kind:?}");
    }
    Ok(())
}

#[test]
fn catalogs_are_read_without_a_fault_and_look_plausible() -> Outcome {
    for order in [plain(3000)].into_iter().chain(Hard::ALL.map(|(_, kind)| hard(100, kind))) {
        let shop = shop(&order)?;
        let mut notices = Vec::new();
        plausible::plausibility(&shop, &mut notices);
        // Blank optional figures are wanted, and only counted.
        notices.retain(|notice| notice.code != "column-gaps");
        assert_eq!(notices.iter().map(ToString::to_string).collect::<Vec<_>>(), [""; 0]);
    }
    Ok(())
}

#[test]
fn a_plain_shop_has_gaps_and_rows_of_the_other_polarity() -> Outcome {
    let shop = shop(&plain(5000))?;
    let rows = 3.0 * 5000.0;
    let unproven =
        shop.zeners.unproven.len() + shop.opamps.unproven.len() + shop.transistors.unproven.len();
    let share_unproven = unproven as f64 / rows;
    assert!((0.002..0.008).contains(&share_unproven), "{share_unproven}");
    let share_pnp = shop.transistors.left_out.len() as f64 / 5000.0;
    assert!((0.05..0.11).contains(&share_pnp), "{share_pnp}");
    Ok(())
}

#[test]
fn parts_meet_every_sheet_but_the_impossible_one() -> Outcome {
    let order = plain(400);
    let shop = shop(&order)?;
    for (name, text) in rail_sheets(&order) {
        let sheet = take_sheet(name, &text)?;
        let rows = eligible(&sheet, &shop, false, &mut Vec::new());
        let list = shortlist(&rows.problem(), 10, &NO_SPREAD)?;
        let expected = if name == "impossible.toml" { 0 } else { 10 };
        assert_eq!(list.len(), expected, "{name}");
    }
    Ok(())
}

#[test]
fn ties_differ_by_name_alone() -> Outcome {
    let shop = shop(&hard(50, Hard::Ties))?;
    let zener = shop.zeners.rows.first().ok_or("no zener")?;
    assert!(shop.zeners.rows.iter().all(|z| z.figures == zener.figures && z.price == zener.price));
    let opamp = shop.opamps.rows.first().ok_or("no amplifier")?;
    assert!(shop.opamps.rows.iter().all(|a| a.figures == opamp.figures && a.price == opamp.price));
    let pass = shop.transistors.rows.first().ok_or("no transistor")?;
    assert!(
        shop.transistors.rows.iter().all(|t| t.figures == pass.figures && t.price == pass.price)
    );
    let sink = shop.heatsinks.rows.first().ok_or("no heatsink")?;
    assert!(shop.heatsinks.rows.iter().all(|h| h.figures == sink.figures && h.price == sink.price));
    Ok(())
}

/// No part is at least as good as another in price and in both figures that differ.
#[test]
fn nothing_is_dominated() -> Outcome {
    let shop = shop(&hard(200, Hard::Undominated))?;
    let better_is_less = |name: &str, parts: Vec<[f64; 3]>| {
        for (i, one) in parts.iter().enumerate() {
            for (j, other) in parts.iter().enumerate() {
                let beats = one.iter().zip(other).all(|(a, b)| a <= b);
                assert!(i == j || !beats, "{name} {i} beats {j}");
            }
        }
    };
    let zeners = &shop.zeners.rows;
    better_is_less(
        "zener",
        zeners.iter().map(|z| [z.price.at(1), -z.figures.pd_w, z.figures.izt_a]).collect(),
    );
    let opamps = &shop.opamps.rows;
    better_is_less(
        "amplifier",
        opamps.iter().map(|a| [a.price.at(1), -a.figures.vs_max_v, a.figures.iq_max_a]).collect(),
    );
    let passes = &shop.transistors.rows;
    better_is_less(
        "transistor",
        passes
            .iter()
            .map(|t| [t.price.at(1), -t.figures.pd_w, -t.figures.hfe_min.first().1])
            .collect(),
    );
    let sinks = &shop.heatsinks.rows;
    better_is_less(
        "heatsink",
        sinks
            .iter()
            .map(|h| {
                [
                    h.price.at(1),
                    h.figures.figures.rth_sa_c_per_w,
                    -h.figures.figures.cth_j_per_c.unwrap_or(0.0),
                ]
            })
            .collect(),
    );
    Ok(())
}

#[test]
fn in_last_check_shops_most_is_lost_to_no_load_and_nothing_holds() -> Outcome {
    for sheet in ["fixed-12v.toml", "low-5v.toml", "darlington-15v.toml"] {
        let counts = counts(&hard(40, Hard::LastCheck), sheet)?;
        assert_eq!(counts.feasible, BigUint::ZERO, "{sheet}");
        let lost = share_lost(Check::NoLoad, &counts);
        assert!(lost > 0.6, "{sheet}: {lost}");
    }
    Ok(())
}

#[test]
fn in_mixed_shops_two_checks_share_the_blame() -> Outcome {
    for sheet in ["fixed-12v.toml", "low-5v.toml", "darlington-15v.toml"] {
        let counts = counts(&hard(40, Hard::MixedReasons), sheet)?;
        assert_eq!(counts.feasible, BigUint::ZERO, "{sheet}");
        for check in [Check::BaseDrive, Check::NoLoad] {
            let lost = share_lost(check, &counts);
            assert!(lost > 0.25, "{sheet}, {}: {lost}", check.name());
        }
    }
    Ok(())
}

#[test]
fn in_one_check_shops_output_error_decides() -> Outcome {
    for sheet in ["fixed-12v.toml", "low-5v.toml"] {
        let counts = counts(&hard(40, Hard::OneCheck), sheet)?;
        let (holds, lost) =
            (share(&counts.feasible, &counts), share_lost(Check::OutputError, &counts));
        assert!(
            holds > 0.1 && lost > 0.1 && holds + lost > 0.9,
            "{sheet}: {holds} hold, {lost} lost"
        );
    }
    Ok(())
}
