//! What an hour asks of a heat pump and what it gets: the two sides of [`HeatPump::deliver`](super::HeatPump::deliver).

/// What the cold side offers: the offer of a source.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ColdSide {
    /// Temperature entering the machine with nothing drawn, °C.
    pub open_c: f64,
    /// How far it falls for each kilowatt drawn, K/kW; 0 for air.
    pub k_per_kw: f64,
    /// Relative humidity of the air, 0..1, over liquid water as weather stations state it, where it is known.
    pub relative_humidity: Option<f64>,
}

/// What the warm side wants.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Duty {
    /// Mean heat wanted over the time there is, kW.
    pub heat_kw: f64,
    /// Flow temperature that is needed when running all that time, °C.
    pub flow_c: f64,
    /// Flow minus return at that heat, K.
    pub spread_k: f64,
    /// Part of the hour there is, 0..1.
    pub hours: f64,
    /// Run at greatest output until done, as for a hot-water store, instead of matching the mean.
    pub at_full_output: bool,
}

/// What happened in an hour that is worth counting.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Flags {
    /// The flow asked is above the machine's highest: it stood.
    pub too_hot: bool,
    /// The source is outside the machine's limits: it stood.
    pub stopped: bool,
    /// It gave less than it could, so that its source would not fall below its lowest.
    pub turned_down: bool,
    /// Less was wanted than its least output: it went on and off.
    pub cycling: bool,
    /// More was wanted than it can give.
    pub short: bool,
    /// Its coil frosted.
    pub frosting: bool,
}

/// What the machine did in the time it had.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Delivered {
    /// Heat to the water, kWh.
    pub heat_kwh: f64,
    /// Time it ran, h.
    pub running_hours: f64,
    /// Flow temperature while running, °C; NaN when it stood.
    pub flow_c: f64,
    /// Source temperature entering while running, °C; NaN when it stood.
    pub source_c: f64,
    /// Electricity of the compressor, start-up losses included, kWh.
    pub compressor_kwh: f64,
    /// Electricity of the fan or the brine pump, kWh.
    pub source_side_kwh: f64,
    /// Electricity that frosting and defrosting cost, kWh.
    pub defrost_kwh: f64,
    /// Allowance from bench to home, kWh.
    pub allowance_kwh: f64,
    /// Heat taken from the source, kWh.
    pub extracted_kwh: f64,
    /// Times the compressor started.
    pub starts: f64,
    /// Speed while running, as a share of the greatest there, 0..1.
    pub speed_fraction: f64,
    /// What happened.
    pub flags: Flags,
}

impl Delivered {
    /// All electricity, kWh.
    pub fn electricity_kwh(&self) -> f64 {
        self.compressor_kwh + self.source_side_kwh + self.defrost_kwh + self.allowance_kwh
    }

    /// An hour in which the machine stood.
    pub(super) fn standing(flags: Flags) -> Self {
        Self {
            flow_c: f64::NAN,
            source_c: f64::NAN,
            flags,
            ..Self::default()
        }
    }
}
