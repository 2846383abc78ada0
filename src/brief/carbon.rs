//! Carbon factors of a brief: a published set, with own figures in place of some of it.

use chrono_tz::Tz;

use super::files::Folder;
use super::notes::Notes;
use super::raw::{Energies, HourlyCarbon};
use crate::bounds;
use crate::carbon::{Course, Factor, Factors, PUBLISHED, Published, Scope};
use crate::document::{Check, Leaf, Section};
use crate::problem::{Finding, Place, Severity};
use crate::series::{Layout, WithinHour, read_text};
use crate::units::{CarbonFactor, Currency, Fuel};

/// The factors of every fuel the set or the brief knows.
pub(super) fn factors(
    table: &Section<Energies>,
    folder: &Folder,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Factors> {
    let set = published(table, check)?;
    let before = check.problems().len();
    let scope = scope(table, check);
    let own = Own { table, scope };
    let ways = [
        table.electricity_carbon.is_some(),
        table.electricity_carbon_by_month.is_some(),
        table.hourly_carbon.is_some(),
    ];
    if ways.iter().filter(|given| **given).count() > 1 {
        check.refuse(
            &table.span(),
            "carbon of electricity more than once",
            "one of electricity_carbon, electricity_carbon_by_month and [energy.hourly_carbon]",
            "keep one of them",
        );
    }
    let electricity = own
        .constant(&table.electricity_carbon, Fuel::Electricity, check)
        .or_else(|| own.by_month(check))
        .or_else(|| own.hourly(table.hourly_carbon.as_ref(), folder, check));
    let given = [
        electricity,
        own.constant(&table.gas_carbon, Fuel::Gas, check),
        own.constant(&table.heating_oil_carbon, Fuel::HeatingOil, check),
        own.constant(&table.lpg_carbon, Fuel::Lpg, check),
        own.constant(&table.pellets_carbon, Fuel::Pellets, check),
    ];
    if check.problems().len() > before {
        return None;
    }
    let sold = [
        (Fuel::Electricity, true),
        (Fuel::Gas, table.gas.is_some()),
        (Fuel::HeatingOil, table.heating_oil.is_some()),
        (Fuel::Lpg, table.lpg.is_some()),
        (Fuel::Pellets, table.pellets.is_some()),
    ];
    let published = set.factors();
    // A fuel that nobody buys takes no part, so that its scope cannot disagree.
    let factors: Vec<Factor> = given
        .into_iter()
        .zip(sold)
        .filter(|(given, (_, sold))| *sold || given.is_some())
        .filter_map(|(given, (fuel, _))| given.or_else(|| published.of(fuel).cloned()))
        .collect();
    for factor in &factors {
        let value = match factor.course {
            Course::Constant(kg) => format!("{kg:.5} kg CO2e/kWh"),
            Course::Monthly(_) => "by month".to_owned(),
            Course::Hourly { .. } => "by the hour".to_owned(),
        };
        notes.add(
            format!("carbon of {}", factor.fuel),
            value,
            factor.source.clone(),
        );
    }
    check.take(Factors::new(factors))
}

/// Says that factors which nobody named are those of the United Kingdom, where currency or clock are of elsewhere.
pub(super) fn of_another_country(
    table: &Section<Energies>,
    currency: Currency,
    zone: Tz,
) -> Option<Finding> {
    /// Clocks of the United Kingdom and of nowhere.
    const AT_HOME: [&str; 5] = ["Europe/London", "Europe/Belfast", "GB", "GB-Eire", "UTC"];
    let own_electricity = table.electricity_carbon.is_some()
        || table.electricity_carbon_by_month.is_some()
        || table.hourly_carbon.is_some();
    if table.carbon.is_some() || (own_electricity && table.gas_carbon.is_some()) {
        return None;
    }
    let abroad = currency.code() != "GBP";
    let clock_abroad = !AT_HOME.contains(&zone.name()) && !zone.name().starts_with("Etc/");
    (abroad || clock_abroad).then(|| {
        Finding::new(
            Severity::Warning,
            format!(
                "carbon is counted with the factors of the United Kingdom ({}), the tariffs are in {} and the clock is {}",
                Published::default_set().source,
                currency.code(),
                zone.name()
            ),
            "costs do not depend on them; name another set, carbon = \"eu-2023\", or give electricity_carbon, gas_carbon and carbon_scope \
             of the country under [energy]",
        )
    })
}

fn published(table: &Section<Energies>, check: &mut Check) -> Option<&'static Published> {
    let Some(leaf) = &table.carbon else {
        return Some(Published::default_set());
    };
    let name = check.value(&table.carbon)?;
    let set = Published::of(&name);
    if set.is_none() {
        let names: Vec<_> = PUBLISHED
            .iter()
            .map(|set| format!("\"{}\"", set.name))
            .collect();
        check.refuse(
            &leaf.span(),
            format!("\"{name}\""),
            names.join(", "),
            "name one of the published sets",
        );
    }
    set
}

fn scope(table: &Section<Energies>, check: &mut Check) -> Option<Scope> {
    let leaf = table.carbon_scope.as_ref()?;
    let name = check.value(&table.carbon_scope)?;
    let scope = Scope::from_name(&name);
    if scope.is_none() {
        let names: Vec<_> = Scope::ALL
            .iter()
            .map(|scope| format!("\"{}\" ({})", scope.name(), scope.words()))
            .collect();
        check.refuse(
            &leaf.span(),
            format!("\"{name}\""),
            names.join(", "),
            "say what the carbon factors count",
        );
    }
    scope
}

/// Factors of the brief's own.
struct Own<'a> {
    table: &'a Section<Energies>,
    scope: Option<Scope>,
}

impl Own<'_> {
    /// A factor of a course, when it is said what it counts.
    fn factor(
        &self,
        fuel: Fuel,
        course: Course,
        source: &str,
        place: Place,
        check: &mut Check,
    ) -> Option<Factor> {
        if self.table.carbon_scope.is_none() {
            check.missing(
                &self.table.span(),
                "energy.carbon_scope",
                "\"burning-at-the-meter\", which says what the factor counts",
            );
        }
        Some(Factor {
            fuel,
            course,
            scope: self.scope?,
            source: source.to_owned(),
            place,
        })
    }

    fn constant(
        &self,
        leaf: &Option<Leaf<CarbonFactor>>,
        fuel: Fuel,
        check: &mut Check,
    ) -> Option<Factor> {
        let factor = check.within(leaf, &bounds::CARBON_KG_PER_KWH)?;
        let place = placed(leaf, check);
        let course = Course::Constant(factor.kg_per_kwh());
        self.factor(fuel, course, "brief", place, check)
    }

    fn by_month(&self, check: &mut Check) -> Option<Factor> {
        let leaf = &self.table.electricity_carbon_by_month;
        let months = check.value(leaf)?;
        let place = placed(leaf, check);
        let course = Course::Monthly(months.0);
        self.factor(Fuel::Electricity, course, "brief", place, check)
    }

    fn hourly(
        &self,
        hourly: Option<&Section<HourlyCarbon>>,
        folder: &Folder,
        check: &mut Check,
    ) -> Option<Factor> {
        let hourly = hourly?;
        let path = check.required(
            &hourly.file,
            &hourly.span(),
            "energy.hourly_carbon.file",
            "\"grid.csv\"",
        );
        let unit = check.required(
            &hourly.unit,
            &hourly.span(),
            "energy.hourly_carbon.unit",
            "\"g/kWh\"",
        );
        let kg_per_unit = match (unit.as_deref(), &hourly.unit) {
            (Some("kg/kWh"), _) => Some(1.0),
            (Some("g/kWh"), _) => Some(0.001),
            (Some(other), Some(leaf)) => {
                check.refuse(
                    &leaf.span(),
                    format!("\"{other}\""),
                    "\"kg/kWh\" or \"g/kWh\"",
                    "write the unit of the column",
                );
                None
            }
            _ => None,
        };
        let every_year = check.value(&hourly.every_year).unwrap_or(false);
        let layout = Layout {
            column: check.value(&hourly.column),
            stamp: check
                .value(&hourly.stamps)
                .map_or(crate::series::Stamp::Beginning, |(stamps,)| stamps.0),
            zone: chrono_tz::UTC,
            within_hour: WithinHour::Mean,
        };
        let path = path?;
        let text = check.take(folder.text(&path))?;
        let name = folder.name(&path);
        let series = check.take(read_text(&name, &text, &layout))?;
        let place = Place::file(name);
        let course = Course::hourly(series, kg_per_unit?, every_year, &place);
        let course = check.take(course)?;
        self.factor(Fuel::Electricity, course, &path, place, check)
    }
}

fn placed<T>(leaf: &Option<Leaf<T>>, check: &Check) -> Place {
    leaf.as_ref()
        .map(|leaf| check.place(&leaf.span()))
        .unwrap_or_default()
}
