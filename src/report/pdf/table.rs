//! Tables: widths of columns, rows, heads that come again overleaf.

use std::rc::Rc;

use super::galley::{Ink, Placed, Row};
use super::line::{lines, widths};
use super::set::{Setter, colours};
use super::structure::Kind;
use crate::chart::Weight;
use crate::report::blocks::{Line as Text, Span, plain};

const SIZE: f64 = 8.25;
const LEADING: f64 = 10.8;
/// Between columns, and above and below the text of a row, points.
const GAP: f64 = 10.0;
const PAD: f64 = 2.3;
/// A table that needs no more than this share of the room is not stretched over all of it.
const LOOSE: f64 = 0.82;

/// A table as Markdown has it.
pub(super) struct Table<'a> {
    pub head: &'a [Text],
    pub rows: &'a [Vec<Text>],
    pub figures: &'a [bool],
}

/// Sets a table.
pub(super) fn table(setter: &mut Setter<'_>, table: &Table<'_>) {
    let columns = column_widths(table, setter.width);
    setter.structure.open(Kind::Table);
    setter.structure.open(Kind::TableHead);
    let mut head = row(setter, table, &columns, table.head, RowKind::Head);
    setter.structure.close();
    head.before = 7.0;
    head.keep = true;
    let head_again = Rc::new(Row {
        before: 0.0,
        keep: false,
        ..head.clone()
    });
    setter.rows.push(head);
    setter.structure.open(Kind::TableBody);
    let count = table.rows.len();
    for (i, cells) in table.rows.iter().enumerate() {
        let sum = cells.first().is_some_and(|cell| plain(cell) == "Year");
        let kind = if sum { RowKind::Sum } else { RowKind::Body };
        let mut row = row(setter, table, &columns, cells, kind);
        row.head = Some(Rc::clone(&head_again));
        // Neither the first nor the last row stands alone; a short table is not parted.
        row.keep = i + 1 < count && (i == 0 || i + 2 == count || count <= 14);
        setter.rows.push(row);
    }
    setter.structure.close();
    setter.structure.close();
}

#[derive(Clone, Copy, PartialEq)]
enum RowKind {
    Head,
    Body,
    Sum,
}

/// Widths without the gaps: what each needs, and of what is left as each could use.
fn column_widths(table: &Table<'_>, room: f64) -> Vec<f64> {
    let count = table.head.len().max(1);
    let mut least = vec![0.0_f64; count];
    let mut wanted = vec![0.0_f64; count];
    let mut look = |cells: &[Text], weight: Weight, in_lines: f64| {
        for (column, cell) in cells.iter().enumerate().take(count) {
            let (narrow, wide) = widths(cell, SIZE, weight);
            least[column] = least[column].max(narrow);
            wanted[column] = wanted[column].max((wide / in_lines).max(narrow));
        }
    };
    // Names of columns may take two lines, so that they do not crowd out what stands below.
    look(table.head, Weight::Bold, 1.8);
    for row in table.rows {
        look(row, Weight::Regular, 1.0);
    }
    let room = room - GAP * (count - 1) as f64;
    // No column may take more than its fair share for one endless word.
    let share = room / count as f64;
    for (least, wanted) in least.iter_mut().zip(&wanted) {
        *least = (*least + 0.5).min(share.max(room * 0.3)).min(wanted + 0.5);
    }
    let (all_least, all_wanted): (f64, f64) = (least.iter().sum(), wanted.iter().sum());
    if all_wanted <= room {
        // What is over goes to the columns alike, up to a width at which the eye still finds its way along a row.
        let over = (room * LOOSE - all_wanted).max(0.0).min(room - all_wanted);
        let over = over / count as f64;
        return wanted.iter().map(|w| w + over + 0.5).collect();
    }
    if all_least >= room {
        return least.iter().map(|w| w * room / all_least).collect();
    }
    let more = (room - all_least) / (all_wanted - all_least);
    least
        .iter()
        .zip(&wanted)
        .map(|(l, w)| l + (w - l).max(0.0) * more)
        .collect()
}

fn row(
    setter: &mut Setter<'_>,
    table: &Table<'_>,
    columns: &[f64],
    cells: &[Text],
    kind: RowKind,
) -> Row {
    let weight = if kind == RowKind::Body {
        Weight::Regular
    } else {
        Weight::Bold
    };
    let set: Vec<_> = cells
        .iter()
        .zip(columns)
        .map(|(cell, width)| lines(cell, SIZE, weight, *width))
        .collect();
    let tallest = set.iter().map(Vec::len).max().unwrap_or(1).max(1);
    let height = tallest as f64 * LEADING + 2.0 * PAD;
    let mut row = Row {
        height,
        ..Row::default()
    };
    let whole: f64 = columns.iter().sum::<f64>() + GAP * (columns.len().saturating_sub(1)) as f64;
    let mut rule = |y: f64, thickness: f64, colour| {
        row.inks.push(Placed {
            x: 0.0,
            y,
            leaf: None,
            ink: Ink::Fill {
                width: whole,
                height: thickness,
                colour,
            },
        });
    };
    match kind {
        RowKind::Head => rule(height - 0.9, 0.9, colours::INK),
        RowKind::Body => rule(height - 0.4, 0.4, colours::LINE),
        RowKind::Sum => {
            rule(-0.5, 0.6, colours::INK);
            rule(height - 0.4, 0.4, colours::LINE);
        }
    }
    setter.structure.open(Kind::TableRow);
    let empty: &[Span] = &[];
    let mut x = 0.0;
    for (column, width) in columns.iter().enumerate() {
        let cell = cells.get(column).map_or(empty, Vec::as_slice);
        setter.structure.open(match (kind, column) {
            (RowKind::Head, _) => Kind::ColumnName,
            (_, 0) => Kind::RowName,
            _ => Kind::Cell,
        });
        if !cell.is_empty() {
            let figure = table.figures.get(column) == Some(&true);
            let texts = set.get(column).map_or(&[][..], Vec::as_slice);
            // Heads stand on the rule, the text of a row hangs from its top.
            let down = if kind == RowKind::Head {
                (tallest - texts.len()) as f64 * LEADING
            } else {
                0.0
            };
            let mut leaves = setter.leaves();
            for (i, line) in texts.iter().enumerate() {
                let at = if figure { x + width - line.width } else { x };
                let y = PAD + down + (i as f64 + 0.78) * LEADING;
                row.write(line, (at, y), SIZE, colours::INK, &mut leaves);
            }
        }
        setter.structure.close();
        x += width + GAP;
    }
    setter.structure.close();
    row
}
