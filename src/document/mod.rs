//! TOML text into flat structs whose every leaf knows its place.
