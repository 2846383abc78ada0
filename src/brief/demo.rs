//! The demonstration brief and the files it names, as they stand in the repository.

macro_rules! embedded {
    ($($path:literal),* $(,)?) => {
        /// Every embedded file by its path from the top of the repository.
        pub const FILES: &[(&str, &[u8])] = &[
            $(($path, include_bytes!(concat!("../../", $path)))),*
        ];
    };
}

embedded![
    "briefs/terrace.toml",
    "briefs/machines/air-r290-small.toml",
    "tariffs/flat_electricity.toml",
    "tariffs/flat_gas.toml",
    "weather_samples/morvane_sound.csv",
];

/// The folder of the demonstration brief.
pub(super) const FOLDER: &str = "briefs";
/// The demonstration brief in that folder.
pub(super) const BRIEF: &str = "terrace.toml";

/// The content of an embedded file.
pub(super) fn file(path: &str) -> Option<&'static [u8]> {
    FILES
        .iter()
        .find(|(name, _)| *name == path)
        .map(|(_, content)| *content)
}
