//! Reading a text file that is small enough to be one of ours.

use std::path::Path;

use crate::limits::{LARGEST_TEXT, read_at_most};
use crate::problem::{Place, Problem, Problems};

/// Reads a text file.
///
/// # Errors
/// A problem naming the file when it is missing, too large, unreadable or not UTF-8.
pub fn read_text(path: &Path) -> Result<String, Problems> {
    let name = path.display().to_string();
    let problem = |found: String, allowed: &str, remedy: &str| {
        Problems::from(Problem::new(
            Place::file(name.as_str()),
            found,
            allowed,
            remedy,
        ))
    };
    let bytes = read_at_most(path, LARGEST_TEXT)
        .map_err(|beyond| problem(beyond.found, &beyond.allowed, "is this the right file?"))?;
    let text = String::from_utf8(bytes).map_err(|e| {
        let at = e.utf8_error().valid_up_to();
        problem(
            format!("byte {at} is not UTF-8"),
            "text in UTF-8",
            "save the file as UTF-8",
        )
    })?;
    Ok(text
        .strip_prefix('\u{feff}')
        .map(str::to_owned)
        .unwrap_or(text))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_missing_file_is_named() {
        let problems = read_text(Path::new("no/such/brief.toml")).unwrap_err();
        assert!(problems.to_string().contains("no/such/brief.toml"));
    }
}
