//! Hot water: how much is drawn in each hour of the day and of the year.

use super::Store;

/// Heat that warms a litre of water by a kelvin, kWh: 4.186 kJ/kg K at about 1 kg/L.
///
/// By hand, 4.186 kJ/(kg K): 120 L from 10 to 50 °C are 5.58 kWh.
pub const WATER_KWH_PER_L_K: f64 = 4.186 / 3600.0;

/// A draw of a tapping profile: minutes after midnight and heat, kWh.
type Draw = (u16, f64);

/// A clock time in minutes.
const fn at(hour: u16, minute: u16) -> u16 {
    hour * 60 + minute
}

/// The usual small draw, kWh.
const SMALL: f64 = 0.105;

/// Profile M of Commission Delegated Regulation (EU) No 811/2013, Annex VII, table 15: 23 draws, 5.845 kWh.
const PROFILE_M: &[Draw] = &[
    (at(7, 0), SMALL),
    (at(7, 5), 1.4),
    (at(7, 30), SMALL),
    (at(8, 1), SMALL),
    (at(8, 15), SMALL),
    (at(8, 30), SMALL),
    (at(8, 45), SMALL),
    (at(9, 0), SMALL),
    (at(9, 30), SMALL),
    (at(10, 30), SMALL),
    (at(11, 30), SMALL),
    (at(11, 45), SMALL),
    (at(12, 45), 0.315),
    (at(14, 30), SMALL),
    (at(15, 30), SMALL),
    (at(16, 30), SMALL),
    (at(18, 0), SMALL),
    (at(18, 15), SMALL),
    (at(18, 30), SMALL),
    (at(19, 0), SMALL),
    (at(20, 30), 0.735),
    (at(21, 15), SMALL),
    (at(21, 30), 1.4),
];

/// Profile L of the same table: 24 draws, 11.655 kWh.
const PROFILE_L: &[Draw] = &[
    (at(7, 0), SMALL),
    (at(7, 5), 1.4),
    (at(7, 30), SMALL),
    (at(7, 45), SMALL),
    (at(8, 5), 3.605),
    (at(8, 25), SMALL),
    (at(8, 30), SMALL),
    (at(8, 45), SMALL),
    (at(9, 0), SMALL),
    (at(9, 30), SMALL),
    (at(10, 30), SMALL),
    (at(11, 30), SMALL),
    (at(11, 45), SMALL),
    (at(12, 45), 0.315),
    (at(14, 30), SMALL),
    (at(15, 30), SMALL),
    (at(16, 30), SMALL),
    (at(18, 0), SMALL),
    (at(18, 15), SMALL),
    (at(18, 30), SMALL),
    (at(19, 0), SMALL),
    (at(20, 30), 0.735),
    (at(21, 0), 3.605),
    (at(21, 30), SMALL),
];

/// Profile XL of the same table: 30 draws, 19.07 kWh.
const PROFILE_XL: &[Draw] = &[
    (at(7, 0), SMALL),
    (at(7, 15), 1.82),
    (at(7, 26), SMALL),
    (at(7, 45), 4.42),
    (at(8, 1), SMALL),
    (at(8, 15), SMALL),
    (at(8, 30), SMALL),
    (at(8, 45), SMALL),
    (at(9, 0), SMALL),
    (at(9, 30), SMALL),
    (at(10, 0), SMALL),
    (at(10, 30), SMALL),
    (at(11, 0), SMALL),
    (at(11, 30), SMALL),
    (at(11, 45), SMALL),
    (at(12, 45), 0.735),
    (at(14, 30), SMALL),
    (at(15, 0), SMALL),
    (at(15, 30), SMALL),
    (at(16, 0), SMALL),
    (at(16, 30), SMALL),
    (at(17, 0), SMALL),
    (at(18, 0), SMALL),
    (at(18, 15), SMALL),
    (at(18, 30), SMALL),
    (at(19, 0), SMALL),
    (at(20, 30), 0.735),
    (at(20, 46), 4.42),
    (at(21, 15), SMALL),
    (at(21, 30), 4.42),
];

/// A published tapping profile of Regulation (EU) No 811/2013.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum TappingProfile {
    /// A home with a shower.
    M,
    /// A home with a bath.
    L,
    /// A home with several baths.
    Xl,
}

impl TappingProfile {
    fn draws(self) -> &'static [Draw] {
        match self {
            Self::M => PROFILE_M,
            Self::L => PROFILE_L,
            Self::Xl => PROFILE_XL,
        }
    }

    /// Heat of a day, kWh.
    pub fn daily_kwh(self) -> f64 {
        self.draws().iter().map(|draw| draw.1).sum()
    }

    /// Share of a day's heat drawn in each clock hour; sums to 1.
    pub fn shares(self) -> [f64; 24] {
        let daily_kwh = self.daily_kwh();
        let mut shares = [0.0; 24];
        for (minute, kwh) in self.draws() {
            shares[usize::from(minute / 60)] += kwh / daily_kwh;
        }
        shares
    }
}

/// A year's hot water and how it is kept ready.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HotWater {
    /// Heat drawn at the taps in a day of each month, January first, kWh.
    pub daily_kwh: [f64; 12],
    /// Share of a day's heat by clock hour; sums to 1.
    pub shares: [f64; 24],
    /// Cold water of each month, °C.
    pub cold_c: [f64; 12],
    /// The store; absent where a boiler heats the water as it is drawn.
    pub store: Option<Store>,
    /// Temperature of the drawn water, °C.
    pub draw_c: f64,
}

impl HotWater {
    /// Heat of a volume (L) drawn at one temperature from cold water at another (°C), kWh.
    pub fn energy_kwh(volume_l: f64, draw_c: f64, cold_c: f64) -> f64 {
        volume_l * WATER_KWH_PER_L_K * (draw_c - cold_c)
    }

    /// Heat asked for at the taps in a clock hour of a month (from 0), kWh.
    pub fn drawn_kwh(&self, month0: usize, clock_hour: u8) -> f64 {
        self.daily_kwh[month0 % 12] * self.shares[usize::from(clock_hour) % 24]
    }

    /// Heat of a mean day of the year, kWh; months count alike.
    pub fn mean_daily_kwh(&self) -> f64 {
        self.daily_kwh.iter().sum::<f64>() / 12.0
    }

    /// Cold water of the year's mean, °C.
    pub fn mean_cold_c(&self) -> f64 {
        self.cold_c.iter().sum::<f64>() / 12.0
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// By hand, 4.186 kJ/(kg K): 120 L is 5.58 kWh from 10 to 50 °C, 4.19 kWh from 10 to 40 °C.
    #[test]
    fn a_volume_means_nothing_without_temperatures() {
        assert!((HotWater::energy_kwh(120.0, 50.0, 10.0) - 5.58).abs() < 0.005);
        assert!((HotWater::energy_kwh(120.0, 40.0, 10.0) - 4.19).abs() < 0.005);
    }

    /// Regulation (EU) No 811/2013, Annex VII, table 15: sums and numbers of draws of M, L and XL.
    #[test]
    fn profiles_add_up_to_their_published_sums() {
        for (profile, sum, draws) in [
            (TappingProfile::M, 5.845, 23),
            (TappingProfile::L, 11.655, 24),
            (TappingProfile::Xl, 19.07, 30),
        ] {
            assert!((profile.daily_kwh() - sum).abs() < 1e-9, "{profile:?}");
            assert_eq!(profile.draws().len(), draws);
            assert!((profile.shares().iter().sum::<f64>() - 1.0).abs() < 1e-12);
            assert!(profile.draws().windows(2).all(|pair| pair[0].0 < pair[1].0));
        }
        // The evening draws of M: 21:15 0.105 and 21:30 1.4 kWh; the lunch draw 0.315 kWh.
        let shares = TappingProfile::M.shares();
        assert!((shares[21] * 5.845 - 1.505).abs() < 1e-9);
        assert!((shares[12] * 5.845 - 0.315).abs() < 1e-9);
    }
}
