//! From the home tables to the warm side of one system.

use super::bills::BillsMade;
use super::emitters::{Emitting, emitters};
use super::envelope::{Envelope, LossFrom, changed, envelope};
use super::fabric::{Gains, Storage, fabric_parts};
use super::hot_water::hot_water;
use super::notes::Notes;
use super::pattern::pattern;
use super::raw::{Home as HomeTable, SystemKind, SystemTable};
use super::rooms::rooms;
use crate::answer::RoomsAnswer;
use crate::document::{Check, Section};
use crate::home::{Fabric, Home, Pattern};
use crate::problem::Finding;

/// What the weather says about the home's design.
#[derive(Debug, Clone, Copy)]
pub(super) struct WeatherFacts {
    /// Temperature exceeded in 99.6 % of the hours, °C.
    pub design_c: f64,
    /// Whether there is a radiation column.
    pub has_radiation: bool,
    /// Ground at the depth of a water main by month, °C; absent when the weather is no whole year.
    pub main_c: Option<[f64; 12]>,
}

/// The warm side of one system, with what sizing needs.
#[derive(Debug, Clone)]
pub(super) struct Warm {
    /// The home as this system finds it.
    pub home: Home,
    /// When it is heated.
    pub pattern: Pattern,
    /// Indoor set point, °C.
    pub indoor_c: f64,
    /// Design outdoor temperature, °C.
    pub design_outdoor_c: f64,
    /// Design heat load, kW.
    pub design_load_kw: f64,
    /// Transmission and ventilation, W/K, where they are known apart.
    pub parts_w_per_k: Option<(f64, f64)>,
    /// The room table's verdict.
    pub rooms: Option<RoomsAnswer>,
    /// What there is to tell.
    pub findings: Vec<Finding>,
}

/// The warm side of one system: the home's tables, overridden by the system's own.
pub(super) fn warm_side(
    home: &Section<HomeTable>,
    system: &Section<SystemTable>,
    kind: Option<SystemKind>,
    weather: &WeatherFacts,
    bills: Option<&BillsMade>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Warm> {
    let as_is = envelope(home, weather, bills, check, notes);
    let own = as_is
        .as_ref()
        .and_then(|as_is| changed(as_is, system, check));
    let parts = fabric_parts(home, weather, check, notes);
    let hot_water = hot_water(
        home.hot_water.as_ref(),
        system.hot_water.as_ref(),
        kind,
        weather,
        check,
        notes,
    );
    let (as_is, own) = (as_is?, own?);
    let pattern = pattern(
        system.pattern.as_ref().or(home.pattern.as_ref()),
        own.indoor_c,
        check,
        notes,
    );
    let rooms = rooms(home, system, &as_is, &own, check, notes);
    let emitting = Emitting {
        home: home.emitters.as_ref(),
        own: system.emitters.as_ref(),
        rooms: rooms.as_ref()?.as_deref(),
        floor_area: &home.floor_area,
    };
    let emitters = emitters(&home.span(), &emitting, &as_is, &own, check, notes);
    let (parts, emitters) = (parts?, emitters?);
    let heat_loss_kw_per_k = own.heat_loss_w_per_k / 1000.0;
    let (gains_kw, aperture_m2) = match parts.gains {
        Gains::Constant {
            internal_kw,
            aperture_m2,
        } => (internal_kw, aperture_m2),
        Gains::UpTo { base_c } => (heat_loss_kw_per_k * (own.indoor_c - base_c), 0.0),
    };
    // A time constant was given for the home as it is; its capacity stays when a choice insulates.
    let capacity_kwh_per_k = match parts.storage {
        Storage::Capacity(kwh_per_k) => kwh_per_k,
        Storage::TimeConstant(hours) => hours * as_is.heat_loss_w_per_k / 1000.0,
    };
    let mut findings = emitters.findings;
    findings.extend(only_from_bills(&own));
    Some(Warm {
        home: Home {
            fabric: Fabric::new(
                own.heat_loss_w_per_k,
                capacity_kwh_per_k,
                gains_kw,
                aperture_m2,
            ),
            emitters: emitters.emitters,
            hot_water: hot_water?,
        },
        pattern: pattern?,
        indoor_c: own.indoor_c,
        design_outdoor_c: own.design_outdoor_c,
        design_load_kw: own.design_load_kw(),
        parts_w_per_k: own.parts_w_per_k,
        rooms: emitters.rooms,
        findings,
    })
}

/// A coefficient from bills holds cold rooms and hours without heating: nothing is sized with it alone.
fn only_from_bills(own: &Envelope) -> Option<Finding> {
    (own.from == LossFrom::Bills).then(|| {
        Finding::new(
            crate::problem::Severity::Caution,
            format!(
                "the heat loss of {:.0} W/K, and with it the design heat load of {:.1} kW, come from meter readings alone",
                own.heat_loss_w_per_k,
                own.design_load_kw()
            ),
            "readings hold cold rooms and hours without heating, so that a machine sized by them can leave the home cold; size \
             only from a room-by-room heat-loss calculation by a competent person",
        )
    })
}
