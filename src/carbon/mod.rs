//! Carbon factors with the scope they belong to.
