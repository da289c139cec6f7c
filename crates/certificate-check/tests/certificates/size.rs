//! How much code a reader has to trust.

use std::path::Path;

#[test]
fn the_checker_has_at_most_600_lines_of_code() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let mut lines = 0;
    for entry in std::fs::read_dir(folder).expect("there is code") {
        let path = entry.expect("the folder can be read").path();
        let text = std::fs::read_to_string(&path).expect("code is text");
        let is_code = |line: &&str| !line.trim().is_empty() && !line.trim_start().starts_with("//");
        lines += text.lines().filter(is_code).count();
    }
    assert!((300..=600).contains(&lines), "{lines} lines without comments and blank lines");
}
