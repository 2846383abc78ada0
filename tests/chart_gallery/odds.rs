//! Odds: spread of the saving, cost with from–to marks, shares of the spread.

use crate::common::*;
use winterledger::chart::{
    ChartError, ChoiceSaving, CostOdds, CostSpread, Picture, SavingOdds, SpreadShares,
    UnknownShare, cost_odds, saving_odds, spread_shares,
};

fn seen(name: &str, picture: Result<Picture, ChartError>) {
    check(name, &picture.expect("drawn"));
}

/// A heap about a middle, the same every time: the quantiles of a triangle.
fn heap(label: &str, middle: f64, half: f64, chance: &str) -> ChoiceSaving {
    let of = |i: i32| {
        let share = (f64::from(i) + 0.5) / 400.0;
        if share < 0.5 {
            middle - half + half * (2.0 * share).sqrt()
        } else {
            middle + half - half * (2.0 * (1.0 - share)).sqrt()
        }
    };
    ChoiceSaving {
        label: label.into(),
        saving: (0..400).map(of).collect(),
        chance: Some(chance.into()),
    }
}

fn saving() -> SavingOdds {
    SavingOdds {
        currency: "GBP".into(),
        choices: vec![
            heap("Air source, same radiators", 1.0, 270.0, "50 ± 2"),
            heap("Air source, larger radiators", 217.0, 250.0, "98 ± 1"),
            heap(
                "Ground source, larger radiators",
                316.0,
                240.0,
                "more than 99",
            ),
        ],
    }
}

#[test]
fn saving_odds_realistic() {
    seen("saving_odds_realistic", saving_odds(&saving(), &english()));
}

#[test]
fn saving_odds_hostile() {
    let mut data = saving();
    data.choices = NAMES
        .iter()
        .map(|name| heap(name, -1e9, 1e3, "less than 1"))
        .collect();
    data.choices
        .push(heap(&long_name(), 1e9, 1e9, "more than 99"));
    seen("saving_odds_hostile", saving_odds(&data, &english()));
    data.choices.truncate(1);
    data.choices[0].saving = vec![0.0];
    data.choices[0].chance = None;
    seen("saving_odds_one_sample", saving_odds(&data, &english()));
    data.choices[0].saving = vec![f64::NAN];
    assert!(saving_odds(&data, &english()).is_err());
}

fn spread(label: &str, p10: f64, p50: f64, p90: f64) -> CostSpread {
    CostSpread {
        label: label.into(),
        p10,
        p50,
        p90,
    }
}

#[test]
fn cost_odds_realistic() {
    let data = CostOdds {
        currency: "GBP".into(),
        systems: vec![
            spread("Gas boiler", 1310.0, 1490.0, 1690.0),
            spread("Air source, same radiators", 1290.0, 1490.0, 1720.0),
            spread("Air source, larger radiators", 1110.0, 1275.0, 1465.0),
            spread("Ground source, larger radiators", 1030.0, 1170.0, 1340.0),
        ],
    };
    seen("cost_odds_realistic", cost_odds(&data, &english()));
}

#[test]
fn cost_odds_hostile() {
    let mut data = CostOdds {
        currency: String::new(),
        systems: NAMES
            .iter()
            .map(|name| spread(name, -1e9, 0.0, 1e9))
            .collect(),
    };
    data.systems.push(spread(&long_name(), 5.0, 5.0, 5.0));
    seen("cost_odds_hostile", cost_odds(&data, &english()));
    data.systems.clear();
    assert!(cost_odds(&data, &english()).is_err());
}

fn unknown(label: &str, share: f64, low: f64, high: f64) -> UnknownShare {
    UnknownShare {
        label: label.into(),
        share,
        low,
        high,
    }
}

#[test]
fn spread_shares_realistic() {
    let data = SpreadShares {
        outcome: "Saving of Ground source, larger radiators".into(),
        unknowns: vec![
            unknown("gas rate", 0.41, 0.36, 0.46),
            unknown("share of laboratory performance kept", 0.24, 0.2, 0.28),
            unknown("efficiency of today's boiler", 0.12, 0.08, 0.16),
            unknown("hot water", 0.02, 0.0, 0.04),
            unknown("indoor temperature", 0.0, 0.0, 0.01),
        ],
    };
    seen("spread_shares_realistic", spread_shares(&data, &english()));
}

#[test]
fn spread_shares_hostile() {
    let mut data = SpreadShares {
        outcome: long_name(),
        unknowns: NAMES
            .iter()
            .map(|name| unknown(name, 1.0, 0.0, 1.0))
            .collect(),
    };
    data.unknowns.push(unknown(&long_name(), 0.0, 0.0, 0.0));
    seen("spread_shares_hostile", spread_shares(&data, &english()));
    data.unknowns = vec![unknown("Nothing", 0.0, 0.0, 0.0)];
    seen("spread_shares_nothing", spread_shares(&data, &english()));
}
