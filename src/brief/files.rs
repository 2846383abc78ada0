//! Where the files that a brief names come from: the folder of the brief, or the binary itself.

use std::borrow::Cow;
use std::cell::RefCell;
use std::fs;
use std::path::{Component, Path, PathBuf};

use rayon::prelude::*;
use sha2::{Digest as _, Sha256};

use super::demo;
use crate::answer::InputFile;
use crate::heatpump::{Fitted, Sheet, fit};
use crate::limits::{LARGEST_DATA, read_at_most};
use crate::problem::{Place, Problem, Problems};

/// Where named files come from, and which of them were read.
#[derive(Debug)]
pub(super) struct Folder {
    root: Root,
    read: RefCell<Vec<InputFile>>,
    fitted: RefCell<Vec<(Sheet, Fitted)>>,
}

#[derive(Debug)]
enum Root {
    /// A folder of the disk.
    Disk(PathBuf),
    /// The demonstration files in the binary, by their path from the top of the repository.
    Embedded(&'static str),
}

impl Folder {
    /// A folder of the disk.
    pub fn disk(path: PathBuf) -> Self {
        Self::of(Root::Disk(path))
    }

    /// A folder of the demonstration files.
    pub fn embedded(path: &'static str) -> Self {
        Self::of(Root::Embedded(path))
    }

    fn of(root: Root) -> Self {
        Self {
            root,
            read: RefCell::default(),
            fitted: RefCell::default(),
        }
    }

    /// The machine of a sheet: each fitted once, however many systems have it.
    ///
    /// # Errors
    /// Those of the fit.
    pub fn fitted(&self, sheet: &Sheet) -> Result<Fitted, Problems> {
        if let Some((_, fitted)) = self
            .fitted
            .borrow()
            .iter()
            .find(|(known, _)| known == sheet)
        {
            return Ok(fitted.clone());
        }
        let fitted = fit(sheet)?;
        self.fitted
            .borrow_mut()
            .push((sheet.clone(), fitted.clone()));
        Ok(fitted)
    }

    /// A machine sheet of a file, if it is one; what is wrong with it is said where it is used.
    pub fn sheet(&self, path: &str) -> Option<Sheet> {
        let content = self.content(path).ok()?;
        let text = std::str::from_utf8(&content).ok()?;
        let text = text.strip_prefix('\u{feff}').unwrap_or(text);
        Sheet::parse(&self.name(path), text).ok()
    }

    /// Fits machines that will be asked for, side by side; what cannot be fitted is said where it is used.
    pub fn fit_ahead(&self, sheets: impl Iterator<Item = Sheet>) {
        let mut different: Vec<Sheet> = Vec::new();
        for sheet in sheets {
            if !different.contains(&sheet) {
                different.push(sheet);
            }
        }
        let fitted: Vec<(Sheet, Fitted)> = different
            .into_par_iter()
            .filter_map(|sheet| fit(&sheet).ok().map(|fitted| (sheet, fitted)))
            .collect();
        self.fitted.borrow_mut().extend(fitted);
    }

    /// Keeps the checksum of a file that was read; each once.
    pub fn note(&self, file: String, content: &[u8]) {
        let mut read = self.read.borrow_mut();
        if !read.iter().any(|input| input.file == file) {
            let sha256 = Sha256::digest(content)
                .iter()
                .map(|byte| format!("{byte:02x}"))
                .collect();
            read.push(InputFile {
                file,
                bytes: content.len(),
                sha256,
            });
        }
    }

    /// The files that were read, in the order they were.
    pub fn inputs(&self) -> Vec<InputFile> {
        self.read.borrow().clone()
    }

    /// The name under which messages speak of a file.
    pub fn name(&self, path: &str) -> String {
        match &self.root {
            Root::Disk(folder) => folder.join(path).display().to_string(),
            Root::Embedded(folder) => plain(&Path::new(folder).join(path)),
        }
    }

    /// The content of a file.
    ///
    /// # Errors
    /// A problem that names the file when it is missing, unreadable or too large.
    pub fn bytes(&self, path: &str) -> Result<Cow<'static, [u8]>, Problems> {
        let content = self.content(path)?;
        self.note(self.name(path), &content);
        Ok(content)
    }

    /// The content of a file, not yet counted among those that were read.
    fn content(&self, path: &str) -> Result<Cow<'static, [u8]>, Problems> {
        let name = self.name(path);
        let refuse = |found: String, remedy: &str| -> Problems {
            Problem::new(Place::file(name.as_str()), found, "a readable file", remedy).into()
        };
        Ok(match &self.root {
            Root::Embedded(_) => demo::file(&name)
                .map(Cow::Borrowed)
                .ok_or_else(|| refuse("is not among the demonstration files".to_owned(), ""))?,
            Root::Disk(folder) => {
                let path = folder.join(path);
                let remedy = "paths in a brief are relative to the brief";
                let facts = fs::metadata(&path)
                    .map_err(|error| refuse(format!("cannot be read: {error}"), remedy))?;
                if !facts.is_file() {
                    return Err(refuse("is not a file".to_owned(), remedy));
                }
                read_at_most(&path, LARGEST_DATA)
                    .map(Cow::Owned)
                    .map_err(|beyond| refuse(beyond.found, &beyond.allowed))?
            }
        })
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
        let problems = Folder::disk("no/such".into())
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
            Folder::embedded("briefs").name("../tariffs/a.toml"),
            "tariffs/a.toml"
        );
        assert!(Folder::embedded("briefs").text("../nothing.toml").is_err());
    }

    /// FIPS 180-4 publishes this checksum of "abc" as an example.
    #[test]
    fn each_file_is_noted_once_with_its_checksum() {
        let folder = Folder::embedded("briefs");
        folder.note("a".to_owned(), b"abc");
        folder.note("a".to_owned(), b"abc");
        folder.bytes("terrace.toml").unwrap();
        let inputs = folder.inputs();
        assert_eq!(inputs.len(), 2);
        assert_eq!(
            inputs[0].sha256,
            "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"
        );
        assert_eq!(inputs[1].file, "briefs/terrace.toml");
    }
}
