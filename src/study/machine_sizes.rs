//! Rated output against what it does: from too small to too large.

use super::balance::cold_side;
use super::case::Contender;
use super::lever::Lever;
use super::pair::{CHOICE, Compared, Pair};
use crate::heatpump::ColdSide;
use crate::problem::Problems;
use crate::source::Memory;
use crate::year::MachineSystem;

/// Sizes looked at, as multiples of the design heat load. A choice of ours.
const SIZES: (f64, f64) = (0.5, 2.0);
/// Steps between them.
const STEPS: usize = 12;
/// A mild heating day, °C outdoors. A choice of ours.
const MILD_C: f64 = 10.0;
/// Costs within this share of the least are told as the same. A choice of ours.
const THE_SAME: f64 = 0.01;

/// A choice with a machine of one size.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct MachineSize {
    /// Rated output, kW.
    pub rated_kw: f64,
    /// Yearly cost.
    pub cost: f64,
    /// Today's yearly cost less it.
    pub saving: f64,
    /// SPF with all auxiliaries.
    pub spf_h4: Option<f64>,
    /// Share of the heat that backup and immersion heater make.
    pub backup_share: f64,
    /// Greatest output at the design outdoor temperature over the design heat load.
    pub coldest_night_cover: f64,
    /// Starts of the compressor in a year.
    pub starts: f64,
    /// Least output on a mild day over that day's load: above 1 it cycles.
    pub least_over_mild_load: f64,
    /// Hours short of heat.
    pub hours_short: f64,
    /// Lowest indoor temperature, °C.
    pub min_indoor_c: f64,
}

/// A sweep over sizes.
#[derive(Debug, Clone, PartialEq)]
pub struct MachineSizes {
    /// The sizes, rising.
    pub sizes: Vec<MachineSize>,
    /// Design heat load, kW.
    pub design_load_kw: f64,
    /// A mild day: outdoor temperature, °C, and the load less internal gains, kW.
    pub mild: (f64, f64),
    /// From the first to the last of these sizes the cost stays within a hundredth of the least and no hour is short that a larger one
    /// would not be: there it does not matter, kW.
    pub alike_kw: Option<(f64, f64)>,
}

/// Sweeps the rated output of a heat pump, everything else staying as it is, its loop and its price too; nothing for other heating.
///
/// # Errors
/// When a year cannot be run or billed.
pub fn machine_sizes(pair: &Pair) -> Result<Option<MachineSizes>, Problems> {
    if pair.choice().system.heating.machine().is_none() {
        return Ok(None);
    }
    let choice = pair.choice();
    let load_kw = choice.design_load_kw;
    let fabric = &choice.system.home.fabric;
    let mild_kw = fabric.design_load_kw(choice.indoor_c, MILD_C) - fabric.internal_gains_kw();
    let settings: Vec<_> = (0..=STEPS)
        .map(|i| SIZES.0 + (SIZES.1 - SIZES.0) * i as f64 / STEPS as f64)
        .map(|times| vec![(Lever::RatedOutput, times * load_kw)])
        .collect();
    let sizes: Vec<MachineSize> = pair
        .at_each(&settings, |compared| size(&compared, load_kw, mild_kw))?
        .into_iter()
        .flatten()
        .collect();
    Ok(Some(MachineSizes {
        alike_kw: alike(&sizes),
        sizes,
        design_load_kw: load_kw,
        mild: (MILD_C, mild_kw),
    }))
}

fn size(compared: &Compared, load_kw: f64, mild_kw: f64) -> Option<MachineSize> {
    let contender = &compared.case.contenders[CHOICE];
    let system = contender.system.heating.machine()?;
    let [today, outcome] = &compared.outcomes;
    let sums = outcome.mean_sums();
    let heat_kwh = sums.space_heat_kwh() + sums.water_heat_kwh();
    let ground = contender
        .aged
        .map_or_else(Memory::default, |aged| aged.memory);
    let cold = cold_side(system, contender.design_outdoor_c, &ground);
    let mild = mild_side(system, &ground, compared.case.site.outdoor_c.len());
    let least_kw = system
        .machine
        .least_output_kw(&mild, flow_c(contender, mild_kw));
    Some(MachineSize {
        rated_kw: system.machine.rated_output_kw(),
        cost: outcome.costs.total,
        saving: today.costs.total - outcome.costs.total,
        spf_h4: sums.spf_h4(),
        backup_share: (sums.backup_kwh + sums.immersion_kwh) / heat_kwh,
        coldest_night_cover: system
            .machine
            .greatest_output_kw(&cold, flow_c(contender, load_kw))
            / load_kw,
        starts: sums.starts,
        least_over_mild_load: least_kw / mild_kw,
        hours_short: outcome.mean(|year| f64::from(year.hours_short)),
        min_indoor_c: outcome
            .years
            .iter()
            .map(|year| year.min_indoor_c)
            .fold(f64::INFINITY, f64::min),
    })
}

fn flow_c(contender: &Contender, load_kw: f64) -> f64 {
    let emitters = &contender.system.home.emitters;
    let water = emitters.at_load(load_kw.max(0.0), contender.indoor_c);
    water.flow_c + emitters.header_k()
}

/// What the machine draws on while it is mild outdoors: that air, ground and water at the mean of their year.
fn mild_side(system: &MachineSystem, ground: &Memory, hours: usize) -> ColdSide {
    let offers = (0..hours).map(|hour| system.source.offer(hour, MILD_C, ground));
    let sum = offers.fold((0.0, 0.0), |sum, offer| {
        (sum.0 + offer.open_c, sum.1 + offer.k_per_kw)
    });
    ColdSide {
        open_c: sum.0 / hours as f64,
        k_per_kw: sum.1 / hours as f64,
        relative_humidity: None,
    }
}

/// The stretch of sizes around the cheapest whose cost is told as the same and that leave no more hours short than the largest.
fn alike(sizes: &[MachineSize]) -> Option<(f64, f64)> {
    let fewest_short = sizes
        .iter()
        .map(|size| size.hours_short)
        .fold(f64::INFINITY, f64::min);
    let warm = |size: &MachineSize| size.hours_short <= fewest_short + 0.5;
    let least = sizes
        .iter()
        .filter(|size| warm(size))
        .map(|size| size.cost)
        .fold(f64::INFINITY, f64::min);
    let cheapest = sizes
        .iter()
        .position(|size| warm(size) && size.cost == least)?;
    let same = |size: &&MachineSize| warm(size) && size.cost <= least + THE_SAME * least.abs();
    let first = sizes[..=cheapest].iter().rev().take_while(same).last()?;
    let last = sizes[cheapest..].iter().take_while(same).last()?;
    Some((first.rated_kw, last.rated_kw))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn size(rated_kw: f64, cost: f64, hours_short: f64) -> MachineSize {
        MachineSize {
            rated_kw,
            cost,
            saving: 0.0,
            spf_h4: None,
            backup_share: 0.0,
            coldest_night_cover: 1.0,
            starts: 0.0,
            least_over_mild_load: 1.0,
            hours_short,
            min_indoor_c: 20.0,
        }
    }

    #[test]
    fn a_cheap_machine_that_leaves_rooms_cold_is_no_answer() {
        let sizes = [
            size(3.0, 900.0, 40.0),
            size(4.0, 1010.0, 0.0),
            size(5.0, 1000.0, 0.0),
            size(6.0, 1008.0, 0.0),
            size(7.0, 1030.0, 0.0),
        ];
        assert_eq!(alike(&sizes), Some((4.0, 6.0)));
        assert_eq!(alike(&[]), None);
    }
}
