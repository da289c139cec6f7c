//! Every replacement with the least change, as plain enumeration finds it on small random shops.

mod common;

use common::{Figures, Scene, plainly};
use std::collections::BTreeMap;
use substitute::replace::{MOST_FURTHER, Until, replacements};

/// Random shops that are looked at.
const SHOPS: u64 = 480;

#[test]
fn each_replacement_changes_as_little_as_any_way_to_put_it_in() {
    let (mut scenes, mut with_further, mut with_values, mut without) = (0, 0, 0, 0);
    for seed in 0..SHOPS {
        let Some(scene) = Scene::new(seed) else { continue };
        scenes += 1;
        let plain = plainly(&scene);
        scene.with_case(|case| {
            let found = replacements(case, Until::Further(MOST_FURTHER));
            assert!(found.nothing_else_helps(), "shop {seed}: the whole of a small shop");
            let mut by_label = BTreeMap::new();
            for replacement in &found.list {
                let label = std::array::from_fn(|slot| {
                    if scene.gone[slot] {
                        replacement.choices[slot]
                    } else {
                        substitute::built::Choice::Kept
                    }
                });
                by_label.insert(label, replacement);
            }
            let labels = |l: Vec<&[substitute::built::Choice; 7]>| format!("{l:?}");
            assert_eq!(
                labels(by_label.keys().collect()),
                labels(plain.keys().collect()),
                "shop {seed}: which parts can go in"
            );
            for (label, plain) in &plain {
                let found = by_label[label];
                assert_eq!(found.extent, plain.extent, "shop {seed}: {label:?}");
                let figures = Figures {
                    score: found.score,
                    cost: found.cost,
                    stress: found.stress,
                    loss: found.loss,
                };
                assert!(
                    figures.order(&plain.figures).is_eq(),
                    "shop {seed}: {label:?}\n{figures:?}\n{:?}",
                    plain.figures
                );
                with_further += usize::from(plain.extent.further_parts > 0);
                with_values += usize::from(plain.extent.values > 0);
            }
            let in_order = found.list.windows(2).all(|w| match w {
                [a, b] => a.extent <= b.extent,
                _ => true,
            });
            assert!(in_order, "shop {seed}: what changes less comes first");
            without += usize::from(plain.is_empty());
        });
    }
    // The scenes show what they are meant to show.
    assert!(scenes > 40, "{scenes} scenes");
    assert!(with_further > 20, "{with_further} with further parts");
    assert!(with_values > 20, "{with_values} with other values");
    assert!(without > 5, "{without} designs without any substitute");
}

#[test]
fn the_first_ones_are_the_first_of_all() {
    for seed in 0..SHOPS {
        let Some(scene) = Scene::new(seed) else { continue };
        scene.with_case(|case| {
            let all = replacements(case, Until::Further(MOST_FURTHER)).list;
            let some = replacements(case, Until::Found(1)).list;
            let first = |list: &[substitute::replace::Replacement]| list.first().cloned();
            assert_eq!(first(&some), first(&all), "shop {seed}");
        });
    }
}

#[test]
fn a_line_used_twice_is_replaced_by_one_line_before_two() {
    let mut seen = 0;
    for seed in 0..2 * SHOPS {
        let Some(scene) = Scene::new(seed) else { continue };
        if !scene.line_gone_twice {
            continue;
        }
        seen += 1;
        scene.with_case(|case| {
            for replacement in replacements(case, Until::Further(MOST_FURTHER)).list {
                let name = |slot: circuit::slot::Slot| match replacement.choices[slot as usize] {
                    substitute::built::Choice::Row(place) => case.ground.name(slot, place),
                    _ => panic!("shop {seed}: a line that is gone stays"),
                };
                let bias = name(circuit::slot::Slot::BiasLine);
                if bias != name(circuit::slot::Slot::DividerLine) {
                    assert!(replacement.extent.further_parts > 0, "shop {seed}");
                }
            }
        });
    }
    assert!(seen > 5, "{seen} lines used twice");
}
