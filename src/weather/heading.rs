//! What a column heading means.
//!
//! A heading is split into words and a unit. A quantity is recognised when every word belongs to its vocabulary and
//! one of them is decisive, so that "Dry-bulb (C)" is the air temperature and "Dry-bulb source" is nothing we know.

/// What a column can hold.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Role {
    /// Date and time together.
    Stamp,
    /// A heading "date": a date, or a date with its time.
    Date,
    /// A heading "time": a time of day, or a date with its time.
    Time,
    /// Year, month, day, hour, minute in columns of their own.
    Year,
    Month,
    Day,
    Hour,
    Minute,
    /// Outdoor air temperature.
    Temperature,
    /// Relative humidity.
    Humidity,
    /// Dew point.
    DewPoint,
    /// Global radiation on the horizontal.
    Radiation,
    /// Wind speed.
    Wind,
}

/// A heading, understood.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Heading {
    pub role: Role,
    /// Smaller is surer; equal ranks are a tie.
    pub rank: u8,
    /// The unit or format that stands with it, in lower case.
    pub unit: String,
    /// Whether a word says UTC.
    pub utc: bool,
    /// Whether a word says that the stamp ends its hour (`true`) or begins it (`false`).
    pub ending: Option<bool>,
}

struct Meaning {
    role: Role,
    /// One of these must be there.
    decisive: &'static [&'static str],
    /// These may be there as well.
    allowed: &'static [&'static str],
    /// Any of these makes the heading surer.
    surer: &'static [&'static str],
}

const OUTDOOR: &[&str] = &[
    "outdoor", "outside", "external", "exterior", "ambient", "air", "dry", "bulb", "drybulb", "2m",
];
const WHEN: &[&str] = &[
    "utc",
    "gmt",
    "z",
    "local",
    "lst",
    "of",
    "day",
    "measurement",
    "observation",
    "obs",
    "valid",
    "period",
    "start",
    "end",
    "beginning",
    "ending",
    "interval",
    "iso",
    "epoch",
    "unix",
];

const MEANINGS: &[Meaning] = &[
    Meaning {
        role: Role::Temperature,
        decisive: &[
            "temperature",
            "temp",
            "tmp",
            "t",
            "ta",
            "tair",
            "tdb",
            "t2m",
            "tas",
            "tempc",
            "tempf",
            "drybulb",
            "bulb",
            "outdoor",
        ],
        allowed: &[
            "outdoor", "outside", "external", "exterior", "ambient", "air", "dry", "bulb",
            "drybulb", "2m", "mean", "average", "avg", "hourly", "c", "f", "k", "degc", "degf",
            "celsius", "tenths", "0.1",
        ],
        surer: OUTDOOR,
    },
    Meaning {
        role: Role::Humidity,
        decisive: &["humidity", "rh", "rhum", "relhum", "hum"],
        allowed: &[
            "relative", "rel", "2m", "outdoor", "outside", "ambient", "air", "percent", "pct",
            "mean", "average", "avg", "hourly",
        ],
        surer: &["relative", "rel", "rh", "rhum", "relhum"],
    },
    Meaning {
        role: Role::DewPoint,
        decisive: &["dew", "dewpoint", "td", "tdew", "dewpt", "tdp"],
        allowed: &[
            "point",
            "pt",
            "temperature",
            "temp",
            "2m",
            "outdoor",
            "air",
            "c",
            "f",
            "k",
            "degc",
            "degf",
            "mean",
            "average",
            "avg",
            "hourly",
        ],
        surer: &["point", "dewpoint"],
    },
    Meaning {
        role: Role::Radiation,
        decisive: &[
            "ghi",
            "ghr",
            "radiation",
            "irradiance",
            "irradiation",
            "solar",
        ],
        allowed: &[
            "global",
            "horizontal",
            "shortwave",
            "surface",
            "downwelling",
            "downward",
            "down",
            "total",
            "solar",
            "w",
            "wm2",
            "m2",
            "mean",
            "average",
            "avg",
            "hourly",
        ],
        surer: &["global", "ghi", "ghr"],
    },
    Meaning {
        role: Role::Wind,
        decisive: &["wind", "windspeed", "wspd", "ws", "wspeed"],
        allowed: &[
            "speed", "velocity", "10m", "m", "s", "ms", "mean", "average", "avg", "hourly",
        ],
        surer: &["speed", "windspeed", "wspd"],
    },
    Meaning {
        role: Role::Stamp,
        decisive: &[
            "timestamp",
            "datetime",
            "timestamputc",
            "datetimeutc",
            "utc",
            "epoch",
            "ts",
        ],
        allowed: WHEN,
        surer: &["utc"],
    },
];

/// Understands one heading, or not.
pub(super) fn understand(text: &str) -> Option<Heading> {
    let (words, unit) = split(text);
    if words.is_empty() {
        return None;
    }
    let has = |word: &str| words.iter().any(|w| w == word);
    let utc = has("utc") || has("gmt") || matches!(unit.as_str(), "utc" | "gmt" | "z");
    let ending = if has("ending") || has("end") || unit.contains("ending") {
        Some(true)
    } else if has("beginning") || has("start") || unit.contains("beginning") {
        Some(false)
    } else {
        None
    };
    let found = |role, rank, unit: &str| {
        Some(Heading {
            role,
            rank,
            unit: unit.to_owned(),
            utc,
            ending,
        })
    };
    if let [only] = words.as_slice() {
        let part = match only.as_str() {
            "year" | "yr" | "yyyy" => Some(Role::Year),
            "month" | "mon" | "mo" => Some(Role::Month),
            "day" | "dd" | "dom" => Some(Role::Day),
            "hour" | "hr" | "hh" => Some(Role::Hour),
            "minute" | "min" | "mi" => Some(Role::Minute),
            "yyyymmdd" => Some(Role::Date),
            _ => None,
        };
        if let Some(role) = part {
            return found(role, 0, &unit);
        }
    }
    // "date time", "time of day", "hour ending": words about time only.
    let about_time = |word: &String| {
        matches!(word.as_str(), "date" | "time" | "stamp" | "hour") || WHEN.contains(&word.as_str())
    };
    if words.iter().all(about_time) {
        let rank = if utc { 0 } else { 1 } + if ending == Some(true) { 1 } else { 0 };
        match (has("date"), has("time") || has("hour")) {
            (true, true) => return found(Role::Stamp, rank, &unit),
            (true, false) => return found(Role::Date, rank, &unit),
            (false, true) => return found(Role::Time, rank, &unit),
            (false, false) if ending.is_some() => return found(Role::Stamp, rank + 2, &unit),
            (false, false) => {}
        }
    }
    for meaning in MEANINGS {
        let known = |word: &String| {
            meaning.decisive.contains(&word.as_str()) || meaning.allowed.contains(&word.as_str())
        };
        let decided = words
            .iter()
            .any(|word| meaning.decisive.contains(&word.as_str()));
        if !decided || !words.iter().all(known) {
            continue;
        }
        let surer = words
            .iter()
            .any(|word| meaning.surer.contains(&word.as_str()));
        let unit = if unit.is_empty() {
            unit_word(meaning.role, &words)
        } else {
            unit
        };
        return found(meaning.role, if surer { 0 } else { 1 }, &unit);
    }
    None
}

/// A unit that stands among the words: `temp_f`, `wind m s`.
fn unit_word(role: Role, words: &[String]) -> String {
    let last = words.last().map_or("", String::as_str);
    match (role, last) {
        (Role::Temperature | Role::DewPoint, "c" | "degc" | "celsius" | "tempc")
            if words.iter().any(|w| w == "tenths" || w == "0.1") =>
        {
            "tenths of c".to_owned()
        }
        (Role::Temperature | Role::DewPoint, "c" | "degc" | "celsius" | "tempc") => "c".to_owned(),
        (Role::Temperature | Role::DewPoint, "f" | "degf" | "tempf") => "f".to_owned(),
        (Role::Temperature | Role::DewPoint, "k") => "k".to_owned(),
        (Role::Temperature, "tenths") => "tenths".to_owned(),
        (Role::Humidity, "percent" | "pct") => "%".to_owned(),
        _ => String::new(),
    }
}

/// Words in lower case, and what stands in brackets or after the last comma as unit.
fn split(text: &str) -> (Vec<String>, String) {
    let text = text.trim().trim_start_matches('#').trim().to_lowercase();
    let mut unit = String::new();
    let mut plain = text.clone();
    for (open, close) in [('(', ')'), ('[', ']')] {
        if let Some(from) = plain.find(open) {
            let to = plain[from..].find(close).map_or(plain.len(), |i| from + i);
            unit = plain[from + 1..to].trim().to_owned();
            let after = plain.get(to + 1..).unwrap_or("").to_owned();
            plain = format!("{} {after}", &plain[..from]);
        }
    }
    if unit.is_empty()
        && let Some((name, after)) = plain.split_once(',')
    {
        unit = after.trim().to_owned();
        plain = name.to_owned();
    }
    if unit.is_empty() {
        for symbol in ["°c", "°f", "%"] {
            if let Some(name) = plain.trim_end().strip_suffix(symbol) {
                unit = symbol.to_owned();
                plain = name.to_owned();
                break;
            }
        }
    }
    let words = plain
        .split(|c: char| !(c.is_alphanumeric() || c == '.'))
        .map(|word| word.trim_matches('.'))
        .filter(|word| !word.is_empty())
        .map(str::to_owned)
        .collect();
    (words, unit)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn role(text: &str) -> Option<(Role, String)> {
        understand(text).map(|h| (h.role, h.unit))
    }

    #[test]
    fn headings_of_common_files_are_understood() {
        for (text, expected, unit) in [
            ("Dry-bulb (C)", Role::Temperature, "c"),
            ("temperature_2m (°C)", Role::Temperature, "°c"),
            ("Outdoor temperature, °F", Role::Temperature, "°f"),
            ("temp", Role::Temperature, ""),
            ("temp_f", Role::Temperature, "f"),
            ("T [K]", Role::Temperature, "k"),
            ("air temperature (0.1 °C)", Role::Temperature, "0.1 °c"),
            ("RHum (%)", Role::Humidity, "%"),
            ("relative humidity", Role::Humidity, ""),
            ("Dew-point (C)", Role::DewPoint, "c"),
            ("GHI (W/m^2)", Role::Radiation, "w/m^2"),
            (
                "Global horizontal irradiance [W/m²]",
                Role::Radiation,
                "w/m²",
            ),
            ("wind speed (km/h)", Role::Wind, "km/h"),
            ("Date (MM/DD/YYYY)", Role::Date, "mm/dd/yyyy"),
            ("Time (HH:MM)", Role::Time, "hh:mm"),
            ("Date/Time", Role::Stamp, ""),
            ("YYYYMMDD", Role::Date, ""),
            ("   HH", Role::Hour, ""),
            ("ts", Role::Stamp, ""),
            ("timestamp_utc", Role::Stamp, ""),
            ("Year", Role::Year, ""),
            ("HOUR", Role::Hour, ""),
        ] {
            assert_eq!(role(text), Some((expected, unit.to_owned())), "{text}");
        }
    }

    #[test]
    fn near_misses_are_left_alone() {
        for text in [
            "Dry-bulb source",
            "Dry-bulb uncert (code)",
            "indoor temperature",
            "soil temperature",
            "wet bulb temperature",
            "max temp",
            "GHI uncert (%)",
            "DNI (W/m^2)",
            "diffuse radiation",
            "wind direction",
            "specific humidity",
            "station",
            "",
            "(C)",
        ] {
            assert_eq!(role(text), None, "{text}");
        }
    }

    #[test]
    fn words_about_the_hour_are_kept() {
        assert_eq!(
            understand("time (hour ending)").and_then(|h| h.ending),
            Some(true)
        );
        assert_eq!(
            understand("period start (UTC)").map(|h| (h.utc, h.ending)),
            Some((true, Some(false)))
        );
        assert!(understand("time UTC").is_some_and(|h| h.utc));
    }
}
