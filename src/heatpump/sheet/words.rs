//! The words of a machine sheet.

use crate::document::Word;

/// Where a machine takes its heat.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum SourceKind {
    /// Outdoor air.
    Air,
    /// Brine from a ground loop.
    Brine,
    /// Ground water.
    Water,
}

impl Word for SourceKind {
    const NAME: &'static str = "a heat source";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("air", Self::Air),
        ("brine", Self::Brine),
        ("water", Self::Water),
    ];
}

/// Whether the compressor's speed can be varied.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Drive {
    /// By an inverter.
    Variable,
    /// On or off.
    Fixed,
}

impl Word for Drive {
    const NAME: &'static str = "a compressor speed";
    const WORDS: &'static [(&'static str, Self)] =
        &[("variable", Self::Variable), ("fixed", Self::Fixed)];
}

/// The speed at which a point was tested.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum SpeedAt {
    /// The greatest there.
    Maximum,
    /// Something between.
    Part,
    /// The least.
    Least,
    /// The datasheet does not say.
    Unknown,
}

impl SpeedAt {
    /// The word on the sheet.
    pub fn word(self) -> &'static str {
        Self::WORDS
            .iter()
            .find(|(_, at)| *at == self)
            .map_or("", |(word, _)| word)
    }
}

impl Word for SpeedAt {
    const NAME: &'static str = "a tested speed";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("maximum", Self::Maximum),
        ("part", Self::Part),
        ("least", Self::Least),
        ("unknown", Self::Unknown),
    ];
}
