//! Lines of text: measured words, broken where the paragraph as a whole looks best.

use textwrap::core::Fragment;
use textwrap::wrap_algorithms::{Penalties, wrap_first_fit, wrap_optimal_fit};

use crate::chart::{Weight, plain_line, text_width};
use crate::report::blocks::Span;

/// The look of a piece of text.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Look {
    pub weight: Weight,
    pub slanted: bool,
    /// The section that it leads to.
    pub link: Option<String>,
}

/// A piece of text of one look on one line.
#[derive(Debug, Clone)]
pub(super) struct Run {
    pub text: String,
    pub look: Look,
}

/// A line as it is printed.
#[derive(Debug, Clone, Default)]
pub(super) struct Line {
    pub runs: Vec<Run>,
    /// Points.
    pub width: f64,
}

/// What is never parted: a word, or the part of one up to a hyphen.
#[derive(Debug, Clone, Default)]
struct Word {
    runs: Vec<Run>,
    width: f64,
    /// Width of the space behind it; none between the parts of a word.
    space: f64,
}

impl Fragment for Word {
    fn width(&self) -> f64 {
        self.width
    }
    fn whitespace_width(&self) -> f64 {
        self.space
    }
    fn penalty_width(&self) -> f64 {
        0.0
    }
}

/// Breaks text of a size into lines no wider than `room`; `base` is the weight of what is not strong.
///
/// The breaks make the lines of a paragraph as even as they can be, ragged on the right. A word that is wider than the room is cut.
pub(super) fn lines(text: &[Span], size: f64, base: Weight, room: f64) -> Vec<Line> {
    /// Costs in squared points: an overfull line is out of the question, one line more than needed costs a hole of 30 points, and a
    /// last line shorter than an eighth of the room one of 60.
    const PENALTIES: Penalties = Penalties {
        nline_penalty: 900,
        overflow_penalty: 100_000_000,
        short_last_line_fraction: 8,
        short_last_line_penalty: 3600,
        hyphen_penalty: 100,
    };
    let words = words(text, size, base, room);
    let broken = wrap_optimal_fit(&words, &[room], &PENALTIES)
        .unwrap_or_else(|_| wrap_first_fit(&words, &[room]));
    let count = broken.len();
    let set = broken.iter().enumerate();
    set.map(|(i, words)| joined(words, i + 1 < count)).collect()
}

/// The narrowest room that cuts no word, and the width of the text in one line.
pub(super) fn widths(text: &[Span], size: f64, base: Weight) -> (f64, f64) {
    let words = words(text, size, base, f64::INFINITY);
    let least = words.iter().map(|word| word.width).fold(0.0, f64::max);
    let all = words.iter().map(|word| word.width + word.space).sum();
    (least, all)
}

fn words(text: &[Span], size: f64, base: Weight, room: f64) -> Vec<Word> {
    let mut words = Vec::new();
    let mut word = Word::default();
    let mut close = |word: &mut Word, space: f64| {
        if word.runs.is_empty() {
            return;
        }
        let mut word = std::mem::take(word);
        word.space = space;
        words.extend(cut(word, size, room));
    };
    for span in text {
        let weight = if span.strong { Weight::Bold } else { base };
        let look = Look {
            weight,
            slanted: span.emphasis,
            link: span.link.clone(),
        };
        let space = text_width(" ", size, weight);
        for (i, part) in span.text.split(' ').enumerate() {
            if i > 0 {
                close(&mut word, space);
            }
            for piece in parts(part) {
                if word.runs.last().is_some_and(|run| {
                    run.text.ends_with('-') && run.text.chars().count() > SHORTEST_PART
                }) {
                    close(&mut word, 0.0);
                }
                word.width += text_width(piece, size, weight);
                word.runs.push(Run {
                    text: piece.to_owned(),
                    look: look.clone(),
                });
            }
        }
    }
    close(&mut word, 0.0);
    words
}

/// Fewest letters before a hyphen at which a word may be parted.
const SHORTEST_PART: usize = 3;

/// A word in the parts that its hyphens make; one with figures, as a date, stays whole.
fn parts(word: &str) -> Vec<&str> {
    if word.is_empty() {
        return Vec::new();
    }
    if word.contains(|c: char| c.is_ascii_digit()) {
        return vec![word];
    }
    word.split_inclusive('-').collect()
}

/// A word that is wider than the room, in pieces that are not.
fn cut(word: Word, size: f64, room: f64) -> Vec<Word> {
    if word.width <= room {
        return vec![word];
    }
    let mut pieces = vec![Word::default()];
    for run in &word.runs {
        for c in run.text.chars() {
            let width = text_width(c.encode_utf8(&mut [0; 4]), size, run.look.weight);
            if pieces
                .last()
                .is_some_and(|piece| piece.width + width > room && !piece.runs.is_empty())
            {
                pieces.push(Word::default());
            }
            let Some(piece) = pieces.last_mut() else {
                continue;
            };
            piece.width += width;
            match piece.runs.last_mut() {
                Some(last) if last.look == run.look => last.text.push(c),
                _ => piece.runs.push(Run {
                    text: c.to_string(),
                    look: run.look.clone(),
                }),
            }
        }
    }
    if let Some(last) = pieces.last_mut() {
        last.space = word.space;
    }
    pieces
}

/// Words as one line. Spaces are written out, at the end of a line as well, so that the text reads on when it is copied or spoken.
fn joined(words: &[Word], more: bool) -> Line {
    let mut line = Line::default();
    for (i, word) in words.iter().enumerate() {
        let last = i + 1 == words.len();
        for run in &word.runs {
            match line.runs.last_mut() {
                Some(before) if before.look == run.look => before.text.push_str(&run.text),
                _ => line.runs.push(run.clone()),
            }
        }
        line.width += word.width;
        if word.space > 0.0 && (!last || more) {
            if let Some(run) = line.runs.last_mut() {
                run.text.push(' ');
            }
            if !last {
                line.width += word.space;
            }
        }
    }
    line
}

/// A plain text as a span.
pub(super) fn plain_span(text: &str) -> Vec<Span> {
    vec![Span {
        text: plain_line(text),
        ..Span::default()
    }]
}

#[cfg(test)]
mod tests {
    use super::*;

    fn text(line: &Line) -> String {
        line.runs.iter().map(|run| run.text.as_str()).collect()
    }

    #[test]
    fn lines_fit_their_room_and_keep_every_sign() {
        let words = "A room-by-room heat-loss calculation decides the size of the machine and of each radiator; 5\u{a0}kW stay together.";
        for room in [60.0, 90.0, 140.0, 400.0] {
            let set = lines(&plain_span(words), 10.0, Weight::Regular, room);
            assert!(set.iter().all(|line| line.width <= room + 1e-9));
            assert_eq!(set.iter().map(text).collect::<String>(), words);
        }
    }

    #[test]
    fn a_word_without_end_is_cut() {
        let long = "x".repeat(400);
        let set = lines(&plain_span(&long), 10.0, Weight::Regular, 100.0);
        assert!(set.len() > 10 && set.iter().all(|line| line.width <= 100.0));
        assert_eq!(set.iter().map(text).collect::<String>(), long);
    }

    #[test]
    fn lines_of_a_paragraph_are_even() {
        // Filled one by one, the first line would hold all but one short word.
        let words = plain_span("one two three four five six seven eight nine ten a");
        let room = widths(&words, 10.0, Weight::Regular).1 - 2.0;
        let set = lines(&words, 10.0, Weight::Regular, room);
        assert_eq!(set.len(), 2);
        assert!(set[1].width > 0.1 * room, "{}", set[1].width);
    }
}
