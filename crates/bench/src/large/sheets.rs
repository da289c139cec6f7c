//! The rail sheets for a large shop.

use super::{Hard, Order};

/// A sheet's file name, and its text but for the least load.
type Sheet = (&'static str, &'static str);

const SHEETS: [Sheet; 5] = [
    (
        "fixed-12v.toml",
        r#"# 12 V at 0.8 A behind a limiter that lets 1 A into a short and opens after 5 s.

[rail]
name = "Fixed 12 V"
boards = 25

[feed]
min_v = 18.0
nominal_v = 21.0
max_v = 25.0

[output]
voltage_v = 12.0
tolerance_pct = 5

[ambient]
min_c = -10
max_c = 45

[fault]
limit_a = 1.0
lasts_s = 5

[load]
max_a = 0.8
"#,
    ),
    (
        "low-5v.toml",
        r#"# 5 V at 0.15 A: parts that need no heatsink.

[rail]
name = "Low 5 V"
boards = 100

[feed]
min_v = 8.5
nominal_v = 9.5
max_v = 11.0

[output]
voltage_v = 5.0
tolerance_pct = 6

[ambient]
min_c = 0
max_c = 50

[fault]
limit_a = 0.3
lasts_s = 0.02

[load]
max_a = 0.15
"#,
    ),
    (
        "darlington-15v.toml",
        r#"# 15 V at 2 A: an amplifier of tens of milliamperes drives it only through a darlington.

[rail]
name = "Darlington 15 V"
boards = 10

[feed]
min_v = 21.0
nominal_v = 24.0
max_v = 28.0
max_loaded_v = 25.5

[output]
voltage_v = 15.0
tolerance_pct = 6

[ambient]
min_c = 0
max_c = 45

[fault]
limit_a = 2.5
lasts_s = 0.01

[thermal]
interface_c_per_w = 0.4         # a large tab with a thin pad

[load]
max_a = 2.0
"#,
    ),
    (
        "adjustable-5-15v.toml",
        r#"# 5 V to 15 V by a knob, 1 A anywhere in the range.

[rail]
name = "Adjustable 5 V to 15 V"
boards = 10

[feed]
min_v = 20.0
nominal_v = 23.0
max_v = 28.0
max_loaded_v = 25.0

[output]
adjust_from_v = 5.0
adjust_to_v = 15.0
low_stop_v = 2.4
ceiling_v = 24.0

[ambient]
min_c = 5
max_c = 40

[load]
max_a = 1.0
"#,
    ),
    (
        "impossible.toml",
        r#"# 12 V at 0.8 A with 0.6 V of headroom: each part fits alone, but no amplifier swings high enough
# to drive any transistor's base.

[rail]
name = "Impossible 12 V"
boards = 25

[feed]
min_v = 13.2
nominal_v = 15.0
max_v = 18.0

[output]
voltage_v = 12.0
tolerance_pct = 5

[ambient]
min_c = -10
max_c = 45

[load]
max_a = 0.8
"#,
    ),
];

/// All sheets: file name and text.
pub fn all(order: &Order) -> Vec<(&'static str, String)> {
    // Where nothing may hold, no load carries the leakage away.
    let least_a = match order.hard {
        Some(Hard::LastCheck | Hard::MixedReasons) => "0",
        _ => "0.005",
    };
    SHEETS.iter().map(|(name, text)| (*name, format!("{text}min_a = {least_a}\n"))).collect()
}
