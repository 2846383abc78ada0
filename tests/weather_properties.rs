//! What must hold for any weather file: bytes in give an answer or an error, and what we write reads back the same.
#![cfg(test)]

use chrono::{TimeZone, Utc};
use proptest::prelude::*;
use winterledger::calendar::HourAxis;
use winterledger::weather::{
    Column, ColumnChoice, Kind, ReadOptions, RepairPolicy, Rule, StampMarks, Weather, Zone,
    degree_days, describe, read_bytes, to_csv,
};

/// Outdoor air that wanders by less than the 10 K a check takes for a fault of the sensor.
fn wandering() -> impl Strategy<Value = Vec<f64>> {
    (-15.0f64..20.0, prop::collection::vec(-4.0f64..4.0, 2..200)).prop_map(|(start, steps)| {
        let mut c = start;
        steps
            .into_iter()
            .map(|step| {
                c = (c + step).clamp(-55.0, 50.0);
                c
            })
            .collect()
    })
}

/// Weather whose hours begin with those of a clock that is `offset` half-hours off UTC.
fn weather(outdoor_c: Vec<f64>, hour: i64, offset: i32, share: Option<f64>) -> Weather {
    let hours = outdoor_c.len();
    let phase = i64::from(offset).rem_euclid(2) * 1800;
    Weather {
        file: "made".to_owned(),
        axis: HourAxis {
            start: Utc
                .timestamp_opt(1_672_531_200 + hour * 3600 + phase, 0)
                .unwrap(),
            hours,
        },
        zone: Zone::Fixed(chrono::FixedOffset::east_opt(offset * 1800).unwrap()),
        kind: Kind::Measured,
        relative_humidity: share
            .map(|share| (0..hours).map(|i| share * (i % 7) as f64 / 7.0).collect()),
        global_w_per_m2: share
            .map(|share| (0..hours).map(|i| share * (i % 24) as f64 * 30.0).collect()),
        wind_m_per_s: share.map(|share| vec![share * 9.0; hours]),
        outdoor_c,
        repaired: vec![false; hours],
        missing_hours: 0,
        duplicate_hours: 0,
        joined_hours: 0,
        findings: Vec::new(),
    }
}

fn options() -> impl Strategy<Value = ReadOptions> {
    let zones = prop::sample::select(vec![
        "UTC",
        "-05:00",
        "+05:30",
        "Europe/London",
        "America/New_York",
    ]);
    let columns = prop::sample::select(vec![
        ColumnChoice::default(),
        ColumnChoice {
            time: Some(Column::Numbered(1)),
            temperature: Some(Column::Numbered(2)),
            ..Default::default()
        },
        ColumnChoice {
            temperature: Some(Column::Numbered(9)),
            ..Default::default()
        },
    ]);
    (
        prop::option::of(zones),
        columns,
        prop::option::of(0usize..4),
        prop::option::of(prop::sample::select(vec![b',', b';', b'\t'])),
        any::<bool>(),
        any::<bool>(),
    )
        .prop_map(
            |(zone, columns, skip_lines, delimiter, fill_longer, ending)| ReadOptions {
                zone: zone.map(|zone| zone.parse().unwrap()),
                columns,
                skip_lines,
                delimiter,
                decimal_comma: ending.then_some(true),
                stamp_marks: ending.then_some(StampMarks::Ending),
                repair: RepairPolicy {
                    fill_longer,
                    ..Default::default()
                },
                ..Default::default()
            },
        )
}

/// A change to a file's bytes.
#[derive(Debug, Clone)]
enum Edit {
    Put(usize, u8),
    Cut(usize, usize),
    Repeat(usize, usize),
}

fn edits() -> impl Strategy<Value = Vec<Edit>> {
    let telling = prop::sample::select(b"0159-+.,;:/TZ \n\r\"#\xff\0\xb0e".to_vec());
    prop::collection::vec(
        prop_oneof![
            (any::<usize>(), telling).prop_map(|(at, byte)| Edit::Put(at, byte)),
            (any::<usize>(), 0usize..200).prop_map(|(at, length)| Edit::Cut(at, length)),
            (any::<usize>(), 0usize..200).prop_map(|(at, length)| Edit::Repeat(at, length)),
        ],
        0..12,
    )
}

fn edited(mut bytes: Vec<u8>, edits: &[Edit]) -> Vec<u8> {
    for edit in edits {
        let length = bytes.len().max(1);
        let span = |at: usize, n: usize| at % length..(at % length + n).min(bytes.len());
        match *edit {
            Edit::Put(at, byte) => {
                if let Some(slot) = bytes.get_mut(at % length) {
                    *slot = byte;
                }
            }
            Edit::Cut(at, n) if span(at, n).start < bytes.len() => {
                bytes.drain(span(at, n));
            }
            Edit::Repeat(at, n) if span(at, n).start < bytes.len() => {
                let copy = bytes[span(at, n)].to_vec();
                bytes.extend(copy);
            }
            _ => {}
        }
    }
    bytes
}

/// An answer is complete and physical; an error says something.
fn assert_sound(bytes: &[u8], options: &ReadOptions) -> Result<(), TestCaseError> {
    match read_bytes("any", bytes, options) {
        Ok(weather) => {
            prop_assert_eq!(weather.outdoor_c.len(), weather.axis.hours);
            prop_assert_eq!(weather.repaired.len(), weather.axis.hours);
            prop_assert_eq!(weather.repaired_hours(), weather.missing_hours);
            prop_assert!(weather.outdoor_c.iter().all(|c| (-60.0..=55.0).contains(c)));
            for share in weather.relative_humidity.iter().flatten() {
                prop_assert!((0.0..=1.0).contains(share));
            }
            let days = weather.days();
            prop_assert_eq!(
                days.iter().map(|(_, day)| day.len()).sum::<usize>(),
                weather.axis.hours
            );
            let years = weather.years();
            prop_assert_eq!(
                years.iter().map(|(_, year)| year.len()).sum::<usize>(),
                weather.axis.hours
            );
            prop_assert!(describe(std::slice::from_ref(&weather), &[15.5]).is_some());
        }
        Err(problems) => {
            prop_assert!(!problems.is_empty());
            prop_assert!(
                problems
                    .iter()
                    .all(|p| !p.found.is_empty() && p.place.file.is_some())
            );
        }
    }
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 400, ..Default::default() })]

    #[test]
    fn any_bytes_give_an_answer_or_an_error(bytes in prop::collection::vec(any::<u8>(), 0..600), options in options()) {
        assert_sound(&bytes, &options)?;
    }

    #[test]
    fn any_text_of_telling_characters_does_too(text in "[0-9:;,./TZ \\-\\n\"#tempi]{0,400}", options in options()) {
        assert_sound(text.as_bytes(), &options)?;
    }

    #[test]
    fn a_damaged_file_does_too(outdoor_c in wandering(), edits in edits(), options in options()) {
        let text = to_csv(&weather(outdoor_c, 0, 0, Some(0.5)), &["made for a test".to_owned()]);
        assert_sound(&edited(text.into_bytes(), &edits), &options)?;
    }

    #[test]
    fn what_we_write_reads_back_the_same(
        outdoor_c in wandering(),
        hour in 0i64..9000,
        offset in -20i32..=20,
        share in prop::option::of(0.0f64..=1.0),
    ) {
        let written = weather(outdoor_c, hour, offset, share);
        let again = read_bytes("made", to_csv(&written, &[]).as_bytes(), &ReadOptions::default()).unwrap();
        prop_assert_eq!(again.axis, written.axis);
        prop_assert_eq!(again.zone, written.zone);
        prop_assert_eq!(again.outdoor_c, written.outdoor_c);
        prop_assert_eq!(again.relative_humidity, written.relative_humidity);
        prop_assert_eq!(again.global_w_per_m2, written.global_w_per_m2);
        prop_assert_eq!(again.wind_m_per_s, written.wind_m_per_s);
    }

    /// A mean of positive parts is at least the positive part of the mean, so hours never give fewer degree-days than days;
    /// and a higher base never gives fewer.
    #[test]
    fn degree_days_keep_their_order(mut outdoor_c in wandering(), base in 0.0f64..20.0) {
        // Whole days, since a cut one counts by its share of 24 hours.
        outdoor_c.resize(outdoor_c.len().next_multiple_of(24), 3.0);
        let weather = weather(outdoor_c, 0, 0, None);
        let of = |base, rule| degree_days(&weather, 0..weather.axis.hours, base, rule);
        prop_assert!(of(base, Rule::Hourly) >= of(base, Rule::DailyMean) - 1e-9);
        for rule in Rule::ALL {
            prop_assert!(of(base + 1.0, rule) >= of(base, rule) - 1e-9, "{}", rule);
        }
    }
}
