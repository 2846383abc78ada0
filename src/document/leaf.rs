//! A leaf that is read or keeps its problem, and a section that knows where it began.

use std::borrow::Cow;
use std::ops::{Deref, Range};

use schemars::{JsonSchema, Schema, SchemaGenerator, json_schema};
use serde::{Deserialize, Deserializer};
use toml::{Spanned, Value};

use crate::units::{Measure, UnitProblem, meant, parse};

/// What a leaf of a document can hold.
pub trait LeafValue: Sized {
    /// Reads the value.
    ///
    /// # Errors
    /// What was found, what is allowed and what to write.
    fn read(value: &Value) -> Result<Self, UnitProblem>;

    /// JSON Schema of the leaf.
    fn schema() -> Schema;
}

/// One field of a document: its value or what is wrong with it, and where it stands.
#[derive(Debug, Clone)]
pub struct Leaf<T> {
    value: Result<T, UnitProblem>,
    written: String,
    span: Range<usize>,
}

impl<T> Leaf<T> {
    /// What stands in the document, in words.
    pub fn written(&self) -> &str {
        &self.written
    }

    /// The value, or what is wrong with it.
    pub fn value(&self) -> Result<&T, &UnitProblem> {
        self.value.as_ref()
    }

    /// Byte range in the text.
    pub fn span(&self) -> Range<usize> {
        self.span.clone()
    }
}

impl<'de, T: LeafValue> Deserialize<'de> for Leaf<T> {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        let spanned = Spanned::<Value>::deserialize(deserializer)?;
        let value = spanned.get_ref();
        Ok(Self {
            value: T::read(value),
            written: describe(value),
            span: spanned.span(),
        })
    }
}

impl<T: LeafValue> JsonSchema for Leaf<T> {
    fn inline_schema() -> bool {
        true
    }

    fn schema_name() -> Cow<'static, str> {
        Cow::Borrowed("Leaf")
    }

    fn json_schema(_: &mut SchemaGenerator) -> Schema {
        T::schema()
    }
}

/// A table of a document, with the place of its header.
#[derive(Debug, Clone)]
pub struct Section<T> {
    value: T,
    span: Range<usize>,
}

impl<T> Section<T> {
    /// Byte range of the header in the text.
    pub fn span(&self) -> Range<usize> {
        self.span.clone()
    }
}

impl<T> Deref for Section<T> {
    type Target = T;

    fn deref(&self) -> &T {
        &self.value
    }
}

impl<'de, T: Deserialize<'de>> Deserialize<'de> for Section<T> {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        let spanned = Spanned::<T>::deserialize(deserializer)?;
        let span = spanned.span();
        Ok(Self {
            value: spanned.into_inner(),
            span,
        })
    }
}

impl<T: JsonSchema> JsonSchema for Section<T> {
    fn inline_schema() -> bool {
        T::inline_schema()
    }

    fn schema_name() -> Cow<'static, str> {
        T::schema_name()
    }

    fn json_schema(generator: &mut SchemaGenerator) -> Schema {
        T::json_schema(generator)
    }
}

/// Says what a TOML value is, the value included.
pub(super) fn describe(value: &Value) -> String {
    match value {
        Value::String(text) => format!("\"{text}\""),
        Value::Integer(number) => format!("the bare number {number}"),
        Value::Float(number) => format!("the bare number {number}"),
        Value::Boolean(yes) => format!("{yes}"),
        Value::Datetime(when) => format!("the date or time {when}"),
        Value::Array(_) => "a list".to_owned(),
        Value::Table(_) => "a table".to_owned(),
    }
}

/// A value of another type than the one that is read here.
fn other_type(value: &Value, allowed: &str, example: &str) -> UnitProblem {
    UnitProblem {
        found: describe(value),
        allowed: allowed.to_owned(),
        remedy: format!("write for example {example}"),
    }
}

impl<M: Measure> LeafValue for M {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        let units = || {
            let symbols: Vec<_> = M::UNITS.iter().map(|unit| unit.symbol).collect();
            format!(
                "{} with its unit in quotes ({})",
                M::NAME,
                symbols.join(", ")
            )
        };
        match value {
            Value::String(text) => parse(text),
            Value::Integer(_) | Value::Float(_) => {
                let number = value
                    .as_float()
                    .or(value.as_integer().map(|whole| whole as f64));
                Err(UnitProblem {
                    found: describe(value),
                    allowed: units(),
                    remedy: format!(
                        "write \"{}\" if that is what is meant",
                        meant::<M>(number.unwrap_or(0.0))
                    ),
                })
            }
            _ => Err(other_type(value, &units(), &format!("\"{}\"", M::EXAMPLE))),
        }
    }

    fn schema() -> Schema {
        let symbols: Vec<_> = M::UNITS.iter().map(|unit| unit.symbol).collect();
        json_schema!({
            "type": "string",
            "format": "quantity",
            "x-units": symbols,
            "examples": [M::EXAMPLE],
        })
    }
}

impl LeafValue for String {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        match value {
            Value::String(text) if !text.trim().is_empty() => Ok(text.clone()),
            Value::String(_) => Err(other_type(value, "a text that is not empty", "\"a label\"")),
            _ => Err(other_type(value, "a text in quotes", "\"a label\"")),
        }
    }

    fn schema() -> Schema {
        json_schema!({ "type": "string" })
    }
}

impl LeafValue for bool {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        value
            .as_bool()
            .ok_or_else(|| other_type(value, "true or false", "true"))
    }

    fn schema() -> Schema {
        json_schema!({ "type": "boolean" })
    }
}

/// A plain number: only where the field's name says what it counts.
impl LeafValue for f64 {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        match value {
            Value::Float(number) if number.is_finite() => Ok(*number),
            // Exact up to 2^53, beyond every count that a document holds.
            Value::Integer(number) => Ok(*number as f64),
            _ => Err(other_type(value, "a plain number", "1.3")),
        }
    }

    fn schema() -> Schema {
        json_schema!({ "type": "number" })
    }
}

impl LeafValue for i64 {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        value
            .as_integer()
            .ok_or_else(|| other_type(value, "a whole number", "4"))
    }

    fn schema() -> Schema {
        json_schema!({ "type": "integer" })
    }
}

impl<T: LeafValue> LeafValue for Vec<T> {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        match value {
            Value::Array(items) => items.iter().map(T::read).collect(),
            _ => Err(other_type(value, "a list in brackets", "[\"…\", \"…\"]")),
        }
    }

    fn schema() -> Schema {
        json_schema!({ "type": "array", "items": T::schema() })
    }
}
