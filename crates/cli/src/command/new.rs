//! `railwright new`: what to begin with.

use super::{Answer, Fault};
use crate::arguments::Showing;
use crate::files::{FileFault, check, write_whole};
use crate::load::SHOP_FILE;
use crate::screen::Screen;
use catalog::Kind;
use catalog::start::starting_file;
use clap::{Args, Subcommand};
use std::path::{Path, PathBuf};

/// Write something to begin with: a rail sheet, or the catalogs of a shop
///
/// Nothing that is there already is ever replaced.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    #[command(subcommand)]
    what: What,
}

impl Arguments {
    /// What is to be shown, and how.
    pub(super) fn showing(&self) -> Showing {
        match &self.what {
            What::Sheet { showing, .. } | What::Shop { showing, .. } => *showing,
        }
    }
}

const EXAMPLES: &str = "\
Examples, on the sample catalogs:
  railwright new sheet logger-5v.toml
  railwright new shop my-parts

Exit status: 0 where the files are written, 2 where one of them is there already or can't be written.";

#[derive(Debug, Subcommand)]
enum What {
    /// Write a rail sheet with every key, its meaning and its default
    ///
    /// What a sheet must say is given as in a small example; every other key is commented out.
    #[command(after_long_help = SHEET_EXAMPLES)]
    Sheet {
        /// The file to write (.toml), or a folder to write rail.toml into
        #[arg(value_name = "FILE|DIR")]
        path: PathBuf,
        #[command(flatten)]
        showing: Showing,
    },
    /// Write a folder of catalogs with all columns and an invented part in each
    ///
    /// With the starting sheet the folder works as it is: the invented parts make a rail that holds.
    /// Put your own parts in their place.
    #[command(after_long_help = SHOP_EXAMPLES)]
    Shop {
        /// The folder to write into; it is made where it isn't there
        #[arg(value_name = "DIR")]
        folder: PathBuf,
        #[command(flatten)]
        showing: Showing,
    },
}

const SHEET_EXAMPLES: &str = "\
Examples, on the sample catalogs:
  railwright new sheet heater-9v.toml
  railwright shortlist heater-9v.toml --catalogs catalogs-sample";

const SHOP_EXAMPLES: &str = "\
Examples, on the sample catalogs:
  railwright new shop bench-parts
  railwright catalog check --catalogs bench-parts";

/// The sheet in a folder.
const SHEET_FILE: &str = "rail.toml";

/// A shop file to begin with; sound as it is, since all of it is commented out but the currency.
const SHOP_TEXT: &str = "\
# What the sheets of this shop share.

# The currency of every price, as it is to be shown.
currency = \"EUR\"

# Any key of a sheet may stand here as a default for all of them.
#[thermal]
#interface_c_per_w = 1.0

# A catalog that came from elsewhere may keep its own headings: say here what they mean.
#[columns]
#\"price each\" = \"cost\"
";

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    match &arguments.what {
        What::Sheet { path, .. } => {
            let is_file = path.extension().is_some_and(|ending| ending == "toml");
            let path = if is_file { path.clone() } else { in_folder(path)?.join(SHEET_FILE) };
            write_all(&[(path, sheet::starting_sheet())], screen)
        }
        What::Shop { folder, .. } => {
            let folder = in_folder(folder)?;
            let catalogs =
                Kind::ALL.map(|kind| (folder.join(kind.file_name()), starting_file(kind)));
            let shop = (folder.join(SHOP_FILE), SHOP_TEXT.to_owned());
            write_all(&[&catalogs[..], &[shop]].concat(), screen)
        }
    }
}

/// The folder, made where it isn't there; the one that holds it must be.
fn in_folder(folder: &Path) -> Result<&Path, FileFault> {
    if folder.is_dir() {
        return Ok(folder);
    }
    check(std::iter::once(folder), false)?;
    std::fs::create_dir(folder).map_err(|e| FileFault::NotWritten(folder.to_owned(), e))?;
    Ok(folder)
}

/// Writes files none of which is there.
fn write_all(files: &[(PathBuf, String)], screen: &Screen) -> Result<Answer, Fault> {
    check(files.iter().map(|(path, _)| path.as_path()), false).map_err(|fault| match fault {
        // Elsewhere --overwrite would help.
        FileFault::Exists(path) => FileFault::Kept(path),
        fault => fault,
    })?;
    for (path, text) in files {
        write_whole(path, text.as_bytes(), false)?;
        screen.mention(&format!("wrote {}", path.display()));
    }
    Ok(Answer::Done)
}
