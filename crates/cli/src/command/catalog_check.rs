//! `railwright catalog check`

use super::{Answer, Fault};
use crate::arguments::{Catalogs, Showing};
use crate::load::{ShopText, read_catalogs};
use crate::screen::Screen;
use catalog::plausible::plausibility;
use clap::Args;
use notice::has_errors;
use report::catalog_check::CatalogCheck;
use report::notices::Warnings;

/// Tell what is wrong, doubtful or missing in catalogs
///
/// Reads every catalog of the folder as the other commands do and tells each fault at its file, line and
/// column: cells that can't be read, rows that occur twice, column names that are nearly known, figures
/// that are hard to believe. A table sums up each file, and blank optional cells are counted by column.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    #[command(flatten)]
    catalogs: Catalogs,
    #[command(flatten)]
    pub(super) showing: Showing,
}

const EXAMPLES: &str = "\
Examples, on the sample catalogs:
  railwright catalog check --catalogs catalogs-sample
  railwright catalog check --catalogs catalogs-sample --skip-broken-rows --ascii

Exit status: 0 where nothing is wrong (doubts are no faults), 2 where something is.";

/// The code of notices that count blank optional cells.
const GAPS: &str = "column-gaps";

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    let catalogs = &arguments.catalogs;
    let mut notices = Vec::new();
    let shop_file = ShopText::read(catalogs, &mut notices);
    let shop = shop_file.as_ref().and_then(|shop_file| {
        let read = read_catalogs(catalogs, &shop_file.content, false, &mut notices);
        // Faulty rows have been told; for the sums the sound ones are read once more.
        read.or_else(|| {
            let without_broken = Catalogs { skip_broken_rows: true, ..catalogs.clone() };
            read_catalogs(&without_broken, &shop_file.content, false, &mut Vec::new())
        })
    });
    if let Some(shop) = &shop {
        plausibility(shop, &mut notices);
        // The summary counts blank cells, column by column.
        notices.retain(|notice| notice.code != GAPS);
    }
    screen.tell(&notices, Warnings::Every);
    if let Some(shop) = &shop {
        let text = CatalogCheck::new(shop, &notices).render(&screen.data);
        screen.show(&text).map_err(|e| Fault::Defect(format!("standard output: {e}")))?;
    }
    if has_errors(&notices) { Err(Fault::Told) } else { Ok(Answer::Done) }
}
