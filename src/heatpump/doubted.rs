//! A heat pump whose sheet is not quite right.

use std::sync::Arc;

use super::compressor::Speeds;
use super::frost::frost_free_above_c;
use super::heat_pump::{Core, HeatPump};
use super::map::{COLD_AIR_K, COLD_GROUND_K, Pivot, SheetDoubts};
use super::sheet::SourceKind;

impl HeatPump {
    /// The same machine with its sheet off by some doubts: map plus difference maps, see [`SheetDoubts`].
    ///
    /// Limits, frost, idle powers and the rated output stay. [`HeatPump::explain`] still solves the machine of the sheet. Doubts are
    /// about the machine as it stands, so they are told once, all together.
    pub fn with_doubts(&self, doubts: &SheetDoubts) -> Self {
        if *doubts == SheetDoubts::default() {
            return self.clone();
        }
        let core = &*self.core;
        let map = core.map.doubted(doubts, &core.pivot());
        let evaporator = &core.machine.machine.evaporator;
        let largest_approach_k = evaporator.approach_k(map.greatest_output_kw());
        Self {
            core: Arc::new(Core {
                frost_free_c: frost_free_above_c(largest_approach_k),
                map,
                ..core.clone()
            }),
            ..self.clone()
        }
    }

    /// Whether it has outputs between a least and a greatest, so that it can be doubted at part load.
    pub fn turns_down(&self) -> bool {
        self.core.machine.machine.speeds != Speeds::Fixed
    }
}

impl Core {
    fn pivot(&self) -> Pivot {
        let (source_c, flow_c) = self.rated_condition;
        Pivot {
            source_c,
            flow_c,
            cold_k: match self.source {
                SourceKind::Air => COLD_AIR_K,
                SourceKind::Brine | SourceKind::Water => COLD_GROUND_K,
            },
        }
    }
}
