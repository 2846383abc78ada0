//! The small pictures of the first page.

use crate::common::*;
use winterledger::chart::{Glance, GlanceRow, GlanceShape, glance};

fn row(label: &str, today: bool, shape: GlanceShape, figure: &str) -> GlanceRow {
    GlanceRow {
        label: label.into(),
        today,
        shape,
        figure: figure.into(),
    }
}

fn draw(name: &str, rows: Vec<GlanceRow>, against: Option<f64>) {
    let data = Glance {
        title: "What a year costs".into(),
        subtitle: "Energy and standing charges of heating and hot water.".into(),
        rows,
        against: against.map(|value| (value, "dashed: today’s cost".into())),
    };
    check(&format!("glance_{name}"), &glance(&data).expect("drawn"));
}

#[test]
fn realistic() {
    let bars = [1486.0, 1481.0, 1269.0].iter().enumerate();
    let rows = bars.map(|(i, &cost)| {
        let figure = format!("£{cost:.0}");
        row(NAMES[i], i == 0, GlanceShape::Bar(cost), &figure)
    });
    let span = GlanceShape::Span([-157.0, 1.0, 159.0]);
    let last = row("A span", false, span, "52 in 100");
    draw("realistic", rows.chain([last]).collect(), Some(1486.0));
}

#[test]
fn hostile_names_and_figures() {
    let rows = NAMES.iter().enumerate().map(|(i, name)| {
        let shape = GlanceShape::Bar(500.0 - 200.0 * i as f64);
        row(name, i == 0, shape, "−CHF 1,234,567,890 and more")
    });
    draw("hostile", rows.collect(), Some(-1e9));
}

#[test]
fn one_system_that_costs_nothing() {
    let rows = vec![row("Boiler", true, GlanceShape::Bar(0.0), "£0")];
    draw("nothing", rows, Some(0.0));
}
