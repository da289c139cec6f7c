//! Several files in one text, so that they can be altered as one input.

use std::path::Path;

/// A line that begins so names the file that follows.
pub const MARK: &[u8] = b"=== ";

/// The files of a bundle: name and bytes. What stands before the first mark belongs to no file.
///
/// ```
/// let files = fuzz::bundle::files(b"=== a.csv\npart,cost\n=== sheet.toml\n[rail]\n");
/// assert_eq!(files, [(&b"a.csv"[..], &b"part,cost\n"[..]), (b"sheet.toml", b"[rail]\n")]);
/// ```
pub fn files(bundle: &[u8]) -> Vec<(&[u8], &[u8])> {
    let mut files: Vec<(&[u8], usize, usize)> = Vec::new();
    let mut at = 0;
    for line in bundle.split_inclusive(|b| *b == b'\n') {
        let next = at + line.len();
        if let Some(name) = line.strip_prefix(MARK) {
            files.push((name.trim_ascii(), next, next));
        } else if let Some((_, _, end)) = files.last_mut() {
            *end = next;
        }
        at = next;
    }
    let content = |from: usize, to: usize| bundle.get(from..to).unwrap_or_default();
    files.into_iter().map(|(name, from, to)| (name, content(from, to))).collect()
}

/// Puts files of a folder into a bundle; those that are not there are left out.
pub fn of_folder(folder: &Path, names: &[&str]) -> Vec<u8> {
    let mut bundle = Vec::new();
    for name in names {
        if let Ok(bytes) = std::fs::read(folder.join(name)) {
            let file = Path::new(name).file_name().unwrap_or_default();
            bundle.extend_from_slice(MARK);
            bundle.extend_from_slice(file.as_encoded_bytes());
            bundle.push(b'\n');
            bundle.extend_from_slice(&bytes);
            if !bytes.ends_with(b"\n") {
                bundle.push(b'\n');
            }
        }
    }
    bundle
}
