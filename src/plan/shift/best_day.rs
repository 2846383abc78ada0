//! The cheapest way through each day, by dynamic programming over rooms and store.
//!
//! Each civil day is searched backwards from half a day after its end: for every hour, every temperature of rooms and store
//! on a coarse grid and every action, `year::step` itself says what the hour costs and where it ends. The day is then
//! walked forwards from where it really begins, and its actions become the plan. Weather, draws and prices are known
//! beforehand, so the saving is an upper bound for a controller with the same latitude.

use std::ops::Range;

use super::Shifting;
use crate::year::{Plan, Site, State, System, Unwatched, step};

/// Hours beyond the day that are searched with it, so that its end is not worthless.
const BEYOND_H: usize = 12;
/// Room temperatures of the grid.
const ROOMS: usize = 13;
/// Store temperatures of the grid.
const STORES: usize = 9;
/// The grid reaches beyond the comfort band by this much, K: sun lifts rooms, short machines let them fall.
const ROOM_MARGIN_K: f64 = 0.5;
/// The grid reaches below the point where the store is heated again by this much, K: a large draw within an hour.
const STORE_MARGIN_K: f64 = 8.0;
/// Heat left at the end of what is searched is worth the mean price over this COP. Common practice, no source.
const TERMINAL_COP: f64 = 3.0;
/// A kelvin below the point where backup helps for an hour counts like this many kilowatt-hours at the mean price. A choice of ours: it
/// is far dearer than the heat that would have prevented it.
const DISCOMFORT_KWH: f64 = 20.0;

/// What can be done in an hour: how far rooms and store are moved, K.
type Action = (f64, f64);

/// The plan that takes the cheapest way through each day from a state on.
pub fn best_day(
    plan: &Plan,
    site: &Site,
    system: &System,
    shifting: &Shifting,
    mut state: State,
) -> Plan {
    let hours = site.civil.len();
    let mut search = Search::new(plan, site, system, shifting);
    let mut first = 0;
    for day in site.civil.chunk_by(|a, b| a.date == b.date) {
        let day = first..first + day.len();
        first = day.end;
        search.backwards(day.start..(day.end + BEYOND_H).min(hours), &state);
        search.forwards(day, &mut state);
    }
    search.shifted
}

struct Search<'a> {
    base: &'a Plan,
    site: &'a Site,
    system: &'a System,
    shifting: &'a Shifting,
    shifted: Plan,
    actions: Vec<Action>,
    grid: Grid,
    /// Cost from an hour of the search to its end, for every node; one more than there are hours.
    to_go: Vec<[[f64; STORES]; ROOMS]>,
    mean_price: f64,
}

/// Evenly spaced temperatures of rooms and store, °C.
#[derive(Debug, Clone, Copy)]
struct Grid {
    rooms: (f64, f64),
    stores: (f64, f64),
}

impl Grid {
    fn room(&self, i: usize) -> f64 {
        along(self.rooms, i, ROOMS)
    }

    fn store(&self, j: usize) -> f64 {
        along(self.stores, j, STORES)
    }

    /// A value between the nodes, level beyond them.
    fn at(&self, values: &[[f64; STORES]; ROOMS], room_c: f64, store_c: f64) -> f64 {
        let (i, x) = place(self.rooms, room_c, ROOMS);
        let (j, y) = place(self.stores, store_c, STORES);
        let between = |a: f64, b: f64, share: f64| a + (b - a) * share;
        between(
            between(values[i][j], values[i][j + 1], y),
            between(values[i + 1][j], values[i + 1][j + 1], y),
            x,
        )
    }
}

fn along((low, high): (f64, f64), i: usize, nodes: usize) -> f64 {
    low + (high - low) * i as f64 / (nodes - 1) as f64
}

/// The node below a value and the share of the way to the next.
fn place((low, high): (f64, f64), value: f64, nodes: usize) -> (usize, f64) {
    let last = (nodes - 1) as f64;
    let at = ((value - low) / (high - low) * last).clamp(0.0, last);
    let below = (at as usize).min(nodes - 2);
    (below, at - below as f64)
}

impl<'a> Search<'a> {
    fn new(base: &'a Plan, site: &'a Site, system: &'a System, shifting: &'a Shifting) -> Self {
        let mut shifted = base.clone();
        for below_c in shifted.backup_below_c.iter_mut() {
            *below_c -= shifting.rooms.below_k;
        }
        shifted.asked_c = Some(base.set_point_c.clone());
        shifted.store_shift_k = Some(vec![0.0; site.civil.len()].into());
        let store = system.home.hot_water.as_ref().and_then(|water| water.store);
        let stores = store.map_or((0.0, 1.0), |store| {
            let due_c = store.set_point_c - store.hysteresis_k - shifting.store.below_k;
            (
                due_c - STORE_MARGIN_K,
                store.set_point_c + shifting.store.above_k,
            )
        });
        let rooms = &shifting.rooms;
        let mut room_moves = vec![
            -rooms.below_k,
            (rooms.above_k - rooms.below_k) / 2.0,
            rooms.above_k,
        ];
        room_moves.dedup();
        let mut store_moves = vec![-shifting.store.below_k, 0.0, shifting.store.above_k];
        store_moves.dedup();
        if store.is_none() {
            store_moves.truncate(1);
        }
        let actions = room_moves
            .iter()
            .flat_map(|&room| store_moves.iter().map(move |&store| (room, store)))
            .collect();
        Self {
            base,
            site,
            system,
            shifting,
            shifted,
            actions,
            grid: Grid {
                rooms: (0.0, 1.0),
                stores,
            },
            to_go: Vec::new(),
            mean_price: 0.0,
        }
    }

    /// Finds the cost to go of every hour of a stretch; what lasts beside rooms and store is taken from the state.
    fn backwards(&mut self, hours: Range<usize>, state: &State) {
        let set_points = &self.base.set_point_c[hours.clone()];
        let low_c = set_points.iter().copied().fold(f64::INFINITY, f64::min);
        let high_c = set_points.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        self.grid.rooms = (
            low_c - self.shifting.rooms.below_k - ROOM_MARGIN_K,
            high_c + self.shifting.rooms.above_k + ROOM_MARGIN_K,
        );
        let prices = &self.base.electricity.price[hours.clone()];
        self.mean_price = prices.iter().sum::<f64>() / prices.len() as f64;
        self.to_go = vec![[[0.0; STORES]; ROOMS]; hours.len() + 1];
        self.to_go[hours.len()] = self.terminal();
        for hour in hours.clone().rev() {
            let h = hour - hours.start;
            for i in 0..ROOMS {
                for j in 0..STORES {
                    let mut from = *state;
                    from.place(self.grid.room(i), self.grid.store(j));
                    self.to_go[h][i][j] = self.best(hour, h, &from).1;
                }
            }
        }
    }

    /// What heat left at the end saves: the cost of making it at the mean price.
    fn terminal(&self) -> [[f64; STORES]; ROOMS] {
        let home = &self.system.home;
        let store = home.hot_water.as_ref().and_then(|water| water.store);
        let room_kwh_per_k =
            home.fabric.time_constant_h() * home.fabric.heat_loss_w_per_k() / 1000.0;
        let store_kwh_per_k = store.map_or(0.0, |store| store.capacity_kwh_per_k);
        let per_kwh = self.mean_price / TERMINAL_COP;
        let mut values = [[0.0; STORES]; ROOMS];
        for (i, row) in values.iter_mut().enumerate() {
            for (j, value) in row.iter_mut().enumerate() {
                let room_kwh = room_kwh_per_k * (self.grid.room(i) - self.grid.rooms.0);
                let store_kwh = store_kwh_per_k * (self.grid.store(j) - self.grid.stores.0);
                *value = -per_kwh * (room_kwh + store_kwh);
            }
        }
        values
    }

    /// The best action in an hour from a state, and the cost from there to the end.
    fn best(&mut self, hour: usize, h: usize, from: &State) -> (Action, f64) {
        let mut best = ((0.0, 0.0), f64::INFINITY);
        for k in 0..self.actions.len() {
            let action = self.actions[k];
            let mut state = *from;
            let cost = self.take(hour, action, &mut state);
            let total = cost
                + self
                    .grid
                    .at(&self.to_go[h + 1], state.room_c, state.store.mean_c);
            if total < best.1 {
                best = (action, total);
            }
        }
        best
    }

    /// Takes an action in an hour: what it costs, discomfort included.
    fn take(&mut self, hour: usize, (room_k, store_k): Action, state: &mut State) -> f64 {
        let asked_c = self.base.set_point_c[hour];
        self.shifted.set_point_c[hour] = asked_c + room_k;
        if let Some(column) = &mut self.shifted.store_shift_k {
            column[hour] = store_k;
        }
        let row = step(
            hour,
            self.site,
            self.system,
            &self.shifted,
            state,
            &mut Unwatched,
        );
        // What the household bears without shifting too: rooms dip while hot water is made.
        let too_cool_k = (self.shifted.backup_below_c[hour] - row.indoor_c).max(0.0);
        row.energy_cost + too_cool_k * DISCOMFORT_KWH * self.mean_price.abs()
    }

    /// Walks a day from where it really begins; its actions stay in the plan.
    fn forwards(&mut self, day: Range<usize>, state: &mut State) {
        for hour in day.clone() {
            let (action, _) = self.best(hour, hour - day.start, state);
            self.take(hour, action, state);
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_grid_gives_back_its_nodes_and_straight_lines_between() {
        let grid = Grid {
            rooms: (19.0, 22.0),
            stores: (40.0, 60.0),
        };
        let mut values = [[0.0; STORES]; ROOMS];
        for (i, row) in values.iter_mut().enumerate() {
            for (j, value) in row.iter_mut().enumerate() {
                *value = 2.0 * grid.room(i) - 0.5 * grid.store(j);
            }
        }
        for (room, store) in [(19.0, 40.0), (22.0, 60.0), (20.3, 47.1), (21.99, 41.0)] {
            let found = grid.at(&values, room, store);
            assert!((found - (2.0 * room - 0.5 * store)).abs() < 1e-9);
        }
        assert_eq!(grid.at(&values, 30.0, 90.0), values[ROOMS - 1][STORES - 1]);
    }
}
