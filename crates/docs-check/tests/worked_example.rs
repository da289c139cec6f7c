//! The worked example of `docs/ranking.md`, worked out again by the code.

use circuit::merit;
use circuit::rail::{Ambient, Derating, DividerRules, Feed, Load, Output, Rail, StandIns, Thermal};
use docs_check::page::Page;
use docs_check::root;
use quantity::digits::compare;
use select::problem::Weights;
use select::score::score;

/// A row of the page's table.
struct Row {
    name: String,
    cost: f64,
    side_a: f64,
    loss: f64,
    stress: f64,
    score: f64,
    shown: f64,
    pass: String,
    on_front: bool,
}

fn rows() -> Vec<Row> {
    let page = Page::read(&root(), "docs/ranking.md").expect("the page on ranking");
    let rows: Vec<Row> = page
        .table("candidate")
        .into_iter()
        .map(|cells| {
            let text = |i: usize| cells.get(i).cloned().unwrap_or_default();
            let figure = |i: usize| text(i).parse().unwrap_or_else(|_| panic!("{:?}", cells));
            Row {
                name: text(0),
                cost: figure(1),
                side_a: figure(2) / 1000.0,
                loss: figure(3),
                stress: figure(4),
                score: figure(5),
                shown: figure(6),
                pass: text(7),
                on_front: text(8) == "yes",
            }
        })
        .collect();
    assert_eq!(rows.len(), 5, "the table of docs/ranking.md was not found whole");
    rows
}

/// The rail of the example: 12 V, 0.8 A from 20 V.
fn rail() -> Rail {
    Rail {
        feed: Feed { min_v: 17.0, nominal_v: 20.0, max_v: 25.0, max_loaded_v: 25.0 },
        output: Output::Fixed { voltage_v: 12.0, tolerance: 0.05 },
        load: Load { max_a: 0.8, min_a: 0.0 },
        ambient: Ambient { min_c: 0.0, max_c: 40.0 },
        fault: None,
        bias_a: None,
        divider: DividerRules {
            min_a: 0.0005,
            max_a: 0.002,
            allow_error_v: 0.05,
            allow_bias_a: 1e-6,
        },
        thermal: Thermal { interface_c_per_w: 1.0, sink_c_per_w: None },
        derating: Derating::NONE,
        stand_ins: StandIns::default(),
    }
}

const EVEN: Weights = Weights { cost: 1.0, loss: 1.0, stress: 1.0 };

fn close(a: f64, b: f64) -> bool {
    (a - b).abs() < 1e-9
}

#[test]
fn losses_and_scores_follow_from_the_figures() {
    for row in rows() {
        assert!(close(merit::loss(&rail(), row.side_a), row.loss), "loss of {}", row.name);
        let score = score(&EVEN, row.cost, row.loss, row.stress);
        assert!(close(score, row.score), "score of {}: {score}", row.name);
    }
}

#[test]
fn rows_stand_in_rank_order_with_their_ratio_to_the_first() {
    let rows = rows();
    let first = rows[0].score;
    for row in &rows {
        assert!((row.score / first - row.shown).abs() < 5e-4, "shown score of {}", row.name);
    }
    for pair in rows.windows(2) {
        let by_rank =
            compare(pair[0].score, pair[1].score).then_with(|| compare(pair[0].cost, pair[1].cost));
        assert!(by_rank.is_lt(), "{} before {}", pair[0].name, pair[1].name);
    }
    assert!(compare(rows[0].score, rows[1].score).is_eq(), "the first two show a tie");
}

#[test]
fn the_front_is_what_nothing_beats() {
    let rows = rows();
    let beats = |a: &Row, b: &Row| {
        a.cost <= b.cost
            && a.loss <= b.loss
            && a.stress <= b.stress
            && (a.cost, a.loss, a.stress) != (b.cost, b.loss, b.stress)
    };
    for row in &rows {
        let beaten = rows.iter().any(|other| beats(other, row));
        assert_eq!(row.on_front, !beaten, "{} on the front", row.name);
    }
}

#[test]
fn a_spread_of_one_keeps_the_first_row_of_each_transistor() {
    let mut seen = Vec::new();
    let mut kept = Vec::new();
    for row in rows() {
        if !seen.contains(&row.pass) {
            kept.push(row.name);
            seen.push(row.pass);
        }
    }
    let page = Page::read(&root(), "docs/ranking.md").expect("the page on ranking");
    let told = format!("`--spread pass=1` keeps {}", kept.join(", "));
    assert!(page.text.contains(&told), "docs/ranking.md should say: {told}");
}
