//! Colours and lines.
//!
//! Colours are those of M. Okabe and K. Ito, "Color Universal Design" (2002, revised 2008), which stay
//! apart for people with any of the usual kinds of colour blindness. None carries a meaning alone: what
//! differs in colour differs also in weight, dash, hatching or shape, and has its name beside it, so
//! that a grey print says the same. Text is drawn in ink, never in a colour.

use std::fmt::Write as _;

/// What a colour is used for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Role {
    /// The ground.
    Paper,
    /// Text and outlines.
    Ink,
    /// Text of second rank.
    Quiet,
    /// Lines of a grid.
    Grid,
    /// What happens in service, and function checks.
    Service,
    /// Damage checks, faults, limits.
    Danger,
    /// What is asked or accepted, and room that is left.
    Room,
    /// The set of parts that is shown.
    Marked,
}

impl Role {
    /// Every role.
    pub const ALL: [Role; 8] = [
        Role::Paper,
        Role::Ink,
        Role::Quiet,
        Role::Grid,
        Role::Service,
        Role::Danger,
        Role::Room,
        Role::Marked,
    ];

    /// Its name in style sheets.
    pub const fn name(self) -> &'static str {
        match self {
            Role::Paper => "paper",
            Role::Ink => "ink",
            Role::Quiet => "quiet",
            Role::Grid => "grid",
            Role::Service => "service",
            Role::Danger => "danger",
            Role::Room => "room",
            Role::Marked => "marked",
        }
    }

    /// On a light ground.
    pub const fn light(self) -> &'static str {
        match self {
            Role::Paper => "#ffffff",
            Role::Ink => "#1c1f22",
            Role::Quiet => "#54595e",
            Role::Grid => "#d3d7da",
            // Blue, vermillion, bluish green, reddish purple of the palette.
            Role::Service => "#0072b2",
            Role::Danger => "#d55e00",
            Role::Room => "#009e73",
            Role::Marked => "#cc79a7",
        }
    }

    /// On a dark ground.
    pub const fn dark(self) -> &'static str {
        match self {
            Role::Paper => "#14171a",
            Role::Ink => "#eceef0",
            Role::Quiet => "#a9b0b6",
            Role::Grid => "#3a4046",
            // Sky blue in place of blue, which is too dark here; the others serve as they are.
            Role::Service => "#56b4e9",
            Role::Danger => "#e8741c",
            Role::Room => "#1fb98c",
            Role::Marked => "#d98fb8",
        }
    }
}

/// Typefaces of pictures. The last but one is what PNG files are drawn with.
pub const TYPEFACES: &str =
    "system-ui,\"Segoe UI\",Roboto,Helvetica,Arial,\"DejaVu Sans Condensed\",sans-serif";

/// The rules of all pictures, with the colours as `colour` writes them.
pub fn rules(colour: impl Fn(Role) -> String) -> String {
    let [paper, ink, quiet, grid, service, danger, room, marked] = Role::ALL.map(colour);
    let rules = [
        (".paper", format!("fill:{paper}")),
        ("text", format!("fill:{ink};font-family:{TYPEFACES};font-size:11.5px")),
        ("text.quiet", format!("fill:{quiet};font-size:10.5px")),
        ("text.strong", "font-weight:bold".to_owned()),
        (
            "text.halo",
            format!("paint-order:stroke;stroke:{paper};stroke-width:3px;stroke-linejoin:round"),
        ),
        (".middle", "text-anchor:middle".to_owned()),
        (".end", "text-anchor:end".to_owned()),
        (".wire", format!("fill:none;stroke:{ink};stroke-width:1.4px;stroke-linejoin:round")),
        (".body", format!("fill:{paper};stroke:{ink};stroke-width:1.4px;stroke-linejoin:round")),
        (".solid", format!("fill:{ink};stroke:none")),
        (".grid", format!("fill:none;stroke:{grid};stroke-width:1px")),
        (".grid.fine", "stroke-width:.5px".to_owned()),
        (".edge", format!("fill:none;stroke:{ink};stroke-width:1px")),
        (".lead", format!("fill:none;stroke:{quiet};stroke-width:.6px")),
        (".given", format!("fill:none;stroke:{quiet};stroke-width:1px")),
        (".derated", format!("fill:none;stroke:{service};stroke-width:1px")),
        (".in-service", format!("fill:none;stroke:{service};stroke-width:2.6px")),
        (".in-fault", format!("fill:none;stroke:{danger};stroke-width:2.6px")),
        (".load", format!("fill:none;stroke:{ink};stroke-width:1.8px")),
        (".d1", "stroke-dasharray:9 3".to_owned()),
        (".d2", "stroke-dasharray:6 3".to_owned()),
        (".d3", "stroke-dasharray:3 2".to_owned()),
        (".d4", "stroke-dasharray:1.5 2".to_owned()),
        (".spot", format!("fill:{ink};stroke:{paper};stroke-width:1.2px")),
        (".spot.fault", format!("fill:{danger};stroke:{ink};stroke-width:1.2px")),
        (".level", format!("fill:none;stroke:{ink};stroke-width:1px;stroke-dasharray:4 3")),
        (".feed", format!("fill:{quiet};fill-opacity:.35;stroke:{quiet};stroke-width:1.2px")),
        (".output", format!("fill:{room};fill-opacity:.3;stroke:{room};stroke-width:1.4px")),
        (".takes", format!("fill:{service};fill-opacity:.45;stroke:{service};stroke-width:1.2px")),
        (".needs", format!("fill:{danger};fill-opacity:.35;stroke:{danger};stroke-width:1.2px")),
        (".left", format!("fill:none;stroke:{ink};stroke-width:1px;stroke-dasharray:2 2")),
        (".window", format!("fill:{service};stroke:{service};stroke-width:1px")),
        (".limit", format!("fill:none;stroke:{danger};stroke-width:1.8px")),
        (".bar", format!("stroke:{ink};stroke-width:.8px")),
        (".bar.damage", format!("fill:{danger}")),
        (".bar.function", format!("fill:{service};fill-opacity:.35")),
        (".hatch", format!("fill:none;stroke:{service};stroke-width:1px")),
        (".track", format!("fill:none;stroke:{grid};stroke-width:.8px")),
        (".other", format!("fill:{service};fill-opacity:.75;stroke:{paper};stroke-width:.6px")),
        (".this", format!("fill:{marked};stroke:{ink};stroke-width:1.6px")),
    ];
    rules.into_iter().fold(String::new(), |mut text, (selector, rule)| {
        let _ = write!(text, ".picture {selector}{{{rule}}}");
        text
    })
}

/// The rules for a file of its own: light, and dark where the reader wants that.
///
/// Colours are written out, for many programs that show SVG know no custom properties.
pub fn for_a_file() -> String {
    let dark = rules(|role| role.dark().to_owned());
    format!("{}@media (prefers-color-scheme:dark){{{dark}}}", only_light())
}

/// The rules in light alone: for PNG files.
pub fn only_light() -> String {
    rules(|role| role.light().to_owned())
}

/// The rules for a page that sets the custom properties of [`properties`].
pub fn for_a_page() -> String {
    rules(|role| format!("var(--{})", role.name()))
}

/// Declarations of the custom properties in light or dark.
pub fn properties(dark: bool) -> String {
    Role::ALL.iter().fold(String::new(), |mut text, role| {
        let colour = if dark { role.dark() } else { role.light() };
        let _ = write!(text, "--{}:{colour};", role.name());
        text
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Relative luminance. Source: W3C, Web Content Accessibility Guidelines 2.2.
    fn luminance(colour: &str) -> f64 {
        let channel = |at: usize| {
            let c = f64::from(u8::from_str_radix(&colour[at..at + 2], 16).expect("hexadecimal"));
            let c = c / 255.0;
            if c <= 0.04045 { c / 12.92 } else { ((c + 0.055) / 1.055).powf(2.4) }
        };
        0.2126 * channel(1) + 0.7152 * channel(3) + 0.0722 * channel(5)
    }

    fn contrast(a: &str, b: &str) -> f64 {
        let (a, b) = (luminance(a), luminance(b));
        (a.max(b) + 0.05) / (a.min(b) + 0.05)
    }

    #[test]
    fn text_and_lines_stand_out_from_the_paper() {
        let grounds: [fn(Role) -> &'static str; 2] = [Role::light, Role::dark];
        for colour in grounds {
            let against_paper = |role| contrast(colour(role), colour(Role::Paper));
            // 4.5 for text, 3 for what a picture means: success criteria 1.4.3 and 1.4.11.
            for role in [Role::Ink, Role::Quiet] {
                assert!(against_paper(role) >= 4.5, "{role:?}: {}", against_paper(role));
            }
            for role in [Role::Service, Role::Danger, Role::Room] {
                assert!(against_paper(role) >= 3.0, "{role:?}: {}", against_paper(role));
            }
        }
    }

    #[test]
    fn a_file_needs_no_custom_property() {
        assert!(!for_a_file().contains("var("));
        assert!(for_a_page().contains("var(--ink)"));
    }
}
