//! Every kind of quantity, with its accepted units. Conversion factors: BIPM SI brochure and NIST SP 811.

use super::text::{Measure, Unit};

macro_rules! measures {
    ($($(#[$doc:meta])* $name:ident, $label:literal, $get:ident, $make:ident, $example:literal,
       [$($symbol:literal = $factor:expr $(, + $offset:expr)?;)+];)*) => {$(
        $(#[$doc])*
        #[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
        pub struct $name(f64);

        impl $name {
            #[doc = concat!("From a number in ", stringify!($get), ".")]
            pub const fn $make(number: f64) -> Self {
                Self(number)
            }

            #[doc = concat!("The number in ", stringify!($get), ".")]
            pub const fn $get(self) -> f64 {
                self.0
            }
        }

        impl Measure for $name {
            const NAME: &'static str = $label;
            const EXAMPLE: &'static str = $example;
            const UNITS: &'static [Unit] = &[
                $(Unit { symbol: $symbol, factor: $factor, offset: 0.0 $(+ $offset)? }),+
            ];

            fn from_canonical(number: f64) -> Self {
                Self(number)
            }

            fn canonical(self) -> f64 {
                self.0
            }
        }
    )*};
}

/// Kilowatts in a Btu (International Table) per hour, NIST SP 811.
const KW_PER_BTU_H: f64 = 2.930_710_701_722_222e-4;
/// Kilowatt-hours in a therm (100 000 Btu).
const KWH_PER_THERM: f64 = 29.307_107_017_222_22;
/// Square metres in a square foot.
const M2_PER_FT2: f64 = 0.092_903_04;
/// Metres in a foot.
const M_PER_FT: f64 = 0.3048;
/// Kelvins in a Fahrenheit degree.
const K_PER_F: f64 = 5.0 / 9.0;

measures! {
    /// A temperature on the Celsius scale.
    Temperature, "a temperature", c, from_c, "20 °C",
        ["°C" = 1.0; "K" = 1.0, + -273.15; "°F" = K_PER_F, + -32.0 * K_PER_F;];
    /// A difference of temperatures.
    TemperatureDifference, "a temperature difference", k, from_k, "5 K",
        ["K" = 1.0; "Δ°F" = K_PER_F;];
    /// Heat loss per kelvin between inside and outside.
    HeatLossCoefficient, "a heat-loss coefficient", w_per_k, from_w_per_k, "212 W/K",
        ["W/K" = 1.0; "kW/K" = 1000.0; "W/°C" = 1.0; "Btu/h/°F" = KW_PER_BTU_H * 1000.0 / K_PER_F;];
    /// Heat or electric power.
    Power, "a power", kw, from_kw, "5.4 kW",
        ["kW" = 1.0; "W" = 0.001; "Btu/h" = KW_PER_BTU_H; "kBtu/h" = KW_PER_BTU_H * 1000.0;];
    /// Energy as heat or electricity, or of a fuel on a calorific value said elsewhere.
    Energy, "an energy", kwh, from_kwh, "12 000 kWh",
        ["kWh" = 1.0; "Wh" = 0.001; "MWh" = 1000.0; "MJ" = 1.0 / 3.6; "GJ" = 1000.0 / 3.6;
         "therm" = KWH_PER_THERM; "therms" = KWH_PER_THERM; "MMBtu" = KWH_PER_THERM * 10.0;];
    /// An area.
    Area, "an area", m2, from_m2, "96 m²", ["m²" = 1.0; "ft²" = M2_PER_FT2; "sq ft" = M2_PER_FT2;];
    /// A length, a depth or a height.
    Length, "a length", m, from_m, "80 m",
        ["m" = 1.0; "mm" = 0.001; "cm" = 0.01; "km" = 1000.0; "ft" = M_PER_FT; "in" = 0.0254;];
    /// A volume of water.
    WaterVolume, "a volume of water", l, from_l, "120 L",
        ["L" = 1.0; "l" = 1.0; "litres" = 1.0; "m³" = 1000.0; "US gal" = 3.785_411_784; "UK gal" = 4.546_09;];
    /// A volume of air.
    AirVolume, "a volume of air", m3, from_m3, "240 m³", ["m³" = 1.0; "ft³" = M_PER_FT * M_PER_FT * M_PER_FT;];
    /// Air exchanged in an hour, as a multiple of the volume.
    AirChangeRate, "an air change rate", per_h, from_per_h, "0.5 1/h", ["1/h" = 1.0; "/h" = 1.0; "ach" = 1.0;];
    /// A span of time.
    Duration, "a span of time", h, from_h, "40 h",
        ["h" = 1.0; "min" = 1.0 / 60.0; "days" = 24.0; "d" = 24.0;];
    /// A span of years.
    Years, "a number of years", years, from_years, "15 years",
        ["years" = 1.0; "year" = 1.0; "a" = 1.0;];
    /// A share of one.
    Share, "a share", fraction, from_fraction, "85 %", ["%" = 0.01;];
    /// Thermal conductivity.
    Conductivity, "a thermal conductivity", w_per_m_k, from_w_per_m_k, "2 W/m/K",
        ["W/m/K" = 1.0; "W/mK" = 1.0;];
    /// Thermal diffusivity.
    Diffusivity, "a thermal diffusivity", m2_per_s, from_m2_per_s, "8e-7 m²/s",
        ["m²/s" = 1.0; "mm²/s" = 1e-6; "m²/day" = 1.0 / 86_400.0;];
    /// Temperature drop of a loop per kilowatt drawn from it.
    LoopResistance, "a loop resistance", k_per_kw, from_k_per_kw, "1.2 K/kW",
        ["K/kW" = 1.0; "K/W" = 1000.0;];
    /// Thermal resistance of one metre of borehole.
    BoreholeResistance, "a borehole resistance", m_k_per_w, from_m_k_per_w, "0.10 m K/W",
        ["m K/W" = 1.0; "mK/W" = 1.0; "K m/W" = 1.0;];
    /// A mass.
    Mass, "a mass", kg, from_kg, "0.9 kg", ["kg" = 1.0; "g" = 0.001; "lb" = 0.453_592_37;];
    /// Electric current.
    Current, "an electric current", a, from_a, "16 A", ["A" = 1.0;];
    /// Mass flow.
    MassFlow, "a mass flow", kg_per_s, from_kg_per_s, "0.02 kg/s",
        ["kg/s" = 1.0; "kg/h" = 1.0 / 3600.0; "g/s" = 0.001;];
    /// A flow of water or brine.
    VolumeFlow, "a flow", l_per_s, from_l_per_s, "0.4 L/s",
        ["L/s" = 1.0; "L/min" = 1.0 / 60.0; "L/h" = 1.0 / 3600.0; "m³/h" = 1.0 / 3.6; "US gpm" = 3.785_411_784 / 60.0;];
    /// Change of temperature with depth.
    TemperatureGradient, "a temperature gradient", k_per_m, from_k_per_m, "30 K/km",
        ["K/m" = 1.0; "K/km" = 0.001;];
    /// Carbon dioxide equivalent per kilowatt-hour.
    CarbonFactor, "a carbon factor", kg_per_kwh, from_kg_per_kwh, "0.183 kg/kWh",
        ["kg/kWh" = 1.0; "kg CO2e/kWh" = 1.0; "g/kWh" = 0.001; "g CO2e/kWh" = 0.001;];
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::parse;

    /// NIST SP 811 appendix B: 1 therm = 105.506 MJ; 1 Btu/h = 0.293 071 1 W; 1 ft² = 0.092 903 04 m²;
    /// methods: therm 29.30711 kWh.
    #[test]
    fn conversions_agree_with_published_factors() {
        let near = |a: f64, b: f64| assert!((a / b - 1.0).abs() < 1e-6, "{a} {b}");
        near(parse::<Energy>("1 therm").unwrap().kwh(), 29.30711);
        near(parse::<Energy>("105.5056 MJ").unwrap().kwh(), 29.30711);
        near(parse::<Power>("1000 Btu/h").unwrap().kw(), 0.293_071_1);
        near(parse::<Area>("1000 ft2").unwrap().m2(), 92.903_04);
        near(
            parse::<HeatLossCoefficient>("500 Btu/h/°F")
                .unwrap()
                .w_per_k(),
            263.764,
        );
    }

    #[test]
    fn temperatures_convert_on_the_scale_and_as_differences() {
        let c = |text| parse::<Temperature>(text).unwrap().c();
        assert!((c("68 °F") - 20.0).abs() < 1e-12);
        assert!((c("68F") - 20.0).abs() < 1e-12);
        assert!((c("293.15 K") - 20.0).abs() < 1e-12);
        assert!((c("-40 °F") + 40.0).abs() < 1e-12);
        assert!((parse::<TemperatureDifference>("5 K").unwrap().k() - 5.0).abs() < 1e-12);
    }

    #[test]
    fn a_wrong_unit_and_a_missing_unit_say_what_to_write() {
        let bare = parse::<HeatLossCoefficient>("212").unwrap_err();
        assert!(bare.remedy.contains("\"212 W/K\""), "{bare}");
        let wrong = parse::<HeatLossCoefficient>("212 kWh").unwrap_err();
        assert!(
            wrong.found.contains("kWh") && wrong.allowed.contains("W/K"),
            "{wrong}"
        );
    }

    #[test]
    fn every_example_parses() {
        fn check<M: Measure>() {
            assert!(parse::<M>(M::EXAMPLE).is_ok(), "{}", M::EXAMPLE);
        }
        check::<Temperature>();
        check::<TemperatureDifference>();
        check::<HeatLossCoefficient>();
        check::<Power>();
        check::<Energy>();
        check::<Area>();
        check::<Length>();
        check::<WaterVolume>();
        check::<Duration>();
        check::<Years>();
        check::<Share>();
        check::<Conductivity>();
        check::<Diffusivity>();
        check::<LoopResistance>();
        check::<BoreholeResistance>();
        check::<Mass>();
        check::<Current>();
        check::<MassFlow>();
        check::<VolumeFlow>();
        check::<TemperatureGradient>();
        check::<CarbonFactor>();
    }
}
