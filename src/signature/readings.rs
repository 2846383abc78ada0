//! Meter readings from a CSV: a register read on dates, or what was used from a date to another.

use chrono::NaiveDate;

use super::rows::{HEADING, Row, columns, row, unreadable};
use crate::limits::check_lines;
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
        check_lines(text).map_err(|beyond| {
            let place = place.clone().at_line(beyond.line.unwrap_or(0));
            Problem::new(place, beyond.found, beyond.allowed, "")
        })?;
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

    /// British gas bills, m³ × 1.02264 × 39.3 / 3.6: 100 m³ at 39.3 MJ/m³ are 1116.382 kWh.
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
    fn an_endless_line_is_refused() {
        let text = format!("date,register (kWh)\n2023-01-01,{}\n", "1".repeat(70_000));
        let problem = read(&text).unwrap_err();
        assert!(problem.to_string().contains("at most 64 KiB"), "{problem}");
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
