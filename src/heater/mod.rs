//! Everything but heat pumps that makes heat: boilers, direct electric.
