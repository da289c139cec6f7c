//! The format of a file, told by the ending of its name.

use std::path::PathBuf;

/// A file's path with what its ending stands for.
///
/// # Errors
/// A sentence that names the endings that are known.
pub(crate) fn by_ending<T: Copy>(text: &str, known: &[(&str, T)]) -> Result<(PathBuf, T), String> {
    let path = PathBuf::from(text);
    let ending = path.extension().unwrap_or_default().to_string_lossy().to_ascii_lowercase();
    match known.iter().find(|(name, _)| *name == ending) {
        Some((_, format)) => Ok((path, *format)),
        None => {
            let known: Vec<String> = known.iter().map(|(name, _)| format!(".{name}")).collect();
            let known = known.join(", ");
            Err(format!(
                "the file's ending tells the format: write a name that ends in one of {known}"
            ))
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_unknown_ending_names_those_that_are_known() {
        let known = [("csv", 1), ("md", 2)];
        assert_eq!(by_ending("a/b.MD", &known), Ok((PathBuf::from("a/b.MD"), 2)));
        let told = by_ending("b.doc", &known).unwrap_err();
        assert!(told.contains(".csv, .md"), "{told}");
    }
}
