//! What a folder of catalogs holds and lacks.

use crate::look::{Look, grouped};
use catalog::plausible::{Gap, gaps};
use catalog::{Catalog, FileRead, Kind, Shop};
use comfy_table::{Attribute, Cell, CellAlignment, Table, TableComponent};
use eligible::file_name;
use notice::{Notice, Severity};

/// What the summary says of each file.
const HEADINGS: [&str; 7] =
    ["file", "rows", "unproven", "left out", "broken", "errors", "warnings"];

/// One line of the summary: a catalog file.
#[derive(Debug, Clone, PartialEq)]
pub struct Line {
    /// Its file.
    pub file: String,
    /// The file is there.
    pub is_there: bool,
    /// Rows that can be chosen from.
    pub rows: usize,
    /// Rows that blank cells leave unproven.
    pub unproven: usize,
    /// Rows that are none of this tool's business.
    pub left_out: usize,
    /// Rows that something is wrong with.
    pub broken: usize,
    /// Notices about the file that are errors.
    pub errors: usize,
    /// Notices about the file that are warnings.
    pub warnings: usize,
}

impl Line {
    /// A cell for each of [`HEADINGS`].
    fn cells(&self, look: &Look) -> [String; 7] {
        let number = |n: usize| look.text(&grouped(&n.to_string()));
        let of_rows = |n: usize| if self.is_there { number(n) } else { "-".to_owned() };
        [
            look.text(&self.file),
            of_rows(self.rows),
            of_rows(self.unproven),
            of_rows(self.left_out),
            of_rows(self.broken),
            number(self.errors),
            number(self.warnings),
        ]
    }
}

/// What a folder of catalogs holds and lacks.
#[derive(Debug, Clone)]
pub struct CatalogCheck<'a> {
    /// A line for each file, in the order of kinds and names; one for a kind without a file.
    pub lines: Vec<Line>,
    /// Blank cells of optional columns.
    pub gaps: Vec<Gap>,
    shop: &'a Shop,
}

impl<'a> CatalogCheck<'a> {
    /// Sums up what was read, and the notices about it.
    pub fn new(shop: &'a Shop, notices: &[Notice]) -> Self {
        let lines = [
            lines(&shop.zeners, notices),
            lines(&shop.opamps, notices),
            lines(&shop.transistors, notices),
            lines(&shop.resistors, notices),
            lines(&shop.pots, notices),
            lines(&shop.heatsinks, notices),
        ]
        .concat();
        Self { lines, gaps: gaps(shop), shop }
    }

    /// The summary for people.
    pub fn render(&self, look: &Look) -> String {
        let mut text = self.table(look);
        text.push('\n');
        if !self.gaps.is_empty() {
            text.push('\n');
            text += &look.heading("Blank optional cells");
            text.push('\n');
            for kind in Kind::ALL {
                text += &self.gaps_of(kind, look);
            }
        }
        let unproven: Vec<_> = self.shop.unproven().collect();
        if !unproven.is_empty() {
            text.push('\n');
            let heading = format!("Unproven parts, never chosen ({})", unproven.len());
            text += &look.heading(&heading);
            text.push('\n');
            for (kind, part) in unproven {
                let maker =
                    if part.maker.is_empty() { String::new() } else { format!("{}/", part.maker) };
                let line = format!(
                    "{}:{} {maker}{} lacks {}",
                    file_name(self.shop, kind, part.file),
                    part.line,
                    part.part,
                    part.lacks.join(", ")
                );
                text += &look.paragraph(&line, 2, 4);
            }
        }
        text
    }

    fn gaps_of(&self, kind: Kind, look: &Look) -> String {
        let gaps: Vec<&Gap> = self.gaps.iter().filter(|g| g.kind == kind).collect();
        let Some(first) = gaps.first() else { return String::new() };
        let columns: Vec<String> = gaps
            .iter()
            .map(|g| format!("{} {}", g.column, grouped(&g.blank.to_string())))
            .collect();
        let rows = grouped(&first.rows.to_string());
        let line = format!("{}, of {rows} rows: {}", kind.file_name(), columns.join(", "));
        look.paragraph(&line, 2, 4)
    }

    fn table(&self, look: &Look) -> String {
        let mut table = Table::new();
        table.load_preset(comfy_table::presets::NOTHING);
        let rule = if look.ascii { '-' } else { '─' };
        table.set_style(TableComponent::HeaderLines, rule);
        table.set_style(TableComponent::MiddleHeaderIntersections, rule);
        if look.colour {
            table.enforce_styling();
        } else {
            table.force_no_tty();
        }
        let title = |text: &str| {
            let cell = Cell::new(text);
            if look.colour { cell.add_attribute(Attribute::Bold) } else { cell }
        };
        table.set_header(HEADINGS.map(title));
        for line in &self.lines {
            table.add_row(line.cells(look));
        }
        for (place, column) in table.column_iter_mut().enumerate() {
            column.set_padding((0, 2));
            if place > 0 {
                column.set_cell_alignment(CellAlignment::Right);
            }
        }
        let text = table.trim_fmt();
        let widest = text.lines().map(textwrap::core::display_width).max().unwrap_or(0);
        if widest > look.width { self.in_words(look) } else { text }
    }

    /// The table for a narrow terminal: a paragraph a file.
    fn in_words(&self, look: &Look) -> String {
        let paragraph = |line: &Line| {
            let cells = line.cells(look);
            let counts = HEADINGS.iter().zip(&cells).skip(1);
            let counts: Vec<String> = counts.map(|(of, n)| format!("{of} {n}")).collect();
            let file = cells.first().map_or("", String::as_str);
            look.paragraph(&format!("{file}: {}", counts.join(", ")), 0, 2)
        };
        self.lines.iter().map(paragraph).collect::<String>().trim_end().to_owned()
    }
}

fn lines<T>(catalog: &Catalog<T>, notices: &[Notice]) -> Vec<Line> {
    let line = |file: &str| {
        let about = |severity| {
            notices.iter().filter(|n| n.severity == severity && n.place.file == file).count()
        };
        Line {
            file: file.to_owned(),
            is_there: false,
            rows: 0,
            unproven: 0,
            left_out: 0,
            broken: 0,
            errors: about(Severity::Error),
            warnings: about(Severity::Warning),
        }
    };
    if catalog.files.is_empty() {
        return vec![line(catalog.kind.file_name())];
    }
    let of_file = |(number, file): (u16, &FileRead)| Line {
        is_there: true,
        rows: catalog.rows.iter().filter(|r| r.file == number).count(),
        unproven: catalog.unproven.iter().filter(|u| u.file == number).count(),
        left_out: catalog.left_out.iter().filter(|l| l.file == number).count(),
        broken: file.broken,
        ..line(&file.name)
    };
    (0u16..).zip(&catalog.files).map(of_file).collect()
}
