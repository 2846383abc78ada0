//! `schema`: JSON Schema of the files that a person writes.

use clap::ValueEnum;

use super::{Failure, print_json};
use crate::brief::Brief;
use crate::heatpump::Sheet;
use crate::tariff::Tariff;

/// Print the JSON Schema of a brief, a machine sheet or a tariff, for editors that complete and check while one writes.
///
/// It is made from the same structures that read the files.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger schema brief
  winterledger schema tariff")]
pub struct Args {
    /// Kind of file.
    #[arg(value_enum)]
    kind: Kind,
}

#[derive(Debug, Clone, Copy, ValueEnum)]
enum Kind {
    /// A home, its weather, today and the choices.
    Brief,
    /// The data sheet of a machine.
    Sheet,
    /// A tariff.
    Tariff,
}

/// Runs the command.
///
/// # Errors
/// When stdout cannot be written.
pub fn run(args: &Args) -> Result<(), Failure> {
    let schema = match args.kind {
        Kind::Brief => Brief::schema(),
        Kind::Sheet => Sheet::schema(),
        Kind::Tariff => Tariff::schema(),
    };
    print_json(&schema)
}
