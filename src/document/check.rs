//! Taking the leaves out of a document, collecting every problem on the way.

use std::ops::Range;

use super::leaf::Leaf;
use super::read::Source;
use crate::bounds::Bound;
use crate::problem::{Place, Problem, Problems};
use crate::units::{Measure, UnitProblem};

/// The source of a document and the problems found in it so far.
#[derive(Debug)]
pub struct Check {
    source: Source,
    problems: Problems,
}

impl Check {
    pub(super) fn new(source: Source, problems: Problems) -> Self {
        Self { source, problems }
    }

    /// A check of the same text whose problems are its own, for what is only tried.
    pub fn aside(&self) -> Self {
        Self::new(self.source.clone(), Problems::new())
    }

    /// The text that is being checked.
    pub fn source(&self) -> &Source {
        &self.source
    }

    /// What was found so far.
    pub fn problems(&self) -> &Problems {
        &self.problems
    }

    /// The place of a byte range.
    pub fn place(&self, span: &Range<usize>) -> Place {
        self.source.place(span)
    }

    /// Adds a problem at a byte range.
    pub fn refuse(
        &mut self,
        span: &Range<usize>,
        found: impl Into<String>,
        allowed: impl Into<String>,
        remedy: impl Into<String>,
    ) {
        let place = self.place(span);
        self.problems
            .push(Problem::new(place, found, allowed, remedy));
    }

    /// Adds the problems of something read on the way, such as a file the document names.
    pub fn take<T>(&mut self, result: Result<T, Problems>) -> Option<T> {
        self.problems.take(result)
    }

    /// The value of a leaf when it is there and right.
    pub fn value<T: Clone>(&mut self, leaf: &Option<Leaf<T>>) -> Option<T> {
        let leaf = leaf.as_ref()?;
        match leaf.value() {
            Ok(value) => Some(value.clone()),
            Err(UnitProblem {
                found,
                allowed,
                remedy,
            }) => {
                self.refuse(&leaf.span(), found, allowed, remedy);
                None
            }
        }
    }

    /// A quantity within a bound, when it is there and right.
    pub fn within<M: Measure>(&mut self, leaf: &Option<Leaf<M>>, bound: &Bound) -> Option<M> {
        let value = self.value(leaf)?;
        self.number_within(leaf, value.canonical(), bound)
            .then_some(value)
    }

    /// A plain number within a bound, when it is there and right.
    pub fn plain_within(&mut self, leaf: &Option<Leaf<f64>>, bound: &Bound) -> Option<f64> {
        let value = self.value(leaf)?;
        self.number_within(leaf, value, bound).then_some(value)
    }

    fn number_within<T>(&mut self, leaf: &Option<Leaf<T>>, number: f64, bound: &Bound) -> bool {
        let holds = bound.holds(number);
        if let (false, Some(leaf)) = (holds, leaf) {
            let written = leaf.written().trim_start_matches("the bare number ");
            let canonical = format!("{} {}", tidy(number), bound.unit);
            let said = written.trim_matches('"').trim() == canonical.trim();
            let found = if said {
                written.to_owned()
            } else {
                format!("{written}, which is {canonical}")
            };
            self.refuse(
                &leaf.span(),
                found.trim_end(),
                bound.words(),
                "check the number and its unit",
            );
        }
        holds
    }

    /// Says that a field is missing from the table at a byte range.
    pub fn missing(&mut self, section: &Range<usize>, field: &str, example: &str) {
        let place = self.place(section).in_field(field);
        self.problems.push(Problem::new(
            place,
            format!("{field} is missing"),
            "",
            format!("write for example {field} = {example}"),
        ));
    }

    /// Says that a whole table is missing from the document.
    pub fn missing_table(&mut self, header: &str, content: &str) {
        let place = Place::file(self.source.file().clone());
        self.problems.push(Problem::new(
            place,
            format!("the table {header} is missing"),
            "",
            format!("write {header} and under it {content}"),
        ));
    }

    /// The value of a leaf that must be there.
    pub fn required<T: Clone>(
        &mut self,
        leaf: &Option<Leaf<T>>,
        section: &Range<usize>,
        field: &str,
        example: &str,
    ) -> Option<T> {
        if leaf.is_none() {
            self.missing(section, field, example);
        }
        self.value(leaf)
    }

    /// The value when no problem was found in the whole document.
    ///
    /// # Errors
    /// Everything that was found, sorted by place.
    pub fn finish<T>(self, value: Option<T>) -> Result<T, Problems> {
        let file = self.source.file().clone();
        self.problems.or(())?;
        // Reached only when a reader returns nothing without saying why: a fault of ours, told as such.
        value.ok_or_else(|| {
            Problem::new(
                Place::file(file),
                "the document could not be used, for a reason that was not recorded",
                "",
                "please report this file as a fault of the program",
            )
            .into()
        })
    }
}

/// A number without the noise of binary fractions.
fn tidy(number: f64) -> String {
    let rounded = (number * 1e6).round() / 1e6;
    if rounded == 0.0 && number != 0.0 {
        format!("{number:e}")
    } else {
        format!("{rounded}")
    }
}

#[cfg(test)]
mod tests {
    use schemars::JsonSchema;
    use serde::Deserialize;

    use super::*;
    use crate::bounds;
    use crate::document::{Document, Section};
    use crate::units::{HeatLossCoefficient, Temperature};

    #[derive(Debug, Deserialize, JsonSchema)]
    struct Brief {
        home: Section<Home>,
        #[serde(default)]
        choice: Vec<Section<Choice>>,
    }

    #[derive(Debug, Deserialize, JsonSchema)]
    struct Home {
        label: Option<Leaf<String>>,
        heat_loss: Option<Leaf<HeatLossCoefficient>>,
        emitters: Option<Section<Emitters>>,
    }

    #[derive(Debug, Deserialize, JsonSchema)]
    struct Emitters {
        flow: Option<Leaf<Temperature>>,
    }

    #[derive(Debug, Deserialize, JsonSchema)]
    struct Choice {
        flow: Option<Leaf<Temperature>>,
    }

    #[test]
    fn every_problem_of_a_document_is_told_at_once_with_its_place() {
        let text = "[home]\nlabel = 3\nheat_los = \"212 W/K\"\nheat_loss = 212\n[home.emitters]\nflow = \"500 °C\"\n\n[[choice]]\nflow = \"42\"\n[[choice]]\nflow = \"42 kW\"\ncolour = \"red\"\n";
        let (brief, mut check) = Document::<Brief>::read("brief.toml", text).unwrap();
        check.value(&brief.home.label);
        check.within(&brief.home.heat_loss, &bounds::HEAT_LOSS_W_PER_K);
        let emitters = brief.home.emitters.as_ref().unwrap();
        check.within(&emitters.flow, &bounds::FLOW_C);
        for choice in &brief.choice {
            check.within(&choice.flow, &bounds::FLOW_C);
        }
        let problems = check.finish(Some(())).unwrap_err();
        let told: Vec<_> = problems
            .iter()
            .map(|p| (p.place.line.unwrap(), p.place.field.clone().unwrap()))
            .collect();
        let expected = [
            (2, "home.label"),
            (3, "home.heat_los"),
            (4, "home.heat_loss"),
            (6, "home.emitters.flow"),
            (9, "choice[1].flow"),
            (11, "choice[2].flow"),
            (12, "choice[2].colour"),
        ];
        assert_eq!(told, expected.map(|(line, field)| (line, field.to_owned())));
        let text = problems.to_string();
        assert!(text.contains("did you mean \"heat_loss\"?"), "{text}");
        assert!(text.contains("write \"212 W/K\""), "{text}");
        assert!(
            text.contains("500 °C") && text.contains("flow temperature from 20 to 85 °C"),
            "{text}"
        );
    }

    #[test]
    fn syntax_errors_come_all_at_once() {
        let problems =
            Document::<Brief>::read("b", "a = \n[home\nlabel = \"x\"\nb = = 3\n").unwrap_err();
        assert!(problems.len() >= 2, "{problems}");
    }

    #[test]
    fn a_table_that_is_not_one_has_its_line() {
        let problems = Document::<Brief>::read("b", "\nhome = 3\n").unwrap_err();
        assert_eq!(
            problems.iter().next().unwrap().place.line,
            Some(2),
            "{problems}"
        );
    }

    #[test]
    fn a_missing_field_is_placed_at_its_table() {
        let (brief, mut check) = Document::<Brief>::read("b", "\n\n[home]\n").unwrap();
        check.required(
            &brief.home.label,
            &brief.home.span(),
            "home.label",
            "\"Mid-terrace\"",
        );
        let problems = check.finish(Some(())).unwrap_err();
        assert_eq!(
            problems.iter().next().unwrap().place.line,
            Some(3),
            "{problems}"
        );
    }

    proptest::proptest! {
        #[test]
        fn any_text_is_read_or_refused(text in "(\\[|\\]|=|\"|home|choice|\n|[a-z0-9 .{}])*") {
            if let Err(problems) = Document::<Brief>::read("b", &text) {
                proptest::prop_assert!(!problems.is_empty());
            }
        }
    }
}
