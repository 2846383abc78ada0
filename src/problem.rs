//! Where a problem is, what was found, what is allowed, what to write instead.
//!
//! Every reader collects all the [`Problem`]s of its input in one [`Problems`] and returns them together.
//! A [`Finding`] is not a refusal: it tells what was odd and what was done about it.

use std::fmt;
use std::sync::Arc;

use serde::Serialize;

/// A place in an input: a file, and where known a line, a column and a field.
#[derive(Debug, Clone, Default, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct Place {
    /// The file as the user named it; absent for command-line arguments.
    pub file: Option<Arc<str>>,
    /// Line, from 1.
    pub line: Option<usize>,
    /// Column in characters, from 1.
    pub column: Option<usize>,
    /// Dotted field path or column name.
    pub field: Option<String>,
}

impl Place {
    /// A place that is a whole file.
    pub fn file(name: impl Into<Arc<str>>) -> Self {
        Self {
            file: Some(name.into()),
            ..Self::default()
        }
    }

    /// A place that is an argument or a field with no file, such as `--condensing`.
    pub fn field(name: impl Into<String>) -> Self {
        Self {
            field: Some(name.into()),
            ..Self::default()
        }
    }

    /// The same place, narrowed to a line.
    pub fn at_line(mut self, line: usize) -> Self {
        self.line = Some(line);
        self
    }

    /// The same place, narrowed to a field.
    pub fn in_field(mut self, field: impl Into<String>) -> Self {
        self.field = Some(field.into());
        self
    }
}

impl fmt::Display for Place {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let mut gap = "";
        if let Some(file) = &self.file {
            write!(f, "{file}")?;
            gap = ", ";
        }
        if let Some(line) = self.line {
            write!(f, "{}line {line}", if gap.is_empty() { "" } else { " " })?;
            if let Some(column) = self.column {
                write!(f, " column {column}")?;
            }
            gap = ", ";
        }
        if let Some(field) = &self.field {
            write!(f, "{gap}{field}")?;
        }
        Ok(())
    }
}

/// Something in an input that cannot be used.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Problem {
    /// Where it stands.
    pub place: Place,
    /// What was found there, the offending value included.
    pub found: String,
    /// What would be accepted, with its bound.
    pub allowed: String,
    /// What to write or do instead; empty when `allowed` already says it.
    pub remedy: String,
}

impl Problem {
    /// A problem with all its parts.
    pub fn new(
        place: Place,
        found: impl Into<String>,
        allowed: impl Into<String>,
        remedy: impl Into<String>,
    ) -> Self {
        Self {
            place,
            found: found.into(),
            allowed: allowed.into(),
            remedy: remedy.into(),
        }
    }
}

impl fmt::Display for Problem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}: {}", self.place, self.found)?;
        if !self.allowed.is_empty() {
            write!(f, "\n  allowed: {}", self.allowed)?;
        }
        if !self.remedy.is_empty() {
            write!(f, "\n  remedy:  {}", self.remedy)?;
        }
        Ok(())
    }
}

/// All the problems of an input, in the order of their places.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Problems(Vec<Problem>);

impl Problems {
    /// No problems yet.
    pub fn new() -> Self {
        Self::default()
    }

    /// Adds one.
    pub fn push(&mut self, problem: Problem) {
        self.0.push(problem);
    }

    /// Adds all of another collection.
    pub fn extend(&mut self, other: Problems) {
        self.0.extend(other.0);
    }

    /// Keeps the value of a result, or its problems.
    pub fn take<T>(&mut self, result: Result<T, Problems>) -> Option<T> {
        result.map_err(|problems| self.extend(problems)).ok()
    }

    /// Whether nothing was found.
    pub fn is_empty(&self) -> bool {
        self.0.is_empty()
    }

    /// How many were found.
    pub fn len(&self) -> usize {
        self.0.len()
    }

    /// The problems, one by one.
    pub fn iter(&self) -> impl Iterator<Item = &Problem> {
        self.0.iter()
    }

    /// The value when there are no problems, else the problems sorted by place.
    ///
    /// # Errors
    /// Everything that was collected.
    pub fn or<T>(mut self, value: T) -> Result<T, Problems> {
        if self.is_empty() {
            return Ok(value);
        }
        self.0.sort_by(|a, b| a.place.cmp(&b.place));
        self.0.dedup();
        Err(self)
    }
}

impl From<Problem> for Problems {
    fn from(problem: Problem) -> Self {
        Self(vec![problem])
    }
}

impl fmt::Display for Problems {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (i, problem) in self.0.iter().enumerate() {
            if i > 0 {
                writeln!(f)?;
            }
            write!(f, "{problem}")?;
        }
        Ok(())
    }
}

impl std::error::Error for Problems {}

/// How much a finding matters to the answer.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Severity {
    /// Worth knowing; the answer stands.
    Note,
    /// The answer may be off because of it.
    Warning,
    /// Someone could be hurt or left cold: shown first.
    Caution,
}

/// Something odd in the input or the result, and what was done about it.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct Finding {
    /// How much it matters.
    pub severity: Severity,
    /// File it was found in, where there is one.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub file: Option<String>,
    /// Line in that file, from 1.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub line: Option<usize>,
    /// What was found.
    pub what: String,
    /// What was done about it, or what the reader should do.
    pub done: String,
}

impl Finding {
    /// A finding about the result rather than a place in a file.
    pub fn new(severity: Severity, what: impl Into<String>, done: impl Into<String>) -> Self {
        Self {
            severity,
            file: None,
            line: None,
            what: what.into(),
            done: done.into(),
        }
    }

    /// The same finding, with its file and line.
    pub fn at(mut self, place: &Place) -> Self {
        self.file = place.file.as_deref().map(str::to_owned);
        self.line = place.line;
        self
    }
}

impl fmt::Display for Finding {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let place = Place {
            file: self.file.as_deref().map(Arc::from),
            line: self.line,
            ..Place::default()
        };
        let label = match self.severity {
            Severity::Note => "note",
            Severity::Warning => "warning",
            Severity::Caution => "caution",
        };
        write!(f, "{label}: ")?;
        if self.file.is_some() {
            write!(f, "{place}: ")?;
        }
        write!(f, "{}", self.what)?;
        if !self.done.is_empty() {
            write!(f, "; {}", self.done)?;
        }
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_problem_names_place_value_bound_and_remedy() {
        let place = Place::file("weather.csv")
            .at_line(4127)
            .in_field("temperature");
        let problem = Problem::new(
            place,
            "61.0 °C",
            "outdoor air from -60 to 55 °C",
            "is the file in °F? say so in the brief",
        );
        assert_eq!(
            problem.to_string(),
            "weather.csv line 4127, temperature: 61.0 °C\n  allowed: outdoor air from -60 to 55 °C\n  remedy:  is the file in °F? say so in the brief"
        );
    }

    #[test]
    fn problems_come_back_sorted_and_once() {
        let at = |line| Problem::new(Place::file("a").at_line(line), "x", "", "");
        let mut problems = Problems::new();
        problems.push(at(9));
        problems.push(at(2));
        problems.push(at(9));
        let back = problems.or(()).unwrap_err();
        let lines: Vec<_> = back.iter().map(|p| p.place.line).collect();
        assert_eq!(lines, [Some(2), Some(9)]);
    }
}
