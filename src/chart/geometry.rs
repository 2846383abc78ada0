//! Plane geometry of the pictures: dashes along a line, hatch lines inside a polygon, lines cut at a rectangle.

use super::palette::Hatch;

/// A point on the canvas in points, y downwards.
pub(crate) type Point = (f64, f64);

/// A rectangle on the canvas, y downwards.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Rect {
    /// Left edge.
    pub left: f64,
    /// Upper edge.
    pub top: f64,
    /// Right edge.
    pub right: f64,
    /// Lower edge.
    pub bottom: f64,
}

impl Rect {
    /// Whether two rectangles share more than an edge.
    pub fn overlaps(&self, other: &Rect) -> bool {
        self.left < other.right
            && other.left < self.right
            && self.top < other.bottom
            && other.top < self.bottom
    }

    /// Whether `other` lies wholly inside.
    pub fn contains(&self, other: &Rect) -> bool {
        self.left <= other.left
            && self.top <= other.top
            && self.right >= other.right
            && self.bottom >= other.bottom
    }

    pub(crate) fn contains_point(&self, p: Point) -> bool {
        (self.left..=self.right).contains(&p.0) && (self.top..=self.bottom).contains(&p.1)
    }

    pub(crate) fn grown(&self, by: f64) -> Rect {
        Rect {
            left: self.left - by,
            top: self.top - by,
            right: self.right + by,
            bottom: self.bottom + by,
        }
    }

    pub(crate) fn corners(&self) -> [Point; 4] {
        [
            (self.left, self.top),
            (self.right, self.top),
            (self.right, self.bottom),
            (self.left, self.bottom),
        ]
    }
}

/// Distance between hatch lines in points.
const HATCH_STEP: f64 = 6.0;

/// Cuts a line into dashes: `lengths` are drawn and left out in turn.
pub(crate) fn dashes(points: &[Point], lengths: &[f64]) -> Vec<Vec<Point>> {
    let mut out = Vec::new();
    let Some((&first, rest)) = points.split_first() else {
        return out;
    };
    if lengths.is_empty() || lengths.iter().any(|l| *l <= 0.0) {
        return vec![points.to_vec()];
    }
    let (mut index, mut left, mut at) = (0, lengths[0], first);
    let mut piece = vec![first];
    for &next in rest {
        loop {
            let (dx, dy) = (next.0 - at.0, next.1 - at.1);
            let length = dx.hypot(dy);
            if length <= left {
                left -= length;
                at = next;
                piece.push(next);
                break;
            }
            let share = left / length;
            at = (at.0 + dx * share, at.1 + dy * share);
            piece.push(at);
            if index % 2 == 0 {
                out.push(std::mem::take(&mut piece));
            }
            index += 1;
            left = lengths[index % lengths.len()];
            piece = vec![at];
        }
    }
    if index % 2 == 0 && piece.len() > 1 {
        out.push(piece);
    }
    out
}

/// The hatch lines of a polygon. Lines are fixed to the canvas, so neighbouring areas carry on each other's lines.
pub(crate) fn hatch(polygon: &[Point], hatch: Hatch) -> Vec<[Point; 2]> {
    // Each direction is the unit normal of its lines.
    let diagonal = std::f64::consts::FRAC_1_SQRT_2;
    let normals: &[Point] = match hatch {
        Hatch::Plain => &[],
        Hatch::Rising => &[(diagonal, diagonal)],
        Hatch::Falling => &[(-diagonal, diagonal)],
        Hatch::Crossed => &[(diagonal, diagonal), (-diagonal, diagonal)],
        Hatch::Level => &[(0.0, 1.0)],
        Hatch::Upright => &[(1.0, 0.0)],
    };
    let mut out = Vec::new();
    for &(nx, ny) in normals {
        let along = |p: Point| p.1 * nx - p.0 * ny;
        let across = |p: Point| p.0 * nx + p.1 * ny;
        let low = polygon
            .iter()
            .map(|&p| across(p))
            .fold(f64::INFINITY, f64::min);
        let high = polygon
            .iter()
            .map(|&p| across(p))
            .fold(f64::NEG_INFINITY, f64::max);
        if !(low.is_finite() && high.is_finite()) {
            continue;
        }
        // Half a step off the edge, so that a level edge never coincides with a line.
        let mut level = ((low / HATCH_STEP).floor() + 0.5) * HATCH_STEP;
        while level < high {
            let mut cuts: Vec<f64> = Vec::new();
            for (i, &a) in polygon.iter().enumerate() {
                let b = polygon[(i + 1) % polygon.len()];
                let (ca, cb) = (across(a), across(b));
                if (ca <= level) != (cb <= level) {
                    let share = (level - ca) / (cb - ca);
                    cuts.push(along(a) + share * (along(b) - along(a)));
                }
            }
            cuts.sort_by(f64::total_cmp);
            for pair in cuts.chunks_exact(2) {
                let point = |t: f64| (level * nx - t * ny, level * ny + t * nx);
                out.push([point(pair[0]), point(pair[1])]);
            }
            level += HATCH_STEP;
        }
    }
    out
}

/// The pieces of a line that lie inside `area` (Liang and Barsky 1984, segment by segment). Points that are not
/// finite break the line: a gap in the data stays a gap.
pub(crate) fn clip(points: &[Point], area: &Rect) -> Vec<Vec<Point>> {
    let mut out: Vec<Vec<Point>> = Vec::new();
    let mut open = false;
    for pair in points.windows(2) {
        match clip_segment(pair[0], pair[1], area) {
            Some((a, b)) => {
                match out.last_mut() {
                    Some(piece) if open && piece.last() == Some(&a) => piece.push(b),
                    _ => out.push(vec![a, b]),
                }
                open = b == pair[1];
            }
            None => open = false,
        }
    }
    out
}

fn clip_segment(a: Point, b: Point, area: &Rect) -> Option<(Point, Point)> {
    if ![a.0, a.1, b.0, b.1].iter().all(|v| v.is_finite()) {
        return None;
    }
    let (dx, dy) = (b.0 - a.0, b.1 - a.1);
    let (mut enter, mut leave) = (0.0_f64, 1.0_f64);
    for (step, room) in [
        (-dx, a.0 - area.left),
        (dx, area.right - a.0),
        (-dy, a.1 - area.top),
        (dy, area.bottom - a.1),
    ] {
        if step == 0.0 {
            if room < 0.0 {
                return None;
            }
        } else if step < 0.0 {
            enter = enter.max(room / step);
        } else {
            leave = leave.min(room / step);
        }
    }
    let at = |t: f64| (a.0 + t * dx, a.1 + t * dy);
    (enter <= leave).then(|| {
        let start = if enter == 0.0 { a } else { at(enter) };
        let end = if leave == 1.0 { b } else { at(leave) };
        (start, end)
    })
}

/// A polygon cut at a rectangle (Sutherland and Hodgman 1974, edge by edge).
pub(crate) fn clip_area(polygon: &[Point], area: &Rect) -> Vec<Point> {
    type Inside = fn(Point, &Rect) -> f64;
    let edges: [Inside; 4] = [
        |p, r| p.0 - r.left,
        |p, r| r.right - p.0,
        |p, r| p.1 - r.top,
        |p, r| r.bottom - p.1,
    ];
    let mut shape: Vec<Point> = polygon
        .iter()
        .copied()
        .filter(|p| p.0.is_finite() && p.1.is_finite())
        .collect();
    for inside in edges {
        let corners = std::mem::take(&mut shape);
        for (i, &b) in corners.iter().enumerate() {
            let a = corners[(i + corners.len() - 1) % corners.len()];
            let (da, db) = (inside(a, area), inside(b, area));
            if (da < 0.0) != (db < 0.0) {
                let share = da / (da - db);
                shape.push((a.0 + share * (b.0 - a.0), a.1 + share * (b.1 - a.1)));
            }
            if db >= 0.0 {
                shape.push(b);
            }
        }
    }
    shape
}

/// Area of a polygon (Gauss's formula).
pub(crate) fn size(polygon: &[Point]) -> f64 {
    let twice: f64 = (0..polygon.len())
        .map(|i| {
            let (a, b) = (polygon[i], polygon[(i + 1) % polygon.len()]);
            a.0 * b.1 - b.0 * a.1
        })
        .sum();
    twice.abs() / 2.0
}

/// Length of a line.
pub(crate) fn length(line: &[Point]) -> f64 {
    line.windows(2)
        .map(|p| (p[1].0 - p[0].0).hypot(p[1].1 - p[0].1))
        .sum()
}

/// A line thinned to what can be seen: points closer than `step` sideways to the last kept one are merged into the
/// lowest and highest of their column, so peaks stay.
pub(crate) fn thin(points: &[Point], step: f64) -> Vec<Point> {
    let mut out: Vec<Point> = Vec::with_capacity(points.len().min(2048));
    let mut column: Vec<Point> = Vec::new();
    for &p in points {
        if let Some(first) = column.first()
            && (p.0 - first.0).abs() > step
        {
            flush(&mut column, &mut out);
        }
        column.push(p);
    }
    flush(&mut column, &mut out);
    out
}

fn flush(column: &mut Vec<Point>, out: &mut Vec<Point>) {
    let lowest = (0..column.len()).min_by(|&a, &b| column[a].1.total_cmp(&column[b].1));
    let highest = (0..column.len()).max_by(|&a, &b| column[a].1.total_cmp(&column[b].1));
    let mut keep: Vec<usize> = [Some(0), lowest, highest, column.len().checked_sub(1)]
        .into_iter()
        .flatten()
        .collect();
    keep.sort_unstable();
    keep.dedup();
    out.extend(keep.into_iter().filter_map(|i| column.get(i).copied()));
    column.clear();
}

#[cfg(test)]
mod tests {
    use super::*;

    const UNIT: Rect = Rect {
        left: 0.0,
        top: 0.0,
        right: 100.0,
        bottom: 60.0,
    };

    #[test]
    fn dashes_cover_their_share_of_a_bent_line() {
        let line = [(0.0, 0.0), (30.0, 0.0), (30.0, 90.0)];
        let pieces = dashes(&line, &[6.0, 4.0]);
        let drawn: f64 = pieces.iter().map(|p| length(p)).sum();
        // 120 long: twelve whole periods of 6 drawn and 4 left out.
        assert!((drawn - 72.0).abs() < 1e-9, "{drawn}");
        assert_eq!(pieces.len(), 12);
    }

    #[test]
    fn hatch_lines_have_the_length_that_the_area_over_their_distance_gives() {
        // Cavalieri: the lines, each standing for a strip as wide as their distance, add up to the area.
        let shape = [
            (3.0, 2.0),
            (180.0, 30.0),
            (150.0, 150.0),
            (90.0, 60.0),
            (10.0, 140.0),
        ];
        let area = size(&shape);
        for pattern in [Hatch::Rising, Hatch::Falling, Hatch::Level, Hatch::Upright] {
            let drawn: f64 = hatch(&shape, pattern).iter().map(|l| length(l)).sum();
            // Strips at corners are cut: a few per cent at this size.
            assert!(
                (drawn * HATCH_STEP / area - 1.0).abs() < 0.04,
                "{pattern:?}"
            );
        }
    }

    #[test]
    fn size_and_length_of_a_right_triangle() {
        let triangle = [(0.0, 0.0), (30.0, 0.0), (0.0, 40.0)];
        assert_eq!(size(&triangle), 600.0);
        assert_eq!(length(&triangle), 80.0);
    }

    #[test]
    fn hatch_lines_stay_inside() {
        for line in hatch(&UNIT.corners(), Hatch::Crossed) {
            for (x, y) in line {
                assert!((-1e-9..=100.0 + 1e-9).contains(&x) && (-1e-9..=60.0 + 1e-9).contains(&y));
            }
        }
    }

    #[test]
    fn clipping_cuts_at_the_edge_and_keeps_gaps() {
        let pieces = clip(
            &[(-50.0, 30.0), (50.0, 30.0), (150.0, 30.0), (150.0, 90.0)],
            &UNIT,
        );
        assert_eq!(pieces, vec![vec![(0.0, 30.0), (50.0, 30.0), (100.0, 30.0)]]);
        let gap = clip(
            &[
                (0.0, 1.0),
                (10.0, 1.0),
                (f64::NAN, 1.0),
                (20.0, 1.0),
                (30.0, 1.0),
            ],
            &UNIT,
        );
        assert_eq!(gap.len(), 2);
        assert!(clip(&[(-5.0, -5.0), (-1.0, -9.0)], &UNIT).is_empty());
    }

    #[test]
    fn a_clipped_area_is_the_part_that_lies_inside() {
        // A square of 40 whose centre is a corner of the rectangle: a quarter stays.
        let square = [(80.0, 40.0), (120.0, 40.0), (120.0, 80.0), (80.0, 80.0)];
        let part = clip_area(&square, &UNIT);
        assert_eq!(part.len(), 4);
        for corner in [(80.0, 40.0), (100.0, 40.0), (100.0, 60.0), (80.0, 60.0)] {
            assert!(part.contains(&corner), "{corner:?} not in {part:?}");
        }
        assert!(clip_area(&[(200.0, 0.0), (210.0, 0.0), (205.0, 9.0)], &UNIT).is_empty());
    }

    #[test]
    fn thinning_keeps_ends_and_peaks() {
        let mut line: Vec<Point> = (0..8760).map(|i| (i as f64 / 20.0, 5.0)).collect();
        line[4321].1 = 99.0;
        let thin = thin(&line, 0.5);
        assert!(thin.len() < 3600);
        assert_eq!(thin.first(), line.first());
        assert_eq!(thin.last(), line.last());
        assert!(thin.contains(&line[4321]));
    }

    #[test]
    fn rectangles_that_share_an_edge_do_not_overlap() {
        let a = Rect {
            left: 0.0,
            top: 0.0,
            right: 10.0,
            bottom: 10.0,
        };
        let b = Rect {
            left: 10.0,
            ..a.grown(5.0)
        };
        assert!(!a.overlaps(&b) && a.overlaps(&a.grown(-2.0)));
    }
}
