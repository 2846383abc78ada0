//! Markdown into blocks that page and paper are set from: the few kinds that the sentences use, and nothing else.

use pulldown_cmark::{Alignment, Event, Options, Parser, Tag, TagEnd, TextMergeStream};

/// A piece of text of one look.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub(super) struct Span {
    pub text: String,
    pub strong: bool,
    pub emphasis: bool,
    /// Where it leads, a section of the report.
    pub link: Option<String>,
}

/// A line of text.
pub(super) type Line = Vec<Span>;

/// A block of the report.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Block {
    /// A heading inside a section.
    Heading(Line),
    /// A paragraph.
    Paragraph(Line),
    /// A list.
    List { numbered: bool, items: Vec<Line> },
    /// A table; its first column names the rows.
    Table {
        head: Vec<Line>,
        rows: Vec<Vec<Line>>,
        /// Which columns hold figures.
        figures: Vec<bool>,
    },
    /// A picture by its name, with its caption.
    Picture { name: String, caption: Line },
    /// Small pictures side by side, by their names: those that stand in one paragraph.
    Abreast(Vec<String>),
}

/// Reads Markdown. What the sentences have no use for (raw HTML, code, quotes) is left out, its text kept.
pub(super) fn blocks(markdown: &str) -> Vec<Block> {
    let mut reader = Reader::default();
    // Merged, so that a date is one text and its hyphens are not taken for minus signs.
    for event in TextMergeStream::new(Parser::new_ext(markdown, Options::ENABLE_TABLES)) {
        reader.take(event);
    }
    reader.blocks
}

#[derive(Default)]
struct Reader {
    blocks: Vec<Block>,
    line: Line,
    strong: bool,
    emphasis: bool,
    link: Option<String>,
    row: Vec<Line>,
    /// Items that are being read.
    open_items: usize,
    /// The picture whose caption is being read.
    picture: Option<String>,
    /// Pictures of the present paragraph.
    pictures: Vec<(String, Line)>,
}

impl Reader {
    fn take(&mut self, event: Event<'_>) {
        match event {
            Event::Text(text) | Event::Code(text) => self.text(&text),
            Event::SoftBreak | Event::HardBreak => self.text(" "),
            Event::Start(tag) => self.start(tag),
            Event::End(tag) => self.end(tag),
            _ => {}
        }
    }

    fn text(&mut self, text: &str) {
        let text = &bound_units(text);
        match self.line.last_mut() {
            Some(last)
                if last.strong == self.strong
                    && last.emphasis == self.emphasis
                    && last.link == self.link =>
            {
                last.text.push_str(text);
            }
            _ => self.line.push(Span {
                text: text.to_owned(),
                strong: self.strong,
                emphasis: self.emphasis,
                link: self.link.clone(),
            }),
        }
    }

    fn start(&mut self, tag: Tag<'_>) {
        match tag {
            Tag::Strong => self.strong = true,
            Tag::Emphasis => self.emphasis = true,
            Tag::Link { dest_url, .. } => {
                self.link = dest_url.strip_prefix('#').map(str::to_owned);
            }
            Tag::Item => self.open_items += 1,
            Tag::Image { dest_url, .. } => self.picture = Some(dest_url.to_string()),
            Tag::List(first) => self.blocks.push(Block::List {
                numbered: first.is_some(),
                items: Vec::new(),
            }),
            Tag::Table(alignments) => self.blocks.push(Block::Table {
                head: Vec::new(),
                rows: Vec::new(),
                figures: alignments.iter().map(|a| *a == Alignment::Right).collect(),
            }),
            _ => {}
        }
    }

    fn end(&mut self, tag: TagEnd) {
        match tag {
            TagEnd::Strong => self.strong = false,
            TagEnd::Emphasis => self.emphasis = false,
            TagEnd::Link => self.link = None,
            TagEnd::Heading(_) => {
                let line = std::mem::take(&mut self.line);
                self.blocks.push(Block::Heading(line));
            }
            TagEnd::Image => {
                if let Some(name) = self.picture.take() {
                    let caption = std::mem::take(&mut self.line);
                    self.pictures.push((name, caption));
                }
            }
            TagEnd::Paragraph if !self.pictures.is_empty() => {
                self.line.clear();
                let mut pictures = std::mem::take(&mut self.pictures);
                match (pictures.pop(), pictures.is_empty()) {
                    (Some((name, caption)), true) => {
                        self.blocks.push(Block::Picture { name, caption });
                    }
                    (last, _) => {
                        let names = pictures.into_iter().chain(last).map(|(name, _)| name);
                        self.blocks.push(Block::Abreast(names.collect()));
                    }
                }
            }
            // Inside a list the item takes the line.
            TagEnd::Paragraph if !self.line.is_empty() && self.open_items == 0 => {
                let line = std::mem::take(&mut self.line);
                self.blocks.push(Block::Paragraph(line));
            }
            TagEnd::Item => {
                let line = std::mem::take(&mut self.line);
                if let Some(Block::List { items, .. }) = self.blocks.last_mut() {
                    items.push(line);
                }
                self.open_items = self.open_items.saturating_sub(1);
            }
            TagEnd::TableCell => self.row.push(std::mem::take(&mut self.line)),
            TagEnd::TableHead => {
                let row = std::mem::take(&mut self.row);
                if let Some(Block::Table { head, .. }) = self.blocks.last_mut() {
                    *head = row;
                }
            }
            TagEnd::TableRow => {
                let row = std::mem::take(&mut self.row);
                if let Some(Block::Table { rows, .. }) = self.blocks.last_mut() {
                    rows.push(row);
                }
            }
            _ => {}
        }
    }
}

/// `text` with no-break spaces between a number and its unit, and true minus signs.
fn bound_units(text: &str) -> String {
    const UNITS: &[&str] = &[
        "%", "°C", "K", "kW", "kWh", "W", "W/K", "kg", "m²", "h", "p/kWh", "ct/kWh", "c/kWh",
    ];
    let mut out = String::with_capacity(text.len());
    for word in text.split_inclusive(' ') {
        let unit = word.trim_end_matches([' ', '.', ',', ';', ':', ')']);
        let after_number =
            out.ends_with(' ') && out.trim_end().ends_with(|c: char| c.is_ascii_digit());
        if after_number && UNITS.contains(&unit) {
            out.pop();
            out.push('\u{a0}');
        }
        match word.strip_prefix('-') {
            Some(number) if number.starts_with(|c: char| c.is_ascii_digit()) => {
                out.push('−');
                out.push_str(number);
            }
            _ => out.push_str(word),
        }
    }
    out
}

/// The text of a line without its looks.
pub(super) fn plain(line: &[Span]) -> String {
    line.iter().map(|span| span.text.as_str()).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_kinds_of_block_are_told_apart() {
        let read = blocks(
            "A **b** [c](#money).\n\n- one\n- two\n\n1. first\n\n| a | b |\n|:--|--:|\n| x | 1 |\n\n![how](name)\n\n![](p)![](q)\n\n### h\n",
        );
        assert!(matches!(&read[0], Block::Paragraph(line) if line.len() == 5 && line[1].strong));
        assert!(
            matches!(&read[0], Block::Paragraph(line) if line[3].link.as_deref() == Some("money"))
        );
        assert!(matches!(&read[1], Block::List { numbered: false, items } if items.len() == 2));
        assert!(matches!(&read[2], Block::List { numbered: true, .. }));
        assert!(
            matches!(&read[3], Block::Table { rows, figures, .. } if rows.len() == 1 && figures == &[false, true])
        );
        assert!(matches!(&read[4], Block::Picture { name, .. } if name == "name"));
        assert!(matches!(&read[5], Block::Abreast(names) if names == &["p", "q"]));
        assert!(matches!(&read[6], Block::Heading(line) if plain(line) == "h"));
        assert_eq!(read.len(), 7);
    }

    #[test]
    fn a_number_is_not_parted_from_its_unit() {
        assert_eq!(
            bound_units("electricity 17 % dearer, or -3 °C (now 5 K)."),
            "electricity 17\u{a0}% dearer, or −3\u{a0}°C (now 5\u{a0}K)."
        );
    }

    #[test]
    fn items_may_stand_apart() {
        let read = blocks("1. one\n\n1. two\n");
        assert!(
            matches!(&read[0], Block::List { items, .. } if items.len() == 2 && plain(&items[1]) == "two")
        );
        assert_eq!(read.len(), 1);
    }
}
