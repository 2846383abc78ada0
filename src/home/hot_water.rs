//! Hot water: what is drawn, hour by hour, and the store that answers it.

/// Heat that warms a litre of water by a kelvin, kWh: 4.186 kJ/kg K at about 1 kg/L.
///
/// methods §11: 120 L from 10 to 50 °C are 5.58 kWh.
pub const WATER_KWH_PER_L_K: f64 = 4.186 / 3600.0;

/// Share of a day's hot water drawn in each clock hour.
///
/// Summed by hour from tapping profile M of Commission Delegated Regulation (EU) No 811/2013, Annex VII, table 15
/// (5.845 kWh, 23 draws).
pub const DRAW_SHARES: [f64; 24] = {
    const KWH: [f64; 24] = {
        let mut kwh = [0.0; 24];
        kwh[7] = 0.105 * 2.0 + 1.4;
        kwh[8] = 0.105 * 4.0;
        kwh[9] = 0.105 * 2.0;
        kwh[10] = 0.105;
        kwh[11] = 0.105 * 2.0;
        kwh[12] = 0.315;
        kwh[14] = 0.105;
        kwh[15] = 0.105;
        kwh[16] = 0.105;
        kwh[18] = 0.105 * 3.0;
        kwh[19] = 0.105;
        kwh[20] = 0.735;
        kwh[21] = 0.105 + 1.4;
        kwh
    };
    let mut shares = [0.0; 24];
    let mut sum = 0.0;
    let mut hour = 0;
    while hour < 24 {
        sum += KWH[hour];
        hour += 1;
    }
    hour = 0;
    while hour < 24 {
        shares[hour] = KWH[hour] / sum;
        hour += 1;
    }
    shares
};

/// A day's hot water and how it is kept ready.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HotWater {
    /// Heat drawn at the taps in a day, kWh.
    pub daily_kwh: f64,
    /// Share of it by clock hour; sums to 1.
    pub shares: [f64; 24],
    /// The store; absent where a boiler heats the water as it is drawn.
    pub store: Option<Store>,
    /// Temperature at which an instantaneous heater makes it, °C.
    pub draw_c: f64,
}

impl HotWater {
    /// Heat of a volume (L) drawn at one temperature from cold water at another (°C), kWh.
    pub fn energy_kwh(volume_l: f64, draw_c: f64, cold_c: f64) -> f64 {
        volume_l * WATER_KWH_PER_L_K * (draw_c - cold_c)
    }

    /// Heat drawn at the taps in a clock hour, kWh.
    pub fn drawn_kwh(&self, clock_hour: u8) -> f64 {
        self.daily_kwh
            * self
                .shares
                .get(usize::from(clock_hour))
                .copied()
                .unwrap_or(0.0)
    }
}

/// A mixed hot-water store, heated in blocks.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Store {
    /// Heat that warms it by a kelvin, kWh/K.
    pub capacity_kwh_per_k: f64,
    /// Temperature at which a block ends, °C.
    pub set_point_c: f64,
    /// A block starts this far below the set point, K.
    pub hysteresis_k: f64,
    /// Standing loss per kelvin above its surroundings, kW/K.
    pub loss_kw_per_k: f64,
    /// Surroundings, °C.
    pub surroundings_c: f64,
    /// Flow above store temperature that its coil needs while charging, K.
    pub coil_k: f64,
}

/// A store after an hour's draw and loss, before it is heated.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StoreStep {
    /// Its temperature before charging, °C.
    pub before_c: f64,
    /// Heat drawn from it, kWh.
    pub drawn_kwh: f64,
    /// Heat lost to its surroundings, kWh.
    pub lost_kwh: f64,
    /// Heat that brings it to its set point, kWh; 0 when no block is due.
    pub wanted_kwh: f64,
}

impl Store {
    /// A store of a volume (L) with the greatest standing loss that EU label class C allows.
    ///
    /// 16.66 + 8.33·V^0.4 W at 65 °C in 20 °C air (Regulation (EU) No 812/2013), scaled by temperature difference.
    pub fn of_volume(volume_l: f64, set_point_c: f64) -> Self {
        Self {
            capacity_kwh_per_k: volume_l * WATER_KWH_PER_L_K,
            set_point_c,
            hysteresis_k: 5.0,
            loss_kw_per_k: (16.66 + 8.33 * volume_l.powf(0.4)) / 1000.0 / 45.0,
            surroundings_c: 20.0,
            coil_k: 5.0,
        }
    }

    /// The same store with its set point moved by some kelvins; whether a block is due moves with it.
    pub fn shifted(&self, by_k: f64) -> Self {
        Self {
            set_point_c: self.set_point_c + by_k,
            ..*self
        }
    }

    /// Draws and loses an hour's heat, then says what a block must bring; `charging` is whether one is under way.
    pub fn step(&self, store_c: f64, drawn_kwh: f64, charging: bool) -> StoreStep {
        let lost_kwh = self.loss_kw_per_k * (store_c - self.surroundings_c);
        let before_c = store_c - (drawn_kwh + lost_kwh) / self.capacity_kwh_per_k;
        let due = charging || before_c < self.set_point_c - self.hysteresis_k;
        let wanted_kwh = if due {
            (self.set_point_c - before_c).max(0.0) * self.capacity_kwh_per_k
        } else {
            0.0
        };
        StoreStep {
            before_c,
            drawn_kwh,
            lost_kwh,
            wanted_kwh,
        }
    }

    /// Its temperature after a charge, °C.
    pub fn charged_c(&self, before_c: f64, heat_kwh: f64) -> f64 {
        before_c + heat_kwh / self.capacity_kwh_per_k
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// methods §11: 120 L is 5.58 kWh from 10 to 50 °C, 4.19 kWh from 10 to 40 °C.
    #[test]
    fn a_volume_means_nothing_without_temperatures() {
        assert!((HotWater::energy_kwh(120.0, 50.0, 10.0) - 5.58).abs() < 0.005);
        assert!((HotWater::energy_kwh(120.0, 40.0, 10.0) - 4.19).abs() < 0.005);
    }

    /// EU 811/2013 profile M: 5.845 kWh; the two 1.4 kWh draws stand at 07:05 and 21:30.
    #[test]
    fn draws_add_up_to_the_published_profile() {
        assert!((DRAW_SHARES.iter().sum::<f64>() - 1.0).abs() < 1e-12);
        assert!((DRAW_SHARES[21] * 5.845 - 1.505).abs() < 1e-9);
        assert!((DRAW_SHARES[12] * 5.845 - 0.315).abs() < 1e-9);
    }

    /// methods §11: class C, 200/250/300 L lose 86/92/98 W at 65 °C; 57 W for 200 L at 50 °C in 20 °C air.
    #[test]
    fn standing_loss_follows_the_label_class() {
        for (volume, watts) in [(200.0, 86.0), (250.0, 92.0), (300.0, 98.0)] {
            assert!(
                (Store::of_volume(volume, 65.0).loss_kw_per_k * 45.0 * 1000.0 - watts).abs() < 0.5
            );
        }
        let lost = Store::of_volume(200.0, 50.0)
            .step(50.0, 0.0, false)
            .lost_kwh;
        assert!((lost * 1000.0 - 57.0).abs() < 0.5);
    }

    #[test]
    fn a_block_starts_below_the_hysteresis_and_ends_at_the_set_point() {
        let store = Store::of_volume(200.0, 50.0);
        assert_eq!(store.step(47.0, 0.0, false).wanted_kwh, 0.0);
        let due = store.step(44.0, 0.0, false);
        assert!((store.charged_c(due.before_c, due.wanted_kwh) - 50.0).abs() < 1e-12);
        assert!(store.step(47.0, 0.0, true).wanted_kwh > 0.0);
    }
}
