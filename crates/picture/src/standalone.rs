//! A picture as a file of its own.

use crate::style;
use maud::{Markup, PreEscaped, html};
use resvg::tiny_skia::{Pixmap, Transform};
use resvg::usvg::{Options, Tree, fontdb};
use std::fmt;
use std::sync::Arc;

/// Pixels of a PNG for each unit of the picture: sharp on paper at the usual size of a column.
const PIXELS: f32 = 3.0;

/// A picture could not be turned into pixels. Pictures of this crate give no reason to.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct NotDrawn(String);

impl fmt::Display for NotDrawn {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "the picture can't be drawn: {}", self.0)
    }
}

impl std::error::Error for NotDrawn {}

/// The text of an SVG file: light, and dark for readers who want that.
pub fn svg(picture: &Markup) -> String {
    with_rules(picture, &style::for_a_file())
}

/// The bytes of a PNG file, in light.
///
/// Text is set in DejaVu Sans Condensed, which this crate carries (Bitstream Vera licence, which lets it
/// be passed on), so that the same picture comes out on every machine.
///
/// # Errors
/// Where the picture is no sound SVG; none of [`crate::draw`] is.
pub fn png(picture: &Markup) -> Result<Vec<u8>, NotDrawn> {
    let fault = |error: &dyn fmt::Display| NotDrawn(error.to_string());
    let options = Options { fontdb: Arc::new(fonts()), ..Options::default() };
    let text = with_rules(picture, &style::only_light());
    let tree = Tree::from_str(&text, &options).map_err(|e| fault(&e))?;
    let side = |units: f32| (units * PIXELS).ceil() as u32;
    let mut pixels = Pixmap::new(side(tree.size().width()), side(tree.size().height()))
        .ok_or_else(|| fault(&"it has no size"))?;
    resvg::render(&tree, Transform::from_scale(PIXELS, PIXELS), &mut pixels.as_mut());
    pixels.encode_png().map_err(|e| fault(&e))
}

/// The typefaces of PNG files, and no other.
fn fonts() -> fontdb::Database {
    let mut fonts = fontdb::Database::new();
    fonts.load_font_data(dejavu::sans_condensed::regular().to_vec());
    fonts.load_font_data(dejavu::sans_condensed::bold().to_vec());
    let family = fonts.faces().next().and_then(|face| face.families.first());
    if let Some((name, _)) = family.cloned() {
        fonts.set_sans_serif_family(name);
    }
    fonts
}

/// The picture with its rules inside, as an XML file.
fn with_rules(picture: &Markup, rules: &str) -> String {
    let style = html! { style { (PreEscaped(rules)) } }.into_string();
    let text = &picture.0;
    // Behind the opening tag, which holds no `>` of its own: attributes are escaped.
    let (opening, rest) = text.split_once('>').unwrap_or((text, ""));
    format!("<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n{opening}>{style}{rest}\n")
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Pixels of a picture of these words that are not paper.
    fn inked(words: &str) -> usize {
        let picture = html! {
            svg xmlns="http://www.w3.org/2000/svg" class="picture" width="80" height="20" {
                rect class="paper" width="80" height="20" {}
                text x="4" y="15" { (words) }
            }
        };
        let file = png(&picture).expect("a sound picture");
        let pixels = Pixmap::decode_png(&file).expect("a PNG file");
        assert_eq!((pixels.width(), pixels.height()), (240, 60));
        pixels.pixels().iter().filter(|p| p.red() < 128).count()
    }

    #[test]
    fn words_are_drawn_without_any_typeface_of_the_system() {
        assert_eq!(inked(""), 0);
        assert!(inked("4.7 kΩ") > 300, "{}", inked("4.7 kΩ"));
    }

    #[test]
    fn rules_stand_inside_the_picture() {
        let file = svg(&html! { svg class="picture" { title { "a > b" } } });
        assert!(file.contains("<svg class=\"picture\"><style>"), "{file}");
        assert!(file.ends_with("<title>a &gt; b</title></svg>\n"), "{file}");
    }
}
