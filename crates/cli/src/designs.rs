//! Design files with the sheets that they name. Catalogs are read once, and each sheet too.

use crate::arguments::Catalogs;
use crate::files::folder_of;
use crate::load::{SHOP_FILE, ShopText, read_catalogs};
use catalog::Shop;
use design::Design;
use notice::{Notice, Place, has_errors};
use report::figure::Pairs;
use report::hash::HashOf;
use report::proof::Evidence;
use sheet::{Sheet, ShopFile};
use std::collections::HashMap;
use std::path::{Path, PathBuf};
use std::sync::Arc;

/// Everything that designs are read with.
pub(crate) struct Designs {
    /// What `--set` changes in every sheet.
    pub(crate) set: Vec<String>,
    sheet: Option<PathBuf>,
    pub(crate) shop_file: ShopFile,
    shop_text: Option<String>,
    pub(crate) shop: Shop,
    /// By path; None where a sheet is at fault.
    sheets: HashMap<PathBuf, Option<Arc<SheetRead>>>,
}

/// A rail sheet with its text.
pub(crate) struct SheetRead {
    pub(crate) name: String,
    pub(crate) text: String,
    pub(crate) sheet: Sheet,
}

/// A design with the sheet that it is checked against.
pub(crate) struct DesignRead {
    pub(crate) design: Design,
    pub(crate) sheet: Arc<SheetRead>,
}

impl Designs {
    /// Reads shop file and catalogs; None with notices where they are at fault. `sheet`: the sheet of
    /// every design, whatever it names.
    pub(crate) fn read_shop(
        catalogs: &Catalogs,
        set: &[String],
        sheet: Option<&Path>,
        notices: &mut Vec<Notice>,
    ) -> Option<Self> {
        let shop_file = ShopText::read(catalogs, notices)?;
        // A design with a pot says itself where no catalog holds it.
        let shop = read_catalogs(catalogs, &shop_file.content, false, notices)?;
        let shop_text = std::fs::read_to_string(catalogs.catalogs.join(SHOP_FILE)).ok();
        Some(Self {
            set: set.to_vec(),
            sheet: sheet.map(Path::to_owned),
            shop_file: shop_file.content,
            shop_text,
            shop,
            sheets: HashMap::new(),
        })
    }

    /// Reads a design and its sheet.
    ///
    /// # Errors
    /// Where the file or its sheet is at fault: the design's name, if that much is known.
    pub(crate) fn read(
        &mut self,
        path: &Path,
        notices: &mut Vec<Notice>,
    ) -> Result<DesignRead, Option<String>> {
        let name = path.display().to_string();
        let text = read_text(path, notices).ok_or(None)?;
        let design = design::read(&name, &text, notices).ok_or(None)?;
        let sheet_path = match (&self.sheet, &design.sheet) {
            (Some(path), _) => path.clone(),
            (None, Some(given)) => in_order(&folder_of(path).join(&given.value)),
            (None, None) => {
                let message = "the design names no rail sheet";
                let notice = Notice::error("missing-key", Place::file(&name), message);
                notices.push(notice.mend("write `sheet = \"PATH\"`, or give --sheet SHEET"));
                return Err(Some(design.name));
            }
        };
        match self.sheet_at(&sheet_path, notices) {
            Some(sheet) => Ok(DesignRead { design, sheet }),
            None => {
                if !has_errors(notices) {
                    let message = "its rail sheet is at fault, as told above";
                    let place = design.sheet.as_ref().map(|s| s.mark.place.clone());
                    let place = place.unwrap_or_else(|| Place::file(&name));
                    notices.push(Notice::error("sheet-at-fault", place, message));
                }
                Err(Some(design.name))
            }
        }
    }

    /// A sheet, read the first time that a design names it.
    fn sheet_at(&mut self, path: &Path, notices: &mut Vec<Notice>) -> Option<Arc<SheetRead>> {
        if let Some(read) = self.sheets.get(path) {
            return read.clone();
        }
        let name = path.display().to_string();
        let read = read_text(path, notices).and_then(|text| {
            let sheet = sheet::read(&name, &text, &self.shop_file, &self.set, notices)?;
            Some(Arc::new(SheetRead { name, text, sheet }))
        });
        self.sheets.insert(path.to_owned(), read.clone());
        read
    }

    /// What a design is proven with.
    pub(crate) fn evidence<'d>(&'d self, sheet: &'d SheetRead) -> Evidence<'d> {
        Evidence {
            shop: &self.shop,
            sheet: &sheet.sheet,
            sheet_file: (&sheet.name, &sheet.text),
            shop_file: self.shop_text.as_deref().map(|text| (SHOP_FILE, text)),
        }
    }

    /// Hashes of the catalogs, and of the shop file where there is one.
    pub(crate) fn hashes(&self) -> Pairs<String, String> {
        let hash = |bytes: &[u8]| HashOf(bytes).hex();
        let files = self.shop.files().map(|f| (f.name.clone(), hash(&f.bytes)));
        let shop = self.shop_text.as_ref().map(|t| (SHOP_FILE.to_owned(), hash(t.as_bytes())));
        Pairs(files.chain(shop).collect())
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
