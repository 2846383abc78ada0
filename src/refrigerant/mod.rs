//! Refrigerant properties: reference equations and fast tables made from them.
