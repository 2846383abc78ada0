//! The brief: one TOML file that describes a home, its weather, today and the choices.

mod bills;
mod boiler;
mod by_rooms;
mod carbon;
mod clock_leaves;
mod columns;
mod defaults;
mod demo;
mod emitter_findings;
mod emitters;
mod energy;
mod envelope;
mod fabric;
mod files;
mod ground;
mod home;
mod hot_water;
mod household;
mod leaves;
mod lifetime;
mod locale;
mod machine;
mod notes;
mod pattern;
mod raw;
mod read;
mod rooms;
mod shifting;
mod system;
mod weather;

pub use bills::BillsMade;
pub use defaults::{DEFAULTS, Default};
pub use demo::FILES as DEMONSTRATION_FILES;
pub use read::Brief;
