//! Boilers: one that heats the home alone, and one kept beside a heat pump.

use super::columns::{BoilerFuel, RuleWord};
use super::defaults;
use super::notes::Notes;
use super::raw::{BoilerTable, SystemTable};
use crate::bounds;
use crate::document::{Check, Leaf, LeafValue, Section};
use crate::heater::{Boiler, BoilerEfficiency, Combustion, HybridRule, StatedEfficiency};
use crate::units::{Fuel, Power, Share, Temperature};

/// The fields that say what a boiler is, wherever they stand.
struct Fields<'a> {
    fuel: Fuel,
    output: &'a Option<Leaf<Power>>,
    efficiency: &'a Option<Leaf<StatedEfficiency>>,
    field_factor: &'a Option<Leaf<Share>>,
    fixed_flow: &'a Option<Leaf<Temperature>>,
}

/// The boiler of a system's table and the flow temperature it is set to.
pub(super) fn boiler(
    table: &SystemTable,
    fuel: Fuel,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<(Boiler, Option<f64>)> {
    let fields = Fields {
        fuel,
        output: &table.output,
        efficiency: &table.efficiency,
        field_factor: &table.field_factor,
        fixed_flow: &table.fixed_flow,
    };
    made(&fields, check, notes)
}

/// A boiler beside a heat pump.
pub(super) struct Kept {
    pub boiler: Boiler,
    pub fixed_flow_c: Option<f64>,
    pub rule: HybridRule,
}

/// The boiler that a heat pump's table keeps beside it.
pub(super) fn kept(
    table: &Section<BoilerTable>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Kept> {
    let fuel = if table.fuel.is_some() {
        check.value(&table.fuel).map(|(BoilerFuel(fuel),)| fuel)
    } else {
        notes.used(&defaults::HYBRID_FUEL);
        Some(Fuel::Gas)
    };
    let rule = check.required(
        &table.rule,
        &table.span(),
        "choice.boiler.rule",
        "\"by-cost\"",
    );
    let below = check.within(&table.below, &bounds::CHANGE_OVER_C);
    let rule = rule.and_then(|(rule,)| {
        if let (RuleWord::Cost | RuleWord::Carbon, Some(leaf)) = (rule, &table.below) {
            check.refuse(
                &leaf.span(),
                "below beside another rule than \"by-outdoor\"",
                "a change-over temperature only where the rule is \"by-outdoor\"",
                "remove it or write rule = \"by-outdoor\"",
            );
            return None;
        }
        match rule {
            RuleWord::Cost => Some(HybridRule::ByCost),
            RuleWord::Carbon => Some(HybridRule::ByCarbon),
            RuleWord::Outdoor => {
                if table.below.is_none() {
                    check.missing(
                        &table.span(),
                        "choice.boiler.below",
                        "\"2 °C\": the boiler serves below it",
                    );
                }
                below.map(|below| HybridRule::ByOutdoor { below_c: below.c() })
            }
        }
    });
    // A boiler of an unknown fuel is still checked, as one for gas.
    let fields = Fields {
        fuel: fuel.unwrap_or(Fuel::Gas),
        output: &table.output,
        efficiency: &table.efficiency,
        field_factor: &table.field_factor,
        fixed_flow: &table.fixed_flow,
    };
    let (boiler, fixed_flow_c) = made(&fields, check, notes)?;
    fuel?;
    Some(Kept {
        boiler,
        fixed_flow_c,
        rule: rule?,
    })
}

fn made(
    fields: &Fields<'_>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<(Boiler, Option<f64>)> {
    let output = notes.quantity(
        check,
        fields.output,
        &bounds::OUTPUT_KW,
        &defaults::BOILER_OUTPUT,
    );
    let fixed_flow = check.within(fields.fixed_flow, &bounds::FLOW_C);
    if fields.fixed_flow.is_some() && fixed_flow.is_none() {
        return None;
    }
    let efficiency = efficiency(fields, check, notes)?;
    let boiler = Boiler::new(fields.fuel, output?.kw(), efficiency);
    Some((boiler, fixed_flow.map(|flow| flow.c())))
}

fn efficiency(
    fields: &Fields<'_>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<BoilerEfficiency> {
    if let (Some(leaf), Some(_)) = (fields.efficiency, fields.field_factor) {
        check.refuse(
            &leaf.span(),
            "both efficiency and field_factor",
            "one of them: a seasonal efficiency already holds what homes lose",
            "remove field_factor",
        );
        return None;
    }
    if let Some(leaf) = fields.efficiency {
        let stated = check.value(fields.efficiency)?;
        let seasonal = stated.of(fields.fuel);
        if seasonal.is_none() {
            check.refuse(
                &leaf.span(),
                "an efficiency beyond what this fuel gives",
                "at most 100 % on gross calorific value",
                "look at which calorific value the sheet means: \"% gross\" or \"% net\"",
            );
        }
        return seasonal.map(BoilerEfficiency::Seasonal);
    }
    let combustion = match fields.fuel {
        Fuel::Gas => Combustion::GAS,
        Fuel::Lpg => Combustion::LPG,
        Fuel::HeatingOil => Combustion::OIL,
        Fuel::Pellets | Fuel::Electricity => {
            if let Some(leaf) = fields.field_factor {
                check.refuse(
                    &leaf.span(),
                    "field_factor of a boiler that does not follow its return temperature",
                    "efficiency, a seasonal figure",
                    "write for example efficiency = \"78 % gross\"",
                );
                return None;
            }
            notes.used(&defaults::PELLET_EFFICIENCY);
            let default = toml::Value::String(defaults::PELLET_EFFICIENCY.value.to_owned());
            let stated = StatedEfficiency::read(&default).ok()?;
            return stated.of(fields.fuel).map(BoilerEfficiency::Seasonal);
        }
    };
    let factor = notes.quantity(
        check,
        fields.field_factor,
        &bounds::FIELD_FACTOR,
        &defaults::BOILER_FIELD_FACTOR,
    );
    Some(BoilerEfficiency::FollowingReturn {
        combustion,
        field_factor: factor?.fraction(),
    })
}
