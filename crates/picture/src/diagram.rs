//! The circuit with its parts and values.

use crate::frame::{Frame, line, path, px, text};
use crate::label::{amps, shortened, volts};
use crate::subject::Subject;
use circuit::rail::Output;
use circuit::slot::Slot;
use design::proof::Cooling;
use maud::{Markup, html};
use quantity::notation::engineering;

const HEIGHT: f64 = 338.0;

/// The feed and the output.
const RAIL: f64 = 72.0;
const GROUND: f64 = 312.0;
/// Terminals of the feed; the branches from left to right; the load.
const FEED: f64 = 14.0;
const ZENER: f64 = 64.0;
const AMPLIFIER: f64 = 172.0;
const PASS: f64 = 262.0;
const DIVIDER: f64 = 312.0;
const LOAD: f64 = 424.0;
/// The reference node, which is the + input; the − input; the divider node.
const PLUS: f64 = 160.0;
const MINUS: f64 = 190.0;
const NODE: f64 = 244.0;

/// Names longer than this are cut; the table of parts has them whole.
const MOST: usize = 15;

/// Draws the circuit.
pub(crate) fn draw(subject: &Subject<'_>, frame: &Frame) -> Markup {
    let body = html! {
        (wires())
        (feed(subject))
        (reference(subject))
        (amplifier(subject))
        (pass(subject))
        (divider(subject))
        (load(subject))
    };
    frame.around(HEIGHT, "The circuit with its parts and values", &told(subject), &body)
}

/// What joins the parts.
fn wires() -> Markup {
    let middle = (PLUS + MINUS) / 2.0;
    let tip = AMPLIFIER + 52.0;
    html! {
        (line("wire", (FEED, RAIL), (PASS - 20.0, RAIL)))
        (line("wire", (PASS + 20.0, RAIL), (LOAD, RAIL)))
        (line("wire", (FEED, GROUND), (LOAD, GROUND)))
        (line("wire", (ZENER, PLUS), (AMPLIFIER, PLUS)))
        path class="wire" d=(path(&[
            (AMPLIFIER, MINUS), (AMPLIFIER - 14.0, MINUS), (AMPLIFIER - 14.0, NODE), (DIVIDER, NODE),
        ])) {}
        path class="wire" d=(path(&[(tip, middle), (PASS, middle), (PASS, RAIL + 14.0)])) {}
        (line("wire", (AMPLIFIER + 22.0, RAIL), (AMPLIFIER + 22.0, middle - 18.0)))
        (line("wire", (AMPLIFIER + 22.0, middle + 18.0), (AMPLIFIER + 22.0, GROUND)))
        @for (x, y) in [
            (ZENER, RAIL), (ZENER, PLUS), (ZENER, GROUND), (AMPLIFIER + 22.0, RAIL),
            (AMPLIFIER + 22.0, GROUND), (DIVIDER, RAIL), (DIVIDER, NODE), (DIVIDER, GROUND),
        ] {
            circle class="solid" cx=(px(x)) cy=(px(y)) r="2.4" {}
        }
    }
}

fn terminal(x: f64, y: f64) -> Markup {
    html! { circle class="body" cx=(px(x)) cy=(px(y)) r="3.6" {} }
}

/// A part with its name for programs.
fn part(slot: &str, name: Option<&str>, value: Option<f64>, drawn: &Markup) -> Markup {
    html! {
        g class="part" data-slot=(slot) data-part=[name.map(crate::label::clean)]
            data-value=[value] {
            @if let Some(name) = name { title { (crate::label::clean(name)) } }
            (drawn)
        }
    }
}

/// A resistor that stands upright, its leads reaching from `top` to `bottom`; a wire for a link.
fn resistor(x: f64, (top, bottom): (f64, f64), ohm: f64) -> Markup {
    if ohm == 0.0 {
        return line("wire", (x, top), (x, bottom));
    }
    let middle = (top + bottom) / 2.0;
    html! {
        (line("wire", (x, top), (x, bottom)))
        rect class="body" x=(px(x - 6.0)) y=(px(middle - 17.0)) width="12" height="34" {}
    }
}

/// A value as it is written beside a part.
fn ohms(ohm: f64) -> String {
    if ohm == 0.0 { "link".to_owned() } else { engineering(ohm, "Ω", 4) }
}

/// Two lines beside a part: what it is, and its name.
fn beside(x: f64, y: f64, first: &str, second: &str) -> Markup {
    html! {
        (text("strong halo", (x, y), first))
        (text("quiet halo", (x, y + 13.0), second))
    }
}

fn named(subject: &Subject<'_>, slot: Slot) -> String {
    shortened(subject.name(slot).unwrap_or_default(), MOST)
}

fn feed(subject: &Subject<'_>) -> Markup {
    let feed = &subject.rail.feed;
    html! {
        g class="terminal" data-terminal="feed" data-low=(feed.min_v) data-high=(feed.max_v) {
            (terminal(FEED, RAIL))
            (terminal(FEED, GROUND))
            (text("strong", (8.0, RAIL - 26.0), "feed"))
            (text("", (8.0, RAIL - 12.0), &format!("{} to {}", volts(feed.min_v), volts(feed.max_v))))
            (text("quiet", (8.0, GROUND + 18.0), "0 V"))
        }
    }
}

fn reference(subject: &Subject<'_>) -> Markup {
    let rz = subject.at_rail.rz.ohm;
    let bias = resistor(ZENER, (RAIL, PLUS), rz);
    // The cathode's bar with its bent ends, and the arrow below it.
    let (x, y) = (ZENER, 252.0);
    let zener = html! {
        (line("wire", (x, PLUS), (x, GROUND)))
        path class="solid" d=(path(&[(x - 8.0, y + 14.0), (x + 8.0, y + 14.0), (x, y), (x - 8.0, y + 14.0)])) {}
        path class="wire" d=(path(&[(x - 11.0, y + 4.0), (x - 8.0, y), (x + 8.0, y), (x + 11.0, y - 4.0)])) {}
    };
    let vz = subject.fitted.zener.vz_v;
    html! {
        (part("bias_line", subject.name(Slot::BiasLine), Some(rz), &bias))
        (beside(ZENER + 11.0, 112.0, &format!("RZ {}", ohms(rz)), &named(subject, Slot::BiasLine)))
        (part("zener", subject.name(Slot::Zener), Some(vz), &zener))
        // Below the wire from the divider node, so that a long name has room.
        (beside(ZENER + 15.0, 262.0, &format!("zener {}", volts(vz)), &named(subject, Slot::Zener)))
    }
}

fn amplifier(subject: &Subject<'_>) -> Markup {
    let middle = (PLUS + MINUS) / 2.0;
    let (left, top, bottom) = (AMPLIFIER, middle - 31.0, middle + 31.0);
    let triangle = html! {
        path class="body" d=(path(&[(left, top), (left + 52.0, middle), (left, bottom), (left, top)])) {}
        (text("", (left + 4.0, PLUS + 4.0), "+"))
        (text("", (left + 4.0, MINUS + 4.0), "−"))
    };
    html! {
        (part("amplifier", subject.name(Slot::Amplifier), None, &triangle))
        (beside(left + 27.0, bottom + 2.0, "amplifier", &named(subject, Slot::Amplifier)))
    }
}

/// The transistor lies in the line from feed to output, its base downwards.
fn pass(subject: &Subject<'_>) -> Markup {
    let base = RAIL + 14.0;
    let x = PASS;
    let symbol = html! {
        (line("load", (x - 14.0, base), (x + 14.0, base)))
        path class="wire" d=(path(&[(x - 20.0, RAIL), (x - 9.0, base)])) {}
        path class="wire" d=(path(&[(x + 9.0, base), (x + 20.0, RAIL)])) {}
        path class="solid" d=(path(&[
            (x + 20.0, RAIL), (x + 11.0, RAIL + 4.6), (x + 17.4, RAIL + 9.6), (x + 20.0, RAIL),
        ])) {}
    };
    let kind = if subject.fitted.pass.junctions == 2 { "darlington" } else { "transistor" };
    let (sink, theta) = match subject.fitted.cooling {
        Cooling::Heatsink(sink) => (named(subject, Slot::Heatsink), Some(sink.rth_sa_c_per_w)),
        Cooling::OwnSink(theta) => ("sink of the sheet".to_owned(), Some(theta)),
        Cooling::Unmounted(_) => ("no heatsink".to_owned(), None),
    };
    let sink = match theta {
        Some(theta) => format!("{sink}, {}", engineering(theta, "°C/W", 3)),
        None => sink,
    };
    let fins = html! {
        @if theta.is_some() {
            (line("load", (x - 20.0, RAIL - 12.0), (x + 20.0, RAIL - 12.0)))
            @for n in 0..6 {
                @let fin = x - 20.0 + 8.0 * f64::from(n);
                (line("wire", (fin, RAIL - 12.0), (fin, RAIL - 20.0)))
            }
        }
    };
    html! {
        (part("pass", subject.name(Slot::Pass), None, &symbol))
        (part("heatsink", subject.name(Slot::Heatsink), theta, &fins))
        (text("strong middle", (x, 16.0), &format!("{kind} {}", named(subject, Slot::Pass))))
        (text("quiet middle", (x, 31.0), &sink))
        (text("quiet middle", (x, 44.0), &format!("case to {:.0} °C", subject.at_rail.mounted.case.service_c)))
    }
}

fn divider(subject: &Subject<'_>) -> Markup {
    let divider = &subject.at_rail.divider;
    let (upper, ri) = (divider.upper.ohm, divider.ri.ohm);
    let line_name = named(subject, Slot::DividerLine);
    let x = DIVIDER + 11.0;
    let full = subject.name(Slot::DividerLine);
    let below = resistor(DIVIDER, (NODE, GROUND), ri);
    html! {
        @match &subject.fitted.pot {
            None => {
                (part("divider_line", full, Some(upper), &resistor(DIVIDER, (RAIL, NODE), upper)))
                (beside(x, 152.0, &format!("RF {}", ohms(upper)), if upper == 0.0 { "" } else { &line_name }))
            }
            Some(pot) => {
                @let middle = 150.0;
                (part("divider_line", full, Some(upper), &resistor(DIVIDER, (RAIL, middle), upper)))
                (beside(x, 106.0, &format!("RX {}", ohms(upper)), if upper == 0.0 { "" } else { &line_name }))
                (part("pot", subject.name(Slot::Pot), Some(pot.value_ohm), &html! {
                    (resistor(DIVIDER, (middle, NODE), pot.value_ohm))
                    // The wiper, strapped to the free end of the track.
                    path class="wire" d=(path(&[
                        (DIVIDER, 232.0), (DIVIDER - 16.0, 232.0), (DIVIDER - 16.0, 197.0), (DIVIDER - 9.0, 197.0),
                    ])) {}
                    path class="solid" d=(path(&[
                        (DIVIDER - 6.5, 197.0), (DIVIDER - 13.0, 193.5), (DIVIDER - 13.0, 200.5), (DIVIDER - 6.5, 197.0),
                    ])) {}
                }))
                (beside(x, 194.0, &format!("pot {}", ohms(pot.value_ohm)), &named(subject, Slot::Pot)))
            }
        }
        (part("divider_line", full, Some(ri), &below))
        (beside(x, 276.0, &format!("RI {}", ohms(ri)), &line_name))
    }
}

fn load(subject: &Subject<'_>) -> Markup {
    let output = match subject.rail.output {
        Output::Fixed { voltage_v, .. } => volts(voltage_v),
        Output::Adjustable { from_v, to_v, .. } => format!("{} to {}", volts(from_v), volts(to_v)),
    };
    let max_a = subject.rail.load.max_a;
    let middle = (RAIL + GROUND) / 2.0;
    html! {
        g class="terminal" data-terminal="output" data-load=(max_a) {
            (line("wire", (LOAD, RAIL), (LOAD, GROUND)))
            rect class="body" x=(px(LOAD - 8.0)) y=(px(middle - 26.0)) width="16" height="52" {}
            (text("strong end", (LOAD + 8.0, RAIL - 26.0), "output"))
            (text("end", (LOAD + 8.0, RAIL - 12.0), &output))
            (text("strong end halo", (LOAD - 12.0, middle + 36.0), "load"))
            (text("end halo", (LOAD - 12.0, middle + 50.0), &format!("to {}", amps(max_a))))
        }
    }
}

fn told(subject: &Subject<'_>) -> String {
    let name = |slot| subject.name(slot).unwrap_or("none");
    let divider = &subject.at_rail.divider;
    let upper = match &subject.fitted.pot {
        None => format!("RF {}", ohms(divider.upper.ohm)),
        Some(pot) => format!(
            "RX {} in series with the pot {} of {}",
            ohms(divider.upper.ohm),
            name(Slot::Pot),
            ohms(pot.value_ohm)
        ),
    };
    let sink = match subject.fitted.cooling {
        Cooling::Heatsink(_) => format!("on heatsink {}", name(Slot::Heatsink)),
        Cooling::OwnSink(_) => "on the sheet's own sink".to_owned(),
        Cooling::Unmounted(_) => "without a heatsink".to_owned(),
    };
    format!(
        "The feed goes to the collector of pass transistor {} {sink}; its emitter is the output. \
         Zener {} with RZ {} sets the + input of amplifier {}, which drives the base. The divider from \
         the output, {upper} above RI {}, sets the − input.",
        name(Slot::Pass),
        name(Slot::Zener),
        ohms(subject.at_rail.rz.ohm),
        name(Slot::Amplifier),
        ohms(divider.ri.ohm)
    )
}
