//! Lines of equal value through a grid of values: marching squares, the pieces joined to lines.

/// A point in the units of the grid's axes.
type Place = (f64, f64);

/// Lines along which the grid has `level`. `values[row][column]` belongs to `y[row]` and `x[column]`.
///
/// Values between nodes are taken as linear along the edges of a cell; a saddle is decided by the mean of its corners
/// (the usual rule of marching squares; Lorensen and Cline 1987 is the same idea in space).
pub(crate) fn isolines(x: &[f64], y: &[f64], values: &[Vec<f64>], level: f64) -> Vec<Vec<Place>> {
    let mut pieces: Vec<(Edge, Edge)> = Vec::new();
    for row in 0..y.len().saturating_sub(1) {
        for column in 0..x.len().saturating_sub(1) {
            pieces.extend(cell(values, row, column, level));
        }
    }
    let at = |e: &Edge| {
        let (row, column) = (e.row, e.column);
        let (row2, column2) = if e.upright {
            (row + 1, column)
        } else {
            (row, column + 1)
        };
        let (a, b) = (values[row][column] - level, values[row2][column2] - level);
        let t = if a == b { 0.5 } else { a / (a - b) };
        (
            x[column] + t * (x[column2] - x[column]),
            y[row] + t * (y[row2] - y[row]),
        )
    };
    join(pieces)
        .iter()
        .map(|line| line.iter().map(at).collect())
        .collect()
}

/// An edge of the grid, from its lower left node to the right or upwards.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
struct Edge {
    row: usize,
    column: usize,
    upright: bool,
}

/// The pieces of the line inside one cell, each from edge to edge.
fn cell(values: &[Vec<f64>], row: usize, column: usize, level: f64) -> Vec<(Edge, Edge)> {
    let corner = |r: usize, c: usize| values[row + r][column + c];
    let corners = [corner(0, 0), corner(0, 1), corner(1, 1), corner(1, 0)];
    let above = corners.map(|v| v >= level);
    let edges = [
        Edge {
            row,
            column,
            upright: false,
        },
        Edge {
            row,
            column: column + 1,
            upright: true,
        },
        Edge {
            row: row + 1,
            column,
            upright: false,
        },
        Edge {
            row,
            column,
            upright: true,
        },
    ];
    // Edge i lies between corner i and corner i + 1, in turn round the cell.
    let crossed: Vec<usize> = (0..4).filter(|&i| above[i] != above[(i + 1) % 4]).collect();
    match crossed.as_slice() {
        [a, b] => vec![(edges[*a], edges[*b])],
        [a, b, c, d] => {
            let middle = corners.iter().sum::<f64>() / 4.0 >= level;
            if middle == above[0] {
                vec![(edges[*a], edges[*b]), (edges[*c], edges[*d])]
            } else {
                vec![(edges[*d], edges[*a]), (edges[*b], edges[*c])]
            }
        }
        _ => Vec::new(),
    }
}

fn join(mut pieces: Vec<(Edge, Edge)>) -> Vec<Vec<Edge>> {
    let mut lines = Vec::new();
    while let Some((a, b)) = pieces.pop() {
        let mut line = vec![a, b];
        for _ in 0..2 {
            while let Some(tip) = line.last().copied() {
                let Some(i) = pieces.iter().position(|p| p.0 == tip || p.1 == tip) else {
                    break;
                };
                let (p, q) = pieces.swap_remove(i);
                line.push(if p == tip { q } else { p });
            }
            line.reverse();
        }
        lines.push(line);
    }
    lines
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_plane_has_one_straight_line() {
        let x: Vec<f64> = (0..6).map(f64::from).collect();
        let y: Vec<f64> = (0..4).map(f64::from).collect();
        // v = 2x + 3y: the line at 7 is y = (7 − 2x)/3.
        let values: Vec<Vec<f64>> = y
            .iter()
            .map(|y| x.iter().map(|x| 2.0 * x + 3.0 * y).collect())
            .collect();
        let lines = isolines(&x, &y, &values, 7.0);
        assert_eq!(lines.len(), 1);
        for (px, py) in &lines[0] {
            assert!((2.0 * px + 3.0 * py - 7.0).abs() < 1e-12);
        }
        assert!(isolines(&x, &y, &values, 99.0).is_empty());
    }

    #[test]
    fn a_hill_has_a_closed_ring() {
        let axis: Vec<f64> = (-20..=20).map(|i| f64::from(i) / 10.0).collect();
        let values: Vec<Vec<f64>> = axis
            .iter()
            .map(|y| axis.iter().map(|x| x * x + y * y).collect())
            .collect();
        let lines = isolines(&axis, &axis, &values, 1.0);
        assert_eq!(lines.len(), 1);
        assert_eq!(lines[0].first(), lines[0].last());
        for (x, y) in &lines[0] {
            // Linear between nodes 0.1 apart: off the circle by at most 0.1²/8 of the second derivative.
            assert!((x.hypot(*y) - 1.0).abs() < 0.002);
        }
    }
}
