//! Headroom: the feed and the output, and for each part between them what it takes of the difference.
//!
//! A pillar stands for each check that asks for headroom. What it takes is stacked on the output, or on
//! the reference; the dashed box above is what is left up to the lowest feed.

use crate::axis::Axis;
use crate::frame::{Frame, line, px, text};
use crate::label::{apart, volts};
use crate::subject::Subject;
use circuit::check::{Check, Finding};
use circuit::rail::Output;
use maud::{Markup, html};

const HEIGHT: f64 = 360.0;
const LEFT: f64 = 42.0;
const RIGHT: f64 = 334.0;
const TOP: f64 = 32.0;
const BOTTOM: f64 = 300.0;
const PILLARS: usize = 4;
/// Width of a pillar, and how far it stands from the left of its place; its words stand to its right.
const WIDE: f64 = 18.0;
const INSET: f64 = 8.0;

/// A piece of a pillar, from one voltage to another.
struct Piece {
    name: &'static str,
    class: &'static str,
    from_v: f64,
    to_v: f64,
    words: String,
}

/// What stands on one foot.
struct Pillar {
    foot: [&'static str; 2],
    check: Option<Check>,
    pieces: Vec<Piece>,
}

fn piece(name: &'static str, class: &'static str, from_v: f64, to_v: f64, words: &str) -> Piece {
    Piece { name, class, from_v, to_v, words: words.to_owned() }
}

/// What is left between what is asked and what is allowed.
fn room(finding: Option<&Finding>) -> Option<Piece> {
    let Finding { asked, allowed, .. } = *finding?;
    let left = allowed - asked;
    let words = if left >= 0.0 { volts(left) } else { format!("short {}", volts(-left)) };
    let (class, from_v, to_v) =
        if left >= 0.0 { ("left", asked, allowed) } else { ("limit", allowed, asked) };
    Some(Piece { name: "room", class, from_v, to_v, words })
}

fn pillars(subject: &Subject<'_>) -> Vec<Pillar> {
    let rail = subject.rail;
    let (low_v, high_v) = (rail.lowest_output_v(), rail.highest_output_v());
    let amp = &subject.at_rail.amplifier.part;
    let pass = &subject.at_rail.pass;
    let bias = subject.at_rail.assembly().bias;
    let output = || piece("output", "output", low_v, high_v, "VL");
    let with_room = |foot, check, mut pieces: Vec<Piece>| {
        pieces.extend(room(subject.finding(check)));
        Pillar { foot, check: Some(check), pieces }
    };
    let base_v = high_v + pass.vbe_hi_v;
    let supply = subject.finding(Check::AmpSupplyHigh).map_or(f64::INFINITY, |f| f.allowed);
    vec![
        with_room(
            ["transistor", ""],
            Check::Dropout,
            vec![output(), piece("vce-sat", "needs", high_v, high_v + pass.vce_sat_v, "VCE sat")],
        ),
        with_room(
            ["amplifier", "output"],
            Check::SwingHigh,
            vec![
                piece("swing-low", "needs", 0.0, amp.swing_low_v, "swing"),
                output(),
                piece("vbe", "takes", high_v, base_v, "VBE"),
                piece("swing-high", "needs", base_v, base_v + amp.swing_high_v, "swing"),
            ],
        ),
        with_room(
            ["amplifier", "input"],
            Check::AmpInputHigh,
            vec![
                piece("input-low", "needs", 0.0, amp.vcm_low_v, "range"),
                piece("reference", "window", bias.vz_lo_v, bias.vz_hi_v, "VZ"),
                piece("input-high", "needs", bias.vz_hi_v, bias.vz_hi_v + amp.vcm_high_v, "range"),
            ],
        ),
        Pillar {
            foot: ["amplifier", "supply"],
            check: Some(Check::AmpSupplyHigh),
            pieces: vec![
                piece("supply-low", "needs", 0.0, amp.vs_min_v, "least"),
                piece("supply", "left", amp.vs_min_v, supply, "allowed"),
            ],
        },
    ]
}

/// Draws the headroom.
pub(crate) fn draw(subject: &Subject<'_>, frame: &Frame) -> Markup {
    let rail = subject.rail;
    let y = Axis::linear(0.0, rail.feed.max_v * 1.06, (BOTTOM, TOP));
    let step = (RIGHT - LEFT) / PILLARS as f64;
    let body = html! {
        (y.drawn_left((LEFT, RIGHT), "V above ground"))
        rect class="edge" x=(px(LEFT)) y=(px(TOP)) width=(px(RIGHT - LEFT))
            height=(px(BOTTOM - TOP)) {}
        g class="feed-band" data-from=(rail.feed.min_v) data-to=(rail.feed.max_v) {
            rect class="feed" x=(px(LEFT)) y=(px(y.at(rail.feed.max_v))) width=(px(RIGHT - LEFT))
                height=(px(y.at(rail.feed.min_v) - y.at(rail.feed.max_v))) {}
        }
        (text("strong", (LEFT + 8.0, y.at(rail.feed.max_v) + 13.0), "feed"))
        (levels(subject, &y))
        @for (at, pillar) in pillars(subject).iter().enumerate() {
            (pillar_drawn(pillar, LEFT + step * at as f64, step, &y))
        }
        (text("", (LEFT, BOTTOM + 47.0), &lowest_feed(subject)))
    };
    frame.around(HEIGHT, "Headroom between feed and output", &told(subject), &body)
}

/// Lines across the field, each with its name to the right.
fn levels(subject: &Subject<'_>, y: &Axis) -> Markup {
    let rail = subject.rail;
    let mut lines = [
        ("VUmax", rail.feed.max_v),
        ("VUmin", rail.feed.min_v),
        ("VLmax", rail.highest_output_v()),
        ("VLmin", rail.lowest_output_v()),
    ];
    lines.sort_by(|a, b| b.1.total_cmp(&a.1));
    let wanted: Vec<f64> = lines.iter().map(|(_, v)| y.at(*v) + 3.5).collect();
    let placed = apart(&wanted, 12.0, TOP + 4.0, BOTTOM + 4.0);
    html! {
        @for ((name, v), label_y) in lines.iter().zip(placed) {
            g class="level-line" data-level=(name) data-v=(v) {
                (line("level", (LEFT, y.at(*v)), (RIGHT, y.at(*v))))
                (line("lead", (RIGHT, y.at(*v)), (RIGHT + 6.0, label_y - 3.5)))
                (text("", (RIGHT + 8.0, label_y), &format!("{name} {}", volts(*v))))
            }
        }
    }
}

fn pillar_drawn(pillar: &Pillar, place: f64, step: f64, y: &Axis) -> Markup {
    let left = place + INSET;
    let middle = place + step / 2.0;
    // From the top downwards, so that words that would meet are moved apart.
    let shown: Vec<&Piece> = pillar.pieces.iter().rev().filter(|p| p.to_v > p.from_v).collect();
    let wanted: Vec<f64> =
        shown.iter().map(|p| (y.at(p.to_v) + y.at(p.from_v)) / 2.0 + 3.5).collect();
    let placed = apart(&wanted, 11.0, TOP + 10.0, BOTTOM - 3.0);
    html! {
        g class="pillar" data-pillar={ (pillar.foot[0]) " " (pillar.foot[1]) }
            data-check=[pillar.check.map(Check::name)] {
            @for piece in &pillar.pieces { (piece_drawn(piece, left, y)) }
            @for (piece, y) in shown.iter().zip(placed) {
                (text("quiet halo", (left + WIDE + 4.0, y), &piece.words))
            }
            (text("middle", (middle, BOTTOM + 14.0), pillar.foot[0]))
            (text("middle", (middle, BOTTOM + 26.0), pillar.foot[1]))
        }
    }
}

fn piece_drawn(piece: &Piece, left: f64, y: &Axis) -> Markup {
    let (top, bottom) = (y.at(piece.to_v), y.at(piece.from_v));
    let beyond = if piece.to_v.is_finite() {
        format!("to {}", volts(piece.to_v))
    } else {
        "no value".to_owned()
    };
    html! {
        g class="piece" data-piece=(piece.name) data-from=(piece.from_v) data-to=(piece.to_v) {
            @if piece.to_v > piece.from_v {
                rect class=(piece.class) x=(px(left)) y=(px(top)) width=(px(WIDE))
                    height=(px((bottom - top).max(1.0))) {}
                @if piece.to_v > y.to {
                    (text("quiet middle", (left + WIDE / 2.0 + 8.0, TOP - 4.0), &beyond))
                }
            }
        }
    }
}

fn lowest_feed(subject: &Subject<'_>) -> String {
    let lowest_v = subject.proof.lowest_feed_v;
    let feed_v = subject.rail.feed.min_v;
    format!("lowest feed with headroom: {}; the feed falls to {}", volts(lowest_v), volts(feed_v))
}

fn told(subject: &Subject<'_>) -> String {
    let rail = subject.rail;
    let output = match rail.output {
        Output::Fixed { .. } => "The output lies",
        Output::Adjustable { .. } => "The output can be set",
    };
    let mut words = format!(
        "The feed lies between {} and {}. {output} between {} and {}.",
        volts(rail.feed.min_v),
        volts(rail.feed.max_v),
        volts(rail.lowest_output_v()),
        volts(rail.highest_output_v())
    );
    for check in [Check::Dropout, Check::SwingHigh, Check::AmpInputHigh] {
        if let Some(finding) = subject.finding(check) {
            words += &format!(
                " {} asks {} of {}.",
                check.name(),
                volts(finding.asked),
                volts(finding.allowed)
            );
        }
    }
    words
}
