//! Bills against published and independently computed ones.
#![cfg(test)]

use chrono::NaiveDate;
use proptest::prelude::*;
use rust_decimal::Decimal;
use winterledger::bill::{self, Bill, Charge, Connection};
use winterledger::calendar::{CivilHour, HourAxis};
use winterledger::problem::Place;
use winterledger::tariff::{
    Band, Covers, Days, Demand, Flows, Holidays, Metering, Prices, Rate, Span, Standing,
    StandingSpan, Step, Steps, Tariff, Tax, When, Window,
};
use winterledger::units::{Currency, Fuel};

fn decimal(text: &str) -> Decimal {
    text.parse().unwrap()
}

fn year(year: i32) -> Vec<CivilHour> {
    let zone: chrono_tz::Tz = "Europe/London".parse().unwrap();
    HourAxis::civil_year(year, zone).unwrap().civil(zone)
}

fn band(label: &str, window: Window, amount: &str) -> Band {
    Band {
        label: label.to_owned(),
        when: When {
            window,
            ..When::ALWAYS
        },
        rate: Rate::per_kwh(decimal(amount)),
    }
}

fn prices(bands: Vec<Band>, standing: &str) -> Prices {
    Prices {
        valid_from: None,
        bands,
        steps: None,
        hourly: None,
        standing: Some(Standing {
            amount: decimal(standing),
            per: StandingSpan::Day,
        }),
        demand: None,
        tax: Tax::INCLUDED,
        export: None,
    }
}

fn tariff(fuel: Fuel, prices: Prices) -> Tariff {
    Tariff {
        label: "test".to_owned(),
        place: Place::default(),
        fuel,
        currency: Currency::parse("GBP").unwrap(),
        time_zone: None,
        metering: Metering::Home,
        billing: Span::Year,
        holidays: Holidays::default(),
        prices: vec![prices],
        findings: Vec::new(),
    }
}

fn flat(fuel: Fuel, rate: &str, standing: &str) -> Tariff {
    tariff(
        fuel,
        prices(vec![band("unit rate", Window::ALL_DAY, rate)], standing),
    )
}

fn evenly(kwh: f64, civil: &[CivilHour]) -> Vec<f64> {
    vec![kwh / civil.len() as f64; civil.len()]
}

fn price(tariff: &Tariff, civil: &[CivilHour], kwh: &[f64]) -> Bill {
    bill::price(tariff, civil, kwh, Connection::Kept).unwrap()
}

/// The standing charge goes with the connection, the energy used before does not.
#[test]
fn a_standing_charge_ends_with_the_connection() {
    let civil = year(2023);
    let gas = flat(Fuel::Gas, "0.0574", "0.2909");
    let none = vec![0.0; civil.len()];
    let kept = bill::price(&gas, &civil, &none, Connection::Kept).unwrap();
    let ended = bill::price(&gas, &civil, &none, Connection::Ended).unwrap();
    assert_eq!(kept.total(), decimal("106.18"));
    assert_eq!(ended.total(), decimal("0.00"));
    assert!(ended.lines.is_empty());
}

/// A leap year has a day more of standing charge: 366 × 0.5721 = 209.3886.
#[test]
fn standing_charges_count_civil_days() {
    let tariff = flat(Fuel::Electricity, "0.2467", "0.5721");
    let standing = |civil: &[CivilHour]| price(&tariff, civil, &evenly(1.0, civil)).standing();
    assert_eq!(standing(&year(2024)), decimal("209.39"));
    // A UTC year seen by a clock an hour ahead touches 366 dates; it is still 365 days and one bill.
    let zone: chrono_tz::Tz = "Europe/Berlin".parse().unwrap();
    let start = "2023-01-01T00:00:00Z".parse().unwrap();
    let civil = HourAxis { start, hours: 8760 }.civil(zone);
    let bill = price(&tariff, &civil, &evenly(1.0, &civil));
    assert_eq!(bill.standing(), decimal("208.82"));
    assert_eq!(bill.lines.len(), 2);
    assert_eq!(bill.months.len(), 12);
    // And one three and a half hours behind.
    let zone: chrono_tz::Tz = "America/St_Johns".parse().unwrap();
    let civil = HourAxis { start, hours: 8760 }.civil(zone);
    assert_eq!(
        price(&tariff, &civil, &evenly(1.0, &civil)).standing(),
        decimal("208.82")
    );
}

/// Half-hour bands by hand: 1 kWh each hour of 2023 (365 days; London changes clocks at 01:00 UTC, so the night loses
/// an hour in March and gains one in October). 00:30–05:30 is 5 h a day: 365 × 5 = 1825 kWh, less the hour 01:00–02:00
/// that 26 March skips, plus the one that 29 October repeats: 1825.
#[test]
fn bands_that_begin_at_half_past_share_the_hour() {
    let civil = year(2023);
    let night = Window::new(30, 330).unwrap();
    let day = Window::new(330, 30).unwrap();
    let tariff = tariff(
        Fuel::Electricity,
        prices(
            vec![band("night", night, "0.09"), band("day", day, "0.30")],
            "0",
        ),
    );
    let bill = price(&tariff, &civil, &vec![1.0; civil.len()]);
    let kwh = |what| {
        bill.lines
            .iter()
            .find(|line| line.what == what)
            .unwrap()
            .quantity
    };
    assert_eq!(
        (kwh("night"), kwh("day")),
        (decimal("1825"), decimal("6935"))
    );
    // In January (no clock change) 5 of 24.
    let column = tariff.price_column(&civil[..24], None).unwrap();
    assert!((column[0] - 0.195).abs() < 1e-12 && (column[3] - 0.09).abs() < 1e-12);
    assert!((column.iter().sum::<f64>() / 24.0 - (5.0 * 0.09 + 19.0 * 0.30) / 24.0).abs() < 1e-12);
}

/// Trap: load stamped at the end of the hour, read as its beginning. Shifted by one hour the heat is the same and the
/// cost is not: 1 kWh at 23:00–24:00 every day costs 0.09, an hour earlier 0.30.
#[test]
fn a_shift_of_one_hour_moves_the_cost_but_not_the_energy() {
    let civil = year(2023);
    let night = Window::new(23 * 60, 7 * 60).unwrap();
    let day = Window::new(7 * 60, 23 * 60).unwrap();
    let tariff = tariff(
        Fuel::Electricity,
        prices(
            vec![band("night", night, "0.09"), band("day", day, "0.30")],
            "0",
        ),
    );
    let at = |hour: u8| -> Vec<f64> {
        civil
            .iter()
            .map(|c| f64::from(u8::from(c.hour == hour)))
            .collect()
    };
    let (right, shifted) = (at(23), at(22));
    assert_eq!(right.iter().sum::<f64>(), shifted.iter().sum::<f64>());
    assert_eq!(price(&tariff, &civil, &right).energy(), decimal("32.85"));
    assert_eq!(price(&tariff, &civil, &shifted).energy(), decimal("109.50"));
}

fn stepped(every: Span) -> Tariff {
    let step = |label: &str, up_to_kwh, amount| Step {
        label: label.to_owned(),
        up_to_kwh,
        rate: Rate::per_kwh(decimal(amount)),
    };
    let mut list = prices(vec![], "0");
    list.steps = Some(Steps {
        every,
        steps: vec![
            step("first 100 kWh", Some(100.0), "0.10"),
            step("next 200 kWh", Some(300.0), "0.20"),
            step("above 300 kWh", None, "0.40"),
        ],
    });
    tariff(Fuel::Electricity, list)
}

/// By hand: January 350 kWh, February 150, March 0, rest 0. Monthly steps: 100 + 100 at 0.10, 200 + 50 at 0.20, 50 at
/// 0.40 = 20 + 50 + 20 = 90. By quarter 500 kWh at once: 10 + 40 + 80 = 130.
#[test]
fn steps_start_again_every_period() {
    let civil = year(2023);
    let mut kwh = vec![0.0; civil.len()];
    kwh[10] = 350.0;
    kwh[40 * 24] = 150.0;
    let total = |every| price(&stepped(every), &civil, &kwh).total();
    assert_eq!(total(Span::Month), decimal("90.00"));
    assert_eq!(total(Span::Quarter), decimal("130.00"));
    assert_eq!(total(Span::Year), decimal("130.00"));
    // February's share of the quarter is what it added: 150 kWh, all above 300.
    let months = price(&stepped(Span::Quarter), &civil, &kwh).months;
    assert_eq!(
        (months[0].amount, months[1].amount),
        (decimal("70.00"), decimal("60.00"))
    );
}

/// The signal takes the step that an even year reaches: 3000 kWh a year are 250 a month, in the second step.
#[test]
fn the_signal_takes_the_expected_step() {
    let civil = year(2023);
    let tariff = stepped(Span::Month);
    let at = |expected| tariff.price_column(&civil, expected).unwrap()[0];
    assert_eq!(
        (at(None), at(Some(3000.0)), at(Some(9000.0))),
        (0.10, 0.20, 0.40)
    );
    // The gap to the bill: 250 kWh a month cost 10 + 30 = 40, the signal says 50.
    let meter = tariff.meter(&civil).unwrap();
    let mut reading = meter.zero();
    for (hour, c) in civil.iter().enumerate() {
        if c.hour == 0 && c.date.to_string().ends_with("-01") {
            reading.record(
                &meter,
                hour,
                Flows {
                    import_kwh: 250.0,
                    export_kwh: 0.0,
                },
            );
        }
    }
    let bill = bill::price_reading(&tariff, &meter, &reading, Connection::Kept).unwrap();
    assert_eq!(bill.energy(), decimal("480.00"));
    assert!((meter.signal_cost(&tariff, &reading, Some(3000.0)) - 600.0).abs() < 1e-9);
}

/// Peaks by hand: 6 kW one January evening, 9 kW one January night, 4 kW one July evening; 5.00 per kW and month for
/// the hours 16:00–20:00 on weekdays: (6 + 4) × 5.00 = 50.00.
#[test]
fn demand_counts_the_highest_hour_inside_its_window() {
    let civil = year(2023);
    let mut list = prices(vec![], "0");
    list.bands = vec![band("unit rate", Window::ALL_DAY, "0")];
    list.demand = Some(Demand {
        amount: decimal("5"),
        when: When {
            window: Window::new(16 * 60, 20 * 60).unwrap(),
            ..When::ALWAYS
        },
    });
    let tariff = tariff(Fuel::Electricity, list);
    let mut kwh = vec![0.0; civil.len()];
    kwh[9 * 24 + 17] = 6.0;
    kwh[9 * 24 + 18] = 5.0;
    kwh[10 * 24 + 3] = 9.0;
    let july = civil
        .iter()
        .position(|c| c.date == NaiveDate::from_ymd_opt(2023, 7, 4).unwrap() && c.hour == 16);
    kwh[july.unwrap()] = 4.0;
    assert_eq!(price(&tariff, &civil, &kwh).demand(), decimal("50.00"));
}

/// Half of January 2023 has half of its demand charge: 4 kW × 15.5/31 × 5.00 = 10.00.
#[test]
fn a_part_month_pays_its_share_of_the_demand_charge() {
    let mut list = prices(vec![band("unit rate", Window::ALL_DAY, "0")], "0");
    list.demand = Some(Demand {
        amount: decimal("5"),
        when: When::ALWAYS,
    });
    let tariff = tariff(Fuel::Electricity, list);
    let civil = &year(2023)[..372];
    assert_eq!(
        price(&tariff, civil, &vec![4.0; 372]).demand(),
        decimal("10.00")
    );
}

/// Newfoundland is three and a half hours behind UTC, so hours begin at half past: the hour from Friday 23:30 is half
/// on Saturday. 6 January 2023 was a Friday. 2 kWh at 0.30 on weekdays and 0.10 at weekends: 0.30 + 0.10.
#[test]
fn an_hour_over_midnight_takes_each_day_s_price() {
    let days = |label: &str, days, amount: &str| Band {
        when: When {
            days,
            ..When::ALWAYS
        },
        ..band(label, Window::ALL_DAY, amount)
    };
    let list = prices(
        vec![
            days("weekday", Days::WEEKDAYS, "0.30"),
            days("weekend", Days::WEEKENDS, "0.10"),
        ],
        "0",
    );
    let tariff = tariff(Fuel::Electricity, list);
    let start = "2023-01-07T03:00:00Z".parse().unwrap();
    let civil = HourAxis { start, hours: 1 }.civil(chrono_tz::America::St_Johns);
    assert_eq!((civil[0].hour, civil[0].minute), (23, 30));
    let bill = price(&tariff, &civil, &[2.0]);
    assert_eq!(bill.lines.len(), 2 + 1);
    assert_eq!(bill.total(), decimal("0.40"));
}

/// From 1 July another price: 1 kWh an hour, 4344 h at 0.20 before (the clock change is in March), 4416 h at 0.30 after.
#[test]
fn a_tariff_that_changes_in_the_year_is_billed_as_it_changed() {
    let civil = year(2023);
    let mut tariff = flat(Fuel::Electricity, "0.20", "0.50");
    let mut later = prices(vec![band("unit rate", Window::ALL_DAY, "0.30")], "0.60");
    later.valid_from = NaiveDate::from_ymd_opt(2023, 7, 1);
    tariff.prices.push(later);
    let bill = price(&tariff, &civil, &vec![1.0; civil.len()]);
    let amounts: Vec<_> = bill
        .lines
        .iter()
        .map(|line| line.amount.to_string())
        .collect();
    // (181 × 24 − 1) × 0.20, (184 × 24 + 1) × 0.30, 181 × 0.50, 184 × 0.60.
    assert_eq!(amounts, ["868.60", "1325.10", "90.50", "110.40"]);
}

/// What is fed back is credited without tax: 100 kWh at 0.15.
#[test]
fn export_is_a_credit() {
    let civil = year(2023);
    let mut tariff = flat(Fuel::Electricity, "0.25", "0");
    tariff.prices[0].export = Some(Rate::per_kwh(decimal("0.15")));
    let meter = tariff.meter(&civil).unwrap();
    let mut reading = meter.zero();
    reading.record(&meter, 12, Flows::net(40.0, 140.0));
    reading.record(&meter, 20, Flows::net(60.0, 0.0));
    let bill = bill::price_reading(&tariff, &meter, &reading, Connection::Kept).unwrap();
    assert_eq!(bill.export(), Some(decimal("-15.00")));
    assert_eq!(bill.total(), decimal("0.00"));
}

#[test]
fn a_load_that_is_not_a_number_is_refused() {
    let civil = year(2023);
    let tariff = flat(Fuel::Electricity, "0.25", "0");
    for bad in [f64::NAN, f64::INFINITY, -1.0] {
        let mut kwh = evenly(1.0, &civil);
        kwh[5] = bad;
        assert!(
            bill::price(&tariff, &civil, &kwh, Connection::Kept).is_err(),
            "{bad}"
        );
    }
}

/// A tariff with everything: two bands, steps on top, tax, demand, a change in the year.
fn rich() -> impl Strategy<Value = Tariff> {
    let amounts = prop::collection::vec(0i64..50_000, 8);
    (
        amounts,
        1u16..1440,
        0u16..1440,
        0usize..3,
        0i64..100,
        prop::bool::ANY,
    )
        .prop_map(|(amounts, from, to, span, tax, included)| {
            let at = |i: usize| Decimal::new(amounts[i], 5);
            let to = if to == from % 1440 { to + 1 } else { to };
            let cheap = Window::new(from, to).unwrap();
            let dear = Window::new(to, from).unwrap();
            let every = [Span::Month, Span::Quarter, Span::Year][span];
            let list = |valid_from, i: usize| {
                let rated = |label, window, i| Band {
                    rate: Rate::per_kwh(at(i)),
                    ..band(label, window, "0")
                };
                let mut list = prices(
                    vec![rated("cheap", cheap, i), rated("dear", dear, i + 1)],
                    "0.4",
                );
                list.valid_from = valid_from;
                list.steps = Some(Steps {
                    every,
                    steps: vec![
                        Step {
                            label: "first".into(),
                            up_to_kwh: Some(400.0),
                            rate: Rate::per_kwh(at(i + 2)),
                        },
                        Step {
                            label: "rest".into(),
                            up_to_kwh: None,
                            rate: Rate::per_kwh(at(i + 3)),
                        },
                    ],
                });
                list.demand = Some(Demand {
                    amount: at(i) * Decimal::TEN,
                    when: When::ALWAYS,
                });
                list.tax = Tax {
                    share: Some(Decimal::new(tax, 2)),
                    covers: Covers::ALL,
                    included,
                };
                list
            };
            let mut tariff = tariff(Fuel::Electricity, list(None, 0));
            tariff
                .prices
                .push(list(NaiveDate::from_ymd_opt(2023, 5, 17), 4));
            tariff.billing = every;
            tariff
        })
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(24))]

    /// Total = its lines = its months; and the price signal adds up to the clock part of the bill.
    #[test]
    fn a_bill_equals_its_lines_and_its_months(tariff in rich(), seed in 1u64..1000) {
        let civil = year(2023);
        let kwh: Vec<f64> = (0..civil.len() as u64)
            .map(|i| ((i * seed * 2_654_435_761) % 1000) as f64 / 250.0)
            .collect();
        let bill = price(&tariff, &civil, &kwh);
        let lines: Decimal = bill.lines.iter().map(|line| line.amount).sum();
        let months: Decimal = bill.months.iter().map(|month| month.amount).sum();
        prop_assert_eq!(bill.total(), lines);
        prop_assert_eq!(bill.total(), months);
        prop_assert_eq!(bill.months.len(), 12);
        prop_assert_eq!(bill.year(2023), bill.total());
        let bands = bill.lines.iter().filter(|line| ["cheap", "dear"].contains(&line.what.as_str()));
        let metered: Decimal = bands.map(|line| line.quantity).sum();
        let used: f64 = kwh.iter().sum();
        prop_assert!((metered - Decimal::from_f64_retain(used).unwrap()).abs() < decimal("0.001"));
    }

    /// A higher rate never lowers the cost of the same kilowatt-hours.
    #[test]
    fn a_higher_rate_never_costs_less(tariff in rich(), more in 0i64..10_000, which in 0usize..2) {
        let civil = year(2023);
        let kwh = evenly(9000.0, &civil);
        let before = price(&tariff, &civil, &kwh).total();
        let mut dearer = tariff.clone();
        dearer.prices[0].bands[which].rate.amount += Decimal::new(more, 5);
        prop_assert!(price(&dearer, &civil, &kwh).total() >= before);
    }
}

/// The two routes: hours kept and priced one by one, here in the test with plain floating point and without the
/// meter's buckets, against the sums that a run keeps.
#[test]
fn sums_by_bucket_give_the_bill_of_the_hours() {
    let civil = year(2024);
    let night = Window::new(23 * 60 + 30, 5 * 60 + 30).unwrap();
    let day = Window::new(5 * 60 + 30, 23 * 60 + 30).unwrap();
    let tariff = tariff(
        Fuel::Electricity,
        prices(
            vec![band("night", night, "0.0913"), band("day", day, "0.3127")],
            "0.47",
        ),
    );
    let kwh: Vec<f64> = (0..civil.len())
        .map(|i| 1.0 + (i as f64 * 0.37).sin())
        .collect();
    let cost: f64 = civil
        .iter()
        .zip(&kwh)
        .map(|(c, kwh)| {
            let rate = match c.hour {
                0..=4 => 0.0913,
                5 | 23 => (0.0913 + 0.3127) / 2.0,
                _ => 0.3127,
            };
            kwh * rate
        })
        .sum();
    let bill = price(&tariff, &civil, &kwh);
    let energy = bill.energy().to_string().parse::<f64>().unwrap();
    // Two lines, each rounded to a cent.
    assert!((energy - cost).abs() <= 0.01, "{energy} {cost}");
    assert!(bill.lines.iter().all(|line| line.charge != Charge::Tax));
}
