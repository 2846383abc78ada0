//! Hourly weather: read, check, repair, describe.
