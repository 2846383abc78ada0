//! What the warm side asks for: fabric, set point, emitters, hot water.
