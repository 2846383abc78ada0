//! Heated floors: how warm the surface becomes, and where it stops.

/// Constant of EN 1264: q = 8.92 (θF − θi)^1.1 W/m² \[from memory\].
const EN_1264_W_PER_M2: f64 = 8.92;
/// Exponent of the same equation.
const EN_1264_EXPONENT: f64 = 1.1;

/// Highest surface of an occupied floor, °C (EN 1264).
pub const OCCUPIED_FLOOR_C: f64 = 29.0;
/// Highest surface of the edge of a floor, °C (EN 1264).
pub const EDGE_FLOOR_C: f64 = 35.0;

/// Heat from a floor at a surface temperature into a room (°C), W/m², EN 1264 equation 1.
pub fn floor_output_w_per_m2(surface_c: f64, room_c: f64) -> f64 {
    EN_1264_W_PER_M2 * (surface_c - room_c).max(0.0).powf(EN_1264_EXPONENT)
}

/// Surface temperature of a floor that gives an output (W/m², ≥ 0) into a room (°C): the inverse of [`floor_output_w_per_m2`].
pub fn floor_surface_c(output_w_per_m2: f64, room_c: f64) -> f64 {
    room_c + (output_w_per_m2 / EN_1264_W_PER_M2).powf(1.0 / EN_1264_EXPONENT)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// EN 1264: about 100 W/m² at 29 °C in a room of 20 °C, the figure the standard itself derives from its limit
    /// \[from memory\]; at the edge, 35 °C, 175 W/m².
    #[test]
    fn an_occupied_floor_gives_at_most_about_a_hundred_watts() {
        assert!((floor_output_w_per_m2(OCCUPIED_FLOOR_C, 20.0) - 100.0).abs() < 1.0);
        assert!((floor_output_w_per_m2(EDGE_FLOOR_C, 20.0) - 175.0).abs() < 1.0);
        assert!((floor_surface_c(floor_output_w_per_m2(26.0, 20.0), 20.0) - 26.0).abs() < 1e-9);
        assert_eq!(floor_output_w_per_m2(18.0, 20.0), 0.0);
    }
}
