//! Reading a whole document: syntax, structure, unknown fields; leaves are checked afterwards through [`Check`].

use std::marker::PhantomData;
use std::ops::Range;
use std::sync::Arc;

use schemars::generate::SchemaSettings;
use schemars::{JsonSchema, Schema};
use serde::de::DeserializeOwned;
use toml::Spanned;
use toml::de::{DeTable, DeValue, Deserializer, Error};

use super::check::Check;
use super::unknown::unknown_fields;
use crate::problem::{Place, Problem, Problems};

/// A text with its file name, able to turn a byte range into a place.
#[derive(Debug, Clone)]
pub struct Source {
    file: Arc<str>,
    text: Arc<str>,
    /// Every value's byte range and dotted path.
    fields: Vec<(Range<usize>, String)>,
}

impl Source {
    /// The file as the user named it.
    pub fn file(&self) -> &Arc<str> {
        &self.file
    }

    /// File, line, column and field of a byte range.
    pub fn place(&self, span: &Range<usize>) -> Place {
        let before = self.text.get(..span.start).unwrap_or(&self.text);
        let line_start = before.rfind('\n').map_or(0, |at| at + 1);
        Place {
            file: Some(self.file.clone()),
            line: Some(before.matches('\n').count() + 1),
            column: Some(before[line_start..].chars().count() + 1),
            field: self
                .fields
                .iter()
                .find(|(range, _)| range == span)
                .map(|(_, path)| path.clone()),
        }
    }
}

/// A kind of document, named by the struct that reads it.
pub struct Document<T>(PhantomData<T>);

impl<T: DeserializeOwned + JsonSchema> Document<T> {
    /// Reads a text; the leaves of what comes back are checked through the [`Check`] that comes with it, which already
    /// holds the unknown fields.
    ///
    /// # Errors
    /// All syntax errors at once; or unknown fields together with the first place where a table is not a table.
    pub fn read(file: &str, text: &str) -> Result<(T, Check), Problems> {
        let mut source = Source {
            file: file.into(),
            text: text.into(),
            fields: Vec::new(),
        };
        let (table, errors) = DeTable::parse_recoverable(text);
        let mut problems = Problems::new();
        for error in &errors {
            problems.push(syntax(error, &source));
        }
        problems.or(())?;
        name_table(table.get_ref(), "", &mut source.fields);
        let mut problems = unknown_fields(&Self::schema(), table.get_ref(), &source);
        match T::deserialize(Deserializer::from(table)) {
            Ok(raw) => Ok((raw, Check::new(source, problems))),
            Err(error) => {
                problems.push(structure(&error, &source));
                Err(problems.or(()).err().unwrap_or_default())
            }
        }
    }

    /// The JSON Schema of the document, all parts inline.
    pub fn schema() -> Schema {
        let settings = SchemaSettings::draft2020_12().with(|s| s.inline_subschemas = true);
        settings.into_generator().into_root_schema_for::<T>()
    }
}

fn syntax(error: &Error, source: &Source) -> Problem {
    let place = error
        .span()
        .map_or_else(|| Place::file(source.file.clone()), |s| source.place(&s));
    Problem::new(
        place,
        error.message(),
        "TOML 1.1",
        "quantities are texts in quotes, tables have [headers]",
    )
}

/// A value where a table is expected or the reverse; the library names our own structs, which mean nothing to a reader.
fn structure(error: &Error, source: &Source) -> Problem {
    let place = error
        .span()
        .map_or_else(|| Place::file(source.file.clone()), |s| source.place(&s));
    let message = error.message();
    let (found, allowed) = match message
        .strip_prefix("invalid type: ")
        .and_then(|m| m.split_once(", expected "))
    {
        Some((found, expected)) if expected.starts_with("struct") => (found, "a table"),
        Some((found, expected)) if expected.starts_with("a sequence") => {
            (found, "a list, or tables under [[…]]")
        }
        Some((found, expected)) => (found, expected),
        None => (message, ""),
    };
    Problem::new(
        place,
        found,
        allowed,
        "a table is written under its [header], a repeated one under [[header]]",
    )
}

fn name_table(table: &DeTable<'_>, path: &str, fields: &mut Vec<(Range<usize>, String)>) {
    for (key, value) in table.iter() {
        let name: &str = key.get_ref();
        let path = if path.is_empty() {
            name.to_owned()
        } else {
            format!("{path}.{name}")
        };
        fields.push((key.span(), path.clone()));
        name_value(value, path, fields);
    }
}

fn name_value(
    value: &Spanned<DeValue<'_>>,
    path: String,
    fields: &mut Vec<(Range<usize>, String)>,
) {
    match value.get_ref() {
        DeValue::Table(table) => name_table(table, &path, fields),
        DeValue::Array(items) => {
            for (i, item) in items.iter().enumerate() {
                name_value(item, format!("{path}[{}]", i + 1), fields);
            }
        }
        _ => {}
    }
    fields.push((value.span(), path));
}
