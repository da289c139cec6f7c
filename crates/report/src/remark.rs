//! What no result checks, and the cautions that go with every result.

use circuit::rail::Rail;
use quantity::notation::engineering;

/// What is not checked for a rail, one clause each.
pub fn not_checked(rail: &Rail) -> Vec<String> {
    // The lowest collector voltage at which the gain still has to hold.
    let least_v = rail.feed.min_v - rail.highest_output_v();
    let mut list: Vec<String> = [
        "loop stability with an output capacitor",
        "ripple",
        "noise",
        "transients",
        "a load step onto a full reservoir",
        "the base current of the pass transistor in a lasting short",
    ]
    .map(str::to_owned)
    .into();
    list.push(format!(
        "the fall of the gain at a collector voltage (least: {}) below the one it is stated at",
        engineering(least_v, "V", 4)
    ));
    list.push("reverse base-emitter voltage when the output is held up".to_owned());
    if rail.fault.is_none() {
        list.push("a shorted output: the sheet gives no fault.limit_a".to_owned());
    }
    list
}

/// Said of an adjustable output only.
const OPEN_DIVIDER: &str =
    "If the pot's track breaks or RI comes open, an adjustable output rises to the feed.";

/// The cautions that apply to a rail, a sentence or two each.
pub fn cautions(rail: &Rail) -> Vec<&'static str> {
    let mut list = vec![
        "Feeds made from the mains, hot metal and charged reservoir capacitors injure people: leave \
         work on them to those licensed for it, and follow the local codes.",
        "A pass transistor that fails short puts the whole feed on the load.",
        "Nothing in this circuit limits the current into a short; something outside it has to.",
    ];
    list.extend(rail.is_adjustable().then_some(OPEN_DIVIDER));
    list.extend([
        "An output that stays up when the feed is gone (a large capacitor, a battery) reverses the \
         base-emitter junction: fit a diode from output to feed.",
        "The figures of the catalogs are yours: nothing is proven that the data sheets do not \
         promise.",
        "A shortlist is where a bench test begins, not a safety approval.",
    ]);
    list
}

#[cfg(test)]
mod tests {
    use super::*;
    use sheet::ShopFile;

    fn rail(output: &str, fault: &str) -> Rail {
        let text = format!(
            "[rail]\nname = \"bench\"\n[feed]\nmin_v = 18\nnominal_v = 21\nmax_v = 25\n\
             [output]\n{output}\n[load]\nmax_a = 0.5\n[ambient]\nmin_c = 0\nmax_c = 40\n{fault}"
        );
        let mut notices = Vec::new();
        let sheet = sheet::read("bench.toml", &text, &ShopFile::empty(), &[], &mut notices);
        sheet.unwrap_or_else(|| panic!("{notices:?}")).rail
    }

    const FIXED: &str = "voltage_v = 12\ntolerance_pct = 8";
    const ADJUSTABLE: &str = "adjust_from_v = 5\nadjust_to_v = 12";

    #[test]
    fn the_open_divider_is_a_caution_of_adjustable_outputs_alone() {
        assert!(!cautions(&rail(FIXED, "")).contains(&OPEN_DIVIDER));
        assert!(cautions(&rail(ADJUSTABLE, "")).contains(&OPEN_DIVIDER));
    }

    #[test]
    fn a_short_is_unchecked_where_the_sheet_gives_none() {
        let tells =
            |rail: &Rail| not_checked(rail).iter().any(|line| line.contains("fault.limit_a"));
        assert!(tells(&rail(FIXED, "")));
        assert!(!tells(&rail(FIXED, "[fault]\nlimit_a = 1")));
    }

    #[test]
    fn the_least_collector_voltage_is_that_of_the_lowest_feed_and_highest_output() {
        let tells = |rail: &Rail, v: &str| not_checked(rail).iter().any(|line| line.contains(v));
        assert!(tells(&rail(FIXED, ""), "(least: 5.04 V)"), "18 V less 12 V and 8 %");
        assert!(tells(&rail(ADJUSTABLE, ""), "(least: 6 V)"));
    }
}
