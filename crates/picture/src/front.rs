//! The front: cost and loss, each against stress, with one set of parts marked.

use crate::axis::Axis;
use crate::frame::{Frame, WIDTH, path, px, text};
use crate::label::width;
use crate::subject::{Front, FrontPoint};
use maud::{Markup, html};

const HEIGHT: f64 = 312.0;
const TOP: f64 = 34.0;
const BOTTOM: f64 = 240.0;
const LEFT: f64 = 40.0;
/// Between the two fields.
const BETWEEN: f64 = 26.0;

/// One of the two fields.
struct Field {
    name: &'static str,
    title: String,
    figure: fn(&FrontPoint) -> f64,
    x: Axis,
    left: f64,
    right: f64,
}

fn fields(front: &Front) -> [Field; 2] {
    let half = (WIDTH - LEFT - BETWEEN - 10.0) / 2.0;
    let all = || front.points.iter().chain(&front.marked);
    let field = |name, title, figure: fn(&FrontPoint) -> f64, left: f64| {
        let figures: Vec<f64> = all().map(figure).collect();
        let right = left + half;
        Field { name, title, figure, x: Axis::roomy(&figures, (left, right)), left, right }
    };
    let cost = match &front.currency {
        Some(currency) => format!("cost of a board, {currency}"),
        None => "cost of a board".to_owned(),
    };
    [
        field("cost", cost, |p| p.cost, LEFT),
        field("loss", "loss, W for each W delivered".to_owned(), |p| p.loss, LEFT + half + BETWEEN),
    ]
}

/// Draws the front.
pub(crate) fn draw(front: &Front, frame: &Frame) -> Markup {
    let stresses: Vec<f64> = front.points.iter().chain(&front.marked).map(|p| p.stress).collect();
    let y = Axis::roomy(&stresses, (BOTTOM, TOP));
    let fields = fields(front);
    let body = html! {
        @for (at, field) in fields.iter().enumerate() {
            g class="field" data-field=(field.name) {
                (field.x.drawn_below((TOP, BOTTOM), &field.title))
                @if at == 0 {
                    (y.drawn_left((field.left, field.right), "stress: greatest use of a damage limit"))
                } @else {
                    (y.drawn_left((field.left, field.right), ""))
                }
                rect class="edge" x=(px(field.left)) y=(px(TOP))
                    width=(px(field.right - field.left)) height=(px(BOTTOM - TOP)) {}
                @for point in &front.points { (other(point, field, &y)) }
                @if let Some(point) = &front.marked { (marked(point, field, &y)) }
            }
        }
        (legend(front))
    };
    frame.around(HEIGHT, "The front of cost, loss and stress", &told(front), &body)
}

fn other(point: &FrontPoint, field: &Field, y: &Axis) -> Markup {
    let (cx, cy) = (field.x.at((field.figure)(point)), y.at(point.stress));
    html! {
        (data(point, "front", &html! {
            circle class="other" cx=(px(cx)) cy=(px(cy)) r="3.4" {}
        }))
    }
}

fn marked(point: &FrontPoint, field: &Field, y: &Axis) -> Markup {
    let (cx, cy) = (field.x.at((field.figure)(point)), y.at(point.stress));
    let name = name(point);
    let half = width(&name) / 2.0 + 4.0;
    let x = cx.clamp(field.left + half + 2.0, (field.right - half - 2.0).max(field.left + half));
    let above = cy - 12.0 > TOP + 10.0;
    html! {
        (data(point, "marked", &html! {
            path class="this" d=(path(&[
                (cx, cy - 7.5), (cx + 7.5, cy), (cx, cy + 7.5), (cx - 7.5, cy), (cx, cy - 7.5),
            ])) {}
        }))
        (text("strong halo middle", (x, if above { cy - 12.0 } else { cy + 20.0 }), &name))
    }
}

fn data(point: &FrontPoint, what: &str, drawn: &Markup) -> Markup {
    html! {
        g class="point" data-point=(what) data-id=(point.id) data-rank=[point.rank]
            data-cost=(point.cost) data-loss=(point.loss) data-stress=(point.stress) { (drawn) }
    }
}

fn name(point: &FrontPoint) -> String {
    match point.rank {
        Some(rank) => format!("{rank}: {}", point.id),
        None => point.id.clone(),
    }
}

fn is_on_front(front: &Front, point: &FrontPoint) -> bool {
    front.points.iter().any(|p| p.id == point.id)
}

fn legend(front: &Front) -> Markup {
    let y = BOTTOM + 50.0;
    html! {
        circle class="other" cx=(px(LEFT + 6.0)) cy=(px(y - 4.0)) r="3.4" {}
        (text("", (LEFT + 16.0, y), &format!("{} on the front; left and down is better", sets(front))))
        @if let Some(point) = &front.marked {
            @let words = if is_on_front(front, point) { "this one, on the front" } else { "this one, not on the front" };
            path class="this" d=(path(&[
                (LEFT + 6.0, y + 4.5), (LEFT + 12.0, y + 10.5), (LEFT + 6.0, y + 16.5),
                (LEFT, y + 10.5), (LEFT + 6.0, y + 4.5),
            ])) {}
            (text("", (LEFT + 16.0, y + 14.5), words))
        }
    }
}

fn sets(front: &Front) -> String {
    match front.points.len() {
        1 => "1 set of parts".to_owned(),
        n => format!("{n} sets of parts"),
    }
}

fn told(front: &Front) -> String {
    let mut words = format!(
        "{} that nothing beats on cost, loss and stress at once, as cost and as loss against stress.",
        sets(front)
    );
    if let Some(point) = &front.marked {
        let place = if is_on_front(front, point) { "on the front" } else { "not on the front" };
        words += &format!(
            " The one shown, {}, is {place}: cost {:.2}, loss {:.3}, stress {:.3}.",
            name(point),
            point.cost,
            point.loss,
            point.stress
        );
    }
    words
}
