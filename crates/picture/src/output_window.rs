//! The output at its corners against what is asked of it.

use crate::axis::Axis;
use crate::frame::{Frame, WIDTH, line, px, text};
use crate::label::{percent, volts, width};
use crate::subject::Subject;
use circuit::assembly::OutputFigures;
use circuit::check::Check;
use circuit::rail::Output;
use maud::{Markup, html};

const LEFT: f64 = 24.0;
const RIGHT: f64 = WIDTH - 24.0;
const TOP: f64 = 20.0;
/// Height of a row: its name, its bar, the figures at its ends.
const ROW: f64 = 50.0;
const BAR: f64 = 13.0;

/// A span of the output.
struct Span {
    name: &'static str,
    class: &'static str,
    words: String,
    /// Ends, V.
    ends: (f64, f64),
    /// A mark within, V.
    within: Option<f64>,
}

/// A limit drawn across the rows that it bounds.
struct Bound {
    name: &'static str,
    at_v: f64,
}

fn spans(subject: &Subject<'_>) -> (Vec<Span>, Vec<Bound>) {
    let rail = subject.rail;
    let (low_v, high_v) = (rail.lowest_output_v(), rail.highest_output_v());
    match (rail.output, subject.proof.output) {
        (Output::Fixed { voltage_v, .. }, OutputFigures::Fixed(out)) => {
            let accepted = Span {
                name: "accepted",
                class: "output",
                words: "accepted".to_owned(),
                ends: (low_v, high_v),
                within: Some(voltage_v),
            };
            let reached = Span {
                name: "corners",
                class: "window",
                words: "worst corners, with the nominal output".to_owned(),
                ends: (out.lo_v, out.hi_v),
                within: Some(out.nominal_v),
            };
            let bounds = vec![
                Bound { name: "lowest accepted", at_v: low_v },
                Bound { name: "highest accepted", at_v: high_v },
            ];
            (vec![accepted, reached], bounds)
        }
        (
            Output::Adjustable { from_v, to_v, low_stop_v, ceiling_v },
            OutputFigures::Adjustable(out),
        ) => {
            let span = |name, class, words: &str, ends| Span {
                name,
                class,
                words: words.to_owned(),
                ends,
                within: None,
            };
            let spans = vec![
                span("asked", "output", "range that must be reached", (from_v, to_v)),
                span("sure", "window", "reached for certain", (out.floor_v, out.reach_v)),
                span("possible", "takes", "possible with some parts", (out.low_v, out.top_v)),
            ];
            let mut bounds = vec![Bound { name: "low stop", at_v: low_stop_v }];
            bounds.extend(ceiling_v.map(|at_v| Bound { name: "ceiling", at_v }));
            (spans, bounds)
        }
        _ => (Vec::new(), Vec::new()),
    }
}

/// Draws the output window.
pub(crate) fn draw(subject: &Subject<'_>, frame: &Frame) -> Markup {
    let (spans, bounds) = spans(subject);
    let figures: Vec<f64> = spans
        .iter()
        .flat_map(|s| [s.ends.0, s.ends.1])
        .chain(bounds.iter().map(|b| b.at_v))
        .collect();
    let x = Axis::roomy(&figures, (LEFT, RIGHT));
    let bottom = TOP + ROW * spans.len() as f64 + 8.0;
    let body = html! {
        (x.drawn_below((TOP, bottom), "output, V"))
        @for bound in &bounds {
            g class="bound" data-bound=(bound.name) data-v=(bound.at_v) {
                (line("limit", (x.at(bound.at_v), TOP), (x.at(bound.at_v), bottom)))
            }
        }
        @for (at, span) in spans.iter().enumerate() {
            (span_drawn(span, TOP + ROW * at as f64, &x))
        }
        @if subject.rail.is_adjustable() { (bound_names(&bounds, &x)) }
    };
    let title = "Output against what is asked";
    frame.around(bottom + 38.0, title, &told(subject), &body)
}

/// The names of the limits, above the field.
fn bound_names(bounds: &[Bound], x: &Axis) -> Markup {
    html! {
        @for bound in bounds {
            @let words = format!("{} {}", bound.name, volts(bound.at_v));
            @let half = width(&words) / 2.0;
            (text("quiet middle", (within(x.at(bound.at_v), half), TOP - 6.0), &words))
        }
    }
}

fn within(place: f64, half: f64) -> f64 {
    place.clamp(half + 2.0, (WIDTH - half - 2.0).max(half + 2.0))
}

fn span_drawn(span: &Span, top: f64, x: &Axis) -> Markup {
    let (from, to) = (x.at(span.ends.0), x.at(span.ends.1));
    let bar = top + 18.0;
    let figures = bar + BAR + 13.0;
    let ends = [volts(span.ends.0), volts(span.ends.1)];
    let mark = span.within.map(|v| (x.at(v), volts(v)));
    // Figures at the ends stand clear of the one between them.
    let [left_half, right_half] = [0, 1].map(|end: usize| width(&ends[end]) / 2.0);
    let (mut left, mut right) = (within(from, left_half), within(to, right_half));
    if let Some((middle, words)) = &mark {
        let half = width(words) / 2.0 + 3.0;
        left = left.min(middle - half - left_half).max(left_half + 2.0);
        right = right.max(middle + half + right_half).min(WIDTH - right_half - 2.0);
    } else {
        left = left.min(right - left_half - right_half - 6.0).max(left_half + 2.0);
    }
    let middle = (from + to) / 2.0;
    html! {
        g class="span" data-span=(span.name) data-from=(span.ends.0) data-to=(span.ends.1)
            data-within=[span.within] {
            rect class=(span.class) x=(px(from.min(to))) y=(px(bar))
                width=(px((to - from).abs().max(1.0))) height=(px(BAR)) {}
            @if let Some((at, _)) = &mark {
                (line("load", (*at, bar - 4.0), (*at, bar + BAR + 3.0)))
            }
        }
        (text("middle halo", (within(middle, width(&span.words) / 2.0), bar - 5.0), &span.words))
        (text("middle halo", (left, figures), &ends[0]))
        (text("middle halo", (right, figures), &ends[1]))
        @if let Some((at, words)) = &mark {
            (text("middle halo strong", (*at, figures), words))
        }
    }
}

fn told(subject: &Subject<'_>) -> String {
    match (subject.rail.output, subject.proof.output) {
        (Output::Fixed { voltage_v, tolerance }, OutputFigures::Fixed(out)) => {
            let used = subject.finding(Check::OutputError).map_or(f64::NAN, |f| f.utilisation());
            format!(
                "Asked are {} within {} %. At the worst corners the output lies between {} and {}, \
                 nominally at {}. That uses {} of the tolerance.",
                volts(voltage_v),
                quantity::digits::rounded(tolerance * 100.0),
                volts(out.lo_v),
                volts(out.hi_v),
                volts(out.nominal_v),
                percent(used)
            )
        }
        (Output::Adjustable { from_v, to_v, .. }, OutputFigures::Adjustable(out)) => format!(
            "The knob must reach from {} to {}. It reaches for certain from {} to {}, and with some \
             parts from {} to {}.",
            volts(from_v),
            volts(to_v),
            volts(out.floor_v),
            volts(out.reach_v),
            volts(out.low_v),
            volts(out.top_v)
        ),
        _ => String::new(),
    }
}
