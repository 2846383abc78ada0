//! Where the files that a brief names come from: the folder of the brief, or the binary itself.

use std::borrow::Cow;
use std::fs;
use std::path::{Component, Path, PathBuf};

use super::demo;
use crate::problem::{Place, Problem, Problems};

/// Where named files come from.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Folder {
    /// A folder of the disk.
    Disk(PathBuf),
    /// The demonstration files in the binary, by their path from the top of the repository.
    Embedded(&'static str),
}

/// Largest file that a brief may name, bytes: thirty years of minutes would be smaller.
const LARGEST: u64 = 512 * 1024 * 1024;

impl Folder {
    /// The name under which messages speak of a file.
    pub fn name(&self, path: &str) -> String {
        match self {
            Self::Disk(folder) => folder.join(path).display().to_string(),
            Self::Embedded(folder) => plain(&Path::new(folder).join(path)),
        }
    }

    /// The content of a file.
    ///
    /// # Errors
    /// A problem that names the file when it is missing, unreadable or too large.
    pub fn bytes(&self, path: &str) -> Result<Cow<'static, [u8]>, Problems> {
        let name = self.name(path);
        let refuse = |found: String, remedy: &str| -> Problems {
            Problem::new(Place::file(name.as_str()), found, "a readable file", remedy).into()
        };
        match self {
            Self::Embedded(_) => demo::file(&name)
                .map(Cow::Borrowed)
                .ok_or_else(|| refuse("is not among the demonstration files".to_owned(), "")),
            Self::Disk(folder) => {
                let path = folder.join(path);
                let remedy = "paths in a brief are relative to the brief";
                let facts = fs::metadata(&path)
                    .map_err(|error| refuse(format!("cannot be read: {error}"), remedy))?;
                if !facts.is_file() {
                    return Err(refuse("is not a file".to_owned(), remedy));
                }
                if facts.len() > LARGEST {
                    return Err(refuse(
                        format!("is {} bytes long", facts.len()),
                        "at most 512 MiB are read",
                    ));
                }
                fs::read(&path)
                    .map(Cow::Owned)
                    .map_err(|error| refuse(format!("cannot be read: {error}"), remedy))
            }
        }
    }

    /// The content of a text file.
    ///
    /// # Errors
    /// As [`Folder::bytes`], and when the file is not UTF-8.
    pub fn text(&self, path: &str) -> Result<String, Problems> {
        let bytes = self.bytes(path)?;
        let text = std::str::from_utf8(&bytes).map_err(|error| {
            Problem::new(
                Place::file(self.name(path)),
                format!("byte {} is not UTF-8", error.valid_up_to()),
                "text in UTF-8",
                "save the file as UTF-8",
            )
        })?;
        Ok(text.strip_prefix('\u{feff}').unwrap_or(text).to_owned())
    }
}

/// A path without `.` and `..`, with forward slashes.
fn plain(path: &Path) -> String {
    let mut parts: Vec<String> = Vec::new();
    for component in path.components() {
        match component {
            Component::ParentDir => {
                parts.pop();
            }
            Component::Normal(part) => parts.push(part.to_string_lossy().into_owned()),
            _ => {}
        }
    }
    parts.join("/")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_missing_file_is_named_with_the_folder_of_the_brief() {
        let problems = Folder::Disk("no/such".into())
            .text("tariff.toml")
            .unwrap_err();
        assert!(
            problems.to_string().contains("no/such/tariff.toml"),
            "{problems}"
        );
    }

    #[test]
    fn embedded_paths_are_made_plain() {
        assert_eq!(
            Folder::Embedded("briefs").name("../tariffs/a.toml"),
            "tariffs/a.toml"
        );
        assert!(Folder::Embedded("briefs").text("../nothing.toml").is_err());
    }
}
