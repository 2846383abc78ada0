//! One table of physical limits, with the labels used in messages.
