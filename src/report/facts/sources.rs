//! Where figures are from, and what to be careful with.

use serde_json::{Value, json};

use super::names::{plain_name, plain_value};
use crate::answer::Estimate;
use crate::report::pictures::Material;

/// The assumptions, each with the kind of source it has.
pub(super) fn assumptions(estimate: &Estimate) -> Value {
    let rows: Vec<_> = estimate
        .assumptions
        .iter()
        .map(|a| {
            json!({
                "name": plain_name(&a.name),
                "value": plain_value(&a.value),
                "kind": source_kind(&a.from),
                "from": a.from.strip_prefix("default: ").unwrap_or(&a.from),
            })
        })
        .collect();
    json!(rows)
}

/// Measured, declared, computed, standard or assumed. Only a source that names a publication makes a standard.
fn source_kind(from: &str) -> &'static str {
    const PUBLICATIONS: &[&str] = &[
        "EN ",
        "ISO ",
        "IEC ",
        "BS ",
        "ASHRAE",
        "CIBSE",
        "VDI ",
        "SAP ",
        "IPCC",
        "Regulation",
        "Directive",
        "doi",
        "convention",
        "conversion factors",
        "Green Book",
        "published",
        "handbook",
    ];
    let says = |words: &[&str]| words.iter().any(|word| from.contains(word));
    if says(&["meter reading", "bills"]) {
        "measured"
    } else if says(&["no source"]) {
        "assumed"
    } else if says(&["brief", "sheet"]) {
        "declared"
    } else if says(&["weather file"]) {
        "computed"
    } else if says(PUBLICATIONS) {
        "standard"
    } else {
        "assumed"
    }
}

/// Names of the flammable refrigerants, and the cautions of all of them.
pub(super) fn refrigerants(material: &Material<'_>) -> (Vec<&'static str>, Vec<String>) {
    let (mut flammable, mut cautions) = (Vec::new(), Vec::new());
    for contender in &material.case.contenders {
        let Some(made) = contender.system.heating.machine() else {
            continue;
        };
        let refrigerant = made.machine.refrigerant();
        let facts = refrigerant.facts();
        if facts.safety_class.flammable() && !flammable.contains(&refrigerant.name()) {
            flammable.push(refrigerant.name());
        }
        let caution = format!(
            "{}: {}.",
            refrigerant.name(),
            facts.caution.trim_end_matches('.')
        );
        if !cautions.contains(&caution) {
            cautions.push(caution);
        }
    }
    (flammable, cautions)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sources_are_told_by_their_kind() {
        assert_eq!(
            source_kind("default: common practice, no source"),
            "assumed"
        );
        assert_eq!(source_kind("EN 14825 default"), "standard");
        assert_eq!(
            source_kind("UK government conversion factors 2025"),
            "standard"
        );
        for no_publication in [
            "no pattern is given",
            "no forecast: prices stay as they are above inflation",
            "the quick option: it over-chills cold nights",
        ] {
            assert_eq!(source_kind(no_publication), "assumed", "{no_publication}");
        }
        assert_eq!(source_kind("brief"), "declared");
        assert_eq!(
            source_kind("annual wave of the weather file carried down"),
            "computed"
        );
    }
}
