//! Values that can be read but hardly be meant: a zener of 2 MV, a power rating in free air.
//!
//! None of this stops a run. Each doubt is a warning, for the command that checks catalogs.

use crate::cells::{ABSENT, trimmed};
use crate::column::{Axes, Cell, Column, Figure, Need};
use crate::decimal::{self, DecimalMark};
use crate::kind::Kind;
use crate::read::MOST_NOTICES;
use crate::read::records::for_each_record;
use crate::shop::{Catalog, Row, Shop};
use crate::source::{RowPlace, Source};
use circuit::parts::{Amplifier, OverCurrent, Transistor, Zener};
use circuit::rail::RATED_AT_C;
use csv::ByteRecord;
use notice::{Notice, Place};
use quantity::notation::{Unit, parse_bytes};
use std::collections::HashSet;

/// Adds a warning for each value that is hard to believe, one for each file whose cells have white
/// space at their ends, and one for each kind with the number of blank cells in columns that stand-ins
/// serve for.
///
/// At most [`MOST_NOTICES`] are added for one file.
pub fn plausibility(shop: &Shop, notices: &mut Vec<Notice>) {
    doubt(&shop.zeners, zener, notices);
    doubt(&shop.opamps, amplifier, notices);
    doubt(&shop.transistors, transistor, notices);
    doubt(&shop.resistors, |_, _| {}, notices);
    doubt(&shop.pots, |_, _| {}, notices);
    doubt(&shop.heatsinks, |_, _| {}, notices);
}

/// How many cells of an optional column are blank.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Gap {
    /// The catalog.
    pub kind: Kind,
    /// The column.
    pub column: &'static str,
    /// Blank cells; all of them where the file has no such column.
    pub blank: usize,
    /// Rows, but for those that are left out or broken.
    pub rows: usize,
}

/// The blank cells of the optional figures of all catalogs, column by column; columns without a blank
/// are not listed.
pub fn gaps(shop: &Shop) -> Vec<Gap> {
    let mut all = Vec::new();
    all.extend(gaps_of(&shop.zeners));
    all.extend(gaps_of(&shop.opamps));
    all.extend(gaps_of(&shop.transistors));
    all.extend(gaps_of(&shop.resistors));
    all.extend(gaps_of(&shop.pots));
    all.extend(gaps_of(&shop.heatsinks));
    all
}

fn gaps_of<T>(catalog: &Catalog<T>) -> Vec<Gap> {
    let columns = catalog.kind.columns();
    let mut blank = vec![0; columns.len()];
    let mut rows = 0;
    for (number, file) in (0u16..).zip(&catalog.files) {
        let kept = kept_lines(catalog, number);
        let source = file.source(catalog.kind);
        for_each_record(source.text, source.header, |line, _, record| {
            if !kept.contains(&line) {
                return;
            }
            rows += 1;
            for (count, field) in blank.iter_mut().zip(&source.header.fields) {
                let is_blank = record.get(*field as usize).is_none_or(|c| trimmed(c).is_empty());
                *count += usize::from(is_blank);
            }
        });
    }
    let is_figure = |c: &Column| matches!(c.cell, Cell::Number(_) | Cell::Points(_));
    let may_be_blank = |c: &Column| matches!(c.need, Need::Optional(_) | Need::ToProveIf(_));
    columns
        .iter()
        .zip(blank)
        .filter(|(column, blank)| is_figure(column) && may_be_blank(column) && *blank > 0)
        .map(|(column, blank)| Gap { kind: catalog.kind, column: column.name, blank, rows })
        .collect()
}

/// The lines of the rows of a file that were read, proven or not.
fn kept_lines<T>(catalog: &Catalog<T>, file: u16) -> HashSet<u32> {
    let proven = catalog.rows.iter().filter(|r| r.file == file).map(|r| r.line);
    let unproven = catalog.unproven.iter().filter(|u| u.file == file).map(|u| u.line);
    proven.chain(unproven).collect()
}

/// A doubt about one row: the column that shows it, what is odd, and what to look at.
struct Doubt {
    line: u32,
    column: &'static str,
    message: String,
    mend: &'static str,
}

/// Adds the doubts about one catalog: cell by cell, and those of its kind about whole rows.
fn doubt<T>(
    catalog: &Catalog<T>,
    about_row: impl Fn(&Row<T>, &mut dyn FnMut(&'static str, String, &'static str)),
    notices: &mut Vec<Notice>,
) {
    for (number, file) in (0u16..).zip(&catalog.files) {
        let source = file.source(catalog.kind);
        let kept = kept_lines(catalog, number);
        let mut starts = Vec::new();
        let mut found = Vec::new();
        let mut spaced = Spaced::default();
        for_each_record(source.text, source.header, |line, start, record| {
            if kept.contains(&line) {
                starts.push((line, start));
                implausible_cells(&source, line, record, &mut found);
                spaced.look_at(line, record);
            }
        });
        for row in catalog.rows.iter().filter(|row| row.file == number) {
            about_row(row, &mut |column, message, mend| {
                found.push(Doubt { line: row.line, column, message, mend });
            });
        }
        for row in catalog.left_out.iter().filter(|row| row.file == number) {
            if !row.polarity.eq_ignore_ascii_case("pnp") {
                let message = format!(
                    "the row is left out: its polarity `{}` is neither npn nor pnp",
                    row.polarity
                );
                found.push(Doubt {
                    line: row.line,
                    column: "polarity",
                    message,
                    mend: "write `npn` or `pnp`",
                });
            }
        }
        // Stable: the doubts about one row keep their order.
        found.sort_by_key(|d| d.line);
        let more = found.len().saturating_sub(MOST_NOTICES);
        for doubt in found.iter().take(MOST_NOTICES) {
            let start = starts
                .binary_search_by_key(&doubt.line, |(line, _)| *line)
                .ok()
                .and_then(|n| starts.get(n))
                .map(|(_, start)| *start);
            notices.push(warning(source, doubt, start));
        }
        if more > 0 {
            let message = format!("and {more} more doubtful values in this file");
            notices.push(Notice::warning("notices-cut", Place::file(source.name), message));
        }
        notices.extend(spaced.notice(source.name));
    }
    let gaps: Vec<String> = gaps_of(catalog)
        .iter()
        .map(|g| format!("`{}` in {} of {} rows", g.column, g.blank, g.rows))
        .collect();
    if !gaps.is_empty() {
        let message = format!("blank optional figures: {}", gaps.join(", "));
        let place = Place::file(catalog.kind.file_name());
        notices.push(Notice::warning("column-gaps", place, message));
    }
}

/// Cells with white space at an end, which is passed over: of no harm here, but a sign of what a
/// spreadsheet or another program makes of names.
#[derive(Default)]
struct Spaced {
    cells: usize,
    first_line: u32,
}

impl Spaced {
    fn look_at(&mut self, line: u32, record: &ByteRecord) {
        let cells = record.iter().filter(|cell| trimmed(cell).len() != cell.len()).count();
        if self.cells == 0 {
            self.first_line = line;
        }
        self.cells += cells;
    }

    fn notice(&self, file: &str) -> Option<Notice> {
        let cells = match self.cells {
            0 => return None,
            1 => "1 cell has".to_owned(),
            n => format!("{n} cells have"),
        };
        let message =
            format!("{cells} white space at an end, from this line on; it is passed over");
        Some(Notice::warning("cell-spaces", Place::line(file, self.first_line), message))
    }
}

fn warning(source: Source<'_>, doubt: &Doubt, start: Option<usize>) -> Notice {
    let code = "value-implausible";
    let notice = match start {
        Some(start) => {
            let place = RowPlace { source, start, line: doubt.line };
            place.about_cell(doubt.column, |p| Notice::warning(code, p, doubt.message.clone()))
        }
        None => {
            let place = Place::line(source.name, doubt.line);
            Notice::warning(code, place, doubt.message.clone())
        }
    };
    if doubt.mend.is_empty() { notice } else { notice.mend(doubt.mend) }
}

/// Cells outside the plausible range of their column.
fn implausible_cells(source: &Source<'_>, line: u32, record: &ByteRecord, found: &mut Vec<Doubt>) {
    let has_commas = source.header.decimal == DecimalMark::Comma;
    for (column, field) in source.kind.columns().iter().zip(&source.header.fields) {
        let Some((low, high)) = column.plausible.filter(|_| *field != ABSENT) else { continue };
        let cell = record.get(*field as usize).map(trimmed).unwrap_or_default();
        let with_point = has_commas.then(|| decimal::with_point(cell));
        for (figure, unit) in figures_in(with_point.as_deref().unwrap_or(cell), &column.cell) {
            if (low..=high).contains(&figure) {
                continue;
            }
            let unit = unit.symbol();
            let message = format!(
                "`{}`: {figure} {unit} is hard to believe; real parts lie between {low} and {high} {unit}",
                column.name
            );
            let message = message.replace(" ;", ";").trim_end().to_owned();
            found.push(Doubt {
                line,
                column: column.name,
                message,
                mend: "look at prefix and unit",
            });
            break;
        }
    }
}

/// The figures in a sound cell that a plausible range speaks of; of points those behind the colon.
fn figures_in(cell: &[u8], kind: &Cell) -> Vec<(f64, Unit)> {
    let read = |text: &[u8], unit| parse_bytes(text, unit).ok().map(|figure| (figure, unit));
    let behind_colons = |unit| {
        cell.split(|b| *b == b';')
            .filter_map(|item| item.rsplit(|b| *b == b':').next())
            .filter_map(|text| read(text, unit))
            .collect()
    };
    match kind {
        Cell::Number(Figure { unit, .. }) => read(cell, *unit).into_iter().collect(),
        Cell::Points(Axes { y, .. }) | Cell::NumberOrPoints(Axes { y, .. }) => behind_colons(*y),
        Cell::Price => behind_colons(Unit::Plain),
        Cell::Text | Cell::Word(_) | Cell::Count(..) | Cell::Numbers(_) | Cell::Texts => Vec::new(),
    }
}

/// Takes a doubt about a row: column, what is odd, what to look at.
type Tell<'t> = &'t mut dyn FnMut(&'static str, String, &'static str);

/// Below this a zener breaks down by tunnelling, and its voltage falls as it warms up, V; above
/// [`AVALANCHE_ABOVE_V`] by avalanche, and it rises. Between them either may be.
/// Source: makers' notes on zener temperature coefficients put the change at about 5 V; 4 and 7 V
/// leave room for its spread.
const TUNNELLING_BELOW_V: f64 = 4.0;
/// See [`TUNNELLING_BELOW_V`], V.
const AVALANCHE_ABOVE_V: f64 = 7.0;

fn zener(row: &Row<Zener>, tell: Tell<'_>) {
    let z = &row.figures;
    if z.tc_min_v_per_c > z.tc_max_v_per_c {
        tell(
            "tc_min_mv_per_c",
            "the least temperature coefficient lies above the greatest".to_owned(),
            "exchange `tc_min_mv_per_c` and `tc_max_mv_per_c`",
        );
    }
    if z.vz_v < TUNNELLING_BELOW_V && z.tc_min_v_per_c > 0.0 {
        tell(
            "tc_min_mv_per_c",
            format!(
                "a zener of {} V falls as it warms up, but its least temperature coefficient is positive",
                z.vz_v
            ),
            "look at the sign",
        );
    }
    if z.vz_v > AVALANCHE_ABOVE_V && z.tc_max_v_per_c < 0.0 {
        tell(
            "tc_max_mv_per_c",
            format!(
                "a zener of {} V rises as it warms up, but its greatest temperature coefficient is negative",
                z.vz_v
            ),
            "look at the sign",
        );
    }
    if z.izk_a.is_some_and(|knee| knee >= z.izt_a) {
        tell(
            "izk_a",
            "the knee current doesn't lie below the test current, so `zzk_ohm` is not used"
                .to_owned(),
            "",
        );
    }
}

fn amplifier(row: &Row<Amplifier>, tell: Tell<'_>) {
    let a = &row.figures;
    if a.vs_min_v > a.vs_max_v {
        tell(
            "vs_min_v",
            format!(
                "the least supply, {} V, lies above the greatest, {} V",
                a.vs_min_v, a.vs_max_v
            ),
            "exchange `vs_min_v` and `vs_max_v`",
        );
    }
}

/// Power rating and thermal resistance state the same slope twice; data sheets round both.
const SLOPES_APART: f64 = 0.1;

/// Two junctions in series drop at least this when hot and lightly loaded, V.
const LEAST_DARLINGTON_VBE_V: f64 = 1.2;

/// Where junction to case of common packages lies, °C/W: a house rule, from a chip that fills the
/// tab to one that is lost on it.
const USUAL_RTH_JC: [(&str, f64, f64); 2] = [("TO220", 0.3, 10.0), ("TO3", 0.2, 5.0)];

fn transistor(row: &Row<Transistor>, tell: Tell<'_>) {
    let q = &row.figures;
    let rise = q.tj_max_c - RATED_AT_C;
    let stated = q.pd_w * q.rth_jc_c_per_w;
    if q.rth_jc_c_per_w > 0.0 && (stated - rise).abs() > SLOPES_APART * rise {
        tell(
            "pd_w",
            format!(
                "pd_w·rth_jc_c_per_w = {stated:.4} °C, but tj_max_c − 25 = {rise} °C; they should agree"
            ),
            "`pd_w` is the rating at 25 °C case, not the one in free air",
        );
    }
    if q.junctions == 2 && greatest(&q.vbe_max_v) < LEAST_DARLINGTON_VBE_V {
        tell(
            "vbe_max_v",
            format!("two junctions in series drop more than {LEAST_DARLINGTON_VBE_V} V at most"),
            "look at `junctions`",
        );
    }
    if q.ic_max_a > q.hfe_min.last().0 {
        tell(
            "hfe_min",
            format!(
                "the gain is promised up to {} A, but `ic_max_a` is {} A: loads above have no proof",
                q.hfe_min.last().0,
                q.ic_max_a
            ),
            "",
        );
    }
    let areas = [
        ("soa_dc", Some(&q.soa_dc)),
        ("soa_1s", q.soa_pulse.s1.as_ref()),
        ("soa_100ms", q.soa_pulse.ms100.as_ref()),
        ("soa_10ms", q.soa_pulse.ms10.as_ref()),
        ("soa_1ms", q.soa_pulse.ms1.as_ref()),
    ];
    for (column, area) in areas {
        let Some(area) = area else { continue };
        if area.last().0 > q.vceo_v {
            tell(
                column,
                format!("the curve goes to {} V, beyond `vceo_v` = {} V", area.last().0, q.vceo_v),
                "",
            );
        }
        // Pulses may go beyond the continuous rating.
        let most = area.as_slice().iter().map(|(_, i)| *i).fold(0.0, f64::max);
        if column == "soa_dc" && most > q.ic_max_a {
            tell(
                column,
                format!("the curve goes to {most} A, above `ic_max_a` = {} A", q.ic_max_a),
                "",
            );
        }
    }
    let package: String = row
        .package
        .iter()
        .flat_map(|p| p.chars())
        .filter(char::is_ascii_alphanumeric)
        .map(|c| c.to_ascii_uppercase())
        .collect();
    for (name, low, high) in USUAL_RTH_JC {
        if package == name && !(low..=high).contains(&q.rth_jc_c_per_w) {
            tell(
                "rth_jc_c_per_w",
                format!(
                    "{} °C/W from junction to case is far out for this package",
                    q.rth_jc_c_per_w
                ),
                "is it `rth_ja_c_per_w`?",
            );
        }
    }
}

fn greatest(over_current: &OverCurrent) -> f64 {
    match over_current {
        OverCurrent::Number(figure) => *figure,
        OverCurrent::Points(points) => {
            points.as_slice().iter().map(|(_, v)| *v).fold(f64::NEG_INFINITY, f64::max)
        }
    }
}
