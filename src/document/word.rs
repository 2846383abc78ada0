//! A leaf that is one of a few words.

use schemars::{Schema, json_schema};
use toml::Value;

use super::leaf::{LeafValue, describe};
use crate::units::UnitProblem;

/// An enum written as one of a few words.
pub trait Word: Copy + Sized + 'static {
    /// What the word chooses, for messages.
    const NAME: &'static str;
    /// Every word and what it stands for.
    const WORDS: &'static [(&'static str, Self)];

    /// The value of a word.
    ///
    /// # Errors
    /// What was found, the words that are held, and the nearest of them.
    fn from_word(text: &str) -> Result<Self, UnitProblem> {
        let wanted = text.trim().to_lowercase();
        if let Some((_, value)) = Self::WORDS.iter().find(|(word, _)| *word == wanted) {
            return Ok(*value);
        }
        let words: Vec<_> = Self::WORDS
            .iter()
            .map(|(word, _)| format!("\"{word}\""))
            .collect();
        Err(UnitProblem {
            found: format!("\"{text}\""),
            allowed: format!("{}: {}", Self::NAME, words.join(", ")),
            remedy: nearest(&wanted, Self::WORDS.iter().map(|(word, _)| *word)).map_or_else(
                || "write one of them".to_owned(),
                |word| format!("write \"{word}\"?"),
            ),
        })
    }
}

impl<W: Word> LeafValue for (W,) {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        match value {
            Value::String(text) => W::from_word(text).map(|word| (word,)),
            _ => Err(UnitProblem {
                found: describe(value),
                allowed: format!("{} as a word in quotes", W::NAME),
                remedy: W::WORDS.first().map_or_else(String::new, |(word, _)| {
                    format!("write for example \"{word}\"")
                }),
            }),
        }
    }

    fn schema() -> Schema {
        let words: Vec<_> = W::WORDS.iter().map(|(word, _)| *word).collect();
        json_schema!({ "type": "string", "enum": words })
    }
}

/// The nearest of some names, when it is near enough to be a slip of the pen.
pub(super) fn nearest<'a>(found: &str, names: impl Iterator<Item = &'a str>) -> Option<&'a str> {
    /// Likeness (Jaro–Winkler, 0 to 1) from which a name is offered.
    const LIKE: f64 = 0.75;
    names
        .map(|name| (strsim::jaro_winkler(found, name), name))
        .filter(|(likeness, _)| *likeness >= LIKE)
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, name)| name)
}
