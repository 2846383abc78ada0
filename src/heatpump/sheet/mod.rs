//! The machine sheet: what a datasheet says about one machine, read from TOML and checked.
//!
//! Reading finds every problem of the sheet in one pass: what a leaf cannot be (`read`, `read_point`), and what the points
//! cannot be together (`plausible`).

mod plausible;
mod points;
mod raw;
mod read;
mod read_point;
mod words;

use std::path::Path;
use std::sync::Arc;

pub use points::{TestedPoint, carnot, default_spread_k};
pub use words::{Drive, SourceKind, SpeedAt};

use super::idle::IdlePower;
use super::limits::Limits;
use super::rating::DeclaredPoint;
use crate::document::{Document, read_text};
use crate::problem::Problems;
use crate::refrigerant::Refrigerant;
use raw::RawSheet;
use read::read_sheet;

/// What a datasheet says about one machine.
#[derive(Debug, Clone, PartialEq)]
pub struct Sheet {
    /// The file, as the user named it.
    pub file: Arc<str>,
    /// What the machine is called.
    pub label: String,
    /// Where it takes heat.
    pub source: SourceKind,
    /// What runs in its circuit.
    pub refrigerant: Refrigerant,
    /// Whether its speed varies.
    pub drive: Drive,
    /// Superheat at the compressor's inlet, K.
    pub superheat_k: f64,
    /// Subcooling at the condenser's outlet, K.
    pub subcooling_k: f64,
    /// Fan, or the brine pump's share contained in the tested points, kW, where stated.
    pub source_power_kw: Option<f64>,
    /// The whole brine pump at home, kW, where stated.
    pub source_power_at_home_kw: Option<f64>,
    /// Degradation coefficient Cc of EN 14825.
    pub cycling_coefficient: f64,
    /// Greatest operating current, A, where stated.
    pub greatest_current_a: Option<f64>,
    /// The tested points, at least one.
    pub points: Vec<TestedPoint>,
    /// Where it may run.
    pub limits: Limits,
    /// What it takes when it does not heat.
    pub idle: IdlePower,
    /// Declared points of seasonal ratings.
    pub declared: Vec<DeclaredPoint>,
    /// What the sheet did not say and was assumed.
    pub assumed: Vec<Assumed>,
    /// Whether this is one of the invented sheets built in, standing for a usual machine.
    pub typical: bool,
}

/// A value that the sheet does not state.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Assumed {
    /// The field.
    pub name: &'static str,
    /// What was taken.
    pub value: String,
    /// Where that comes from.
    pub from: &'static str,
}

impl Sheet {
    /// JSON Schema of a sheet.
    pub fn schema() -> schemars::Schema {
        Document::<RawSheet>::schema()
    }

    /// Reads a sheet from a file.
    ///
    /// # Errors
    /// Every problem of the sheet, or that the file cannot be read.
    pub fn read(path: &Path) -> Result<Self, Problems> {
        Self::parse(&path.display().to_string(), &read_text(path)?)
    }

    /// Reads a sheet from its text; `file` is for messages.
    ///
    /// # Errors
    /// Every problem of the sheet.
    pub fn parse(file: &str, text: &str) -> Result<Self, Problems> {
        let (raw, mut check) = Document::<RawSheet>::read(file, text)?;
        let sheet = read_sheet(file, &raw, &mut check);
        check.finish(sheet)
    }

    /// The letter of the source in the trade's names of points: A, B or W.
    pub fn letter(&self) -> char {
        match self.source {
            SourceKind::Air => 'A',
            SourceKind::Brine => 'B',
            SourceKind::Water => 'W',
        }
    }

    /// Source and flow temperature of the rated output, °C: A7/W35, B0/W35 or W10/W35 (EN 14511).
    pub fn rated_condition(&self) -> (f64, f64) {
        match self.source {
            SourceKind::Air => (7.0, 35.0),
            SourceKind::Brine => (0.0, 35.0),
            SourceKind::Water => (10.0, 35.0),
        }
    }
}
