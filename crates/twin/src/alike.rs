//! Holds a list or counts of another search against those of the plain way, and tells the first
//! difference.

use crate::plain::{Counts, PlainCandidate};
use circuit::slot::Slot;
use std::collections::BTreeMap;

/// A candidate of another search: places by slot, values (RZ, RF or RX, RI) in Ω, cost, loss, stress.
pub type Listed = ([Option<usize>; Slot::COUNT], [f64; 3], f64, f64, f64);

/// Values of resistors are the same figures of the same lines.
const VALUE_ROOM: f64 = 1e-12;

/// Cost, loss and stress may be summed in another order.
const FIGURE_ROOM: f64 = 1e-9;

/// Checks that another list holds the same candidates in the same order as `plain`.
///
/// # Errors
/// Tells the first row that differs, and in what.
pub fn ranks_alike(
    plain: &[PlainCandidate],
    other: impl Iterator<Item = Listed>,
) -> Result<(), String> {
    let other: Vec<Listed> = other.collect();
    for (i, (mine, theirs)) in plain.iter().zip(&other).enumerate() {
        let differences = row_differences(mine, theirs);
        if !differences.is_empty() {
            return Err(format!(
                "rank {} differs (plain | other):\n  {}\n  plain {mine:?}\n  other {theirs:?}",
                i + 1,
                differences.join("\n  ")
            ));
        }
    }
    if plain.len() != other.len() {
        let next = plain.len().min(other.len());
        return Err(format!(
            "the plain list holds {} candidates, the other {}; the first that one lacks:\n  \
             plain {:?}\n  other {:?}",
            plain.len(),
            other.len(),
            plain.get(next),
            other.get(next)
        ));
    }
    Ok(())
}

/// Checks that another search counted the same.
///
/// # Errors
/// Tells every figure that differs.
pub fn counts_alike(
    plain: &Counts,
    covered: u64,
    feasible: u64,
    lost: &BTreeMap<String, u64>,
) -> Result<(), String> {
    let mut differences = Vec::new();
    let mut hold = |what: &str, mine: u64, theirs: u64| {
        if mine != theirs {
            differences.push(format!("{what}: plain {mine}, other {theirs}"));
        }
    };
    hold("covered", plain.covered, covered);
    hold("feasible", plain.feasible, feasible);
    let causes: BTreeMap<&String, ()> =
        plain.lost.keys().chain(lost.keys()).map(|cause| (cause, ())).collect();
    for cause in causes.into_keys() {
        let of = |counts: &BTreeMap<String, u64>| counts.get(cause).copied().unwrap_or(0);
        hold(&format!("lost to {cause}"), of(&plain.lost), of(lost));
    }
    if differences.is_empty() { Ok(()) } else { Err(differences.join("\n")) }
}

fn row_differences(mine: &PlainCandidate, theirs: &Listed) -> Vec<String> {
    let (places, values, cost, loss, stress) = theirs;
    let mut differences = Vec::new();
    for slot in Slot::ALL {
        let (m, t) = (mine.places[slot as usize], places[slot as usize]);
        if m != t {
            differences.push(format!("{}: place {} | {}", slot.name(), place(m), place(t)));
        }
    }
    let figures = [
        ("RZ", mine.rz_ohm, values[0], VALUE_ROOM),
        ("RF or RX", mine.upper_ohm, values[1], VALUE_ROOM),
        ("RI", mine.ri_ohm, values[2], VALUE_ROOM),
        ("cost", mine.cost, *cost, FIGURE_ROOM),
        ("loss", mine.loss, *loss, FIGURE_ROOM),
        ("stress", mine.stress, *stress, FIGURE_ROOM),
    ];
    for (what, m, t, room) in figures {
        if !is_near(m, t, room) {
            differences.push(format!("{what}: {m} | {t}"));
        }
    }
    differences
}

/// The same, or within `room` of the larger; false for NaN.
fn is_near(a: f64, b: f64, room: f64) -> bool {
    a == b || (a - b).abs() <= room * a.abs().max(b.abs())
}

fn place(place: Option<usize>) -> String {
    place.map_or_else(|| "none".to_owned(), |p| p.to_string())
}

#[cfg(test)]
mod tests {
    use super::*;

    const CANDIDATE: PlainCandidate = PlainCandidate {
        places: [Some(0), Some(1), Some(0), Some(1), None, Some(2), None],
        rz_ohm: 680.0,
        upper_ohm: 0.0,
        ri_ohm: 4700.0,
        cost: 3.3,
        loss: 0.8,
        stress: 0.9,
        score: 2.376,
    };

    fn listed(c: &PlainCandidate) -> Listed {
        (c.places, [c.rz_ohm, c.upper_ohm, c.ri_ohm], c.cost, c.loss, c.stress)
    }

    #[test]
    fn the_same_list_is_alike_up_to_rounding() {
        let mut other = listed(&CANDIDATE);
        other.2 *= 1.0 + 1e-10;
        assert_eq!(ranks_alike(&[CANDIDATE], [other].into_iter()), Ok(()));
    }

    #[test]
    fn a_difference_is_told_by_its_name() {
        let told = |change: fn(&mut Listed)| {
            let mut other = listed(&CANDIDATE);
            change(&mut other);
            ranks_alike(&[CANDIDATE], [other].into_iter()).unwrap_err()
        };
        assert!(
            told(|o| o.0[Slot::Heatsink as usize] = Some(3)).contains("heatsink: place none | 3")
        );
        assert!(told(|o| o.1[1] = 10.0).contains("RF or RX: 0 | 10"));
        assert!(told(|o| o.3 = 0.8 + 1e-8).contains("loss: 0.8 |"));
        assert!(told(|o| o.4 = f64::NAN).contains("stress: 0.9 | NaN"));
    }

    #[test]
    fn a_shorter_or_longer_list_is_told() {
        let one = listed(&CANDIDATE);
        assert!(ranks_alike(&[CANDIDATE], std::iter::empty()).unwrap_err().contains("other None"));
        assert!(ranks_alike(&[], [one].into_iter()).unwrap_err().contains("plain None"));
    }

    #[test]
    fn counts_are_told_cause_by_cause() {
        let plain = Counts {
            covered: 6,
            feasible: 2,
            lost: [("dropout".to_owned(), 4)].into_iter().collect(),
        };
        assert_eq!(counts_alike(&plain, 6, 2, &plain.lost.clone()), Ok(()));
        let other = [("soa-load".to_owned(), 4)].into_iter().collect();
        assert_eq!(
            counts_alike(&plain, 6, 2, &other),
            Err("lost to dropout: plain 4, other 0\nlost to soa-load: plain 0, other 4".to_owned())
        );
    }
}
