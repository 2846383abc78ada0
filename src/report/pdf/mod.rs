//! The report on paper: a PDF from the same sentences and pictures as the page.
//!
//! `set` turns blocks into one long column of rows (`line` breaks text, `table` sets tables) and says what each part is
//! (`structure`), `galley` parts the column into pages, `draw` writes them. The file is tagged and held to PDF/UA-1
//! (ISO 14289-1) when it is written; its fonts are embedded; the same input gives the same bytes.

mod draw;
mod galley;
mod line;
mod set;
mod structure;
mod table;

use super::ReportError;
use super::page::place;
use super::pictures::{Drawn, Material};
use super::sentences::{FIRST_PAGE, sections};
use draw::{About, Sheet, document};
use set::Setter;

/// The report as PDF on the paper of the place.
///
/// # Errors
/// When a sentence cannot be filled or the document cannot be written.
pub fn report_pdf(material: &Material<'_>, drawn: &[Drawn]) -> Result<Vec<u8>, ReportError> {
    let sections = sections(material, drawn)?;
    let sheet = Sheet::new(material.locale.paper.points());
    let (width, height) = sheet.column();
    let place = place(material);
    let title = sections.first().map_or("", |section| &section.title);
    let mut setter = Setter::new(width, drawn);
    setter.title(&place, title);
    let (first, rest) = sections.split_at(FIRST_PAGE.min(sections.len()));
    for section in first {
        setter.section(section, true);
    }
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
