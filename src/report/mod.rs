//! Answers as text and files.

mod account;
mod explain;
mod ground;
mod home;
mod ledger;
mod table;
mod text;

pub use account::{accounts_text, bill_table};
pub use explain::explain_text;
pub use ground::ground_text;
pub use home::{home_text, patterns_text};
pub use ledger::{ledger_csv, ledger_legend};
pub use table::{plain_table, plain_table_within};
pub use text::estimate_text;
