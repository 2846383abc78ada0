//! The energy signature against scipy and statsmodels (`tests/reference/signature.py`).

use std::collections::BTreeMap;

use statrs::distribution::{ContinuousCDF, StudentsT};
use winterledger::signature::{DailyWeather, Day, Interval, Stated, fit};

use crate::table::{Row, Worst, number, reference};

/// Nothing stated: the plain three-parameter fit.
const PLAIN: Stated = Stated {
    efficiency: 1.0,
    efficiency_within: 0.0,
    hot_water_share: 0.0,
    hot_water_share_within: 0.0,
    hot_water_swing: 0.0,
};

pub fn rows() -> Vec<Row> {
    let days = reference("signature_days.csv")
        .iter()
        .map(|row| Day {
            date: row[0].parse().unwrap(),
            mean_c: number(&row[1]),
        })
        .collect();
    let weather = DailyWeather::of_days(days);
    let mut homes: BTreeMap<String, Vec<Interval>> = BTreeMap::new();
    for row in reference("signature_intervals.csv") {
        homes.entry(row[0].clone()).or_default().push(Interval {
            from: row[1].parse().unwrap(),
            to: row[2].parse().unwrap(),
            kwh: number(&row[3]),
            line: 0,
        });
    }
    let (mut figures, mut errors) = (Worst::relative(2e-5), Worst::relative(1e-3));
    let mut odd = 0;
    for row in reference("signature_fits.csv") {
        let found = fit(&homes[&row[0]], &weather, &PLAIN).unwrap();
        let mut near = |i: usize, got: f64| {
            let expected = number(&row[i]);
            figures.see_within(expected, got, 2e-5 * expected.abs().max(1.0));
        };
        near(1, found.base_load_kwh_per_day.value);
        near(2, found.slope_kwh_per_k_day);
        near(3, found.base_temperature_c.value);
        near(7, found.r_squared);
        near(8, found.cv_rmse);
        let freedom = (found.n() - 3) as f64;
        let t = StudentsT::new(0.0, 1.0, freedom)
            .unwrap()
            .inverse_cdf(0.975);
        errors.see(number(&row[4]), found.base_load_kwh_per_day.half() / t);
        errors.see(
            number(&row[5]),
            found.heat_loss_w_per_k.half() / t * 24.0 / 1000.0,
        );
        errors.see(number(&row[6]), found.base_temperature_c.half() / t);
        let at: usize = row[10].parse().unwrap();
        errors.see(number(&row[9]), found.points[at].off);
        odd += found.points.iter().filter(|point| point.odd).count();
    }
    vec![
        figures.row(
            "Base load, slope, base temperature, R², CV(RMSE) of eight homes",
            "scipy 1.17.1 curve_fit, statsmodels 0.15.0",
            40,
            "both searches end within 1e-6 K of a flat optimum",
        ),
        errors.row(
            "Their standard errors and the oddest reading",
            "statsmodels 0.15.0",
            32,
            "an optimum at a day's own temperature: a day more or less counts as colder",
        ),
        Row::at_least(
            "Readings called odd where two were made 60 % too large",
            "tests/reference/signature.py made two",
            2.0,
            odd as f64,
            "chance may make another odd",
        ),
    ]
}
