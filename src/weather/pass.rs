//! The pass over all rows: every row's numbers into columns, every fault into the list.
//!
//! A long text without quotation marks is cut into as many pieces as there are processors.

use std::thread;

use super::date_form::TimeForm;
use super::faults::Faults;
use super::layout::Layout;
use super::number::{self, Reading};
use super::row_reader::{self, EachRow, Fields};
use super::rows::Rows;
use crate::problem::Place;

/// Shorter texts are not worth a second thread.
const LEAST_PIECE_BYTES: usize = 1 << 20;
/// More threads than this would wait for memory.
const MOST_PIECES: usize = 4;

/// How the rows of a file are read.
#[derive(Debug)]
pub(super) struct How<'a> {
    pub layout: &'a Layout,
    pub form: TimeForm,
    pub decimal_comma: bool,
    /// Further markers of missing readings.
    pub missing: Vec<Vec<u8>>,
    /// Fields a row must have.
    pub needed: usize,
    /// Bytes of a usual row.
    pub row_bytes: usize,
}

/// Reads all rows of the text from the first reading on.
pub(super) fn over(body: &[u8], how: &How, place: &Place) -> (Rows, Faults) {
    let quoted = body.contains(&b'"');
    let pieces = if quoted { vec![body] } else { pieces(body) };
    if pieces.len() > 1
        && let Some(rows) = in_parallel(&pieces, how, place)
    {
        return (rows, Faults::new(place.clone()));
    }
    // Also after a fault in some piece, so that lines and counts are those of the whole.
    let mut pass = Pass::new(body.len(), how, place);
    if quoted {
        row_reader::quoted(body, how.layout, &mut pass);
    } else {
        row_reader::plain(body, how.layout, &mut pass);
    }
    (pass.rows, pass.faults)
}

/// Cuts a text at line ends into pieces of about equal length.
fn pieces(body: &[u8]) -> Vec<&[u8]> {
    let processors = thread::available_parallelism().map_or(1, usize::from);
    let number = (body.len() / LEAST_PIECE_BYTES).clamp(1, MOST_PIECES.min(processors));
    let mut pieces = Vec::with_capacity(number);
    let mut rest = body;
    for left in (2..=number).rev() {
        let about = rest.len() / left;
        let Some(end) = rest[about..].iter().position(|&byte| byte == b'\n') else {
            break;
        };
        let (piece, after) = rest.split_at(about + end + 1);
        pieces.push(piece);
        rest = after;
    }
    pieces.push(rest);
    pieces
}

/// The rows of all pieces, or nothing when one of them has a fault.
fn in_parallel(pieces: &[&[u8]], how: &How, place: &Place) -> Option<Rows> {
    let read = |piece: &[u8], room: usize| {
        let mut pass = Pass::new(room, how, place);
        let lines = row_reader::plain(piece, how.layout, &mut pass);
        pass.faults.is_empty().then_some((pass.rows, lines))
    };
    let (first, others) = pieces.split_first()?;
    thread::scope(|scope| {
        let read = &read;
        let threads: Vec<_> = others
            .iter()
            .map(|piece| scope.spawn(move || read(piece, piece.len())))
            .collect();
        // The first piece's columns are made long enough for all.
        let whole = pieces.iter().map(|piece| piece.len()).sum();
        let mut all = read(first, whole);
        for thread in threads {
            let next = thread.join().ok().flatten();
            all = all.zip(next).map(|((mut rows, lines), (next, more))| {
                rows.append(next, lines);
                (rows, lines + more)
            });
        }
        all.map(|(rows, _)| rows)
    })
}

/// The pass over one piece.
struct Pass<'a> {
    how: &'a How<'a>,
    rows: Rows,
    faults: Faults,
}

impl<'a> Pass<'a> {
    /// A pass with room for the rows that so many bytes usually make; a wrong guess costs a copy.
    fn new(bytes: usize, how: &'a How, place: &Place) -> Self {
        let expected = bytes / how.row_bytes.max(4) * 17 / 16 + 16;
        let column = |wanted: bool| wanted.then(|| Vec::with_capacity(expected));
        let columns = &how.layout.columns;
        Self {
            how,
            rows: Rows {
                line: Vec::with_capacity(expected),
                local_s: Vec::with_capacity(expected),
                offset_s: Vec::new(),
                twenty_four: None,
                temperature: Vec::with_capacity(expected),
                humidity: column(columns.humidity.is_some()),
                dew_point: column(columns.dew_point.is_some()),
                radiation: column(columns.radiation.is_some()),
                wind: column(columns.wind.is_some()),
            },
            faults: Faults::new(place.clone()),
        }
    }
}

impl EachRow for Pass<'_> {
    fn row(&mut self, line: usize, row: &impl Fields) {
        let How {
            layout,
            form,
            decimal_comma,
            missing,
            needed,
            ..
        } = self.how;
        let columns = &layout.columns;
        let number = row.number();
        if number < *needed {
            self.faults.short(line, row, *needed, layout);
            return;
        }
        let beyond = || (layout.fields..number).filter_map(|at| row.field(at));
        if number > layout.fields && beyond().any(|field| !field.trim_ascii().is_empty()) {
            self.faults.long(line, row, layout, *decimal_comma);
            return;
        }
        let Some(stamp) = form.stamp(row) else {
            self.faults.time(line, form, row, layout);
            return;
        };
        let read = |at: usize| match row.field(at) {
            Some(field) => number::read(field, *decimal_comma, missing),
            None => Reading::Missing,
        };
        let temperature = match read(columns.temperature.at) {
            Reading::Number(number) => number,
            Reading::Missing => f64::NAN,
            Reading::Other => {
                let field = row.field(columns.temperature.at).unwrap_or_default();
                self.faults
                    .temperature(line, &String::from_utf8_lossy(field), layout);
                return;
            }
        };
        let rows = &mut self.rows;
        for (values, column) in [
            (&mut rows.humidity, &columns.humidity),
            (&mut rows.dew_point, &columns.dew_point),
            (&mut rows.radiation, &columns.radiation),
            (&mut rows.wind, &columns.wind),
        ] {
            if let (Some(values), Some(column)) = (values, column) {
                values.push(match read(column.at) {
                    Reading::Number(number) => number,
                    // A word in a column that is not needed is as good as nothing there.
                    Reading::Missing | Reading::Other => f64::NAN,
                });
            }
        }
        rows.line.push(u32::try_from(line).unwrap_or(u32::MAX));
        rows.put(stamp);
        rows.temperature.push(temperature);
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::weather::time_stamp::DateForm;

    #[test]
    fn pieces_read_in_parallel_are_the_text_read_in_one() {
        let mut body = String::new();
        for i in 0..2000 {
            let end = if i % 3 == 0 { "\r\n# remark\n" } else { "\n" };
            let offset = if i > 1200 { "+01:00" } else { "" };
            body += &format!(
                "2023-01-{:02}T{:02}:00{offset},{}{end}",
                i / 24 % 28 + 1,
                i % 24,
                i % 7
            );
        }
        let layout = Layout::for_test(b',');
        let how = How {
            form: TimeForm {
                columns: layout.columns.time[0],
                form: DateForm::YearFirst,
            },
            layout: &layout,
            decimal_comma: false,
            missing: Vec::new(),
            needed: 2,
            row_bytes: 20,
        };
        let place = Place::file("w.csv");
        let (one, faults) = over(body.as_bytes(), &how, &place);
        assert!(faults.is_empty());
        let (a, rest) = body.split_at(body[..20_000].rfind('\n').unwrap() + 1);
        let (b, c) = rest.split_at(rest[..9000].rfind('\n').unwrap() + 1);
        let pieces = [a.as_bytes(), b.as_bytes(), c.as_bytes()];
        let many = in_parallel(&pieces, &how, &place).unwrap();
        assert_eq!(format!("{many:?}"), format!("{one:?}"));
        assert_eq!((one.line[3], one.local_s.len()), (5, 2000));
        let faulty = [a.as_bytes(), b"2023-01-01 00:00,x\n"];
        assert!(in_parallel(&faulty, &how, &place).is_none());
    }

    #[test]
    fn pieces_are_the_whole_and_end_with_their_lines() {
        let body: Vec<u8> = (0..400_000)
            .flat_map(|i| format!("{i},\n").into_bytes())
            .collect();
        let pieces = pieces(&body);
        assert_eq!(pieces.concat(), body);
        assert!(pieces.iter().all(|piece| piece.ends_with(b"\n")));
        assert_eq!(super::pieces(b"short"), [b"short"]);
    }
}
