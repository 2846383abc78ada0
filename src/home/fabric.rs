//! One room of one heat capacity: the heat an hour needs, and the temperature it leaves behind.

use crate::extremes::{greater, lesser};

/// Specific heat capacity of a building by construction, ISO 13790:2008 table 12 (values from memory).
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Construction {
    /// Timber frame without heavy floors.
    VeryLight,
    /// Timber frame or inner lining.
    Light,
    /// Brick and block with plasterboard.
    Medium,
    /// Brick, plastered.
    Heavy,
    /// Concrete or thick stone, exposed.
    VeryHeavy,
}

impl Construction {
    /// Heat capacity for a floor area, kWh/K.
    pub fn capacity_kwh_per_k(self, floor_area_m2: f64) -> f64 {
        let kj_per_k_m2 = match self {
            Self::VeryLight => 80.0,
            Self::Light => 110.0,
            Self::Medium => 165.0,
            Self::Heavy => 260.0,
            Self::VeryHeavy => 370.0,
        };
        kj_per_k_m2 * floor_area_m2 / 3600.0
    }
}

/// Heat that warms a cubic metre of indoor air by a kelvin, Wh/m³K: 0.34 in EN 12831-1 and ISO 13789 \[from memory\].
///
/// 1.2 kg/m³ × 1005 J/kgK / 3600 s/h = 0.335.
pub const AIR_WH_PER_M3_K: f64 = 0.34;

/// Ventilation heat-loss coefficient of an air change rate (1/h) and a volume (m³), W/K; heat recovery is taken off the rate.
pub fn ventilation_w_per_k(air_changes_per_h: f64, volume_m3: f64) -> f64 {
    AIR_WH_PER_M3_K * air_changes_per_h * volume_m3
}

/// Heat loss, storage and gains of a home, as one capacity behind one coefficient.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Fabric {
    heat_loss_kw_per_k: f64,
    capacity_kwh_per_k: f64,
    gains_kw: f64,
    solar_aperture_m2: f64,
    /// Rooms are aired when they get this much warmer than the set point, K.
    airing_k: f64,
    /// exp(−1 h/τ): the share of a temperature difference that is left after an hour.
    left_after_hour: f64,
    /// The same after [`RECOVERY_H`].
    left_after_recovery: f64,
}

/// What an hour did to the room.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RoomStep {
    /// Temperature at the end of the hour, °C.
    pub end_c: f64,
    /// Heat lost through the fabric, kWh.
    pub loss_kwh: f64,
    /// Heat stored in the fabric, kWh; negative when it gave heat back.
    pub stored_kwh: f64,
    /// Gains that were aired out because the room grew too warm, kWh.
    pub aired_kwh: f64,
}

/// A controller brings rooms back to their set point over about this time, h: a compensated flow temperature leaves no more. Common
/// practice, no source.
pub const RECOVERY_H: f64 = 6.0;

/// Rooms are aired from this much above the set point, which keeps them from warming further but cools them neither below where they
/// were nor below the outdoor air that does it. Common practice, no source.
const AIRING_K: f64 = 3.0;

impl Fabric {
    /// A fabric of a heat-loss coefficient (W/K, > 0) and a heat capacity (kWh/K, ≥ 0), with constant internal gains (kW)
    /// and a solar aperture (m²) that turns global horizontal radiation into gains.
    ///
    /// A capacity of 0 is a home without storage, whose demand is the steady-state sum.
    pub fn new(
        heat_loss_w_per_k: f64,
        capacity_kwh_per_k: f64,
        gains_kw: f64,
        solar_aperture_m2: f64,
    ) -> Self {
        let heat_loss_kw_per_k = heat_loss_w_per_k / 1000.0;
        let left_after = |hours: f64| {
            if capacity_kwh_per_k > 0.0 {
                (-hours * heat_loss_kw_per_k / capacity_kwh_per_k).exp()
            } else {
                0.0
            }
        };
        Self {
            heat_loss_kw_per_k,
            capacity_kwh_per_k,
            gains_kw,
            solar_aperture_m2,
            airing_k: AIRING_K,
            left_after_hour: left_after(1.0),
            left_after_recovery: left_after(RECOVERY_H),
        }
    }

    /// Heat-loss coefficient, W/K.
    pub fn heat_loss_w_per_k(&self) -> f64 {
        self.heat_loss_kw_per_k * 1000.0
    }

    /// Share of a temperature difference that is left after an hour, exp(−1 h/τ).
    pub fn left_after_hour(&self) -> f64 {
        self.left_after_hour
    }

    /// Heat capacity over heat-loss coefficient, h.
    pub fn time_constant_h(&self) -> f64 {
        self.capacity_kwh_per_k / self.heat_loss_kw_per_k
    }

    /// Internal and solar gains of an hour with a global horizontal radiation (W/m²), kW.
    pub fn gains_kw(&self, global_w_per_m2: f64) -> f64 {
        self.gains_kw + self.solar_aperture_m2 * global_w_per_m2 / 1000.0
    }

    /// Constant internal gains, kW.
    pub fn internal_gains_kw(&self) -> f64 {
        self.gains_kw
    }

    /// The same home with another heat-loss coefficient, W/K.
    pub fn with_heat_loss(&self, heat_loss_w_per_k: f64) -> Self {
        Self::new(
            heat_loss_w_per_k,
            self.capacity_kwh_per_k,
            self.gains_kw,
            self.solar_aperture_m2,
        )
    }

    /// Design heat load: the steady loss with neither sun nor internal gains, kW.
    ///
    /// At night in a cold spell there is no sun, and a base temperature, which holds gains, would understate it.
    pub fn design_load_kw(&self, indoor_c: f64, outdoor_c: f64) -> f64 {
        self.heat_loss_kw_per_k * (indoor_c - outdoor_c)
    }

    /// The constant heat that brings the room from `room_c` to `target_c` in one hour, kWh; 0 when it gets there alone.
    ///
    /// One capacity: `C dT/dt = Q + G − H (T − To)`, solved exactly for constant right-hand side:
    /// `T(t) = T∞ + (T0 − T∞) e^(−t/τ)` with `T∞ = To + (Q + G)/H`.
    #[inline]
    pub fn heat_to_reach_kwh(
        &self,
        room_c: f64,
        target_c: f64,
        outdoor_c: f64,
        gains_kw: f64,
    ) -> f64 {
        self.heat_kw(self.left_after_hour, room_c, target_c, outdoor_c, gains_kw)
    }

    /// The constant heat that brings the room from `room_c` to `target_c` in a number of hours (≥ 1) of the same weather, kW.
    pub fn heat_to_reach_in_kw(
        &self,
        hours: u8,
        room_c: f64,
        target_c: f64,
        outdoor_c: f64,
        gains_kw: f64,
    ) -> f64 {
        let left = self.left_after_hour.powi(i32::from(hours));
        self.heat_kw(left, room_c, target_c, outdoor_c, gains_kw)
    }

    /// What a controller asks for, kW: the constant heat that brings a cooler room from `room_c` to `target_c` in
    /// [`RECOVERY_H`], and lets a warmer one fall at once.
    ///
    /// At the set point it is the steady loss less gains, whatever the time.
    #[inline]
    pub fn heat_wanted_kw(&self, room_c: f64, target_c: f64, outdoor_c: f64, gains_kw: f64) -> f64 {
        let left = self.left_at_target(room_c, target_c);
        self.heat_kw(left, room_c, target_c, outdoor_c, gains_kw)
    }

    /// Share of its distance from where it heads that a room has left when it is at the target.
    fn left_at_target(&self, room_c: f64, target_c: f64) -> f64 {
        if room_c > target_c {
            self.left_after_hour
        } else {
            self.left_after_recovery
        }
    }

    #[inline]
    fn heat_kw(&self, left: f64, room_c: f64, target_c: f64, outdoor_c: f64, gains_kw: f64) -> f64 {
        let settles_c = self.heads_for_c(left, room_c, target_c);
        greater(
            self.heat_loss_kw_per_k * (settles_c - outdoor_c) - gains_kw,
            0.0,
        )
    }

    /// Temperature the room heads for when a share `left` of its distance is left at the target, °C.
    fn heads_for_c(&self, left: f64, room_c: f64, target_c: f64) -> f64 {
        (target_c - room_c * left) / (1.0 - left)
    }

    /// Temperature that the heat wanted heads for, °C, and in how many hours it passes the target: one where the warmth is wanted at
    /// the time.
    pub fn recovery_heads_for_c(
        &self,
        room_c: f64,
        target_c: f64,
        at_the_time: bool,
    ) -> (f64, f64) {
        if at_the_time || room_c > target_c {
            (
                self.heads_for_c(self.left_after_hour, room_c, target_c),
                1.0,
            )
        } else {
            (
                self.heads_for_c(self.left_after_recovery, room_c, target_c),
                RECOVERY_H,
            )
        }
    }

    /// Whether it stores any heat: without storage nothing is gained by heating ahead.
    pub fn stores_heat(&self) -> bool {
        self.capacity_kwh_per_k > 0.0
    }

    /// Heat capacity, kWh/K.
    pub fn capacity_kwh_per_k(&self) -> f64 {
        self.capacity_kwh_per_k
    }

    /// Effective solar aperture, m².
    pub fn solar_aperture_m2(&self) -> f64 {
        self.solar_aperture_m2
    }

    /// Steps the room through one hour with a constant heat (kWh in the hour).
    #[inline]
    pub fn step(
        &self,
        room_c: f64,
        heat_kwh: f64,
        outdoor_c: f64,
        gains_kw: f64,
        set_point_c: f64,
    ) -> RoomStep {
        let settles_c = outdoor_c + (heat_kwh + gains_kw) / self.heat_loss_kw_per_k;
        let free_c = settles_c + (room_c - settles_c) * self.left_after_hour;
        // Opening windows holds the room at the airing limit, unless it is warmer outside still.
        let aired_above_c = greater(set_point_c + self.airing_k, outdoor_c);
        let end_c = lesser(free_c, greater(aired_above_c, lesser(room_c, free_c)));
        let stored_kwh = self.capacity_kwh_per_k * (end_c - room_c);
        let free_loss_kwh = heat_kwh + gains_kw - self.capacity_kwh_per_k * (free_c - room_c);
        // What is left of heat and gains after loss and storage, written so that an hour without airing holds a plain 0.
        let aired_kwh = self.capacity_kwh_per_k * (free_c - end_c);
        RoomStep {
            end_c,
            loss_kwh: free_loss_kwh,
            stored_kwh,
            aired_kwh,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn terrace() -> Fabric {
        Fabric::new(
            212.0,
            Construction::Medium.capacity_kwh_per_k(96.0),
            0.0,
            0.0,
        )
    }

    /// By hand: at −4 °C, 212 W/K: 5.09 kW from 20 °C, 4.13 kW from 15.5 °C.
    #[test]
    fn design_load_is_taken_from_the_set_point_not_the_base_temperature() {
        assert!((terrace().design_load_kw(20.0, -4.0) - 5.088).abs() < 1e-9);
        assert!((terrace().design_load_kw(15.5, -4.0) - 4.134).abs() < 1e-9);
    }

    /// The analytic exponential of a cooling body, and half-life = τ ln 2.
    #[test]
    fn an_unheated_room_cools_along_the_exponential() {
        let fabric = terrace();
        let mut room = 20.0;
        for _ in 0..24 {
            room = fabric.step(room, 0.0, 0.0, 0.0, 20.0).end_c;
        }
        let expected = 20.0 * (-24.0 / fabric.time_constant_h()).exp();
        assert!((room - expected).abs() < 1e-9, "{room} {expected}");
    }

    #[test]
    fn without_storage_the_demand_is_the_steady_loss() {
        let fabric = Fabric::new(200.0, 0.0, 0.3, 0.0);
        let heat = fabric.heat_to_reach_kwh(15.0, 20.0, -5.0, 0.3);
        assert!((heat - (5.0 - 0.3)).abs() < 1e-12);
        assert!((fabric.step(15.0, heat, -5.0, 0.3, 20.0).end_c - 20.0).abs() < 1e-12);
    }

    /// EN 12831-1: 0.34 Wh/m³K \[from memory\]; 240 m³ at 0.5 air changes an hour lose 40.8 W/K.
    #[test]
    fn ventilation_follows_volume_and_air_changes() {
        assert!((ventilation_w_per_k(0.5, 240.0) - 40.8).abs() < 1e-9);
        // Density times heat capacity of dry air at 20 °C and 101.325 kPa: 1.2041 kg/m³ and 1006 J/kgK.
        assert!((AIR_WH_PER_M3_K - 1.2041 * 1006.0 / 3600.0).abs() < 0.005);
    }

    /// At the set point the heat wanted is the steady loss, so that a year of it is the steady-state sum.
    #[test]
    fn at_the_set_point_the_heat_wanted_is_the_steady_loss() {
        let wanted = terrace().heat_wanted_kw(20.0, 20.0, 3.0, 0.4);
        assert!((wanted - (0.212 * 17.0 - 0.4)).abs() < 1e-12);
        let cool = terrace().heat_wanted_kw(19.5, 20.0, 3.0, 0.4);
        assert!(cool > wanted && cool < terrace().heat_to_reach_kwh(19.5, 20.0, 3.0, 0.4));
        // A room that is let cool asks for nothing, and does not slow its fall.
        assert_eq!(terrace().heat_wanted_kw(20.0, 16.0, 3.0, 0.0), 0.0);
    }

    proptest! {
        /// The heat for several hours, given hour by hour, ends at the target.
        #[test]
        fn a_warm_up_spread_over_hours_arrives(
            loss in 50.0..600.0, tau in 5.0..300.0, room in 10.0..18.0, outdoor in -20.0..8.0, hours in 1..12u8,
        ) {
            let fabric = Fabric::new(loss, tau * loss / 1000.0, 0.0, 0.0);
            let heat = fabric.heat_to_reach_in_kw(hours, room, 20.0, outdoor, 0.0);
            let mut now = room;
            for _ in 0..hours {
                now = fabric.step(now, heat, outdoor, 0.0, 25.0).end_c;
            }
            prop_assert!((now - 20.0).abs() < 1e-6, "{now}");
        }

        #[test]
        fn the_heat_that_reaches_a_target_reaches_it(
            loss in 50.0..600.0, tau in 0.0..300.0, room in 10.0..25.0, target in 12.0..24.0f64,
            outdoor in -30.0..11.0, gains in 0.0..0.3,
        ) {
            let fabric = Fabric::new(loss, tau * loss / 1000.0, gains, 0.0);
            let heat = fabric.heat_to_reach_kwh(room, target, outdoor, gains);
            let step = fabric.step(room, heat, outdoor, gains, target);
            if heat > 0.0 {
                prop_assert!((step.end_c - target).abs() < 1e-6, "{} {}", step.end_c, target);
            } else {
                prop_assert!(step.end_c >= target - 1e-9);
            }
        }

        #[test]
        fn energy_closes_and_airing_only_takes_away(
            loss in 50.0..600.0, tau in 0.0..300.0, room in 10.0..30.0, heat in 0.0..20.0,
            outdoor in -30.0..40.0, gains in 0.0..8.0,
        ) {
            let fabric = Fabric::new(loss, tau * loss / 1000.0, 0.0, 0.0);
            let step = fabric.step(room, heat, outdoor, gains, 20.0);
            prop_assert!((heat + gains - step.loss_kwh - step.stored_kwh - step.aired_kwh).abs() < 1e-9);
            prop_assert!(step.aired_kwh >= -1e-9, "{}", step.aired_kwh);
        }
    }
}
