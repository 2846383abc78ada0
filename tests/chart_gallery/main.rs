//! Every picture, drawn from realistic invented data and from named hostile cases.
//!
//! Checked for each: labels stay on the canvas and touch no other label, the SVG is well-formed XML with title,
//! description and fonts, the PNG has the size promised, the alt text says something. The PNG and SVG files are left
//! in the test's folder under `target/tmp/gallery` to be looked at.

mod annual_cost;
mod common;
mod hours;
mod loads;
mod machines;
mod pressure_enthalpy;
mod studies;
mod sums;
mod weather;
