//! The example of output in the README, held against what the program really prints.

/// The line that stands for lines left out.
const LEFT_OUT: &str = "…";

/// The first line of an excerpt that the output does not have at its place; None where it has all.
///
/// Lines must follow each other as in the output; across a line `…` any number may lie between.
/// White space at the end of a line does not count.
pub fn first_missing<'e>(excerpt: &'e str, output: &str) -> Option<&'e str> {
    let output: Vec<&str> = output.lines().map(str::trim_end).collect();
    let mut next = 0;
    let mut may_skip = false;
    for line in excerpt.lines().map(str::trim_end) {
        if line.trim() == LEFT_OUT {
            may_skip = true;
            continue;
        }
        let rest = output.get(next..).unwrap_or_default();
        let found = if may_skip {
            rest.iter().position(|printed| *printed == line)
        } else {
            rest.first().filter(|printed| **printed == line).map(|_| 0)
        };
        match found {
            Some(skipped) => next += skipped + 1,
            None => return Some(line),
        }
        may_skip = false;
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lines_follow_each_other_but_across_an_ellipsis() {
        let output = "a\nb\nc\nd\n";
        assert_eq!(first_missing("a\nb\n", output), None);
        assert_eq!(first_missing("a\n…\nd\n", output), None);
        assert_eq!(first_missing("…\nc\nd", output), None);
        assert_eq!(first_missing("a\nc\n", output), Some("c"));
        assert_eq!(first_missing("a\n…\nb\nd\n", output), Some("d"));
        assert_eq!(first_missing("a\n…\nx\n", output), Some("x"));
    }
}
