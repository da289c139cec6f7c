//! `railwright whynot`

use super::{Answer, Fault};
use crate::arguments::{Catalogs, Showing};
use crate::load::{Loaded, sheet_and_parts};
use crate::progress::watched;
use crate::screen::Screen;
use clap::Args;
use eligible::Eligible;
use reasons::names::{Entry, Unknown, look_up};
use reasons::nothing::{something_qualifies, why_nothing};
use reasons::part::why_not;
use reasons::probe::ShopMarket;
use std::path::PathBuf;

/// Tell why nothing qualifies for a rail, or why a part is not on its list
///
/// Without a part: what the parts of each slot are lost to, a smallest set of requirements that can't
/// hold together, and for each key of the sheet by itself the nearest value that admits a candidate.
/// With parts: for each of them what stops it, by how much, and what would let it in.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    /// The rail sheet: what is wanted (TOML)
    sheet: PathBuf,
    /// Parts to ask about: a part of every maker, or maker/part
    part: Vec<String>,
    #[command(flatten)]
    catalogs: Catalogs,
    /// Set a value of the sheet for this run, for example load.max_a=1.5
    #[arg(long, value_name = "KEY=VALUE")]
    set: Vec<String>,
    #[command(flatten)]
    pub(super) showing: Showing,
}

const EXAMPLES: &str = "\
Examples, on the sample catalogs:
  railwright whynot catalogs-sample/sheets/impossible-10v.toml --catalogs catalogs-sample
  railwright whynot catalogs-sample/sheets/tide-gauge-12v.toml KWD8006B FNK360 \\
      --catalogs catalogs-sample

Exit status: 0 where the question is answered, 2 where the input or the command line is at fault.";

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    let (_, eligible) = sheet_and_parts(
        &arguments.sheet,
        &arguments.catalogs,
        &arguments.set,
        screen,
        Loaded::sort_parts_by_name,
    )?;
    let text = match arguments.part.as_slice() {
        [] => about_nothing(&eligible, screen)?,
        parts => about_parts(&eligible, parts, screen)?,
    };
    screen.show(&text).map_err(|e| Fault::Defect(format!("standard output: {e}")))?;
    Ok(Answer::Done)
}

/// Why nothing qualifies, or that something does.
fn about_nothing(eligible: &Eligible<'_>, screen: &Screen) -> Result<String, Fault> {
    let problem = eligible.problem();
    let market = ShopMarket { sheet: eligible.sheet, shop: eligible.shop, only: None };
    let qualifies =
        watched("searching", screen.shows_progress(), |_| something_qualifies(&problem));
    if qualifies {
        return Ok(report::reasons::something(eligible.sheet, &screen.data));
    }
    watched("searching", screen.shows_progress(), |_| {
        let reasons = why_nothing(&market, &problem).map_err(Fault::Search)?;
        Ok(report::reasons::nothing(&reasons, eligible.sheet, &problem, &screen.data))
    })
}

/// Why parts are not on the list; every name that means nothing is told.
fn about_parts(
    eligible: &Eligible<'_>,
    parts: &[String],
    screen: &Screen,
) -> Result<String, Fault> {
    let mut entries = Vec::new();
    let mut unknown = false;
    for text in parts {
        match look_up(text, eligible.shop) {
            Ok(found) => entries
                .extend(found.into_iter().filter(|e| !entries.contains(e)).collect::<Vec<_>>()),
            Err(Unknown { text, nearest }) => {
                unknown = true;
                let mend =
                    nearest.map(|name| format!("; did you mean `{name}`?")).unwrap_or_default();
                screen.say(&format!("error: no catalog holds a part `{text}`{mend}"));
            }
        }
    }
    if unknown {
        return Err(Fault::Told);
    }
    let problem = eligible.problem();
    let told = |entry: &Entry| {
        let reasons = why_not(entry, eligible, &problem).map_err(Fault::Search)?;
        let (sheet, shop) = (eligible.sheet, eligible.shop);
        Ok(report::reasons::part(entry, &reasons, sheet, shop, &screen.data))
    };
    watched("searching", screen.shows_progress(), |_| {
        let texts: Result<Vec<String>, Fault> = entries.iter().map(told).collect();
        Ok(texts?.join("\n"))
    })
}
