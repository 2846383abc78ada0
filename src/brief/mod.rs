//! The brief: one TOML file that describes a home, its weather, today and the choices.

mod boiler;
mod carbon;
mod columns;
mod defaults;
mod demo;
mod energy;
mod files;
mod ground;
mod home;
mod household;
mod machine;
mod notes;
mod raw;
mod read;
mod shifting;
mod system;
mod weather;

pub use defaults::{DEFAULTS, Default};
pub use demo::FILES as DEMONSTRATION_FILES;
pub use read::Brief;
