//! A change note in Markdown, for sign-off: what was, what is, which checks moved, which cautions
//! apply, what to measure on the bench. It leaves room for names and dates and approves nothing.

use super::Substitution;
use super::mend::Mend;
use super::tables::{ROOM, changes, checks, figures, goes_in, readings, same_numbers, troubles};
use crate::markdown;
use crate::table::{Column, Document, Table};

/// The columns of one clause a row.
const CLAUSES: [Column; 1] = [Column::text("clause", "a clause")];

/// The columns of who signs.
const SIGNATURES: [Column; 4] = [
    Column::text("step", "who does what"),
    Column::text("name", "room for a name"),
    Column::text("date", "room for a date"),
    Column::text("remarks", "room for remarks"),
];

/// The note for one way to mend a design.
pub fn note(of: &Substitution, mend: &Mend) -> String {
    let gone: Vec<&str> = of.gone.iter().map(|part| part.part.as_str()).collect();
    let mut what = changes(mend, of.currency.as_ref());
    what.name = "What was, what is";
    what.about = format!(
        "{} in place of {}; design {}, rail sheet {}, {} boards. This note records a calculation and \
         approves nothing.",
        goes_in(mend),
        gone.join(", "),
        of.file,
        of.sheet,
        of.boards
    );
    let mut moved = checks(of.before.as_ref(), &mend.after);
    moved.name = "Checks";
    moved.about =
        "Every check of the rail sheet, as built and with the change: the share of what is \
                   allowed that is used. Asked and allowed are in the unit beside the name."
            .to_owned();
    let mut bench = readings(&mend.after.bench);
    bench.about = "What the board should read, with every part at the worst end of its tolerance. A \
                   reading outside is a fault of the board, of a part, or of a figure in the catalogs."
        .to_owned();
    let figures = figures(of.before.as_ref(), &mend.after, of.currency.as_deref());
    let tables = vec![
        what,
        clauses("To be looked at", open_points(of, mend)),
        figures,
        moved,
        bench,
        clauses("Cautions", of.cautions.iter().map(|c| (*c).to_owned()).collect()),
        clauses("Not checked", of.not_checked.clone()),
        signatures(),
    ];
    markdown::document(&Document { title: format!("Change note: {}", of.name), tables })
}

fn clauses(name: &'static str, list: Vec<String>) -> Table {
    let mut table = Table::new(name, &CLAUSES);
    table.rows = list.into_iter().map(|clause| vec![clause.into()]).collect();
    table
}

/// What a person has to look at before anything is ordered.
fn open_points(of: &Substitution, mend: &Mend) -> Vec<String> {
    let mut list = same_numbers(mend);
    list.extend(troubles(mend));
    for part in &mend.parts {
        let name = part.is.as_deref().unwrap_or("no part");
        list.extend(board_point(part.on_board).map(|point| format!("{name}: {point}")));
    }
    let before = of.before.as_ref();
    if before.is_some_and(|fit| !fit.holds) {
        list.push("The design as built does not hold.".to_owned());
    }
    list.extend(mend.after.conditions.iter().map(|c| format!("As before the change, {c}")));
    list
}

fn board_point(board: ::substitute::change::Board) -> Option<&'static str> {
    use ::substitute::change::Board;
    match board {
        Board::Same => None,
        Board::OtherPinout => Some("the same package with another pinout"),
        Board::PinoutUnknown => {
            Some("the same package; a pinout is blank: compare the data sheets before it is fitted")
        }
        Board::OtherPackage => Some("another package: the board or its mounting changes"),
        Board::Unknown => Some("a package is blank: whether it fits the board is not known"),
        Board::Added => Some("there was no part in this place"),
        Board::Removed => Some("the place stays empty"),
    }
}

fn signatures() -> Table {
    let mut table = Table::new("Names and dates", &SIGNATURES);
    table.rows = ["prepared", "calculation read", "bench test done", "decided"]
        .map(|step| vec![step.into(), ROOM.into(), ROOM.into(), ROOM.into()])
        .to_vec();
    table
}
