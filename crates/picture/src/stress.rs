//! The use of every limit: stress of the damage checks, slack of the function checks.

use crate::axis::Axis;
use crate::frame::{Frame, line, path, px, text};
use crate::label::percent;
use crate::subject::Subject;
use circuit::check::{Finding, Kind};
use circuit::merit::Binding;
use maud::{Markup, html};

const LEFT: f64 = 122.0;
const RIGHT: f64 = 330.0;
const TOP: f64 = 8.0;
const HEADING: f64 = 24.0;
const ROW: f64 = 15.5;
const BAR: f64 = 9.5;
/// Distance of the lines of a hatching along a bar.
const HATCH: f64 = 5.0;
/// Bars of checks that fail end here, however far they fail.
const MOST: f64 = 1.25;
/// Room to the right of the limit where every check holds.
const MOST_HOLDING: f64 = 1.02;

/// Checks of one kind.
struct Group<'s> {
    kind: Kind,
    heading: String,
    binding: Binding,
    findings: Vec<&'s Finding>,
}

fn groups<'s>(subject: &'s Subject<'_>) -> [Group<'s>; 2] {
    let proof = &subject.proof;
    let of = |kind| proof.findings.iter().filter(move |f| f.check.kind() == kind).collect();
    let left = |binding: &Binding| percent(1.0 - binding.utilisation);
    [
        Group {
            kind: Kind::Damage,
            heading: format!("Damage checks: margin {}", left(&proof.stress)),
            binding: proof.stress,
            findings: of(Kind::Damage),
        },
        Group {
            kind: Kind::Function,
            heading: format!("Function checks: slack {}", left(&proof.tightness)),
            binding: proof.tightness,
            findings: of(Kind::Function),
        },
    ]
}

/// Draws the bars.
pub(crate) fn draw(subject: &Subject<'_>, frame: &Frame) -> Markup {
    let all_hold = subject.proof.findings.iter().all(Finding::holds);
    let most = if all_hold { MOST_HOLDING } else { MOST };
    let x = Axis::linear(0.0, most, (LEFT, RIGHT));
    let groups = groups(subject);
    let mut top = TOP;
    let mut drawn = Vec::new();
    for group in &groups {
        drawn.push(group_drawn(group, top, &x));
        top += HEADING + ROW * group.findings.len() as f64 + 8.0;
    }
    let body = html! {
        g class="axis" data-axis="x" data-scale="linear" data-from="0" data-to=(most)
            data-place-from=(px(LEFT)) data-place-to=(px(RIGHT)) {}
        @for group in &drawn { (group) }
        (text("quiet", (8.0, top + 8.0), "A bar is the used share of a limit; the upright line is the limit."))
        (text("quiet", (8.0, top + 21.0), "divider-window has to hold, but is no measure of slack."))
    };
    frame.around(top + 30.0, "Use of every limit", &told(subject), &body)
}

/// The hatching of function bars, by which they differ from damage bars in every shade: slanting lines
/// within a box. Lines and no pattern, for patterns become large pictures on paper.
fn hatching((left, top): (f64, f64), (wide, high): (f64, f64)) -> String {
    let mut text = String::new();
    let mut at = HATCH - high;
    while at < wide {
        // From the lower left to the upper right at 45 degrees, cut off at the sides of the box.
        let (from, to) = (at.max(0.0), (at + high).min(wide));
        text +=
            &path(&[(left + from, top + high - (from - at)), (left + to, top + high - (to - at))]);
        at += HATCH;
    }
    text
}

fn group_drawn(group: &Group<'_>, top: f64, x: &Axis) -> Markup {
    let first = top + HEADING;
    let bottom = first + ROW * group.findings.len() as f64;
    html! {
        g class="group" data-kind=(group.kind.name()) {
            (text("strong", (8.0, top + 14.0), &group.heading))
            @for (at, finding) in group.findings.iter().enumerate() {
                (row(finding, group, first + ROW * at as f64, x))
            }
            (line("limit", (x.at(1.0), first - 4.0), (x.at(1.0), bottom)))
        }
    }
}

fn row(finding: &Finding, group: &Group<'_>, top: f64, x: &Axis) -> Markup {
    let u = finding.utilisation();
    let is_binding = group.binding.check == Some(finding.check);
    let weight = if is_binding || !finding.holds() { "strong" } else { "" };
    let remark = match (finding.holds(), is_binding) {
        (false, _) => " fails",
        (true, true) => " binds",
        (true, false) => "",
    };
    let (left, right) = (x.at(0.0), x.at(u));
    html! {
        g class="check" data-check=(finding.check.name()) data-utilisation=(u)
            data-holds=(finding.holds()) {
            (text(&format!("end {weight}"), (LEFT - 6.0, top + 8.5), finding.check.name()))
            rect class="track" x=(px(left)) y=(px(top)) width=(px(x.at(1.0) - left))
                height=(px(BAR)) {}
            rect class={ "bar " (group.kind.name()) } x=(px(left)) y=(px(top))
                width=(px((right - left).max(0.5))) height=(px(BAR)) {}
            @if group.kind == Kind::Function {
                path class="hatch" d=(hatching((left, top), (right - left, BAR))) {}
            }
            (text(weight, (RIGHT + 8.0, top + 8.5), &format!("{}{remark}", percent(u))))
        }
    }
}

fn told(subject: &Subject<'_>) -> String {
    let proof = &subject.proof;
    let of = |binding: &Binding, name: &str, what: &str| match binding.check {
        Some(check) => format!(
            "The {what} check used most is {} with {}: {name} {}. ",
            check.name(),
            percent(binding.utilisation),
            percent(1.0 - binding.utilisation)
        ),
        None => String::new(),
    };
    let failing: Vec<&str> =
        proof.findings.iter().filter(|f| !f.holds()).map(|f| f.check.name()).collect();
    let failing = match failing.as_slice() {
        [] => "Every check holds.".to_owned(),
        names => format!("These fail: {}.", names.join(", ")),
    };
    of(&proof.stress, "margin", "damage") + &of(&proof.tightness, "slack", "function") + &failing
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn hatching_stays_within_its_box() {
        for wide in [0.0, 3.0, 40.0] {
            for number in
                hatching((0.0, 0.0), (wide, 9.5)).split(['M', 'L']).filter(|t| !t.is_empty())
            {
                let (x, y) = number.split_once(' ').expect("two numbers");
                let [x, y] = [x, y].map(|n| n.parse::<f64>().expect("a number"));
                assert!((0.0..=wide).contains(&x) && (0.0..=9.5).contains(&y), "{wide}: {x} {y}");
            }
        }
    }
}
