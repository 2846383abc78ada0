//! How sure: levers within their spreads, sampled together, and the chances that follow.
//!
//! [`Hypercube`] gives stratified shares of one, [`Range`] turns a share into a value of a lever, [`Sampler`] moves all levers and
//! runs every system, block by block, and [`shares()`] says which lever made the spread.

mod hypercube;
mod line;
mod past;
mod quantiles;
mod range;
mod sampler;
mod shares;
mod uncertain;
mod worth;

pub use hypercube::Hypercube;
pub use quantiles::{Chance, Quantiles};
pub use range::Range;
pub use sampler::{Drawn, Sample, Sampler};
pub use shares::{SpreadShare, shares};
pub use uncertain::{Declared, Doubts, PRICE_CORRELATION, Uncertain};
pub use worth::{chance_wrong, chance_wrong_knowing};
