//! `railwright verify`

use super::{Answer, Fault};
use crate::arguments::{Catalogs, Showing};
use crate::files::{check, folder_of, write_whole};
use crate::load::{SHOP_FILE, ShopText, read_catalogs};
use crate::screen::Screen;
use catalog::Shop;
use clap::Args;
use notice::{Notice, Place, has_errors};
use report::figure::Pairs;
use report::hash::HashOf;
use report::notices::Warnings;
use report::proof::{self, DesignProof, Evidence, Verification};
use sheet::{Sheet, ShopFile};
use std::collections::HashMap;
use std::path::{Path, PathBuf};

/// Check designs as they are: every check with its formula, numbers and sources
///
/// Reads each design with the rail sheet that it names, finds its parts in the catalogs (or takes the
/// figures that the design itself gives for a part that no catalog holds), and makes every check with the
/// resistors as fitted: nothing is chosen again. One design is shown with its whole proof, each formula
/// with the numbers put in and each number with its source. Of several there is a line each, then what
/// fails. Catalog cells that have changed since a design was kept are told.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    /// The designs to check (TOML)
    #[arg(required = true, value_name = "DESIGN")]
    designs: Vec<PathBuf>,
    /// Check against this rail sheet, whatever the designs say
    #[arg(long, value_name = "SHEET")]
    sheet: Option<PathBuf>,
    #[command(flatten)]
    catalogs: Catalogs,
    /// Set a value of the sheet for this run, for example load.max_a=1.5
    #[arg(long, value_name = "KEY=VALUE")]
    set: Vec<String>,
    /// Write the proofs to a file as well: .json; may be given several times
    #[arg(long, value_name = "FILE", value_parser = json_file)]
    out: Vec<PathBuf>,
    /// Replace files that are there already
    #[arg(long)]
    overwrite: bool,
    #[command(flatten)]
    pub(super) showing: Showing,
}

const EXAMPLES: &str = "\
Examples, on the sample catalogs:
  railwright verify catalogs-sample/designs/tide-gauge-kept.toml \\
      --catalogs catalogs-sample
  railwright verify catalogs-sample/designs/*.toml \\
      --catalogs catalogs-sample --set ambient.max_c=40

Exit status: 0 where every design holds, 1 where a check or condition of one fails, 2 where a
design, its sheet, a catalog or the command line is at fault; other designs are checked all the
same.";

fn json_file(text: &str) -> Result<PathBuf, String> {
    let path = PathBuf::from(text);
    match path.extension() {
        Some(ending) if ending.eq_ignore_ascii_case("json") => Ok(path),
        _ => Err("the file's ending tells the format: write a name that ends in .json".to_owned()),
    }
}

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    check(arguments.out.iter().map(PathBuf::as_path), arguments.overwrite)?;
    let mut notices = Vec::new();
    let desk = Desk::new(arguments, &mut notices);
    let Some(mut desk) = desk else {
        screen.tell(&notices, Warnings::FewOfAKind);
        return Err(Fault::Told);
    };
    let designs = arguments.designs.iter().map(|path| desk.proof(path, &mut notices)).collect();
    screen.tell(&notices, Warnings::FewOfAKind);
    let verification = desk.verification(designs);

    for path in &arguments.out {
        let text = proof::json(&verification).map_err(|e| Fault::Defect(e.to_string()))?;
        write_whole(path, &text, arguments.overwrite)?;
        screen.mention(&format!("wrote {}", path.display()));
    }
    let text = proof::terminal::verification(&verification, &screen.data);
    screen.show(&text).map_err(|e| Fault::Defect(format!("standard output: {e}")))?;
    let any = |answer| verification.designs.iter().any(|d| d.answer == answer);
    if any(proof::Answer::Broken) {
        Err(Fault::Told)
    } else if any(proof::Answer::Fails) || any(proof::Answer::Unproven) {
        Ok(Answer::No)
    } else {
        Ok(Answer::Done)
    }
}

/// Everything that designs are checked with. Catalogs are read once, and each sheet too.
struct Desk<'a> {
    arguments: &'a Arguments,
    shop_file: ShopFile,
    shop_text: Option<String>,
    shop: Shop,
    /// By path; None where a sheet is at fault.
    sheets: HashMap<PathBuf, Option<SheetRead>>,
}

/// A rail sheet with its text.
struct SheetRead {
    name: String,
    text: String,
    sheet: Sheet,
}

impl<'a> Desk<'a> {
    /// None with notices where shop file or catalogs are at fault.
    fn new(arguments: &'a Arguments, notices: &mut Vec<Notice>) -> Option<Self> {
        let catalogs = &arguments.catalogs;
        let shop_file = ShopText::read(catalogs, notices)?;
        // A design with a pot says itself where no catalog holds it.
        let shop = read_catalogs(catalogs, &shop_file.content, false, notices)?;
        let shop_text = std::fs::read_to_string(catalogs.catalogs.join(SHOP_FILE)).ok();
        let shop_file = shop_file.content;
        Some(Self { arguments, shop_file, shop_text, shop, sheets: HashMap::new() })
    }

    /// Checks the design in a file.
    fn proof(&mut self, path: &Path, notices: &mut Vec<Notice>) -> DesignProof {
        let name = path.display().to_string();
        let mut found = Vec::new();
        let proof = self.checked(path, &name, &mut found);
        let proof = proof.unwrap_or_else(|design_name| {
            DesignProof::broken(&name, design_name.as_deref(), &found)
        });
        notices.append(&mut found);
        proof
    }

    /// The proof; where the file or its sheet is at fault the design's name, if that much is known.
    fn checked(
        &mut self,
        path: &Path,
        name: &str,
        notices: &mut Vec<Notice>,
    ) -> Result<DesignProof, Option<String>> {
        let text = read_text(path, notices).ok_or(None)?;
        let design = design::read(name, &text, notices).ok_or(None)?;
        let sheet_path = match (&self.arguments.sheet, &design.sheet) {
            (Some(path), _) => path.clone(),
            (None, Some(given)) => in_order(&folder_of(path).join(&given.value)),
            (None, None) => {
                let message = "the design names no rail sheet";
                let notice = Notice::error("missing-key", Place::file(name), message);
                notices.push(notice.mend("write `sheet = \"PATH\"`, or give --sheet SHEET"));
                return Err(Some(design.name));
            }
        };
        self.read_sheet(&sheet_path, notices);
        let Some(Some(read)) = self.sheets.get(&sheet_path) else {
            if !has_errors(notices) {
                let message = "its rail sheet is at fault, as told above";
                let place = design.sheet.as_ref().map(|s| s.mark.place.clone());
                let place = place.unwrap_or_else(|| Place::file(name));
                notices.push(Notice::error("sheet-at-fault", place, message));
            }
            return Err(Some(design.name));
        };
        let evidence = Evidence {
            shop: &self.shop,
            sheet: &read.sheet,
            sheet_file: (&read.name, &read.text),
            shop_file: self.shop_text.as_deref().map(|text| (SHOP_FILE, text)),
        };
        Ok(DesignProof::new(&design, &evidence, notices))
    }

    /// Reads a sheet the first time that a design names it.
    fn read_sheet(&mut self, path: &Path, notices: &mut Vec<Notice>) {
        if self.sheets.contains_key(path) {
            return;
        }
        let name = path.display().to_string();
        let read = read_text(path, notices).and_then(|text| {
            let set = &self.arguments.set;
            let sheet = sheet::read(&name, &text, &self.shop_file, set, notices)?;
            Some(SheetRead { name, text, sheet })
        });
        self.sheets.insert(path.to_owned(), read);
    }

    fn verification(&self, designs: Vec<DesignProof>) -> Verification {
        let hash = |bytes: &[u8]| HashOf(bytes).hex();
        let files = self.shop.files().map(|f| (f.name.clone(), hash(&f.bytes)));
        let shop = self.shop_text.as_ref().map(|t| (SHOP_FILE.to_owned(), hash(t.as_bytes())));
        Verification {
            format: proof::FORMAT,
            currency: self.shop_file.currency.clone(),
            set: self.arguments.set.clone(),
            catalogs_sha256: Pairs(files.chain(shop).collect()),
            designs,
        }
    }
}

/// A path without the steps that lead back: `designs/../sheets/x` becomes `sheets/x`.
///
/// By text alone, so that a sheet is named as a person would name it; where the path holds a link to
/// another folder the steps are kept, for they then mean something else.
fn in_order(path: &Path) -> PathBuf {
    use std::path::Component;
    let mut short = PathBuf::new();
    for step in path.components() {
        let leads_back = matches!(step, Component::ParentDir)
            && matches!(short.components().next_back(), Some(Component::Normal(_)));
        if leads_back && !short.is_symlink() {
            short.pop();
        } else if !matches!(step, Component::CurDir) {
            short.push(step);
        }
    }
    short
}

/// The text of a file; None with a notice where it can't be read.
fn read_text(path: &Path, notices: &mut Vec<Notice>) -> Option<String> {
    let place = Place::file(path.display().to_string());
    let notice = match std::fs::read_to_string(path) {
        Ok(text) => return Some(text),
        Err(error) => match error.kind() {
            std::io::ErrorKind::NotFound => {
                Notice::error("file-missing", place, "there is no such file")
            }
            std::io::ErrorKind::InvalidData => {
                Notice::error("file-encoding", place, "the file is not in UTF-8")
                    .mend("save it as UTF-8")
            }
            _ => {
                let message = format!("the file can't be read: {error}");
                Notice::error("file-unreadable", place, message)
            }
        },
    };
    notices.push(notice);
    None
}
