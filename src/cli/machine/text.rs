//! A fitted machine as text.

use crate::answer::machine::{MachineAnswer, OperatingAnswer};
use crate::heatpump::{Fitted, Sheet};
use crate::problem::Finding;
use crate::report::plain_table;

pub(super) fn text(
    sheet: &Sheet,
    fitted: &Fitted,
    answer: &MachineAnswer,
    cautions: &[Finding],
) -> String {
    let letter = sheet.letter();
    let (source_c, flow_c) = sheet.rated_condition();
    let mut lines = vec![
        format!("{} ({})", answer.label, answer.refrigerant),
        format!(
            "greatest output {:.2} kW at {letter}{source_c}/W{flow_c}",
            answer.rated_output_kw
        ),
    ];
    if answer.typical {
        lines.push(
            "a typical machine: an invented sheet with numbers usual for its kind, no product"
                .to_owned(),
        );
    }
    lines.extend([
        String::new(),
        point_table(fitted, answer, letter),
        String::new(),
        summary(answer),
        String::new(),
        parameter_table(answer),
    ]);
    for assumed in &answer.assumptions {
        lines.push(format!(
            "assumed: {} = {} ({})",
            assumed.name, assumed.value, assumed.from
        ));
    }
    if let Some(at) = &answer.at {
        lines.extend([String::new(), operating_text(at, letter)]);
    }
    lines.extend([
        String::new(),
        format!(
            "All figures are laboratory figures. In a home electricity is taken {:.0} % higher (field factor {}, Ruhnau et al. 2019).",
            100.0 * (1.0 / answer.field_factor - 1.0),
            answer.field_factor
        ),
    ]);
    lines.extend(cautions.iter().map(ToString::to_string));
    lines.join("\n")
}

fn point_table(fitted: &Fitted, answer: &MachineAnswer, letter: char) -> String {
    let percent = |value: Option<f64>| value.map_or_else(String::new, |v| format!("{v:+.1}"));
    let rows = fitted
        .report
        .points
        .iter()
        .zip(&answer.points)
        .map(|(report, p)| {
            vec![
                report.point.name(letter),
                p.at.to_owned(),
                format!("{:.2}", p.heat_kw),
                format!("{:.2}", p.model_heat_kw),
                format!("{:.2}", p.cop),
                format!("{:.2}", p.model_cop),
                percent(Some(p.physics_percent)),
                percent(p.left_out_percent),
            ]
        });
    let header = [
        "point",
        "at",
        "kW",
        "model kW",
        "COP",
        "model COP",
        "physics alone %",
        "left out %",
    ];
    plain_table(header, rows)
}

fn summary(answer: &MachineAnswer) -> String {
    let mut text = format!(
        "COP by physics alone {:.1} % root-mean-square",
        answer.physics_rms_percent
    );
    if let Some(left_out) = answer.left_out_rms_percent {
        text += &format!(", of points left out {left_out:.1} %");
    }
    text += &format!(
        "; with correction every point within {:.2} %; map within {:.3} % of the exact machine",
        answer.largest_percent, answer.map_error_percent
    );
    text
}

fn parameter_table(answer: &MachineAnswer) -> String {
    let rows = answer
        .parameters
        .iter()
        .filter(|p| p.prior_width.is_some())
        .map(|p| {
            vec![
                p.name.to_owned(),
                figure(p.value),
                figure(p.prior),
                p.unit.to_owned(),
                p.from.to_owned(),
            ]
        });
    plain_table(
        [
            "fitted parameter",
            "value",
            "believed before",
            "unit",
            "because of",
        ],
        rows,
    )
}

/// Three significant figures or so.
fn figure(value: f64) -> String {
    match value.abs() {
        100.0.. => format!("{value:.0}"),
        10.0.. => format!("{value:.1}"),
        0.1.. => format!("{value:.2}"),
        _ => format!("{value:.4}"),
    }
}

fn operating_text(at: &OperatingAnswer, letter: char) -> String {
    let mut text = format!(
        "at {letter}{}/W{:.1}: heat {:.2} kW, electricity {:.3} kW, COP {:.2} (in a home {:.2})\n\
         speed {:.2} of its reference, running {:.0} % of the time, evaporating {:.1} °C, condensing {:.1} °C, \
         pressure ratio {:.2}, isentropic efficiency {:.2}",
        at.source_c,
        at.flow_c,
        at.heat_kw,
        at.electric_kw,
        at.cop,
        at.cop_at_home,
        at.speed,
        100.0 * at.running_fraction,
        at.evaporating_c,
        at.condensing_c,
        at.pressure_ratio,
        at.isentropic_efficiency
    );
    if at.frost_cop_share > 0.0 {
        text += &format!(
            "\nfrost takes {:.1} % of output and {:.1} % of COP in air of the standard humidity",
            100.0 * at.frost_output_share,
            100.0 * at.frost_cop_share
        );
    }
    text
}
