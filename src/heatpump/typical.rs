//! Typical machines: invented sheets that stand for a usual machine where no datasheet is to hand.

use super::sheet::Sheet;
use crate::problem::{Place, Problem, Problems};

/// Name, file name and text of every sheet that is built in.
const SHEETS: [(&str, &str, &str); 6] = [
    (
        "air, R290, variable speed",
        "air-r290-small.toml",
        include_str!("../../briefs/machines/air-r290-small.toml"),
    ),
    (
        "air, R290, variable speed, large",
        "air-r290-large.toml",
        include_str!("../../briefs/machines/air-r290-large.toml"),
    ),
    (
        "air, R32, variable speed",
        "air-r32.toml",
        include_str!("../../briefs/machines/air-r32.toml"),
    ),
    (
        "air, R410A, fixed speed",
        "air-r410a-fixed.toml",
        include_str!("../../briefs/machines/air-r410a-fixed.toml"),
    ),
    (
        "ground, R410A, variable speed",
        "ground-r410a.toml",
        include_str!("../../briefs/machines/ground-r410a.toml"),
    ),
    (
        "ground, R134a, fixed speed",
        "ground-r134a-fixed.toml",
        include_str!("../../briefs/machines/ground-r134a-fixed.toml"),
    ),
];

/// The names of the typical machines, in the order of their list.
pub fn typical_names() -> impl Iterator<Item = &'static str> {
    SHEETS.iter().map(|(name, _, _)| *name)
}

/// File name and text of every built-in sheet, for writing them out.
pub fn typical_files() -> impl Iterator<Item = (&'static str, &'static str)> {
    SHEETS.iter().map(|(_, file, text)| (*file, *text))
}

impl Sheet {
    /// The sheet of a typical machine, marked as typical. Upper and lower case are alike.
    ///
    /// # Errors
    /// A problem with the names that are held and the nearest of them.
    pub fn typical(name: &str) -> Result<Self, Problems> {
        let wanted = name.trim().to_lowercase();
        let held = SHEETS
            .iter()
            .find(|(held, _, _)| held.to_lowercase() == wanted);
        let Some((_, file, text)) = held else {
            let names: Vec<_> = typical_names().map(|held| format!("\"{held}\"")).collect();
            let nearest = typical_names()
                .map(|held| (strsim::jaro_winkler(&held.to_lowercase(), &wanted), held))
                .max_by(|a, b| a.0.total_cmp(&b.0));
            return Err(Problem::new(
                Place::field("typical_machine"),
                format!("\"{name}\" is no typical machine"),
                names.join(", "),
                nearest.map_or_else(String::new, |(_, near)| format!("did you mean \"{near}\"?")),
            )
            .into());
        };
        let sheet = Self::parse(file, text)?;
        Ok(Self {
            typical: true,
            ..sheet
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_typical_machine_is_read_and_marked() {
        for name in typical_names() {
            let sheet = Sheet::typical(name).unwrap_or_else(|problems| panic!("{problems}"));
            assert!(sheet.typical, "{name}");
            assert!(sheet.points.len() >= 6, "{name}");
            assert!(name.contains(sheet.refrigerant.name()), "{name}");
        }
    }

    #[test]
    fn an_unknown_name_is_answered_with_the_nearest() {
        let problems = Sheet::typical("air, R290, variable sped").unwrap_err();
        assert!(
            problems
                .to_string()
                .contains("did you mean \"air, R290, variable speed\"?"),
            "{problems}"
        );
    }
}
