//! Axes: from figures to places on paper.

use crate::frame::{line, px, text};
use maud::{Markup, html};

/// How figures are spread along an axis.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Scale {
    Linear,
    Logarithmic,
}

/// An axis. Both ends are finite and differ; those of a logarithmic one are above 0.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Axis {
    scale: Scale,
    pub(crate) from: f64,
    pub(crate) to: f64,
    /// Where `from` and `to` lie on paper.
    place_from: f64,
    place_to: f64,
}

/// Roughly so many labelled marks stand on a linear axis.
const MARKS: f64 = 7.0;

/// A decade is labelled at these.
const OF_A_DECADE: [f64; 3] = [1.0, 2.0, 5.0];

/// The greatest span of a logarithmic axis: below this share of its top nothing can be told apart.
const LEAST_SHARE: f64 = 1e-4;

impl Axis {
    /// A logarithmic axis over figures above 0, its ends at 1, 2 or 5 of a decade.
    pub(crate) fn logarithmic(least: f64, greatest: f64, places: (f64, f64)) -> Self {
        let greatest = if greatest.is_finite() && greatest > 0.0 { greatest } else { 1.0 };
        let least = if least > 0.0 { least.max(greatest * LEAST_SHARE) } else { greatest / 10.0 };
        let (from, to) = (step_down(least.min(greatest)), step_up(greatest));
        let from = if from < to { from } else { to / 10.0 };
        Self { scale: Scale::Logarithmic, from, to, place_from: places.0, place_to: places.1 }
    }

    /// A linear axis over exactly this span; one unit more where it is empty.
    pub(crate) fn linear(from: f64, to: f64, places: (f64, f64)) -> Self {
        let from = if from.is_finite() { from } else { 0.0 };
        let to = if to.is_finite() && to > from { to } else { from + 1.0 };
        Self { scale: Scale::Linear, from, to, place_from: places.0, place_to: places.1 }
    }

    /// A linear axis with a little room on either side of the figures.
    pub(crate) fn roomy(figures: &[f64], places: (f64, f64)) -> Self {
        let finite = figures.iter().copied().filter(|f| f.is_finite());
        let (least, greatest) =
            finite.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, g), f| (l.min(f), g.max(f)));
        if least > greatest {
            return Self::linear(0.0, 1.0, places);
        }
        let room = (greatest - least) * 0.12;
        let room = if room > 0.0 { room } else { greatest.abs().max(1e-9) * 0.1 };
        Self::linear(least - room, greatest + room, places)
    }

    /// Where a figure lies. What lies beyond an end is put on it.
    pub(crate) fn at(&self, figure: f64) -> f64 {
        let share = match self.scale {
            Scale::Linear => (figure - self.from) / (self.to - self.from),
            Scale::Logarithmic if figure <= 0.0 => 0.0,
            Scale::Logarithmic => (figure / self.from).ln() / (self.to / self.from).ln(),
        };
        let share = if share.is_nan() { 0.0 } else { share.clamp(0.0, 1.0) };
        self.place_from + share * (self.place_to - self.place_from)
    }

    /// The axis shows this figure.
    pub(crate) fn shows(&self, figure: f64) -> bool {
        self.from <= figure && figure <= self.to
    }

    /// Figures to be labelled.
    fn marks(&self) -> Vec<f64> {
        match self.scale {
            Scale::Linear => {
                let step = step_up((self.to - self.from) / MARKS);
                let first = (self.from / step).ceil();
                let count = ((self.to / step).floor() - first).clamp(0.0, 50.0);
                (0..=count as u32).map(|n| (first + f64::from(n)) * step).collect()
            }
            Scale::Logarithmic => {
                self.of_decades(&OF_A_DECADE).filter(|figure| self.shows(*figure)).collect()
            }
        }
    }

    /// These multiples of every decade that the axis touches.
    fn of_decades<'m>(&self, multiples: &'m [f64]) -> impl Iterator<Item = f64> + use<'m> {
        let (first, last) = (self.from.log10().floor() as i32, self.to.log10().ceil() as i32);
        (first..=last).flat_map(move |decade| multiples.iter().map(move |m| scaled(*m, decade)))
    }

    /// Figures between the labelled ones, on a logarithmic axis.
    fn fine_marks(&self) -> Vec<f64> {
        match self.scale {
            Scale::Linear => Vec::new(),
            Scale::Logarithmic => self
                .of_decades(&[3.0, 4.0, 6.0, 7.0, 8.0, 9.0])
                .filter(|figure| self.shows(*figure))
                .collect(),
        }
    }

    fn data(&self, side: &str, drawn: &Markup) -> Markup {
        let scale = match self.scale {
            Scale::Linear => "linear",
            Scale::Logarithmic => "logarithmic",
        };
        html! {
            g class="axis" data-axis=(side) data-scale=(scale)
                data-from=(self.from) data-to=(self.to)
                data-place-from=(px(self.place_from)) data-place-to=(px(self.place_to)) { (drawn) }
        }
    }

    /// Drawn below a field that reaches from `top` to `bottom`.
    pub(crate) fn drawn_below(&self, (top, bottom): (f64, f64), title: &str) -> Markup {
        let middle = (self.place_from + self.place_to) / 2.0;
        let drawn = html! {
            @for figure in self.fine_marks() {
                (line("grid fine", (self.at(figure), top), (self.at(figure), bottom)))
            }
            @for figure in self.marks() {
                (line("grid", (self.at(figure), top), (self.at(figure), bottom)))
                (text("quiet middle", (self.at(figure), bottom + 13.0), &short(figure)))
            }
            (text("middle", (middle, bottom + 28.0), title))
        };
        self.data("x", &drawn)
    }

    /// Drawn to the left of a field that reaches from `left` to `right`, its title above it.
    pub(crate) fn drawn_left(&self, (left, right): (f64, f64), title: &str) -> Markup {
        let top = self.place_from.min(self.place_to);
        let drawn = html! {
            @for figure in self.fine_marks() {
                (line("grid fine", (left, self.at(figure)), (right, self.at(figure))))
            }
            @for figure in self.marks() {
                (line("grid", (left, self.at(figure)), (right, self.at(figure))))
                (text("quiet end", (left - 5.0, self.at(figure) + 3.5), &short(figure)))
            }
            (text("", ((left - 34.0).max(4.0), top - 8.0), title))
        };
        self.data("y", &drawn)
    }
}

/// A multiple of a power of ten, exactly as it is written.
fn scaled(multiple: f64, decade: i32) -> f64 {
    format!("{multiple}e{decade}").parse().unwrap_or(multiple)
}

/// The next 1, 2 or 5 of a decade at or above a figure above 0.
fn step_up(figure: f64) -> f64 {
    let decade = figure.log10().floor() as i32;
    let steps = OF_A_DECADE.iter().chain(&[10.0]).map(|m| scaled(*m, decade));
    steps.into_iter().find(|step| *step >= figure).unwrap_or(figure)
}

/// The next 1, 2 or 5 of a decade at or below a figure above 0.
fn step_down(figure: f64) -> f64 {
    let decade = figure.log10().floor() as i32;
    let steps = OF_A_DECADE.iter().rev().map(|m| scaled(*m, decade));
    steps.into_iter().find(|step| *step <= figure).unwrap_or(figure)
}

/// A figure at a mark: without digits that rounding left behind.
fn short(figure: f64) -> String {
    let rounded = quantity::digits::rounded(figure);
    if rounded == 0.0 { "0".to_owned() } else { format!("{rounded}") }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_logarithmic_axis_gives_each_decade_the_same_room() {
        let axis = Axis::logarithmic(0.3, 40.0, (0.0, 100.0));
        assert_eq!((axis.from, axis.to), (0.2, 50.0));
        assert!((axis.at(10.0) - axis.at(1.0) - (axis.at(5.0) - axis.at(0.5))).abs() < 1e-9);
        assert_eq!(axis.marks(), [0.2, 0.5, 1.0, 2.0, 5.0, 10.0, 20.0, 50.0]);
    }

    #[test]
    fn marks_of_a_linear_axis_are_round_figures() {
        let axis = Axis::linear(11.3, 12.7, (0.0, 100.0));
        let marks: Vec<String> = axis.marks().into_iter().map(short).collect();
        assert_eq!(marks, ["11.4", "11.6", "11.8", "12", "12.2", "12.4", "12.6"]);
    }

    #[test]
    fn ends_that_mean_nothing_still_make_an_axis() {
        for figures in [&[][..], &[f64::INFINITY], &[f64::NAN], &[0.0], &[5.0, 5.0]] {
            let axis = Axis::roomy(figures, (0.0, 10.0));
            assert!(axis.from < axis.to, "{figures:?}");
            assert!(axis.marks().len() < 60);
        }
        for (least, greatest) in [(0.0, 0.0), (f64::INFINITY, f64::INFINITY), (1.0, 1.0)] {
            let axis = Axis::logarithmic(least, greatest, (0.0, 10.0));
            assert!(axis.from > 0.0 && axis.from < axis.to && axis.to.is_finite());
        }
    }
}
