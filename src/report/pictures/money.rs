//! What the systems cost.

use super::{Bar, BarPart, Drawn, Material, drawn};
use crate::chart::{self, ChartError};
use crate::locale::MONTHS;

/// Systems that the first page has room for, today's among them.
const FIRST_PAGE: usize = 6;

/// Which systems the first page shows: all where there is room, else today's and the cheapest choices, in the order of the brief.
fn shown_first(costs: &[(bool, f64)]) -> Vec<usize> {
    let mut order: Vec<usize> = (0..costs.len()).collect();
    order.sort_by(|&a, &b| {
        let key = |i: usize| (!costs[i].0, costs[i].1);
        let (a, b) = (key(a), key(b));
        a.0.cmp(&b.0).then(a.1.total_cmp(&b.1))
    });
    order.truncate(FIRST_PAGE);
    order.sort_unstable();
    order
}

pub(super) fn annual_cost(material: &Material<'_>) -> Result<Drawn, ChartError> {
    let estimate = material.estimate;
    let costs: Vec<_> = estimate.systems.iter().map(|s| (s.today, s.cost)).collect();
    let shown = shown_first(&costs);
    let left_out = costs.len() - shown.len();
    let systems = shown.iter().map(|&i| &estimate.systems[i]);
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
    let mut caption =
        "What a year of heating and hot water costs to run. What the systems cost to put in is not in it.".to_owned();
    if left_out > 0 {
        caption += &format!(
            " Today and the {} cheapest choices; the others stand under Money.",
            shown.len() - 1
        );
    }
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
        label: system.name(),
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
    let caption = format!(
        "All that is spent so far, year after year: what is put in, energy, upkeep and what must be bought again. Where two lines \
cross, one has caught up with the other. {}",
        lifetime.todays_next
    );
    Ok(Some(drawn("spend", caption, picture)))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_first_page_shows_today_and_the_cheapest() {
        let three = [(false, 3.0), (true, 9.0), (false, 1.0)];
        assert_eq!(shown_first(&three), [0, 1, 2]);
        let mut many: Vec<_> = (0..9).map(|i| (false, f64::from(10 - i))).collect();
        many[0].0 = true;
        assert_eq!(shown_first(&many), [0, 4, 5, 6, 7, 8]);
    }
}
