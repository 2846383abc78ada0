//! The brief: one TOML file that describes a home, its weather, today and the choices.
