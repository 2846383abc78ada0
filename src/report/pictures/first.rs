//! The small pictures of the first page: cost, odds, the coldest design day; carbon where one of these is missing.

use super::{Drawn, Material, drawn, in_front};
use crate::answer::SystemAnswer;
use crate::chart::{self, ChartError, Glance, GlanceRow, GlanceShape};

/// Pictures that stand side by side on the first page.
const ABREAST: usize = 3;

/// The pictures, in the order in which they stand.
pub(super) fn glances(material: &Material<'_>) -> Result<Vec<Drawn>, ChartError> {
    let all = [
        ("glance-cost", Some(cost(material))),
        ("glance-odds", odds(material)),
        ("glance-cold", cold(material)),
        ("glance-carbon", Some(carbon(material))),
    ];
    let there = all
        .into_iter()
        .filter_map(|(name, data)| Some((name, data?)));
    there
        .take(ABREAST)
        .map(|(name, data)| Ok(drawn(name, "", chart::glance(&data)?)))
        .collect()
}

/// The systems of the first page.
fn front<'a>(material: &Material<'a>) -> impl Iterator<Item = &'a SystemAnswer> {
    let systems = &material.estimate.systems;
    in_front(material.estimate)
        .into_iter()
        .map(move |i| &systems[i])
}

fn row(system: &SystemAnswer, shape: GlanceShape, figure: String) -> GlanceRow {
    GlanceRow {
        label: system.label.clone(),
        today: system.today,
        shape,
        figure,
    }
}

fn cost(material: &Material<'_>) -> Glance {
    let estimate = material.estimate;
    let money = |amount: f64| material.locale.marks.money(&estimate.currency, amount);
    Glance {
        title: "What a year costs".to_owned(),
        subtitle: "Energy and standing charges of heating and hot water.".to_owned(),
        rows: front(material)
            .map(|s| row(s, GlanceShape::Bar(s.cost), money(s.cost)))
            .collect(),
        against: estimate
            .systems
            .iter()
            .find(|s| s.today)
            .map(|s| (s.cost, "dashed: today’s cost".to_owned())),
    }
}

fn odds(material: &Material<'_>) -> Option<Glance> {
    let odds = material.estimate.odds.as_ref()?;
    let rows: Vec<_> = front(material)
        .filter_map(|s| {
            let of_it = odds.choices.iter().find(|one| one.label == s.label)?;
            let spread = &of_it.saving;
            Some(row(
                s,
                GlanceShape::Span([spread.p10, spread.p50, spread.p90]),
                format!("{} in 100", of_it.chance_said),
            ))
        })
        .collect();
    (!rows.is_empty()).then(|| Glance {
        title: "How sure it is cheaper".to_owned(),
        subtitle: "Line: the saving in eight cases of ten. Figure: chance of any saving."
            .to_owned(),
        rows,
        against: Some((0.0, "dashed: as today; right of it cheaper".to_owned())),
    })
}

/// What the machines can give at the design temperature, against what the home loses. A boiler gives many times that and would make
/// the others invisible.
fn cold(material: &Material<'_>) -> Option<Glance> {
    let marks = &material.locale.marks;
    let home = &material.estimate.home;
    let machines = front(material).filter(|s| s.spf_h4.is_some() && s.balance_point.is_some());
    let rows: Vec<_> = machines
        .map(|s| {
            let kw = s.design.output_kw;
            row(
                s,
                GlanceShape::Bar(kw),
                format!("{}\u{a0}kW", marks.number(kw, 1)),
            )
        })
        .collect();
    let load = marks.number(home.design_heat_load_kw, 1);
    (!rows.is_empty()).then(|| Glance {
        title: format!(
            "The coldest design day, {}\u{a0}°C",
            marks.number(home.design_outdoor_c, 0)
        ),
        subtitle: "Heat that the heat pump alone can give, without backup heater.".to_owned(),
        rows,
        against: Some((
            home.design_heat_load_kw,
            format!("dashed: the home loses {load}\u{a0}kW"),
        )),
    })
}

fn carbon(material: &Material<'_>) -> Glance {
    let marks = &material.locale.marks;
    let rows = front(material).map(|s| {
        let figure = format!("{}\u{a0}kg", marks.number(s.carbon_kg, 0));
        row(s, GlanceShape::Bar(s.carbon_kg), figure)
    });
    Glance {
        title: "Greenhouse gas of a year".to_owned(),
        subtitle: "CO₂ equivalent of the energy that heating and hot water take.".to_owned(),
        rows: rows.collect(),
        against: None,
    }
}
