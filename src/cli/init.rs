//! `init`: a brief to begin with, and the files it names.

use std::path::PathBuf;

use super::{Failure, NewFile, print, write_files};
use crate::brief::DEMONSTRATION_FILES;

/// Write a commented brief with its machine sheet, tariffs and weather, which runs as it is.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger init home          a folder called home, with brief.toml in it")]
pub struct Args {
    /// Folder to write into; it is made where there is none.
    #[arg(value_name = "DIR")]
    folder: PathBuf,
    /// Overwrite files that are there already.
    #[arg(long)]
    force: bool,
}

const BRIEF: &str = include_str!("init.toml");

/// Where the demonstration's files go, by the end of their path.
const PLACES: &[(&str, &str)] = &[
    (
        "briefs/machines/air-r290-small.toml",
        "machines/air-r290-small.toml",
    ),
    (
        "tariffs/flat_electricity.toml",
        "tariffs/flat_electricity.toml",
    ),
    ("tariffs/flat_gas.toml", "tariffs/flat_gas.toml"),
    (
        "weather_samples/morvane_sound.csv",
        "weather/morvane_sound.csv",
    ),
];

/// Runs the command.
///
/// # Errors
/// When a file is there already or cannot be written.
pub fn run(args: &Args) -> Result<(), Failure> {
    let mut files = vec![NewFile::new(args.folder.join("brief.toml"), BRIEF)];
    for (from, to) in PLACES {
        let found = DEMONSTRATION_FILES.iter().find(|(name, _)| name == from);
        files.extend(found.map(|(_, content)| NewFile::new(args.folder.join(to), *content)));
    }
    write_files(&files, args.force)?;
    let brief = args.folder.join("brief.toml");
    print(&format!(
        "Wrote {} and the {} files it names. Next:\n  winterledger estimate {} --out {}",
        brief.display(),
        files.len() - 1,
        brief.display(),
        args.folder.join("out").display()
    ))
}
