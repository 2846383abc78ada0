//! The answer of `ground`: a loop through its life. Field names are a promise to whoever reads the JSON; absent means absent, never
//! 0.

use std::f64::consts::TAU;

use serde::Serialize;

use crate::problem::{Finding, Severity};
use crate::source::{BuriedLoop, Layout, RuleOfThumb, SOILS, Source, WaterSource};
use crate::study::{Contender, LoopYear, NoShortest, ShortestLoop};
use crate::year::MachineSystem;

/// Years of a life that are reported.
const REPORTED: [u32; 5] = [1, 2, 5, 10, 25];
/// Years at which the g-function is reported.
const G_YEARS: [f64; 7] = [1.0 / 12.0, 0.5, 1.0, 2.0, 5.0, 10.0, 25.0];

/// A ground source through its life.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct GroundAnswer {
    /// The choice.
    pub label: String,
    /// "bores", "trenches", "water" or "quick loop".
    pub kind: &'static str,
    /// Undisturbed ground at the loop, or the water: mean of the year.
    pub undisturbed_c: f64,
    /// Step response of the wall times 2πk, no unit; empty where there is none.
    pub g_function: Vec<GValue>,
    /// Years 1, 2, 5, 10, 25 and the last.
    pub years: Vec<GroundYear>,
    /// Lowest entering temperature of every year of the life, from the first; nothing where the machine never ran.
    pub lowest_brine_c: Vec<Option<f64>>,
    /// The loop, where it is described.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub buried: Option<BuriedAnswer>,
    /// The shortest loop above the floor, where it was looked for and found.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub sizing: Option<SizingAnswer>,
    /// What was odd and what it means.
    pub findings: Vec<Finding>,
    /// The other ground sources of the brief.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub others: Vec<GroundAnswer>,
}

/// A value of the g-function.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct GValue {
    /// After so many years of a steady draw.
    pub years: f64,
    /// 2πk times the fall of the wall for each watt per metre.
    pub value: f64,
}

/// One year of a ground source.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct GroundYear {
    /// Year of its life.
    pub year: u32,
    /// Lowest temperature entering the machine.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub lowest_brine_c: Option<f64>,
    /// Mean of entering and leaving in that hour.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub lowest_mean_c: Option<f64>,
    /// Leaving the machine in that hour.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub lowest_leaving_c: Option<f64>,
    /// Mean temperature entering while running.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub average_brine_c: Option<f64>,
    /// Mean wall of bores or pipes over the year.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub bore_wall_c: Option<f64>,
    /// Lowest wall of the year.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub lowest_wall_c: Option<f64>,
    /// Seasonal performance factor with the source's pumps.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h2: Option<f64>,
    /// With all auxiliaries.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h4: Option<f64>,
    /// Heat taken from the ground.
    pub taken_kwh: f64,
    /// Heat put back.
    pub returned_kwh: f64,
    /// Electricity of the source's pumps.
    pub source_pump_kwh: f64,
    /// All electricity.
    pub electricity_kwh: f64,
    /// Electricity of backup and immersion heater.
    pub backup_kwh: f64,
    /// Hours in which the machine stood because its source was outside its limits.
    pub hours_stopped: u32,
    /// Hours in which it was turned down so that its source would not fall below its limit.
    pub hours_turned_down: u32,
    /// Hours with backup or immersion heater.
    pub hours_backup: u32,
    /// Hours that ended short of heat.
    pub hours_short: u32,
    /// Hours with the wall below 0 °C.
    pub hours_wall_frozen: u32,
}

/// A described loop.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct BuriedAnswer {
    /// Length that takes heat: of bores, or of pipe.
    pub length_m: f64,
    /// From the wall to the mean of the brine.
    pub resistance_m_k_per_w: f64,
    /// What flows.
    pub brine: String,
    /// Where it freezes.
    pub brine_freezing_c: f64,
    /// How much of it.
    pub flow_kg_per_s: f64,
    /// Reynolds number in the pipes.
    pub reynolds: f64,
    /// Pump of the loop beyond the machine's own exchanger.
    pub pump_w: f64,
    /// The machine's rated draw over the length.
    pub rated_w_per_m: f64,
    /// Until so long after a change of the draw the line source is not yet valid at the wall.
    pub line_source_valid_from_h: f64,
    /// What it may leave out of the wall's fall before that, at most, at the greatest draw.
    pub line_source_error_k: f64,
}

/// The shortest loop above a floor.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SizingAnswer {
    /// The floor of the brine entering the machine.
    pub floor_c: f64,
    /// Year of the loop's life that decided.
    pub year: u32,
    /// Shortest length.
    pub length_m: f64,
    /// Entering, mean and leaving brine in the coldest hour of that year.
    pub entering_c: f64,
    /// Mean of entering and leaving.
    pub mean_c: f64,
    /// Leaving the machine.
    pub leaving_c: f64,
    /// The machine's rated draw over that length.
    pub rated_w_per_m: f64,
    /// Hours of rated draw that make up the heat taken in the year.
    pub full_load_hours: f64,
    /// Historical rule of thumb for this ground, W/m, at 1800 and at 2400 hours: least and greatest each; bores only.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub rule_of_thumb_w_per_m: Option<[[f64; 2]; 2]>,
    /// Length by that rule at the hours nearest to the ones computed; least and greatest.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub rule_of_thumb_m: Option<[f64; 2]>,
}

/// What every loop is told with.
pub const GROUND_CAUTION: &str = "A figure for a decision, not a loop design: ground differs from its class, and neighbours' loops count. \
Ethylene glycol is poisonous. Design, drilling, excavation, antifreeze and permits belong to licensed people and local rules; a test in the ground comes before a field is drilled.";

/// Makes the answer of one ground source; nothing for a system without one.
pub fn ground_answer(
    contender: &Contender,
    life: &[LoopYear],
    shortest: Option<Result<ShortestLoop, NoShortest>>,
) -> Option<GroundAnswer> {
    let machine = contender.system.heating.machine()?;
    let (kind, column) = match &machine.source {
        Source::OutdoorAir => return None,
        Source::Ground(ground) => ("quick loop", &ground.undisturbed_c[..]),
        Source::Water(WaterSource { water_c, .. }) => ("water", &water_c[..]),
        Source::Buried(buried) => match buried.design.layout {
            Layout::Bores { .. } => ("bores", buried.undisturbed()),
            Layout::Trenches { .. } => ("trenches", buried.undisturbed()),
        },
    };
    let buried = match &machine.source {
        Source::Buried(buried) => Some(&**buried),
        _ => None,
    };
    let last = life.last().map_or(0, |year| year.year);
    let mut findings = life_findings(machine, life, &contender.system.label);
    let sizing = match shortest {
        Some(Ok(found)) => Some(sizing(machine, buried?, &found)),
        Some(Err(NoShortest::BelowFloorAt(length_m))) => {
            findings.push(Finding::new(
                Severity::Warning,
                format!(
                    "even {length_m:.0} m of loop let the brine of \"{}\" fall below the floor",
                    contender.system.label
                ),
                "the ground is too cold or the floor too high",
            ));
            None
        }
        Some(Err(NoShortest::Response(error))) => {
            findings.push(Finding::new(
                Severity::Warning,
                "the shortest loop could not be found",
                error.why,
            ));
            None
        }
        Some(Err(NoShortest::NotBuried)) | None => None,
    };
    Some(GroundAnswer {
        label: contender.system.label.clone(),
        kind,
        undisturbed_c: column.iter().sum::<f64>() / column.len() as f64,
        g_function: buried.map_or_else(Vec::new, |buried| g_function(buried, last)),
        years: life
            .iter()
            .filter(|year| REPORTED.contains(&year.year) || year.year == last)
            .map(year_answer)
            .collect(),
        lowest_brine_c: life
            .iter()
            .map(|year| year.coldest.map(|hour| hour.entering_c))
            .collect(),
        buried: buried.map(|buried| buried_answer(machine, buried, life)),
        sizing,
        findings,
        others: Vec::new(),
    })
}

fn g_function(buried: &BuriedLoop, years: u32) -> Vec<GValue> {
    let at: Vec<_> = G_YEARS
        .iter()
        .copied()
        .filter(|at| *at <= f64::from(years))
        .collect();
    let hours: Vec<_> = at.iter().map(|years| years * 8760.0).collect();
    let unit = TAU * buried.design.soil.conductivity_w_per_m_k;
    at.iter()
        .zip(buried.design.wall_response(&hours))
        .map(|(&years, value)| GValue {
            years,
            value: value * unit,
        })
        .collect()
}

fn year_answer(year: &LoopYear) -> GroundYear {
    let finite = |c: f64| c.is_finite().then_some(c);
    GroundYear {
        year: year.year,
        lowest_brine_c: year.coldest.map(|hour| hour.entering_c),
        lowest_mean_c: year.coldest.and_then(|hour| finite(hour.mean_c)),
        lowest_leaving_c: year.coldest.and_then(|hour| finite(hour.leaving_c)),
        average_brine_c: finite(year.average_brine_c),
        bore_wall_c: year.average_wall_c,
        lowest_wall_c: year.lowest_wall_c,
        spf_h2: year.sums.spf_h2(),
        spf_h4: year.sums.spf_h4(),
        taken_kwh: year.sums.extracted_kwh,
        returned_kwh: year.sums.returned_kwh,
        source_pump_kwh: year.sums.source_side_kwh,
        electricity_kwh: year.sums.electricity_kwh(),
        backup_kwh: year.sums.backup_kwh + year.sums.immersion_kwh,
        hours_stopped: year.hours_stopped,
        hours_turned_down: year.hours_turned_down,
        hours_backup: year.hours_backup,
        hours_short: year.hours_short,
        hours_wall_frozen: year.hours_wall_frozen,
    }
}

fn buried_answer(machine: &MachineSystem, buried: &BuriedLoop, life: &[LoopYear]) -> BuriedAnswer {
    let greatest_kw = life
        .iter()
        .map(|year| year.greatest_draw_kw)
        .fold(0.0, f64::max);
    let (valid_from_h, error_k) = buried.early(greatest_kw);
    BuriedAnswer {
        length_m: buried.length_m(),
        resistance_m_k_per_w: buried.resistance_m_k_per_w(),
        brine: buried.circuit.brine.words(),
        brine_freezing_c: buried.circuit.brine.freezing_c(),
        flow_kg_per_s: buried.circuit.flow_kg_per_s,
        reynolds: buried.circuit.in_pipe.reynolds,
        pump_w: buried.circuit.pump_kw * 1000.0,
        rated_w_per_m: machine.machine.rated_draw_kw() * 1000.0 / buried.length_m(),
        line_source_valid_from_h: valid_from_h,
        line_source_error_k: error_k,
    }
}

fn sizing(machine: &MachineSystem, buried: &BuriedLoop, found: &ShortestLoop) -> SizingAnswer {
    let draw_kw = machine.machine.rated_draw_kw();
    let full_load_hours = found.year.sums.extracted_kwh / draw_kw;
    let soil = buried.design.soil;
    let rule = match buried.design.layout {
        Layout::Bores { .. } => Some(SOILS.iter().find(|class| class.soil() == soil).map_or_else(
            || RuleOfThumb::by_conductivity(soil.conductivity_w_per_m_k),
            |class| class.rule_of_thumb,
        )),
        Layout::Trenches { .. } => None,
    };
    let nearest = |rule: &RuleOfThumb| {
        let [low, high] = if full_load_hours < 2100.0 {
            rule.at_1800_h
        } else {
            rule.at_2400_h
        };
        // "Less than" has no least value, and so no greatest length.
        [
            draw_kw * 1000.0 / high,
            if low > 0.0 {
                draw_kw * 1000.0 / low
            } else {
                draw_kw * 1000.0 / high
            },
        ]
    };
    let coldest = found.year.coldest;
    let of = |part: fn(&crate::study::BrineHour) -> f64| coldest.as_ref().map_or(f64::NAN, part);
    SizingAnswer {
        floor_c: found.floor_c,
        year: found.year.year,
        length_m: found.length_m,
        entering_c: of(|hour| hour.entering_c),
        mean_c: of(|hour| hour.mean_c),
        leaving_c: of(|hour| hour.leaving_c),
        rated_w_per_m: draw_kw * 1000.0 / found.length_m,
        full_load_hours,
        rule_of_thumb_w_per_m: rule.map(|rule| [rule.at_1800_h, rule.at_2400_h]),
        rule_of_thumb_m: rule.as_ref().map(nearest),
    }
}

/// What a life tells: a loop too short, brine or soil that freezes.
fn life_findings(machine: &MachineSystem, life: &[LoopYear], label: &str) -> Vec<Finding> {
    let mut findings = Vec::new();
    let worst = life
        .iter()
        .max_by_key(|year| year.hours_stopped + year.hours_turned_down);
    if let Some(year) = worst.filter(|year| year.hours_stopped + year.hours_turned_down > 0) {
        findings.push(Finding::new(
            Severity::Caution,
            format!(
                "the machine of \"{label}\" stands in {} hours and is turned down in {} hours of year {}, or its source would fall below {:.1} °C; backup and immersion heater use {:.0} kWh in that year",
                year.hours_stopped,
                year.hours_turned_down,
                year.year,
                machine.machine.limits().lowest_source_c,
                year.sums.backup_kwh + year.sums.immersion_kwh
            ),
            "the loop is too short for this home and machine: a longer one, more insulation or a smaller machine is needed",
        ));
    }
    let Source::Buried(buried) = &machine.source else {
        return findings;
    };
    let lowest_leaving_c = life
        .iter()
        .filter_map(|year| year.coldest)
        .map(|hour| hour.leaving_c)
        .fold(f64::INFINITY, f64::min);
    let freezing_c = buried.circuit.brine.freezing_c();
    if lowest_leaving_c < freezing_c {
        findings.push(Finding::new(
            Severity::Caution,
            format!("the brine of \"{label}\" leaves the machine at {lowest_leaving_c:.1} °C and freezes at {freezing_c:.1} °C"),
            "ice can burst the exchanger: more antifreeze or a longer loop is needed",
        ));
    }
    let frozen = life
        .iter()
        .max_by_key(|year| year.hours_wall_frozen)
        .filter(|year| year.hours_wall_frozen > 0);
    let lowest_wall_c = life
        .iter()
        .filter_map(|year| year.lowest_wall_c)
        .fold(f64::INFINITY, f64::min);
    if let Some(year) = frozen {
        let what = match buried.design.layout {
            Layout::Bores { .. } => "grout and ground at the bore's wall",
            Layout::Trenches { .. } => "soil at the pipes",
        };
        findings.push(Finding::new(
            Severity::Warning,
            format!(
                "{what} of \"{label}\" is below 0 °C in {} hours of year {}",
                year.hours_wall_frozen, year.year
            ),
            format!("freezing lifts soil and can crack grout; the heat that freezing gives is not counted, so that the brine is shown too cold then, by at most {:.1} K", -lowest_wall_c),
        ));
    }
    findings
}
