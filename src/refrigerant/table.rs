//! Fast properties for the hour loop: everything a cycle needs, as functions of temperature.
//!
//! A machine keeps its superheat and subcooling, so that suction and liquid states depend on one
//! temperature each and Chebyshev curves meet them closely. Only the isentropic work depends on two; divided
//! by the logarithm of the pressure ratio it is so smooth (it tends to the suction state's p·v as the
//! ratio tends to one) that a small grid holds it.

use super::chebyshev::{Curve, Surface};
use super::{Equation, PropertyError, Refrigerant, Saturation};

/// Lowest and highest evaporating temperature, °C.
const EVAPORATING_RANGE_C: (f64, f64) = (-45.0, 30.0);
/// Lowest condensing temperature, °C.
const LOWEST_CONDENSING_C: f64 = 5.0;
/// Highest condensing temperature, °C, where the critical point does not end it earlier.
const HIGHEST_CONDENSING_C: f64 = 80.0;
/// Distance kept from the critical temperature, K: closer, curves in temperature bend too sharply.
const CRITICAL_MARGIN_K: f64 = 8.0;
/// Superheats and subcoolings offered, K.
const SPREAD_RANGE_K: (f64, f64) = (0.0, 30.0);

/// Nodes of the curves in temperature.
const CURVE_NODES: usize = 28;
/// Coefficients below this are dropped: relative for the curves that hold a logarithm …
const NEGLIGIBLE_LOGARITHM: f64 = 1e-9;
/// … and in kJ/kg for enthalpies of some hundred kJ/kg.
const NEGLIGIBLE_ENTHALPY: f64 = 1e-7;

/// Cycle properties of one refrigerant at constant superheat and subcooling.
///
/// Every method takes temperatures in °C and gives NaN outside [`CycleTable::evaporating_range_c`] and
/// [`CycleTable::condensing_range_c`]; none allocates.
#[derive(Clone, Debug)]
pub struct CycleTable {
    refrigerant: Refrigerant,
    superheat_k: f64,
    subcooling_k: f64,
    condensing_range_c: (f64, f64),
    /// ln(kPa) of saturation, over both ranges.
    pressure_logarithm: Curve,
    /// ln(kg/m³) against evaporating temperature.
    density_logarithm: Curve,
    /// kJ/kg against evaporating temperature.
    suction_enthalpy: Curve,
    /// kJ/kg against condensing temperature.
    liquid_enthalpy: Curve,
    /// kJ/kg per unit of ln(pressure ratio).
    work_per_logarithm: Surface,
}

impl CycleTable {
    /// Makes the table of a refrigerant from its reference equation.
    ///
    /// # Errors
    ///
    /// [`PropertyError::OutsideRange`] for a superheat or subcooling outside 0 to 30 K.
    pub fn build(
        refrigerant: Refrigerant,
        superheat_k: f64,
        subcooling_k: f64,
    ) -> Result<CycleTable, PropertyError> {
        let spread =
            |what, value| PropertyError::check(refrigerant, (what, "K"), value, SPREAD_RANGE_K);
        let superheat_k = spread("superheat", superheat_k)?;
        let subcooling_k = spread("subcooling", subcooling_k)?;
        let equation = Equation::new(refrigerant)?;
        let highest =
            HIGHEST_CONDENSING_C.min(equation.critical_temperature_c() - CRITICAL_MARGIN_K);
        let both = (EVAPORATING_RANGE_C.0, highest);

        let suction = |evaporating_c: f64| {
            let saturation = equation.saturation(evaporating_c)?;
            let suction =
                equation.beside_at_temperature(&saturation, evaporating_c + superheat_k)?;
            Ok::<_, PropertyError>((saturation, suction))
        };
        let liquid = |condensing_c: f64| {
            let saturation = equation.saturation(condensing_c)?;
            if subcooling_k == 0.0 {
                return Ok(saturation.liquid);
            }
            equation.beside_at_temperature(&saturation, condensing_c - subcooling_k)
        };
        let work_per_logarithm = Surface::fit(EVAPORATING_RANGE_C, |evaporating_c, place| {
            let condensing_c = condensing_at(evaporating_c, highest, place);
            let (low, suction) = suction(evaporating_c)?;
            let high: Saturation = equation.saturation(condensing_c)?;
            let end = equation.beside_at_entropy(&high, suction.entropy_kj_per_kg_k)?;
            let work = end.enthalpy_kj_per_kg - suction.enthalpy_kj_per_kg;
            Ok(work / (high.pressure_kpa / low.pressure_kpa).ln())
        })?;
        Ok(CycleTable {
            refrigerant,
            superheat_k,
            subcooling_k,
            condensing_range_c: (LOWEST_CONDENSING_C, highest),
            pressure_logarithm: Curve::fit(both, CURVE_NODES, NEGLIGIBLE_LOGARITHM, |at| {
                Ok(equation.saturation(at)?.pressure_kpa.ln())
            })?,
            density_logarithm: Curve::fit(
                EVAPORATING_RANGE_C,
                CURVE_NODES,
                NEGLIGIBLE_LOGARITHM,
                |at| Ok(suction(at)?.1.density_kg_per_m3.ln()),
            )?,
            suction_enthalpy: Curve::fit(
                EVAPORATING_RANGE_C,
                CURVE_NODES,
                NEGLIGIBLE_ENTHALPY,
                |at| Ok(suction(at)?.1.enthalpy_kj_per_kg),
            )?,
            liquid_enthalpy: Curve::fit(
                (LOWEST_CONDENSING_C, highest),
                CURVE_NODES,
                NEGLIGIBLE_ENTHALPY,
                |at| Ok(liquid(at)?.enthalpy_kj_per_kg),
            )?,
            work_per_logarithm,
        })
    }

    /// The fluid.
    pub fn refrigerant(&self) -> Refrigerant {
        self.refrigerant
    }

    /// Superheat at the compressor's inlet, K.
    pub fn superheat_k(&self) -> f64 {
        self.superheat_k
    }

    /// Subcooling at the condenser's outlet, K.
    pub fn subcooling_k(&self) -> f64 {
        self.subcooling_k
    }

    /// Lowest and highest evaporating temperature, °C.
    pub fn evaporating_range_c(&self) -> (f64, f64) {
        EVAPORATING_RANGE_C
    }

    /// Lowest and highest condensing temperature, °C.
    pub fn condensing_range_c(&self) -> (f64, f64) {
        self.condensing_range_c
    }

    /// Saturation pressure, kPa, from the lowest evaporating to the highest condensing temperature.
    pub fn pressure_kpa(&self, temperature_c: f64) -> f64 {
        self.pressure_logarithm.value(temperature_c).exp()
    }

    /// Density at the compressor's inlet, kg/m³.
    pub fn suction_density(&self, evaporating_c: f64) -> f64 {
        self.density_logarithm.value(evaporating_c).exp()
    }

    /// Enthalpy at the compressor's inlet, kJ/kg.
    pub fn suction_enthalpy(&self, evaporating_c: f64) -> f64 {
        self.suction_enthalpy.value(evaporating_c)
    }

    /// Enthalpy of the subcooled liquid, kJ/kg; also that at the evaporator's inlet.
    pub fn liquid_enthalpy(&self, condensing_c: f64) -> f64 {
        self.liquid_enthalpy.value(condensing_c)
    }

    /// ln(condensing pressure / evaporating pressure).
    pub fn pressure_ratio_logarithm(&self, evaporating_c: f64, condensing_c: f64) -> f64 {
        self.pressure_logarithm.value(condensing_c) - self.pressure_logarithm.value(evaporating_c)
    }

    /// Work of isentropic compression from the compressor's inlet to the condensing pressure, kJ/kg;
    /// NaN when condensing is colder than evaporating.
    pub fn isentropic_work(&self, evaporating_c: f64, condensing_c: f64) -> f64 {
        let place = place_of(evaporating_c, self.condensing_range_c.1, condensing_c);
        self.work_per_logarithm.value(evaporating_c, place)
            * self.pressure_ratio_logarithm(evaporating_c, condensing_c)
    }
}

/// The condensing temperature at a place −1..1 between evaporating temperature and highest condensing
/// temperature. The grid follows the evaporating temperature so that none of it is wasted on
/// condensing below evaporating, where expansion into the dome would break its smoothness.
fn condensing_at(evaporating_c: f64, highest_c: f64, place: f64) -> f64 {
    evaporating_c + 0.5 * (place + 1.0) * (highest_c - evaporating_c)
}

/// The inverse of [`condensing_at`].
fn place_of(evaporating_c: f64, highest_c: f64, condensing_c: f64) -> f64 {
    2.0 * (condensing_c - evaporating_c) / (highest_c - evaporating_c) - 1.0
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Allowed relative deviation of the curves from the exact equation (seen: 1.1e-9).
    const CURVE_TOLERANCE: f64 = 1e-8;
    /// The same for the isentropic work (seen: 7e-7, R410A).
    const WORK_TOLERANCE: f64 = 1e-6;
    /// Isobutane and R1234yf have saturated vapour whose entropy rises with temperature, so that
    /// compression from little superheat ends inside the dome; work bends where it enters (seen: 1.7e-5).
    const WORK_TOLERANCE_WITH_WET_END: f64 = 3e-5;

    fn deviation(found: f64, exact: f64) -> f64 {
        let deviation = (found / exact - 1.0).abs();
        assert!(deviation.is_finite(), "{found} against {exact}");
        deviation
    }

    #[test]
    fn the_table_meets_the_exact_equation() {
        for refrigerant in Refrigerant::ALL {
            let equation = Equation::new(refrigerant).unwrap();
            for (superheat_k, subcooling_k) in [(5.0, 3.0), (0.0, 0.0), (10.0, 10.0)] {
                let table = CycleTable::build(refrigerant, superheat_k, subcooling_k).unwrap();
                let (mut curves, mut work) = (0.0_f64, 0.0_f64);
                // 31 × 23 places that are no nodes of the table, its edges among them
                let steps = |(low, high): (f64, f64), count: i32| {
                    (0..=count).map(move |step| {
                        (low + (high - low) * f64::from(step) / f64::from(count)).min(high)
                    })
                };
                for condensing_c in steps(table.condensing_range_c(), 30) {
                    let high = equation.saturation(condensing_c).unwrap();
                    let liquid = match subcooling_k {
                        0.0 => high.liquid,
                        subcooling => equation
                            .beside_at_temperature(&high, condensing_c - subcooling)
                            .unwrap(),
                    };
                    let found = table.liquid_enthalpy(condensing_c);
                    curves = curves.max(deviation(found, liquid.enthalpy_kj_per_kg));
                    let found = table.pressure_kpa(condensing_c);
                    curves = curves.max(deviation(found, high.pressure_kpa));
                }
                for evaporating_c in steps(table.evaporating_range_c(), 30) {
                    let low = equation.saturation(evaporating_c).unwrap();
                    let suction = equation
                        .beside_at_temperature(&low, evaporating_c + superheat_k)
                        .unwrap();
                    for (found, exact) in [
                        (table.pressure_kpa(evaporating_c), low.pressure_kpa),
                        (
                            table.suction_density(evaporating_c),
                            suction.density_kg_per_m3,
                        ),
                        (
                            table.suction_enthalpy(evaporating_c),
                            suction.enthalpy_kj_per_kg,
                        ),
                    ] {
                        curves = curves.max(deviation(found, exact));
                    }
                    let highest = table.condensing_range_c().1;
                    for condensing_c in steps((evaporating_c + 1.0, highest), 22) {
                        let high = equation.saturation(condensing_c).unwrap();
                        let end = equation
                            .beside_at_entropy(&high, suction.entropy_kj_per_kg_k)
                            .unwrap();
                        let exact = end.enthalpy_kj_per_kg - suction.enthalpy_kj_per_kg;
                        let found = table.isentropic_work(evaporating_c, condensing_c);
                        work = work.max(deviation(found, exact));
                    }
                }
                let what = format!("{refrigerant}, superheat {superheat_k} K");
                println!("{what}: curves {curves:.1e}, work {work:.1e}");
                assert!(curves < CURVE_TOLERANCE, "{what}: curves {curves:.1e}");
                let tolerance = match refrigerant {
                    Refrigerant::R600a | Refrigerant::R1234yf => WORK_TOLERANCE_WITH_WET_END,
                    _ => WORK_TOLERANCE,
                };
                assert!(work < tolerance, "{what}: work {work:.1e}");
            }
        }
    }

    #[test]
    fn ranges_hold_what_a_heat_pump_needs() {
        for refrigerant in Refrigerant::ALL {
            let table = CycleTable::build(refrigerant, 5.0, 3.0).unwrap();
            let critical_c = refrigerant.facts().critical_temperature_c;
            let (low, high) = table.evaporating_range_c();
            assert!(low <= -45.0 && high >= 30.0);
            let (low, high) = table.condensing_range_c();
            assert!(low <= 5.0 && (high - (critical_c - 8.0).min(80.0)).abs() < 1e-9);
        }
    }

    #[test]
    fn outside_its_ranges_the_table_gives_no_number() {
        let table = CycleTable::build(Refrigerant::R32, 5.0, 3.0).unwrap();
        for temperature_c in [f64::NAN, f64::INFINITY, -45.1, 90.0] {
            assert!(table.pressure_kpa(temperature_c).is_nan());
            assert!(table.suction_density(temperature_c).is_nan());
            assert!(table.suction_enthalpy(temperature_c).is_nan());
            assert!(table.liquid_enthalpy(temperature_c).is_nan());
            assert!(table.isentropic_work(temperature_c, 40.0).is_nan());
        }
        assert!(
            table.isentropic_work(10.0, 9.0).is_nan(),
            "condensing below evaporating"
        );
    }

    #[test]
    fn impossible_superheat_is_refused() {
        for value in [-0.1, 31.0, f64::NAN] {
            assert!(CycleTable::build(Refrigerant::R290, value, 3.0).is_err());
            assert!(CycleTable::build(Refrigerant::R290, 5.0, value).is_err());
        }
    }
}
