//! Pages on paper: every ink drawn with its tag, links, outline and page numbers.

use std::collections::BTreeMap;

use krilla::Document;
use krilla::SerializeSettings;
use krilla::annotation::{Annotation, LinkAnnotation, Target};
use krilla::color::rgb;
use krilla::configure::{Accessibility, ConfigurationBuilder};
use krilla::destination::XyzDestination;
use krilla::geom::{Path, PathBuilder, Point, Rect, Size, Transform};
use krilla::metadata::Metadata;
use krilla::num::NormalizedF32;
use krilla::outline::{Outline, OutlineNode};
use krilla::page::PageSettings;
use krilla::paint::{Fill, LineCap, LineJoin, Stroke};
use krilla::surface::Surface;
use krilla::tagging::{Artifact, ArtifactType, ContentTag, Identifier};
use krilla::text::{Font, GlyphId, KrillaGlyph};

use super::galley::{Ink, Page, Placed};
use super::line::Look;
use super::set::colours;
use super::structure::{Drawn as DrawnLeaves, Leaf, Structure};
use crate::chart::{self, Colour, Item, Weight, text_width};
use crate::report::ReportError;
use crate::report::pictures::Drawn;

/// What stands at the foot of every page.
const FOOT: &str = "Estimates for a decision, not a design.";
const FURNITURE_SIZE: f64 = 8.0;
/// How far a slanted text leans: the tangent of 10°, as slanted faces do.
const LEAN: f32 = 0.176;

/// Size of the paper and its margins, points.
#[derive(Debug, Clone, Copy)]
pub(super) struct Sheet {
    pub width: f64,
    pub height: f64,
    pub side: f64,
    pub top: f64,
    pub bottom: f64,
}

impl Sheet {
    /// Margins of 20 mm at the sides, 17 mm above and 18 mm below.
    pub(super) fn new((width, height): (f64, f64)) -> Self {
        const MM: f64 = 72.0 / 25.4;
        Self {
            width,
            height,
            side: 20.0 * MM,
            top: 17.0 * MM,
            bottom: 18.0 * MM,
        }
    }

    pub(super) fn column(&self) -> (f64, f64) {
        (
            self.width - 2.0 * self.side,
            self.height - self.top - self.bottom,
        )
    }
}

/// What the document says of itself.
pub(super) struct About<'a> {
    pub title: &'a str,
    /// Stands at the head of every page but the first.
    pub place: &'a str,
    /// Sections in order: id and heading.
    pub sections: Vec<(&'a str, &'a str)>,
}

/// Writes the document.
///
/// # Errors
/// When the pages cannot be written, which the tests exclude, or break a rule of PDF/UA-1.
pub(super) fn document(
    about: &About<'_>,
    sheet: Sheet,
    pages: &[Page],
    structure: &Structure,
    drawn: &[Drawn],
) -> Result<Vec<u8>, ReportError> {
    let configuration = ConfigurationBuilder::new()
        .with_accessibility_validator(Accessibility::UA1)
        .finish()
        .map_err(|error| ReportError::Paper(format!("{error:?}")))?;
    let mut document = Document::new_with(SerializeSettings {
        configuration,
        ..SerializeSettings::default()
    });
    let fonts = Fonts::new()?;
    let places = places(pages);
    let mut leaves = structure.drawn();
    let size = Size::from_wh(sheet.width as f32, sheet.height as f32);
    let size = size.ok_or_else(|| ReportError::Paper("the paper has no size".into()))?;
    for (number, page) in pages.iter().enumerate() {
        let mut links: Vec<(Rect, String, Leaf)> = Vec::new();
        let mut sheet_of_paper = document.start_page_with(PageSettings::new(size));
        {
            let mut pen = Pen {
                surface: sheet_of_paper.surface(),
                fonts: &fonts,
                leaves: &mut leaves,
                open: None,
            };
            for (top, row) in page {
                for placed in &row.inks {
                    let at = (sheet.side + placed.x, sheet.top + top + placed.y);
                    pen.ink(placed, at, drawn, &places, &mut links);
                }
            }
            pen.close();
            furniture(&mut pen, about, sheet, number, pages.len());
            pen.surface.finish();
        }
        for (rect, section, leaf) in links {
            let Some((page, top)) = places.get(section.as_str()) else {
                continue;
            };
            let point = Point::from_xy(sheet.side as f32, (sheet.top + top) as f32);
            let target = Target::Destination(XyzDestination::new(*page, point).into());
            let title = about.sections.iter().find(|(id, _)| *id == section);
            let says = title.map_or_else(String::new, |(_, title)| format!("To “{title}”"));
            let annotation = Annotation::new_link(LinkAnnotation::new(rect, target), Some(says));
            leaves.add(leaf, sheet_of_paper.add_tagged_annotation(annotation));
        }
        sheet_of_paper.finish();
    }
    document.set_outline(outline(about, sheet, &places));
    document.set_tag_tree(structure.tree(&leaves));
    document.set_metadata(
        Metadata::new()
            .title(about.title.to_owned())
            .description(about.place.to_owned())
            .language("en".to_owned())
            .creator(format!("Winterledger {}", env!("CARGO_PKG_VERSION"))),
    );
    document
        .finish()
        .map_err(|error| ReportError::Paper(format!("{error:?}")))
}

/// Page and height at which each section begins.
fn places(pages: &[Page]) -> BTreeMap<&str, (usize, f64)> {
    let mut places = BTreeMap::new();
    for (number, page) in pages.iter().enumerate() {
        for (top, row) in page {
            if let Some(section) = &row.section {
                places.insert(section.as_str(), (number, *top));
            }
        }
    }
    places
}

fn outline(about: &About<'_>, sheet: Sheet, places: &BTreeMap<&str, (usize, f64)>) -> Outline {
    let mut outline = Outline::new();
    for (id, title) in &about.sections {
        if let Some((page, top)) = places.get(id) {
            let point = Point::from_xy(0.0, (sheet.top + top - 6.0) as f32);
            let node = OutlineNode::new((*title).to_owned(), XyzDestination::new(*page, point));
            outline.push_child(node);
        }
    }
    outline
}

/// Head and foot of a page.
fn furniture(pen: &mut Pen<'_, '_>, about: &About<'_>, sheet: Sheet, page: usize, pages: usize) {
    let look = Look {
        weight: Weight::Regular,
        slanted: false,
        link: None,
    };
    let width = |text: &str| text_width(text, FURNITURE_SIZE, Weight::Regular);
    let foot = sheet.height - 0.5 * sheet.bottom;
    let number = format!("{} / {pages}", page + 1);
    let right = sheet.width - sheet.side - width(&number);
    let colour = colours::QUIET;
    let mut write = |kind, text: &str, x, y| {
        pen.surface
            .start_tagged(ContentTag::Artifact(Artifact::with_kind(kind)));
        pen.text(text, &look, FURNITURE_SIZE, colour, (x, y));
        pen.surface.end_tagged();
    };
    write(ArtifactType::Footer, FOOT, sheet.side, foot);
    write(ArtifactType::Footer, &number, right, foot);
    if page > 0 {
        let (column, _) = sheet.column();
        let place = chart::fit_line(about.place, FURNITURE_SIZE, column);
        write(ArtifactType::Header, &place, sheet.side, 0.62 * sheet.top);
    }
}

/// The two faces that are embedded.
struct Fonts {
    regular: Font,
    bold: Font,
}

impl Fonts {
    fn new() -> Result<Self, ReportError> {
        let face = |bytes: &'static [u8]| {
            Font::new(bytes.into(), 0)
                .ok_or_else(|| ReportError::Paper("the embedded font cannot be read".into()))
        };
        Ok(Self {
            regular: face(chart::REGULAR)?,
            bold: face(chart::BOLD)?,
        })
    }

    fn face(&self, weight: Weight) -> Font {
        match weight {
            Weight::Regular => self.regular.clone(),
            Weight::Bold => self.bold.clone(),
        }
    }
}

struct Pen<'s, 'f> {
    surface: Surface<'s>,
    fonts: &'f Fonts,
    leaves: &'f mut DrawnLeaves,
    /// The leaf that is being drawn, and what the page calls it.
    open: Option<(Leaf, Identifier)>,
}

impl Pen<'_, '_> {
    /// Opens a leaf, unless it is open already.
    fn open(&mut self, leaf: Leaf) {
        if self.open.is_some_and(|(open, _)| open == leaf) {
            return;
        }
        self.close();
        let identifier = self.surface.start_tagged(ContentTag::Other);
        self.open = Some((leaf, identifier));
    }

    fn close(&mut self) {
        if let Some((leaf, identifier)) = self.open.take() {
            self.surface.end_tagged();
            self.leaves.add(leaf, identifier);
        }
    }

    fn ink(
        &mut self,
        placed: &Placed,
        at: (f64, f64),
        drawn: &[Drawn],
        places: &BTreeMap<&str, (usize, f64)>,
        links: &mut Vec<(Rect, String, Leaf)>,
    ) {
        match placed.leaf {
            Some(leaf) => self.open(leaf),
            None => {
                self.close();
                let layout = Artifact::with_kind(ArtifactType::Layout);
                self.surface.start_tagged(ContentTag::Artifact(layout));
            }
        }
        match &placed.ink {
            Ink::Text {
                text,
                look,
                size,
                colour,
            } => {
                let colour = if look.link.is_some() {
                    colours::ACCENT
                } else {
                    *colour
                };
                self.text(text, look, *size, colour, at);
                if let (Some(section), Some(leaf)) = (&look.link, placed.leaf) {
                    let width = text_width(text.trim_end(), *size, look.weight);
                    links.extend(
                        rect(at.0, at.1 - 0.8 * size, width, 1.1 * size)
                            .map(|rect| (rect, section.clone(), leaf)),
                    );
                }
            }
            Ink::Fill {
                width,
                height,
                colour,
            } => {
                if let Some(path) = rect(at.0, at.1, *width, *height).and_then(rect_path) {
                    self.fill(&path, *colour, 1.0);
                }
            }
            Ink::Picture { index, scale } => {
                if let Some(drawn) = drawn.get(*index) {
                    let moved = Transform::from_row(
                        *scale as f32,
                        0.0,
                        0.0,
                        *scale as f32,
                        at.0 as f32,
                        at.1 as f32,
                    );
                    self.surface.push_transform(&moved);
                    self.picture(&drawn.picture);
                    self.surface.pop();
                }
            }
            Ink::PageOf {
                section,
                size,
                colour,
            } => {
                let number = places
                    .get(section.as_str())
                    .map_or_else(String::new, |(page, _)| (page + 1).to_string());
                let look = Look {
                    weight: Weight::Regular,
                    slanted: false,
                    link: None,
                };
                let width = text_width(&number, *size, look.weight);
                self.text(&number, &look, *size, *colour, (at.0 - width, at.1));
            }
        }
        if placed.leaf.is_none() {
            self.surface.end_tagged();
        }
    }

    fn text(&mut self, text: &str, look: &Look, size: f64, colour: Colour, (x, y): (f64, f64)) {
        let starts = text.char_indices().map(|(at, c)| at..at + c.len_utf8());
        let glyphs: Vec<KrillaGlyph> = chart::glyphs(text, look.weight)
            .into_iter()
            .zip(starts)
            .map(|((glyph, advance), range)| {
                let glyph = GlyphId::new(u32::from(glyph));
                KrillaGlyph::new(glyph, advance, 0.0, 0.0, 0.0, range, None)
            })
            .collect();
        if glyphs.is_empty() {
            return;
        }
        self.surface.set_stroke(None);
        self.surface.set_fill(Some(paint(colour, 1.0)));
        let font = self.fonts.face(look.weight);
        let (x, y, size) = (x as f32, y as f32, size as f32);
        if look.slanted {
            // About the base line, so that nothing but the lean changes.
            let lean = Transform::from_row(1.0, 0.0, -LEAN, 1.0, LEAN * y, 0.0);
            self.surface.push_transform(&lean);
        }
        let at = Point::from_xy(x, y);
        self.surface
            .draw_glyphs(at, &glyphs, font, text, size, false);
        if look.slanted {
            self.surface.pop();
        }
    }

    /// The shapes of a picture as they are in SVG and PNG.
    fn picture(&mut self, picture: &chart::Picture) {
        for item in picture.items() {
            match item {
                Item::Area {
                    points,
                    colour,
                    opacity,
                } => {
                    if let Some(path) = polygon(points, true) {
                        self.fill(&path, *colour, *opacity);
                    }
                }
                Item::Line {
                    points,
                    colour,
                    width,
                } => {
                    if let Some(path) = polygon(points, false) {
                        self.surface.set_fill(None);
                        self.surface.set_stroke(Some(Stroke {
                            paint: rgb(*colour).into(),
                            width: *width as f32,
                            line_cap: LineCap::Butt,
                            line_join: LineJoin::Round,
                            ..Stroke::default()
                        }));
                        self.surface.draw_path(&path);
                    }
                }
                Item::Disc {
                    centre,
                    radius,
                    colour,
                } => {
                    if let Some(path) = disc(*centre, *radius) {
                        self.fill(&path, *colour, 1.0);
                    }
                }
                Item::Text(index) => {
                    if let Some(label) = picture.labels().get(*index) {
                        let look = Look {
                            weight: label.weight,
                            slanted: false,
                            link: None,
                        };
                        let at = (label.area.left, label.at.1);
                        // A space after each label keeps them apart when they are read out.
                        let text = chart::printable(&label.text, chart::UNPRINTABLE) + " ";
                        self.text(&text, &look, label.size, label.colour, at);
                    }
                }
            }
        }
    }

    fn fill(&mut self, path: &Path, colour: Colour, opacity: f64) {
        self.surface.set_stroke(None);
        self.surface.set_fill(Some(paint(colour, opacity)));
        self.surface.draw_path(path);
    }
}

fn rgb(colour: Colour) -> rgb::Color {
    rgb::Color::new(colour.0, colour.1, colour.2)
}

fn paint(colour: Colour, opacity: f64) -> Fill {
    Fill {
        paint: rgb(colour).into(),
        opacity: NormalizedF32::new(opacity as f32).unwrap_or(NormalizedF32::ONE),
        ..Fill::default()
    }
}

fn rect(x: f64, y: f64, width: f64, height: f64) -> Option<Rect> {
    Rect::from_xywh(x as f32, y as f32, width as f32, height as f32)
}

fn rect_path(rect: Rect) -> Option<Path> {
    let mut path = PathBuilder::new();
    path.push_rect(rect);
    path.finish()
}

fn polygon(points: &[(f64, f64)], closed: bool) -> Option<Path> {
    let mut path = PathBuilder::new();
    for (i, (x, y)) in points.iter().enumerate() {
        let (x, y) = (*x as f32, *y as f32);
        if i == 0 {
            path.move_to(x, y);
        } else {
            path.line_to(x, y);
        }
    }
    if closed {
        path.close();
    }
    path.finish()
}

/// A circle of four cubic curves.
fn disc((x, y): (f64, f64), radius: f64) -> Option<Path> {
    /// Distance of the control points for a quarter, in radii: 4/3·(√2 − 1).
    const QUARTER: f64 = 0.552_284_749_8;
    let mut path = PathBuilder::new();
    let at = |a: f64, b: f64| ((x + a * radius) as f32, (y + b * radius) as f32);
    let (x0, y0) = at(1.0, 0.0);
    path.move_to(x0, y0);
    let turns: [(f64, f64); 5] = [(1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0), (1.0, 0.0)];
    for pair in turns.windows(2) {
        let (a, b) = (pair[0], pair[1]);
        let (x1, y1) = at(a.0 + QUARTER * b.0, a.1 + QUARTER * b.1);
        let (x2, y2) = at(b.0 + QUARTER * a.0, b.1 + QUARTER * a.1);
        let (x3, y3) = at(b.0, b.1);
        path.cubic_to(x1, y1, x2, y2, x3, y3);
    }
    path.close();
    path.finish()
}
