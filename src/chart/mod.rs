//! Pictures in one visual language.
//!
//! Every picture is a plain struct of its own data and a function that turns it into a [`Picture`]; nothing here reads
//! a file or knows another room. A `Picture` gives SVG, PNG, alt text and the boxes of its labels, all from the same
//! drawing.
//!
//! The layers, from the bottom: `font` (embedded typeface, widths), `palette` (colours and second cues), `geometry`
//! (dashes, hatches, clipping), `scene` (shapes), `label` (texts with their boxes, placed where there is room), `key`
//! (title and key), `paint` (plotters: SVG and PNG), `numbers` (marks of the place, ticks), `frame` (plot area with
//! axes), helpers that several pictures share (`bars`, `cloud`, `ends`, `isolines`, `layers`, `ramp`), then one file a
//! picture.
//!
//! # To add a picture
//! 1. Write `src/chart/NAME.rs`: a struct that holds what is drawn, in the units of the axes, and
//!    `pub fn NAME(data: &Data, marks: &Marks) -> Result<Picture, ChartError>`.
//! 2. First refuse what cannot be drawn: [`ChartError::Empty`] when there is nothing, `finite` for every number.
//! 3. `Scene::heading`, then `Frame::inside(…)` and `draw`, then data, then labels. Write fixed labels with `text`;
//!    write labels on data with `place` or `Frame::note`, which look for free room. Take looks from `palette::series`
//!    or one of the named colours with a hatch or dash, never a colour alone. Units stand in every axis title.
//! 4. Write the alt text from the data: what kind of picture, of what, and the two or three figures it is drawn for.
//! 5. Add a realistic and the hostile cases to `tests/chart_gallery/`: it checks that labels are apart and on the
//!    canvas and that the SVG is well-formed, and writes the PNG under `target/tmp/gallery` for you to look at. A case
//!    whose name ends in `_realistic` is compared with what is stored of it.

mod bars;
mod cloud;
mod ends;
mod font;
mod frame;
mod geometry;
mod isolines;
mod key;
mod label;
mod layers;
mod numbers;
mod paint;
mod palette;
mod ramp;
mod rows;
mod scene;

mod annual_cost;
mod break_even;
mod brine_life;
mod brine_year;
mod carbon_by_system;
mod carbon_by_year;
mod carpet;
mod coldest_days;
mod contours;
mod cop_year;
mod cost_odds;
mod cumulative_spend;
mod demand_and_output;
mod duration_curve;
mod emitter_study;
mod energy_flow;
mod glance;
mod load_duration;
mod machine_performance;
mod monthly;
mod pressure_enthalpy;
mod saving_odds;
mod signature;
mod spread_shares;
mod swings;

pub use annual_cost::{AnnualCost, SystemCost, annual_cost};
pub use break_even::{BreakEven, BreakEvenLine, break_even};
pub use brine_life::{BrineLife, brine_life};
pub use brine_year::{BrineLine, BrineYear, brine_year};
pub use carbon_by_system::{CarbonBySystem, SystemCarbon, carbon_by_system};
pub use carbon_by_year::{CarbonByYear, SystemYears, carbon_by_year};
pub use carpet::{Carpet, Spell, calendar_months, carpet};
pub use coldest_days::{ColdHour, ColdestDays, coldest_days};
pub use contours::{Contours, contours};
pub use cop_year::{CopSystem, CopYear, cop_year};
pub use cost_odds::{CostOdds, CostSpread, cost_odds};
pub use cumulative_spend::{CumulativeSpend, SystemSpend, cumulative_spend};
pub use demand_and_output::{DemandAndOutput, demand_and_output};
pub use duration_curve::{DurationCurve, duration_curve};
pub use emitter_study::{EmitterStep, EmitterStudy, emitter_study};
pub use energy_flow::{EnergyFlow, Flow, FlowKind, energy_flow};
pub use font::clean as plain_line;
pub use font::{BOLD, FAMILY, FAMILY_STACK, REGULAR, css as font_css};
#[cfg(feature = "pdf")]
pub(crate) use font::{
    UNPRINTABLE, Weight, glyphs, has as font_has, printable, width as text_width,
};
pub use geometry::Rect;
pub use glance::{GLANCE_WIDTH, Glance, GlanceRow, GlanceShape, glance};
pub use label::Label;
pub use load_duration::{LoadDuration, load_duration};
pub use machine_performance::{FlowCurve, MachinePerformance, TestedPoint, machine_performance};
pub use monthly::{Monthly, MonthlySystem, monthly};
pub use numbers::Marks;
pub use paint::PNG_PIXELS;
pub use palette::Colour;
pub use pressure_enthalpy::{PressureEnthalpy, StatePoint, pressure_enthalpy};
pub use saving_odds::{ChoiceSaving, SavingOdds, saving_odds};
#[cfg(feature = "pdf")]
pub(crate) use scene::Item;
pub use scene::{PHONE_WIDTH, WIDTH};
pub use signature::{MeterPoint, SignaturePlot, signature_plot};
pub use spread_shares::{SpreadShares, UnknownShare, spread_shares};
pub use swings::{Swing, Swings, swings};

use std::fmt;

/// A finished picture.
#[derive(Debug, Clone)]
pub struct Picture {
    /// What the picture shows, one line.
    pub title: String,
    /// The same content in plain sentences, for a reader who does not see it.
    pub alt: String,
    scene: scene::Scene,
}

impl Picture {
    fn new(title: &str, alt: String, scene: scene::Scene) -> Self {
        Self {
            title: font::clean(title),
            alt: font::clean(&alt),
            scene,
        }
    }

    /// The picture as an SVG document that carries its fonts.
    ///
    /// # Errors
    /// When the drawing library fails.
    pub fn svg(&self) -> Result<String, ChartError> {
        paint::svg(self, true)
    }

    /// The picture as an SVG element for a page that carries [`font_css`] once.
    ///
    /// # Errors
    /// When the drawing library fails.
    pub fn svg_without_fonts(&self) -> Result<String, ChartError> {
        paint::svg(self, false)
    }

    /// The picture as PNG bytes at print resolution, [`PNG_PIXELS`] pixels to a point.
    ///
    /// # Errors
    /// When the drawing library fails.
    pub fn png(&self) -> Result<Vec<u8>, ChartError> {
        paint::png(self)
    }

    /// Every text of the picture with the room it takes.
    pub fn labels(&self) -> &[Label] {
        &self.scene.labels
    }

    /// Whether every text stands on the canvas and clear of all others.
    pub fn labels_are_apart(&self) -> bool {
        let canvas = self.canvas();
        let labels = self.labels();
        labels.iter().enumerate().all(|(i, label)| {
            canvas.contains(&label.area)
                && labels[i + 1..]
                    .iter()
                    .all(|other| !label.area.overlaps(&other.area))
        })
    }

    /// What is painted, in order, for an output outside this room.
    #[cfg(feature = "pdf")]
    pub(crate) fn items(&self) -> &[Item] {
        &self.scene.items
    }

    /// The whole picture, in points.
    pub fn canvas(&self) -> Rect {
        self.scene.canvas()
    }
}

/// Why a picture could not be drawn.
#[derive(Debug, Clone, PartialEq)]
pub enum ChartError {
    /// There is nothing to draw.
    Empty {
        /// The picture.
        picture: &'static str,
        /// What is missing.
        missing: &'static str,
    },
    /// A number is not one, or too large to be drawn.
    NotFinite {
        /// The picture.
        picture: &'static str,
        /// Which number.
        what: String,
        /// What it was.
        value: f64,
    },
    /// Lists that belong together differ in length.
    Uneven {
        /// The picture.
        picture: &'static str,
        /// The lists and their lengths.
        what: String,
    },
    /// The embedded font could not be read.
    Font,
    /// The drawing library failed.
    Drawing(String),
}

impl ChartError {
    fn drawing(error: impl fmt::Display) -> Self {
        Self::Drawing(error.to_string())
    }
}

impl fmt::Display for ChartError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Empty { picture, missing } => {
                write!(f, "the picture “{picture}” has nothing to draw: {missing}")
            }
            Self::NotFinite {
                picture,
                what,
                value,
            } => write!(
                f,
                "the picture “{picture}” needs a number below 10¹² for {what}, found {value}"
            ),
            Self::Uneven { picture, what } => {
                write!(
                    f,
                    "the picture “{picture}” was given lists of different length: {what}"
                )
            }
            Self::Font => write!(f, "the embedded font cannot be read"),
            Self::Drawing(why) => write!(f, "the picture cannot be drawn: {why}"),
        }
    }
}

impl std::error::Error for ChartError {}

/// Larger numbers are no money, energy or temperature of a home, and their figures would not fit.
const LARGEST: f64 = 1e12;

/// Refuses the first of `values` that is not a number or too large to be drawn.
fn finite<'a>(
    picture: &'static str,
    values: impl IntoIterator<Item = (&'a str, f64)>,
) -> Result<(), ChartError> {
    for (what, value) in values {
        if !value.is_finite() || value.abs() > LARGEST {
            return Err(ChartError::NotFinite {
                picture,
                what: what.to_string(),
                value,
            });
        }
    }
    Ok(())
}

/// A name as it is written in a picture, when there may be none.
fn named(label: &str) -> &str {
    if font::clean(label).is_empty() {
        "(no name)"
    } else {
        label
    }
}

/// A line of regular text shortened until it is at most `room` wide.
#[cfg(feature = "pdf")]
pub(crate) fn fit_line(text: &str, size: f64, room: f64) -> String {
    font::fit(text, size, Weight::Regular, room)
}

/// A name as the first sentence of a subtitle: at most `room` wide, and closed with a full stop.
fn sentence(label: &str, room: f64) -> String {
    let name = font::fit(named(label), label::SMALL, font::Weight::Regular, room);
    if name.ends_with(['.', '…', '!', '?']) {
        name
    } else {
        name + "."
    }
}
