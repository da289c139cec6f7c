//! Tables with typed columns: what workbooks, Markdown, CSV and lists on a terminal are made from.
//!
//! A table is declared once, as a list of [`Column`]s: heading, what a cell holds, unit, meaning. Cells
//! are numbers and texts; how a number looks is for each output to say, by what its column declares.
//!
//! | module | what it holds |
//! |---|---|
//! | [`words`] | a cell as a person reads it |
//! | [`csv`] | a table as CSV |
//! | [`screen`] | a table on a terminal |

pub mod csv;
pub mod screen;
pub mod words;

/// What the cells of a column hold, and so how they are shown.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Shown {
    /// Words.
    Text,
    /// A whole number.
    Whole,
    /// A number of which [`words::DIGITS`] significant digits are shown.
    Number,
    /// A ratio, shown in percent.
    Share,
    /// A sum of money, shown with as many decimals as the column needs.
    Money,
}

/// A column as it is declared.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Column {
    /// What it is called. In CSV with underscores in place of spaces.
    pub heading: &'static str,
    /// What its cells hold.
    pub shown: Shown,
    /// The unit of its numbers; empty for none. Of money the unit is the table's currency.
    pub unit: &'static str,
    /// The sum of its cells is shown below.
    pub is_totalled: bool,
    /// What it says, in a line: the documentation takes it from here.
    pub meaning: &'static str,
}

impl Column {
    const fn new(heading: &'static str, shown: Shown, meaning: &'static str) -> Self {
        Self { heading, shown, unit: "", is_totalled: false, meaning }
    }

    /// A column of words.
    pub const fn text(heading: &'static str, meaning: &'static str) -> Self {
        Self::new(heading, Shown::Text, meaning)
    }

    /// A column of whole numbers.
    pub const fn whole(heading: &'static str, meaning: &'static str) -> Self {
        Self::new(heading, Shown::Whole, meaning)
    }

    /// A column of numbers in a unit; an empty one for ratios, or where another column tells the unit.
    pub const fn number(heading: &'static str, unit: &'static str, meaning: &'static str) -> Self {
        Self { unit, ..Self::new(heading, Shown::Number, meaning) }
    }

    /// A column of ratios that are shown in percent.
    pub const fn share(heading: &'static str, meaning: &'static str) -> Self {
        Self::new(heading, Shown::Share, meaning)
    }

    /// A column of money.
    pub const fn money(heading: &'static str, meaning: &'static str) -> Self {
        Self::new(heading, Shown::Money, meaning)
    }

    /// The column, with the sum of its cells below them.
    pub const fn totalled(self) -> Self {
        Self { is_totalled: true, ..self }
    }

    /// The cells are numbers.
    pub fn is_number(&self) -> bool {
        self.shown != Shown::Text
    }

    /// The heading as the name of a column in CSV: `unit price` becomes `unit_price`.
    pub fn csv_name(&self) -> String {
        self.heading.replace(' ', "_")
    }
}

/// What stands in a row under a column.
#[derive(Debug, Clone, PartialEq)]
pub enum Cell {
    /// Nothing.
    Blank,
    /// Words, as they came: each output makes them harmless in its own way.
    Text(String),
    /// A number, in the unit of its column. A spreadsheet knows no infinite ones: these become words.
    Number(f64),
    /// A number that is the product of two other cells of its row: a workbook holds it as a formula.
    Product {
        /// The number.
        value: f64,
        /// The headings of the two columns.
        of: [&'static str; 2],
    },
}

impl Cell {
    /// The number in the cell.
    pub fn number(&self) -> Option<f64> {
        match self {
            Cell::Number(value) | Cell::Product { value, .. } => Some(*value),
            Cell::Blank | Cell::Text(_) => None,
        }
    }
}

impl From<&str> for Cell {
    fn from(text: &str) -> Self {
        Cell::from(text.to_owned())
    }
}

/// An empty text is a blank cell.
impl From<String> for Cell {
    fn from(text: String) -> Self {
        if text.is_empty() { Cell::Blank } else { Cell::Text(text) }
    }
}

impl From<f64> for Cell {
    fn from(value: f64) -> Self {
        Cell::Number(value)
    }
}

impl From<u64> for Cell {
    fn from(value: u64) -> Self {
        // Above 2^53 a spreadsheet holds no whole number exactly either.
        Cell::Number(value as f64)
    }
}

impl From<usize> for Cell {
    fn from(value: usize) -> Self {
        Cell::from(value as u64)
    }
}

impl From<crate::figure::Figure> for Cell {
    fn from(figure: crate::figure::Figure) -> Self {
        Cell::Number(figure.0)
    }
}

impl<T: Into<Cell>> From<Option<T>> for Cell {
    fn from(value: Option<T>) -> Self {
        value.map_or(Cell::Blank, Into::into)
    }
}

/// A table: columns, and rows with a cell for each of them.
#[derive(Debug, Clone, PartialEq)]
pub struct Table {
    /// What it is called: the heading above it, or the name of its sheet (31 characters at most, none
    /// of `[ ] : * ? / \`).
    pub name: &'static str,
    /// A sentence on what it shows; may be empty.
    pub about: String,
    /// The currency of its money; None where nobody states one.
    pub currency: Option<String>,
    /// Its columns.
    pub columns: Vec<Column>,
    /// Its rows.
    pub rows: Vec<Vec<Cell>>,
    /// The sums below the columns that are totalled, by the heading. Given with the rows and not added
    /// up from cells: sums of money are exact.
    pub totals: Vec<(&'static str, f64)>,
    /// What the row of sums is called.
    pub total_word: String,
}

impl Table {
    /// A table without rows.
    pub fn new(name: &'static str, columns: &[Column]) -> Self {
        Self {
            name,
            about: String::new(),
            currency: None,
            columns: columns.to_vec(),
            rows: Vec::new(),
            totals: Vec::new(),
            total_word: "total".to_owned(),
        }
    }

    /// Some cell of a column is not blank.
    pub fn is_filled(&self, place: usize) -> bool {
        self.rows.iter().any(|row| row.get(place).is_some_and(|cell| *cell != Cell::Blank))
    }

    /// The place of a column.
    pub fn place(&self, heading: &str) -> Option<usize> {
        self.columns.iter().position(|column| column.heading == heading)
    }

    /// The sum below a column; None where none is shown.
    pub fn total(&self, column: &Column) -> Option<f64> {
        let total = self.totals.iter().find(|(heading, _)| *heading == column.heading);
        total.filter(|_| column.is_totalled).map(|(_, sum)| *sum)
    }

    /// Says in the row of sums that some rows have no amount.
    pub fn tell_unpriced(&mut self, lines: usize) {
        if lines > 0 {
            let lines = if lines == 1 { "1 line".to_owned() } else { format!("{lines} lines") };
            self.total_word = format!("total without {lines} of unknown price");
        }
    }

    /// The heading of a column with its unit: `load (A)`, `unit price (EUR)`.
    pub fn heading(&self, column: &Column) -> String {
        let unit = match (column.shown, &self.currency) {
            (Shown::Money, Some(currency)) => currency.as_str(),
            _ => column.unit,
        };
        let heading = column.heading;
        if unit.is_empty() { heading.to_owned() } else { format!("{heading} ({unit})") }
    }

    /// Decimals that the money of a column needs so that every amount is shown in full.
    pub fn money_decimals(&self, place: usize) -> usize {
        let amounts = self.rows.iter().filter_map(|row| row.get(place)?.number());
        let total = self.columns.get(place).and_then(|column| self.total(column));
        let needed = amounts.chain(total).map(words::decimals_of).max().unwrap_or(0);
        needed.clamp(words::LEAST_MONEY_DECIMALS, words::MOST_MONEY_DECIMALS)
    }
}

/// Several tables under one heading.
#[derive(Debug, Clone, PartialEq)]
pub struct Document {
    /// What it is about.
    pub title: String,
    /// Its tables, in order.
    pub tables: Vec<Table>,
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn money_is_shown_with_the_decimals_that_its_column_needs() {
        let mut table = Table::new("t", &[Column::money("price", "").totalled()]);
        table.rows = vec![vec![Cell::Number(1.5)], vec![Cell::Blank]];
        assert_eq!(table.money_decimals(0), 2);
        table.rows.push(vec![Cell::Number(0.0125)]);
        assert_eq!(table.money_decimals(0), 4);
        table.rows.push(vec![Cell::Number(1.0 / 3.0)]);
        assert_eq!(table.money_decimals(0), words::MOST_MONEY_DECIMALS);
    }

    #[test]
    fn headings_name_unit_and_currency() {
        let columns = [Column::number("load", "A", ""), Column::money("unit price", "")];
        let mut table = Table::new("t", &columns);
        assert_eq!(table.heading(&columns[0]), "load (A)");
        assert_eq!(table.heading(&columns[1]), "unit price");
        table.currency = Some("EUR".to_owned());
        assert_eq!(table.heading(&columns[1]), "unit price (EUR)");
        assert_eq!(columns[1].csv_name(), "unit_price");
    }
}
