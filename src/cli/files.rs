//! Writing results: a file is written whole or not at all, and never over another unasked.

use std::fs;
use std::io::Write;
use std::path::{Path, PathBuf};

use tempfile::NamedTempFile;

use super::Failure;
use crate::chart::{ChartError, Picture};
use crate::report::Drawn;

/// A file to be written.
#[derive(Debug)]
pub struct NewFile {
    /// Where it goes.
    pub path: PathBuf,
    /// All of it.
    pub content: Vec<u8>,
}

impl NewFile {
    /// A file of a path and its content.
    pub fn new(path: impl Into<PathBuf>, content: impl Into<Vec<u8>>) -> Self {
        Self {
            path: path.into(),
            content: content.into(),
        }
    }
}

/// Writes files, each whole or not at all; with `force` over what is there.
///
/// Every target is looked at before the first is written, so a refusal leaves the folder as it was.
///
/// # Errors
/// [`Failure::Write`] naming the file and the reason.
pub fn write_files(files: &[NewFile], force: bool) -> Result<(), Failure> {
    let fail = |path: &Path, reason: String| Failure::Write {
        path: path.to_owned(),
        reason,
    };
    for file in files {
        if !force && file.path.exists() {
            return Err(fail(
                &file.path,
                "it is there already; --force overwrites it".to_owned(),
            ));
        }
    }
    let mut ready = Vec::with_capacity(files.len());
    for file in files {
        let folder = match file.path.parent() {
            Some(parent) if !parent.as_os_str().is_empty() => parent,
            _ => Path::new("."),
        };
        fs::create_dir_all(folder).map_err(|e| fail(folder, e.to_string()))?;
        let mut temporary =
            NamedTempFile::new_in(folder).map_err(|e| fail(&file.path, e.to_string()))?;
        temporary
            .write_all(&file.content)
            .and_then(|()| temporary.as_file().sync_all())
            .and_then(|()| readable(&temporary))
            .map_err(|e| fail(&file.path, e.to_string()))?;
        ready.push((temporary, &file.path));
    }
    for (temporary, path) in ready {
        let moved = if force {
            temporary.persist(path)
        } else {
            temporary.persist_noclobber(path)
        };
        moved.map_err(|e| fail(path, e.error.to_string()))?;
    }
    Ok(())
}

/// Temporary files are private; a result is as readable as any other file.
#[cfg(unix)]
fn readable(file: &NamedTempFile) -> std::io::Result<()> {
    use std::os::unix::fs::PermissionsExt;
    file.as_file()
        .set_permissions(fs::Permissions::from_mode(0o644))
}

#[cfg(not(unix))]
fn readable(_: &NamedTempFile) -> std::io::Result<()> {
    Ok(())
}

/// Pictures as SVG and PNG in a folder.
///
/// # Errors
/// When one cannot be painted.
pub fn picture_files(folder: &Path, drawn: &[Drawn]) -> Result<Vec<NewFile>, ChartError> {
    let mut files = Vec::with_capacity(2 * drawn.len());
    for (drawn, png) in drawn.iter().zip(pngs(drawn)?) {
        let path = |ending: &str| folder.join(format!("{}.{ending}", drawn.name));
        files.push(NewFile::new(path("svg"), drawn.picture.svg()?));
        files.push(NewFile::new(path("png"), png));
    }
    Ok(files)
}

/// The pictures as PNG, painted side by side: at print resolution that is the longest part of the work.
fn pngs(drawn: &[Drawn]) -> Result<Vec<Vec<u8>>, ChartError> {
    let hands = std::thread::available_parallelism().map_or(1, usize::from);
    let share = drawn.len().div_ceil(hands).max(1);
    let painted = std::thread::scope(|scope| {
        let workers: Vec<_> = drawn
            .chunks(share)
            .map(|part| scope.spawn(|| part.iter().map(|d| d.picture.png()).collect::<Vec<_>>()))
            .collect();
        let done = workers.into_iter().map(|worker| worker.join());
        done.collect::<Result<Vec<_>, _>>()
    });
    match painted {
        Ok(parts) => parts.into_iter().flatten().collect(),
        Err(_) => Err(ChartError::Drawing("a picture was not finished".into())),
    }
}

/// A picture as a file, SVG or PNG by its ending; `option` is the argument that named it.
///
/// # Errors
/// [`Failure::Write`] when it cannot be drawn, a refused argument for another ending.
pub fn picture_file(
    option: &str,
    path: &Path,
    picture: Result<Picture, ChartError>,
) -> Result<NewFile, Failure> {
    let undrawn = |error: ChartError| Failure::Write {
        path: path.to_owned(),
        reason: error.to_string(),
    };
    let ending = path.extension().map(|found| found.to_ascii_lowercase());
    let picture = picture.map_err(undrawn)?;
    let content = match ending.as_deref().and_then(|found| found.to_str()) {
        Some("svg") => picture.svg().map_err(undrawn)?.into_bytes(),
        Some("png") => picture.png().map_err(undrawn)?,
        _ => {
            return Err(Failure::argument(
                option,
                path.display().to_string(),
                "a file that ends in .svg or .png",
            ));
        }
    };
    Ok(NewFile::new(path, content))
}

/// Makes a folder where there is none and tries to write into it, so that a refusal comes before the long work.
///
/// # Errors
/// [`Failure::Write`] when it cannot be made or written, or when without `force` one of the `names` is there already.
pub fn check_folder(folder: &Path, names: &[&str], force: bool) -> Result<(), Failure> {
    let fail = |path: &Path, reason: String| Failure::Write {
        path: path.to_owned(),
        reason,
    };
    fs::create_dir_all(folder).map_err(|e| fail(folder, e.to_string()))?;
    NamedTempFile::new_in(folder).map_err(|e| fail(folder, e.to_string()))?;
    let there = names.iter().map(|name| folder.join(name));
    match there.into_iter().find(|path| !force && path.exists()) {
        Some(path) => Err(fail(
            &path,
            "it is there already; --force overwrites it".to_owned(),
        )),
        None => Ok(()),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nothing_is_overwritten_unasked_and_a_refusal_writes_nothing() {
        let folder = tempfile::tempdir().unwrap();
        let old = folder.path().join("old.csv");
        let new = folder.path().join("new.csv");
        fs::write(&old, "kept").unwrap();
        let files = [NewFile::new(&new, "a"), NewFile::new(&old, "b")];
        assert!(matches!(
            write_files(&files, false),
            Err(Failure::Write { .. })
        ));
        assert_eq!(fs::read_to_string(&old).unwrap(), "kept");
        assert!(!new.exists());
        write_files(&files, true).unwrap();
        assert_eq!(fs::read_to_string(&old).unwrap(), "b");
        assert_eq!(fs::read_dir(folder.path()).unwrap().count(), 2);
    }
}
