//! The three climates and four applications of EN 14825 and EU 811/2013 and 813/2013.

use crate::document::Word;

/// A heating-season climate.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Climate {
    /// Design outdoor temperature −10 °C.
    Average,
    /// −22 °C.
    Colder,
    /// +2 °C.
    Warmer,
}

impl Word for Climate {
    const NAME: &'static str = "a climate";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("average", Self::Average),
        ("colder", Self::Colder),
        ("warmer", Self::Warmer),
    ];
}

/// How hot the water is at the design outdoor temperature.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Application {
    /// 35 °C.
    Low,
    /// 45 °C.
    Intermediate,
    /// 55 °C.
    Medium,
    /// 65 °C.
    High,
}

impl Word for Application {
    const NAME: &'static str = "an application";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("low", Self::Low),
        ("intermediate", Self::Intermediate),
        ("medium", Self::Medium),
        ("high", Self::High),
    ];
}

/// Outdoor temperature at which the load of the rating is zero, °C.
pub const BALANCE_C: f64 = 16.0;

/// Hours a year in the modes that take power without heating, heating-only machine.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ModeHours {
    /// Thermostat off.
    pub thermostat_off: f64,
    /// Standby.
    pub standby: f64,
    /// Crankcase heater.
    pub crankcase: f64,
    /// Off.
    pub off: f64,
}

/// Bin hours of the average climate, −10 to 15 °C (Regulation (EU) 813/2013, read there).
const AVERAGE: [u16; 26] = [
    1, 25, 23, 24, 27, 68, 91, 89, 165, 173, 240, 280, 320, 357, 356, 303, 330, 326, 348, 335, 315,
    215, 169, 151, 105, 74,
];
/// Bin hours of the colder climate, −22 to 15 °C.
const COLDER: [u16; 38] = [
    1, 6, 13, 17, 19, 26, 39, 41, 35, 52, 37, 41, 43, 54, 90, 125, 169, 195, 278, 306, 454, 385,
    490, 533, 380, 228, 261, 279, 229, 269, 233, 230, 243, 191, 146, 150, 97, 61,
];
/// Bin hours of the warmer climate, 2 to 15 °C.
const WARMER: [u16; 14] = [
    3, 22, 63, 63, 175, 162, 259, 360, 428, 430, 503, 444, 384, 294,
];

impl Climate {
    /// Its word.
    pub fn word(self) -> &'static str {
        let held = Self::WORDS.iter().find(|(_, value)| *value == self);
        held.map_or("", |(word, _)| word)
    }

    /// Every climate.
    pub const ALL: [Self; 3] = [Self::Average, Self::Colder, Self::Warmer];

    /// Design outdoor temperature Tdesignh, °C.
    pub fn design_c(self) -> f64 {
        match self {
            Self::Average => -10.0,
            Self::Colder => -22.0,
            Self::Warmer => 2.0,
        }
    }

    /// Largest bivalent temperature allowed, °C.
    pub fn largest_bivalent_c(self) -> f64 {
        match self {
            Self::Average => 2.0,
            Self::Colder => -7.0,
            Self::Warmer => 7.0,
        }
    }

    /// Largest operation limit TOL allowed, °C.
    pub fn largest_operation_limit_c(self) -> f64 {
        match self {
            Self::Average => -7.0,
            Self::Colder => -15.0,
            Self::Warmer => 2.0,
        }
    }

    /// Outdoor temperature (°C) and hours of every bin, the coldest first.
    pub fn bins(self) -> impl Iterator<Item = (f64, f64)> {
        let hours: &'static [u16] = match self {
            Self::Average => &AVERAGE,
            Self::Colder => &COLDER,
            Self::Warmer => &WARMER,
        };
        let coldest = self.design_c();
        hours
            .iter()
            .enumerate()
            .map(move |(i, hours)| (coldest + i as f64, f64::from(*hours)))
    }

    /// Hours of the idle modes, heating only (EN 14825 \[from memory\]).
    pub fn mode_hours(self) -> ModeHours {
        let [thermostat_off, standby, crankcase, off] = match self {
            Self::Average => [178.0, 0.0, 3850.0, 3672.0],
            Self::Colder => [106.0, 0.0, 2314.0, 2208.0],
            Self::Warmer => [754.0, 0.0, 5170.0, 4416.0],
        };
        ModeHours {
            thermostat_off,
            standby,
            crankcase,
            off,
        }
    }

    /// Part-load ratio at an outdoor temperature: `(Tj − 16)/(Tdesignh − 16)`, EN 14825.
    pub fn part_load_ratio(self, outdoor_c: f64) -> f64 {
        (outdoor_c - BALANCE_C) / (self.design_c() - BALANCE_C)
    }
}

/// Flow temperatures by outdoor temperature, °C, the coldest first.
type Curve = &'static [(f64, f64)];

impl Application {
    /// Its word.
    pub fn word(self) -> &'static str {
        let held = Self::WORDS.iter().find(|(_, value)| *value == self);
        held.map_or("", |(word, _)| word)
    }

    /// Every application.
    pub const ALL: [Self; 4] = [Self::Low, Self::Intermediate, Self::Medium, Self::High];

    /// Flow temperature at an outdoor temperature, °C, for a machine whose flow temperature follows the weather: the
    /// variable-outlet columns of EN 14825 (\[from memory\]; colder and warmer intermediate from memory besides, colder
    /// high taken from the average column at the same part-load ratio). Straight lines between, level in the cold,
    /// continued above 12 °C as the method continues COP.
    pub fn flow_c(self, climate: Climate, outdoor_c: f64) -> f64 {
        let curve: Curve = match (climate, self) {
            (Climate::Average, Self::Low) => AVERAGE_LOW,
            (Climate::Average, Self::Intermediate) => AVERAGE_INTERMEDIATE,
            (Climate::Average, Self::Medium) => AVERAGE_MEDIUM,
            (Climate::Average, Self::High) => AVERAGE_HIGH,
            (Climate::Colder, Self::Low) => COLDER_LOW,
            (Climate::Colder, Self::Intermediate) => COLDER_INTERMEDIATE,
            (Climate::Colder, Self::Medium) => COLDER_MEDIUM,
            (Climate::Colder, Self::High) => COLDER_HIGH,
            (Climate::Warmer, Self::Low) => WARMER_LOW,
            (Climate::Warmer, Self::Intermediate) => WARMER_INTERMEDIATE,
            (Climate::Warmer, Self::Medium) => WARMER_MEDIUM,
            (Climate::Warmer, Self::High) => WARMER_HIGH,
        };
        straight_lines(curve, outdoor_c)
    }
}

const AVERAGE_LOW: Curve = &[
    (-10.0, 35.0),
    (-7.0, 34.0),
    (2.0, 30.0),
    (7.0, 27.0),
    (12.0, 24.0),
];
const AVERAGE_INTERMEDIATE: Curve = &[
    (-10.0, 45.0),
    (-7.0, 43.0),
    (2.0, 37.0),
    (7.0, 33.0),
    (12.0, 28.0),
];
const AVERAGE_MEDIUM: Curve = &[
    (-10.0, 55.0),
    (-7.0, 52.0),
    (2.0, 42.0),
    (7.0, 36.0),
    (12.0, 30.0),
];
const AVERAGE_HIGH: Curve = &[
    (-10.0, 65.0),
    (-7.0, 61.0),
    (2.0, 49.0),
    (7.0, 41.0),
    (12.0, 32.0),
];
const COLDER_LOW: Curve = &[
    (-22.0, 35.0),
    (-15.0, 32.0),
    (-7.0, 30.0),
    (2.0, 27.0),
    (7.0, 25.0),
    (12.0, 24.0),
];
const COLDER_INTERMEDIATE: Curve = &[
    (-22.0, 45.0),
    (-15.0, 41.0),
    (-7.0, 38.0),
    (2.0, 33.0),
    (7.0, 30.0),
    (12.0, 26.0),
];
const COLDER_MEDIUM: Curve = &[
    (-22.0, 55.0),
    (-15.0, 49.0),
    (-7.0, 44.0),
    (2.0, 37.0),
    (7.0, 32.0),
    (12.0, 28.0),
];
const COLDER_HIGH: Curve = &[
    (-22.0, 65.0),
    (-15.0, 59.0),
    (-7.0, 51.0),
    (2.0, 42.0),
    (7.0, 36.0),
    (12.0, 30.0),
];
const WARMER_LOW: Curve = &[(2.0, 35.0), (7.0, 31.0), (12.0, 26.0)];
const WARMER_INTERMEDIATE: Curve = &[(2.0, 45.0), (7.0, 39.0), (12.0, 31.0)];
const WARMER_MEDIUM: Curve = &[(2.0, 55.0), (7.0, 46.0), (12.0, 34.0)];
const WARMER_HIGH: Curve = &[(2.0, 65.0), (7.0, 53.0), (12.0, 39.0)];

/// Level below the first point, straight lines between, the last continued.
fn straight_lines(curve: Curve, at: f64) -> f64 {
    let mut value = f64::NAN;
    for pair in curve.windows(2) {
        if let [(x0, y0), (x1, y1)] = pair {
            value = y0 + ((at - x0) / (x1 - x0)).max(0.0) * (y1 - y0);
            if at <= *x1 {
                break;
            }
        }
    }
    value
}

#[cfg(test)]
mod tests {
    use super::*;

    /// EU 811/2013 and 813/2013: total bin hours and equivalent full-load hours of the three climates (read in
    /// the regulation: 4910/6446/3590 and 2066/2465/1336).
    #[test]
    fn bin_hours_are_those_of_the_regulation() {
        for (climate, total, equivalent) in [
            (Climate::Average, 4910.0, 2066.0),
            (Climate::Colder, 6446.0, 2465.0),
            (Climate::Warmer, 3590.0, 1336.0),
        ] {
            let hours: f64 = climate.bins().map(|(_, h)| h).sum();
            assert_eq!(hours, total, "{climate:?}");
            let full: f64 = climate
                .bins()
                .map(|(t, h)| h * climate.part_load_ratio(t))
                .sum();
            // Printed in whole hours.
            assert!((full - equivalent).abs() < 0.5, "{climate:?} {full}");
            assert_eq!(climate.bins().last().map(|b| b.0), Some(15.0));
        }
    }

    /// Active hours, thermostat-off and off add up to the year in each climate (8760 h, by hand).
    #[test]
    fn modes_and_bins_fill_the_year() {
        for climate in Climate::ALL {
            let active: f64 = climate.bins().map(|(_, h)| h).sum();
            let modes = climate.mode_hours();
            assert_eq!(
                active + modes.thermostat_off + modes.off,
                8760.0,
                "{climate:?}"
            );
        }
    }

    /// EU 813/2013: medium-temperature application, average climate, outlet 52 °C at −7 °C.
    #[test]
    fn flow_temperatures_of_the_applications() {
        assert_eq!(Application::Medium.flow_c(Climate::Average, -7.0), 52.0);
        assert_eq!(Application::Low.flow_c(Climate::Average, -8.5), 34.5);
        // 39 °C at 12 °C, falling 14 K in 5.
        assert!((Application::High.flow_c(Climate::Warmer, 15.0) - 30.6).abs() < 1e-9);
        assert_eq!(Application::Low.flow_c(Climate::Colder, -30.0), 35.0);
        // Each column at the part-load ratio of another climate: one building, so within the 2 K of printed columns.
        for application in Application::ALL {
            for climate in [Climate::Colder, Climate::Warmer] {
                for outdoor_c in [-15.0, -7.0, 2.0, 7.0, 12.0] {
                    if outdoor_c < climate.design_c() {
                        continue;
                    }
                    let ratio = climate.part_load_ratio(outdoor_c);
                    let average_c = BALANCE_C + ratio * (Climate::Average.design_c() - BALANCE_C);
                    let here = application.flow_c(climate, outdoor_c);
                    let there = application.flow_c(Climate::Average, average_c);
                    assert!(
                        (here - there).abs() <= 2.0,
                        "{application:?} {climate:?} {outdoor_c}: {here} {there}"
                    );
                }
            }
        }
    }
}
