//! The report on paper: a PDF from the same sentences and pictures as the page.
//!
//! `set` turns blocks into one long column of rows (`line` breaks text, `table` sets tables) and says what each part is
//! (`structure`), `galley` parts the column into pages, `draw` writes them. The file is tagged and held to PDF/UA-1
//! (ISO 14289-1) when it is written; its fonts are embedded; the same input gives the same bytes.

mod beside;
mod draw;
mod galley;
mod line;
mod set;
mod structure;
mod table;

use std::collections::BTreeSet;

use super::ReportError;
use super::page::place;
use super::pictures::{Drawn, Material};
use super::sentences::{FIRST_PAGE, Section, sections};
use crate::chart;
use draw::{About, Sheet, document};
use set::Setter;

/// Sizes of the first page that are tried, as shares of the usual one.
const SIZES: &[f64] = &[1.0, 0.97, 0.94, 0.91, SMALLEST];
const SMALLEST: f64 = 0.88;

/// The report as PDF on the paper of the place.
///
/// # Errors
/// When a sentence cannot be filled or the document cannot be written.
pub fn report_pdf(material: &Material<'_>, drawn: &[Drawn]) -> Result<Vec<u8>, ReportError> {
    let mut sections = sections(material, drawn)?;
    say_what_cannot_be_printed(&mut sections);
    let sheet = Sheet::new(material.locale.paper.points());
    let (width, height) = sheet.column();
    let place = chart::printable(&place(material), chart::UNPRINTABLE);
    let title = sections.first().map_or("", |section| &section.title);
    let (first, rest) = sections.split_at(FIRST_PAGE.min(sections.len()));
    let first_page = |scale: f64| {
        let mut setter = Setter::new(width, drawn, scale);
        setter.title(&place, title);
        for section in first {
            setter.section(section, true);
        }
        setter
    };
    // The first page is one page: long names and Letter paper make its text a little smaller.
    let sizes = SIZES.iter().copied();
    let mut setter = sizes
        .map(first_page)
        .find(|setter| setter.height() <= height)
        .unwrap_or_else(|| first_page(SMALLEST));
    setter.usual_size();
    setter.contents(rest);
    for section in rest {
        setter.section(section, false);
    }
    let Setter {
        rows, structure, ..
    } = setter;
    let pages = galley::pages(rows, height, width);
    let about = About {
        title,
        place: &place,
        sections: sections
            .iter()
            .map(|section| {
                let title = if section.id == "answer" {
                    "The answer"
                } else {
                    section.title.as_str()
                };
                (section.id, title)
            })
            .collect(),
    };
    document(&about, sheet, &pages, &structure, drawn)
}

/// The font holds Latin, Greek and Cyrillic letters with their extensions and the signs of the report. In place of others the paper prints a
/// mark, and says so.
fn say_what_cannot_be_printed(sections: &mut [Section]) {
    let missing: BTreeSet<char> = sections
        .iter()
        .flat_map(|section| section.markdown.chars())
        .filter(|c| !chart::font_has(*c))
        .collect();
    if missing.is_empty() {
        return;
    }
    // Escaped, so that Markdown reads no link.
    let mark: String = chart::UNPRINTABLE.chars().flat_map(|c| ['\\', c]).collect();
    for section in sections.iter_mut() {
        section.markdown = chart::printable(&section.markdown, &mark);
        section.title = chart::printable(&section.title, chart::UNPRINTABLE);
    }
    let findings = sections.iter_mut().find(|section| section.id == "findings");
    let Some(section) = findings else { return };
    let signs = match missing.len() {
        1 => "One sign of a name is".to_owned(),
        n => format!("{n} signs of names are"),
    };
    section.markdown += &format!(
        "\n\n**Note.** {signs} not in the font of this paper; {mark} stands there. The same report as report.html shows them with the \
         fonts of its reader.\n"
    );
}
