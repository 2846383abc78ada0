//! Fuels, the units they are sold in, and calorific values, gross and net kept apart.
//!
//! Inside the program a kilowatt-hour of fuel is always on the gross calorific value: prices, efficiencies and carbon
//! factors meet on that one basis, and [`FuelUnit::gross_kwh`] is the only door to it.

use serde::{Deserialize, Serialize};

use super::text::{UnitProblem, split_number};

/// What a household buys to make heat.
#[derive(
    Debug,
    Clone,
    Copy,
    PartialEq,
    Eq,
    Hash,
    PartialOrd,
    Ord,
    Serialize,
    Deserialize,
    schemars::JsonSchema,
)]
#[serde(rename_all = "kebab-case")]
pub enum Fuel {
    /// Electricity.
    Electricity,
    /// Natural gas from the mains.
    Gas,
    /// Heating oil (burning oil, kerosene or gas oil).
    HeatingOil,
    /// Liquefied petroleum gas.
    Lpg,
    /// Wood pellets.
    Pellets,
}

impl Fuel {
    /// Every fuel.
    pub const ALL: [Self; 5] = [
        Self::Electricity,
        Self::Gas,
        Self::HeatingOil,
        Self::Lpg,
        Self::Pellets,
    ];

    /// The name as written in files.
    pub fn name(self) -> &'static str {
        match self {
            Self::Electricity => "electricity",
            Self::Gas => "gas",
            Self::HeatingOil => "heating-oil",
            Self::Lpg => "lpg",
            Self::Pellets => "pellets",
        }
    }

    /// The fuel of a name.
    pub fn from_name(name: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|fuel| fuel.name() == name)
    }

    /// Whether it is burnt in the home, so that gross and net calorific value differ.
    pub fn is_burnt(self) -> bool {
        self != Self::Electricity
    }

    /// Net over gross calorific value.
    ///
    /// Gas 0.901: methane, from reaction enthalpies \[computed\]. Lpg 0.921: propane, 2219.2 kJ/mol gross less
    /// four times 44.0 kJ/mol of water \[from memory: NIST heats of combustion\]. Oil 0.95: IPCC Guidelines 2006,
    /// volume 2, "about 5 % for oil" \[from memory\]. Pellets 0.92: 8 % moisture, 6 % hydrogen \[from memory\].
    pub fn net_over_gross(self) -> f64 {
        match self {
            Self::Electricity => 1.0,
            Self::Gas => 0.901,
            Self::HeatingOil => 0.95,
            Self::Lpg => 0.921,
            Self::Pellets => 0.92,
        }
    }
}

impl std::fmt::Display for Fuel {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(self.name())
    }
}

/// Whether the heat of the steam in the flue gas is counted.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum CalorificBasis {
    /// Counted: higher heating value.
    Gross,
    /// Not counted: lower heating value.
    Net,
}

impl CalorificBasis {
    /// The basis of a name, `gross` or `net`.
    pub fn from_name(name: &str) -> Option<Self> {
        match name {
            "gross" => Some(Self::Gross),
            "net" => Some(Self::Net),
            _ => None,
        }
    }

    /// Gross kilowatt-hours in one kilowatt-hour of this basis.
    pub fn to_gross(self, fuel: Fuel) -> f64 {
        match self {
            Self::Gross => 1.0,
            Self::Net => 1.0 / fuel.net_over_gross(),
        }
    }
}

/// How an amount of fuel is counted.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Counted {
    Energy,
    Volume,
    Mass,
}

/// A unit that fuel is sold in.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FuelUnit {
    /// The unit as bills print it.
    pub symbol: &'static str,
    counted: Counted,
    /// Kilowatt-hours, cubic metres or kilograms in one unit.
    factor: f64,
}

/// Kilowatt-hours in a therm, NIST SP 811.
const KWH_PER_THERM: f64 = 29.307_107_017_222_22;
/// Cubic metres in a cubic foot, exact.
const M3_PER_FT3: f64 = 0.028_316_846_592;

/// Every unit, with its other spellings. Factors: BIPM SI brochure, NIST SP 811.
const UNITS: &[(FuelUnit, &[&str])] = {
    use Counted::{Energy, Mass, Volume};
    const fn unit(symbol: &'static str, counted: Counted, factor: f64) -> FuelUnit {
        FuelUnit {
            symbol,
            counted,
            factor,
        }
    }
    &[
        (unit("kWh", Energy, 1.0), &[]),
        (unit("MWh", Energy, 1000.0), &[]),
        (unit("MJ", Energy, 1.0 / 3.6), &[]),
        (unit("GJ", Energy, 1000.0 / 3.6), &[]),
        (unit("therm", Energy, KWH_PER_THERM), &["therms"]),
        (unit("MMBtu", Energy, KWH_PER_THERM * 10.0), &[]),
        (unit("Btu", Energy, KWH_PER_THERM * 1e-5), &[]),
        (unit("m³", Volume, 1.0), &["m3"]),
        (unit("ft³", Volume, M3_PER_FT3), &["ft3", "cu ft"]),
        (
            unit("100 ft³", Volume, M3_PER_FT3 * 100.0),
            &["100 ft3", "ccf", "CCF"],
        ),
        (unit("L", Volume, 0.001), &["l", "litre", "litres"]),
        (unit("US gal", Volume, 3.785_411_784e-3), &[]),
        (unit("UK gal", Volume, 4.546_09e-3), &[]),
        (unit("kg", Mass, 1.0), &[]),
        (unit("t", Mass, 1000.0), &["tonne", "tonnes"]),
        (unit("lb", Mass, 0.453_592_37), &[]),
        (unit("short ton", Mass, 907.184_74), &[]),
    ]
};

impl FuelUnit {
    /// The kilowatt-hour.
    pub const KWH: Self = UNITS[0].0;

    /// The unit of a spelling.
    pub fn from_symbol(symbol: &str) -> Option<Self> {
        UNITS
            .iter()
            .find(|(unit, other)| unit.symbol == symbol || other.contains(&symbol))
            .map(|(unit, _)| *unit)
    }

    /// Every unit in words, for messages.
    pub fn all_symbols() -> String {
        let symbols: Vec<_> = UNITS.iter().map(|(unit, _)| unit.symbol).collect();
        symbols.join(", ")
    }

    /// Whether the unit is one of energy, so that no calorific value is needed.
    pub fn is_energy(self) -> bool {
        self.counted == Counted::Energy
    }

    /// Whether the unit is a volume.
    pub fn is_volume(self) -> bool {
        self.counted == Counted::Volume
    }

    /// Gross kilowatt-hours of a fuel in one unit.
    ///
    /// A volume is first multiplied by `volume_correction`, which brings metered gas to the temperature and pressure
    /// that the calorific value is stated at (1.02264 on British gas bills). Returns nothing when the calorific value
    /// is missing or is for the other of volume and mass.
    pub fn gross_kwh(
        self,
        fuel: Fuel,
        basis: CalorificBasis,
        calorific_value: Option<CalorificValue>,
        volume_correction: f64,
    ) -> Option<f64> {
        let kwh = match self.counted {
            Counted::Energy => self.factor,
            counted => {
                let value = calorific_value.filter(|value| value.per == counted)?;
                let correction = if self.is_volume() {
                    volume_correction
                } else {
                    1.0
                };
                self.factor * correction * value.kwh
            }
        };
        Some(kwh * basis.to_gross(fuel))
    }
}

/// Energy in a cubic metre or a kilogram of fuel; the basis is said beside it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CalorificValue {
    per: Counted,
    /// Kilowatt-hours per cubic metre or per kilogram.
    kwh: f64,
}

impl CalorificValue {
    /// Reads `"39.3 MJ/m³"`, `"10.31 kWh/L"`, `"4800 kWh/t"`.
    ///
    /// # Errors
    /// A [`UnitProblem`] when the text is not a positive energy per volume or mass.
    pub fn parse(text: &str) -> Result<Self, UnitProblem> {
        let refuse = |found: String| UnitProblem {
            found,
            allowed: "a calorific value as energy per volume or per mass, above 0".to_owned(),
            remedy: "write for example \"39.3 MJ/m³\", \"10.31 kWh/L\" or \"4800 kWh/t\""
                .to_owned(),
        };
        let Some((number, unit)) = split_number(text) else {
            return Err(refuse(format!("\"{text}\" does not begin with a number")));
        };
        let parts = unit.split_once('/').and_then(|(energy, amount)| {
            let energy = FuelUnit::from_symbol(energy.trim()).filter(|u| u.is_energy())?;
            let amount = FuelUnit::from_symbol(amount.trim()).filter(|u| !u.is_energy())?;
            Some((energy, amount))
        });
        let Some((energy, amount)) = parts else {
            return Err(refuse(format!("\"{text}\" has the unit \"{unit}\"")));
        };
        if number <= 0.0 {
            return Err(refuse(format!("\"{text}\" is not above 0")));
        }
        Ok(Self {
            per: amount.counted,
            kwh: number * energy.factor / amount.factor,
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn gross(unit: &str, fuel: Fuel, basis: CalorificBasis, value: &str, correction: f64) -> f64 {
        let value = CalorificValue::parse(value).unwrap();
        let unit = FuelUnit::from_symbol(unit).unwrap();
        unit.gross_kwh(fuel, basis, Some(value), correction)
            .unwrap()
    }

    /// British gas billing, Gas (Calculation of Thermal Energy) Regulations: kWh = m³ × 1.02264 × CV / 3.6;
    /// 100 m³ at 39.3 MJ/m³ is 1116.382 kWh, 100 ft³ is billed as 2.83 m³ (exactly 2.8317).
    #[test]
    fn gas_by_volume_is_converted_as_on_the_bill() {
        let one = gross(
            "m³",
            Fuel::Gas,
            CalorificBasis::Gross,
            "39.3 MJ/m³",
            1.02264,
        );
        assert!((100.0 * one - 1116.382).abs() < 5e-4, "{one}");
        let hundred = gross(
            "100 ft³",
            Fuel::Gas,
            CalorificBasis::Gross,
            "39.3 MJ/m³",
            1.02264,
        );
        assert!((hundred / one - 2.83).abs() < 0.002, "{}", hundred / one);
        let therm = FuelUnit::from_symbol("therm").unwrap();
        let kwh = therm
            .gross_kwh(Fuel::Gas, CalorificBasis::Gross, None, 1.0)
            .unwrap();
        assert!((kwh - 29.30711).abs() < 5e-6);
    }

    /// Methane: a net kilowatt-hour holds 1/0.901 gross ones, so its price per gross kWh is 9.9 % lower.
    #[test]
    fn net_units_hold_more_gross_energy() {
        let kwh = FuelUnit::KWH
            .gross_kwh(Fuel::Gas, CalorificBasis::Net, None, 1.0)
            .unwrap();
        assert!((kwh - 1.1099).abs() < 1e-4);
        let pellets = gross("t", Fuel::Pellets, CalorificBasis::Net, "4800 kWh/t", 1.0);
        assert!((pellets - 4800.0 / 0.92).abs() < 1e-9);
    }

    #[test]
    fn volume_and_mass_are_not_mixed() {
        let value = CalorificValue::parse("10.31 kWh/L").unwrap();
        let kg = FuelUnit::from_symbol("kg").unwrap();
        let basis = CalorificBasis::Gross;
        assert_eq!(
            kg.gross_kwh(Fuel::HeatingOil, basis, Some(value), 1.0),
            None
        );
        assert_eq!(kg.gross_kwh(Fuel::HeatingOil, basis, None, 1.0), None);
        for bad in ["39.3", "39.3 MJ", "0 MJ/m³", "-1 kWh/L", "3 m³/MJ", "x"] {
            assert!(CalorificValue::parse(bad).is_err(), "{bad}");
        }
    }
}
