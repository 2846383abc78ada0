//! Where a machine may run.

use super::sheet::SourceKind;

/// The envelope of a machine.
#[derive(Debug, Clone, PartialEq)]
pub struct Limits {
    /// Lowest entering source temperature, °C.
    pub lowest_source_c: f64,
    /// Highest entering source temperature, °C.
    pub highest_source_c: f64,
    /// Highest flow temperature (°C) by entering source temperature (°C), rising in source; straight lines between, level
    /// beyond. Never empty.
    pub highest_flow_c: Vec<(f64, f64)>,
    /// Greatest output the controller allows, kW, where the sheet says so.
    pub greatest_output_kw: Option<f64>,
}

/// Least difference between flow and source temperature that the machine is asked for, K: the expansion valve needs a
/// pressure difference to work with, so that a machine at a warmer source runs as at this difference; common practice, no
/// source.
pub const LEAST_DIFFERENCE_K: f64 = 10.0;
/// Lowest flow temperature, °C: condensing is held up for the same reason; common practice, no source.
pub const LOWEST_FLOW_C: f64 = 20.0;

impl Limits {
    /// Limits of a usual machine of a kind, for a sheet that states none; common practice, no source.
    pub fn usual(kind: SourceKind, highest_flow_c: f64) -> Self {
        let (lowest_source_c, highest_source_c) = match kind {
            SourceKind::Air => (-20.0, 35.0),
            SourceKind::Brine => (-8.0, 20.0),
            SourceKind::Water => (4.0, 20.0),
        };
        Self {
            lowest_source_c,
            highest_source_c,
            highest_flow_c: vec![(lowest_source_c, highest_flow_c)],
            greatest_output_kw: None,
        }
    }

    /// Whether the machine runs at all at an entering source temperature.
    pub fn allows_source(&self, source_c: f64) -> bool {
        (self.lowest_source_c..=self.highest_source_c).contains(&source_c)
    }

    /// Highest flow temperature at an entering source temperature, °C.
    pub fn highest_flow_at(&self, source_c: f64) -> f64 {
        let points = &self.highest_flow_c;
        let after = points.iter().position(|(source, _)| source_c < *source);
        match after {
            Some(0) => points[0].1,
            Some(i) => {
                let ((s0, f0), (s1, f1)) = (points[i - 1], points[i]);
                f0 + (source_c - s0) / (s1 - s0) * (f1 - f0)
            }
            None => points[points.len() - 1].1,
        }
    }

    /// The highest flow temperature anywhere, °C.
    pub fn highest_flow_anywhere(&self) -> f64 {
        self.highest_flow_c
            .iter()
            .map(|point| point.1)
            .fold(LOWEST_FLOW_C, f64::max)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn highest_flow_is_straight_between_its_points_and_level_beyond() {
        let limits = Limits {
            highest_flow_c: vec![(-20.0, 55.0), (-10.0, 65.0), (20.0, 65.0), (30.0, 60.0)],
            ..Limits::usual(SourceKind::Air, 60.0)
        };
        for (source, flow) in [
            (-25.0, 55.0),
            (-20.0, 55.0),
            (-15.0, 60.0),
            (0.0, 65.0),
            (25.0, 62.5),
            (40.0, 60.0),
        ] {
            assert!(
                (limits.highest_flow_at(source) - flow).abs() < 1e-12,
                "{source}"
            );
        }
        assert_eq!(limits.highest_flow_anywhere(), 65.0);
        assert!(limits.allows_source(-20.0) && !limits.allows_source(-20.1));
    }
}
