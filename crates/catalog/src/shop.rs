//! What has been read from a folder of catalogs.

use crate::decimal::DecimalMark;
use crate::header::Header;
use crate::kind::Kind;
use crate::locate;
use crate::price::Price;
use crate::source::Source;
use circuit::parts::{Amplifier, Heatsink, Pot, ResistorLine, Transistor, Zener};
use circuit::status::Status;
use compact_str::CompactString;

/// Everything that can be bought: one catalog of each kind.
#[derive(Debug, Clone)]
pub struct Shop {
    /// Reference zeners.
    pub zeners: Catalog<Zener>,
    /// Error amplifiers.
    pub opamps: Catalog<Amplifier>,
    /// Pass transistors.
    pub transistors: Catalog<Transistor>,
    /// Lines of fixed resistors.
    pub resistors: Catalog<ResistorLine>,
    /// Potentiometers; without a row where the file is missing and not needed.
    pub pots: Catalog<Pot>,
    /// Heatsinks; without a row where the file is missing.
    pub heatsinks: Catalog<Sink>,
}

impl Shop {
    /// The files that were read, in the order of [`Kind::ALL`], those of a kind by name.
    pub fn files(&self) -> impl Iterator<Item = &FileRead> {
        let Shop { zeners, opamps, transistors, resistors, pots, heatsinks } = self;
        [
            &zeners.files,
            &opamps.files,
            &transistors.files,
            &resistors.files,
            &pots.files,
            &heatsinks.files,
        ]
        .into_iter()
        .flatten()
    }

    /// A file of a kind, by its place among those of the kind.
    pub fn file(&self, kind: Kind, file: u16) -> Option<&FileRead> {
        match kind {
            Kind::Zeners => self.zeners.file(file),
            Kind::Opamps => self.opamps.file(file),
            Kind::Transistors => self.transistors.file(file),
            Kind::Resistors => self.resistors.file(file),
            Kind::Pots => self.pots.file(file),
            Kind::Heatsinks => self.heatsinks.file(file),
        }
    }

    /// Brings the parts that can be chosen into the order of maker and name, whatever order the files
    /// hold them in. Parts of one name stay in the order of files and lines.
    pub fn sort_by_name(&mut self) {
        self.zeners.sort_by_name();
        self.opamps.sort_by_name();
        self.transistors.sort_by_name();
        self.resistors.sort_by_name();
        self.pots.sort_by_name();
        self.heatsinks.sort_by_name();
    }

    /// The unproven parts of all catalogs, each with the kind of its catalog.
    pub fn unproven(&self) -> impl Iterator<Item = (Kind, &Unproven)> {
        let Shop { zeners, opamps, transistors, resistors, pots, heatsinks } = self;
        [
            (zeners.kind, &zeners.unproven),
            (opamps.kind, &opamps.unproven),
            (transistors.kind, &transistors.unproven),
            (resistors.kind, &resistors.unproven),
            (pots.kind, &pots.unproven),
            (heatsinks.kind, &heatsinks.unproven),
        ]
        .into_iter()
        .flat_map(|(kind, parts)| parts.iter().map(move |part| (kind, part)))
    }
}

/// The rows of one kind.
#[derive(Debug, Clone)]
pub struct Catalog<T> {
    /// Which kind.
    pub kind: Kind,
    /// The files that were read, in the order of their names: none where an optional one is missing.
    pub files: Vec<FileRead>,
    /// The parts that can be chosen, in the order of files and lines unless they were sorted.
    pub rows: Vec<Row<T>>,
    /// Parts that blank cells leave unproven, in the same order.
    pub unproven: Vec<Unproven>,
    /// Rows that are none of this tool's business: transistors that are not npn.
    pub left_out: Vec<LeftOut>,
    /// How many rows of all files were dropped because something in them is wrong.
    pub broken: usize,
}

impl<T> Catalog<T> {
    /// A catalog without a row.
    pub fn empty(kind: Kind) -> Self {
        Self {
            kind,
            files: Vec::new(),
            rows: Vec::new(),
            unproven: Vec::new(),
            left_out: Vec::new(),
            broken: 0,
        }
    }

    fn sort_by_name(&mut self) {
        self.rows.sort_by(|a, b| (&a.maker, &a.part).cmp(&(&b.maker, &b.part)));
    }

    /// The file that a row, an unproven part or a row that was left out came from.
    pub fn file(&self, file: u16) -> Option<&FileRead> {
        self.files.get(usize::from(file))
    }

    /// The text of a cell of the record that starts at `line`, by column name, trimmed; also of
    /// columns that only the file knows. Figures have a decimal point, whatever mark the file uses. None
    /// where there is no such record or column. Reads the file again: for messages, not for loops over
    /// rows.
    pub fn cell(&self, file: u16, line: u32, column: &str) -> Option<String> {
        self.cells(file, line).into_iter().find(|(name, _)| name == column).map(|(_, text)| text)
    }

    /// All cells of the record that starts at `line`, with the names of their columns, in the order
    /// of the file; figures as for [`Catalog::cell`]. Empty where there is no such record. Reads the
    /// file again.
    pub fn cells(&self, file: u16, line: u32) -> Vec<(String, String)> {
        self.file(file).map(|f| f.cells(self.kind, line)).unwrap_or_default()
    }
}

/// One part that can be bought.
#[derive(Debug, Clone, PartialEq)]
pub struct Row<T> {
    /// Index into [`Catalog::files`].
    pub file: u16,
    /// The physical line on which the record starts; the header is line 1.
    pub line: u32,
    /// The part's name.
    pub part: CompactString,
    /// Its maker; may be empty.
    pub maker: CompactString,
    /// What one piece costs.
    pub price: Price,
    /// Pieces in stock; None: the catalog doesn't say.
    pub stock: Option<f64>,
    /// Weeks until an order arrives.
    pub lead_weeks: Option<f64>,
    /// Where the part stands in its life.
    pub status: Status,
    /// Its package.
    pub package: Option<CompactString>,
    /// Its pinout.
    pub pinout: Option<CompactString>,
    /// What its data sheet promises.
    pub figures: T,
}

/// A heatsink with the packages it takes.
#[derive(Debug, Clone, PartialEq)]
pub struct Sink {
    /// Its thermal figures.
    pub figures: Heatsink,
    /// The packages that fit, written as the transistors' `package`.
    pub fits: Vec<CompactString>,
}

/// A part of which a needed cell is blank: nothing can be proven about it.
#[derive(Debug, Clone, PartialEq)]
pub struct Unproven {
    /// Index into [`Catalog::files`].
    pub file: u16,
    /// The physical line on which the record starts.
    pub line: u32,
    /// The part's name.
    pub part: CompactString,
    /// Its maker; may be empty.
    pub maker: CompactString,
    /// Where the part stands in its life.
    pub status: Status,
    /// Pieces in stock; None: the catalog doesn't say.
    pub stock: Option<f64>,
    /// What one piece costs; None: the cell is blank.
    pub price: Option<Price>,
    /// Weeks until an order arrives.
    pub lead_weeks: Option<f64>,
    /// Its package.
    pub package: Option<CompactString>,
    /// The columns it lacks, in the order in which they are declared.
    pub lacks: Vec<&'static str>,
}

/// A row that was passed over because of its polarity.
#[derive(Debug, Clone, PartialEq)]
pub struct LeftOut {
    /// Index into [`Catalog::files`].
    pub file: u16,
    /// The physical line on which the record starts.
    pub line: u32,
    /// The part's name.
    pub part: CompactString,
    /// Its maker; may be empty.
    pub maker: CompactString,
    /// The polarity as it is written.
    pub polarity: CompactString,
}

/// A catalog file as it was read.
#[derive(Debug, Clone)]
pub struct FileRead {
    /// The file's name within the folder: `zeners.csv`, `zeners/brindlow.csv`.
    pub name: String,
    /// The file, byte for byte.
    pub bytes: Vec<u8>,
    /// Its text as UTF-8 where the bytes are something else.
    pub(crate) decoded: Option<Vec<u8>>,
    /// How many of its rows were dropped because something in them is wrong.
    pub broken: usize,
    /// The header row with the names on the page in place of renamed ones.
    pub(crate) header: Header,
}

impl FileRead {
    /// The names of all columns as the reader understood them (renamed ones by their new name).
    pub fn columns(&self) -> &[String] {
        &self.header.names
    }

    /// The names, as the file writes them, of the columns that were renamed.
    pub fn renamed(&self) -> &[String] {
        &self.header.renamed
    }

    /// The text that rows were read from.
    fn text(&self) -> &[u8] {
        self.decoded.as_deref().unwrap_or(&self.bytes)
    }

    /// The file as its rows are read.
    pub(crate) fn source(&self, kind: Kind) -> Source<'_> {
        Source { kind, name: &self.name, text: self.text(), header: &self.header }
    }

    /// All cells of the record that starts at `line`, figures with a decimal point.
    fn cells(&self, kind: Kind, line: u32) -> Vec<(String, String)> {
        let texts = locate::record_texts(self.text(), line, self.header.separator);
        let holds_figures = |name: &str| kind.column(name).is_some_and(|c| c.cell.holds_figures());
        let has_commas = self.header.decimal == DecimalMark::Comma;
        self.header
            .names
            .iter()
            .zip(texts)
            .map(|(name, text)| match has_commas && holds_figures(name) {
                true => (name.clone(), text.replace(',', ".")),
                false => (name.clone(), text),
            })
            .collect()
    }
}

/// The column that an amplifier lacks when a short lasts long enough to heat its junction (more than
/// 1 s, [`circuit::rail::Fault::heats_junctions`]); None: it lacks nothing.
pub fn lacks_for_fault(amplifier: &Amplifier) -> Option<&'static str> {
    amplifier
        .isc_max_a
        .is_none()
        .then_some(crate::tables::opamps::COLUMNS[crate::tables::opamps::at::isc_max_a].name)
}

/// The column that a transistor lacks when a heatsink is to be chosen for it: without a package no
/// heatsink is known to fit, and without `rth_ja_c_per_w` it can't go unmounted. None: it lacks
/// nothing.
pub fn lacks_for_sink(row: &Row<Transistor>) -> Option<&'static str> {
    let lacks = row.package.is_none() && row.figures.rth_ja_c_per_w.is_none();
    lacks.then_some(crate::tables::common::COLUMNS[crate::tables::common::at::package].name)
}

/// A line or pot of this tolerance and temperature coefficient may measure nothing at all when it is
/// `span_c` away from 25 °C: 1 − tol ≤ 0 or 1 − tempco·ΔT ≤ 0. No corner of such a part is known, so a
/// rail with that span must refuse the row.
pub fn leaves_no_resistance(tol: f64, tempco_per_c: f64, span_c: f64) -> bool {
    use quantity::digits::at_most;
    at_most(1.0 - tol, 0.0) || at_most(1.0 - tempco_per_c * span_c, 0.0)
}
