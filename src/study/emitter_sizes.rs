//! Flow temperature against emitters: what larger radiators would save.

use super::case::Contender;
use super::lever::Lever;
use super::pair::{CHOICE, Compared, Pair};
use crate::home::Group;
use crate::problem::Problems;

/// Design flow temperatures looked at, °C.
const FLOWS_C: (f64, f64) = (35.0, 65.0);
/// Steps between them.
const STEPS: usize = 12;

/// A choice with emitters for one design flow temperature.
#[derive(Debug, Clone, PartialEq)]
pub struct EmitterSize {
    /// Design flow temperature, °C.
    pub flow_c: f64,
    /// Output the emitters need at ΔT 50 K (EN 442: 75/65/20), as a multiple of today's emitters.
    pub times_today: f64,
    /// What a year comes to; nothing where the machine does not reach the flow.
    pub year: Option<EmitterYear>,
}

/// A year with those emitters.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct EmitterYear {
    /// Yearly cost.
    pub cost: f64,
    /// Today's yearly cost less it.
    pub saving: f64,
    /// SPF with all auxiliaries.
    pub spf_h4: Option<f64>,
    /// Hours short of heat.
    pub hours_short: f64,
}

/// Annual cost and SPF of a heat pump over the design flow temperature of its emitters; empty for other heating.
///
/// # Errors
/// When a year cannot be run or billed.
pub fn emitter_sizes(pair: &Pair) -> Result<Vec<EmitterSize>, Problems> {
    if pair.choice().system.heating.machine().is_none() {
        return Ok(Vec::new());
    }
    let flows = (0..=STEPS).map(|i| FLOWS_C.0 + (FLOWS_C.1 - FLOWS_C.0) * i as f64 / STEPS as f64);
    let (reached, beyond): (Vec<f64>, Vec<f64>) = flows.partition(|&flow_c| {
        Lever::FlowTemperature
            .check(flow_c, pair.case(), CHOICE)
            .is_ok()
    });
    let settings: Vec<_> = reached
        .iter()
        .map(|&flow_c| vec![(Lever::FlowTemperature, flow_c)])
        .collect();
    let mut sizes = pair.at_each(&settings, |compared| EmitterSize {
        flow_c: compared.case.contenders[CHOICE]
            .system
            .home
            .emitters
            .design_flow_c(),
        times_today: rated_output_kw(&compared.case.contenders[CHOICE], None)
            / rated_output_kw(pair.today(), None),
        year: Some(year(&compared)),
    })?;
    sizes.extend(beyond.iter().map(|&flow_c| EmitterSize {
        flow_c,
        times_today: rated_output_kw(pair.choice(), Some(flow_c))
            / rated_output_kw(pair.today(), None),
        year: None,
    }));
    Ok(sizes)
}

fn year(compared: &Compared) -> EmitterYear {
    let [today, choice] = &compared.outcomes;
    EmitterYear {
        cost: choice.costs.total,
        saving: today.costs.total - choice.costs.total,
        spf_h4: choice.mean_sums().spf_h4(),
        hours_short: choice.mean(|year| f64::from(year.hours_short)),
    }
}

/// Output at a mean water temperature 50 K above the room, kW: `Q (50/ΔT)^n` of each group with its own exponent (EN 442: 1.3 for
/// radiators) from its design point, or from another design flow (°C).
fn rated_output_kw(contender: &Contender, flow_c: Option<f64>) -> f64 {
    /// EN 442: 75/65/20.
    const RATED_EXCESS_K: f64 = 50.0;
    let room_c = contender.indoor_c;
    let emitters = &contender.system.home.emitters;
    let emitters = flow_c.map_or(*emitters, |flow_c| {
        emitters.with_design_flow(flow_c, room_c)
    });
    let rated = |group: &Group| {
        let excess_k = (group.flow_c + group.return_c) / 2.0 - room_c;
        group.share * (RATED_EXCESS_K / excess_k).powf(group.kind.exponent())
    };
    emitters.design_load_kw() * emitters.groups().iter().map(rated).sum::<f64>()
}
