//! Fields that no struct declares, found by walking the document beside its schema.

use schemars::Schema;
use serde_json::{Map, Value as Json};
use toml::Spanned;
use toml::de::{DeTable, DeValue};

use super::read::Source;
use super::word::nearest;
use crate::problem::{Problem, Problems};

/// Names every key that the schema does not know, with the nearest that it does.
pub(super) fn unknown_fields(schema: &Schema, table: &DeTable<'_>, source: &Source) -> Problems {
    let mut problems = Problems::new();
    walk_table(schema.as_value(), table, source, &mut problems);
    problems
}

fn walk_table(schema: &Json, table: &DeTable<'_>, source: &Source, problems: &mut Problems) {
    let Some(known) = properties(schema) else {
        return;
    };
    for (key, value) in table.iter() {
        let name: &str = key.get_ref();
        match known.get(name) {
            Some(inner) => walk_value(inner, value, source, problems),
            None => {
                let names: Vec<_> = known.keys().map(String::as_str).collect();
                problems.push(Problem::new(
                    source.place(&key.span()),
                    format!("unknown field \"{name}\""),
                    names.join(", "),
                    nearest(name, names.iter().copied()).map_or_else(
                        || "remove it, or move it to the table it belongs to".to_owned(),
                        |near| format!("did you mean \"{near}\"?"),
                    ),
                ));
            }
        }
    }
}

fn walk_value(
    schema: &Json,
    value: &Spanned<DeValue<'_>>,
    source: &Source,
    problems: &mut Problems,
) {
    match value.get_ref() {
        DeValue::Table(table) => walk_table(schema, table, source, problems),
        DeValue::Array(items) => {
            let Some(item) = array_items(schema) else {
                return;
            };
            for value in items {
                walk_value(item, value, source, problems);
            }
        }
        _ => {}
    }
}

/// The declared fields of a table; nothing for a leaf that happens to be written as a table.
fn properties(schema: &Json) -> Option<&Map<String, Json>> {
    schema
        .get("properties")
        .and_then(Json::as_object)
        .or_else(|| alternatives(schema).find_map(properties))
}

fn array_items(schema: &Json) -> Option<&Json> {
    schema
        .get("items")
        .or_else(|| alternatives(schema).find_map(array_items))
}

/// An optional field's schema is "this or null".
fn alternatives(schema: &Json) -> impl Iterator<Item = &Json> {
    schema
        .get("anyOf")
        .and_then(Json::as_array)
        .into_iter()
        .flatten()
}
