//! Why a command ended without its result, and the exit status that says so.

use std::path::PathBuf;
use std::process::ExitCode;

use crate::problem::{Place, Problem, Problems};

/// Why a command ended without its result.
#[derive(Debug)]
pub enum Failure {
    /// The input cannot be used: status 1.
    Input(Problems),
    /// The arguments contradict each other: status 2.
    Usage(String),
    /// A result could not be written: status 3.
    Write {
        /// What was to be written.
        path: PathBuf,
        /// Why it was not, and what to do.
        reason: String,
    },
    /// Somebody stopped the work; what was done by then has been told: status 130, as shells give it.
    Interrupted {
        /// How much was done.
        done: String,
    },
    /// Whoever read our output stopped reading, which is their right: status 0.
    ReaderGone,
}

impl Failure {
    /// A problem with one command-line argument.
    pub fn argument(name: &str, found: impl Into<String>, allowed: impl Into<String>) -> Self {
        Self::Input(Problem::new(Place::field(name), found, allowed, "").into())
    }

    /// Prints the failure to stderr and gives its exit status.
    pub fn report(&self) -> ExitCode {
        match self {
            Self::Input(problems) => {
                anstream::eprintln!("{problems}");
                let count = problems.len();
                let plural = if count == 1 { "" } else { "s" };
                anstream::eprintln!("{count} problem{plural} found; nothing was written");
                ExitCode::from(1)
            }
            Self::Usage(what) => {
                anstream::eprintln!("{what}");
                ExitCode::from(2)
            }
            Self::Write { path, reason } => {
                anstream::eprintln!("cannot write {}: {reason}", path.display());
                ExitCode::from(3)
            }
            Self::Interrupted { done } => {
                anstream::eprintln!("interrupted: the answer is from {done}, whole blocks only");
                ExitCode::from(130)
            }
            Self::ReaderGone => ExitCode::SUCCESS,
        }
    }
}

impl From<Problems> for Failure {
    fn from(problems: Problems) -> Self {
        Self::Input(problems)
    }
}
