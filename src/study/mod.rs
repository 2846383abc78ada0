//! Cases side by side: levers and break-even.
