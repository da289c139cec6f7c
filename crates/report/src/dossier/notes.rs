//! What a reader should know beside the figures.

use crate::table::{Column, Table};

/// The name of the table.
pub const NAME: &str = "Notes";

/// The columns of the table.
pub const COLUMNS: [Column; 3] = [
    Column::text(
        "about",
        "the rail or candidate that the note is about; blank where it goes for all",
    ),
    Column::text(
        "kind",
        "`assumed`, `not checked`, `unproven part`, `caution`, `fault`, `changed since kept`, `set for this run`, `counted`, `order lines`, `SHA-256`",
    ),
    Column::text("note", "in words"),
];

/// Notes, gathered one after another; one that was said of the same thing before is not repeated.
#[derive(Debug)]
pub(super) struct Notes {
    table: Table,
}

impl Notes {
    pub(super) fn new() -> Self {
        Self { table: Table::new(NAME, &COLUMNS) }
    }

    pub(super) fn say(&mut self, about: &str, kind: &str, note: impl Into<String>) {
        self.table.rows.push(vec![about.into(), kind.into(), note.into().into()]);
    }

    pub(super) fn say_each<T: AsRef<str>>(&mut self, about: &str, kind: &str, notes: &[T]) {
        for note in notes {
            self.say(about, kind, note.as_ref());
        }
    }

    pub(super) fn into_table(self) -> Table {
        self.table
    }
}
