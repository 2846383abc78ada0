//! Moist-air functions: wet bulb, dew point, humidity ratio.
