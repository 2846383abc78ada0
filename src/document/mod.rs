//! TOML text into flat structs whose every leaf knows its place.
//!
//! One declaration serves three uses: a struct of [`Leaf`] fields inside [`Section`]s derives `Deserialize` (reading),
//! `JsonSchema` (the published schema) and, through that schema, the list of known fields that names an unknown
//! one's nearest neighbour. A wrong leaf never stops the reading: its problem is kept and all are told together.
//!
//! ```
//! use schemars::JsonSchema;
//! use serde::Deserialize;
//! use winterledger::bounds;
//! use winterledger::document::{Document, Leaf, Section};
//! use winterledger::units::HeatLossCoefficient;
//!
//! #[derive(Deserialize, JsonSchema)]
//! struct Brief {
//!     home: Section<Home>,
//! }
//! #[derive(Deserialize, JsonSchema)]
//! struct Home {
//!     /// Heat lost per kelvin between inside and outside.
//!     heat_loss: Option<Leaf<HeatLossCoefficient>>,
//! }
//!
//! let text = "[home]\nheat_loss = \"212 kWh\"\n";
//! let (brief, mut check) = Document::<Brief>::read("brief.toml", text)?;
//! let loss = check.within(&brief.home.heat_loss, &bounds::HEAT_LOSS_W_PER_K);
//! assert!(loss.is_none());
//! assert_eq!(check.problems().iter().next().and_then(|p| p.place.line), Some(2));
//! # Ok::<(), winterledger::problem::Problems>(())
//! ```

mod check;
mod file;
mod leaf;
mod read;
mod unknown;
mod word;

pub use check::Check;
pub use file::read_text;
pub use leaf::{Leaf, LeafValue, Section};
pub use read::{Document, Source};
pub use word::Word;
