//! The realistic pictures beside what was stored of them: the mean grey of each cell of a coarse grid.
//!
//! A grid forgives what differs between builds of the drawing library (the edge of a glyph, a rounded pixel) and finds
//! what a reader would see: the second test moves one bar by a tenth and must be found. After a wanted change, look at
//! the pictures, then run the test with `STORE_PICTURES=1` and commit what it wrote.

use std::fmt::Write as _;
use std::path::PathBuf;

/// Cells across; cells are square.
const ACROSS: usize = 48;
/// Largest difference of a cell, of 255 steps of grey: one moved glyph edge changes a cell of 45 × 45 pixels by less.
const TOLERANCE: i32 = 5;

/// Mean grey of each cell, row by row.
fn grid(png: &[u8]) -> Vec<Vec<u8>> {
    let mut reader = png::Decoder::new(png).read_info().expect("readable PNG");
    let mut pixels = vec![0; reader.output_buffer_size()];
    let info = reader.next_frame(&mut pixels).expect("pixels");
    let (width, height) = (info.width as usize, info.height as usize);
    let side = width / ACROSS;
    let mean = |row: usize, column: usize| {
        let mut sum = 0_usize;
        let mut count = 0;
        for y in row * side..((row + 1) * side).min(height) {
            for x in column * side..(column + 1) * side {
                let at = (y * width + x) * 3;
                sum += pixels[at..at + 3]
                    .iter()
                    .map(|v| usize::from(*v))
                    .sum::<usize>();
                count += 3;
            }
        }
        (sum / count) as u8
    };
    (0..height.div_ceil(side))
        .map(|row| (0..ACROSS).map(|column| mean(row, column)).collect())
        .collect()
}

fn read(text: &str) -> Vec<Vec<u8>> {
    text.lines()
        .map(|line| {
            (0..line.len() / 2)
                .map(|i| u8::from_str_radix(&line[2 * i..2 * i + 2], 16).expect("two hex digits"))
                .collect()
        })
        .collect()
}

/// Where and by how much two grids differ most; none when their shapes differ.
fn difference(a: &[Vec<u8>], b: &[Vec<u8>]) -> Option<(i32, usize, usize)> {
    let same_shape = a.len() == b.len() && a.iter().zip(b).all(|(a, b)| a.len() == b.len());
    same_shape.then(|| {
        let cells = a.iter().zip(b).enumerate().flat_map(|(row, (a, b))| {
            a.iter()
                .zip(b)
                .enumerate()
                .map(move |(column, (a, b))| ((i32::from(*a) - i32::from(*b)).abs(), row, column))
        });
        cells.max().unwrap_or_default()
    })
}

fn file(name: &str) -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR")).join(format!("tests/chart_gallery/stored/{name}.txt"))
}

/// Compares a picture with what is stored under `name`.
pub fn compare(name: &str, png: &[u8]) {
    let now = grid(png);
    if std::env::var_os("STORE_PICTURES").is_some() {
        let mut text = String::new();
        for row in &now {
            for cell in row {
                write!(text, "{cell:02x}").expect("text");
            }
            text.push('\n');
        }
        std::fs::create_dir_all(file(name).parent().expect("folder")).expect("folder");
        std::fs::write(file(name), text).expect("written");
    }
    let stored = std::fs::read_to_string(file(name))
        .unwrap_or_else(|e| panic!("nothing stored for {name}: {e}"));
    match difference(&now, &read(&stored)) {
        None => panic!("{name}: the picture has another shape than the stored one"),
        Some((most, row, column)) => assert!(
            most <= TOLERANCE,
            "{name}: cell {column} across, {row} down differs by {most} of 255"
        ),
    }
}

#[test]
fn a_bar_that_is_a_tenth_longer_is_found() {
    use winterledger::chart::{AnnualCost, Marks, SystemCost, annual_cost};
    let draw = |energy: f64| {
        let system = |label: &str, energy| SystemCost {
            label: label.into(),
            today: false,
            energy,
            standing: 300.0,
            tax: 60.0,
        };
        let data = AnnualCost {
            currency: "GBP".into(),
            systems: vec![system("A", 1200.0), system("B", energy)],
        };
        let picture = annual_cost(&data, &Marks::default()).expect("drawn");
        grid(&picture.png().expect("PNG"))
    };
    let same = difference(&draw(700.0), &draw(700.0)).expect("one shape");
    assert_eq!(same.0, 0);
    let longer = difference(&draw(700.0), &draw(770.0)).expect("one shape");
    assert!(longer.0 > 4 * TOLERANCE, "found only {longer:?}");
}
