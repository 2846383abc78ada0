//! The odds as text.

use super::table::plain_table_within;
use super::text::{WIDTH, wrapped};
use crate::answer::odds::{Matters, OddsAnswer};
use crate::answer::short;
use crate::locale::Locale;

/// Share of the spread from which a lever has a line of its own: below it rounds to 0 %.
const SAID: f64 = 0.005;

/// The odds as text for a terminal of 80 columns or more, in the form of a place.
pub fn odds_text(answer: &OddsAnswer, locale: &Locale) -> String {
    let marks = &locale.marks;
    let told = |sentence: &str| locale.told(sentence, &answer.currency);
    let money = |amount: f64| marks.money(&answer.currency, amount);
    let mut blocks: Vec<String> = vec![
        answer
            .choices
            .iter()
            .map(|choice| wrapped(&told(&choice.sentence), "", "  "))
            .collect::<Vec<_>>()
            .join("\n"),
    ];
    let code = &answer.currency;
    let rows = answer.choices.iter().map(|choice| {
        vec![
            match choice.leaves_cold {
                Some(_) => format!("{} (too cold)", choice.label),
                None => choice.label.clone(),
            },
            money(choice.saving.p10),
            money(choice.saving.p50),
            money(choice.saving.p90),
            choice.spf_h4.map_or_else(
                || "–".to_owned(),
                |spf| format!("{}–{}", marks.number(spf.p10, 1), marks.number(spf.p90, 1)),
            ),
            choice.chance_said.clone(),
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
        let (great, hardly): (Vec<&Matters>, Vec<&Matters>) = answer
            .what_matters
            .iter()
            .partition(|one| one.share >= SAID);
        let lines = great.iter().map(|one| {
            let turns = one.turns_with.as_ref().map_or_else(
                || "does not turn the answer".to_owned(),
                |with| format!("turns with {}", told(with)),
            );
            let swing = match (one.saving_at_low, one.saving_at_high) {
                (Some(low), Some(high)) => {
                    format!(
                        "by it alone a saving of {} to {}, ",
                        money(low),
                        money(high)
                    )
                }
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
        let mut lines: Vec<_> = lines.collect();
        if !hardly.is_empty() {
            let names: Vec<&str> = hardly.iter().map(|one| one.lever.as_str()).collect();
            let line = format!("hardly any of it: {}", names.join(", "));
            lines.push(wrapped(&line, "  ", "      "));
        }
        blocks.push(format!(
            "What makes the spread of \"{}\"\n{}",
            answer.about,
            lines.join("\n")
        ));
    }
    if !answer.between.is_empty() {
        let lines = answer.between.iter().map(|pair| {
            let line = format!(
                "\"{}\" is cheaper than \"{}\" in {} of 100",
                pair.label, pair.than, pair.chance_said
            );
            wrapped(&line, "", "  ")
        });
        blocks.push(lines.collect::<Vec<_>>().join("\n"));
    }
    blocks.push(wrapped(&answer.not_drawn, "", "  "));
    blocks.push(wrapped(&told(&answer.find_out), "", "  "));
    let ranges = answer.uncertain.iter().map(|one| {
        let line = format!(
            "{} {} to {} {}: {}",
            one.lever,
            marks.localized(&short(one.p10)),
            marks.localized(&short(one.p90)),
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
            marks.localized(&short(answer.price_correlation))
        ),
        "",
        "  ",
    ));
    blocks.join("\n\n")
}
