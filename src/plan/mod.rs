//! Set points and signals hour by hour, made before the run.
