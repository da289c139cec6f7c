//! Single changes on random small shops, held against the plain way.

use circuit::check::Check;
use circuit::rail::Rail;
use reasons::change::{JUST_SHORT, Side, Threshold, changes};
use reasons::check_set::CheckSet;
use reasons::lever::{self, Follows, Lever};
use reasons::probe::Market;
use reasons::survey::Survey;
use select::problem::Problem;
use std::collections::BTreeSet;
use twin::plain::{Plain, each_combination};
use twin::shops::RandomShop;

struct ShopOf(RandomShop);

impl Market for ShopOf {
    fn with_problem<R>(&self, rail: &Rail, look: impl FnOnce(&Problem<'_>) -> R) -> R {
        look(&Problem { rail, ..self.0.problem() })
    }
}

fn admits(shop: &ShopOf, rail: &Rail) -> bool {
    shop.with_problem(rail, |problem| !Plain::new(problem).ranked.is_empty())
}

/// Rows may be chosen here whatever the rail says, but lines must keep a resistance.
fn moves_within(rail: &Rail) -> bool {
    rail.temperature_span_c() < 200.0
}

#[test]
fn exact_changes_admit_and_slightly_less_does_not_and_brackets_hold() {
    let (mut exact, mut brackets, mut untried) = (0, 0, 0);
    for seed in 0..160 {
        let shop = ShopOf(RandomShop::from_seed(seed));
        let rail = &shop.0.rail;
        if admits(&shop, rail) {
            continue;
        }
        let levers: Vec<&'static Lever> = lever::on_rail(rail, false).collect();
        let problem = shop.0.problem();
        let survey = Survey::new(&problem);
        let follows = Follows::default();
        let found = changes(&shop, follows, &levers, &survey).expect("small searches");
        for key in found {
            let name = key.lever.name();
            untried += usize::from(!key.was_tried);
            for change in key.changes {
                let at = |value| key.lever.moved(rail, value, follows);
                let told = format!("seed {seed} {name} {change:?}");
                if !moves_within(&at(change.value)) {
                    continue;
                }
                assert!(key.lever.bounds(rail, follows).contain(change.value), "{told}");
                assert!(admits(&shop, &at(change.value)), "{told}");
                if let Some(from) = key.from {
                    assert_eq!(change.side == Side::Above, change.value > from, "{told}");
                }
                match change.threshold {
                    Threshold::Exact { at: figure, short, .. } => {
                        exact += 1;
                        assert!(admits(&shop, &at(figure)), "{told}");
                        assert!(!admits(&shop, &at(short)), "{told}");
                        let step = (figure - short).abs();
                        let scale = figure.abs().max((figure - key.from.unwrap_or(0.0)).abs());
                        assert!(step > 0.0 && step <= 1.01 * JUST_SHORT * scale, "{told}");
                    }
                    Threshold::Bracket { short } => {
                        brackets += 1;
                        if short.is_finite() {
                            assert!(!admits(&shop, &at(short)), "{told}");
                        }
                    }
                }
            }
        }
    }
    assert!(exact > 50 && brackets > 5 && untried > 100, "{exact} {brackets} {untried}");
}

/// Moving a key leaves every check alone that it is not said to touch: the reason why keys that touch
/// too little need not be tried.
#[test]
fn a_key_touches_only_what_it_is_said_to_touch() {
    let mut moved = vec![0usize; lever::ALL.len()];
    for seed in 0..50 {
        let shop = ShopOf(RandomShop::from_seed(seed));
        let rail = &shop.0.rail;
        for (lever, moved) in lever::ALL.iter().zip(&mut moved) {
            let Some(from) = lever.value(rail).filter(|v| v.is_finite()) else { continue };
            let bounds = lever.bounds(rail, Follows::default());
            for value in [from * 0.8, from * 1.3] {
                let changed = lever.moved(rail, value, Follows::default());
                if !bounds.contain(value) || !moves_within(&changed) {
                    continue;
                }
                *moved += 1;
                let before = untouched(&shop, rail, lever.touches);
                let after = untouched(&shop, &changed, lever.touches);
                assert_eq!(before, after, "seed {seed}: {} from {from} to {value}", lever.name());
            }
        }
    }
    for (lever, moved) in lever::ALL.iter().zip(moved) {
        assert!(moved > 0 || lever.moves_eligibility, "{} was never moved", lever.name());
    }
}

/// What every combination finds for the checks that are not touched.
fn untouched(
    shop: &ShopOf,
    rail: &Rail,
    touched: CheckSet,
) -> BTreeSet<(Vec<Option<usize>>, CheckSet)> {
    let mut all = BTreeSet::new();
    shop.with_problem(rail, |problem| {
        each_combination(problem, |combination| {
            let Some(fitted) = &combination.fitted else { return };
            let failing = fitted.findings.iter().filter(|f| !f.holds()).map(|f| f.check);
            let kept: CheckSet = failing.filter(|&c: &Check| !touched.contains(c)).collect();
            all.insert((combination.places.to_vec(), kept));
        });
    });
    all
}
