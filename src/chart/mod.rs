//! Pictures in one visual language.
