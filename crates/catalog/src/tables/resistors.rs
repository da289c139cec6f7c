//! `resistors.csv`: lines of fixed resistors.

use super::common::SHARED;
use super::*;
use crate::column::Figure;
use crate::fault::What;
use circuit::parts::{ResistorLine, ResistorRating};
use quantity::digits::{at_most, compare};
use quantity::preferred::Series;
use std::sync::LazyLock;

const SERIES: [&str; 7] = ["E3", "E6", "E12", "E24", "E48", "E96", "E192"];

const VALUE: Figure = Figure { unit: Unit::Ohm, range: ABOVE_ZERO, divisor: 1.0 };

columns! {
    first crate::tables::common::COUNT, after SHARED;
    series: optional(Cell::Word(&SERIES), "", "the series of IEC 60063 that the line is stocked in")
        .need(Need::ToProveIf("`values` is blank"));
    values: optional(Cell::Numbers(VALUE), "all of `series`", "the values that are stocked, `1k;2k2`, where they are no whole series; wins over `series`");
    tol_pct: needed(TOLERANCE, "tolerance either way")
        .plausible(0.001, 20.0);
    tempco_ppm: needed(PPM, "temperature coefficient; its size is taken")
        .plausible(-5000.0, 5000.0);
    power_w: needed(WATTS, "power rating of one piece")
        .plausible(0.01, 1000.0);
    vmax_v: needed(RATED_VOLTS, "greatest voltage across one piece")
        .plausible(5.0, 50e3);
    min_ohm: needed(OHMS, "the least value of the line, included")
        .plausible(1e-4, 1e9);
    max_ohm: needed(OHMS, "the greatest value of the line, included")
        .plausible(1e-3, 1e13);
    full_power_to_c: defaulted(DEGREES, 70.0, "full power up to this ambient temperature")
        .plausible(25.0, 200.0);
    zero_power_at_c: defaulted(DEGREES, 155.0, "no power from this ambient temperature on; above `full_power_to_c`")
        .plausible(70.0, 400.0);
}

impl Figures for ResistorLine {
    const KIND: Kind = Kind::Resistors;

    fn read(cells: &mut Cells<'_, '_>) -> Option<Self> {
        let series = cells.word(at::series).and_then(|n| Series::ALL.get(n).copied());
        let values = cells.numbers(at::values);
        let is_bare = cells.raw(at::series).is_empty() && cells.raw(at::values).is_empty();
        if is_bare {
            cells.lack(at::series);
        }
        let tol = cells.needed(at::tol_pct);
        let tempco_per_c = cells.needed(at::tempco_ppm).abs();
        let power_w = cells.needed(at::power_w);
        let vmax_v = cells.needed(at::vmax_v);
        let min_ohm = cells.needed(at::min_ohm);
        let max_ohm = cells.needed(at::max_ohm);
        let rating = rating(cells, power_w, at::full_power_to_c, at::zero_power_at_c);
        let values_ohm = match (values, series) {
            _ if min_ohm.is_nan() || max_ohm.is_nan() => return None,
            (Some(values), _) => stocked(values, min_ohm, max_ohm),
            (None, Some(_)) if max_ohm / min_ohm > WIDEST => {
                cells.fault_row(at::max_ohm, What::LineTooWide);
                return None;
            }
            (None, Some(series)) => of_series(series, min_ohm, max_ohm),
            (None, None) => return None,
        };
        if values_ohm.is_empty() {
            cells.fault_row(at::max_ohm, What::LineWithoutValue);
        }
        Some(ResistorLine { values_ohm, tol, tempco_per_c, rating, vmax_v })
    }
}

/// No line spans more than this from its least to its greatest value; the limit keeps a slip of the
/// exponent from filling the memory with preferred values.
const WIDEST: f64 = 1e18;

/// The values from `min_ohm` to `max_ohm`, both included, rising, each once.
fn stocked(mut values: Vec<f64>, min_ohm: f64, max_ohm: f64) -> Vec<f64> {
    values.retain(|&v| at_most(min_ohm, v) && at_most(v, max_ohm));
    values.sort_by(f64::total_cmp);
    values.dedup_by(|a, b| compare(*a, *b).is_eq());
    values
}

/// The values of a series, likewise.
///
/// Values come out of decimal text, which is slow, so those that lines are usually made of are kept.
fn of_series(series: Series, min_ohm: f64, max_ohm: f64) -> Vec<f64> {
    const USUAL: (f64, f64) = (1e-3, 1e9);
    static KEPT: LazyLock<[Vec<f64>; Series::ALL.len()]> =
        LazyLock::new(|| Series::ALL.map(|s| s.between(USUAL.0, USUAL.1)));
    if min_ohm < USUAL.0 || max_ohm > USUAL.1 {
        return series.between(min_ohm, max_ohm);
    }
    let all: &[f64] = Series::ALL
        .iter()
        .position(|s| *s == series)
        .and_then(|n| KEPT.get(n))
        .map_or(&[], Vec::as_slice);
    let begin = all.partition_point(|&v| !at_most(min_ohm, v));
    let end = all.partition_point(|&v| at_most(v, max_ohm));
    all.get(begin..end).unwrap_or_default().to_vec()
}

/// The power rating of a resistor or pot; the temperatures are those of the columns at these places.
pub(super) fn rating(
    cells: &mut Cells<'_, '_>,
    power_w: f64,
    full_power_to: usize,
    zero_power_at: usize,
) -> ResistorRating {
    let full_power_to_c = cells.defaulted(full_power_to);
    let zero_power_at_c = cells.defaulted(zero_power_at);
    if at_most(zero_power_at_c, full_power_to_c) {
        cells.fault_row(
            zero_power_at,
            What::ZeroPowerBelowFull { full_power_to_c, zero_power_at_c },
        );
    }
    ResistorRating { power_w, full_power_to_c, zero_power_at_c }
}
