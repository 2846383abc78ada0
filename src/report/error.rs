//! Why a report could not be made.

use std::fmt;

use crate::chart::ChartError;

/// Why a report could not be made.
#[derive(Debug)]
pub enum ReportError {
    /// A picture could not be drawn.
    Picture(ChartError),
    /// A sentence could not be filled in.
    Sentence(minijinja::Error),
    /// The pages could not be written.
    Paper(String),
}

impl From<ChartError> for ReportError {
    fn from(error: ChartError) -> Self {
        Self::Picture(error)
    }
}

impl From<minijinja::Error> for ReportError {
    fn from(error: minijinja::Error) -> Self {
        Self::Sentence(error)
    }
}

impl fmt::Display for ReportError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Picture(error) => error.fmt(f),
            Self::Paper(why) => write!(f, "the PDF of the report cannot be written: {why}"),
            // The alternate form names template and line.
            Self::Sentence(error) => {
                write!(f, "a sentence of the report cannot be written: {error:#}")
            }
        }
    }
}

impl std::error::Error for ReportError {}
