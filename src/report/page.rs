//! The report as one page of HTML that needs nothing but itself: no network, no script.

use std::collections::BTreeMap;
use std::fmt::Write as _;

use minijinja::{Environment, context};

use super::ReportError;
use super::blocks::{Block, Line, blocks, plain};
use super::narrow;
use super::pictures::{Drawn, Material};
use super::sentences::{FIRST_PAGE, Section, sections};
use crate::chart::{self, Picture};

const PAGE: &str = include_str!("page.html");
const STYLE: &str = include_str!("style.css");

/// Every picture by its name, and its form for a phone where it has one.
type Shown<'a> = BTreeMap<&'a str, (&'a Drawn, Option<&'a Picture>)>;

/// The report as HTML; `phone` are the same pictures drawn for a page as wide as a phone.
///
/// # Errors
/// When a picture cannot be drawn.
pub fn report_html(
    material: &Material<'_>,
    drawn: &[Drawn],
    phone: &[Drawn],
) -> Result<String, ReportError> {
    let sections = sections(material, drawn)?;
    let narrow: BTreeMap<&str, &Picture> = phone
        .iter()
        .filter(|drawn| drawn.picture.labels_are_apart())
        .map(|drawn| (drawn.name.as_str(), &drawn.picture))
        .collect();
    let pictures: Shown<'_> = drawn
        .iter()
        .map(|drawn| {
            let name = drawn.name.as_str();
            (name, (drawn, narrow.get(name).copied()))
        })
        .collect();
    let (first, rest) = sections.split_at(FIRST_PAGE.min(sections.len()));
    let body = |sections: &[Section], class: &str| -> Result<String, ReportError> {
        let mut out = String::new();
        for section in sections {
            write_section(&mut out, section, class, &pictures)?;
        }
        Ok(out)
    };
    let mut environment = Environment::new();
    environment.add_template("page.html", PAGE)?;
    let contents: Vec<_> = rest
        .iter()
        .map(|section| context! { id => section.id, title => &section.title })
        .collect();
    let (first, rest) = (body(first, "first")?, body(rest, "rest")?);
    let fonts = chart::font_css(&format!("{}{first}{rest}", place(material)));
    let page = environment.get_template("page.html")?.render(context! {
        title => sections.first().map(|section| section.title.as_str()),
        place => place(material),
        fonts,
        style => STYLE,
        paper => material.locale.paper.css(),
        first,
        rest,
        contents,
    })?;
    Ok(page)
}

/// What stands above the question, and at the head of the pages on paper.
pub(super) fn place(material: &Material<'_>) -> String {
    match &material.estimate.home.label {
        Some(label) => format!("Winterledger: {label}"),
        None => "Winterledger".to_owned(),
    }
}

// Writing to a String cannot fail, so the results of `write!` are dropped below.

fn write_section(
    out: &mut String,
    section: &Section,
    class: &str,
    pictures: &Shown<'_>,
) -> Result<(), ReportError> {
    let title = if section.id == "answer" {
        "The answer"
    } else {
        &section.title
    };
    let id = section.id;
    let _ = write!(
        out,
        "<section id=\"{id}\" class=\"{class}\" aria-labelledby=\"{id}-title\">\n<h2 id=\"{id}-title\">{}</h2>\n",
        escaped(title)
    );
    let mut tables = 0;
    for block in blocks(&section.markdown) {
        match block {
            Block::Heading(line) => {
                let _ = writeln!(out, "<h3>{}</h3>", text(&line));
            }
            Block::Paragraph(line) => {
                let _ = writeln!(out, "<p>{}</p>", text(&line));
            }
            Block::List { numbered, items } => {
                let tag = if numbered { "ol" } else { "ul" };
                let _ = writeln!(out, "<{tag}>");
                for item in items {
                    let _ = writeln!(out, "<li>{}</li>", text(&item));
                }
                let _ = writeln!(out, "</{tag}>");
            }
            Block::Table {
                head,
                rows,
                figures,
            } => {
                tables += 1;
                let name = format!("{title}, table {tables}");
                write_table(out, &name, &head, &rows, &figures);
            }
            Block::Abreast(names) => {
                let _ = writeln!(out, "<div class=\"abreast\">");
                for name in names {
                    if let Some((drawn, _)) = pictures.get(name.as_str()) {
                        let svg = drawn.picture.svg_without_fonts()?;
                        let name = escaped(&name);
                        let _ = writeln!(out, "<figure id=\"picture-{name}\">\n{svg}\n</figure>");
                    }
                }
                let _ = writeln!(out, "</div>");
            }
            Block::Picture { name, caption } => {
                if let Some((drawn, phone)) = pictures.get(name.as_str()) {
                    let svg = drawn.picture.svg_without_fonts()?;
                    let narrow = match phone {
                        _ if !drawn.narrow.is_empty() => narrow::bars(&drawn.narrow),
                        Some(picture) => {
                            format!(
                                "<div class=\"narrow\">\n{}\n</div>\n",
                                picture.svg_without_fonts()?
                            )
                        }
                        None => String::new(),
                    };
                    let class = if narrow.is_empty() {
                        ""
                    } else {
                        " class=\"has-narrow\""
                    };
                    let _ = write!(
                        out,
                        "<figure id=\"picture-{}\"{class}>\n<div class=\"wide\" tabindex=\"0\" role=\"group\" aria-label=\"{}\">\n{svg}\n</div>\n{narrow}\
                         <figcaption>{}</figcaption>\n</figure>\n",
                        escaped(&name),
                        escaped(&format!("Picture: {} ({name})", drawn.picture.title)),
                        text(&caption)
                    );
                }
            }
        }
    }
    let _ = writeln!(out, "</section>");
    Ok(())
}

fn write_table(out: &mut String, name: &str, head: &[Line], rows: &[Vec<Line>], figures: &[bool]) {
    let class = |column: usize| match figures.get(column) {
        Some(true) => " class=\"figure\"",
        _ => "",
    };
    let _ = write!(
        out,
        "<div class=\"wide\" tabindex=\"0\" role=\"group\" aria-label=\"{}\">\n<table>\n<thead>\n<tr>",
        escaped(name)
    );
    for (column, cell) in head.iter().enumerate() {
        let _ = write!(
            out,
            "<th scope=\"col\"{}>{}</th>",
            class(column),
            text(cell)
        );
    }
    let _ = write!(out, "</tr>\n</thead>\n<tbody>\n");
    for row in rows {
        let sum = row.first().is_some_and(|cell| plain(cell) == "Year");
        let _ = write!(out, "<tr{}>", if sum { " class=\"sum\"" } else { "" });
        for (column, cell) in row.iter().enumerate() {
            if column == 0 {
                let _ = write!(out, "<th scope=\"row\">{}</th>", text(cell));
            } else {
                // On a phone each figure stands below the other with the name of its column.
                let name = head
                    .get(column)
                    .map_or_else(String::new, |cell| plain(cell));
                let _ = write!(
                    out,
                    "<td{} data-label=\"{}\"><span>{}</span></td>",
                    class(column),
                    escaped(&name),
                    text(cell)
                );
            }
        }
        let _ = writeln!(out, "</tr>");
    }
    let _ = write!(out, "</tbody>\n</table>\n</div>\n");
}

/// A line of text with its looks.
fn text(line: &Line) -> String {
    line.iter()
        .map(|span| {
            let mut out = breakable(&span.text);
            if span.emphasis {
                out = format!("<em>{out}</em>");
            }
            if span.strong {
                out = format!("<strong>{out}</strong>");
            }
            match &span.link {
                Some(id) => format!("<a href=\"#{}\">{out}</a>", escaped(id)),
                None => out,
            }
        })
        .collect()
}

/// Escaped text whose long words may be broken.
fn breakable(text: &str) -> String {
    /// Longest word that stays whole, and the pieces of longer ones, characters.
    const LONGEST: usize = 24;
    const PIECE: usize = 12;
    let words = text.split(' ').map(|word| {
        if word.chars().count() <= LONGEST {
            return escaped(word);
        }
        let letters: Vec<char> = word.chars().collect();
        let pieces = letters
            .chunks(PIECE)
            .map(|piece| escaped(&piece.iter().collect::<String>()));
        pieces.collect::<Vec<_>>().join("<wbr>")
    });
    words.collect::<Vec<_>>().join(" ")
}

pub(super) fn escaped(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\'' => out.push_str("&#39;"),
            _ => out.push(c),
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Relative luminance of WCAG 2.2.
    fn luminance(hex: &str) -> f64 {
        let channel = |at: usize| {
            let c = f64::from(u8::from_str_radix(&hex[at..at + 2], 16).unwrap()) / 255.0;
            if c <= 0.04045 {
                c / 12.92
            } else {
                ((c + 0.055) / 1.055).powf(2.4)
            }
        };
        0.2126 * channel(0) + 0.7152 * channel(2) + 0.0722 * channel(4)
    }

    fn colour(name: &str) -> String {
        let mark = format!("--{name}: #");
        let at = STYLE.find(&mark).unwrap() + mark.len();
        STYLE[at..at + 6].to_owned()
    }

    /// Contrast of at least 4.5:1, WCAG 2.2 success criterion 1.4.3 (AA), of every text colour on every ground.
    #[test]
    fn text_can_be_read_on_its_ground() {
        for ground in ["paper", "wash"] {
            for text in ["ink", "quiet", "accent"] {
                let (a, b) = (luminance(&colour(ground)), luminance(&colour(text)));
                let contrast = (a.max(b) + 0.05) / (a.min(b) + 0.05);
                assert!(contrast >= 4.5, "{text} on {ground}: {contrast:.2}");
            }
        }
    }

    /// Every colour of the style sheet is one of the tested ones.
    #[test]
    fn no_colour_stands_outside_the_palette() {
        let rules = &STYLE[STYLE.find('}').unwrap()..];
        let rules = rules.replace(&format!("color: #{}", colour("quiet")), "");
        assert!(!rules.contains("color: #") && !rules.contains("background: #"));
        assert!(!rules.contains("rgb("));
    }
}
