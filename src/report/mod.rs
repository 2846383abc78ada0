//! Answers as text and files.

mod ledger;
mod text;

pub use ledger::{ledger_csv, ledger_legend};
pub use text::estimate_text;
