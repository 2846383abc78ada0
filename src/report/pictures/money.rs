//! What the systems cost.

use super::{Bar, BarPart, Drawn, Material, drawn, in_front, some_of_them};
use crate::answer::lifetime::{LifetimeAnswer, SystemLifetime};
use crate::chart::{self, ChartError, Marks};
use crate::locale::MONTHS;

pub(super) fn annual_cost(material: &Material<'_>) -> Result<Drawn, ChartError> {
    let estimate = material.estimate;
    let systems = in_front(estimate).into_iter().map(|i| &estimate.systems[i]);
    let systems = systems.map(|s| chart::SystemCost {
        label: s.name(),
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
    let caption = format!(
        "What a year of heating and hot water costs to run. What the systems cost to put in is not in it.{}",
        some_of_them(material)
    );
    let mut drawn = drawn("annual-cost", caption, picture);
    drawn.narrow = cost_bars(material);
    Ok(drawn)
}

/// The costs as bars; none where something is paid back, which no bar can show.
fn cost_bars(material: &Material<'_>) -> Vec<Bar> {
    let estimate = material.estimate;
    let money = |amount: f64| material.locale.marks.money(&estimate.currency, amount);
    let bars = in_front(estimate).into_iter().map(|i| {
        let s = &estimate.systems[i];
        let parts = [
            ("energy", Some(s.cost_energy)),
            ("standing", Some(s.cost_standing)),
            ("tax", s.cost_tax),
        ];
        let today = if s.today { " (today)" } else { "" };
        Bar {
            label: format!("{}{today}", chart::plain_line(&s.name())),
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
    let estimate = material.estimate;
    let systems = in_front(estimate)
        .into_iter()
        .map(|i| &estimate.systems[i])
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
        currency: estimate.currency.clone(),
        months: MONTHS.iter().map(|month| month[..3].to_owned()).collect(),
        systems: systems.collect(),
    };
    let picture = chart::monthly(&data, &material.locale.marks)?;
    let caption = format!(
        "Cost and energy bought, month by month.{}",
        some_of_them(material)
    );
    Ok(drawn("monthly", caption, picture))
}

/// The years of the systems in front.
pub(super) fn lifetime_in_front<'a>(
    material: &Material<'a>,
) -> impl Iterator<Item = &'a SystemLifetime> {
    let estimate = material.estimate;
    let shown = in_front(estimate);
    let labels: Vec<&str> = shown
        .iter()
        .map(|&i| estimate.systems[i].label.as_str())
        .collect();
    let systems = estimate.lifetime.iter().flat_map(|all| &all.systems);
    systems.filter(move |system| labels.contains(&system.label.as_str()))
}

/// What is spent over the years, where the choices' capital is known.
pub(super) fn spend(material: &Material<'_>) -> Result<Option<Drawn>, ChartError> {
    let Some(lifetime) = &material.estimate.lifetime else {
        return Ok(None);
    };
    let systems = lifetime_in_front(material);
    let currency = &material.estimate.currency;
    let mut drawn = spending(systems, lifetime, currency, &material.locale.marks)?;
    drawn.caption += &some_of_them(material);
    Ok(Some(drawn))
}

/// What `systems` of a comparison over the years spend.
pub(super) fn spending<'a>(
    systems: impl Iterator<Item = &'a SystemLifetime>,
    lifetime: &LifetimeAnswer,
    currency: &str,
    marks: &Marks,
) -> Result<Drawn, ChartError> {
    let systems = systems.map(|system| chart::SystemSpend {
        label: system.name(),
        today: system.today,
        spent: system
            .by_year
            .iter()
            .map(|year| year.spent_so_far_discounted)
            .collect(),
    });
    let data = chart::CumulativeSpend {
        currency: currency.to_owned(),
        terms: format!(
            "real, discounted at {} % a year",
            marks.number(lifetime.discount_rate * 100.0, 1)
        ),
        systems: systems.collect(),
    };
    let picture = chart::cumulative_spend(&data, marks)?;
    let caption = format!(
        "All that is spent so far, year after year: what is put in, energy, upkeep and what must be bought again. Where two lines \
cross, one has caught up with the other. {}",
        lifetime.todays_next
    );
    Ok(drawn("spend", caption, picture))
}
