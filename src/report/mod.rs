//! Answers as text and files.

mod explain;
mod ground;
mod home;
mod ledger;
mod odds;
mod study;
mod table;
mod text;

pub use explain::explain_text;
pub use ground::ground_text;
pub use home::{home_text, patterns_text};
pub use ledger::{ledger_csv, ledger_legend};
pub use odds::odds_text;
pub use study::study_text;
pub use table::{plain_table, plain_table_within};
pub use text::estimate_text;
