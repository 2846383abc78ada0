//! One long column of rows, and how it is parted into pages.

use std::rc::Rc;

use super::line::{Line, Look};
use super::structure::Leaf;
use crate::chart::Colour;

/// Something on the paper, in points from the upper left corner of its row.
#[derive(Debug, Clone)]
pub(super) struct Placed {
    pub x: f64,
    pub y: f64,
    /// The part it belongs to; decoration belongs to none.
    pub leaf: Option<Leaf>,
    pub ink: Ink,
}

#[derive(Debug, Clone)]
pub(super) enum Ink {
    /// A text on its base line.
    Text {
        text: String,
        look: Look,
        size: f64,
        colour: Colour,
    },
    /// A filled rectangle.
    Fill {
        width: f64,
        height: f64,
        colour: Colour,
    },
    /// A picture by its place in the list of pictures, in a scale.
    Picture { index: usize, scale: f64 },
    /// The number of the page on which a section begins, ending at the point.
    PageOf {
        section: String,
        size: f64,
        colour: Colour,
    },
}

/// A row of the column: never parted.
#[derive(Debug, Clone, Default)]
pub(super) struct Row {
    /// Free room above it, except at the top of a page.
    pub before: f64,
    pub height: f64,
    /// It must not be the last on a page.
    pub keep: bool,
    pub inks: Vec<Placed>,
    /// What stands above it when it is the first on a page: the head of its table.
    pub head: Option<Rc<Row>>,
    /// The section that begins here.
    pub section: Option<String>,
}

impl Row {
    /// The height of the row, taking the room above it.
    pub(super) fn whole(&self) -> f64 {
        self.before + self.height
    }

    /// Writes a line with its base line at `y`, each run of one look on its own, in the leaf that `leaf` gives for its link.
    pub(super) fn write(
        &mut self,
        line: &Line,
        (mut x, y): (f64, f64),
        size: f64,
        colour: Colour,
        leaf: &mut dyn FnMut(Option<&str>) -> Option<Leaf>,
    ) {
        for run in &line.runs {
            self.inks.push(Placed {
                x,
                y,
                leaf: leaf(run.look.link.as_deref()),
                ink: Ink::Text {
                    text: run.text.clone(),
                    look: run.look.clone(),
                    size,
                    colour,
                },
            });
            x += crate::chart::text_width(&run.text, size, run.look.weight);
        }
    }

    /// Its picture smaller by a factor, kept in the middle of `room`.
    fn shrunk(&mut self, factor: f64, room: f64) {
        self.height *= factor;
        for placed in &mut self.inks {
            if let Ink::Picture { scale, .. } = &mut placed.ink {
                *scale *= factor;
                let width = crate::chart::WIDTH * *scale;
                placed.x = (room - width) / 2.0;
            }
        }
    }

    /// Whether it is one picture; several side by side keep their size.
    fn is_picture(&self) -> bool {
        matches!(
            self.inks.as_slice(),
            [Placed {
                ink: Ink::Picture { .. },
                ..
            }]
        )
    }
}

/// A page: rows with how far down they begin.
pub(super) type Page = Vec<(f64, Row)>;

/// Smallest share of its size to which a picture is shrunk for what is left of a page.
const SMALLEST: f64 = 0.8;

/// Parts the column into pages of a height; `width` is that of the column.
pub(super) fn pages(column: Vec<Row>, height: f64, width: f64) -> Vec<Page> {
    let mut pages: Vec<Page> = vec![Vec::new()];
    let mut used = 0.0;
    let mut rows = column.into_iter();
    while let Some(first) = rows.next() {
        // What must stay together.
        let mut chunk = vec![first];
        while chunk.last().is_some_and(|row| row.keep) {
            match rows.next() {
                Some(row) => chunk.push(row),
                None => break,
            }
        }
        let tall: f64 = chunk.iter().map(Row::whole).sum();
        let left = height - used;
        let pictures = |chunk: &[Row]| -> f64 {
            let pictures = chunk.iter().filter(|row| row.is_picture());
            pictures.map(|row| row.height).sum()
        };
        if tall > left {
            let drawn = pictures(&chunk);
            let factor = (drawn - (tall - left)) / drawn;
            if drawn > 0.0 && (SMALLEST..1.0).contains(&factor) {
                for row in chunk.iter_mut().filter(|row| row.is_picture()) {
                    row.shrunk(factor, width);
                }
            } else if used > 0.0 {
                pages.push(Vec::new());
                used = 0.0;
            }
        }
        for row in chunk {
            place(&mut pages, &mut used, row, height);
        }
    }
    pages.retain(|page| !page.is_empty());
    pages
}

fn place(pages: &mut Vec<Page>, used: &mut f64, row: Row, height: f64) {
    // A hair above the height is rounding, not a row too many.
    const HAIR: f64 = 0.01;
    if *used > 0.0 && *used + row.whole() > height + HAIR {
        pages.push(Vec::new());
        *used = 0.0;
    }
    let Some(page) = pages.last_mut() else {
        return;
    };
    let mut top = *used;
    if page.is_empty() {
        if let Some(head) = &row.head {
            // Said once already: to a screen reader it is decoration.
            let mut head = Row::clone(head);
            for placed in &mut head.inks {
                placed.leaf = None;
            }
            let head_height = head.height;
            page.push((top, head));
            top += head_height;
        }
    } else {
        top += row.before;
    }
    *used = top + row.height;
    page.push((top, row));
}

#[cfg(test)]
mod tests {
    use super::*;

    fn row(height: f64, keep: bool) -> Row {
        Row {
            before: 2.0,
            height,
            keep,
            ..Row::default()
        }
    }

    #[test]
    fn a_heading_does_not_stand_alone_at_the_foot() {
        let column = vec![row(80.0, false), row(10.0, true), row(20.0, false)];
        let pages = pages(column, 100.0, 50.0);
        let counts: Vec<_> = pages.iter().map(Vec::len).collect();
        assert_eq!(counts, [1, 2]);
        assert_eq!(pages[1][0].0, 0.0);
    }

    #[test]
    fn the_head_of_a_table_is_said_again_overleaf() {
        let head = Rc::new(row(10.0, false));
        let mut column = vec![row(10.0, true)];
        for _ in 0..10 {
            let mut row = row(20.0, false);
            row.head = Some(Rc::clone(&head));
            column.push(row);
        }
        let pages = pages(column, 100.0, 50.0);
        assert!(pages.len() > 1);
        for page in &pages[1..] {
            assert_eq!((page[0].1.height, page[1].0), (10.0, 10.0));
        }
        for page in &pages {
            let (top, last) = page.last().unwrap();
            assert!(top + last.height <= 100.0 + 0.01);
        }
    }

    #[test]
    fn what_is_taller_than_a_page_is_parted() {
        let column = (0..10).map(|_| row(30.0, true)).collect();
        let pages = pages(column, 100.0, 50.0);
        assert_eq!(pages.iter().map(Vec::len).sum::<usize>(), 10);
        assert!(pages.len() >= 4);
    }
}
