//! Commands: parse the arguments, call the library, print.
//!
//! A command is one file here: an `Args` struct that clap fills (its doc comments are the help) and a
//! `run(&Args) -> Result<(), Failure>`. Text goes to stdout, findings and progress to stderr, and the exit status is 0
//! done, 1 the input is wrong, 2 usage, 3 cannot write.

mod bills;
mod cycle;
mod estimate;
mod explain;
mod failure;
mod files;
mod ground;
mod init;
mod machine;
mod manual;
mod odds;
mod output;
mod progress;
mod rating;
mod sampling;
mod schema;
mod study;
mod tariff;
mod weather;

use std::process::ExitCode;

use clap::{Parser, Subcommand};

pub use failure::Failure;
pub use files::{NewFile, check_folder, picture_file, picture_files, write_files};
pub use output::{Format, print, print_json, warn, warn_in};

/// What a heat pump would cost to run in one home, hour by hour, beside the gas boiler.
#[derive(Debug, Parser)]
#[command(
    name = "winterledger",
    version,
    arg_required_else_help = true,
    max_term_width = 100
)]
struct Arguments {
    #[command(subcommand)]
    command: Command,
}

#[derive(Debug, Subcommand)]
enum Command {
    Estimate(estimate::Args),
    Study(study::Args),
    Odds(odds::Args),
    Bills(bills::Args),
    Explain(explain::Args),
    Cycle(cycle::Args),
    Machine(machine::Args),
    Rating(rating::Args),
    Tariff(tariff::Args),
    Ground(ground::Args),
    Init(init::Args),
    Schema(schema::Args),
    Completions(manual::Completions),
    Manual(manual::Manual),
    Weather(Box<weather::Args>),
}

/// Runs the command line of this process and returns its exit status.
pub fn run() -> ExitCode {
    let arguments = Arguments::parse();
    match dispatch(&arguments.command) {
        Ok(()) => ExitCode::SUCCESS,
        Err(failure) => failure.report(),
    }
}

fn dispatch(command: &Command) -> Result<(), Failure> {
    match command {
        Command::Estimate(args) => estimate::run(args),
        Command::Study(args) => study::run(args),
        Command::Odds(args) => odds::run(args),
        Command::Bills(args) => bills::run(args),
        Command::Explain(args) => explain::run(args),
        Command::Cycle(args) => cycle::run(args),
        Command::Machine(args) => machine::run(args),
        Command::Rating(args) => rating::run(args),
        Command::Tariff(args) => tariff::run(args),
        Command::Ground(args) => ground::run(args),
        Command::Init(args) => init::run(args),
        Command::Schema(args) => schema::run(args),
        Command::Completions(args) => manual::completions(args),
        Command::Manual(args) => manual::manual(args),
        Command::Weather(args) => weather::run(args),
    }
}
