//! What the systems cost.

use super::{Bar, BarPart, Drawn, Material, drawn};
use crate::chart::{self, ChartError};
use crate::locale::MONTHS;

pub(super) fn annual_cost(material: &Material<'_>) -> Result<Drawn, ChartError> {
    let estimate = material.estimate;
    let systems = estimate.systems.iter().map(|s| chart::SystemCost {
        label: s.label.clone(),
        today: s.today,
        energy: s.cost_energy,
        standing: s.cost_standing,
        // Tax that the rates already hold is part of the energy.
        tax: s.cost_tax.unwrap_or(0.0),
    });
    let data = chart::AnnualCost {
        currency: estimate.currency.clone(),
        systems: systems.collect(),
    };
    let picture = chart::annual_cost(&data, &material.locale.marks)?;
    let caption = "What a year of heating and hot water costs to run. What the systems cost to put in is not in it.";
    let mut drawn = drawn("annual-cost", caption, picture);
    drawn.narrow = cost_bars(material);
    Ok(drawn)
}

/// The costs as bars; none where something is paid back, which no bar can show.
fn cost_bars(material: &Material<'_>) -> Vec<Bar> {
    let estimate = material.estimate;
    let money = |amount: f64| material.locale.marks.money(&estimate.currency, amount);
    let bars = estimate.systems.iter().map(|s| {
        let parts = [
            ("energy", Some(s.cost_energy)),
            ("standing", Some(s.cost_standing)),
            ("tax", s.cost_tax),
        ];
        let today = if s.today { " (today)" } else { "" };
        Bar {
            label: format!("{}{today}", chart::plain_line(&s.label)),
            parts: parts
                .into_iter()
                .filter_map(|(name, amount)| {
                    let amount = amount?;
                    Some(BarPart {
                        name: name.to_owned(),
                        amount,
                        written: money(amount),
                    })
                })
                .collect(),
            total: money(s.cost),
        }
    });
    let bars: Vec<Bar> = bars.collect();
    let mut amounts = bars
        .iter()
        .flat_map(|bar| &bar.parts)
        .map(|part| part.amount);
    if amounts.any(|amount| amount < 0.0) || estimate.systems.iter().all(|s| s.cost <= 0.0) {
        return Vec::new();
    }
    bars
}

pub(super) fn monthly(material: &Material<'_>) -> Result<Drawn, ChartError> {
    let systems = material
        .estimate
        .systems
        .iter()
        .map(|s| chart::MonthlySystem {
            label: s.label.clone(),
            today: s.today,
            cost: s.monthly.iter().map(|m| m.cost).collect(),
            electricity_kwh: s.monthly.iter().map(|m| m.electricity_kwh).collect(),
            // A column of no height draws nothing.
            fuel_kwh: s
                .monthly
                .iter()
                .map(|m| m.fuel_kwh.unwrap_or(0.0))
                .collect(),
        });
    let data = chart::Monthly {
        currency: material.estimate.currency.clone(),
        months: MONTHS.iter().map(|month| month[..3].to_owned()).collect(),
        systems: systems.collect(),
    };
    let picture = chart::monthly(&data, &material.locale.marks)?;
    let caption = "Cost and energy bought, month by month.";
    Ok(drawn("monthly", caption, picture))
}

/// What is spent over the years, where the choices' capital is known.
pub(super) fn spend(material: &Material<'_>) -> Result<Option<Drawn>, ChartError> {
    let Some(lifetime) = &material.estimate.lifetime else {
        return Ok(None);
    };
    let marks = material.locale.marks;
    let systems = lifetime.systems.iter().map(|system| chart::SystemSpend {
        label: system.label.clone(),
        today: system.today,
        spent: system
            .by_year
            .iter()
            .map(|year| year.spent_so_far_discounted)
            .collect(),
    });
    let data = chart::CumulativeSpend {
        currency: material.estimate.currency.clone(),
        terms: format!(
            "real, discounted at {} % a year",
            marks.number(lifetime.discount_rate * 100.0, 1)
        ),
        systems: systems.collect(),
    };
    let picture = chart::cumulative_spend(&data, &marks)?;
    let caption = "All that is spent so far, year after year: what is put in, energy, upkeep and what must be bought again. Where two lines \
cross, one has caught up with the other.";
    Ok(Some(drawn("spend", caption, picture)))
}
