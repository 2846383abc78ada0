//! The room table: the worst room sets the flow temperature, and a larger radiator there would stop it.

/// Excess temperature at which radiators are rated, K (EN 442: 75/65/20).
const RATED_EXCESS_K: f64 = 50.0;
/// Exponent of radiator output against excess temperature (EN 442, panel radiators).
const EXPONENT: f64 = 1.3;

/// One room at the design point.
#[derive(Debug, Clone, PartialEq)]
pub struct Room {
    /// What it is called.
    pub name: String,
    /// Heat it loses at the design point, kW.
    pub load_kw: f64,
    /// Its temperature, °C.
    pub room_c: f64,
    /// Output of its radiators at ΔT 50 K, kW.
    pub radiator_kw: f64,
}

/// The flow at which water with a spread (K) has a mean excess over a room.
fn flow_c(room_c: f64, excess_k: f64, spread_k: f64) -> f64 {
    room_c + excess_k + spread_k / 2.0
}

impl Room {
    /// Flow temperature its radiators need to carry its load at a spread (K), °C.
    ///
    /// EN 442: output ∝ (mean water − room)^1.3.
    pub fn flow_needed_c(&self, spread_k: f64) -> f64 {
        let excess_k = RATED_EXCESS_K * (self.load_kw / self.radiator_kw).powf(1.0 / EXPONENT);
        flow_c(self.room_c, excess_k, spread_k)
    }

    /// Radiator output at ΔT 50 K that carries its load with a flow (°C) and a spread (K), kW; nothing where the mean water
    /// is no warmer than the room.
    pub fn radiator_needed_kw(&self, flow_c: f64, spread_k: f64) -> Option<f64> {
        let excess_k = flow_c - spread_k / 2.0 - self.room_c;
        (excess_k > 0.0).then(|| self.load_kw * (RATED_EXCESS_K / excess_k).powf(EXPONENT))
    }
}

/// Which room sets the flow, and what would stop it.
#[derive(Debug, Clone, PartialEq)]
pub struct WorstRoom {
    /// Its place in the table.
    pub place: usize,
    /// Flow it needs, °C.
    pub flow_c: f64,
    /// The room that sets the flow once this one no longer does, and the flow it needs, °C; absent for a single room.
    pub next: Option<(usize, f64)>,
    /// Radiator output at ΔT 50 K at which it would not set the flow any more, kW.
    pub remedy_kw: Option<f64>,
}

/// Finds the worst room of a table at a spread (K); nothing for an empty table.
pub fn worst_room(rooms: &[Room], spread_k: f64) -> Option<WorstRoom> {
    let mut needs: Vec<(usize, f64)> = rooms
        .iter()
        .map(|room| room.flow_needed_c(spread_k))
        .enumerate()
        .collect();
    needs.sort_by(|a, b| b.1.total_cmp(&a.1));
    let &(place, flow_c) = needs.first()?;
    let next = needs.get(1).copied();
    let remedy_kw = next.and_then(|(_, flow_c)| rooms[place].radiator_needed_kw(flow_c, spread_k));
    Some(WorstRoom {
        place,
        flow_c,
        next,
        remedy_kw,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn room(name: &str, load_kw: f64, radiator_kw: f64) -> Room {
        Room {
            name: name.to_owned(),
            load_kw,
            room_c: 20.0,
            radiator_kw,
        }
    }

    /// EN 442 factor at ΔT 30 is 0.5148 ((30/50)^1.3): 1 kW from a radiator of 1.9425 kW needs mean water at 50 °C.
    #[test]
    fn a_room_needs_the_flow_its_radiator_asks_for() {
        let room = room("Living room", 1.0, 1.0 / 0.5148);
        assert!((room.flow_needed_c(0.0) - 50.0).abs() < 0.005);
        assert!((room.flow_needed_c(6.0) - 53.0).abs() < 0.005);
        let needed = room.radiator_needed_kw(53.0, 6.0).unwrap();
        assert!((needed - room.radiator_kw).abs() < 1e-3);
        assert_eq!(room.radiator_needed_kw(22.0, 6.0), None);
    }

    #[test]
    fn with_the_remedy_the_next_room_sets_the_flow() {
        let mut rooms = vec![
            room("a", 1.0, 2.4),
            room("b", 1.2, 1.6),
            room("c", 0.5, 1.0),
        ];
        let worst = worst_room(&rooms, 6.0).unwrap();
        assert_eq!(worst.place, 1);
        rooms[1].radiator_kw = worst.remedy_kw.unwrap() * 1.001;
        let after = worst_room(&rooms, 6.0).unwrap();
        assert_eq!(Some(after.place), worst.next.map(|next| next.0));
        assert!(after.flow_c < worst.flow_c - 1.0);
        assert_eq!(worst_room(&[], 6.0), None);
    }
}
