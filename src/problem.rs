//! Where a problem is, what was found, what is allowed, what to write instead.
