//! The odds as text.

use super::table::plain_table_within;
use super::text::{WIDTH, wrapped};
use crate::answer::odds::OddsAnswer;
use crate::answer::short;

/// The odds as text for a terminal of 80 columns or more.
pub fn odds_text(answer: &OddsAnswer) -> String {
    let mut blocks: Vec<String> = vec![
        answer
            .choices
            .iter()
            .map(|choice| wrapped(&choice.sentence, "", "  "))
            .collect::<Vec<_>>()
            .join("\n"),
    ];
    let code = &answer.currency;
    let rows = answer.choices.iter().map(|choice| {
        let error = choice.chance_error.map_or_else(String::new, |error| {
            format!(" ± {:.0}", (error * 100.0).max(1.0))
        });
        vec![
            choice.label.clone(),
            format!("{:.0}", choice.saving.p10),
            format!("{:.0}", choice.saving.p50),
            format!("{:.0}", choice.saving.p90),
            choice.spf_h4.map_or_else(
                || "–".to_owned(),
                |spf| format!("{:.1}–{:.1}", spf.p10, spf.p90),
            ),
            format!("{:.0}{error}", choice.chance_cheaper * 100.0),
        ]
    });
    let header = [
        format!("Saving, {code}"),
        "low (P10)".to_owned(),
        "middle".to_owned(),
        "high (P90)".to_owned(),
        "SPF (H4)".to_owned(),
        "% cheaper".to_owned(),
    ];
    blocks.push(plain_table_within(WIDTH, header, rows));
    if !answer.what_matters.is_empty() {
        let lines = answer.what_matters.iter().map(|one| {
            let turns = one.turns_with.as_ref().map_or_else(
                || "does not turn the answer alone".to_owned(),
                |with| format!("turns with {with}"),
            );
            let swing = match (one.saving_at_low, one.saving_at_high) {
                (Some(low), Some(high)) => format!("saving {low:.0} to {high:.0} by it alone, "),
                _ => String::new(),
            };
            let line = format!(
                "{:.0} % ({:.0}–{:.0}) {}; {swing}{turns}",
                one.share * 100.0,
                one.lo * 100.0,
                one.hi * 100.0,
                one.lever
            );
            wrapped(&line, "  ", "      ")
        });
        let lines: Vec<_> = lines.collect();
        blocks.push(format!(
            "What makes the spread of \"{}\"\n{}",
            answer.about,
            lines.join("\n")
        ));
    }
    if !answer.between.is_empty() {
        let lines = answer.between.iter().map(|pair| {
            let error = pair.chance_error.map_or_else(String::new, |error| {
                format!(" ± {:.0}", (error * 100.0).max(1.0))
            });
            let line = format!(
                "\"{}\" is cheaper than \"{}\" in {:.0}{error} of 100",
                pair.label,
                pair.than,
                pair.chance_cheaper * 100.0
            );
            wrapped(&line, "", "  ")
        });
        blocks.push(lines.collect::<Vec<_>>().join("\n"));
    }
    blocks.push(wrapped(&answer.find_out, "", "  "));
    let ranges = answer.uncertain.iter().map(|one| {
        let line = format!(
            "{} {} to {} {}: {}",
            one.lever,
            short(one.p10),
            short(one.p90),
            one.unit,
            one.from
        );
        wrapped(&line.replace(" :", ":"), "  ", "      ")
    });
    blocks.push(format!(
        "What was taken as uncertain (P10 to P90)\n{}",
        ranges.collect::<Vec<_>>().join("\n")
    ));
    blocks.push(wrapped(
        &format!(
            "{} samples in {} blocks, seed {}: {}. The prices of electricity and gas go together with a correlation of {}, so that the shares of what makes the spread need not add up to 100 %.",
            answer.samples,
            answer.blocks,
            answer.seed,
            answer.stopped,
            short(answer.price_correlation)
        ),
        "",
        "  ",
    ));
    blocks.join("\n\n")
}
