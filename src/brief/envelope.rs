//! Heat loss, set point and design temperature.

use super::bills::BillsMade;
use super::defaults;
use super::home::WeatherFacts;
use super::leaves::HeatLossSource;
use super::notes::Notes;
use super::raw::{Home as HomeTable, RoomTable, SystemTable};
use crate::bounds;
use crate::document::{Check, Leaf, Section};
use crate::fault::{self, Fault};
use crate::home::ventilation_w_per_k;

/// Where the heat loss is from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum LossFrom {
    /// A survey, a calculation or the room table.
    Survey,
    /// Meter readings alone.
    Bills,
}

/// Heat loss, set point and design temperature, before anything is made of them.
#[derive(Debug, Clone)]
pub(super) struct Envelope {
    pub heat_loss_w_per_k: f64,
    /// Transmission and ventilation, W/K, where they are known apart.
    pub parts_w_per_k: Option<(f64, f64)>,
    pub from: LossFrom,
    pub indoor_c: f64,
    pub design_outdoor_c: f64,
}

impl Envelope {
    pub fn design_load_kw(&self) -> f64 {
        let from_c = if fault::on(Fault::BaseForPeak) {
            15.5
        } else {
            self.indoor_c
        };
        self.heat_loss_w_per_k * (from_c - self.design_outdoor_c) / 1000.0
    }
}

/// The home as a system changes it: other heat loss, other set point.
pub(super) fn changed(
    as_is: &Envelope,
    system: &SystemTable,
    check: &mut Check,
) -> Option<Envelope> {
    let before = check.problems().len();
    let whole = check.within(&system.heat_loss, &bounds::HEAT_LOSS_W_PER_K);
    let transmission = check.within(&system.transmission, &bounds::PART_LOSS_W_PER_K);
    let ventilation = check.within(&system.ventilation, &bounds::PART_LOSS_W_PER_K);
    let indoor = check.within(&system.indoor, &bounds::INDOOR_C);
    let part = system.transmission.as_ref().or(system.ventilation.as_ref());
    if let Some(part) = part {
        if system.heat_loss.is_some() {
            check.refuse(
                &part.span(),
                "heat_loss beside one of its parts",
                "one of them",
                "keep the parts or the sum",
            );
        } else if as_is.parts_w_per_k.is_none() {
            check.refuse(
                &part.span(),
                "a part of a heat loss that is only known as a whole",
                "a home with transmission and ventilation",
                "give the home's transmission and ventilation, or the choice's heat_loss",
            );
        }
    }
    if check.problems().len() > before {
        return None;
    }
    let mut own = Envelope {
        indoor_c: indoor.map_or(as_is.indoor_c, |indoor| indoor.c()),
        ..as_is.clone()
    };
    if let Some(whole) = whole {
        own.heat_loss_w_per_k = whole.w_per_k();
        own.parts_w_per_k = None;
        own.from = LossFrom::Survey;
    } else if let Some((old_transmission, old_ventilation)) = as_is.parts_w_per_k {
        let transmission = transmission.map_or(old_transmission, |loss| loss.w_per_k());
        let ventilation = ventilation.map_or(old_ventilation, |loss| loss.w_per_k());
        own.heat_loss_w_per_k = transmission + ventilation;
        own.parts_w_per_k = Some((transmission, ventilation));
    }
    Some(own)
}

/// The home as it is.
pub(super) fn envelope(
    home: &Section<HomeTable>,
    weather: &WeatherFacts,
    bills: Option<&BillsMade>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Envelope> {
    let indoor = notes.quantity(check, &home.indoor, &bounds::INDOOR_C, &defaults::INDOOR);
    let design_outdoor = check.within(&home.design_outdoor, &bounds::OUTDOOR_C);
    if home.design_outdoor.is_none() {
        notes.add(
            "home.design_outdoor",
            format!("{:.1} °C", weather.design_c),
            "99.6 % of the hours of the weather file are warmer; prefer a published design table for sizing",
        );
    }
    let indoor_c = indoor?.c();
    let design_outdoor_c = design_outdoor.map_or(weather.design_c, |outdoor| outdoor.c());
    if design_outdoor_c >= indoor_c - 1.0 {
        let span = home
            .design_outdoor
            .as_ref()
            .map_or_else(|| home.span(), |leaf| leaf.span());
        check.refuse(
            &span,
            format!("design outdoor temperature {design_outdoor_c:.1} °C"),
            format!("well below the indoor set point of {indoor_c:.1} °C"),
            "check both temperatures",
        );
        return None;
    }
    let difference_k = indoor_c - design_outdoor_c;
    let found = loss(home, difference_k, indoor_c, bills, check, notes)?;
    plausible(home, found.w_per_k, check)?;
    Some(Envelope {
        heat_loss_w_per_k: found.w_per_k,
        parts_w_per_k: found.parts,
        from: found.from,
        indoor_c,
        design_outdoor_c,
    })
}

struct Loss {
    w_per_k: f64,
    parts: Option<(f64, f64)>,
    from: LossFrom,
}

impl Loss {
    fn survey(w_per_k: f64) -> Self {
        Self {
            w_per_k,
            parts: None,
            from: LossFrom::Survey,
        }
    }
}

fn loss(
    home: &Section<HomeTable>,
    difference_k: f64,
    indoor_c: f64,
    bills: Option<&BillsMade>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Loss> {
    let source = check.value(&home.heat_loss);
    let load = check.within(&home.design_heat_load, &bounds::DESIGN_LOAD_KW);
    if let (Some(leaf), Some(_)) = (&home.transmission, &home.heat_loss) {
        check.refuse(
            &leaf.span(),
            "transmission beside heat_loss",
            "one of them",
            "keep the parts or the sum",
        );
        return None;
    }
    if home.transmission.is_some() || home.ventilation.is_some() || home.air_changes.is_some() {
        return parts(home, check);
    }
    match (&home.heat_loss, source, &home.design_heat_load) {
        (Some(leaf), Some(HeatLossSource::Stated(stated)), load_leaf) => {
            let w_per_k = stated.w_per_k();
            if !bounds::HEAT_LOSS_W_PER_K.holds(w_per_k) {
                let found = format!("{w_per_k} W/K");
                check.refuse(
                    &leaf.span(),
                    found,
                    bounds::HEAT_LOSS_W_PER_K.words(),
                    "check the number and its unit",
                );
                return None;
            }
            if load_leaf.is_some() {
                agrees(leaf, w_per_k, load?.kw(), difference_k, check)?;
            }
            Some(Loss::survey(w_per_k))
        }
        (Some(_), Some(HeatLossSource::Bills(_)), None) => {
            // What is wrong with the readings was told where they were read.
            let found = bills?.signature.heat_loss();
            notes.add(
                "home.heat_loss",
                format!(
                    "{:.0} W/K ({:.0} to {:.0} with 95 % confidence)",
                    found.value, found.low, found.high
                ),
                "meter readings, through the home's own model where it is described",
            );
            Some(Loss {
                from: LossFrom::Bills,
                ..Loss::survey(found.value)
            })
        }
        (Some(leaf), Some(HeatLossSource::Bills(_)), Some(_)) => {
            check.refuse(
                &leaf.span(),
                "heat_loss from bills beside design_heat_load",
                "one of them as the home's heat loss",
                "keep design_heat_load and name the readings under [home.bills]: they are shown beside it",
            );
            None
        }
        (Some(_), None, _) => None,
        (None, _, None) if !home.room.is_empty() => {
            let w_per_k = rooms_w_per_k(&home.room, difference_k, indoor_c, check)?;
            notes.add(
                "home.heat_loss",
                format!("{w_per_k:.0} W/K"),
                "the rooms of the room table together",
            );
            Some(Loss::survey(w_per_k))
        }
        (None, _, None) => {
            check.missing(
                &home.span(),
                "home.heat_loss",
                "\"212 W/K\", or design_heat_load = \"6 kW\", or { bills = \"meter-readings.csv\" }",
            );
            None
        }
        (None, _, Some(leaf)) => from_load(home, leaf, load?.kw(), difference_k, check, notes),
    }
}

/// Transmission and ventilation apart.
fn parts(home: &Section<HomeTable>, check: &mut Check) -> Option<Loss> {
    let transmission = check.required(
        &home.transmission,
        &home.span(),
        "home.transmission",
        "\"170 W/K\"",
    );
    let transmission =
        transmission.and_then(|_| check.within(&home.transmission, &bounds::PART_LOSS_W_PER_K));
    let ventilation = match (&home.ventilation, &home.air_changes) {
        (Some(leaf), Some(_)) => {
            check.refuse(
                &leaf.span(),
                "both ventilation and air_changes",
                "one of them",
                "keep the one you know better",
            );
            None
        }
        (Some(_), None) => check
            .within(&home.ventilation, &bounds::PART_LOSS_W_PER_K)
            .map(|loss| loss.w_per_k()),
        (None, Some(_)) => {
            let rate = check.within(&home.air_changes, &bounds::AIR_CHANGES_PER_H);
            check.required(
                &home.volume,
                &home.span(),
                "home.volume",
                "\"240 m³\", which air_changes needs",
            );
            let volume = check.within(&home.volume, &bounds::VOLUME_M3);
            Some(ventilation_w_per_k(rate?.per_h(), volume?.m3()))
        }
        (None, None) => {
            check.missing(
                &home.span(),
                "home.ventilation",
                "\"42 W/K\", or air_changes = \"0.5 1/h\" with volume = \"240 m³\"",
            );
            None
        }
    };
    let (transmission, ventilation) = (transmission?.w_per_k(), ventilation?);
    let w_per_k = transmission + ventilation;
    if !bounds::HEAT_LOSS_W_PER_K.holds(w_per_k) {
        let span = home
            .transmission
            .as_ref()
            .map_or_else(|| home.span(), Leaf::span);
        check.refuse(
            &span,
            format!("{w_per_k} W/K together"),
            bounds::HEAT_LOSS_W_PER_K.words(),
            "check both parts",
        );
        return None;
    }
    Some(Loss {
        parts: Some((transmission, ventilation)),
        ..Loss::survey(w_per_k)
    })
}

/// A coefficient and a design load that are both given must agree.
fn agrees<T>(
    leaf: &Leaf<T>,
    w_per_k: f64,
    load_kw: f64,
    difference_k: f64,
    check: &mut Check,
) -> Option<()> {
    /// A coefficient and a load that differ by more than this contradict each other; less is rounding.
    const ROUNDING: f64 = 0.02;
    let implied_kw = w_per_k * difference_k / 1000.0;
    if (implied_kw / load_kw - 1.0).abs() > ROUNDING {
        check.refuse(
            &leaf.span(),
            format!(
                "{w_per_k:.0} W/K over {difference_k:.1} K are {implied_kw:.2} kW, but design_heat_load says {load_kw:.2} kW"
            ),
            "the two to agree within 2 %",
            "keep the one you trust and remove the other",
        );
        return None;
    }
    Some(())
}

fn from_load<T>(
    home: &Section<HomeTable>,
    leaf: &Leaf<T>,
    load_kw: f64,
    difference_k: f64,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Loss> {
    if home.design_outdoor.is_none() {
        check.missing(
            &leaf.span(),
            "home.design_outdoor",
            "\"-4 °C\", the outdoor temperature that design_heat_load is for",
        );
        return None;
    }
    let w_per_k = load_kw * 1000.0 / difference_k;
    if !bounds::HEAT_LOSS_W_PER_K.holds(w_per_k) {
        check.refuse(
            &leaf.span(),
            format!("{w_per_k:.1} W/K follow from it"),
            bounds::HEAT_LOSS_W_PER_K.words(),
            "check the load and design_outdoor",
        );
        return None;
    }
    notes.add(
        "home.heat_loss",
        format!("{w_per_k:.0} W/K"),
        "design_heat_load over the difference of indoor and design_outdoor",
    );
    Some(Loss::survey(w_per_k))
}

/// The rooms' losses at the design point together, over the home's own temperature difference.
fn rooms_w_per_k(
    rooms: &[Section<RoomTable>],
    difference_k: f64,
    indoor_c: f64,
    check: &mut Check,
) -> Option<f64> {
    let mut watts = 0.0;
    for room in rooms {
        let loss = check.within(&room.heat_loss, &bounds::ROOM_LOSS_W_PER_K);
        let load = check.within(&room.heat_load, &bounds::ROOM_LOAD_KW);
        let room_c = check
            .within(&room.temperature, &bounds::INDOOR_C)
            .map_or(indoor_c, |own| own.c());
        watts += match (loss, load) {
            (Some(loss), _) => loss.w_per_k() * (difference_k + room_c - indoor_c),
            (None, Some(load)) => load.kw() * 1000.0,
            (None, None) => 0.0,
        };
    }
    (watts > 0.0).then_some(watts / difference_k)
}

/// A coefficient that no home of this floor area has.
fn plausible(home: &Section<HomeTable>, w_per_k: f64, check: &mut Check) -> Option<()> {
    let Some(area) = check.within(&home.floor_area, &bounds::FLOOR_AREA_M2) else {
        return Some(());
    };
    let each = w_per_k / area.m2();
    if bounds::HEAT_LOSS_W_PER_K_M2.holds(each) {
        return Some(());
    }
    let span = home
        .floor_area
        .as_ref()
        .map_or_else(|| home.span(), Leaf::span);
    check.refuse(
        &span,
        format!("{w_per_k:.0} W/K over {:.0} m² are {each:.2} W/K per m²", area.m2()),
        bounds::HEAT_LOSS_W_PER_K_M2.words(),
        "check the floor area and the heat loss: is one of them of another part of the building, or in another unit?",
    );
    None
}
