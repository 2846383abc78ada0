//! Answers as text, page and files.
//!
//! The long form is written once: `sections/*.md` are Markdown templates, `facts` is what they may speak of, `sentences` fills
//! them, `blocks` reads the Markdown, `page` sets it as HTML and `pdf` on paper. `pictures` fills the chart room's pictures.

mod account;
mod blocks;
mod error;
mod explain;
mod facts;
mod ground;
mod home;
mod hours;
mod ledger;
mod narrow;
mod odds;
mod odds_pictures;
mod page;
#[cfg(feature = "pdf")]
mod pdf;
mod pictures;
mod sentences;
mod study;
mod table;
mod text;
mod told;
mod weather_years;

pub use account::{accounts_text, bill_table};
pub use error::ReportError;
pub use explain::explain_text;
pub use ground::ground_text;
pub use home::{home_text, patterns_text};
pub use ledger::{ledger_csv, ledger_legend};
pub use odds::odds_text;
pub use odds_pictures::{odds_pictures, samples_csv, spread_picture};
pub use page::report_html;
#[cfg(feature = "pdf")]
pub use pdf::report_pdf;
pub use pictures::{Drawn, Material, in_front, pictures, signature_picture, study_pictures};
pub use study::study_text;
pub use table::{plain_table, plain_table_within};
pub use text::estimate_text;
