//! The names of assumptions as a family can read them. `result.json` keeps the fields of the brief.

/// Field of the brief, and what it is called in the report.
#[rustfmt::skip]
const NAMES: &[(&str, &str)] = &[
    ("home.indoor", "temperature of the rooms"),
    ("home.time_zone", "time zone"),
    ("home.construction", "weight of the building (how much heat it stores)"),
    ("home.time_constant", "how slowly the home cools (time constant)"),
    ("home.internal_gains", "heat of people and appliances"),
    ("home.solar_aperture", "window area that lets the sun in, as if it were all glass"),
    ("home.base_temperature", "outdoor temperature above which no heat is needed"),
    ("home.emitters.kind", "emitters"),
    ("home.emitters.greatest_flow", "how far the flow may rise above its design temperature"),
    ("home.emitters.spread", "flow less return"),
    ("emitters.return", "return of the emitters"),
    ("emitters.spread", "flow less return"),
    ("home.hot_water.daily_energy", "hot water at the taps, a day"),
    ("home.hot_water.drawn_at", "hot water is used at"),
    ("home.hot_water.cold", "cold water comes in at"),
    ("home.hot_water.usable", "share of the store that can be drawn hot"),
    ("home.hot_water.hygiene_temperature", "hygiene cycle heats the store to"),
    ("home.hot_water.hygiene_day", "day of the hygiene cycle"),
    ("home.hot_water.store", "hot-water store"),
    ("home.hot_water.setpoint", "store is kept at"),
    ("home.hot_water.hysteresis", "store cools by this before it is heated again"),
    ("home.pattern", "when the rooms are heated"),
    ("home.pattern.set_back", "rooms between heated hours"),
    ("home.pattern.warm_up", "warming up after a set-back"),
    ("home.bills.efficiency", "efficiency of the heater behind the bills"),
    ("home.bills.efficiency_within", "that efficiency is known within"),
    ("home.bills.hot_water_share", "share of the base load that is hot water"),
    ("home.bills.hot_water_share_within", "that share is known within"),
    ("home.bills.volume_correction", "correction of the metered gas volume"),
    ("choice.rated_at", "condition of the rated output"),
    ("choice.backup", "backup heater"),
    ("choice.immersion", "immersion heater in the store"),
    ("choice.circulation_pump", "power of the heating pump"),
    ("choice.field_factor", "share of laboratory performance that the heat pump keeps in a home"),
    ("today.field_factor", "share of laboratory efficiency that a boiler keeps in a home"),
    ("choice.loop_depth", "depth of the loop"),
    ("choice.soil_diffusivity", "how fast temperature travels in the soil (thermal diffusivity)"),
    ("choice.ground.gradient", "warming of the ground with depth"),
    ("choice.bore.buried", "depth of the top of the bore"),
    ("choice.bore.radius", "radius of the bore"),
    ("choice.borehole.grout", "conductivity of the grout"),
    ("choice.pipe.outside", "outer diameter of the pipe"),
    ("choice.pipe.wall", "wall of the pipe"),
    ("choice.pipe.conductivity", "conductivity of the pipe"),
    ("choice.trench.spacing", "distance of the pipes in the trench"),
    ("choice.brine.fluid", "antifreeze"),
    ("choice.brine.share", "share of antifreeze in the brine"),
    ("choice.brine.flow", "brine is cooled by"),
    ("choice.brine.pump_efficiency", "efficiency of the brine pump"),
    ("choice.well.approach", "loss across the exchanger of the well"),
    ("choice.well.pump_efficiency", "efficiency of the well pump"),
    ("today.output", "output of the boiler"),
    ("today.efficiency", "efficiency of the boiler"),
    ("household.shape", "when the household uses electricity"),
    ("choice.boiler.fuel", "fuel of the boiler beside the heat pump"),
    ("choice.shifting.rooms_above", "shifting may warm the rooms by"),
    ("choice.shifting.rooms_below", "shifting may cool the rooms by"),
    ("choice.shifting.store_above", "shifting may heat the store above its set point by"),
    ("choice.shifting.store_below", "shifting may let the store cool below its set point by"),
    ("choice.leakage", "refrigerant that leaks in a year"),
    ("choice.leakage_at_end", "refrigerant that is lost when the machine is scrapped"),
    ("lifetime.years", "years that are compared"),
    ("lifetime.discount_rate", "real interest (discount rate)"),
    ("lifetime.electricity_change", "electricity price above inflation, a year"),
    ("lifetime.gas_change", "gas price above inflation, a year"),
    ("lifetime.electricity_carbon_change", "change of the carbon of electricity, a year"),
    ("choice.outlay.life", "life of a heat pump"),
    ("outlay.life of a boiler", "life of a boiler"),
    ("outlay.lives of a loop, bores or trenches", "life of a loop, bores or trenches"),
    ("outlay.lives of radiators, emitters or floors", "life of radiators, emitters or floors"),
    ("outlay.lives of a store or cylinder", "life of a hot-water store"),
    ("outlay.lives of installation or work", "life of pipes and work"),
    ("today.outlay.due_in", "today’s system must be bought again in"),
    ("loop", "model of the loop"),
];

/// Names of a machine sheet's own figures.
const OF_A_SHEET: &[(&str, &str)] = &[
    ("superheat", "superheat of the refrigerant"),
    ("subcooling", "subcooling of the refrigerant"),
    (
        "cycling_coefficient",
        "cycling coefficient (what starting and stopping loses)",
    ),
];

/// What an assumption is called; a name that no table holds without the marks of a field.
pub(super) fn plain_name(name: &str) -> String {
    if let Some((_, words)) = NAMES.iter().find(|(field, _)| *field == name) {
        return (*words).to_owned();
    }
    if let Some((machine, figure)) = name.rsplit_once(": ") {
        let found = OF_A_SHEET.iter().find(|(field, _)| *field == figure);
        let figure = found.map_or(figure, |(_, words)| words);
        return format!("{machine}: {figure}").replace('_', " ");
    }
    name.replace(['.', '_'], " ")
}

/// A value without the exponent of a programming language: `5e-7 m²/s` as `5 × 10⁻⁷ m²/s`.
pub(super) fn plain_value(value: &str) -> String {
    let mut words: Vec<String> = Vec::new();
    for word in value.split(' ') {
        let exponent = word
            .split_once('e')
            .filter(|(number, _)| number.parse::<f64>().is_ok())
            .and_then(|(number, power)| Some((number, power.parse::<i32>().ok()?)));
        words.push(match exponent {
            Some((number, power)) => format!("{number}\u{a0}×\u{a0}10{}", raised(power)),
            None => word.to_owned(),
        });
    }
    words.join(" ").replace("CO2", "CO₂")
}

fn raised(power: i32) -> String {
    let digits = power.to_string();
    let raised = digits.chars().map(|c| match c {
        '-' => '⁻',
        '1' => '¹',
        '2' => '²',
        '3' => '³',
        digit => char::from_u32(0x2070 + digit.to_digit(10).unwrap_or(0)).unwrap_or(digit),
    });
    raised.collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_and_values_can_be_read() {
        assert_eq!(plain_name("home.indoor"), "temperature of the rooms");
        assert_eq!(
            plain_name("Sheet: superheat"),
            "Sheet: superheat of the refrigerant"
        );
        assert_eq!(plain_name("a.new_field"), "a new field");
        assert_eq!(plain_value("5e-7 m²/s"), "5\u{a0}×\u{a0}10⁻⁷ m²/s");
        assert_eq!(
            plain_value("ethylene glycol, 3 kW"),
            "ethylene glycol, 3 kW"
        );
        assert_eq!(plain_value("1.2e10 J"), "1.2\u{a0}×\u{a0}10¹⁰ J");
    }
}
