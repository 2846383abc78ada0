//! One hour of the ledger. One declaration makes the fields, the column names with units, their meaning and the sums.

use crate::fault::{self, Fault};
use std::ops::{BitOr, BitOrAssign};

/// What the columns of the ledger are called and mean.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Column {
    /// Name with its unit.
    pub name: &'static str,
    /// What it holds.
    pub meaning: &'static str,
}

macro_rules! ledger {
    (
        sums { $($sum:ident: $sum_meaning:literal;)* }
        states { $($state:ident: $state_meaning:literal;)* }
        sometimes { $($maybe:ident: $maybe_meaning:literal;)* }
    ) => {
        /// One hour of one system.
        #[derive(Debug, Clone, Copy, Default, PartialEq)]
        pub struct Row {
            $(#[doc = $sum_meaning] pub $sum: f64,)*
            $(#[doc = $state_meaning] pub $state: f64,)*
            $(#[doc = $maybe_meaning] pub $maybe: Option<f64>,)*
            /// What was out of the ordinary in the hour.
            pub flags: Flags,
        }

        /// Sums over hours of everything in a row that can be summed.
        #[derive(Debug, Clone, Copy, Default, PartialEq)]
        pub struct Sums {
            $(#[doc = $sum_meaning] pub $sum: f64,)*
        }

        impl Sums {
            /// Adds an hour.
            #[inline]
            pub fn add(&mut self, row: &Row) {
                $(self.$sum += row.$sum;)*
            }

            /// Adds other sums, each times a factor.
            pub fn add_scaled(&mut self, other: &Sums, factor: f64) {
                $(self.$sum += other.$sum * factor;)*
            }
        }

        /// The columns, in the order of [`Row::values`].
        pub const COLUMNS: &[Column] = &[
            $(Column { name: stringify!($state), meaning: $state_meaning },)*
            $(Column { name: stringify!($maybe), meaning: $maybe_meaning },)*
            $(Column { name: stringify!($sum), meaning: $sum_meaning },)*
        ];

        impl Row {
            /// The values of the columns; nothing where there is no such thing in the hour.
            pub fn values(&self) -> [Option<f64>; COLUMNS.len()] {
                [
                    $(Some(self.$state),)*
                    $(self.$maybe,)*
                    $(Some(self.$sum),)*
                ]
            }
        }
    };
}

ledger! {
    sums {
        gains_kwh: "internal and solar gains";
        fabric_loss_kwh: "heat lost through fabric and ventilation";
        aired_kwh: "gains aired out because the rooms grew too warm";
        room_stored_kwh: "heat stored in the fabric, negative when it is given back";
        space_wanted_kwh: "heat that would have held the set point or warmed up for the next";
        machine_space_kwh: "heat of the machine to the rooms";
        heater_space_kwh: "heat of the boiler or electric heater to the rooms";
        water_drawn_kwh: "hot water drawn at the taps";
        water_missing_kwh: "hot water asked for that the store no longer held";
        store_loss_kwh: "standing loss of the hot-water store";
        store_stored_kwh: "heat stored in the hot-water store, negative when it is given back";
        machine_water_kwh: "heat of the machine to hot water";
        heater_water_kwh: "heat of the boiler or electric heater to hot water";
        extracted_kwh: "heat drawn from air, ground or water";
        returned_kwh: "heat put back into the ground";
        machine_space_electricity_kwh: "of the machine's electricity, that used for the rooms";
        machine_water_electricity_kwh: "of the machine's electricity, that used for hot water";
        compressor_kwh: "electricity of the compressor and its drive";
        source_side_kwh: "electricity of the fan, or of the pumps of brine and well";
        defrost_kwh: "electricity charged to defrosting";
        allowance_kwh: "electricity added as the allowance from laboratory to home";
        idle_kwh: "electricity of the machine at rest";
        circulation_kwh: "electricity of the heating circuit's pump";
        backup_kwh: "electricity of the backup heater, all of it heat to the rooms";
        immersion_kwh: "electricity of the immersion heater, all of it heat to hot water";
        heater_electricity_kwh: "electricity of boiler pump and fan, or of the electric heater";
        fuel_kwh: "fuel on gross calorific value";
        fuel_loss_kwh: "fuel that did not become heat";
        running_hours: "part of the hour the machine ran";
        starts: "starts of the compressor";
        energy_cost: "cost of the energy of the hour at its prices, tax included";
        carbon_kg: "greenhouse gas of the energy of the hour, CO2 equivalent";
    }
    states {
        outdoor_c: "outdoor air";
        set_point_c: "indoor set point";
        indoor_c: "indoor temperature at the end of the hour";
        electricity_price: "marginal price of a kilowatt-hour of electricity, tax included";
    }
    sometimes {
        fuel_price: "marginal price of a kilowatt-hour of fuel, tax included";
        source_c: "air or brine entering the machine, with its draw";
        store_c: "hot-water store at the end of the hour";
        space_flow_c: "flow to the emitters while heat is made";
        space_return_c: "return from the emitters";
        machine_flow_c: "flow leaving the machine for the rooms, above that to the emitters by what a header mixes away";
        water_flow_c: "flow to the hot-water coil, mean of the block";
        space_cop: "heat over electricity of the machine for the rooms";
        water_cop: "heat over electricity of the machine for hot water";
    }
}

/// What was out of the ordinary in an hour.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub struct Flags(u16);

macro_rules! flags {
    ($($(#[$doc:meta])* $name:ident = $bit:literal, $word:literal;)*) => {
        impl Flags {
            $($(#[$doc])* pub const $name: Flags = Flags(1 << $bit);)*
            /// Every flag with its word in the ledger.
            pub const ALL: &'static [(Flags, &'static str)] = &[$((Flags::$name, $word)),*];
        }
    };
}

flags! {
    /// The weather of the hour was repaired.
    WEATHER_REPAIRED = 0, "weather repaired";
    /// The machine started and stopped because its least output was too much.
    CYCLING = 1, "cycling";
    /// The flow the emitters need was more than the machine can reach.
    FLOW_CAPPED = 2, "flow capped";
    /// The source was outside the machine's limits.
    MACHINE_STOPPED = 3, "machine stopped";
    /// The machine gave its greatest output and it was not enough.
    AT_GREATEST_OUTPUT = 4, "at greatest output";
    /// The coil frosted.
    FROSTING = 5, "frosting";
    /// The backup heater ran.
    BACKUP = 6, "backup";
    /// The immersion heater ran.
    IMMERSION = 7, "immersion";
    /// The rooms ended the hour more than the stated tolerance below the set point.
    SHORT = 8, "short of heat";
    /// The rooms were being warmed up for a higher set point.
    RECOVERY = 9, "warming up";
    /// Hot water came out too cool.
    WATER_SHORT = 10, "short of hot water";
    /// A hygiene cycle of the hot-water store was under way.
    HYGIENE = 11, "hygiene cycle";
    /// The control's flow carried less heat than was wanted.
    FLOW_TOO_COOL = 12, "flow set too cool";
    /// The machine gave less than it could, so that its source would not fall below its limit.
    TURNED_DOWN = 13, "turned down for its source";
}

impl Flags {
    /// No flag.
    pub const NONE: Flags = Flags(0);

    /// Whether all flags of another set are in this one.
    pub fn has(self, other: Flags) -> bool {
        self.0 & other.0 == other.0
    }

    /// The flag when a condition holds, else none.
    pub fn when(self, condition: bool) -> Flags {
        if condition { self } else { Flags::NONE }
    }

    /// The words of the flags, joined by semicolons.
    pub fn words(self) -> String {
        let words: Vec<_> = Self::ALL
            .iter()
            .filter(|(flag, _)| self.has(*flag))
            .map(|(_, word)| *word)
            .collect();
        words.join("; ")
    }
}

impl BitOr for Flags {
    type Output = Flags;

    fn bitor(self, other: Flags) -> Flags {
        Flags(self.0 | other.0)
    }
}

impl BitOrAssign for Flags {
    fn bitor_assign(&mut self, other: Flags) {
        self.0 |= other.0;
    }
}

macro_rules! derived {
    ($($type:ident),*) => {$(
        impl $type {
            /// Heat to the rooms, kWh.
            pub fn space_heat_kwh(&self) -> f64 {
                self.machine_space_kwh + self.heater_space_kwh + self.backup_kwh
            }

            /// Heat to hot water, before the store, kWh.
            pub fn water_heat_kwh(&self) -> f64 {
                self.machine_water_kwh + self.heater_water_kwh + self.immersion_kwh
            }

            /// Electricity of the machine itself, at work and at rest: boundary H1, kWh.
            pub fn machine_electricity_kwh(&self) -> f64 {
                self.compressor_kwh + self.defrost_kwh + self.allowance_kwh + self.idle_kwh
            }

            /// All electricity, kWh.
            #[inline]
            pub fn electricity_kwh(&self) -> f64 {
                self.machine_electricity_kwh()
                    + self.source_side_kwh
                    + self.circulation_kwh
                    + self.backup_kwh
                    + self.immersion_kwh
                    + self.heater_electricity_kwh
            }
        }
    )*};
}

derived!(Row, Sums);

impl Sums {
    /// Seasonal performance factor of the machine alone (boundary H1 of the SEPEMO project); nothing without a machine.
    pub fn spf_h1(&self) -> Option<f64> {
        self.spf(0.0, self.machine_electricity_kwh())
    }

    /// With the fan or brine pump (H2).
    pub fn spf_h2(&self) -> Option<f64> {
        self.spf(0.0, self.machine_electricity_kwh() + self.source_side_kwh)
    }

    /// With backup and immersion heater, their heat counted too (H3).
    pub fn spf_h3(&self) -> Option<f64> {
        let electric_heat = self.backup_kwh + self.immersion_kwh;
        self.spf(
            electric_heat,
            self.machine_electricity_kwh() + self.source_side_kwh + electric_heat,
        )
    }

    /// With all auxiliaries (H4); pump and fan of a boiler beside the machine belong to the boiler's heat.
    pub fn spf_h4(&self) -> Option<f64> {
        self.spf(
            self.backup_kwh + self.immersion_kwh,
            self.electricity_kwh() - self.heater_electricity_kwh,
        )
    }

    fn spf(&self, electric_heat_kwh: f64, electricity_kwh: f64) -> Option<f64> {
        let mut machine_kwh = self.machine_space_kwh + self.machine_water_kwh;
        if fault::on(Fault::MixedBoundary) {
            machine_kwh = self.machine_space_kwh + self.water_drawn_kwh;
        }
        (machine_kwh > 0.0 && electricity_kwh > 0.0)
            .then(|| (machine_kwh + electric_heat_kwh) / electricity_kwh)
    }

    /// Heat delivered over fuel, gross; nothing when no fuel was used.
    pub fn fuel_efficiency(&self) -> Option<f64> {
        (self.fuel_kwh > 0.0)
            .then(|| (self.heater_space_kwh + self.heater_water_kwh) / self.fuel_kwh)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn columns_are_named_once_and_carry_their_units() {
        let mut names: Vec<_> = COLUMNS.iter().map(|column| column.name).collect();
        names.sort_unstable();
        names.dedup();
        assert_eq!(names.len(), COLUMNS.len());
        let unitless = [
            "starts",
            "energy_cost",
            "electricity_price",
            "fuel_price",
            "space_cop",
            "water_cop",
            "running_hours",
        ];
        for column in COLUMNS {
            let unit = ["_kwh", "_c", "_kg"]
                .iter()
                .any(|unit| column.name.ends_with(unit));
            assert!(unit || unitless.contains(&column.name), "{}", column.name);
        }
    }

    /// Each component of electricity stands in exactly one place: raising one by 1 kWh raises the whole by 1 kWh.
    #[test]
    fn electricity_is_the_sum_of_its_components() {
        let one = Row {
            compressor_kwh: 1.0,
            source_side_kwh: 2.0,
            defrost_kwh: 4.0,
            allowance_kwh: 8.0,
            idle_kwh: 16.0,
            circulation_kwh: 32.0,
            backup_kwh: 64.0,
            immersion_kwh: 128.0,
            heater_electricity_kwh: 256.0,
            ..Row::default()
        };
        assert_eq!(one.electricity_kwh(), 511.0);
    }

    #[test]
    fn boundaries_only_ever_lower_the_factor() {
        let sums = Sums {
            machine_space_kwh: 9000.0,
            machine_water_kwh: 2000.0,
            compressor_kwh: 3000.0,
            source_side_kwh: 150.0,
            backup_kwh: 200.0,
            circulation_kwh: 100.0,
            ..Sums::default()
        };
        let all = [sums.spf_h1(), sums.spf_h2(), sums.spf_h3(), sums.spf_h4()].map(Option::unwrap);
        assert!(all.windows(2).all(|pair| pair[0] >= pair[1]), "{all:?}");
        assert_eq!(Sums::default().spf_h4(), None);
    }
}
