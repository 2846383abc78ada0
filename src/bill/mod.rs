//! Bills: metered columns priced line by line.
