//! Moving weather to the home's own height, or by a stated offset.

use super::Weather;
use crate::bounds::Bound;
use crate::problem::{Place, Problem};

/// Fall of temperature with height in the standard atmosphere, K/km (ISO 2533).
pub const STANDARD_LAPSE_K_PER_KM: f64 = 6.5;
/// Differences of height for which one lapse rate may be used: common practice, no source.
const HEIGHT_M: Bound = Bound {
    label: "height difference",
    low: -2000.0,
    high: 2000.0,
    unit: "m",
};
/// Offsets beyond this are another climate: common practice, no source.
const OFFSET_K: Bound = Bound {
    label: "temperature offset",
    low: -15.0,
    high: 15.0,
    unit: "K",
};
const LAPSE_K_PER_KM: Bound = Bound {
    label: "lapse rate",
    low: 0.0,
    high: 10.0,
    unit: "K/km",
};

/// One change to the temperatures. Relative humidity, radiation and wind stay as they are.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Adjustment {
    /// The home lies this much higher than the station, and the air cools by the lapse rate.
    Height {
        /// Metres the home lies above the station; negative when it lies lower.
        higher_m: f64,
        /// Kelvin a kilometre, [`STANDARD_LAPSE_K_PER_KM`] unless better is known.
        lapse_k_per_km: f64,
    },
    /// The same number of kelvin in every hour.
    Offset(f64),
    /// A number of kelvin for each month, January first.
    Monthly([f64; 12]),
}

/// What an adjustment did, to be listed among the assumptions.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Adjusted {
    /// What was assumed.
    pub name: String,
    /// With which value.
    pub value: String,
    /// On what ground.
    pub from: String,
}

impl Weather {
    /// Changes the outdoor temperatures and says what was assumed.
    ///
    /// # Errors
    /// A height, a lapse rate or an offset that is out of bounds; the weather is then unchanged.
    pub fn adjust(&mut self, adjustment: &Adjustment) -> Result<Adjusted, Problem> {
        let check = |value: f64, bound: &Bound| {
            if bound.holds(value) {
                return Ok(());
            }
            Err(Problem::new(
                Place::field("weather"),
                format!("{value} {} is not possible as {}", bound.unit, bound.label),
                bound.words(),
                "",
            ))
        };
        match *adjustment {
            Adjustment::Height {
                higher_m,
                lapse_k_per_km,
            } => {
                check(higher_m, &HEIGHT_M)?;
                check(lapse_k_per_km, &LAPSE_K_PER_KM)?;
                let shift = -lapse_k_per_km * higher_m / 1000.0;
                self.outdoor_c.iter_mut().for_each(|c| *c += shift);
                Ok(Adjusted {
                    name: "outdoor temperature moved for height".to_owned(),
                    value: format!("{shift:+.2} K for {higher_m:+.0} m at {lapse_k_per_km} K/km"),
                    from: if lapse_k_per_km == STANDARD_LAPSE_K_PER_KM {
                        "standard atmosphere, ISO 2533".to_owned()
                    } else {
                        "the brief".to_owned()
                    },
                })
            }
            Adjustment::Offset(k) => {
                check(k, &OFFSET_K)?;
                self.outdoor_c.iter_mut().for_each(|c| *c += k);
                Ok(Adjusted {
                    name: "outdoor temperature moved".to_owned(),
                    value: format!("{k:+} K in every hour"),
                    from: "the brief".to_owned(),
                })
            }
            Adjustment::Monthly(by_month) => {
                for k in by_month {
                    check(k, &OFFSET_K)?;
                }
                for (date, hours) in self.days() {
                    let k = by_month[chrono::Datelike::month0(&date) as usize % 12];
                    self.outdoor_c[hours].iter_mut().for_each(|c| *c += k);
                }
                let values: Vec<_> = by_month.iter().map(|k| format!("{k:+}")).collect();
                Ok(Adjusted {
                    name: "outdoor temperature moved month by month".to_owned(),
                    value: format!("{} K from January to December", values.join(" ")),
                    from: "the brief".to_owned(),
                })
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::weather::{ReadOptions, read_bytes};

    fn two_months() -> Weather {
        let mut hourly = "time,temp (C)\n".to_owned();
        for hour in 0..32 * 24 {
            let month = if hour < 31 * 24 { 1 } else { 2 };
            let day = (hour / 24) % 31 + 1;
            hourly += &format!("2023-{month:02}-{day:02}T{:02}:00Z,5\n", hour % 24);
        }
        read_bytes("w", hourly.as_bytes(), &ReadOptions::default()).unwrap()
    }

    #[test]
    fn height_and_offsets_move_the_air_and_say_so() {
        let mut weather = two_months();
        let said = weather
            .adjust(&Adjustment::Height {
                higher_m: 200.0,
                lapse_k_per_km: STANDARD_LAPSE_K_PER_KM,
            })
            .unwrap();
        assert!((weather.outdoor_c[0] - 3.7).abs() < 1e-12);
        assert_eq!(said.value, "-1.30 K for +200 m at 6.5 K/km");
        let mut by_month = [0.0; 12];
        by_month[1] = 2.0;
        weather.adjust(&Adjustment::Monthly(by_month)).unwrap();
        assert!((weather.outdoor_c[31 * 24 - 1] - 3.7).abs() < 1e-12);
        assert!((weather.outdoor_c[31 * 24] - 5.7).abs() < 1e-12);
    }

    #[test]
    fn what_is_too_much_is_refused_and_nothing_moves() {
        let mut weather = two_months();
        let before = weather.clone();
        assert!(weather.adjust(&Adjustment::Offset(40.0)).is_err());
        assert!(weather.adjust(&Adjustment::Offset(f64::NAN)).is_err());
        assert!(
            weather
                .adjust(&Adjustment::Height {
                    higher_m: 9000.0,
                    lapse_k_per_km: 6.5
                })
                .is_err()
        );
        assert_eq!(weather, before);
    }
}
