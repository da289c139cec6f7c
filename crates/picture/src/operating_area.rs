//! The transistor's safe operating area: its curves as given and as derated, the load line, the fault.

use crate::axis::Axis;
use crate::frame::{Frame, line, path, px, text};
use crate::label::{amps, apart, degrees, percent, volts, width};
use crate::subject::Subject;
use circuit::check::Check;
use maud::{Markup, html};
use quantity::notation::engineering;
use quantity::points::Points;

const LEFT: f64 = 42.0;
const RIGHT: f64 = 342.0;
const TOP: f64 = 30.0;
const BOTTOM: f64 = 286.0;
/// The first row of the legend, and the distance of its rows.
const LEGEND: f64 = BOTTOM + 47.0;
const LEGEND_ROW: f64 = 14.0;
/// Labels to the right of the field stand at least so far below each other.
const LABEL_GAP: f64 = 12.0;
/// Steps in which the load line is drawn: it is bent on logarithmic axes.
const STEPS: u32 = 48;

/// A curve of the data sheet.
struct Curve<'a> {
    column: &'static str,
    /// The time of its pulse; None: DC.
    time_s: Option<f64>,
    points: &'a Points,
    /// It covers the fault.
    covers_fault: bool,
}

impl Curve<'_> {
    fn name(&self) -> String {
        self.time_s.map_or("DC".to_owned(), |s| engineering(s, "s", 2))
    }

    /// The dash by which it is told from the others in every shade.
    fn dash(&self) -> &'static str {
        match self.column {
            "soa_1s" => "d1",
            "soa_100ms" => "d2",
            "soa_10ms" => "d3",
            "soa_1ms" => "d4",
            _ => "",
        }
    }
}

/// A curve as it is drawn.
struct Drawn {
    name: String,
    column: &'static str,
    /// As the sheet gives it, in service, or in the fault.
    state: &'static str,
    class: String,
    points: Vec<(f64, f64)>,
}

/// A label beside the end of a curve.
struct Beside {
    at: (f64, f64),
    words: String,
}

fn curves<'a>(subject: &'a Subject<'_>) -> Vec<Curve<'a>> {
    let pass = subject.fitted.pass;
    let covers = |time_s: f64| subject.rail.fault.is_some_and(|f| f.is_covered_by(time_s));
    let dc = Curve {
        column: "soa_dc",
        time_s: None,
        points: &pass.soa_dc,
        covers_fault: subject.rail.fault.is_some(),
    };
    let pulses = pass.soa_pulse.given().map(|(time_s, points)| Curve {
        column: column(time_s),
        time_s: Some(time_s),
        points,
        covers_fault: covers(time_s),
    });
    std::iter::once(dc).chain(pulses).collect()
}

fn column(time_s: f64) -> &'static str {
    match time_s {
        t if t >= 1.0 => "soa_1s",
        t if t >= 0.1 => "soa_100ms",
        t if t >= 0.01 => "soa_10ms",
        _ => "soa_1ms",
    }
}

/// Every curve as given, then derated for service and for the fault.
fn drawn(subject: &Subject<'_>) -> Vec<Drawn> {
    let (pass, mounted, rail) = (&subject.at_rail.pass, &subject.at_rail.mounted, subject.rail);
    let case = mounted.case;
    let mut list = Vec::new();
    for curve in curves(subject) {
        let (name, dash) = (curve.name(), curve.dash());
        let make = |state, class: &str, name, left: &dyn Fn(f64) -> f64| Drawn {
            name,
            column: curve.column,
            state,
            class: format!("{class} {dash}").trim_end().to_owned(),
            points: curve.points.as_slice().iter().map(|(v, a)| (*v, left(*a))).collect(),
        };
        list.push(make("given", "given", name.clone(), &|a| a));
        let in_fault = |a| pass.fault_area_a(a, mounted, rail);
        if curve.time_s.is_none() {
            let name = format!("{name}, {}", degrees(case.service_c));
            let in_service = |a| pass.service_area_a(a, mounted, rail);
            list.push(make("service", "in-service", name, &in_service));
        }
        let name = format!("{name}, {}", degrees(case.fault_c));
        if curve.covers_fault {
            list.push(make("fault", "in-fault", name, &in_fault));
        } else if curve.time_s.is_some() {
            list.push(make("derated", "derated", name, &in_fault));
        }
    }
    // What is drawn last lies on top: the curves that checks use.
    list.sort_by_key(|d| matches!(d.state, "service" | "fault"));
    list
}

/// The load line: collector voltage and current from a small load to full load.
fn load_line(subject: &Subject<'_>, least_a: f64) -> Vec<(f64, f64)> {
    let duty = &subject.at_rail.duty;
    let least_a = least_a.min(duty.ie_a);
    let at = |n: u32| {
        let share = f64::from(n) / f64::from(STEPS);
        let i_a = least_a * (duty.ie_a / least_a).powf(share);
        (duty.collector_v(i_a), i_a)
    };
    (0..=STEPS).map(at).collect()
}

/// The axes: every curve, the load line and the fault lie within.
fn axes(subject: &Subject<'_>, curves: &[Drawn]) -> (Axis, Axis) {
    let rail = subject.rail;
    let load = subject.at_rail.pass.hardest_load;
    let duty = &subject.at_rail.duty;
    let mut volts = vec![rail.feed.max_v, duty.open_v, duty.collector_v(duty.ie_a)];
    let mut amps = vec![load.asked_a / 2.0, duty.ie_a * 1.2];
    amps.extend(rail.fault.iter().flat_map(|f| [f.limit_a / 2.0, f.limit_a * 1.2]));
    for (v, a) in curves.iter().flat_map(|c| &c.points) {
        volts.push(*v);
        amps.push(*a);
    }
    let ends = |figures: &[f64]| {
        let sound = figures.iter().copied().filter(|f| f.is_finite() && *f > 0.0);
        sound.fold((f64::INFINITY, 0.0_f64), |(l, g), f| (l.min(f), g.max(f)))
    };
    let (least_v, most_v) = ends(&volts);
    let (least_a, most_a) = ends(&amps);
    (
        Axis::logarithmic(least_v * 0.8, most_v * 1.02, (LEFT, RIGHT)),
        Axis::logarithmic(least_a, most_a * 1.02, (BOTTOM, TOP)),
    )
}

/// Draws the operating area.
pub(crate) fn draw(subject: &Subject<'_>, frame: &Frame) -> Markup {
    let curves = drawn(subject);
    let (x, y) = axes(subject, &curves);
    let load = load_line(subject, y.from);
    let legend = legend(subject);
    let body = html! {
        (x.drawn_below((TOP, BOTTOM), "collector-emitter voltage, V"))
        (y.drawn_left((LEFT, RIGHT), "collector current, A"))
        rect class="edge" x=(px(LEFT)) y=(px(TOP)) width=(px(RIGHT - LEFT))
            height=(px(BOTTOM - TOP)) {}
        @for curve in &curves { (curve_drawn(curve, &x, &y)) }
        (beside(&curves, &x, &y))
        g class="load-line" data-points=(pairs(&load)) {
            path class="load" d=(path(&on_paper(&load, &x, &y))) {}
        }
        (spots(subject, &x, &y))
        @for (at, (class, words)) in legend.iter().enumerate() {
            @let y = LEGEND + LEGEND_ROW * at as f64;
            (line(class, (LEFT, y - 4.0), (LEFT + 30.0, y - 4.0)))
            (text("", (LEFT + 38.0, y), words))
        }
    };
    let height = LEGEND + LEGEND_ROW * legend.len() as f64;
    frame.around(height, "Safe operating area of the pass transistor", &told(subject), &body)
}

/// A curve: level up to its first point, nothing beyond its last.
fn curve_drawn(curve: &Drawn, x: &Axis, y: &Axis) -> Markup {
    let mut points = on_paper(&curve.points, x, y);
    if let (Some(&(_, first)), Some(&(last, _))) = (points.first(), points.last()) {
        points.insert(0, (LEFT, first));
        points.push((last, BOTTOM));
    }
    let is_left = curve.points.iter().any(|(_, a)| *a > 0.0);
    html! {
        g class="curve" data-curve=(curve.column) data-state=(curve.state)
            data-points=(pairs(&curve.points)) {
            @if is_left { path class=(curve.class) d=(path(&points)) {} }
        }
    }
}

/// The names of the curves, beside their ends.
fn beside(curves: &[Drawn], x: &Axis, y: &Axis) -> Markup {
    let mut labels: Vec<Beside> = Vec::new();
    for curve in curves {
        let Some(&(v, a)) = curve.points.last() else { continue };
        if a <= 0.0 {
            continue;
        }
        let place = (x.at(v), y.at(a));
        let same = labels.iter_mut().find(|l| (l.at.1 - place.1).abs() < 0.5);
        match same {
            Some(label) if label.words.len() < 12 => {
                label.words = format!("{}; {}", label.words, curve.name);
            }
            _ => labels.push(Beside { at: place, words: curve.name.clone() }),
        }
    }
    labels.sort_by(|a, b| a.at.1.total_cmp(&b.at.1));
    let wanted: Vec<f64> = labels.iter().map(|l| l.at.1 + 3.5).collect();
    let placed = apart(&wanted, LABEL_GAP, TOP + 8.0, BOTTOM);
    html! {
        @for (label, y) in labels.iter().zip(placed) {
            (line("lead", (label.at.0 + 1.0, label.at.1), (RIGHT + 6.0, y - 3.5)))
            (text("quiet", (RIGHT + 8.0, y), &label.words))
        }
    }
}

/// The hardest load and the fault, each with its figures.
fn spots(subject: &Subject<'_>, x: &Axis, y: &Axis) -> Markup {
    let load = subject.at_rail.pass.hardest_load;
    let load_v = subject.at_rail.duty.collector_v(load.asked_a);
    let (load_x, load_y) = (x.at(load_v), y.at(load.asked_a));
    let fault = subject.rail.fault.map(|f| (subject.rail.feed.max_v, f.limit_a));
    let load_name =
        Name::of((load_x, load_y), format!("load {} at {}", amps(load.asked_a), volts(load_v)));
    html! {
        g class="point" data-point="load" data-v=(load_v) data-a=(load.asked_a) {
            circle class="spot" cx=(px(load_x)) cy=(px(load_y)) r="4.5" {}
        }
        (load_name.drawn())
        @if let Some((v, a)) = fault {
            @let (cx, cy) = (x.at(v), y.at(a));
            g class="point" data-point="fault" data-v=(v) data-a=(a) {
                path class="spot fault" d=(path(&[
                    (cx, cy - 6.5), (cx + 6.5, cy), (cx, cy + 6.5), (cx - 6.5, cy), (cx, cy - 6.5),
                ])) {}
            }
            @let words = format!("short {} at {}", amps(a), volts(v));
            (Name::of((cx, cy), words).clear_of(&load_name).drawn())
        }
    }
}

/// The name of a spot.
struct Name {
    class: &'static str,
    x: f64,
    y: f64,
    words: String,
}

impl Name {
    /// To the left of the spot, where the safe area is, or above it where there is no room.
    fn of((x, y): (f64, f64), words: String) -> Self {
        if x - width(&words) - 18.0 > LEFT {
            return Self { class: "strong halo end", x: x - 10.0, y: y + 4.0, words };
        }
        let y = if y - 12.0 > TOP + 10.0 { y - 12.0 } else { y + 20.0 };
        Self { class: "strong halo", x: LEFT + 5.0, y, words }
    }

    /// Moved up or down so far that the other can be read.
    fn clear_of(self, other: &Name) -> Self {
        let off = self.y - other.y;
        if off.abs() >= LABEL_GAP + 2.0 {
            return self;
        }
        let way = if off > 0.0 { LABEL_GAP + 2.0 } else { -LABEL_GAP - 2.0 };
        Self { y: other.y + way, ..self }
    }

    fn drawn(&self) -> Markup {
        text(self.class, (self.x, self.y), &self.words)
    }
}

/// What the kinds of lines mean: their classes, and words.
fn legend(subject: &Subject<'_>) -> Vec<(&'static str, String)> {
    let mounted = &subject.at_rail.mounted;
    let pass = &subject.at_rail.pass;
    let rail = subject.rail;
    let service = format!(
        "in service: DC curve, {} of it left with the case at {}",
        percent(pass.service_area_a(1.0, mounted, rail)),
        degrees(mounted.case.service_c),
    );
    let left = percent(pass.fault_area_a(1.0, mounted, rail));
    let case = degrees(mounted.case.fault_c);
    let has_pulses = subject.fitted.pass.soa_pulse.given().next().is_some();
    let mut rows = vec![
        ("given", "as the data sheet gives it, case at 25 °C".to_owned()),
        ("in-service", service),
    ];
    if rail.fault.is_some() {
        let words = format!("for the short: {left} left with the case at {case}");
        rows.push(("in-fault", words));
    }
    if has_pulses {
        let words = if rail.fault.is_some() {
            format!("pulses too short for it, {left} left")
        } else {
            format!("pulses, {left} left with the case at {case}")
        };
        rows.push(("derated d2", words));
    }
    rows.push(("load", "load line, from a small load to full load".to_owned()));
    rows
}

fn told(subject: &Subject<'_>) -> String {
    let load = subject.at_rail.pass.hardest_load;
    let load_v = subject.at_rail.duty.collector_v(load.asked_a);
    let mut words = format!(
        "Collector current over collector-emitter voltage on logarithmic axes. The hardest load is {} \
         at {}",
        amps(load.asked_a),
        volts(load_v)
    );
    let allowed = |check, words: &mut String| {
        if let Some(finding) = subject.finding(check) {
            *words += &format!(
                "; {} of the allowed {}",
                percent(finding.utilisation()),
                amps(finding.allowed)
            );
        }
    };
    allowed(Check::SoaLoad, &mut words);
    if let Some(fault) = subject.rail.fault {
        words += &format!(
            ". A short draws {} at {}",
            amps(fault.limit_a),
            volts(subject.rail.feed.max_v)
        );
        allowed(Check::SoaFault, &mut words);
    }
    words + "."
}

fn on_paper(points: &[(f64, f64)], x: &Axis, y: &Axis) -> Vec<(f64, f64)> {
    points.iter().map(|(v, a)| (x.at(*v), y.at(*a))).collect()
}

/// Points for programs: `v,a v,a`.
fn pairs(points: &[(f64, f64)]) -> String {
    points.iter().map(|(v, a)| format!("{v},{a}")).collect::<Vec<_>>().join(" ")
}
