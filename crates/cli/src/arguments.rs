//! Arguments that several commands take.

use circuit::slot::Slot;
use clap::Args;
use std::path::PathBuf;

/// Where parts come from.
#[derive(Debug, Clone, Args)]
pub(crate) struct Catalogs {
    /// Folder that holds the catalogs and, where there is one, shop.toml
    #[arg(long, value_name = "DIR", default_value = "catalogs")]
    pub(crate) catalogs: PathBuf,
    /// Leave rows out that something is wrong with, instead of stopping
    #[arg(long)]
    pub(crate) skip_broken_rows: bool,
}

/// What is shown, and how.
#[derive(Debug, Clone, Copy, Args)]
pub(crate) struct Showing {
    /// Say nothing on standard error but errors
    #[arg(long)]
    pub(crate) quiet: bool,
    /// Show ASCII characters only
    #[arg(long)]
    pub(crate) ascii: bool,
}

/// `SLOT=N`: at most N rows with the same part in a slot.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct SpreadLimit {
    pub(crate) slot: Slot,
    pub(crate) rows: u32,
}

impl std::str::FromStr for SpreadLimit {
    type Err = String;

    fn from_str(text: &str) -> Result<Self, String> {
        let (name, rows) = text.split_once('=').ok_or("write SLOT=N, for example pass=2")?;
        let slot = Slot::named(name.trim()).ok_or_else(|| unknown_slot(name.trim()))?;
        match rows.trim().parse() {
            Ok(rows) if rows > 0 => Ok(Self { slot, rows }),
            _ => Err(format!("`{rows}` is no number of rows; write a whole number from 1 on")),
        }
    }
}

/// How like a name has to be for a suggestion, 0 … 1.
const LIKE: f64 = 0.7;

fn unknown_slot(name: &str) -> String {
    let likeness = |slot: &Slot| strsim::jaro_winkler(name, slot.name());
    let nearest = Slot::ALL.into_iter().max_by(|a, b| likeness(a).total_cmp(&likeness(b)));
    match nearest.filter(|slot| likeness(slot) >= LIKE) {
        Some(slot) => format!("there is no slot `{name}`; did you mean `{}`?", slot.name()),
        None => {
            let names = Slot::ALL.map(Slot::name).join(", ");
            format!("there is no slot `{name}`; slots are {names}")
        }
    }
}
