//! What can be filled into a blank cell of each column, for one rail.

use catalog::column::{Cell, Column};
use circuit::pass::Duty;
use circuit::rail::Rail;
use quantity::notation::Unit;

/// A way of filling a blank cell.
#[derive(Debug, Clone, PartialEq)]
pub enum Fill {
    /// One figure in this unit, within what is plausible for the column.
    Figure {
        /// The unit of the cell.
        unit: Unit,
        /// The least that is plausible.
        low: f64,
        /// The most that is plausible.
        high: f64,
    },
    /// A current gain that is the same from a hundredth of the emitter current up to all of it.
    Gain {
        /// IE, A.
        up_to_a: f64,
        /// The least gain that is plausible.
        low: f64,
        /// The greatest.
        high: f64,
    },
    /// A voltage at the emitter current, given as one number.
    VoltageAt {
        /// IE, A.
        at_a: f64,
        /// The least voltage that is plausible, V.
        low: f64,
        /// The greatest.
        high: f64,
    },
    /// A safe operating area with the same current at every voltage up to this one. A curve that falls
    /// with voltage and reaches the current here allows at least as much below.
    SafeCurrentAt {
        /// The highest collector voltage that is looked at, V.
        up_to_v: f64,
    },
    /// One of these texts.
    Texts(Vec<String>),
}

/// Values of a grid.
const STEPS: usize = 96;

/// Currents of a safe operating area that are tried, A.
const SAFE_CURRENTS_A: (f64, f64) = (1e-3, 1e3);

/// Prices that are tried; the plausible range of the column begins at 0.
const PRICES: (f64, f64) = (1e-3, 1e5);

/// The ways of filling a blank cell of a column, the least demanding first. Empty for a column that
/// nothing can be tried for. `packages` are those that may be tried for a package.
pub(crate) fn fills_of(column: &Column, rail: &Rail, packages: &[String]) -> Vec<Fill> {
    match (column.name, column.cell, column.plausible) {
        ("fits" | "package", ..) => vec![Fill::Texts(packages.to_vec())],
        ("polarity", ..) => vec![Fill::Texts(vec!["npn".to_owned()])],
        ("hfe_min", _, Some((low, high))) => {
            vec![Fill::Gain { up_to_a: rail.emitter_current_a(), low, high }]
        }
        ("soa_dc", ..) => safe_areas(rail),
        (_, Cell::NumberOrPoints(_), Some((low, high))) => {
            vec![Fill::VoltageAt { at_a: rail.emitter_current_a(), low, high }]
        }
        (_, Cell::Number(figure), Some((low, high))) => {
            vec![Fill::Figure { unit: figure.unit, low, high }]
        }
        (_, Cell::Price, _) => {
            vec![Fill::Figure { unit: Unit::Plain, low: PRICES.0, high: PRICES.1 }]
        }
        (_, Cell::Count(low, high), _) => {
            vec![Fill::Texts((low..=high).map(|n| n.to_string()).collect())]
        }
        (_, Cell::Word(words), _) => {
            vec![Fill::Texts(words.iter().map(|&word| word.to_owned()).collect())]
        }
        _ => Vec::new(),
    }
}

/// Up to the voltage in service, then also up to the feed that a short puts on the transistor.
fn safe_areas(rail: &Rail) -> Vec<Fill> {
    let in_service_v = Duty::new(rail).open_v;
    let mut fills = vec![Fill::SafeCurrentAt { up_to_v: in_service_v }];
    if rail.fault.is_some() {
        fills.push(Fill::SafeCurrentAt { up_to_v: rail.feed.max_v });
    }
    fills.retain(|fill| !matches!(fill, Fill::SafeCurrentAt { up_to_v } if *up_to_v <= 0.0));
    fills
}

impl Fill {
    /// The figures that are tried, rising; None for texts.
    pub(crate) fn grid(&self) -> Option<Vec<f64>> {
        self.range().map(|(low, high)| steps(low, high, STEPS))
    }

    fn range(&self) -> Option<(f64, f64)> {
        match self {
            Fill::Figure { low, high, .. }
            | Fill::Gain { low, high, .. }
            | Fill::VoltageAt { low, high, .. } => Some((*low, *high)),
            Fill::SafeCurrentAt { .. } => Some(SAFE_CURRENTS_A),
            Fill::Texts(_) => None,
        }
    }

    /// The cell's text for a figure.
    pub(crate) fn text(&self, value: f64) -> String {
        match self {
            Fill::Gain { up_to_a, .. } => {
                format!("{:?}:{value:?};{up_to_a:?}:{value:?}", up_to_a / 100.0)
            }
            Fill::SafeCurrentAt { up_to_v } => {
                format!("{:?}:{value:?};{up_to_v:?}:{value:?}", up_to_v / 2.0)
            }
            _ => format!("{value:?}"),
        }
    }

    /// The texts of the whole grid.
    pub(crate) fn texts(&self) -> Vec<String> {
        match (self, self.grid()) {
            (Fill::Texts(texts), _) => texts.clone(),
            (_, grid) => grid.into_iter().flatten().map(|value| self.text(value)).collect(),
        }
    }

    /// A few of them: the ends, 0 where it lies between, and some between.
    pub(crate) fn samples(&self) -> Vec<String> {
        match (self, self.range()) {
            (Fill::Texts(texts), _) => texts.clone(),
            (_, Some((low, high))) => {
                steps(low, high, SAMPLES).into_iter().map(|value| self.text(value)).collect()
            }
            (_, None) => Vec::new(),
        }
    }
}

/// Values of a grid where several blanks are tried together.
const SAMPLES: usize = 5;

/// From low to high: by equal ratios where both are above 0; from 0 by equal ratios over seven decades
/// below the high end; through 0 by equal steps, 0 itself among them.
fn steps(low: f64, high: f64, count: usize) -> Vec<f64> {
    const DECADES: f64 = 1e7;
    let ratios = |low: f64, count: usize| -> Vec<f64> {
        let last = count.max(2) - 1;
        (0..=last).map(|n| low * (high / low).powf(n as f64 / last as f64)).collect()
    };
    let mut values = if low > 0.0 {
        ratios(low, count)
    } else if low == 0.0 {
        let mut values = vec![0.0];
        values.extend(ratios(high / DECADES, count - 1));
        values
    } else {
        let last = count.max(2) - 1;
        let mut values: Vec<f64> =
            (0..=last).map(|n| low + (high - low) * n as f64 / last as f64).collect();
        if high > 0.0 {
            values.push(0.0);
        }
        values
    };
    // The ends themselves, whatever rounding has made of them.
    if let Some(first) = values.first_mut() {
        *first = low;
    }
    values.retain(|value| *value <= high);
    values.push(high);
    values.sort_by(f64::total_cmp);
    values.dedup();
    values
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn steps_rise_from_end_to_end() {
        for (low, high) in [(1.0, 400.0), (0.0, 0.5), (-20.0, 300.0), (-5.0, -1.0)] {
            let values = steps(low, high, 20);
            assert_eq!((values[0], values[values.len() - 1]), (low, high));
            assert!(values.windows(2).all(|w| w[0] < w[1]), "{values:?}");
            assert_eq!(values.contains(&0.0), low <= 0.0 && high >= 0.0);
        }
    }

    #[test]
    fn curves_are_written_as_a_catalog_reads_them() {
        let gain = Fill::Gain { up_to_a: 0.8, low: 2.0, high: 1e5 };
        assert_eq!(gain.text(40.0), "0.008:40.0;0.8:40.0");
        assert_eq!(Fill::SafeCurrentAt { up_to_v: 14.0 }.text(1.5), "7.0:1.5;14.0:1.5");
    }
}
