//! Meter readings from a CSV: a register read on dates, or what was used from a date to another.

use chrono::NaiveDate;

use crate::problem::{Finding, Place, Problem, Problems, Severity};
use crate::units::{CalorificBasis, CalorificValue, Fuel, FuelUnit};

/// How metered amounts become gross kilowatt-hours.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Conversion {
    /// What is metered.
    pub fuel: Fuel,
    /// Calorific value, gross, for rows that carry none.
    pub calorific_value: Option<CalorificValue>,
    /// From a metered volume to the conditions of the calorific value.
    pub volume_correction: f64,
}

/// What was used between two dates.
#[derive(Debug, Clone, PartialEq)]
pub struct Interval {
    /// First day.
    pub from: NaiveDate,
    /// Day after the last; a reading is taken as made when its day begins.
    pub to: NaiveDate,
    /// Gross energy, kWh.
    pub kwh: f64,
    /// Line of the file that ends it.
    pub line: usize,
}

/// Readings that can be used.
#[derive(Debug, Clone, PartialEq)]
pub struct Readings {
    /// Intervals in order, apart.
    pub intervals: Vec<Interval>,
    /// What was joined or left out.
    pub findings: Vec<Finding>,
}

/// Most that a home uses in a day, kWh: above it a unit or a digit has slipped. Common practice, no source.
const MOST_KWH_PER_DAY: f64 = 3000.0;

/// A line of the file.
struct Row {
    line: usize,
    from: Option<NaiveDate>,
    date: NaiveDate,
    amount: f64,
    meter: Option<String>,
    calorific_value: Option<CalorificValue>,
    estimated: bool,
}

/// Columns by their place.
struct Columns {
    date: usize,
    from: Option<usize>,
    amount: usize,
    unit: FuelUnit,
    is_register: bool,
    meter: Option<usize>,
    calorific_value: Option<(usize, String)>,
    estimated: Option<usize>,
}

const HEADING: &str = "columns \"date\" and \"register (m³)\", or \"from\", \"to\" and \"consumption (kWh)\"; beside them \
                       \"meter\", \"calorific value (MJ/m³)\" and \"estimated\"";

impl Readings {
    /// Reads a CSV with a line of headings. Lines that begin with # are passed over.
    ///
    /// Estimated readings are joined to the next one that was read, since they are corrected by it.
    ///
    /// # Errors
    /// Every line that cannot be used: dates out of order or overlapping, a register that runs backwards, an amount that no
    /// home uses, a missing calorific value.
    pub fn read(name: &str, text: &str, conversion: &Conversion) -> Result<Self, Problems> {
        let text = text.strip_prefix('\u{feff}').unwrap_or(text);
        let first = text
            .lines()
            .find(|line| !line.starts_with('#'))
            .unwrap_or("");
        let semicolons = first.matches(';').count() > first.matches(',').count();
        let mut reader = csv::ReaderBuilder::new()
            .comment(Some(b'#'))
            .delimiter(if semicolons { b';' } else { b',' })
            .trim(csv::Trim::All)
            .from_reader(text.as_bytes());
        let mut problems = Problems::new();
        let place = Place::file(name);
        if first.trim().is_empty() {
            return Err(Problem::new(place, "no line of headings", HEADING, "").into());
        }
        let columns = match reader.headers() {
            Ok(headings) => problems.take(columns(headings, &place)),
            Err(error) => {
                problems.push(unreadable(&error, &place));
                None
            }
        };
        let Some(columns) = columns else {
            return problems.or(()).and(Err(Problems::new()));
        };
        let mut rows = Vec::new();
        for record in reader.records() {
            match record {
                Ok(record) => rows.extend(problems.take(row(&record, &columns, &place))),
                Err(error) => problems.push(unreadable(&error, &place)),
            }
        }
        let mut findings = Vec::new();
        let pieces = if columns.is_register {
            from_register(&rows, &place, &mut problems)
        } else {
            from_consumption(&rows, &place, &mut problems)
        };
        let pieces = join_estimated(pieces, &place, &mut findings);
        let mut intervals = Vec::with_capacity(pieces.len());
        for piece in &pieces {
            intervals.extend(problems.take(piece.interval(columns.unit, conversion, &place)));
        }
        if intervals.is_empty() && problems.is_empty() {
            problems.push(Problem::new(
                place,
                "no interval between two readings",
                "at least two readings of the register, or one line of consumption",
                "",
            ));
        }
        problems.or(Self {
            intervals,
            findings,
        })
    }
}

/// A line that the CSV reader cannot take apart.
fn unreadable(error: &csv::Error, place: &Place) -> Problem {
    let line = error
        .position()
        .and_then(|at| usize::try_from(at.line()).ok());
    let place = Place {
        line,
        ..place.clone()
    };
    match error.kind() {
        csv::ErrorKind::UnequalLengths {
            expected_len, len, ..
        } => Problem::new(
            place,
            format!("fields: {len}"),
            format!("{expected_len}, as there are headings"),
            "",
        ),
        _ => Problem::new(place, error.to_string(), "text in UTF-8", ""),
    }
}

/// Splits `"register (m³)"`.
fn heading(text: &str) -> (String, Option<String>) {
    match text.split_once('(') {
        Some((name, unit)) => (
            name.trim().to_lowercase(),
            Some(unit.trim_end_matches(')').trim().to_owned()),
        ),
        None => (text.trim().to_lowercase(), None),
    }
}

fn columns(headings: &csv::StringRecord, place: &Place) -> Result<Columns, Problems> {
    let names: Vec<_> = headings.iter().map(heading).collect();
    let find = |wanted: &str| names.iter().position(|(name, _)| name == wanted);
    let refuse = |found: String, remedy: &str| -> Problems {
        Problem::new(place.clone(), found, HEADING, remedy).into()
    };
    let known = [
        "date",
        "register",
        "from",
        "to",
        "consumption",
        "meter",
        "calorific value",
        "estimated",
        "note",
    ];
    if let Some((unknown, _)) = names
        .iter()
        .find(|(name, _)| !known.contains(&name.as_str()))
    {
        return Err(refuse(
            format!("a column \"{unknown}\""),
            "rename or remove it; remarks go into a column \"note\"",
        ));
    }
    let (date, from, amount, is_register) = match (
        find("date"),
        find("register"),
        find("from"),
        find("to"),
        find("consumption"),
    ) {
        (Some(date), Some(register), None, None, None) => (date, None, register, true),
        (None, None, Some(from), Some(to), Some(consumption)) => {
            (to, Some(from), consumption, false)
        }
        _ => {
            let found: Vec<_> = names.iter().map(|(name, _)| name.as_str()).collect();
            return Err(refuse(format!("columns {}", found.join(", ")), ""));
        }
    };
    let unit = names[amount].1.as_deref();
    let Some(unit) = unit.and_then(FuelUnit::from_symbol) else {
        let found = unit.map_or_else(
            || "no unit in the heading of the amount".to_owned(),
            |unit| format!("the unit \"{unit}\""),
        );
        return Err(refuse(
            found,
            &format!(
                "write the unit in brackets, for example \"register (m³)\"; units: {}",
                FuelUnit::all_symbols()
            ),
        ));
    };
    let calorific_value = find("calorific value").map(|column| {
        (
            column,
            names[column]
                .1
                .clone()
                .unwrap_or_else(|| "MJ/m³".to_owned()),
        )
    });
    Ok(Columns {
        date,
        from,
        amount,
        unit,
        is_register,
        meter: find("meter"),
        calorific_value,
        estimated: find("estimated"),
    })
}

fn row(record: &csv::StringRecord, columns: &Columns, place: &Place) -> Result<Row, Problems> {
    let line = record
        .position()
        .and_then(|at| usize::try_from(at.line()).ok())
        .unwrap_or(0);
    let mut problems = Problems::new();
    let field = |column: usize| record.get(column).unwrap_or("");
    let mut refuse = |column: &str, found: &str, allowed: &str, remedy: &str| {
        problems.push(Problem::new(
            place.clone().at_line(line).in_field(column),
            format!("\"{found}\""),
            allowed,
            remedy,
        ));
    };
    let mut date = |column: usize, name: &str| {
        let date = field(column).parse::<NaiveDate>().ok();
        if date.is_none() {
            refuse(
                name,
                field(column),
                "a date as year-month-day",
                "write for example 2023-01-31",
            );
        }
        date
    };
    let to = date(
        columns.date,
        if columns.is_register { "date" } else { "to" },
    );
    let from = columns.from.map(|column| date(column, "from"));
    let amount = field(columns.amount)
        .parse::<f64>()
        .ok()
        .filter(|amount| amount.is_finite() && *amount >= 0.0);
    if amount.is_none() {
        let name = if columns.is_register {
            "register"
        } else {
            "consumption"
        };
        refuse(
            name,
            field(columns.amount),
            "a number from 0 up",
            "write it with a decimal point and without separators",
        );
    }
    let calorific_value = match &columns.calorific_value {
        Some((column, unit)) if !field(*column).is_empty() => {
            let text = format!("{} {unit}", field(*column));
            match CalorificValue::parse(&text) {
                Ok(value) => Some(value),
                Err(problem) => {
                    refuse("calorific value", &text, &problem.allowed, &problem.remedy);
                    None
                }
            }
        }
        _ => None,
    };
    let estimated = match columns
        .estimated
        .map(field)
        .unwrap_or("")
        .to_lowercase()
        .as_str()
    {
        "" | "no" | "false" | "0" => Some(false),
        "yes" | "true" | "1" | "estimated" => Some(true),
        other => {
            refuse("estimated", other, "yes or no", "");
            None
        }
    };
    let meter = columns
        .meter
        .map(|column| field(column).to_owned())
        .filter(|meter| !meter.is_empty());
    problems.or(())?;
    match (to, from, amount, estimated) {
        (Some(date), Some(Some(from)), Some(amount), Some(estimated)) => Ok(Row {
            line,
            from: Some(from),
            date,
            amount,
            meter,
            calorific_value,
            estimated,
        }),
        (Some(date), None, Some(amount), Some(estimated)) => Ok(Row {
            line,
            from: None,
            date,
            amount,
            meter,
            calorific_value,
            estimated,
        }),
        _ => Err(Problems::new()),
    }
}

/// An interval in the file's own unit.
struct Piece {
    from: NaiveDate,
    to: NaiveDate,
    amount: f64,
    line: usize,
    calorific_value: Option<CalorificValue>,
    /// Whether the reading at its end was estimated.
    estimated: bool,
}

impl Piece {
    fn interval(
        &self,
        unit: FuelUnit,
        conversion: &Conversion,
        place: &Place,
    ) -> Result<Interval, Problems> {
        let place = place.clone().at_line(self.line);
        let value = self.calorific_value.or(conversion.calorific_value);
        let each = unit.gross_kwh(
            conversion.fuel,
            CalorificBasis::Gross,
            value,
            conversion.volume_correction,
        );
        let Some(each) = each else {
            return Err(Problem::new(
                place,
                format!("{} of {} without a calorific value", unit.symbol, conversion.fuel),
                "energy, or a volume whose calorific value is known",
                "add a column \"calorific value (MJ/m³)\", or write calorific_value = \"39.3 MJ/m³\" under [home.bills]",
            )
            .into());
        };
        let kwh = self.amount * each;
        let days = (self.to - self.from).num_days() as f64;
        if kwh / days > MOST_KWH_PER_DAY {
            return Err(Problem::new(
                place,
                format!(
                    "{:.0} kWh a day from {} to {}",
                    kwh / days,
                    self.from,
                    self.to
                ),
                format!("at most {MOST_KWH_PER_DAY} kWh a day"),
                "check the unit and the digits of the register",
            )
            .into());
        }
        Ok(Interval {
            from: self.from,
            to: self.to,
            kwh,
            line: self.line,
        })
    }
}

fn from_register(rows: &[Row], place: &Place, problems: &mut Problems) -> Vec<Piece> {
    let mut pieces = Vec::new();
    for pair in rows.windows(2) {
        let (before, after) = (&pair[0], &pair[1]);
        let here = place.clone().at_line(after.line);
        let changed = before.meter != after.meter;
        if after.date < before.date || (after.date == before.date && !changed) {
            problems.push(Problem::new(
                here.in_field("date"),
                format!(
                    "{} after {} in line {}",
                    after.date, before.date, before.line
                ),
                "dates that rise from line to line",
                "sort the file and remove readings that stand there twice",
            ));
        } else if changed {
            // The old meter's last reading and the new one's first are no interval.
        } else if after.amount < before.amount {
            problems.push(Problem::new(
                here.in_field("register"),
                format!("{} after {} in line {}: the register runs backwards", after.amount, before.amount, before.line),
                "a register that rises",
                "if the meter was changed, give every line the name of its meter in a column \"meter\", with the last reading \
                 of the old and the first of the new; if the register began again at 0, add its full range",
            ));
        } else {
            pieces.push(Piece {
                from: before.date,
                to: after.date,
                amount: after.amount - before.amount,
                line: after.line,
                calorific_value: after.calorific_value,
                estimated: after.estimated,
            });
        }
    }
    pieces
}

fn from_consumption(rows: &[Row], place: &Place, problems: &mut Problems) -> Vec<Piece> {
    let mut pieces: Vec<Piece> = Vec::new();
    for row in rows {
        let here = place.clone().at_line(row.line);
        let from = row.from.unwrap_or(row.date);
        if from >= row.date {
            problems.push(Problem::new(
                here.in_field("to"),
                format!("{} to {from}", row.date),
                "a period that ends after it begins",
                "check both dates",
            ));
            continue;
        }
        if let Some(last) = pieces.last()
            && from < last.to
        {
            problems.push(Problem::new(
                here.in_field("from"),
                format!(
                    "{from}, but the period of line {} ends {}: they overlap",
                    last.line, last.to
                ),
                "periods that follow one another",
                "sort the file and let each period begin where the one before ends",
            ));
            continue;
        }
        pieces.push(Piece {
            from,
            to: row.date,
            amount: row.amount,
            line: row.line,
            calorific_value: row.calorific_value,
            estimated: row.estimated,
        });
    }
    pieces
}

/// Joins what ends with an estimate to what follows it; an estimate at the end is left out.
fn join_estimated(pieces: Vec<Piece>, place: &Place, findings: &mut Vec<Finding>) -> Vec<Piece> {
    let mut joined: Vec<Piece> = Vec::new();
    let mut open: Option<Piece> = None;
    for piece in pieces {
        let piece = match open.take() {
            Some(before) if before.to == piece.from => Piece {
                from: before.from,
                amount: before.amount + piece.amount,
                ..piece
            },
            Some(before) => {
                findings.push(left_out(&before, place));
                piece
            }
            None => piece,
        };
        if piece.estimated {
            findings.push(
                Finding::new(
                    Severity::Note,
                    format!("the reading of {} is an estimate", piece.to),
                    "it was joined to the next one that was read",
                )
                .at(&place.clone().at_line(piece.line)),
            );
            open = Some(piece);
        } else {
            joined.push(piece);
        }
    }
    if let Some(last) = open {
        findings.pop();
        findings.push(left_out(&last, place));
    }
    joined
}

fn left_out(piece: &Piece, place: &Place) -> Finding {
    Finding::new(
        Severity::Warning,
        format!(
            "the readings from {} to {} end with an estimate",
            piece.from, piece.to
        ),
        "they were left out, since no later reading corrects them",
    )
    .at(&place.clone().at_line(piece.line))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn conversion() -> Conversion {
        Conversion {
            fuel: Fuel::Gas,
            calorific_value: None,
            volume_correction: 1.02264,
        }
    }

    fn read(text: &str) -> Result<Readings, Problems> {
        Readings::read("readings.csv", text, &conversion())
    }

    /// methods §7: 100 m³ at 39.3 MJ/m³ are 1116.382 kWh.
    #[test]
    fn a_register_becomes_gross_energy() {
        let text = "# invented\ndate,register (m³),calorific value (MJ/m³)\n2023-01-01,1000,39.3\n2023-02-01,1100,39.3\n2023-02-15,1150,39.3\n";
        let readings = read(text).unwrap();
        assert_eq!(readings.intervals.len(), 2);
        assert!((readings.intervals[0].kwh - 1116.382).abs() < 1e-3);
        assert_eq!(
            (readings.intervals[1].to - readings.intervals[1].from).num_days(),
            14
        );
    }

    #[test]
    fn estimates_are_joined_and_a_changed_meter_starts_anew() {
        let text = "date,register (kWh),estimated,meter\n2023-01-01,0,,a\n2023-02-01,900,yes,a\n2023-03-01,1500,no,a\n2023-03-01,7,,b\n2023-04-01,407,,b\n2023-05-01,500,yes,b\n";
        let readings = read(text).unwrap();
        let kwh: Vec<_> = readings
            .intervals
            .iter()
            .map(|interval| interval.kwh)
            .collect();
        assert_eq!(kwh, [1500.0, 400.0]);
        assert_eq!(readings.findings.len(), 2);
        assert!(
            readings.findings[1]
                .what
                .contains("2023-04-01 to 2023-05-01"),
            "{:?}",
            readings.findings
        );
    }

    #[test]
    fn consumption_may_have_holes() {
        let text =
            "from;to;consumption (kWh)\n2023-01-01;2023-02-01;900\n2023-03-01;2023-04-01;500\n";
        assert_eq!(read(text).unwrap().intervals.len(), 2);
    }

    proptest::proptest! {
        #[test]
        fn any_text_is_read_or_refused(text in "(date|register|from|to|consumption|\\(kWh\\)|2023-0[1-9]-0[1-9]|[0-9.]{1,4}|,|\n|;|\"|#)*") {
            if let Err(problems) = read(&text) {
                proptest::prop_assert!(!problems.is_empty(), "{text}");
            }
        }
    }
}
