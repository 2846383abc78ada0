//! Printing: text or JSON to stdout, findings to stderr.

use std::io::{ErrorKind, Write};

use clap::ValueEnum;
use serde::Serialize;

use super::Failure;
use crate::locale::Locale;
use crate::problem::Finding;

/// How a result is printed.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, ValueEnum)]
pub enum Format {
    /// Tables and sentences.
    #[default]
    Text,
    /// The same as JSON.
    Json,
}

/// Prints a text and a line end to stdout.
///
/// # Errors
/// [`Failure::ReaderGone`] when a pipe was closed, [`Failure::Write`] when stdout cannot be written.
pub fn print(text: &str) -> Result<(), Failure> {
    let mut out = anstream::stdout().lock();
    let written = out
        .write_all(text.trim_end_matches('\n').as_bytes())
        .and_then(|()| out.write_all(b"\n"))
        .and_then(|()| out.flush());
    written.map_err(|error| match error.kind() {
        ErrorKind::BrokenPipe => Failure::ReaderGone,
        _ => Failure::Write {
            path: "standard output".into(),
            reason: error.to_string(),
        },
    })
}

/// Prints a value as JSON, indented.
///
/// # Errors
/// As [`fn@print`].
pub fn print_json<T: Serialize>(value: &T) -> Result<(), Failure> {
    let text = serde_json::to_string_pretty(value).map_err(|error| Failure::Write {
        path: "standard output".into(),
        reason: error.to_string(),
    })?;
    print(&text)
}

/// Prints findings to stderr, the gravest first, in the form of a place: its marks, dates and currency.
pub fn warn_in(findings: &[Finding], locale: &Locale, currency: &str) {
    let told: Vec<Finding> = findings
        .iter()
        .map(|finding| Finding {
            what: locale.told(&finding.what, currency),
            done: locale.told(&finding.done, currency),
            ..finding.clone()
        })
        .collect();
    warn(&told);
}

/// Prints findings to stderr, the gravest first.
pub fn warn(findings: &[Finding]) {
    let mut sorted: Vec<_> = findings.iter().collect();
    sorted.sort_by_key(|finding| std::cmp::Reverse(finding.severity));
    for finding in sorted {
        anstream::eprintln!("{finding}");
    }
}
