//! The documented example of the crates as a library does what it says.

#[path = "../examples/rail_in_code.rs"]
#[allow(dead_code)] // its `main` prints what is looked at here
mod rail_in_code;

#[test]
fn a_rail_in_code_gets_a_shortlist_and_a_proof() {
    let story = rail_in_code::story().expect("something qualifies");
    let ranks = story.lines().filter(|line| line.contains(" a board, score ")).count();
    assert_eq!(ranks, 2, "{story}");
    for check in ["zener-bias", "soa-load", "output-error", "base-drive"] {
        assert!(story.lines().any(|line| line.starts_with(check)), "{check} in {story}");
    }
    assert!(!story.contains("NaN"), "{story}");
}
