//! What stands side by side on the first page: figures, small pictures.

use super::galley::{Ink, Placed, Row};
use super::line::lines;
use super::set::{Setter, Style, colours, said};
use super::structure::Kind;
use crate::chart::Weight;
use crate::report::blocks::{Line as Text, Span};
use crate::report::pictures::Drawn;

/// Places for small pictures.
const ABREAST: f64 = 3.0;

impl Setter<'_> {
    /// The figures of the first page side by side, each with its number large.
    pub(super) fn key_figures(&mut self, items: &[Text]) {
        const GAP: f64 = 6.0;
        const NUMBER: Style = Style::new(14.5, 19.0, 0.0, Weight::Bold, colours::ACCENT);
        const WORDS: Style = Style::new(8.5, 11.2, 0.0, Weight::Regular, colours::INK);
        let pad = 6.0 * self.scale;
        let (number_style, words_style) = (self.scaled(NUMBER), self.scaled(WORDS));
        let count = items.len().max(1) as f64;
        let width = (self.width - GAP * (count - 1.0)) / count;
        let inner = width - 2.0 * pad;
        let set: Vec<_> = items
            .iter()
            .map(|item| {
                let (number, words): (Vec<Span>, Vec<Span>) =
                    item.iter().cloned().partition(|span| span.strong);
                let number = lines(&number, number_style.size, number_style.weight, inner);
                (
                    number,
                    lines(&words, words_style.size, words_style.weight, inner),
                )
            })
            .collect();
        let tall = |(number, words): &(Vec<_>, Vec<_>)| {
            number.len() as f64 * number_style.leading + words.len() as f64 * words_style.leading
        };
        let height = set.iter().map(tall).fold(0.0, f64::max) + 2.0 * pad;
        let mut row = Row {
            before: 8.0,
            height,
            ..Row::default()
        };
        self.structure.open(Kind::List { numbered: false });
        for (i, (number, words)) in set.iter().enumerate() {
            let left = i as f64 * (width + GAP);
            row.inks.push(Placed {
                x: left,
                y: 0.0,
                leaf: None,
                ink: Ink::Fill {
                    width,
                    height,
                    colour: colours::WASH,
                },
            });
            self.structure.open(Kind::Item);
            self.structure.open(Kind::ItemBody);
            let mut y = pad;
            let mut leaves = self.leaves();
            for (texts, style) in [(number, number_style), (words, words_style)] {
                for line in texts {
                    let at = (left + pad, y + style.leading * 0.76);
                    row.write(line, at, style.size, style.colour, &mut leaves);
                    y += style.leading;
                }
            }
            drop(leaves);
            self.structure.close();
            self.structure.close();
        }
        self.structure.close();
        self.rows.push(row);
    }

    /// Small pictures side by side.
    pub(super) fn abreast(&mut self, names: &[String]) {
        const GAP: f64 = 12.0;
        let found: Vec<(usize, &Drawn)> = names
            .iter()
            .filter_map(|name| self.pictures.get(name.as_str()).copied())
            .collect();
        let room = (self.width - GAP * (ABREAST - 1.0)) / ABREAST;
        let mut row = Row {
            before: 9.0 * self.scale,
            ..Row::default()
        };
        for (i, (index, drawn)) in found.into_iter().enumerate() {
            let canvas = drawn.picture.canvas();
            let scale = room / canvas.right;
            self.structure.open(Kind::Figure(said(drawn)));
            let leaf = self.structure.leaf();
            self.structure.close();
            row.height = row.height.max(canvas.bottom * scale);
            row.inks.push(Placed {
                x: i as f64 * (room + GAP),
                y: 0.0,
                leaf: Some(leaf),
                ink: Ink::Picture { index, scale },
            });
        }
        self.rows.push(row);
    }
}
