//! Odds as they are said.

use super::QuantilesAnswer;
use crate::study::Lever;
use crate::study::odds::Chance;

/// Chances between which neither side is to be called cheaper. A choice of ours: two chances in three either way.
const ABOUT_THE_SAME: std::ops::RangeInclusive<f64> = 0.3..=0.7;

/// The odds of a choice in a sentence; what leaves rooms or water cold is told first.
pub(super) fn in_words(
    (label, cold): (&str, Option<&str>),
    chance: f64,
    saving: QuantilesAnswer,
    code: &str,
) -> String {
    // Tens: the sample says no more.
    let tens = |value: f64| (value / 10.0).round() * 10.0;
    let (low, high) = (tens(saving.p10), tens(saving.p90));
    let side = |value: f64| if value < 0.0 { "dearer" } else { "cheaper" };
    let between = if side(low) == side(high) {
        let (least, most) = (low.abs().min(high.abs()), low.abs().max(high.abs()));
        format!(
            "between {least:.0} {code} and {most:.0} {code} {}",
            side(low)
        )
    } else {
        format!(
            "between {:.0} {code} {} and {high:.0} {code} {}",
            low.abs(),
            side(low),
            side(high)
        )
    };
    let same = if is_about_the_same(chance) {
        "about the same as today; "
    } else {
        ""
    };
    let than = if same.is_empty() { " than today" } else { "" };
    format!(
        "{label}: {}{same}{}{than}; {between} a year in eight cases of ten.",
        cold.map_or_else(String::new, |cold| format!(
            "no, {cold}; left as cold as that, "
        )),
        chance_in_words(chance)
    )
}

/// What the samples do not draw, and so cannot widen the chances.
pub(super) fn not_drawn(draws_years: bool) -> String {
    if draws_years {
        "Not drawn is what the model itself leaves out, so the chances look surer than they are."
            .to_owned()
    } else {
        "Not drawn are another winter, as the brief gives one year of weather, and what the model itself leaves out, so the chances \
         look surer than they are."
            .to_owned()
    }
}

/// Whether a chance of being cheaper says that neither is.
pub(super) fn is_about_the_same(chance: f64) -> bool {
    ABOUT_THE_SAME.contains(&chance)
}

/// A chance of being cheaper as it is said: "about 2 chances in 3 of being cheaper".
pub(super) fn chance_in_words(chance: f64) -> String {
    const SAID: [(f64, &str); 9] = [
        (0.1, "about 1 chance in 10"),
        (0.2, "about 1 chance in 5"),
        (0.333, "about 1 chance in 3"),
        (0.4, "about 2 chances in 5"),
        (0.5, "about an even chance"),
        (0.6, "about 3 chances in 5"),
        (0.667, "about 2 chances in 3"),
        (0.8, "about 4 chances in 5"),
        (0.9, "about 9 chances in 10"),
    ];
    let nearest = SAID
        .iter()
        .min_by(|a, b| (a.0 - chance).abs().total_cmp(&(b.0 - chance).abs()));
    let said = match nearest {
        _ if chance < 0.03 => "hardly a chance",
        _ if chance > 0.97 => "a near certainty",
        Some((_, words)) => words,
        None => "a chance",
    };
    format!("{said} of being cheaper")
}

/// A chance as far as the samples tell it, in percent: nothing is said to be certain, and no figure stands without how far it may be off.
pub fn chance_said(chance: &Chance) -> String {
    let percent = |share: f64| share * 100.0;
    let whole = |share: f64| percent(share).round();
    match chance.error {
        // All agree, or nearly: the limit says more than a figure that rounds to the end.
        _ if whole(chance.chance) >= 100.0 => {
            format!("more than {:.0}", percent(chance.low).floor())
        }
        _ if whole(chance.chance) <= 0.0 => format!("less than {:.0}", percent(chance.high).ceil()),
        // A whole percent: the error of an error is large.
        Some(error) => format!("{:.0} ± {:.0}", whole(chance.chance), whole(error).max(1.0)),
        None => format!("{:.0} to {:.0}", whole(chance.low), whole(chance.high)),
    }
}

/// A lever as a family would say it.
pub(super) fn plain(lever: Lever) -> &'static str {
    match lever {
        Lever::ElectricityRate => "the price of electricity",
        Lever::FuelRate => "the price of gas",
        Lever::HeatLoss => "how much heat the home loses",
        Lever::FlowTemperature => "the flow temperature the emitters need",
        Lever::Indoor => "how warm the rooms are kept",
        Lever::HotWater => "how much hot water is used",
        Lever::RatedOutput => "the output of the machine",
        Lever::FieldFactor => "how well the machine runs in a home",
        Lever::HighLift => "what the machine takes in the cold and at hot flows",
        Lever::PartLoad => "what the machine takes at part load",
        Lever::OutputInCold => "what the machine gives in the cold",
        Lever::LoopResistance => "how well the ground gives its heat",
        Lever::LoopLength => "the length of the loop",
        Lever::Capital => "what it costs to put in",
        Lever::Grant => "the grant",
        Lever::ElectricityCarbon => "the carbon of electricity",
        Lever::BoilerEfficiency => "how well today's boiler burns",
    }
}

/// The survey, reading or quote that finds a lever out; nothing for prices and carbon of years to come.
pub(super) fn found_by(lever: Lever) -> Option<&'static str> {
    match lever {
        Lever::ElectricityRate | Lever::FuelRate | Lever::ElectricityCarbon => None,
        Lever::HeatLoss => Some("a room-by-room survey or a winter of meter readings"),
        Lever::FlowTemperature => Some("a survey of the radiators, room by room"),
        Lever::Indoor => Some("a thermometer in the rooms for a week"),
        Lever::HotWater => Some("meter readings of a summer month"),
        Lever::RatedOutput => Some("the datasheet of the machine that is quoted"),
        Lever::FieldFactor => {
            Some("heat-meter readings of homes with the same machine and installer")
        }
        Lever::HighLift => {
            Some("test reports at the cold and at the flow temperature of this home")
        }
        Lever::PartLoad => Some("the part-load points of the machine's test report"),
        Lever::OutputInCold => {
            Some("the output at the design temperature in the machine's test report")
        }
        Lever::LoopResistance => Some("a thermal response test of the ground"),
        Lever::LoopLength => Some("the loop designer's quote"),
        Lever::Capital => Some("a quote"),
        Lever::Grant => Some("asking whoever pays it"),
        Lever::BoilerEfficiency => Some("a combustion test by a licensed engineer"),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn between(p10: f64, p90: f64) -> QuantilesAnswer {
        QuantilesAnswer {
            p10,
            p50: 0.0,
            p90,
            p10_error: None,
            p50_error: None,
            p90_error: None,
        }
    }

    #[test]
    fn no_chance_is_surer_than_its_samples() {
        let said = |blocks: usize, cheaper: usize| {
            let values: Vec<f64> = (0..80)
                .map(|i| if i < cheaper { 1.0 } else { -1.0 })
                .collect();
            let blocks = values.chunks(80 / blocks);
            chance_said(&Chance::of(blocks, |saving| saving > 0.0).unwrap())
        };
        // The rule of three: 3 in 80 from the end.
        assert_eq!(said(8, 80), "more than 96");
        assert_eq!(said(8, 0), "less than 4");
        assert_eq!(said(1, 80), "more than 96");
        // Half of them cheaper, all in the first blocks: √(0.25 · 8/7/8) = 0.19.
        assert_eq!(said(8, 40), "50 ± 19");
        // scipy.stats.beta.ppf: 0.3860 and 0.6140 of 40 in 80.
        assert_eq!(said(1, 40), "39 to 61");
    }

    #[test]
    fn chances_are_said_without_false_decimals() {
        assert_eq!(
            chance_in_words(0.664),
            "about 2 chances in 3 of being cheaper"
        );
        assert_eq!(chance_in_words(0.01), "hardly a chance of being cheaper");
        assert_eq!(
            chance_in_words(0.52),
            "about an even chance of being cheaper"
        );
        assert_eq!(
            in_words(("Air source", None), 0.67, between(-68.0, 112.0), "GBP"),
            "Air source: about the same as today; about 2 chances in 3 of being cheaper; between 70 GBP dearer and 110 GBP cheaper a year in eight cases of ten."
        );
        assert_eq!(
            in_words(("Ground", None), 0.99, between(191.0, 443.0), "GBP"),
            "Ground: a near certainty of being cheaper than today; between 190 GBP and 440 GBP cheaper a year in eight cases of ten."
        );
        assert_eq!(
            in_words(("Direct", None), 0.01, between(-443.0, -191.0), "GBP"),
            "Direct: hardly a chance of being cheaper than today; between 190 GBP and 440 GBP dearer a year in eight cases of ten."
        );
    }
}
