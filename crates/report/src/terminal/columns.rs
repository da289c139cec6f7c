//! The columns that a table of candidates can have.

use crate::figure::Figure;
use crate::look::Look;
use crate::shortlist::{Candidate, Shortlist};
use circuit::slot::Slot;
use quantity::notation::{engineering, resistance};
use std::collections::HashSet;

/// A column: a title and a cell for each candidate. Titles and cells may have several lines.
pub(super) struct Column {
    /// What the table calls it where it is left out.
    pub(super) name: &'static str,
    pub(super) title: String,
    pub(super) is_number: bool,
    pub(super) cells: Vec<String>,
}

impl Column {
    fn new(
        list: &Shortlist<'_>,
        look: &Look,
        name: &'static str,
        title: &str,
        is_number: bool,
        cell: impl Fn(&Candidate<'_>) -> String,
    ) -> Self {
        let cells = list.candidates.iter().map(|c| look.text(&cell(c))).collect();
        Self { name, title: look.text(title), is_number, cells }
    }

    /// Terminal columns that it takes.
    pub(super) fn width(&self) -> usize {
        let texts = self.cells.iter().chain([&self.title]);
        texts.flat_map(|t| t.lines()).map(textwrap::core::display_width).max().unwrap_or(0)
    }
}

/// Makes the columns of a list.
pub(super) struct Columns<'a> {
    list: &'a Shortlist<'a>,
    look: &'a Look,
    /// Part names that the list holds of several makers.
    ambiguous: HashSet<&'a str>,
    price_places: usize,
}

impl<'a> Columns<'a> {
    pub(super) fn new(list: &'a Shortlist<'a>, look: &'a Look) -> Self {
        let mut parts: Vec<(&str, &str)> = list
            .candidates
            .iter()
            .flat_map(|c| &c.slots)
            .filter_map(|s| Some((s.part?, s.maker?)))
            .collect();
        parts.sort_unstable();
        parts.dedup();
        let ambiguous = parts.windows(2).filter(|w| w[0].0 == w[1].0).map(|w| w[0].0).collect();
        let cheap = |c: &Candidate<'_>| c.cost.0 > 0.0 && c.cost.0 < 1.0;
        let price_places = if list.candidates.iter().any(cheap) { 3 } else { 2 };
        Self { list, look, ambiguous, price_places }
    }

    /// One line a candidate: for wide terminals.
    pub(super) fn in_one_line(&self) -> Vec<Column> {
        let mut columns = vec![self.rank()];
        let slots = [Slot::Zener, Slot::Amplifier, Slot::Pass, Slot::Heatsink];
        columns.extend(slots.map(|slot| self.slot(slot)));
        if self.is_adjustable() {
            columns.push(self.slot(Slot::Pot));
        }
        let upper = if self.is_adjustable() { "RX" } else { "RF" };
        columns.extend([
            self.column("RZ", "RZ", true, |c| ohms(c.values.rz_ohm)),
            self.column(upper, upper, true, |c| ohms(upper_ohm(c))),
            self.column("RI", "RI", true, |c| ohms(c.values.ri_ohm)),
            self.column("cost", &self.cost_title(), true, |c| self.cost(c)),
            self.column("efficiency", "eff.", true, efficiency),
            self.column("margin", "margin, set by", false, margin),
            self.column("slack", "slack, set by", false, slack),
        ]);
        columns
    }

    /// Several lines a candidate: for narrow terminals.
    pub(super) fn stacked(&self) -> Vec<Column> {
        let pair = |first, second| {
            move |c: &Candidate<'_>| format!("{}\n{}", self.part(c, first), self.part(c, second))
        };
        let mut mounted = "pass\nheatsink".to_owned();
        if self.is_adjustable() {
            mounted += "\npot";
        }
        let upper = if self.is_adjustable() { "RX" } else { "RF" };
        vec![
            self.rank(),
            self.column("parts", "zener\namplifier", false, pair(Slot::Zener, Slot::Amplifier)),
            self.column("parts", &mounted, false, |c| {
                let cell = pair(Slot::Pass, Slot::Heatsink)(c);
                if self.is_adjustable() {
                    format!("{cell}\n{}", self.part(c, Slot::Pot))
                } else {
                    cell
                }
            }),
            self.column("values", "values", false, |c| {
                let [rz, ri] = [c.values.rz_ohm, c.values.ri_ohm].map(ohms);
                format!("RZ {rz}\n{upper} {}\nRI {ri}", ohms(upper_ohm(c)))
            }),
            self.column("cost", &format!("{}\neff.", self.cost_title()), true, |c| {
                format!("{}\n{}", self.cost(c), efficiency(c))
            }),
            self.column("margin", "margin, set by\nslack,  set by", false, |c| {
                format!("{}\n{}", margin(c), slack(c))
            }),
        ]
    }

    /// What a table shows where there is room left, the most wanted first.
    pub(super) fn if_room(&self, in_one_line: bool) -> Vec<Column> {
        let mut columns = vec![self.column("id", "id", false, |c| c.id.clone())];
        if in_one_line {
            columns
                .push(self.column("bias line", "RZ from", false, |c| self.part(c, Slot::BiasLine)));
            columns.push(self.column("divider line", "divider from", false, |c| {
                self.part(c, Slot::DividerLine)
            }));
        } else {
            let title = "RZ from\ndivider from";
            columns.push(self.column("resistor lines", title, false, |c| {
                [Slot::BiasLine, Slot::DividerLine].map(|slot| self.part(c, slot)).join("\n")
            }));
        }
        let between = if in_one_line { " … " } else { " …\n" };
        columns.extend([
            self.column("output", "output", false, |c| {
                let figures = c.output.figures();
                let ends = [figures.first(), figures.last()];
                let ends: Vec<String> = ends.into_iter().flatten().map(|v| volts(*v)).collect();
                ends.join(between)
            }),
            self.column("score", "score", true, |c| format!("{:.3}", c.score.0)),
            self.column("lowest feed", "lowest\nfeed", true, |c| volts(c.lowest_feed_v)),
            self.column("least gain", "least\ngain", true, |c| format!("{:.0}", c.least_gain.0)),
        ]);
        columns
    }

    fn is_adjustable(&self) -> bool {
        self.list.sheet.rail.is_adjustable()
    }

    fn column(
        &self,
        name: &'static str,
        title: &str,
        is_number: bool,
        cell: impl Fn(&Candidate<'_>) -> String,
    ) -> Column {
        Column::new(self.list, self.look, name, title, is_number, cell)
    }

    fn rank(&self) -> Column {
        self.column("rank", "#", true, |c| c.rank.to_string())
    }

    fn slot(&self, slot: Slot) -> Column {
        self.column(slot.name(), slot.name(), false, move |c| self.part(c, slot))
    }

    /// The part of a slot; with its maker where several makers' parts of that name are in the list.
    fn part(&self, candidate: &Candidate<'_>, slot: Slot) -> String {
        match candidate.slot(slot).map(|row| (row.part, row.maker)) {
            Some((Some(part), Some(maker))) if self.ambiguous.contains(part) => {
                format!("{maker}/{part}")
            }
            Some((Some(part), _)) => part.to_owned(),
            _ if slot == Slot::Heatsink && self.list.sheet.rail.chooses_heatsink() => {
                "unmounted".to_owned()
            }
            _ if slot == Slot::Heatsink => "own sink".to_owned(),
            _ => "none".to_owned(),
        }
    }

    fn cost_title(&self) -> String {
        self.list.currency.map_or("cost".to_owned(), |currency| format!("cost {currency}"))
    }

    fn cost(&self, candidate: &Candidate<'_>) -> String {
        format!("{:.*}", self.price_places, candidate.cost.0)
    }
}

fn upper_ohm(candidate: &Candidate<'_>) -> Figure {
    candidate.values.rf_ohm.or(candidate.values.rx_ohm).unwrap_or(Figure(0.0))
}

fn ohms(ohm: Figure) -> String {
    if ohm.0 == 0.0 { "link".to_owned() } else { resistance(ohm.0) }
}

fn volts(v: Figure) -> String {
    engineering(v.0, "V", 4)
}

/// Shares below 100 % stand one under another.
fn percent(share: Figure) -> String {
    format!("{:>4.1} %", share.0 * 100.0)
}

fn efficiency(candidate: &Candidate<'_>) -> String {
    percent(candidate.efficiency)
}

fn margin(candidate: &Candidate<'_>) -> String {
    let by = candidate.binding.damage.unwrap_or_default();
    format!("{} {by}", percent(candidate.margin))
}

fn slack(candidate: &Candidate<'_>) -> String {
    let by = candidate.binding.function.unwrap_or_default();
    format!("{} {by}", percent(candidate.slack))
}
