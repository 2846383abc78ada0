//! Sections and blocks as rows.

use std::collections::BTreeMap;

use super::galley::{Ink, Placed, Row};
use super::line::{lines, plain_span};
use super::structure::{Kind, Leaf, Structure};
use super::table::{Table, table};
use crate::chart::{Colour, WIDTH, Weight};
use crate::report::blocks::{Block, Line as Text, Span, blocks, plain};
use crate::report::pictures::Drawn;
use crate::report::sentences::Section;

/// The colours of the paper: those of the pictures.
pub(super) mod colours {
    use crate::chart::Colour;
    pub const INK: Colour = Colour(0x1c, 0x23, 0x2e);
    pub const QUIET: Colour = Colour(0x55, 0x5f, 0x6d);
    pub const ACCENT: Colour = Colour(0x1b, 0x3b, 0x7b);
    pub const WASH: Colour = Colour(0xee, 0xf2, 0xf8);
    pub const LINE: Colour = Colour(0xc9, 0xd0, 0xda);
}

/// How a kind of text is set: size, distance of base lines, room before it, weight, colour.
#[derive(Clone, Copy)]
pub(super) struct Style {
    pub size: f64,
    pub leading: f64,
    pub before: f64,
    pub weight: Weight,
    pub colour: Colour,
}

impl Style {
    pub(super) const fn new(
        size: f64,
        leading: f64,
        before: f64,
        weight: Weight,
        colour: Colour,
    ) -> Self {
        Self {
            size,
            leading,
            before,
            weight,
            colour,
        }
    }
}

const TITLE: Style = Style::new(19.0, 23.5, 2.0, Weight::Bold, colours::INK);
const SECTION: Style = Style::new(14.0, 18.0, 20.0, Weight::Bold, colours::INK);
const HEADING: Style = Style::new(10.75, 14.0, 13.0, Weight::Bold, colours::INK);
const LEAD: Style = Style::new(12.0, 16.5, 5.0, Weight::Regular, colours::INK);
const BODY: Style = Style::new(9.5, 13.4, 5.0, Weight::Regular, colours::INK);
const CAPTION: Style = Style::new(8.25, 11.0, 1.5, Weight::Regular, colours::QUIET);
const MAKER: Style = Style::new(8.5, 11.0, 0.0, Weight::Regular, colours::QUIET);
/// Where the text of an item begins, and the room before an item.
const INDENT: f64 = 13.0;
const BEFORE_ITEM: f64 = 2.6;
/// Widest line of running text, points: some 85 signs.
const MEASURE: f64 = 410.0;
/// Tallest picture, points.
const TALLEST: f64 = 430.0;
/// Widest share of the column that a picture takes.
const WIDEST: f64 = 0.97;

/// Sets sections as rows of a column.
pub(super) struct Setter<'a> {
    pub rows: Vec<Row>,
    pub structure: Structure,
    /// Width of the column.
    pub width: f64,
    pub(super) pictures: BTreeMap<&'a str, (usize, &'a Drawn)>,
    /// Size of what is set, as a share of its usual size.
    pub(super) scale: f64,
}

impl<'a> Setter<'a> {
    /// `scale` is that of what is set until `usual_size`.
    pub(super) fn new(width: f64, drawn: &'a [Drawn], scale: f64) -> Self {
        let pictures = drawn.iter().enumerate();
        Self {
            rows: Vec::new(),
            structure: Structure::default(),
            width,
            scale,
            pictures: pictures
                .map(|(i, drawn)| (drawn.name.as_str(), (i, drawn)))
                .collect(),
        }
    }

    /// Sets what follows in its usual size.
    pub(super) fn usual_size(&mut self) {
        self.scale = 1.0;
    }

    /// Height of all that has been set.
    pub(super) fn height(&self) -> f64 {
        self.rows.iter().map(Row::whole).sum()
    }

    pub(super) fn scaled(&self, style: Style) -> Style {
        Style {
            size: style.size * self.scale,
            leading: style.leading * self.scale,
            before: style.before * self.scale,
            ..style
        }
    }

    /// The maker's line and the question.
    pub(super) fn title(&mut self, place: &str, title: &str) {
        self.structure.open(Kind::Paragraph);
        self.text(&plain_span(place), MAKER, 0.0, self.width);
        self.structure.close();
        self.structure.open(Kind::Heading(1, title.to_owned()));
        self.text(&plain_span(title), TITLE, 0.0, self.width);
        self.structure.close();
        self.keep_last();
    }

    /// A section; one of the first page is set tighter.
    pub(super) fn section(&mut self, section: &Section, first_page: bool) {
        let start = self.rows.len();
        if section.id != "answer" {
            if !first_page {
                self.rule();
            }
            self.structure.open(Kind::Heading(2, section.title.clone()));
            let style = if first_page {
                Style {
                    size: 11.5,
                    leading: 15.0,
                    before: 9.0,
                    ..SECTION
                }
            } else {
                SECTION
            };
            let style = if first_page {
                style
            } else {
                Style {
                    before: 3.0,
                    ..style
                }
            };
            self.text(&plain_span(&section.title), style, 0.0, self.width);
            self.structure.close();
            self.keep_last();
        }
        let mut first = true;
        for block in blocks(&section.markdown) {
            self.block(&block, section.id, first_page, first);
            first = false;
        }
        if let Some(row) = self.rows.get_mut(start) {
            row.section = Some(section.id.to_owned());
        }
    }

    /// The list of sections with their pages.
    pub(super) fn contents(&mut self, sections: &[Section]) {
        self.structure
            .open(Kind::Heading(2, "In this report".into()));
        self.text(&plain_span("In this report"), SECTION, 0.0, self.width);
        self.structure.close();
        self.keep_last();
        self.structure.open(Kind::Contents);
        for section in sections {
            self.structure.open(Kind::ContentsEntry);
            let name = [Span {
                text: section.title.clone(),
                link: Some(section.id.to_owned()),
                ..Span::default()
            }];
            let style = Style {
                before: 1.2,
                ..BODY
            };
            let at = self.rows.len();
            self.text(&name, style, 0.0, MEASURE);
            let leaf = self.structure.leaf();
            if let Some(row) = self.rows.get_mut(at) {
                row.inks.push(Placed {
                    x: MEASURE,
                    y: style.leading * 0.76,
                    leaf: Some(leaf),
                    ink: Ink::PageOf {
                        section: section.id.to_owned(),
                        size: style.size,
                        colour: style.colour,
                    },
                });
                row.keep = true;
            }
            self.structure.close();
        }
        self.structure.close();
        if let Some(row) = self.rows.last_mut() {
            row.keep = false;
        }
    }

    fn block(&mut self, block: &Block, section: &str, first_page: bool, first: bool) {
        match block {
            Block::Heading(line) => {
                self.structure.open(Kind::Heading(3, plain(line)));
                self.text(line, HEADING, 0.0, self.width);
                self.structure.close();
                self.keep_last();
            }
            Block::Paragraph(line) => {
                let style = if section == "answer" && first {
                    LEAD
                } else {
                    BODY
                };
                // A paragraph that is one strong name heads what follows.
                let heads = line.iter().all(|span| span.strong);
                self.structure.open(Kind::Paragraph);
                let room = if first_page { self.width } else { MEASURE };
                self.text(line, style, 0.0, room);
                self.structure.close();
                if heads {
                    self.keep_last();
                }
            }
            Block::List { items, .. } if section == "answer" => self.key_figures(items),
            Block::List { numbered, items } => {
                let room = if first_page { self.width } else { MEASURE };
                self.list(*numbered, items, room);
            }
            Block::Table {
                head,
                rows,
                figures,
            } => table(
                self,
                &Table {
                    head,
                    rows,
                    figures,
                },
            ),
            Block::Abreast(names) => self.abreast(names),
            Block::Picture { name, caption } => self.picture(name, caption),
        }
    }

    /// Where the runs of a text belong: one leaf for the text, one part for each link.
    pub(super) fn leaves(&mut self) -> impl FnMut(Option<&str>) -> Option<Leaf> + use<'_, 'a> {
        let mut last: Option<(Option<String>, Leaf)> = None;
        move |link| {
            if let Some((of, leaf)) = &last
                && of.as_deref() == link
            {
                return Some(*leaf);
            }
            let leaf = match link {
                Some(_) => self.structure.part(Kind::Link, Structure::leaf),
                None => self.structure.leaf(),
            };
            last = Some((link.map(str::to_owned), leaf));
            Some(leaf)
        }
    }

    /// Sets running text in the part that is open. The first two and the last two lines of a paragraph stay together.
    fn text(&mut self, text: &[Span], style: Style, indent: f64, room: f64) {
        let style = self.scaled(style);
        let set = lines(text, style.size, style.weight, room - indent);
        let count = set.len();
        let mut rows = Vec::with_capacity(count);
        let mut leaves = self.leaves();
        for (i, line) in set.iter().enumerate() {
            let mut row = Row {
                before: if i == 0 { style.before } else { 0.0 },
                height: style.leading,
                keep: i + 1 < count && (i == 0 || i + 2 == count),
                ..Row::default()
            };
            let base = style.leading * 0.76;
            row.write(line, (indent, base), style.size, style.colour, &mut leaves);
            rows.push(row);
        }
        drop(leaves);
        self.rows.extend(rows);
    }

    fn keep_last(&mut self) {
        if let Some(row) = self.rows.last_mut() {
            row.keep = true;
        }
    }

    /// The line above a section.
    fn rule(&mut self) {
        self.rows.push(Row {
            before: 16.0,
            height: 5.0,
            keep: true,
            inks: vec![Placed {
                x: 0.0,
                y: 0.0,
                leaf: None,
                ink: Ink::Fill {
                    width: self.width,
                    height: 1.2,
                    colour: colours::INK,
                },
            }],
            ..Row::default()
        });
    }

    fn list(&mut self, numbered: bool, items: &[Text], room: f64) {
        self.structure.open(Kind::List { numbered });
        for (i, item) in items.iter().enumerate() {
            self.structure.open(Kind::Item);
            let label = if numbered {
                format!("{}.", i + 1)
            } else {
                "•".to_owned()
            };
            self.structure.open(Kind::ItemLabel);
            let leaf = self.structure.leaf();
            self.structure.close();
            self.structure.open(Kind::ItemBody);
            let at = self.rows.len();
            let style = Style {
                before: BEFORE_ITEM,
                ..BODY
            };
            self.text(item, style, INDENT, room);
            self.structure.close();
            self.structure.close();
            let style = self.scaled(style);
            if let Some(row) = self.rows.get_mut(at) {
                row.inks.insert(
                    0,
                    Placed {
                        x: if numbered { 0.0 } else { 2.5 },
                        y: style.leading * 0.76,
                        leaf: Some(leaf),
                        ink: Ink::Text {
                            text: label + " ",
                            look: super::line::Look {
                                weight: Weight::Regular,
                                slanted: false,
                                link: None,
                            },
                            size: style.size,
                            colour: style.colour,
                        },
                    },
                );
            }
        }
        self.structure.close();
    }

    fn picture(&mut self, name: &str, caption: &[Span]) {
        let Some(&(index, drawn)) = self.pictures.get(name) else {
            return;
        };
        let canvas = drawn.picture.canvas();
        let scale = (self.width * WIDEST / WIDTH).min(TALLEST / canvas.bottom);
        self.structure.open(Kind::Figure(said(drawn)));
        let leaf = self.structure.leaf();
        self.structure.close();
        self.rows.push(Row {
            before: 9.0,
            height: canvas.bottom * scale,
            keep: !caption.is_empty(),
            inks: vec![Placed {
                x: (self.width - WIDTH * scale) / 2.0,
                y: 0.0,
                leaf: Some(leaf),
                ink: Ink::Picture { index, scale },
            }],
            ..Row::default()
        });
        self.structure.open(Kind::Paragraph);
        self.text(caption, CAPTION, 0.0, MEASURE);
        self.structure.close();
    }
}

/// What is read out in place of a picture.
pub(super) fn said(drawn: &Drawn) -> String {
    format!("{}. {}", drawn.picture.title, drawn.picture.alt)
}
