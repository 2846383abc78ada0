//! The table `[report]`: how figures and dates are written.

use super::raw::ReportTable;
use crate::document::{Check, Leaf, Section};
use crate::locale::{Locale, Marks};

/// The locale of a brief; English marks, day first and A4 where it says nothing.
pub(super) fn locale(table: Option<&Section<ReportTable>>, check: &mut Check) -> Option<Locale> {
    let Some(table) = table else {
        return Some(Locale::default());
    };
    let decimal = mark(&table.decimal, &[(".", Some('.')), (",", Some(','))], check);
    let thousands = mark(
        &table.thousands,
        &[
            (",", Some(',')),
            (".", Some('.')),
            // A thin space that does not break, as ISO 80000-1 wants it.
            ("space", Some('\u{202f}')),
            ("none", None),
        ],
        check,
    );
    let dates = check.value(&table.dates);
    let paper = check.value(&table.paper);
    let decimal = decimal.ok()?.flatten().unwrap_or('.');
    // A comma that ends the whole number cannot part its thousands too.
    let usual = if decimal == ',' { '.' } else { ',' };
    let thousands = thousands.ok()?.unwrap_or(Some(usual));
    if thousands == Some(decimal) {
        let span = table.thousands.as_ref().map(Leaf::span).unwrap_or_default();
        check.refuse(
            &span,
            format!("\"{decimal}\" for both decimal and thousands"),
            "two different marks",
            "write thousands = \"space\" or \"none\"",
        );
        return None;
    }
    Some(Locale {
        marks: Marks {
            decimal,
            thousands,
            phone: false,
        },
        dates: dates.map(|(order,)| order).unwrap_or_default(),
        paper: paper.map(|(paper,)| paper).unwrap_or_default(),
    })
}

/// A mark by its word; nothing where it is not given, an error where it was refused.
fn mark(
    leaf: &Option<Leaf<String>>,
    words: &[(&str, Option<char>)],
    check: &mut Check,
) -> Result<Option<Option<char>>, ()> {
    let Some(given) = leaf else {
        return Ok(None);
    };
    let word = check.value(leaf).ok_or(())?;
    let found = words.iter().find(|(name, _)| *name == word);
    let names: Vec<_> = words
        .iter()
        .map(|(name, _)| format!("\"{name}\""))
        .collect();
    match found {
        Some((_, mark)) => Ok(Some(*mark)),
        None => {
            check.refuse(
                &given.span(),
                format!("\"{word}\""),
                names.join(", "),
                "write one of these marks",
            );
            Err(())
        }
    }
}
