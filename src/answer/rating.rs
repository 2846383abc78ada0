//! The answer of the `rating` command: seasonal figures of a machine.

use serde::Serialize;

use crate::heatpump::Sheet;
use crate::heatpump::rating::{Application, Climate, Rated, RatedFrom};
use crate::problem::Finding;

/// A seasonal rating by the bin method.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct RatingAnswer {
    /// What the machine is called.
    pub label: String,
    /// Whether it is an invented sheet that stands for a usual machine.
    pub typical: bool,
    /// Climate.
    pub climate: &'static str,
    /// Application.
    pub application: &'static str,
    /// Where the points come from: `declared` on the sheet or `fitted` machine.
    pub from: &'static str,
    /// Seasonal COP, idle modes included.
    pub scop: f64,
    /// Active mode, heater included.
    pub scop_on: f64,
    /// Active mode, without heater.
    pub scop_net: f64,
    /// Seasonal efficiency on primary energy.
    pub eta_s_percent: f64,
    /// Annual heat.
    pub qh_kwh: f64,
    /// Annual electricity.
    pub electricity_kwh: f64,
    /// Annual supplementary heat.
    pub heater_kwh: f64,
    /// Design load Pdesignh.
    pub design_load_kw: f64,
    /// Bivalent temperature.
    pub bivalent_c: f64,
    /// Operation limit TOL.
    pub operation_limit_c: f64,
    /// The rating points.
    pub points: Vec<RatingPointAnswer>,
    /// The bins, when asked for.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub bins: Option<Vec<BinAnswer>>,
    /// What is outside the regulation's frame.
    pub findings: Vec<Finding>,
}

/// One rating point.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct RatingPointAnswer {
    /// Outdoor temperature.
    pub outdoor_c: f64,
    /// Flow temperature.
    pub flow_c: f64,
    /// Part-load ratio.
    pub part_load_ratio: f64,
    /// Load.
    pub load_kw: f64,
    /// Capacity.
    pub capacity_kw: f64,
    /// COP at that capacity.
    pub cop_declared: f64,
    /// Load over capacity, at most 1.
    pub capacity_ratio: f64,
    /// COP at part load, cycling included.
    pub cop: f64,
}

/// One bin.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct BinAnswer {
    /// Outdoor temperature.
    pub outdoor_c: f64,
    /// Hours.
    pub hours: f64,
    /// Load.
    pub load_kw: f64,
    /// Supplementary heat.
    pub heater_kw: f64,
    /// COP of the machine.
    pub cop: f64,
}

impl RatingAnswer {
    /// Puts the answer together.
    pub fn new(
        sheet: &Sheet,
        rated: &Rated,
        climate: Climate,
        application: Application,
        with_bins: bool,
    ) -> Self {
        let rating = &rated.rating;
        Self {
            label: sheet.label.clone(),
            typical: sheet.typical,
            climate: climate.word(),
            application: application.word(),
            from: match rated.from {
                RatedFrom::Declared => "declared",
                RatedFrom::Fitted => "fitted",
            },
            scop: rating.scop,
            scop_on: rating.scop_on,
            scop_net: rating.scop_net,
            eta_s_percent: rating.eta_s_percent,
            qh_kwh: rating.heat_kwh,
            electricity_kwh: rating.electricity_kwh,
            heater_kwh: rating.heater_kwh,
            design_load_kw: rated.case.design_load_kw,
            bivalent_c: rated.bivalent_c,
            operation_limit_c: rated.case.operation_limit_c,
            points: rating
                .points
                .iter()
                .map(|p| RatingPointAnswer {
                    outdoor_c: p.declared.outdoor_c,
                    flow_c: application.flow_c(climate, p.declared.outdoor_c),
                    part_load_ratio: p.part_load_ratio,
                    load_kw: p.load_kw,
                    capacity_kw: p.declared.capacity_kw,
                    cop_declared: p.declared.cop,
                    capacity_ratio: p.capacity_ratio,
                    cop: p.cop,
                })
                .collect(),
            bins: with_bins.then(|| {
                rating
                    .bins
                    .iter()
                    .map(|b| BinAnswer {
                        outdoor_c: b.outdoor_c,
                        hours: b.hours,
                        load_kw: b.load_kw,
                        heater_kw: b.heater_kw,
                        cop: b.cop,
                    })
                    .collect()
            }),
            findings: rated.findings.clone(),
        }
    }
}
