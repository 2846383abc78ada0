//! How the machine runs at a condition from the command line.

use crate::answer::machine::OperatingAnswer;
use crate::cli::Failure;
use crate::heatpump::{ColdSide, Duty, HeatPump, LEAST_DIFFERENCE_K, default_spread_k};
use crate::problem::{Finding, Severity};
use crate::units::{Power, Temperature, parse};

/// The machine on its bench at a condition from the command line.
pub(super) fn operating(
    machine: &HeatPump,
    at: &str,
    output: Option<&str>,
    findings: &mut Vec<Finding>,
) -> Result<OperatingAnswer, Failure> {
    let (source_c, flow_c) = condition(at)?;
    let bench = machine.at_bench();
    let cold = ColdSide {
        open_c: source_c,
        k_per_kw: 0.0,
        relative_humidity: None,
    };
    let limits = machine.limits();
    if !limits.allows_source(source_c) {
        let allowed = format!(
            "a source from {} to {} °C, this machine's limits",
            limits.lowest_source_c, limits.highest_source_c
        );
        return Err(Failure::argument(
            "--at",
            format!("source {source_c} °C"),
            allowed,
        ));
    }
    let highest_c = limits.highest_flow_at(source_c);
    let lowest_c = source_c + LEAST_DIFFERENCE_K;
    if flow_c > highest_c || flow_c < lowest_c {
        let allowed = format!(
            "a flow from {lowest_c} to {highest_c} °C at this source, this machine's limits"
        );
        return Err(Failure::argument(
            "--at",
            format!("flow {flow_c} °C"),
            allowed,
        ));
    }
    let greatest_kw = bench.greatest_output_kw(&cold, flow_c);
    let heat_kw = match output {
        Some(text) => wanted_kw(text)?,
        None => greatest_kw,
    };
    if heat_kw > greatest_kw * (1.0 + 1e-9) {
        findings.push(Finding::new(
            Severity::Warning,
            format!("{heat_kw} kW is more than the {greatest_kw:.2} kW it can give there"),
            "it runs at its greatest output",
        ));
    }
    let duty = Duty {
        heat_kw,
        flow_c,
        spread_k: default_spread_k(flow_c),
        hours: 1.0,
        at_full_output: false,
    };
    let exact = bench
        .explain(&cold, &duty)
        .map_err(|error| Failure::argument("--at", error.to_string(), ""))?;
    OperatingAnswer::new(&exact, machine.field_factor()).ok_or_else(|| {
        Failure::argument("--at", format!("{at}: the machine does not run there"), "")
    })
}

/// A number that takes a unit when it is bare.
fn bare(text: &str, unit: &str) -> String {
    match text.trim().parse::<f64>() {
        Ok(number) => format!("{number} {unit}"),
        Err(_) => text.to_owned(),
    }
}

fn condition(text: &str) -> Result<(f64, f64), Failure> {
    let temperature = |part: &str| parse::<Temperature>(&bare(part, "°C")).ok().map(|t| t.c());
    text.split_once('/')
        .and_then(|(source, flow)| Some((temperature(source)?, temperature(flow)?)))
        .ok_or_else(|| {
            let allowed = "source and flow temperature in °C, such as -7/50";
            Failure::argument("--at", format!("\"{text}\""), allowed)
        })
}

fn wanted_kw(text: &str) -> Result<f64, Failure> {
    let allowed = "a heat output above 0 kW, such as 4";
    parse::<Power>(&bare(text, "kW"))
        .ok()
        .map(|power| power.kw())
        .filter(|kw| *kw > 0.0)
        .ok_or_else(|| Failure::argument("--output", format!("\"{text}\""), allowed))
}
