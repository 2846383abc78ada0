//! Heat exchangers: how far the refrigerant must stand from the fluid it exchanges heat with.

/// A heat exchanger on one side of the machine.
///
/// The fluid's flow rate hardly changes, so its effectiveness is constant and the temperature difference between the
/// refrigerant and the fluid's hotter end grows in proportion to the heat (effectiveness relation of a condenser or
/// evaporator, `Q = ε C (T1 − T2)`; textbook). The evaporator must also leave room for its superheat: suction
/// gas cannot be warmer than what heats it, so superheat is the least approach there.
///
/// **Spread.** The water's flow rate is taken as that of the tested points (5 K at 35 °C to 10 K at 65 °C at full output); a home with
/// another design spread has another. By the effectiveness relation, with the same UA: 6 kW at 5 K spread and 1.8 K approach is NTU
/// 1.33; at 8 K spread NTU is 2.13 and the approach 1.1 K, at 3 K spread 0.80 and 2.5 K. Condensing is then 0.7 K lower or higher, 1.5 %
/// of COP at 2 to 2.5 % a kelvin (Staffell et al. 2012, doi 10.1039/c2ee22653g), less because UA itself rises with the flow. Left out: a sheet does not say how its
/// condenser splits, and the flow temperature, which is met exactly, weighs ten times as much.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Exchanger {
    /// Approach with hardly any heat flowing, K, ≥ 0: the superheat in an evaporator, 0 in a condenser.
    pub floor_k: f64,
    /// Growth of the approach with heat, K/kW, > 0.
    pub k_per_kw: f64,
}

impl Exchanger {
    /// Temperature difference at a heat flow (kW, ≥ 0), K.
    ///
    /// Evaporator: entering source minus evaporating temperature. Condenser: condensing minus flow temperature.
    pub fn approach_k(&self, heat_kw: f64) -> f64 {
        self.floor_k + self.k_per_kw * heat_kw
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// \[From memory\]: typical approach 7–12 K at an air coil at full load.
    #[test]
    fn approach_grows_from_its_floor_in_proportion_to_heat() {
        let coil = Exchanger {
            floor_k: 5.0,
            k_per_kw: 1.0,
        };
        assert_eq!(coil.approach_k(0.0), 5.0);
        assert_eq!(coil.approach_k(4.0), 9.0);
        assert!((7.0..=12.0).contains(&coil.approach_k(4.0)));
    }
}
