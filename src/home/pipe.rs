//! The water that carries the heat, and the pipes it has to pass.

use super::WATER_KWH_PER_L_K;

/// Water flow that carries a heat (kW) at a difference of flow and return (K, > 0), L/min.
pub fn water_flow_l_per_min(heat_kw: f64, spread_k: f64) -> f64 {
    heat_kw / (WATER_KWH_PER_L_K * spread_k) / 60.0
}

/// Copper pipes of EN 1057 by outside diameter (mm) with the inside diameter of the usual wall (mm) \[from memory\].
const PIPES_MM: [(f64, f64); 5] = [
    (10.0, 8.8),
    (15.0, 13.6),
    (22.0, 20.2),
    (28.0, 26.2),
    (35.0, 32.6),
];

/// Velocity above which water in small pipes is heard and pumps labour, m/s. Common practice, no source: 0.9 to 1.0.
pub const QUIET_M_PER_S: f64 = 1.0;

/// Greatest quiet flow in a pipe of an inside diameter (mm), L/min.
fn quiet_l_per_min(inside_mm: f64) -> f64 {
    let area_m2 = std::f64::consts::FRAC_PI_4 * (inside_mm / 1000.0).powi(2);
    area_m2 * QUIET_M_PER_S * 60_000.0
}

/// The smallest copper pipe (outside diameter, mm) that carries a flow (L/min) quietly, with the flow it can carry;
/// nothing when it takes more than 35 mm.
pub fn smallest_pipe_mm(flow_l_per_min: f64) -> Option<(f64, f64)> {
    PIPES_MM
        .iter()
        .map(|(outside_mm, inside_mm)| (*outside_mm, quiet_l_per_min(*inside_mm)))
        .find(|(_, quiet)| *quiet >= flow_l_per_min)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Water of 4.186 kJ/kgK: 1 kW at 10 K is 0.0239 kg/s or 1.433 L/min. Tables of the trade give 0.145 and 0.32 L/s for 15 and
    /// 22 mm at 1 m/s (common practice, no source).
    #[test]
    fn flow_follows_heat_and_spread_and_pipes_their_area() {
        assert!((water_flow_l_per_min(1.0, 10.0) - 60.0 / 41.86).abs() < 1e-9);
        assert!(
            (water_flow_l_per_min(5.0, 5.0) / water_flow_l_per_min(5.0, 10.0) - 2.0).abs() < 1e-12
        );
        assert!((quiet_l_per_min(13.6) / 60.0 - 0.145).abs() < 0.001);
        assert!((quiet_l_per_min(20.2) / 60.0 - 0.320).abs() < 0.001);
        assert_eq!(smallest_pipe_mm(15.0).unwrap().0, 22.0);
        assert_eq!(smallest_pipe_mm(1000.0), None);
    }
}
