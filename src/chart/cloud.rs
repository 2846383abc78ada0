//! Many hours as a cloud: counted into small cells, darker where more hours lie, with a line through their medians.
//!
//! Eight thousand dots hide each other and make a large SVG; counted cells say how many hours a place stands for and
//! read the same in grey.

use super::frame::Frame;
use super::geometry::Rect;
use super::key::Swatch;
use super::palette::{Colour, Hatch, NAVY};
use super::scene::Scene;
use std::collections::BTreeMap;

/// Side of a cell in points.
const CELL: f64 = 5.0;
/// Fewest hours of each shade.
const LEVELS: [usize; 4] = [1, 3, 9, 27];
/// Share of white in each shade.
const TINTS: [f64; 4] = [0.82, 0.60, 0.34, 0.0];
/// Fewest hours whose median is drawn: fewer would draw chance.
const MEDIAN_HOURS: usize = 5;

/// The highest shade there is.
pub(crate) const ALL: usize = LEVELS.len() - 1;

fn shade(level: usize) -> Colour {
    NAVY.lighter(TINTS[level])
}

/// Draws the cloud of (x, y) values inside a frame; gives back the highest shade used.
pub(crate) fn draw(scene: &mut Scene, frame: &Frame, values: &[(f64, f64)]) -> usize {
    let area = frame.area;
    let mut cells: BTreeMap<(i64, i64), usize> = BTreeMap::new();
    for &(x, y) in values {
        let (px, py) = frame.at(x, y);
        if px >= area.left && px <= area.right && py >= area.top && py <= area.bottom {
            let column = ((px - area.left) / CELL) as i64;
            let row = ((py - area.top) / CELL) as i64;
            *cells.entry((row, column)).or_default() += 1;
        }
    }
    let level = |count: usize| LEVELS.iter().rposition(|l| count >= *l).unwrap_or(0);
    let mut highest = 0;
    // Neighbours of one shade are one rectangle.
    let mut runs: Vec<(i64, i64, i64, usize)> = Vec::new();
    for (&(row, column), &count) in &cells {
        let level = level(count);
        highest = highest.max(level);
        match runs.last_mut() {
            Some(run) if run.0 == row && run.2 + 1 == column && run.3 == level => run.2 = column,
            _ => runs.push((row, column, column, level)),
        }
    }
    for (row, first, last, level) in runs {
        let cell = Rect {
            left: area.left + first as f64 * CELL,
            top: area.top + row as f64 * CELL,
            right: (area.left + (last + 1) as f64 * CELL).min(area.right),
            bottom: (area.top + (row + 1) as f64 * CELL).min(area.bottom),
        };
        scene.area(&cell.corners(), shade(level), 1.0);
    }
    highest
}

/// The key of a cloud up to the highest shade used.
pub(crate) fn key(highest: usize) -> Vec<(Swatch, String)> {
    (0..=highest.min(ALL))
        .map(|i| {
            let text = match LEVELS.get(i + 1) {
                Some(next) if i == 0 && highest > 0 => format!("{}–{} hours", LEVELS[i], next - 1),
                Some(next) if i < highest => format!("{}–{}", LEVELS[i], next - 1),
                _ => format!("{} or more", LEVELS[i]),
            };
            (Swatch::Area(shade(i), Hatch::Plain), text)
        })
        .collect()
}

/// Median of y in steps of x, where there are enough hours.
pub(crate) fn medians(values: &[(f64, f64)], step: f64) -> Vec<(f64, f64)> {
    let mut bins: BTreeMap<i64, Vec<f64>> = BTreeMap::new();
    for &(x, y) in values {
        if x.is_finite() && y.is_finite() {
            bins.entry((x / step).floor() as i64).or_default().push(y);
        }
    }
    bins.into_iter()
        .filter(|(_, ys)| ys.len() >= MEDIAN_HOURS)
        .map(|(bin, ys)| ((bin as f64 + 0.5) * step, median(ys)))
        .collect()
}

/// Median of a list that is not empty; zero for an empty one.
pub(crate) fn median(mut values: Vec<f64>) -> f64 {
    values.sort_by(f64::total_cmp);
    let n = values.len();
    match n {
        0 => 0.0,
        n if n % 2 == 1 => values[n / 2],
        n => (values[n / 2 - 1] + values[n / 2]) / 2.0,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn median_of_odd_and_even_lists() {
        assert_eq!(median(vec![3.0, 1.0, 2.0]), 2.0);
        assert_eq!(median(vec![4.0, 1.0, 2.0, 3.0]), 2.5);
    }

    #[test]
    fn medians_follow_a_line_and_leave_rare_steps_out() {
        let mut values: Vec<(f64, f64)> = (0..100)
            .map(|i| (f64::from(i) / 10.0, f64::from(i)))
            .collect();
        values.push((40.5, 1.0));
        let m = medians(&values, 1.0);
        assert_eq!(m.len(), 10);
        assert_eq!(m[0], (0.5, 4.5));
        assert_eq!(m[9], (9.5, 94.5));
    }

    #[test]
    fn key_ends_with_the_highest_shade() {
        let texts = |n| key(n).into_iter().map(|(_, t)| t).collect::<Vec<_>>();
        assert_eq!(texts(0), ["1 or more"]);
        assert_eq!(texts(2), ["1–2 hours", "3–8", "9 or more"]);
    }
}
