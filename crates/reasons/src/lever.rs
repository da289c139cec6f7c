//! Keys of a sheet that can be moved one at a time, and the checks that each may change.

use crate::check_set::CheckSet;
use circuit::check::Check;
use circuit::rail::{Fault, Output, Rail};
use quantity::notation::Unit;
use sheet::Sheet;
use sheet::bounds::{Bounds, End};
use sheet::keys::{self, Key, Kind};

/// Keys whose value follows another key because the sheet does not give them.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Follows {
    /// `feed.max_loaded_v` is `feed.max_v`.
    pub max_loaded: bool,
    /// `output.low_stop_v` is 0.75·`output.adjust_from_v`.
    pub low_stop: bool,
}

impl Follows {
    /// What follows in a sheet.
    pub fn of(sheet: &Sheet) -> Self {
        let assumed = |key: &Key| sheet.assumed.iter().any(|a| a.key == key.name);
        Self {
            max_loaded: assumed(&keys::FEED_MAX_LOADED_V),
            low_stop: assumed(&keys::OUTPUT_LOW_STOP_V),
        }
    }
}

/// A key that can be moved.
#[derive(Debug, Clone, Copy)]
pub struct Lever {
    /// The key's declaration; that of a field of the policy where `in_policy`.
    pub key: &'static Key,
    /// The key is a field of `derating`.
    pub in_policy: bool,
    get: fn(&Rail) -> Option<f64>,
    set: fn(&mut Rail, f64),
    /// Checks that may find something else when the key moves, also because values are chosen again.
    pub touches: CheckSet,
    /// Other rows may be chosen when the key moves.
    pub moves_eligibility: bool,
}

impl Lever {
    /// The key as a sheet writes it: `feed.min_v`, `derating.soa`.
    pub fn name(&self) -> String {
        if self.in_policy {
            format!("{}.{}", keys::DERATING.name, self.key.name)
        } else {
            self.key.name.to_owned()
        }
    }

    /// The value on a rail, in the unit of the key; None where the rail has none.
    pub fn value(&self, rail: &Rail) -> Option<f64> {
        (self.get)(rail).map(|figure| self.written(figure))
    }

    /// The rail with this value, in the unit of the key.
    pub fn moved(&self, rail: &Rail, value: f64, follows: Follows) -> Rail {
        let mut moved = rail.clone();
        (self.set)(&mut moved, self.key.scaled(value));
        if follows.max_loaded && self.key == &keys::FEED_MAX_V {
            moved.feed.max_loaded_v = moved.feed.max_v;
        }
        if follows.low_stop
            && self.key == &keys::OUTPUT_ADJUST_FROM_V
            && let keys::Fallback::Multiple(share, _) = keys::OUTPUT_LOW_STOP_V.fallback
            && let Output::Adjustable { from_v, low_stop_v, .. } = &mut moved.output
        {
            *low_stop_v = share * *from_v;
        }
        moved
    }

    fn written(&self, figure: f64) -> f64 {
        match self.key.unit {
            // Read as written/100; the last bits of the way back are taken off.
            Unit::Percent | Unit::PercentPerDegree => quantity::digits::rounded(figure * 100.0),
            _ => figure,
        }
    }

    /// What the key may be on this rail, other keys staying as they are.
    pub fn bounds(&self, rail: &Rail, follows: Follows) -> Bounds {
        let mut bounds = match self.key.kind {
            Kind::Number(bounds) | Kind::Duration(bounds) => bounds,
            _ => Bounds::ANY,
        };
        if self.in_policy {
            return bounds;
        }
        let value_of = |key: &Key| ALL.iter().find(|l| l.key == key).and_then(|l| l.value(rail));
        let follows_me = |key: &Key| {
            (follows.max_loaded && self.key == &keys::FEED_MAX_V && key == &keys::FEED_MAX_LOADED_V)
                || (follows.low_stop
                    && self.key == &keys::OUTPUT_ADJUST_FROM_V
                    && key == &keys::OUTPUT_LOW_STOP_V)
        };
        for rule in keys::ORDER_RULES {
            let end = |figure| if rule.strict { End::Open(figure) } else { End::Closed(figure) };
            if rule.low == self.key && !follows_me(rule.high) {
                bounds.high = narrower(bounds.high, value_of(rule.high).map(end), f64::min);
            }
            if rule.high == self.key && !follows_me(rule.low) {
                bounds.low = narrower(bounds.low, value_of(rule.low).map(end), f64::max);
            }
        }
        bounds
    }
}

/// The narrower of two ends of a range; `pick` takes the narrower figure.
fn narrower(a: Option<End>, b: Option<End>, pick: fn(f64, f64) -> f64) -> Option<End> {
    let figure = |end: End| match end {
        End::Closed(x) | End::Open(x) => x,
    };
    match (a, b) {
        (Some(a), Some(b)) => Some(if pick(figure(a), figure(b)) == figure(b) { b } else { a }),
        (a, b) => a.or(b),
    }
}

/// Checks that may change when RZ is chosen again, and with it the divider.
const VALUES: CheckSet = CheckSet::of(&[
    Check::ZenerBias,
    Check::ZenerPower,
    Check::ZenerJunction,
    Check::RzPower,
    Check::RzVoltage,
    Check::AmpInputLow,
    Check::AmpInputHigh,
])
.and(CheckSet::DIVIDER);

/// Checks that may change with the transistor's dissipation.
const HEAT: CheckSet = CheckSet::of(&[
    Check::PassPower,
    Check::PassJunction,
    Check::SoaLoad,
    Check::SoaFault,
    Check::FaultJunction,
    Check::AmpJunction,
]);

/// Checks that may change with the emitter current.
const EMITTER_CURRENT: CheckSet =
    CheckSet::of(&[Check::CollectorCurrent, Check::Dropout, Check::BaseDrive, Check::SwingHigh])
        .and(HEAT);

/// Checks that compare with the highest output.
const TOP: CheckSet = CheckSet::of(&[Check::Dropout, Check::SwingHigh]);

/// Checks that compare with the lowest output, or heat that grows as it falls.
const BOTTOM: CheckSet = CheckSet::of(&[Check::SwingLow]).and(HEAT);

const fn sheet_key(
    key: &'static Key,
    get: fn(&Rail) -> Option<f64>,
    set: fn(&mut Rail, f64),
    touches: CheckSet,
) -> Lever {
    Lever { key, in_policy: false, get, set, touches, moves_eligibility: false }
}

const fn fraction(
    field: usize,
    get: fn(&Rail) -> Option<f64>,
    set: fn(&mut Rail, f64),
    touches: CheckSet,
) -> Lever {
    Lever {
        key: &keys::POLICY_FIELDS[field].key,
        in_policy: true,
        get,
        set,
        touches,
        moves_eligibility: false,
    }
}

/// With other temperatures other lines keep a resistance; with another fault or sink other cells are
/// needed.
const fn with_other_rows(lever: Lever) -> Lever {
    Lever { moves_eligibility: true, ..lever }
}

const fn checks(checks: &[Check]) -> CheckSet {
    CheckSet::of(checks)
}

/// Every key that can be moved, in the order of the sheet.
pub static ALL: [Lever; 31] = [
    sheet_key(
        &keys::FEED_MIN_V,
        |r| Some(r.feed.min_v),
        |r, x| r.feed.min_v = x,
        VALUES.and(TOP).and(checks(&[Check::AmpSupplyLow])),
    ),
    sheet_key(
        &keys::FEED_NOMINAL_V,
        |r| Some(r.feed.nominal_v),
        |r, x| r.feed.nominal_v = x,
        VALUES,
    ),
    sheet_key(
        &keys::FEED_MAX_V,
        |r| Some(r.feed.max_v),
        |r, x| r.feed.max_v = x,
        VALUES.and(HEAT).and(checks(&[
            Check::AmpSupplyHigh,
            Check::CollectorVoltage,
            Check::AmpFault,
        ])),
    ),
    sheet_key(
        &keys::FEED_MAX_LOADED_V,
        |r| Some(r.feed.max_loaded_v),
        |r, x| r.feed.max_loaded_v = x,
        HEAT,
    ),
    sheet_key(
        &keys::OUTPUT_TOLERANCE_PCT,
        |r| match r.output {
            Output::Fixed { tolerance, .. } => Some(tolerance),
            Output::Adjustable { .. } => None,
        },
        |r, x| {
            if let Output::Fixed { tolerance, .. } = &mut r.output {
                *tolerance = x;
            }
        },
        CheckSet::DIVIDER.and(TOP).and(BOTTOM),
    ),
    sheet_key(
        &keys::OUTPUT_ADJUST_FROM_V,
        |r| match r.output {
            Output::Adjustable { from_v, .. } => Some(from_v),
            Output::Fixed { .. } => None,
        },
        |r, x| {
            if let Output::Adjustable { from_v, .. } = &mut r.output {
                *from_v = x;
            }
        },
        CheckSet::DIVIDER.and(BOTTOM),
    ),
    sheet_key(
        &keys::OUTPUT_ADJUST_TO_V,
        |r| match r.output {
            Output::Adjustable { to_v, .. } => Some(to_v),
            Output::Fixed { .. } => None,
        },
        |r, x| {
            if let Output::Adjustable { to_v, .. } = &mut r.output {
                *to_v = x;
            }
        },
        CheckSet::DIVIDER.and(TOP),
    ),
    sheet_key(
        &keys::OUTPUT_LOW_STOP_V,
        |r| match r.output {
            Output::Adjustable { low_stop_v, .. } => Some(low_stop_v),
            Output::Fixed { .. } => None,
        },
        |r, x| {
            if let Output::Adjustable { low_stop_v, .. } = &mut r.output {
                *low_stop_v = x;
            }
        },
        CheckSet::DIVIDER.and(BOTTOM),
    ),
    sheet_key(
        &keys::OUTPUT_CEILING_V,
        |r| match r.output {
            Output::Adjustable { ceiling_v, .. } => ceiling_v,
            Output::Fixed { .. } => None,
        },
        |r, x| {
            if let Output::Adjustable { ceiling_v, .. } = &mut r.output {
                *ceiling_v = Some(x);
            }
        },
        CheckSet::DIVIDER,
    ),
    sheet_key(&keys::LOAD_MAX_A, |r| Some(r.load.max_a), |r, x| r.load.max_a = x, EMITTER_CURRENT),
    sheet_key(
        &keys::LOAD_MIN_A,
        |r| Some(r.load.min_a),
        |r, x| r.load.min_a = x,
        checks(&[Check::NoLoad]),
    ),
    with_other_rows(sheet_key(
        &keys::AMBIENT_MIN_C,
        |r| Some(r.ambient.min_c),
        |r, x| r.ambient.min_c = x,
        VALUES.and(checks(&[Check::BaseDrive, Check::SwingHigh, Check::AmpJunction])),
    )),
    with_other_rows(sheet_key(
        &keys::AMBIENT_MAX_C,
        |r| Some(r.ambient.max_c),
        |r, x| r.ambient.max_c = x,
        VALUES.and(HEAT).and(checks(&[Check::AmpFault])),
    )),
    sheet_key(
        &keys::FAULT_LIMIT_A,
        |r| r.fault.map(|f| f.limit_a),
        |r, x| {
            if let Some(fault) = &mut r.fault {
                fault.limit_a = x;
            }
        },
        checks(&[Check::CollectorCurrent, Check::SoaFault, Check::FaultJunction]),
    ),
    with_other_rows(sheet_key(
        &keys::FAULT_LASTS_S,
        |r| r.fault.map(|f| f.lasts_s),
        |r, x| {
            if let Some(Fault { lasts_s, .. }) = &mut r.fault {
                *lasts_s = x;
            }
        },
        checks(&[Check::SoaFault, Check::FaultJunction, Check::AmpFault]),
    )),
    sheet_key(&keys::REFERENCE_BIAS_A, |r| r.bias_a, |r, x| r.bias_a = Some(x), VALUES),
    sheet_key(
        &keys::DIVIDER_MIN_A,
        |r| Some(r.divider.min_a),
        |r, x| r.divider.min_a = x,
        CheckSet::DIVIDER.and(checks(&[Check::NoLoad])),
    ),
    sheet_key(
        &keys::DIVIDER_MAX_A,
        |r| Some(r.divider.max_a),
        |r, x| r.divider.max_a = x,
        CheckSet::DIVIDER.and(EMITTER_CURRENT),
    ),
    sheet_key(
        &keys::DIVIDER_ALLOW_ERROR_V,
        |r| Some(r.divider.allow_error_v),
        |r, x| r.divider.allow_error_v = x,
        CheckSet::DIVIDER,
    ),
    sheet_key(
        &keys::DIVIDER_ALLOW_BIAS_A,
        |r| Some(r.divider.allow_bias_a),
        |r, x| r.divider.allow_bias_a = x,
        CheckSet::DIVIDER,
    ),
    with_other_rows(sheet_key(
        &keys::THERMAL_SINK_C_PER_W,
        |r| r.thermal.sink_c_per_w,
        |r, x| r.thermal.sink_c_per_w = Some(x),
        HEAT,
    )),
    fraction(
        0,
        |r| Some(r.derating.collector_voltage),
        |r, x| (keys::POLICY_FIELDS[0].set)(&mut r.derating, x),
        checks(&[Check::CollectorVoltage]),
    ),
    fraction(
        1,
        |r| Some(r.derating.collector_current),
        |r, x| (keys::POLICY_FIELDS[1].set)(&mut r.derating, x),
        checks(&[Check::CollectorCurrent]),
    ),
    fraction(
        2,
        |r| Some(r.derating.pass_power),
        |r, x| (keys::POLICY_FIELDS[2].set)(&mut r.derating, x),
        checks(&[Check::PassPower]),
    ),
    fraction(
        3,
        |r| Some(r.derating.soa),
        |r, x| (keys::POLICY_FIELDS[3].set)(&mut r.derating, x),
        checks(&[Check::SoaLoad]),
    ),
    fraction(
        4,
        |r| Some(r.derating.soa_fault),
        |r, x| (keys::POLICY_FIELDS[4].set)(&mut r.derating, x),
        checks(&[Check::SoaFault]),
    ),
    fraction(
        5,
        |r| Some(r.derating.amp_supply),
        |r, x| (keys::POLICY_FIELDS[5].set)(&mut r.derating, x),
        checks(&[Check::AmpSupplyHigh]),
    ),
    fraction(
        6,
        |r| Some(r.derating.amp_current),
        |r, x| (keys::POLICY_FIELDS[6].set)(&mut r.derating, x),
        checks(&[Check::BaseDrive, Check::LeakageSink]),
    ),
    fraction(
        7,
        |r| Some(r.derating.zener_power),
        |r, x| (keys::POLICY_FIELDS[7].set)(&mut r.derating, x),
        VALUES,
    ),
    fraction(
        8,
        |r| Some(r.derating.resistor_power),
        |r, x| (keys::POLICY_FIELDS[8].set)(&mut r.derating, x),
        VALUES,
    ),
    fraction(
        9,
        |r| Some(r.derating.resistor_voltage),
        |r, x| (keys::POLICY_FIELDS[9].set)(&mut r.derating, x),
        VALUES,
    ),
];

/// The keys that can be moved on this rail: those that have a value there, and a sink of the sheet's
/// own where none rules that out.
pub fn on_rail(rail: &Rail, heatsinks_are_pinned: bool) -> impl Iterator<Item = &'static Lever> {
    ALL.iter().filter(move |lever| {
        let brings_sink = lever.key == &keys::THERMAL_SINK_C_PER_W && !heatsinks_are_pinned;
        lever.value(rail).is_some() || brings_sink
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn each_fraction_reads_the_field_that_it_sets() {
        let shop = twin::shops::RandomShop::from_seed(1);
        for lever in &ALL {
            let Some(old) = lever.value(&shop.rail) else { continue };
            let moved = lever.moved(&shop.rail, old * 0.5, Follows::default());
            assert_eq!(
                lever.value(&moved),
                Some(quantity::digits::rounded(old * 0.5))
                    .filter(|_| lever.key.unit == Unit::Percent)
                    .or(Some(old * 0.5)),
                "{}",
                lever.name()
            );
        }
    }

    #[test]
    fn the_feed_stays_in_order() {
        let mut rail = twin::shops::RandomShop::from_seed(1).rail;
        rail.feed =
            circuit::rail::Feed { min_v: 10.0, nominal_v: 12.0, max_v: 15.0, max_loaded_v: 15.0 };
        let bounds = |key: &Key, follows| {
            let lever = ALL.iter().find(|l| l.key == key).expect("a lever");
            lever.bounds(&rail, follows)
        };
        let min = bounds(&keys::FEED_MIN_V, Follows::default());
        assert_eq!((min.low, min.high), (Some(End::Open(0.0)), Some(End::Closed(12.0))));
        let max = bounds(&keys::FEED_MAX_V, Follows::default());
        assert_eq!(max.low, Some(End::Closed(15.0)), "the loaded feed is given");
        let free = bounds(&keys::FEED_MAX_V, Follows { max_loaded: true, low_stop: false });
        assert_eq!(free.low, Some(End::Closed(12.0)));
    }
}
