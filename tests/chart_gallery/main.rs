//! Every picture, drawn from realistic invented data and from named hostile cases.
//!
//! Checked for each: labels stay on the canvas and touch no other label, the SVG is well-formed XML with title,
//! description and fonts, the PNG has the size promised, the alt text says something. The PNG and SVG files are left
//! in the test's folder under `target/tmp/gallery` to be looked at.
#![cfg(test)]

#[cfg(test)]
mod annual_cost;
#[cfg(test)]
mod common;
#[cfg(test)]
mod flows;
#[cfg(test)]
mod glance;
#[cfg(test)]
mod hours;
#[cfg(test)]
mod loads;
#[cfg(test)]
mod machines;
#[cfg(test)]
mod odds;
#[cfg(test)]
mod pressure_enthalpy;
#[cfg(test)]
mod random;
#[cfg(test)]
mod stored;
#[cfg(test)]
mod studies;
#[cfg(test)]
mod sums;
#[cfg(test)]
mod weather;
