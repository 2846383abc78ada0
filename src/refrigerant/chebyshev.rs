//! Chebyshev interpolation, in one and in two variables.
