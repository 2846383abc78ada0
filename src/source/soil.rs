//! Soil and rock: conductivity, heat capacity, and the rule of thumb that loops were once sized by.

/// What heat meets in the ground.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Soil {
    /// Thermal conductivity, W/(m K).
    pub conductivity_w_per_m_k: f64,
    /// Thermal diffusivity, m²/s.
    pub diffusivity_m2_per_s: f64,
}

/// A named class of soil or rock.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SoilClass {
    /// Its name in a brief.
    pub name: &'static str,
    /// Thermal conductivity, W/(m K).
    pub conductivity_w_per_m_k: f64,
    /// Volumetric heat capacity, MJ/(m³ K).
    pub heat_capacity_mj_per_m3_k: f64,
    /// Where the two are from.
    pub from: &'static str,
    /// Historical specific extraction of bores, W/m, least and greatest, at 1800 and at 2400 hours a year.
    pub rule_of_thumb: RuleOfThumb,
}

/// Specific extraction that bores were once sized by, W/m: least and greatest.
///
/// VDI 4640-2:2001, superseded in 2019: for up to 30 kW and bores of 40 to 100 m.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RuleOfThumb {
    /// At 1800 full-load hours a year.
    pub at_1800_h: [f64; 2],
    /// At 2400 full-load hours a year.
    pub at_2400_h: [f64; 2],
}

const fn rule(at_1800_h: [f64; 2], at_2400_h: [f64; 2]) -> RuleOfThumb {
    RuleOfThumb {
        at_1800_h,
        at_2400_h,
    }
}

/// Poor dry ground, normal ground and ground of high conductivity of the same table, by conductivity, W/(m K): the bounds 1.5
/// and 3.0 are those of the table \[from memory\].
const BY_CONDUCTIVITY: [(f64, RuleOfThumb); 3] = [
    (1.5, rule([25.0, 25.0], [20.0, 20.0])),
    (3.0, rule([60.0, 60.0], [50.0, 50.0])),
    (f64::INFINITY, rule([84.0, 84.0], [70.0, 70.0])),
];

const CONDUCTIVITY: &str = "conductivity: published table (secondary source); heat capacity: middle of VDI 4640-1 (from memory)";
const MEMORY: &str = "VDI 4640-1 (from memory)";

/// The classes a brief can name.
pub const SOILS: [SoilClass; 8] = [
    SoilClass {
        name: "dry sand",
        conductivity_w_per_m_k: 0.4,
        heat_capacity_mj_per_m3_k: 1.45,
        from: CONDUCTIVITY,
        rule_of_thumb: rule([0.0, 25.0], [0.0, 20.0]),
    },
    SoilClass {
        name: "saturated sand",
        conductivity_w_per_m_k: 2.4,
        heat_capacity_mj_per_m3_k: 2.5,
        from: CONDUCTIVITY,
        rule_of_thumb: rule([65.0, 80.0], [55.0, 65.0]),
    },
    SoilClass {
        name: "dry clay",
        conductivity_w_per_m_k: 0.5,
        heat_capacity_mj_per_m3_k: 1.55,
        from: CONDUCTIVITY,
        rule_of_thumb: BY_CONDUCTIVITY[0].1,
    },
    SoilClass {
        name: "wet clay",
        conductivity_w_per_m_k: 1.7,
        heat_capacity_mj_per_m3_k: 2.4,
        from: CONDUCTIVITY,
        rule_of_thumb: rule([35.0, 50.0], [30.0, 40.0]),
    },
    SoilClass {
        name: "moist loam",
        conductivity_w_per_m_k: 1.2,
        heat_capacity_mj_per_m3_k: 2.4,
        from: "common practice, no source",
        rule_of_thumb: BY_CONDUCTIVITY[0].1,
    },
    SoilClass {
        name: "limestone",
        conductivity_w_per_m_k: 2.8,
        heat_capacity_mj_per_m3_k: 2.25,
        from: CONDUCTIVITY,
        rule_of_thumb: rule([55.0, 70.0], [45.0, 60.0]),
    },
    SoilClass {
        name: "sandstone",
        conductivity_w_per_m_k: 2.3,
        heat_capacity_mj_per_m3_k: 2.2,
        from: CONDUCTIVITY,
        rule_of_thumb: rule([65.0, 80.0], [55.0, 65.0]),
    },
    SoilClass {
        name: "granite",
        conductivity_w_per_m_k: 3.4,
        heat_capacity_mj_per_m3_k: 2.4,
        from: MEMORY,
        rule_of_thumb: rule([65.0, 85.0], [55.0, 70.0]),
    },
];

impl SoilClass {
    /// The class of a name; upper and lower case are alike.
    pub fn named(name: &str) -> Option<&'static Self> {
        let wanted = name.trim().to_lowercase();
        SOILS.iter().find(|class| class.name == wanted)
    }

    /// Its properties.
    pub fn soil(&self) -> Soil {
        Soil {
            conductivity_w_per_m_k: self.conductivity_w_per_m_k,
            diffusivity_m2_per_s: self.conductivity_w_per_m_k
                / (self.heat_capacity_mj_per_m3_k * 1e6),
        }
    }
}

impl RuleOfThumb {
    /// That of ground known only by its conductivity, W/(m K).
    pub fn by_conductivity(w_per_m_k: f64) -> Self {
        BY_CONDUCTIVITY
            .iter()
            .find(|(below, _)| w_per_m_k < *below)
            .map_or(BY_CONDUCTIVITY[2].1, |(_, rule)| *rule)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn classes_are_physical_and_found_by_name() {
        for class in &SOILS {
            let soil = SoilClass::named(&class.name.to_uppercase()).unwrap().soil();
            // Range of soils and rocks in VDI 4640-1 [from memory].
            assert!(
                (2e-7..2e-6).contains(&soil.diffusivity_m2_per_s),
                "{class:?}"
            );
            let rule = class.rule_of_thumb;
            assert!(rule.at_1800_h[1] >= rule.at_2400_h[1], "{class:?}");
        }
        assert!(SoilClass::named("cheese").is_none());
    }

    #[test]
    fn ground_known_by_conductivity_takes_the_three_rows_of_the_table() {
        let greatest = |k| RuleOfThumb::by_conductivity(k).at_1800_h[1];
        assert_eq!(
            [greatest(1.0), greatest(2.0), greatest(3.5)],
            [25.0, 60.0, 84.0]
        );
    }
}
