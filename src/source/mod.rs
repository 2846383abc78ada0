//! What the cold side offers: outdoor air, ground.
