//! The table: what is checked, by what source, and how near it came.

use std::fmt::Write as _;
use std::path::Path;

/// One check against the outside.
#[derive(Debug, Clone)]
pub struct Row {
    pub what: String,
    /// Publication, library or worked example that the expected value is from.
    pub source: String,
    pub expected: f64,
    pub got: f64,
    /// Greatest difference that is allowed, in the unit of the value.
    pub tolerance: f64,
    /// Why it is that much.
    pub because: String,
    /// Whether the expected value is the least that is allowed, however much more is got.
    pub is_floor: bool,
}

impl Row {
    pub fn new(
        what: impl Into<String>,
        source: impl Into<String>,
        expected: f64,
        got: f64,
        tolerance: f64,
        because: impl Into<String>,
    ) -> Self {
        Self {
            what: what.into(),
            source: source.into(),
            expected,
            got,
            tolerance,
            because: because.into(),
            is_floor: false,
        }
    }

    /// A value that must not be less than another.
    pub fn at_least(
        what: impl Into<String>,
        source: impl Into<String>,
        least: f64,
        got: f64,
        because: impl Into<String>,
    ) -> Self {
        Self {
            is_floor: true,
            ..Self::new(what, source, least, got, 0.0, because)
        }
    }

    /// Something that must be so: 1 for yes, 0 for no.
    pub fn holds(what: impl Into<String>, source: impl Into<String>, is_so: bool) -> Self {
        let got = f64::from(u8::from(is_so));
        Self::new(what, source, 1.0, got, 0.0, "it is so (1) or not (0)")
    }

    /// Difference as a share of what is allowed; not finite where there is no number.
    pub fn used(&self) -> f64 {
        let off = (self.got - self.expected).abs();
        if off == 0.0 || self.is_floor && self.got > self.expected {
            return 0.0;
        }
        off / self.tolerance
    }

    pub fn is_green(&self) -> bool {
        self.used() <= 1.0
    }
}

/// The worst of many values, as a row.
pub struct Worst {
    relative: f64,
    absolute: f64,
    count: usize,
    found: Option<Row>,
}

impl Worst {
    /// Each may be off by this share of the expected value.
    pub fn relative(share: f64) -> Self {
        Self {
            relative: share,
            absolute: 0.0,
            count: 0,
            found: None,
        }
    }

    /// Each may be off by this much.
    pub fn absolute(much: f64) -> Self {
        Self {
            relative: 0.0,
            absolute: much,
            ..Self::relative(0.0)
        }
    }

    pub fn see(&mut self, expected: f64, got: f64) {
        let allowed = self.relative * expected.abs() + self.absolute;
        self.see_within(expected, got, allowed);
    }

    pub fn see_within(&mut self, expected: f64, got: f64, allowed: f64) {
        self.count += 1;
        let row = Row::new("", "", expected, got, allowed, "");
        // What is no number is worse than any.
        let rank = |row: &Row| {
            if row.used().is_nan() {
                f64::INFINITY
            } else {
                row.used()
            }
        };
        if self
            .found
            .as_ref()
            .is_none_or(|worst| rank(&row) > rank(worst))
        {
            self.found = Some(row);
        }
    }

    /// The row; red when fewer than `least` values were seen.
    pub fn row(self, what: &str, source: &str, least: usize, because: &str) -> Row {
        let what = format!("{what}, worst of {}", self.count);
        match self.found {
            Some(worst) if self.count >= least => Row {
                what,
                source: source.to_owned(),
                because: because.to_owned(),
                ..worst
            },
            _ => Row::new(
                what,
                source,
                least as f64,
                self.count as f64,
                0.0,
                "values seen",
            ),
        }
    }
}

/// A table of `tests/reference`: its records without the header and lines of comment.
pub fn reference(name: &str) -> Vec<Vec<String>> {
    let path = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests/reference")
        .join(name);
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_path(path)
        .unwrap();
    reader
        .records()
        .map(|record| record.unwrap().iter().map(str::to_owned).collect())
        .collect()
}

/// The same as numbers.
pub fn numbers(name: &str) -> Vec<Vec<f64>> {
    let rows = reference(name);
    rows.iter()
        .map(|row| row.iter().map(|text| number(text)).collect())
        .collect()
}

pub fn number(text: &str) -> f64 {
    text.parse().unwrap()
}

/// Six digits, without the noughts at the end.
fn shown(value: f64) -> String {
    let size = value.abs();
    if value == 0.0 {
        return "0".to_owned();
    }
    if !(1e-3..1e7).contains(&size) {
        return format!("{value:.2e}");
    }
    let whole_digits = size.log10().floor() as i32 + 1;
    let decimals = (6 - whole_digits).clamp(0, 8) as usize;
    let text = format!("{value:.decimals$}");
    if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    }
}

fn percent(used: f64) -> String {
    format!("{:.0} %", 100.0 * used)
}

fn line(row: &Row) -> String {
    let difference = match row.got - row.expected {
        0.0 => "0".to_owned(),
        off if (0.01..1e5).contains(&off.abs()) => format!("{off:+.3}"),
        off => format!("{off:+.1e}"),
    };
    let state = if row.is_green() { "" } else { "**RED** " };
    format!(
        "| {state}{} | {} | {}{} | {} | {difference} | {} | {} | {} |",
        row.what,
        row.source,
        if row.is_floor { "≥ " } else { "" },
        shown(row.expected),
        shown(row.got),
        shown(row.tolerance),
        percent(row.used()),
        row.because
    )
}

/// The whole page.
pub fn page(rooms: &[(&str, Vec<Row>)]) -> String {
    let rows: usize = rooms.iter().map(|(_, rows)| rows.len()).sum();
    let mut text = format!(
        "# Validation\n\n\
        What the program was checked against that did not come from itself: published standards, handbook tables, worked examples,\n\
        open data and general-purpose libraries. {rows} rows. `UPDATE_VALIDATION=1 cargo test --locked --test validation` makes this page\n\
        anew; the same test without the variable, which CI runs, fails when a row is red or the page is stale. \"Used\" is the difference\n\
        as a share of what is allowed. Marks in square brackets: [M] the expected value is from memory. Where a row stands for many\n\
        values, the worst is shown. Scripts and tables of the libraries are in `tests/reference`; the rows are made in `tests/validation`.\n\
        Each trap that gives plausible wrong numbers is also put into the program on purpose, to see that a row goes red:\n\
        `cargo test --locked --features seeded-faults --test validation`.\n"
    );
    for (room, rows) in rooms {
        let _ = write!(
            text,
            "\n## {room}\n\n\
            | check | source | expected | got | difference | tolerance | used | why this tolerance |\n\
            |---|---|---|---|---|---|---|---|\n"
        );
        for row in rows {
            let _ = writeln!(text, "{}", line(row));
        }
    }
    text.push_str("\n## Seeded faults\n\n");
    let list = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/validation/seeded_faults.md");
    text.push_str(&std::fs::read_to_string(list).unwrap_or_default());
    text
}

/// Whether a page still says what the rows say, rounding aside: the same words, and every share used within three points.
pub fn is_stale(page: &str, now: &str) -> Option<String> {
    /// Another processor or library of elementary functions may round otherwise.
    const POINTS: f64 = 3.0;
    let (held, made): (Vec<_>, Vec<_>) = (page.lines().collect(), now.lines().collect());
    if held.len() != made.len() {
        return Some(format!("{} lines instead of {}", held.len(), made.len()));
    }
    for (held, made) in held.iter().zip(made) {
        if *held == made {
            continue;
        }
        let cells = |line: &str| -> Vec<String> {
            line.split(" | ")
                .map(|cell| cell.trim().to_owned())
                .collect()
        };
        let (a, b) = (cells(held), cells(made));
        let used = |cells: &[String]| {
            let cell = cells.get(6)?;
            cell.strip_suffix(" %")?.parse::<f64>().ok()
        };
        let words = |cells: &[String]| [0, 1, 7].map(|i| cells.get(i).cloned());
        let same = matches!((used(&a), used(&b)), (Some(a), Some(b)) if (a - b).abs() <= POINTS);
        if !same || words(&a) != words(&b) {
            return Some(format!("- {held}\n+ {made}"));
        }
    }
    None
}
