//! `completions` and `manual`: what a shell and `man` want to know, made from the arguments themselves.

use std::path::PathBuf;

use clap::CommandFactory as _;
use clap_complete::Shell;
use clap_mangen::Man;

use super::{Arguments, Failure, NewFile, print, write_files};

/// Print completions for a shell.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger completions bash
  winterledger completions fish")]
pub struct Completions {
    /// Shell that is to complete.
    #[arg(value_enum)]
    shell: Shell,
}

/// Write a man page for the program and one for each command.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger manual man          then: man man/winterledger-estimate.1")]
pub struct Manual {
    /// Folder to write into; it is made where there is none.
    #[arg(value_name = "DIR")]
    folder: PathBuf,
    /// Overwrite files that are there already.
    #[arg(long)]
    force: bool,
}

/// Prints the completions.
///
/// # Errors
/// When stdout cannot be written.
pub fn completions(args: &Completions) -> Result<(), Failure> {
    let mut script = Vec::new();
    let mut command = Arguments::command();
    clap_complete::generate(args.shell, &mut command, "winterledger", &mut script);
    print(&String::from_utf8_lossy(&script))
}

/// Writes the man pages.
///
/// # Errors
/// When a page is there already or cannot be written.
pub fn manual(args: &Manual) -> Result<(), Failure> {
    let mut whole = Arguments::command();
    whole.build();
    let page = |command: clap::Command, name: &str| -> Result<NewFile, Failure> {
        let path = args.folder.join(format!("{name}.1"));
        let mut text = Vec::new();
        let made = Man::new(command).title(name).render(&mut text);
        match made {
            Ok(()) => Ok(NewFile::new(path, text)),
            Err(error) => Err(Failure::Write {
                path,
                reason: error.to_string(),
            }),
        }
    };
    let mut files = vec![page(whole.clone(), "winterledger")?];
    for command in whole.get_subcommands().filter(|c| c.get_name() != "help") {
        let name = format!("winterledger-{}", command.get_name());
        files.push(page(command.clone(), &name)?);
    }
    write_files(&files, args.force)?;
    print(&format!(
        "Wrote {} pages into {}",
        files.len(),
        args.folder.display()
    ))
}
