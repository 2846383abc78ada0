//! From the weather that was read to what every system of a brief shares: whole years, with the humidity that frost needs.

use std::borrow::Cow;

use chrono::Datelike;
use chrono_tz::Tz;

use super::defaults;
use super::home::WeatherFacts;
use super::notes::Notes;
use crate::calendar::CivilHour;
use crate::problem::Finding;
use crate::source::{AnnualSwing, undisturbed_c};
use crate::units::{Diffusivity, parse};
use crate::weather::{Weather, describe, unfit_for_peak_load};
use crate::year::Site;

/// The weather that is run.
#[derive(Debug, Clone)]
pub(super) struct Used {
    /// Whole years, or all there is of less than one; its humidity measured or assumed.
    pub weather: Weather,
    /// What was found in the files, what was left out or assumed, and what this weather is not fit for.
    pub findings: Vec<Finding>,
}

/// Makes weather ready to be run.
pub(super) fn used(weather: Weather, notes: &mut Notes) -> Used {
    let (mut weather, left_out) = weather.in_whole_years();
    let (humidity, assumed) = weather.humidity_or_assumed();
    let supplied = match humidity {
        Cow::Borrowed(_) => None,
        Cow::Owned(supplied) => Some(supplied),
    };
    if assumed.is_some() {
        notes.add(
            "outdoor humidity",
            "dew point at the lowest temperature of the day",
            "FAO Irrigation and Drainage Paper 56, equation 48; the weather file has no humidity",
        );
    }
    let mut findings = weather.findings.clone();
    findings.extend(left_out);
    findings.extend(assumed);
    findings.extend(unfit_for_peak_load(&weather));
    weather.relative_humidity = supplied.or(weather.relative_humidity);
    Used { weather, findings }
}

impl Used {
    /// Weather and clock as the systems share them.
    pub fn into_site(self, zone: Tz) -> Site {
        let weather = self.weather;
        let civil = weather.axis.civil(zone);
        Site {
            axis: weather.axis,
            month0: civil
                .iter()
                .map(CivilHour::month0)
                .map(|month0| u8::try_from(month0).unwrap_or(0))
                .collect(),
            civil,
            years: weather.years(),
            outdoor_c: weather.outdoor_c,
            relative_humidity: weather.relative_humidity,
            global_w_per_m2: weather.global_w_per_m2,
            repaired: weather.repaired,
        }
    }
}

/// What the weather says about the home's design.
pub(super) fn facts(weather: &Weather) -> WeatherFacts {
    let described = describe(std::slice::from_ref(weather), &[]);
    WeatherFacts {
        // Weather that was read has hours, so there is a description.
        design_c: described.map_or(0.0, |described| described.design_99_6_c),
        has_radiation: weather.global_w_per_m2.is_some(),
        main_c: main_c(weather),
    }
}

/// Ground at the depth of a water main in the middle of each month, °C.
fn main_c(weather: &Weather) -> Option<[f64; 12]> {
    /// Depth of a water main, m. Common practice, no source.
    const DEPTH_M: f64 = 1.0;
    /// Water does not come frozen, °C.
    const LEAST_C: f64 = 4.0;
    const HOURS_PER_MONTH: f64 = 8760.0 / 12.0;
    let wave = AnnualSwing::fit(&weather.outdoor_c)?;
    let diffusivity = parse::<Diffusivity>(defaults::SOIL_DIFFUSIVITY.value)
        .ok()?
        .m2_per_s();
    // The axis may begin in any month: its first hour stands for the middle of the month it lies in.
    let first0 = weather.axis.start.month0() as usize;
    let mut months = [0.0; 12];
    for i in 0..12 {
        let hour = (i as f64 + 0.5) * HOURS_PER_MONTH;
        months[(first0 + i) % 12] = undisturbed_c(&wave, DEPTH_M, diffusivity, hour).max(LEAST_C);
    }
    Some(months)
}
