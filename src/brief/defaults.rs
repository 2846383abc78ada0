//! Every default in one cited table: it feeds the reading, `--show-defaults` and the list of assumptions.

/// A default: the field it stands for, its value as a brief would write it, and where it is from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Default {
    /// Field of the brief.
    pub field: &'static str,
    /// Value as a brief writes it.
    pub value: &'static str,
    /// Source, or that there is none.
    pub from: &'static str,
}

macro_rules! defaults {
    ($($name:ident = $field:literal, $value:literal, $from:literal;)*) => {
        $(pub(super) const $name: Default = Default { field: $field, value: $value, from: $from };)*
        /// Every default.
        pub const DEFAULTS: &[Default] = &[$($name),*];
    };
}

defaults! {
    INDOOR = "home.indoor", "20 °C", "common practice, no source";
    TIME_ZONE = "home.time_zone", "Etc/UTC", "common practice, no source";
    CONSTRUCTION = "home.construction", "medium",
        "165 kJ/K per m² of floor area, ISO 13790:2008 table 12 (from memory)";
    TIME_CONSTANT = "home.time_constant", "40 h",
        "common practice, no source; used when there is no floor area";
    INTERNAL_GAINS_PER_M2 = "home.internal_gains", "4 W",
        "per m² of floor area: common practice, no source";
    SOLAR_APERTURE_PER_M2 = "home.solar_aperture", "3 %",
        "of the floor area: common practice, no source";
    BASE_TEMPERATURE = "home.base_temperature", "15.5 °C",
        "UK degree-day convention; used when gains are not given and the weather has no radiation or the home no floor area";
    EMITTER_KIND = "home.emitters.kind", "radiators", "common practice, no source";
    GREATEST_FLOW_ABOVE_DESIGN = "home.emitters.greatest_flow", "10 K",
        "above the design flow temperature: common practice, no source";
    HOT_WATER_DAILY = "home.hot_water.daily_energy", "4 kWh",
        "typical UK use (published field figure, secondary source)";
    DRAWN_AT = "home.hot_water.drawn_at", "40 °C", "convention of Regulation (EU) No 811/2013 draws";
    COLD_WATER = "home.hot_water.cold", "10 °C", "common practice, no source; used when the weather is no whole year";
    USABLE = "home.hot_water.usable", "80 %", "common practice, no source";
    HYGIENE_TEMPERATURE = "home.hot_water.hygiene_temperature", "60 °C", "UK HSE guidance for stored hot water";
    HYGIENE_DAY = "home.hot_water.hygiene_day", "sunday", "common practice, no source";
    SET_BACK = "home.pattern.set_back", "16 °C", "common practice, no source";
    WARM_UP = "home.pattern.warm_up", "in time", "common practice, no source";
    ROOM_SPREAD = "home.emitters.spread", "8 K", "beside a room table: EN 14511 spread at 55 °C, common practice, no source";
    BILLS_EFFICIENCY = "home.bills.efficiency", "82 % gross",
        "homes lie between 75 and 85 % gross (published field figures, secondary source)";
    BILLS_EFFICIENCY_WITHIN = "home.bills.efficiency_within", "5 %", "the same published range";
    HOT_WATER_SHARE = "home.bills.hot_water_share", "85 %", "common practice, no source: the rest is cooking";
    HOT_WATER_SHARE_WITHIN = "home.bills.hot_water_share_within", "15 %", "common practice, no source";
    INDOOR_WITHIN = "home.bills.indoor_within", "1.5 K",
        "set point and internal gains, which readings do not tell apart: common practice, no source";
    BASE_WITHIN = "home.bills.indoor_within", "4.5 K",
        "beside a base temperature: 6935 UK homes have a standard deviation of 2.3 K (doi 10.5334/bc.670)";
    SUN_WITHIN = "home.bills.sun_within", "50 %", "windows, their side and shade: common practice, no source";
    VOLUME_CORRECTION = "home.bills.volume_correction", "1.02264", "British gas bills";
    STORE = "home.hot_water.store", "200 L", "common practice, no source";
    SET_POINT = "home.hot_water.setpoint", "50 °C", "common practice, no source";
    HYSTERESIS = "home.hot_water.hysteresis", "5 K", "common practice, no source";
    RATED_AT_AIR = "choice.rated_at", "7 °C / 35 °C", "EN 14511 standard rating condition";
    RATED_AT_GROUND = "choice.rated_at", "0 °C / 35 °C", "EN 14511 standard rating condition";
    BACKUP = "choice.backup", "0 kW", "none unless it is given";
    IMMERSION = "choice.immersion", "3 kW", "common practice, no source";
    CIRCULATION_PUMP = "choice.circulation_pump", "25 W", "common practice, no source";
    MACHINE_FIELD_FACTOR = "choice.field_factor", "85 %",
        "lab-to-field factor of Ruhnau et al. 2019, doi 10.1038/s41597-019-0199-y";
    BOILER_FIELD_FACTOR = "today.field_factor", "92 %",
        "published field efficiency 82.5 to 85.3 % gross over the ideal flue-loss curve (from memory)";
    LOOP_DEPTH = "choice.loop_depth", "1.2 m", "common practice, no source";
    SOIL_DIFFUSIVITY = "choice.soil_diffusivity", "5e-7 m²/s", "moist loam: common practice, no source";
    GRADIENT = "choice.ground.gradient", "30 K/km", "common practice, no source";
    BURIED = "choice.bore.buried", "1 m", "common practice, no source";
    BORE_RADIUS = "choice.bore.radius", "65 mm", "common practice, no source";
    GROUT = "choice.borehole.grout", "1.5 W/m/K", "within the published range of 0.9 to 1.8 W/m/K";
    PIPE_OUTSIDE = "choice.pipe.outside", "40 mm", "common practice, no source";
    PIPE_WALL = "choice.pipe.wall", "3.7 mm", "PE 100, SDR 11: common practice, no source";
    PIPE_CONDUCTIVITY = "choice.pipe.conductivity", "0.42 W/m/K", "polyethylene: common practice, no source";
    TRENCH_SPACING = "choice.trench.spacing", "0.5 m", "common practice, no source";
    ANTIFREEZE = "choice.brine.fluid", "ethylene glycol", "common practice, no source";
    ANTIFREEZE_SHARE = "choice.brine.share", "30 %", "common practice, no source";
    BRINE_SPREAD = "choice.brine.flow", "3 K", "brine cools by this in the machine at its rating point (EN 14511: 0 to -3 °C)";
    PUMP_EFFICIENCY = "choice.brine.pump_efficiency", "30 %", "from the plug to the water: common practice, no source";
    APPROACH = "choice.well.approach", "0 K", "water through the machine itself unless an exchanger is given";
    WELL_PUMP_EFFICIENCY = "choice.well.pump_efficiency", "40 %", "from the plug to the water: common practice, no source";
    BOILER_OUTPUT = "today.output", "24 kW", "common practice, no source";
    PELLET_EFFICIENCY = "today.efficiency", "75 % gross",
        "of a pellet boiler: default of SAP table 4a for automatic feed (from memory)";
    HOUSEHOLD_SHAPE = "household.shape", "least at night, most at 18:00",
        "common practice, no source";
    HYBRID_FUEL = "choice.boiler.fuel", "gas", "common practice, no source";
    ROOMS_ABOVE = "choice.shifting.rooms_above", "1 K", "a choice of ours: hardly noticed";
    ROOMS_BELOW = "choice.shifting.rooms_below", "0 K", "so that a saving is not bought with cold rooms";
    STORE_ABOVE = "choice.shifting.store_above", "5 K", "common practice, no source";
    STORE_BELOW = "choice.shifting.store_below", "0 K", "so that a saving is not bought with cool water";
    LEAKAGE = "choice.leakage", "1 %", "of the charge a year: common practice, no source";
    LEAKAGE_AT_END = "choice.leakage_at_end", "10 %", "of the charge: common practice, no source";
    LEAKAGE_LIFE = "years over which the leakage at the end is spread", "15 years", "common practice, no source";
    COMPARED_YEARS = "lifetime.years", "20 years", "common practice, no source";
    DISCOUNT_RATE = "lifetime.discount_rate", "3.5 %",
        "real social rate of the UK Treasury's Green Book (from memory)";
    ELECTRICITY_CHANGE = "lifetime.electricity_change", "0 %", "no forecast: prices stay as they are above inflation";
    GAS_CHANGE = "lifetime.gas_change", "0 %", "no forecast: prices stay as they are above inflation";
    ELECTRICITY_CARBON_CHANGE = "lifetime.electricity_carbon_change", "0 %",
        "no forecast: carbon stays as it is";
    MACHINE_LIFE = "choice.outlay.life", "20 years", "common practice, no source";
    BOILER_LIFE = "outlay.life of a boiler", "15 years", "common practice, no source";
    LOOP_LIFE = "outlay.lives of a loop, bores or trenches", "50 years", "common practice, no source";
    EMITTERS_LIFE = "outlay.lives of radiators, emitters or floors", "30 years", "common practice, no source";
    STORE_LIFE = "outlay.lives of a store or cylinder", "25 years", "common practice, no source";
    INSTALLATION_LIFE = "outlay.lives of installation or work", "50 years", "it is done once: common practice, no source";
    DUE_IN = "today.outlay.due_in", "8 years", "about half a boiler's life: common practice, no source";
    BACKUP_BAND = "backup starts below the set point by", "0.5 K", "common practice, no source";
}
