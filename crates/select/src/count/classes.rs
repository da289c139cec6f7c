//! Parts that no check tells apart: worked out once, counted with their number.
//!
//! A choice of divider and the checks of section 4.2 to 4.4 read a few figures of a biased zener, a
//! line and a pot. Where these agree to the last bit, so do the values that are chosen and every check,
//! whatever the amplifier.

use crate::problem::Ground;
use circuit::rail::Rail;
use circuit::reference::Bias;
use circuit::resistor::{LineAtRail, PotAtRail, Resistance};
use std::collections::BTreeMap;

/// One of some parts that count alike, and how many they are.
pub(super) struct Class<T> {
    pub one: T,
    pub many: u64,
}

/// Gathers parts whose keys are equal, in the order of the keys.
fn classes<T, K: Ord>(parts: impl Iterator<Item = T>, key: impl Fn(&T) -> K) -> Vec<Class<T>> {
    let mut found: BTreeMap<K, Class<T>> = BTreeMap::new();
    for one in parts {
        found.entry(key(&one)).or_insert(Class { one, many: 0 }).many += 1;
    }
    found.into_values().collect()
}

/// Biased zeners by what dividers and amplifiers read of them: their voltages.
///
/// They come in an order that has nothing to do with the voltages. What a reference costs to count
/// depends on its voltage, so a walk that has met a tenth of them has done about a tenth of the work.
pub(super) fn references(biases: impl Iterator<Item = Bias>) -> Vec<Class<Bias>> {
    let voltages = |b: &Bias| [b.vz_lo_v, b.vz_hi_v, b.vz_nominal_v].map(f64::to_bits);
    classes(biases, |bias| {
        let voltages = voltages(bias);
        // The multiplier of Fibonacci hashing (Knuth, TAOCP 3, section 6.4): 2^64 over the golden ratio.
        let mixed = voltages.iter().fold(0u64, |mixed, bits| {
            (mixed ^ bits).rotate_left(32).wrapping_mul(0x9E37_79B9_7F4A_7C15)
        });
        (mixed, voltages)
    })
}

/// Divider lines by all their figures.
pub(super) fn lines<'g>(ground: &'g Ground<'_>) -> Vec<Class<&'g LineAtRail>> {
    classes(ground.divider_lines.iter(), |line| {
        let values: Vec<_> = line.values.iter().map(resistance).collect();
        (values, line.allowed_power_w.to_bits(), line.allowed_voltage_v.to_bits())
    })
}

/// Pots by all their figures that can matter; a fixed output has one choice, no pot.
pub(super) fn pots(ground: &Ground<'_>) -> Vec<Class<Option<PotAtRail>>> {
    let rail = ground.rail();
    if !rail.is_adjustable() {
        return vec![Class { one: None, many: 1 }];
    }
    let pots = ground.pots.iter().map(|pot| Some(without_idle_ratings(pot, rail)));
    classes(pots, |pot| {
        pot.map(|PotAtRail { track, end_ohm, allowed_power_w, allowed_voltage_v }| {
            let ratings = (allowed_power_w.to_bits(), allowed_voltage_v.map(f64::to_bits));
            (resistance(&track), end_ohm.to_bits(), ratings)
        })
    })
}

fn resistance(r: &Resistance) -> [u64; 3] {
    [r.ohm, r.lo_ohm, r.hi_ohm].map(f64::to_bits)
}

/// The pot without those of its ratings that hold at the greatest divider current of the window.
///
/// Such a rating decides nothing. Every RI that may be chosen keeps the current in the window, so the
/// rating is used by less than 1 there: a pair that holds, holds without it, and where no pair holds
/// the greatest utilisation of each is that of another check. An amplifier that drives the current out
/// of the window fails `divider-window` first.
fn without_idle_ratings(pot: &PotAtRail, rail: &Rail) -> PotAtRail {
    // The window is compared at ten digits.
    let most_a = rail.divider.max_a * (1.0 + 1e-8);
    let most_v = most_a * pot.track.hi_ohm;
    let power_idle = most_a * most_v < pot.allowed_power_w;
    PotAtRail {
        allowed_power_w: if power_idle { f64::INFINITY } else { pot.allowed_power_w },
        allowed_voltage_v: pot.allowed_voltage_v.filter(|allowed| most_v >= *allowed),
        ..*pot
    }
}
