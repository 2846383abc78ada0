//! Row by row over the text, each with its line.
//!
//! A file without a quotation mark needs no more than its line ends and delimiters, and is split here; that is what makes
//! thirty years fast. Any other file goes through the `csv` crate.

use super::layout::{Layout, REMARK};

/// Fields of a row, as bytes.
pub(super) trait Fields {
    /// The field at a position, if the row is that long.
    fn field(&self, at: usize) -> Option<&[u8]>;
    /// How many fields there are.
    fn number(&self) -> usize;
}

impl Fields for csv::ByteRecord {
    fn field(&self, at: usize) -> Option<&[u8]> {
        self.get(at)
    }

    fn number(&self) -> usize {
        self.len()
    }
}

impl Fields for Vec<String> {
    fn field(&self, at: usize) -> Option<&[u8]> {
        self.get(at).map(|field| field.as_bytes())
    }

    fn number(&self) -> usize {
        self.len()
    }
}

/// One row of a file without quotation marks.
#[derive(Debug, Clone, Copy)]
struct Plain<'r> {
    text: &'r [u8],
    /// One past the end of each field.
    ends: &'r [usize],
}

impl Fields for Plain<'_> {
    fn field(&self, at: usize) -> Option<&[u8]> {
        let from = if at == 0 {
            0
        } else {
            self.ends.get(at - 1)? + 1
        };
        self.text.get(from..*self.ends.get(at)?)
    }

    fn number(&self) -> usize {
        self.ends.len()
    }
}

/// Something done with every row.
pub(super) trait EachRow {
    /// Takes one row and the number of its line.
    fn row(&mut self, line: usize, row: &impl Fields);
}

/// Hands every row of a text without quotation marks to `each`, and tells how many lines there were.
pub(super) fn plain(body: &[u8], layout: &Layout, each: &mut impl EachRow) -> usize {
    let mut ends = Vec::with_capacity(layout.fields + 1);
    let mut line = layout.line;
    let mut rest = body;
    while !rest.is_empty() {
        ends.clear();
        let mut length = rest.len();
        for (at, &byte) in rest.iter().enumerate() {
            if byte == layout.delimiter {
                ends.push(at);
            } else if byte == b'\n' {
                length = at;
                break;
            }
        }
        let row = &rest[..length];
        let row = row.strip_suffix(b"\r").unwrap_or(row);
        ends.push(row.len());
        if !row.trim_ascii().is_empty() && row[0] != REMARK {
            each.row(
                line,
                &Plain {
                    text: row,
                    ends: &ends,
                },
            );
        }
        line += 1;
        rest = rest.get(length + 1..).unwrap_or_default();
    }
    line - layout.line
}

/// Hands every row of any text to `each`.
pub(super) fn quoted(body: &[u8], layout: &Layout, each: &mut impl EachRow) {
    let mut reader = reader(body, layout.delimiter);
    let mut record = csv::ByteRecord::new();
    // Reading from memory cannot fail and rows may be of any length, so an error is the end.
    while reader.read_byte_record(&mut record).unwrap_or(false) {
        // A remark that ends the file without a line end comes back as one empty field.
        let blank = record.len() == 1
            && record
                .get(0)
                .is_some_and(|field| field.trim_ascii().is_empty());
        if !blank {
            each.row(line_of(body, layout.line, &record), &record);
        }
    }
}

fn reader(body: &[u8], delimiter: u8) -> csv::Reader<&[u8]> {
    csv::ReaderBuilder::new()
        .delimiter(delimiter)
        .has_headers(false)
        .flexible(true)
        .comment(Some(REMARK))
        .from_reader(body)
}

/// The first rows, for deciding forms.
pub(super) fn sample(text: &str, layout: &Layout, number: usize) -> Vec<csv::ByteRecord> {
    let body = text.as_bytes().get(layout.start..).unwrap_or_default();
    reader(body, layout.delimiter)
        .into_byte_records()
        .map_while(Result::ok)
        .take(number)
        .collect()
}

/// The line a record begins on. The position that the reader gives lies before the blank lines and remarks it passed over.
fn line_of(body: &[u8], first_line: usize, record: &csv::ByteRecord) -> usize {
    let Some(position) = record.position() else {
        return first_line;
    };
    let mut line = first_line + usize::try_from(position.line()).unwrap_or(1) - 1;
    let mut at = usize::try_from(position.byte()).unwrap_or(0);
    loop {
        match body.get(at) {
            Some(b'\n') => {
                line += 1;
                at += 1;
            }
            Some(b'\r') => at += 1,
            Some(&REMARK) => at += body[at..].iter().take_while(|&&b| b != b'\n').count(),
            _ => return line,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[derive(Default)]
    struct Seen(Vec<(usize, Vec<String>)>);

    impl EachRow for Seen {
        fn row(&mut self, line: usize, row: &impl Fields) {
            let fields = (0..row.number()).filter_map(|at| row.field(at));
            self.0.push((
                line,
                fields
                    .map(|f| String::from_utf8_lossy(f).into_owned())
                    .collect(),
            ));
        }
    }

    fn both(body: &str) -> (Seen, Seen) {
        let layout = Layout {
            start: 0,
            line: 1,
            ..Layout::for_test(b',')
        };
        let (mut ours, mut theirs) = (Seen::default(), Seen::default());
        plain(body.as_bytes(), &layout, &mut ours);
        quoted(body.as_bytes(), &layout, &mut theirs);
        (ours, theirs)
    }

    #[test]
    fn lines_are_counted_over_blanks_and_remarks() {
        let (ours, theirs) = both("\n# x\r\n\r\na,1\n#\n\nb,2\r\nc,3");
        let lines: Vec<_> = ours.0.iter().map(|(line, _)| *line).collect();
        assert_eq!(lines, [4, 7, 8]);
        assert_eq!(ours.0, theirs.0);
    }

    proptest! {
        /// On text without quotation marks and lone carriage returns, the short way is the csv crate's way.
        #[test]
        fn both_ways_agree(body in "([a-c0-9,#]|\n|\r\n){0,60}") {
            let (ours, theirs) = both(&body);
            prop_assert_eq!(ours.0, theirs.0);
        }
    }
}
