//! The picture of a machine: output and COP at three flow temperatures.

use std::path::Path;

use crate::chart::{FlowCurve, MachinePerformance, Marks, TestedPoint, machine_performance};
use crate::cli::{Failure, NewFile, picture_file};
use crate::heatpump::{
    ColdSide, Duty, Fitted, LEAST_DIFFERENCE_K, Sheet, SourceKind, SpeedAt, default_spread_k,
};

/// Flow temperatures of the picture: the coolest and the hottest that were tested and the one nearest between, else usual ones.
fn flows(sheet: &Sheet) -> Vec<f64> {
    let mut tested: Vec<f64> = sheet.points.iter().map(|point| point.flow_c).collect();
    tested.sort_by(f64::total_cmp);
    tested.dedup_by(|a, b| (*a - *b).abs() < 1.0);
    if let [first, .., last] = *tested.as_slice() {
        let middle = 0.5 * (first + last);
        let nearest = tested[1..tested.len() - 1]
            .iter()
            .copied()
            .min_by(|a, b| (a - middle).abs().total_cmp(&(b - middle).abs()));
        return vec![first, nearest.unwrap_or(middle), last];
    }
    let highest_c = sheet.limits.highest_flow_anywhere();
    [35.0, 45.0, 55.0]
        .into_iter()
        .filter(|flow_c| *flow_c <= highest_c)
        .collect()
}

pub(super) fn picture(sheet: &Sheet, fitted: &Fitted, path: &Path) -> Result<NewFile, Failure> {
    let machine = fitted.heat_pump.at_bench();
    let limits = machine.limits();
    let curve = |flow_c: f64| {
        let first = limits.lowest_source_c.ceil() as i64;
        let last = limits.highest_source_c.floor() as i64;
        let points = (first..=last)
            .map(|source_c| source_c as f64)
            .filter(|source_c| *source_c <= flow_c - LEAST_DIFFERENCE_K)
            .filter_map(|source_c| {
                let cold = ColdSide {
                    open_c: source_c,
                    k_per_kw: 0.0,
                    relative_humidity: None,
                };
                let heat_kw = machine.greatest_output_kw(&cold, flow_c);
                let duty = Duty {
                    heat_kw,
                    flow_c,
                    spread_k: default_spread_k(flow_c),
                    hours: 1.0,
                    at_full_output: true,
                };
                let delivered = machine.deliver(&cold, &duty);
                let cop = delivered.heat_kwh / delivered.electricity_kwh();
                (heat_kw > 0.0).then_some((source_c, heat_kw, cop))
            })
            .collect();
        FlowCurve { flow_c, points }
    };
    let at_maximum = sheet.points.iter().any(|p| p.at == SpeedAt::Maximum);
    let data = MachinePerformance {
        machine: machine.label().to_owned(),
        source: match sheet.source {
            SourceKind::Air => "Outdoor air",
            SourceKind::Brine => "Brine entering",
            SourceKind::Water => "Ground water entering",
        }
        .to_owned(),
        flows: flows(sheet).into_iter().map(curve).collect(),
        // The lines are at greatest output: points at other speeds would lie off them for a good reason.
        tested: sheet
            .points
            .iter()
            .filter(|p| !at_maximum || p.at == SpeedAt::Maximum)
            .map(|p| TestedPoint {
                source_c: p.source_c,
                flow_c: p.flow_c,
                output_kw: p.heat_kw,
                cop: p.cop,
            })
            .collect(),
        envelope: Some((limits.lowest_source_c, limits.highest_source_c)),
    };
    picture_file(
        "--chart",
        path,
        machine_performance(&data, &Marks::default()),
    )
}
