//! How text is put on a terminal: its width, whether colours and characters beyond ASCII may be used.

/// What the terminal can show, and what the user wants to see on it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Look {
    /// Columns of text that fit.
    pub width: usize,
    /// Colours and bold letters may be used. They never carry a meaning alone.
    pub colour: bool,
    /// ASCII characters only.
    pub ascii: bool,
}

impl Look {
    /// A text as it can be shown. A control character in a part's name would act on the terminal, so
    /// it is replaced, as are the marks that turn the direction of writing.
    ///
    /// ```
    /// use report::look::Look;
    /// let plain = Look { width: 80, colour: false, ascii: true };
    /// assert_eq!(plain.text("4.7 kΩ at 70 °C"), "4.7 kohm at 70 degC");
    /// assert_eq!(plain.text("Müller\u{1b}[31m"), "Muller?[31m");
    /// ```
    pub fn text(&self, text: &str) -> String {
        self.folded(text).replace(NO_BREAK, " ")
    }

    /// As [`Look::text`], but for spaces at which no line may break.
    fn folded(&self, text: &str) -> String {
        let mut shown = String::with_capacity(text.len());
        for c in text.chars() {
            match c {
                '\n' | NO_BREAK => shown.push(c),
                c if acts_on_terminal(c) => shown.push(if self.ascii { '?' } else { '\u{fffd}' }),
                c if self.ascii && !c.is_ascii() => shown.push_str(in_ascii(c)),
                c => shown.push(c),
            }
        }
        shown
    }

    /// A heading.
    pub fn heading(&self, text: &str) -> String {
        let text = self.text(text);
        if self.colour { format!("\u{1b}[1m{text}\u{1b}[0m") } else { text }
    }

    /// A paragraph, broken into lines that fit and indented: the first line by `first`, others by
    /// `next` columns. Every line ends in a line break.
    pub fn paragraph(&self, text: &str, first: usize, next: usize) -> String {
        let (first, next) = (" ".repeat(first), " ".repeat(next));
        let options = textwrap::Options::new(self.width.max(20))
            .initial_indent(&first)
            .subsequent_indent(&next)
            .word_separator(textwrap::WordSeparator::AsciiSpace)
            .word_splitter(textwrap::WordSplitter::NoHyphenation)
            .wrap_algorithm(textwrap::WrapAlgorithm::FirstFit);
        let mut lines = textwrap::fill(&self.folded(text), options).replace(NO_BREAK, " ");
        lines.push('\n');
        lines
    }

    /// Items one after another, a semicolon between them, as a paragraph whose lines break between
    /// items where they can.
    pub fn items<T: AsRef<str>>(&self, items: &[T], first: usize, next: usize) -> String {
        let width = self.width.saturating_sub(next + 1);
        let whole = |item: &T| {
            let item = item.as_ref();
            if textwrap::core::display_width(item) <= width / 2 {
                item.replace(' ', "\u{a0}")
            } else {
                item.to_owned()
            }
        };
        let items: Vec<String> = items.iter().map(whole).collect();
        self.paragraph(&items.join("; "), first, next)
    }
}

/// A space at which no line breaks.
const NO_BREAK: char = '\u{a0}';

/// Control characters, and marks that turn the direction of writing.
pub(crate) fn acts_on_terminal(c: char) -> bool {
    let turns_writing =
        matches!(c, '\u{200e}' | '\u{200f}' | '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}');
    c.is_control() || turns_writing
}

/// The usual way of writing a character where only ASCII can be shown.
fn in_ascii(c: char) -> &'static str {
    match c {
        'Ω' | '\u{2126}' => "ohm",
        '→' => "->",
        '°' => "deg",
        'µ' | 'μ' => "u",
        'η' => "eta",
        'θ' => "theta",
        'τ' => "tau",
        'ε' => "eps",
        'δ' | 'Δ' => "delta",
        '±' => "+/-",
        '×' => "x",
        '·' => "*",
        '−' | '–' | '—' => "-",
        '…' => "...",
        '≤' => "<=",
        '≥' => ">=",
        '²' => "^2",
        '∞' => "inf",
        _ => deunicode::deunicode_char(c).unwrap_or("?"),
    }
}

/// A whole number in groups of three digits: `82 944 000`, with spaces at which no line breaks.
///
/// ```
/// use report::look::grouped;
/// assert_eq!(grouped("82944000"), "82\u{a0}944\u{a0}000");
/// assert_eq!(grouped("648"), "648");
/// ```
pub fn grouped(digits: &str) -> String {
    let mut text = String::with_capacity(digits.len() * 4 / 3);
    for (place, digit) in digits.chars().enumerate() {
        if place > 0 && (digits.len() - place).is_multiple_of(3) {
            text.push('\u{a0}');
        }
        text.push(digit);
    }
    text
}
