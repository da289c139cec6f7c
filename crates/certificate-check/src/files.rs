//! Sheet, shop file and catalogs, held against the hashes of a certificate.

use crate::certificate::Certificate;
use crate::{Refused, prove, refused};
use catalog::{ReadOptions, read_folder};
use eligible::eligible;
use notice::{Notice, Severity, has_errors};
use sha2::{Digest, Sha256};
use sheet::{ShopFile, Weights};
use std::path::Path;

/// Proves a certificate against the files that it was made from. Gives the rows in words.
///
/// # Errors
/// As [`crate::prove`], or where a file is not the one that the certificate names.
pub fn prove_files(text: &[u8], sheet: &Path, catalogs: &Path) -> Result<Vec<String>, Refused> {
    const SHOP_FILE: &str = "shop.toml";
    let read: Certificate = serde_json::from_slice(text).map_err(|e| refused("format", e))?;
    let faulty = |notices: &[Notice]| {
        let error = notices.iter().find(|notice| notice.severity == Severity::Error);
        refused("files", error.map_or("they can't be read".to_owned(), Notice::to_string))
    };
    let mut notices = Vec::new();
    let shop_path = catalogs.join(SHOP_FILE);
    let shop_bytes = shop_path.exists().then(|| bytes(&shop_path)).transpose()?;
    let shop_text = utf8(shop_bytes.as_deref().unwrap_or_default())?;
    let shop_file = ShopFile::read(SHOP_FILE, shop_text, &mut notices);
    let shop_file = shop_file.ok_or_else(|| faulty(&notices))?;
    let sheet_bytes = bytes(sheet)?;
    let sheet = sheet::read("sheet", utf8(&sheet_bytes)?, &shop_file, &read.set, &mut notices);
    let mut sheet = sheet.ok_or_else(|| faulty(&notices))?;
    sheet.weights = match read.by.as_deref() {
        None => sheet.weights,
        Some("cost") => Weights { cost: 1.0, loss: 0.0, stress: 0.0 },
        Some("loss") => Weights { cost: 0.0, loss: 1.0, stress: 0.0 },
        Some("stress") => Weights { cost: 0.0, loss: 0.0, stress: 1.0 },
        Some(other) => return Err(refused("format", format!("no criterion {other}"))),
    };
    let options = ReadOptions {
        renamed: shop_file.columns.clone(),
        skip_broken_rows: read.skip_broken_rows,
        needs_pots: sheet.rail.is_adjustable(),
        needs_heatsinks: false,
    };
    let shop = read_folder(catalogs, &options, &mut notices).ok_or_else(|| faulty(&notices))?;
    let mut hashes = read.catalogs_sha256;
    hashes.insert("sheet".to_owned(), read.sheet_sha256);
    let of_shop = shop_bytes.as_deref().map(|bytes| (SHOP_FILE, bytes));
    let of_catalogs = shop.files().map(|file| (file.name.as_str(), file.bytes.as_slice()));
    for (name, bytes) in of_catalogs.chain(of_shop).chain([("sheet", sheet_bytes.as_slice())]) {
        let hex: String = Sha256::digest(bytes).iter().map(|byte| format!("{byte:02x}")).collect();
        if hashes.remove(name) != Some(hex) {
            return Err(refused("files", format!("{name} has another hash")));
        }
    }
    if let Some((name, _)) = hashes.first_key_value() {
        return Err(refused("files", format!("there is no {name}")));
    }
    notices.clear();
    let rows = eligible(&sheet, &shop, read.skip_broken_rows, &mut notices);
    if has_errors(&notices) { Err(faulty(&notices)) } else { prove(text, &rows) }
}

fn bytes(path: &Path) -> Result<Vec<u8>, Refused> {
    std::fs::read(path).map_err(|e| refused("files", format!("{}: {e}", path.display())))
}

fn utf8(bytes: &[u8]) -> Result<&str, Refused> {
    std::str::from_utf8(bytes).map_err(|e| refused("files", format!("no UTF-8: {e}")))
}
