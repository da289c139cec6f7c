//! Files that are not UTF-8, as spreadsheet programs write them.
//!
//! Three cases are no guess, and read with a notice: UTF-16, which begins with a mark; the single-byte
//! character set of western Windows, of which Latin-1 is a part, in a file that holds nothing that
//! would be UTF-8; and lines that end in a carriage return alone.

use crate::locate;
use encoding_rs::{Encoding, UTF_8, WINDOWS_1252};
use notice::{Notice, Place};

/// The text of a file that begins with the mark of UTF-16; None where it doesn't.
pub(super) fn utf_16(name: &str, bytes: &[u8], notices: &mut Vec<Notice>) -> Option<Vec<u8>> {
    let (encoding, _) = Encoding::for_bom(bytes).filter(|(encoding, _)| *encoding != UTF_8)?;
    let (text, _, is_faulty) = encoding.decode(bytes);
    let place = Place::file(name);
    let notice = if is_faulty {
        Notice::error("file-encoding", place, "the file begins as UTF-16, and is not all UTF-16")
            .expected("UTF-8")
            .mend("save it as `CSV UTF-8`")
    } else {
        let message = format!("the file is in {} and is read so", encoding.name());
        Notice::warning("file-encoding", place, message).mend("save it as UTF-8 to be sure")
    };
    notices.push(notice);
    Some(text.into_owned().into_bytes())
}

/// The text of a file that is no UTF-8, read as Windows-1252.
///
/// None where it also holds characters of several bytes that are UTF-8: then it mixes both, and each
/// cell must be mended by hand.
pub(super) fn windows_1252(name: &str, bytes: &[u8], notices: &mut Vec<Notice>) -> Option<Vec<u8>> {
    let is_mixed = bytes
        .utf8_chunks()
        .any(|chunk| chunk.valid().trim_start_matches('\u{feff}').bytes().any(|b| b >= 0x80));
    let first = bytes.utf8_chunks().next()?.valid().len();
    if is_mixed {
        return None;
    }
    let (text, _) = WINDOWS_1252.decode_without_bom_handling(bytes);
    let text = text.into_owned().into_bytes();
    // Up to the first foreign byte both texts are the same.
    let spot = locate::character(&text, first);
    let message = "the file is not in UTF-8: it is read as Windows-1252 (Latin-1)";
    let place = Place { file: name.to_owned(), line: spot.line, column: spot.column };
    notices.push(
        Notice::warning("file-encoding", place, message)
            .found(spot.found)
            .mend("look whether this is what is meant, and save the file as UTF-8 to be sure")
            .excerpt(spot.excerpt),
    );
    Some(text)
}

/// The text with usual line ends, where all of them are carriage returns.
pub(super) fn line_ends(bytes: &[u8]) -> Option<Vec<u8>> {
    let is_old = memchr::memchr(b'\n', bytes).is_none() && memchr::memchr(b'\r', bytes).is_some();
    is_old.then(|| bytes.iter().map(|b| if *b == b'\r' { b'\n' } else { *b }).collect())
}
