//! The random shops are worth testing with: rich and poor ones, every check at work, every way of
//! mounting and every time of a fault among the feasible.

use circuit::check::Check;
use circuit::pass::Duty;
use circuit::slot::Slot;
use std::collections::BTreeMap;
use twin::plain::{Mounting, each_combination};
use twin::shops::RandomShop;

const SHOPS: u64 = 2000;

/// What the random shops showed, over all their combinations.
#[derive(Default)]
struct Seen {
    feasible_shops: u64,
    first_to_fail: BTreeMap<Check, u64>,
    /// Checks that took more than half of what is allowed in a feasible candidate.
    over_half: BTreeMap<Check, u64>,
    /// Traits that occur in a feasible candidate or, where they say so, in any.
    traits: BTreeMap<&'static str, u64>,
}

/// Every trait that must occur.
const TRAITS: [&str; 22] = [
    "a fault of 1 ms",
    "a fault of 50 ms",
    "a fault of 0.5 s",
    "a fault of 2 s",
    "a fault of 5 s",
    "a fault of 20 s",
    "a fault for ever",
    "no fault",
    "adjustable output",
    "fixed output",
    "foldback",
    "heatsink of known heat capacity",
    "heatsink of unknown heat capacity",
    "hottest load below full load",
    "hot alone",
    "link",
    "own sink",
    "unmounted with known heat capacity",
    "unmounted with unknown heat capacity",
    "zero weight",
    "no value in the window (in any)",
    "heatsink does not fit (in any)",
];

fn see(seen: &mut Seen, seed: u64) {
    let shop = RandomShop::from_seed(seed);
    let problem = shop.problem();
    let traits = traits_of_rail(&shop);
    let mut is_feasible = false;
    each_combination(&problem, |combination| {
        let mut show = |name| *seen.traits.entry(name).or_insert(0) += 1;
        let Some(fitted) = &combination.fitted else {
            show("heatsink does not fit (in any)");
            return;
        };
        if fitted.divider.is_none() {
            show("no value in the window (in any)");
        }
        if let Some(failing) = fitted.findings.iter().find(|f| !f.holds()) {
            *seen.first_to_fail.entry(failing.check).or_insert(0) += 1;
            return;
        }
        is_feasible = true;
        traits.iter().copied().for_each(&mut show);
        show(mounting(&shop, combination.places[Slot::Pass as usize], fitted.mounting));
        if fitted.divider.is_some_and(|d| d.upper.is_link()) {
            show("link");
        }
        for finding in fitted.findings.iter().filter(|f| f.utilisation() > 0.5) {
            *seen.over_half.entry(finding.check).or_insert(0) += 1;
        }
    });
    seen.feasible_shops += u64::from(is_feasible);
}

fn traits_of_rail(shop: &RandomShop) -> Vec<&'static str> {
    let rail = &shop.rail;
    let duty = Duty::new(rail);
    let fault = match rail.fault.map(|f| f.lasts_s) {
        None => "no fault",
        Some(0.001) => "a fault of 1 ms",
        Some(0.05) => "a fault of 50 ms",
        Some(0.5) => "a fault of 0.5 s",
        Some(2.0) => "a fault of 2 s",
        Some(5.0) => "a fault of 5 s",
        Some(20.0) => "a fault of 20 s",
        Some(_) => "a fault for ever",
    };
    let output = if rail.is_adjustable() { "adjustable output" } else { "fixed output" };
    let weights = [shop.weights.cost, shop.weights.loss, shop.weights.stress];
    let sometimes = [
        (rail.fault.is_some_and(|f| f.limit_a < rail.load.max_a), "foldback"),
        (2.0 * duty.sag_v > duty.open_v, "hottest load below full load"),
        (rail.ambient.min_c > 25.0, "hot alone"),
        (weights.contains(&0.0), "zero weight"),
    ];
    let sometimes = sometimes.into_iter().filter_map(|(is, name)| is.then_some(name));
    [fault, output].into_iter().chain(sometimes).collect()
}

fn mounting(shop: &RandomShop, transistor: Option<usize>, mounting: Mounting) -> &'static str {
    let is_known = match mounting {
        Mounting::OwnSink => return "own sink",
        Mounting::Heatsink(h) => shop.heatsinks[h].figures.cth_j_per_c.is_some(),
        Mounting::Unmounted => {
            transistor.is_some_and(|t| shop.transistors[t].figures.cth_j_per_c.is_some())
        }
    };
    match (mounting, is_known) {
        (Mounting::Heatsink(_), true) => "heatsink of known heat capacity",
        (Mounting::Heatsink(_), false) => "heatsink of unknown heat capacity",
        (_, true) => "unmounted with known heat capacity",
        (_, false) => "unmounted with unknown heat capacity",
    }
}

#[test]
fn random_shops_put_every_check_to_work() {
    let mut seen = Seen::default();
    for seed in 0..SHOPS {
        see(&mut seen, seed);
    }
    // Shown where the test fails or is asked to speak.
    println!("{} of {SHOPS} shops have a candidate; {:#?}", seen.feasible_shops, seen.traits);
    for check in Check::ALL {
        let count = |counts: &BTreeMap<Check, u64>| counts.get(&check).copied().unwrap_or(0);
        let (fails, strains) = (count(&seen.first_to_fail), count(&seen.over_half));
        println!("{:18} {fails:8} fail first {strains:8} over half", check.name());
    }

    let fifth = SHOPS / 5;
    assert!(seen.feasible_shops >= fifth, "only {} shops are feasible", seen.feasible_shops);
    assert!(seen.feasible_shops <= SHOPS - fifth, "{} shops are feasible", seen.feasible_shops);
    for check in Check::ALL {
        let name = check.name();
        assert!(seen.first_to_fail.contains_key(&check), "{name} never fails first");
        assert!(seen.over_half.contains_key(&check), "{name} is never used more than half");
    }
    for name in TRAITS {
        assert!(seen.traits.contains_key(name), "never seen: {name}");
    }
}
