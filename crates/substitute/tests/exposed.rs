//! How many replacements there are at once, counted and listed.

mod common;

use common::Scene;
use substitute::exposed::replacements_at_once;
use substitute::replace::{Until, replacements};

#[test]
fn the_count_is_that_of_the_list_without_further_parts() {
    let mut some = 0;
    for seed in 0..300 {
        let Some(scene) = Scene::new(seed) else { continue };
        scene.with_case(|case| {
            let listed = replacements(case, Until::Further(0)).list.len();
            assert_eq!(replacements_at_once(case), listed, "shop {seed}");
            some += usize::from(listed > 0);
        });
    }
    assert!(some > 20, "{some} designs with replacements");
}
