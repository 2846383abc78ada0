//! From the lines of a file of readings to pieces of time with what was used in them.

use chrono::NaiveDate;

use super::readings::{Conversion, Interval};
use super::rows::Row;
use crate::problem::{Finding, Place, Problem, Problems, Severity};
use crate::units::{CalorificBasis, CalorificValue, FuelUnit};

/// Most that a home uses in a day, kWh: above it a unit or a digit has slipped. Common practice, no source.
const MOST_KWH_PER_DAY: f64 = 3000.0;

/// An interval in the file's own unit.
pub(super) struct Piece {
    from: NaiveDate,
    to: NaiveDate,
    amount: f64,
    line: usize,
    calorific_value: Option<CalorificValue>,
    /// Whether the reading at its end was estimated.
    estimated: bool,
}

impl Piece {
    pub(super) fn interval(
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

pub(super) fn from_register(rows: &[Row], place: &Place, problems: &mut Problems) -> Vec<Piece> {
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

pub(super) fn from_consumption(rows: &[Row], place: &Place, problems: &mut Problems) -> Vec<Piece> {
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
pub(super) fn join_estimated(
    pieces: Vec<Piece>,
    place: &Place,
    findings: &mut Vec<Finding>,
) -> Vec<Piece> {
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

/// Whether each next period begins one day after the end of the one before.
pub(super) fn ends_are_last_days(rows: &[Row]) -> bool {
    rows.len() > 1
        && rows
            .windows(2)
            .all(|pair| pair[1].from.is_some() && pair[1].from == pair[0].date.succ_opt())
}
