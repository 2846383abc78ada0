//! Hot water: published draws, losses, and heating in blocks.

use winterledger::home::{HotWater, Pattern, Store, TappingProfile};

use crate::home::{electric, hours, site};
use crate::table::Row;

pub fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    for (name, profile, kwh) in [
        ("M", TappingProfile::M, 5.845),
        ("L", TappingProfile::L, 11.655),
        ("XL", TappingProfile::Xl, 19.07),
    ] {
        rows.push(Row::new(
            format!("Tapping profile {name}, kWh a day"),
            "EU Regulation 812/2013, Annex VII Table 15",
            kwh,
            profile.daily_kwh(),
            1e-9,
            "rounding",
        ));
    }
    for (litres, watts) in [(200.0, 86.0), (250.0, 92.0), (300.0, 98.0)] {
        rows.push(Row::new(
            format!("Standing loss of {litres} L at 65 °C in 20 °C air, W"),
            "label class C: 16.66 + 8.33·V^0.4",
            watts,
            1000.0 * 45.0 * Store::of_volume(litres, 65.0).loss_kw_per_k,
            0.5,
            "half of the last printed digit",
        ));
    }
    for (draw_c, kwh) in [(50.0, 5.58), (40.0, 4.19)] {
        rows.push(Row::new(
            format!("120 L drawn at {draw_c} °C from 10 °C, kWh"),
            "4.186 kJ/(kg K) by hand: a volume means nothing without temperatures",
            kwh,
            HotWater::energy_kwh(120.0, draw_c, 10.0),
            0.005,
            "half of the last printed digit",
        ));
    }
    rows.extend(blocks());
    rows
}

/// A day of profile M from a store that a kilowatt heats.
fn blocks() -> Vec<Row> {
    let profile = TappingProfile::M;
    let water = HotWater {
        daily_kwh: [profile.daily_kwh(); 12],
        shares: profile.shares(),
        cold_c: [10.0; 12],
        store: Some(Store::of_volume(200.0, 50.0)),
        draw_c: 40.0,
    };
    let site = site(vec![21.0; 24 * 28]);
    let system = electric(40.0, 1.0, Some(water));
    let rows = hours(&site, &system, &Pattern::continuous(20.0), 1.0);
    let greatest = rows
        .iter()
        .map(|row| row.water_heat_kwh())
        .fold(0.0, f64::max);
    let lost: f64 = rows.iter().map(|row| row.store_loss_kwh).sum::<f64>() / rows.len() as f64;
    let heated = rows.iter().filter(|row| row.water_heat_kwh() > 0.0).count();
    vec![
        Row::new(
            "Heat of the fullest hour into a store behind 1 kW, kWh",
            "common practice, no source: reheat is a block at full output",
            1.0,
            greatest,
            1e-9,
            "rounding",
        ),
        Row::new(
            "Hours of 24 in which it is heated",
            "(5.845 kWh drawn + 24 × 0.053 lost) over 1 kW",
            7.1,
            24.0 * heated as f64 / rows.len() as f64,
            2.5,
            "first and last hour of a block are partly used",
        ),
        Row::new(
            "Standing loss of 200 L kept at 45 to 50 °C, W",
            "EU 812/2013 class C (secondary source): 57 W at 50 °C in 20 °C",
            52.0,
            1000.0 * lost,
            6.0,
            "45 °C gives 48 W, 50 °C 57 W",
        ),
    ]
}
