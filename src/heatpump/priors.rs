//! What is believed of a machine before its datasheet is read: the centre, width and bounds of every parameter.
//!
//! With one tested point the machine is mostly these; with twelve they only steady what the points leave open. A width is a
//! standard deviation; factors are in their logarithm.

use std::sync::Arc;

use super::compressor::{Compressor, Speeds};
use super::exchanger::Exchanger;
use super::frost::Frost;
use super::machine::Machine;
use super::sheet::{Drive, Sheet, SourceKind};
use crate::refrigerant::CycleTable;

/// One parameter: what it is and what is believed of it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Prior {
    /// What it is, in words.
    pub name: &'static str,
    /// Unit, empty for a plain number.
    pub unit: &'static str,
    /// Whether width and search are in the logarithm.
    pub factor: bool,
    /// Centre.
    pub centre: f64,
    /// Standard deviation, in the logarithm for a factor; 0 for a parameter that is not fitted.
    pub width: f64,
    /// Lowest value.
    pub low: f64,
    /// Highest value.
    pub high: f64,
    /// Where the belief comes from.
    pub from: &'static str,
}

impl Prior {
    /// The value in the space that is searched.
    pub fn inward(&self, value: f64) -> f64 {
        if self.factor { value.ln() } else { value }
    }

    /// The value from the space that is searched.
    pub fn outward(&self, searched: f64) -> f64 {
        if self.factor {
            searched.exp()
        } else {
            searched
        }
    }
}

/// Number of parameters.
pub const COUNT: usize = 16;

/// The parameters in their order.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
#[repr(usize)]
pub(super) enum Parameter {
    Swept,
    PeakEfficiency,
    PeakRatio,
    Falloff,
    SpeedPenalty,
    Drive,
    Evaporator,
    Condenser,
    SourcePower,
    Frost,
    SpeedCold,
    SpeedMild,
    SpeedCool,
    SpeedWarm,
    SpeedFlow,
    SpeedLeast,
}

// Where beliefs come from.
const PRACTICE: &str = "common practice, no source";
const EFFICIENCY: &str = "usual 0.60–0.72 at ratio 3–4 [from memory]";
const RATIO: &str = "scroll tests 2.5–2.6 (Cuevas and Lebrun 2010)";
const FALLOFF: &str = "usual 0.5–0.6 at ratio 6–8 [from memory]";
const DRIVE: &str = "usual 0.95–0.98 [from memory]";
const COIL: &str = "usual 7–12 K with superheat [from memory]";
const BRINE: &str = "usual 4–7 K with superheat [from memory]";
const CONDENSER: &str = "usual 1–4 K [from memory]";
const FASTER: &str = "faster in the cold; how much: common practice, no source";
const STEADY: &str = "hardly changes with brine; common practice, no source";
const DEFROST: &str = "9 % of COP at 35 °F, US test procedure [from memory]";

/// The priors of a sheet's kind of machine; `nominal_kw` is the output that scales its exchangers and fan.
pub(super) fn priors(sheet: &Sheet, nominal_kw: f64, swept_m3_per_h: f64) -> [Prior; COUNT] {
    let air = sheet.source == SourceKind::Air;
    let variable = sheet.drive == Drive::Variable;
    let plain = |name, unit, centre, width, (low, high), from| Prior {
        name,
        unit,
        factor: false,
        centre,
        width,
        low,
        high,
        from,
    };
    let factor = |name, unit, centre, width, (low, high), from| Prior {
        factor: true,
        ..plain(name, unit, centre, width, (low, high), from)
    };
    let fixed = |prior: Prior, is_fixed: bool, value: f64| {
        if is_fixed {
            Prior {
                centre: value,
                width: 0.0,
                ..prior
            }
        } else {
            prior
        }
    };
    // A controller lets an air machine turn faster in the cold; a ground machine sees little change.
    let speed = |name, in_air: f64| {
        let (centre, width, from) = if air {
            (in_air, 0.10, FASTER)
        } else {
            (1.0, 0.04, STEADY)
        };
        fixed(
            factor(name, "", centre, width, (0.6, 1.6), from),
            !variable,
            1.0,
        )
    };
    let source_power = factor(
        "fan or pump in the tested points",
        "W",
        nominal_kw * if air { 12.0 } else { 4.0 },
        0.4,
        (nominal_kw, nominal_kw * 40.0),
        PRACTICE,
    );
    [
        factor(
            "volume swept at speed 1",
            "m³/h",
            swept_m3_per_h,
            0.5,
            (swept_m3_per_h / 5.0, swept_m3_per_h * 5.0),
            "the sheet's own output",
        ),
        plain(
            "peak isentropic efficiency",
            "",
            0.67,
            0.05,
            (0.45, 0.80),
            EFFICIENCY,
        ),
        factor(
            "pressure ratio at the peak",
            "",
            2.8,
            0.2,
            (1.8, 4.5),
            RATIO,
        ),
        factor(
            "falloff away from that ratio",
            "",
            0.28,
            0.4,
            (0.05, 1.0),
            FALLOFF,
        ),
        fixed(
            plain(
                "penalty away from the best speed",
                "",
                0.20,
                0.12,
                (0.0, 0.8),
                PRACTICE,
            ),
            !variable,
            0.0,
        ),
        // A fixed-speed hermetic motor is cooled by the refrigerant: only an inverter loses to the surroundings.
        fixed(
            plain("drive efficiency", "", 0.96, 0.01, (0.92, 0.99), DRIVE),
            !variable,
            1.0,
        ),
        factor(
            "evaporator approach above superheat",
            "K",
            if air { 4.0 } else { 1.5 },
            0.4,
            (0.3, 12.0),
            if air { COIL } else { BRINE },
        ),
        factor("condenser approach", "K", 2.3, 0.4, (0.3, 8.0), CONDENSER),
        fixed(
            source_power,
            sheet.source_power_kw.is_some(),
            sheet.source_power_kw.map_or(0.0, |kw| kw * 1000.0),
        ),
        fixed(
            plain("frost strength", "", 0.30, 0.08, (0.0, 0.8), DEFROST),
            !sheet.points.iter().any(|point| point.defrost_included),
            if air { 0.30 } else { 0.0 },
        ),
        speed("speed at −15 °C over that at −7 °C", 1.03),
        speed("speed at −7 °C over that at 2 °C", 1.10),
        speed("speed at 2 °C over that at 7 °C", 1.06),
        speed("speed at 15 °C over that at 7 °C", 0.90),
        fixed(
            plain(
                "speed rise with flow temperature",
                "1/K",
                0.0,
                0.003,
                (-0.012, 0.012),
                PRACTICE,
            ),
            !variable,
            0.0,
        ),
        fixed(
            factor("least speed", "", 0.30, 0.35, (0.10, 0.90), PRACTICE),
            !variable,
            1.0,
        ),
    ]
}

/// The machine of a set of parameter values.
pub(super) fn machine_of(
    sheet: &Sheet,
    table: &Arc<CycleTable>,
    nominal_kw: f64,
    values: &[f64; COUNT],
) -> (Machine, Frost) {
    let at = |parameter: Parameter| values[parameter as usize];
    let speeds = match sheet.drive {
        Drive::Fixed => Speeds::Fixed,
        Drive::Variable => {
            let cool = at(Parameter::SpeedCool);
            let mild = cool * at(Parameter::SpeedMild);
            Speeds::Variable {
                least: at(Parameter::SpeedLeast),
                greatest: [
                    mild * at(Parameter::SpeedCold),
                    mild,
                    cool,
                    1.0,
                    at(Parameter::SpeedWarm),
                ],
                flow_slope: at(Parameter::SpeedFlow),
            }
        }
    };
    let machine = Machine {
        table: table.clone(),
        compressor: Compressor {
            swept_m3_per_s: at(Parameter::Swept) / 3600.0,
            peak_efficiency: at(Parameter::PeakEfficiency),
            peak_ratio: at(Parameter::PeakRatio),
            falloff: at(Parameter::Falloff),
            speed_penalty: at(Parameter::SpeedPenalty),
            drive_efficiency: at(Parameter::Drive),
        },
        evaporator: Exchanger {
            floor_k: sheet.superheat_k,
            k_per_kw: at(Parameter::Evaporator) / (EXTRACTED_SHARE * nominal_kw),
        },
        condenser: Exchanger {
            floor_k: 0.0,
            k_per_kw: at(Parameter::Condenser) / nominal_kw,
        },
        source_power_kw: at(Parameter::SourcePower) / 1000.0,
        speeds,
    };
    let frost = Frost {
        strength: at(Parameter::Frost),
    };
    (machine, frost)
}

/// Share of the nominal output that comes from the source, to give the evaporator's approach at nominal load.
const EXTRACTED_SHARE: f64 = 0.78;
