//! The energy signature against scipy and statsmodels (`tests/reference/signature.py`).

use std::collections::BTreeMap;

use statrs::distribution::{ContinuousCDF, StudentsT};
use winterledger::signature::{DailyWeather, Day, Interval, Stated, fit};

use std::fmt::Write as _;
use std::path::Path;

use winterledger::brief::Brief;
use winterledger::signature::Limits;
use winterledger::year::Ledger;

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
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    let shipped = loss_of(
        &root.join("briefs/meter-readings.csv"),
        &root.join("briefs/rooms.toml"),
    );
    let own = own_meter(&root.join("briefs/terrace.toml"));
    vec![
        Row::new(
            "Heat loss of a home from its own meter, W/K",
            "tests/reference/meter_readings.py stepped a home of 206 W/K hour by hour",
            206.0,
            shipped.value,
            shipped.half(),
            "its own 95 % limits: gains, warm-up and efficiency are not those of the brief, and every day has noise",
        ),
        Row::new(
            "Half of those limits as a share of the heat loss, %",
            "a limit that is as wide as the home says nothing",
            0.0,
            shipped.half() / shipped.value * 100.0,
            15.0,
            "efficiency alone leaves 6 %",
        ),
        Row::new(
            "Heat loss of the demonstration home from its own modelled gas by month, W/K",
            "the brief's own 212 W/K (round trip: not an outside source)",
            212.0,
            own.value,
            3.0,
            "hot water is taken as an even load with the season of the cold water",
        ),
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

fn loss_of(readings: &Path, brief: &Path) -> Limits {
    let (made, _) = Brief::bills(readings, brief).unwrap();
    made.signature.heat_loss()
}

/// What today's system of a brief burns in each month, given back to `bills`.
fn own_meter(path: &Path) -> Limits {
    let brief = Brief::read(path).unwrap();
    let case = &brief.case;
    let mut ledger = Ledger::default();
    case.run_one(&case.contenders[0], Some(&mut ledger))
        .unwrap();
    let mut months = [0.0; 12];
    for (hour, row) in case.site.civil.iter().zip(&ledger.rows) {
        months[hour.month0()] += row.fuel_kwh;
    }
    let mut text = "month,consumption (kWh)\n".to_owned();
    for (month0, kwh) in months.iter().enumerate() {
        writeln!(text, "2023-{:02},{kwh:.1}", month0 + 1).unwrap();
    }
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("own-meter.csv");
    std::fs::write(&file, text).unwrap();
    loss_of(&file, path)
}
