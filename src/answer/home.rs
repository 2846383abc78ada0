//! What the estimate tells about the home: rooms, design point, hot water, running pattern, meter readings.

use serde::Serialize;

/// The room table's verdict for a system.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct RoomsAnswer {
    /// Flow temperature at the design point.
    pub flow_c: f64,
    /// The room that sets it; absent when the flow was chosen and the radiators follow.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub worst_room: Option<String>,
    /// Radiators at ΔT 50 K with which that room would not set it any more.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub remedy_kw: Option<f64>,
    /// The room that would set it then.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub next_room: Option<String>,
    /// Flow temperature then.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub next_flow_c: Option<f64>,
    /// Every room.
    pub rooms: Vec<RoomAnswer>,
    /// The verdict as a sentence.
    pub sentence: String,
}

/// One room at the design point.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct RoomAnswer {
    /// What it is called.
    pub name: String,
    /// Its temperature.
    pub temperature_c: f64,
    /// Heat it loses.
    pub heat_load_kw: f64,
    /// Its radiators at ΔT 50 K.
    pub radiator_kw: f64,
    /// Flow temperature they need.
    pub flow_c: f64,
    /// Radiators at ΔT 50 K it would need for the chosen flow; absent when its own are enough.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub needed_kw: Option<f64>,
}

impl RoomsAnswer {
    /// The verdict in words.
    pub fn words(&self) -> String {
        let at = |name: &str| self.rooms.iter().find(|room| room.name == name);
        if let Some(worst) = self.worst_room.as_deref().and_then(at) {
            let mut words = format!(
                "{} sets the flow: {:.0} °C for {:.2} kW from radiators of {:.2} kW at ΔT 50 K",
                worst.name, self.flow_c, worst.heat_load_kw, worst.radiator_kw
            );
            if let (Some(remedy), Some(next), Some(next_c)) =
                (self.remedy_kw, &self.next_room, self.next_flow_c)
            {
                words += &format!("; with {remedy:.2} kW there, {next} would set {next_c:.0} °C");
            }
            return words;
        }
        let grow: Vec<_> = self
            .rooms
            .iter()
            .filter_map(|room| {
                let needed = room.needed_kw?;
                Some(format!(
                    "{} {needed:.2} kW (now {:.2})",
                    room.name, room.radiator_kw
                ))
            })
            .collect();
        if grow.is_empty() {
            format!(
                "every radiator is large enough for a flow of {:.0} °C",
                self.flow_c
            )
        } else {
            format!(
                "a flow of {:.0} °C needs larger radiators in {} of {} rooms, at ΔT 50 K: {}",
                self.flow_c,
                grow.len(),
                self.rooms.len(),
                grow.join(", ")
            )
        }
    }
}

/// The design point of a system: is the load covered?
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct DesignAnswer {
    /// Outdoor temperature.
    pub outdoor_c: f64,
    /// Heat load, gains not counted.
    pub load_kw: f64,
    /// Flow to the emitters that carries it.
    pub flow_c: f64,
    /// Flow the heater has to make for it, above that by what a header mixes away.
    pub heater_flow_c: f64,
    /// Greatest heat of the heater there, without backup.
    pub output_kw: f64,
    /// Greatest heat of the emitters at their greatest permitted flow.
    pub emitters_kw: f64,
    /// What backup adds.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub backup_kw: Option<f64>,
    /// Output over load without backup, less 1: below 0 it is short.
    pub margin_percent: f64,
    /// What it is limited by: "emitters" at their greatest flow, the heater's "highest flow", or its "output".
    pub limited_by: String,
    /// Whether heater and backup together carry the load.
    pub covered: bool,
    /// Water flow of the emitters.
    pub water_l_per_min: f64,
    /// The same as a sentence.
    pub sentence: String,
}

/// What a hot-water store gives.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct StoreAnswer {
    /// Volume.
    pub volume_l: f64,
    /// Water at the drawn temperature that comes out of the full store.
    pub usable_l: f64,
    /// The drawn temperature.
    pub drawn_at_c: f64,
    /// From cold to the set point with the heater's output at the design point.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub reheat_hours: Option<f64>,
    /// Standing loss of a day at the set point.
    pub standing_loss_kwh_per_day: f64,
}

/// What a running pattern does, a mean year.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct PatternFigures {
    /// The pattern in words.
    pub pattern: String,
    /// Heat to the rooms.
    pub space_heat_kwh: f64,
    /// Electricity.
    pub electricity_kwh: f64,
    /// Fuel, where it is burnt.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub fuel_kwh: Option<f64>,
    /// Cost.
    pub cost: f64,
    /// Hours with backup or immersion heater.
    pub hours_backup: f64,
    /// Lowest indoor temperature.
    pub min_indoor_c: f64,
}

/// A system all day at its set point beside a set-back.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct PatternComparison {
    /// The system.
    pub label: String,
    /// All day at the set point.
    pub continuous: PatternFigures,
    /// With the set-back.
    pub set_back: PatternFigures,
    /// Heat to the rooms all day over that with set-back, less 1.
    pub more_heat_percent: f64,
}

/// What the meter readings say beside the survey and the model.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct MeteredAnswer {
    /// File of the readings.
    pub file: String,
    /// Heat-loss coefficient they show.
    pub heat_loss_w_per_k: f64,
    /// Its 95 % limits.
    pub heat_loss_95: [f64; 2],
    /// Outdoor temperature below which the home is heated.
    pub base_temperature_c: f64,
    /// Fuel of today's system in a mean year of the estimate's weather, by the readings' fit.
    pub metered_kwh: f64,
    /// Its 95 % limits.
    pub metered_95: [f64; 2],
    /// Fuel of today's system by this estimate.
    pub modelled_kwh: f64,
    /// Modelled over metered, less 1.
    pub difference_percent: f64,
    /// What the heat loss of every system was multiplied by so that today's fuel is what was metered; absent when it was not.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub scaled_by: Option<f64>,
    /// The same as a sentence.
    pub sentence: String,
}
