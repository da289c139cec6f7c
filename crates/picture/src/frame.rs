//! The frame of every picture: its size, its words, its ids.

use crate::kind::Kind;
use crate::label::clean;
use maud::{Markup, html};

/// Width of every picture, in units that are pixels at natural size.
pub(crate) const WIDTH: f64 = 440.0;

/// Frames one picture.
pub(crate) struct Frame {
    kind: Kind,
    prefix: String,
}

impl Frame {
    pub(crate) fn new(kind: Kind, prefix: &str) -> Self {
        Self { kind, prefix: prefix.to_owned() }
    }

    /// An id within this picture.
    pub(crate) fn id(&self, name: &str) -> String {
        format!("{}-{}-{name}", self.prefix, self.kind.name())
    }

    /// The picture. Elements are never left open, so that it is sound as XML too.
    pub(crate) fn around(&self, height: f64, title: &str, told: &str, drawn: &Markup) -> Markup {
        let (title_id, told_id) = (self.id("title"), self.id("told"));
        html! {
            svg xmlns="http://www.w3.org/2000/svg" class={ "picture " (self.kind.name()) }
                role="img" aria-labelledby={ (title_id) " " (told_id) }
                data-picture=(self.kind.name())
                width=(px(WIDTH)) height=(px(height))
                viewBox={ "0 0 " (px(WIDTH)) " " (px(height)) } {
                title id=(title_id) { (clean(title)) }
                desc id=(told_id) { (clean(told)) }
                rect class="paper" x="0" y="0" width=(px(WIDTH)) height=(px(height)) {}
                (drawn)
            }
        }
    }
}

/// A place on paper, to a hundredth of a unit.
pub(crate) fn px(place: f64) -> String {
    let text = format!("{place:.2}");
    text.trim_end_matches('0').trim_end_matches('.').to_owned()
}

/// A path through points; empty for none.
pub(crate) fn path(points: &[(f64, f64)]) -> String {
    let mut text = String::new();
    for (at, (x, y)) in points.iter().enumerate() {
        let letter = if at == 0 { "M" } else { "L" };
        text += &format!("{letter}{} {}", px(*x), px(*y));
    }
    text
}

/// A straight line.
pub(crate) fn line(class: &str, (x0, y0): (f64, f64), (x1, y1): (f64, f64)) -> Markup {
    html! { path class=(class) d=(path(&[(x0, y0), (x1, y1)])) {} }
}

/// Text at a place.
pub(crate) fn text(class: &str, (x, y): (f64, f64), words: &str) -> Markup {
    html! { text class=(class) x=(px(x)) y=(px(y)) { (clean(words)) } }
}
