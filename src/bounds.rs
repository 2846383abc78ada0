//! One table of physical limits, with the labels used in messages.
//!
//! A bound is what a thing can physically be, wide enough never to refuse a real home and narrow enough to
//! catch a slipped unit. Values are common practice, no source, unless a source stands beside them.

/// A closed interval with the name of what it limits.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bound {
    /// What is limited, as messages call it.
    pub label: &'static str,
    /// Least value.
    pub low: f64,
    /// Greatest value.
    pub high: f64,
    /// The unit of both.
    pub unit: &'static str,
}

impl Bound {
    /// Whether the value lies inside; never for a value that is not a number.
    pub fn holds(&self, value: f64) -> bool {
        (self.low..=self.high).contains(&value)
    }

    /// The bound in words: `outdoor air from -60 to 55 °C`.
    pub fn words(&self) -> String {
        format!(
            "{} from {} to {} {}",
            self.label, self.low, self.high, self.unit
        )
        .trim_end()
        .to_owned()
    }
}

macro_rules! bounds {
    ($($(#[$doc:meta])* $name:ident = $label:literal, $low:literal ..= $high:literal, $unit:literal;)*) => {
        $($(#[$doc])* pub const $name: Bound = Bound { label: $label, low: $low, high: $high, unit: $unit };)*
        /// Every bound, for documentation and tests.
        pub const ALL: &[Bound] = &[$($name),*];
    };
}

bounds! {
    /// Hourly outdoor air.
    OUTDOOR_C = "outdoor air", -60.0 ..= 55.0, "°C";
    /// Relative humidity.
    RELATIVE_HUMIDITY_PERCENT = "relative humidity", 0.0 ..= 100.0, "%";
    /// Global horizontal irradiance; above the solar constant only by cloud-edge enhancement.
    GLOBAL_W_PER_M2 = "global radiation", 0.0 ..= 1600.0, "W/m²";
    /// Indoor set point.
    INDOOR_C = "indoor temperature", 5.0 ..= 30.0, "°C";
    /// Base temperature of the degree-hour sum.
    BASE_C = "base temperature", 5.0 ..= 25.0, "°C";
    /// Whole-home heat-loss coefficient.
    HEAT_LOSS_W_PER_K = "heat-loss coefficient", 10.0 ..= 3000.0, "W/K";
    /// Design heat load of one home.
    DESIGN_LOAD_KW = "design heat load", 0.3 ..= 100.0, "kW";
    /// Heated floor area.
    FLOOR_AREA_M2 = "floor area", 10.0 ..= 2000.0, "m²";
    /// Constant internal gains.
    GAINS_KW = "internal gains", 0.0 ..= 5.0, "kW";
    /// Effective south-facing solar aperture of a home.
    SOLAR_APERTURE_M2 = "effective solar aperture", 0.0 ..= 100.0, "m²";
    /// Time constant of a building.
    TIME_CONSTANT_H = "building time constant", 0.0 ..= 1000.0, "h";
    /// Emitter flow temperature.
    FLOW_C = "flow temperature", 20.0 ..= 85.0, "°C";
    /// Hot-water draw in a day.
    HOT_WATER_L = "daily hot water", 0.0 ..= 2000.0, "L";
    /// Hot-water energy in a day.
    HOT_WATER_KWH = "daily hot-water energy", 0.0 ..= 100.0, "kWh";
    /// Hot-water store volume.
    STORE_L = "hot-water store", 10.0 ..= 2000.0, "L";
    /// Hot-water set point and draw temperature.
    HOT_WATER_C = "hot-water temperature", 30.0 ..= 80.0, "°C";
    /// Fall of a store before it is heated again.
    HYSTERESIS_K = "store hysteresis", 1.0 ..= 30.0, "K";
    /// Cold-water temperature.
    COLD_WATER_C = "cold-water temperature", 0.0 ..= 30.0, "°C";
    /// Air changes of a home.
    AIR_CHANGES_PER_H = "air changes", 0.0 ..= 10.0, "1/h";
    /// Heated volume of a home.
    VOLUME_M3 = "heated volume", 20.0 ..= 10000.0, "m³";
    /// One part of a home's heat loss.
    PART_LOSS_W_PER_K = "part of the heat loss", 0.0 ..= 3000.0, "W/K";
    /// Heat-loss coefficient of one room.
    ROOM_LOSS_W_PER_K = "heat loss of a room", 0.0 ..= 500.0, "W/K";
    /// Design heat load of one room.
    ROOM_LOAD_KW = "heat load of a room", 0.0 ..= 20.0, "kW";
    /// Radiators of one room at ΔT 50 K.
    RADIATOR_KW = "radiator output at ΔT 50 K", 0.05 ..= 20.0, "kW";
    /// Flow minus return.
    SPREAD_K = "flow minus return", 1.0 ..= 30.0, "K";
    /// What a buffer or low-loss header mixes away.
    HEADER_K = "rise by a buffer or header", 0.0 ..= 15.0, "K";
    /// Factor from a metered volume of gas to the conditions of its calorific value.
    VOLUME_CORRECTION = "volume correction", 0.8 ..= 1.2, "";
    /// Heat-loss coefficient per square metre of floor: from a passive house to an uninsulated cottage.
    HEAT_LOSS_W_PER_K_M2 = "heat loss per floor area", 0.3 ..= 8.0, "W/K per m²";
    /// Coefficient of performance at a rating point.
    COP = "coefficient of performance", 1.0 ..= 12.0, "";
    /// Rated output of a machine or a backup heater.
    OUTPUT_KW = "heat output", 0.1 ..= 100.0, "kW";
    /// Output of a backup or immersion heater; 0 when there is none.
    HEATER_KW = "electric heater", 0.0 ..= 50.0, "kW";
    /// Electric power of a pump, a fan or controls.
    AUXILIARY_KW = "auxiliary power", 0.0 ..= 2.0, "kW";
    /// Boiler efficiency on gross calorific value: a perfect condensing boiler cannot exceed 1.
    GROSS_EFFICIENCY = "efficiency on gross calorific value", 0.3 ..= 1.0, "";
    /// How far the stated set point and gains may be from the truth.
    INDOOR_WITHIN_K = "doubt about the set point", 0.0 ..= 10.0, "K";
    /// A share of something.
    SHARE = "share", 0.0 ..= 1.0, "";
    /// Undisturbed ground.
    GROUND_C = "undisturbed ground", -10.0 ..= 30.0, "°C";
    /// Depth of a buried loop.
    TRENCH_DEPTH_M = "trench depth", 0.3 ..= 5.0, "m";
    /// Thermal diffusivity of soil.
    DIFFUSIVITY_M2_PER_S = "thermal diffusivity", 1.0e-7 ..= 3.0e-6, "m²/s";
    /// How far a loop's brine falls per kilowatt drawn.
    LOOP_K_PER_KW = "loop resistance", 0.05 ..= 10.0, "K/kW";
    /// How far shifting may move a temperature.
    SHIFT_K = "latitude of shifting", 0.0 ..= 20.0, "K";
    /// Outdoor temperature at which a hybrid changes over.
    CHANGE_OVER_C = "change-over temperature", -30.0 ..= 20.0, "°C";
    /// Electricity of a household in a year.
    HOUSEHOLD_KWH = "household electricity in a year", 0.0 ..= 100000.0, "kWh";
    /// Electricity used or made by a home in an hour.
    HOURLY_KWH = "electricity in an hour", 0.0 ..= 100.0, "kWh";
    /// Refrigerant in a machine.
    REFRIGERANT_KG = "refrigerant charge", 0.05 ..= 20.0, "kg";
    /// Coordinate of a bore or a trench.
    GROUND_PLACE_M = "place on the plot", -1000.0 ..= 1000.0, "m";
    /// Length of a bore that takes heat.
    BORE_DEPTH_M = "bore depth", 5.0 ..= 400.0, "m";
    /// Depth of the upper end of a bore.
    BORE_BURIED_M = "depth of the bore's upper end", 0.0 ..= 20.0, "m";
    /// Radius of a bore.
    BORE_RADIUS_M = "bore radius", 0.03 ..= 0.3, "m";
    /// Distance between the middles of bores; nearer ones are one bore.
    BORE_DISTANCE_M = "distance between bores", 1.0 ..= 2000.0, "m";
    /// Resistance from the wall of a bore to the brine.
    BOREHOLE_M_K_PER_W = "borehole resistance", 0.01 ..= 0.6, "m K/W";
    /// Distance between the middles of the two legs of a U-tube.
    LEG_DISTANCE_M = "distance of the legs", 0.02 ..= 0.5, "m";
    /// Conductivity of ground.
    GROUND_W_PER_M_K = "conductivity of the ground", 0.2 ..= 7.0, "W/m/K";
    /// Conductivity of grout.
    GROUT_W_PER_M_K = "conductivity of the grout", 0.3 ..= 4.0, "W/m/K";
    /// Outer diameter of a loop's pipe.
    PIPE_OUTSIDE_M = "outer diameter of the pipe", 0.016 ..= 0.09, "m";
    /// Wall of a loop's pipe.
    PIPE_WALL_M = "wall of the pipe", 0.001 ..= 0.012, "m";
    /// Conductivity of a pipe's wall.
    PIPE_W_PER_M_K = "conductivity of the pipe", 0.1 ..= 2.0, "W/m/K";
    /// Length of a trench.
    TRENCH_LENGTH_M = "trench length", 5.0 ..= 2000.0, "m";
    /// Distance of pipes in the ground; nearer ones are one pipe.
    PIPE_DISTANCE_M = "distance between pipes", 0.1 ..= 20.0, "m";
    /// Pipes side by side in a trench.
    TRENCH_PIPES = "pipes side by side", 1.0 ..= 12.0, "";
    /// Swing of the surface's temperature through the year, half from top to bottom.
    SURFACE_SWING_K = "yearly swing of the surface", 0.0 ..= 30.0, "K";
    /// A day of the year.
    DAY_OF_YEAR = "day of the year", 1.0 ..= 366.0, "";
    /// Geothermal gradient.
    GRADIENT_K_PER_M = "geothermal gradient", -0.02 ..= 0.1, "K/m";
    /// Heat put back into the ground in a year.
    RECHARGE_KWH = "heat put back in a year", 0.0 ..= 100000.0, "kWh";
    /// Flow of brine or well water.
    SOURCE_FLOW_L_PER_S = "flow", 0.01 ..= 20.0, "L/s";
    /// Efficiency of a pump from the plug to the water.
    PUMP_EFFICIENCY = "efficiency of the pump", 0.05 ..= 0.9, "";
    /// Share of antifreeze in brine, by mass: the range of the property polynomials.
    ANTIFREEZE_SHARE = "share of antifreeze by mass", 0.0 ..= 0.6, "";
    /// Well or surface water.
    SOURCE_WATER_C = "well or surface water", 0.0 ..= 30.0, "°C";
    /// Difference an exchanger needs.
    APPROACH_K = "approach of the exchanger", 0.0 ..= 10.0, "K";
    /// Head of a well pump.
    HEAD_M = "pump head", 0.0 ..= 200.0, "m";
    /// Year of a buried loop's life.
    LOOP_YEAR = "year of the loop's life", 1.0 ..= 60.0, "";
    /// Carbon factor of any fuel or electricity.
    CARBON_KG_PER_KWH = "carbon factor", 0.0 ..= 2.0, "kg CO2e/kWh";
    /// Years over which systems are compared: up to twice the life of a borehole.
    COMPARED_YEARS = "years compared", 1.0 ..= 100.0, "years";
    /// Life of a part.
    PART_LIFE_YEARS = "life of a part", 1.0 ..= 100.0, "years";
    /// Years until a part must be replaced.
    DUE_IN_YEARS = "years until replacement", 0.0 ..= 100.0, "years";
    /// Real discount rate.
    DISCOUNT_RATE = "discount rate, as a fraction,", -0.5 ..= 0.5, "";
    /// Yearly change of a price or a carbon factor.
    YEARLY_CHANGE = "yearly change, as a fraction,", -0.5 ..= 0.5, "";
    /// A later price or carbon factor as a multiple of today's.
    PATH_MULTIPLE = "multiple of today's", 0.0 ..= 100.0, "";
    /// Allowance from laboratory to home, as a multiplier of the laboratory figure.
    FIELD_FACTOR = "field factor", 0.5 ..= 1.0, "";
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_bound_is_an_interval_with_a_name() {
        for bound in ALL {
            assert!(bound.low < bound.high, "{}", bound.label);
            assert!(
                !bound.holds(f64::NAN) && !bound.holds(f64::INFINITY),
                "{}",
                bound.label
            );
            assert!(
                bound.holds(bound.low) && bound.holds(bound.high),
                "{}",
                bound.label
            );
        }
    }
}
