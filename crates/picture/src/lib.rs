//! A set of parts at its rail, drawn.
//!
//! Each picture is an SVG that carries its own words: a title and a description for those who can't see
//! it, and for programs the axes, bars and points as data attributes in full precision (the page
//! `docs/pictures.md` says which). Every figure that is drawn comes from [`circuit`] by way of a
//! [`subject::Subject`]; nothing is calculated here but places on paper.
//!
//! | module | what it holds |
//! |---|---|
//! | [`kind`] | the pictures there are |
//! | [`subject`] | what a picture is drawn from |
//! | `diagram` | the circuit with its parts and values |
//! | `operating_area` | the transistor's safe operating area with load line and fault |
//! | `headroom` | feed and output levels with what stands between them |
//! | `output_window` | the output at its corners against what is asked |
//! | `stress` | the use of every limit |
//! | `front` | cost, loss and stress of the front |
//! | [`style`] | colours and lines, in light and dark |
//! | [`standalone`] | a picture as a file of its own, as SVG or PNG |
//! | `frame`, `axis`, `label` | what all pictures share |
//!
//! Markup is written by `maud`, which escapes every text and attribute by itself and is checked when
//! it is compiled; the page of `report` uses it too, so that a picture goes into a page as it is.
//!
//! This crate does not read or write files, print, compute a check, choose or rank.

mod axis;
mod diagram;
mod frame;
mod front;
mod headroom;
pub mod kind;
mod label;
mod operating_area;
mod output_window;
pub mod standalone;
mod stress;
pub mod style;
pub mod subject;

pub use kind::Kind;
use maud::Markup;
pub use subject::{Front, FrontPoint, Subject};

/// Draws a picture that shows one set of parts.
///
/// `prefix` begins the ids in it: pictures on one page need different ones. It must be a name that an
/// id may have: letters, digits and hyphens, a letter first.
pub fn draw(kind: OfOneSet, subject: &Subject<'_>, prefix: &str) -> Markup {
    let frame = frame::Frame::new(kind.kind(), prefix);
    match kind {
        OfOneSet::Circuit => diagram::draw(subject, &frame),
        OfOneSet::OperatingArea => operating_area::draw(subject, &frame),
        OfOneSet::Headroom => headroom::draw(subject, &frame),
        OfOneSet::Output => output_window::draw(subject, &frame),
        OfOneSet::Stress => stress::draw(subject, &frame),
    }
}

/// Draws the front. `prefix` as for [`draw`].
pub fn draw_front(front: &Front, prefix: &str) -> Markup {
    front::draw(front, &frame::Frame::new(Kind::Front, prefix))
}

pub use kind::OfOneSet;
