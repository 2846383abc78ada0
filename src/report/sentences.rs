//! The sentences: Markdown templates filled from the facts. One text for page, paper and terminal.

use std::collections::BTreeMap;

use minijinja::value::Serde;
use minijinja::{AutoEscape, Environment, Error, ErrorKind, Output, State, Value};

use super::facts::facts;
use super::pictures::{Drawn, Material};
use crate::locale::Locale;
use crate::units::as_set;

/// A section of the report.
#[derive(Debug, Clone)]
pub(super) struct Section {
    /// Name in links.
    pub id: &'static str,
    /// Heading.
    pub title: String,
    /// Text in Markdown.
    pub markdown: String,
}

macro_rules! sections {
    ($($id:literal, $title:literal;)*) => {
        /// Every section in order: name, heading, template.
        const SECTIONS: &[(&str, &str, &str)] = &[
            $(($id, $title, include_str!(concat!("sections/", $id, ".md")))),*
        ];
    };
}

sections! {
    "answer", "";
    "change", "What would change it";
    "next", "What to find out next";
    "odds", "How sure it is";
    "levers", "What you could change";
    "home", "The home";
    "weather", "The weather, and how good it is";
    "systems", "Each system";
    "air-ground", "Air against ground";
    "money", "Money";
    "years", "Over the years";
    "carbon", "Carbon";
    "cold", "Cold weather, comfort and hot water";
    "hour", "The coldest hour, worked through";
    "meter", "What the meters should read";
    "before", "Before you go ahead";
    "cautions", "Cautions";
    "limits", "Limits of the method";
    "findings", "Findings";
    "assumed", "What was assumed";
    "glossary", "Words";
    "origin", "Where this is from";
}

/// Sections that make the first page.
pub(super) const FIRST_PAGE: usize = 3;
const MACROS: &str = include_str!("sections/macros.md");
/// Longest name of a system where many stand together, characters.
const SHORT: usize = 70;

/// The sections of the report, the question first.
///
/// # Errors
/// When a template is wrong, which the tests exclude.
pub(super) fn sections(material: &Material<'_>, drawn: &[Drawn]) -> Result<Vec<Section>, Error> {
    let facts = Value::from(Serde(facts(material)));
    let environment = environment(material, drawn)?;
    let question = environment.render_str(QUESTION, &facts)?;
    SECTIONS
        .iter()
        .map(|(id, title, _)| {
            let template = environment.get_template(&format!("{id}.md"))?;
            let title = if title.is_empty() {
                question.clone()
            } else {
                (*title).to_owned()
            };
            Ok(Section {
                id,
                title,
                markdown: template.render(&facts)?,
            })
        })
        .collect()
}

/// The heading of the report; plain text, no Markdown.
const QUESTION: &str = "{% if choices|any_has('rated_output_kw') %}Would a heat pump be cheaper to run{% else %}What would be cheaper to run{% endif %} \
than {{ 'the ' ~ today.kind_words }} of today?";

fn environment<'a>(material: &Material<'_>, drawn: &[Drawn]) -> Result<Environment<'a>, Error> {
    let mut environment = Environment::new();
    environment.set_auto_escape_callback(|name| {
        if name.ends_with(".md") {
            AutoEscape::Custom("markdown".into())
        } else {
            AutoEscape::None
        }
    });
    environment.set_formatter(write_escaped);
    environment.add_template("macros.md", MACROS)?;
    for (id, _, text) in SECTIONS {
        let text = format!("{{% import \"macros.md\" as m %}}{text}");
        environment.add_template_owned(format!("{id}.md"), text)?;
    }
    let captions: BTreeMap<String, String> = drawn
        .iter()
        .map(|drawn| (drawn.name.clone(), drawn.caption.clone()))
        .collect();
    let there: Vec<String> = captions.keys().cloned().collect();
    environment.add_function("abreast", move |names: Vec<String>| {
        let names = names.iter().filter(|name| there.contains(name));
        let pictures: String = names.map(|name| format!("![]({name})")).collect();
        Value::from_safe_string(format!("\n{pictures}\n"))
    });
    environment.add_function("picture", move |name: String| {
        Value::from_safe_string(match captions.get(&name) {
            Some(caption) => format!("\n![{}]({name})\n", escaped(caption)),
            None => String::new(),
        })
    });
    add_filters(
        &mut environment,
        material.locale,
        &material.estimate.currency,
    );
    Ok(environment)
}

fn add_filters(environment: &mut Environment<'_>, locale: Locale, currency: &str) {
    let marks = locale.marks;
    let of_the_place = currency.to_owned();
    let currency = currency.to_owned();
    let money = move |amount: f64, decimals: usize| marks.money_to(&currency, amount, decimals);
    // What is missing is told by a dash, never by a nought.
    let told = |value: &Value, write: &dyn Fn(f64) -> String| {
        number(value).map_or_else(|| "–".to_owned(), write)
    };
    environment.add_filter("n", move |value: Value, decimals: usize| {
        told(&value, &|v| marks.number(v, decimals))
    });
    environment.add_filter("as_set", move |value: Value| {
        told(&value, &|v| marks.localized(&as_set(v)))
    });
    environment.add_filter("percent", move |value: Value, decimals: usize| {
        told(&value, &|v| {
            format!("{}\u{a0}%", marks.number(v * 100.0, decimals))
        })
    });
    let write = money.clone();
    environment.add_filter("money", move |amount: Value| {
        told(&amount, &|v| write(v, 0))
    });
    let write = money.clone();
    environment.add_filter("against", move |saving: Value| {
        told(&saving, &|saving| difference(saving, &|v| write(v, 0)))
    });
    environment.add_filter("carbon_against", move |saving: Value| {
        told(&saving, &|saving| {
            difference(saving, &|kg| format!("{}\u{a0}kg", marks.number(kg, 0)))
        })
    });
    let write = money.clone();
    environment.add_filter("against_today", move |saving: Value| {
        told(&saving, &|saving| {
            let words = difference(saving, &|v| write(v, 0));
            let than = if words.ends_with(" as") { "" } else { " than" };
            format!("{words}{than} today")
        })
    });
    let write = money.clone();
    environment.add_filter("more_or_less", move |more: Value| {
        told(&more, &|more| difference(-more, &|v| write(v, 0)))
    });
    environment.add_filter(
        "show",
        move |value: Value, kind: &str| -> Result<String, Error> {
            if value.is_undefined() || value.is_none() {
                return Ok("–".to_owned());
            }
            if kind == "text" {
                return Ok(marks.localized(&value.to_string()));
            }
            let number = f64::try_from(value)?;
            match kind {
                "money" => Ok(money(number, 0)),
                "money2" => Ok(money(number, 2)),
                "money3" => Ok(money(number, 3)),
                "int" => Ok(marks.number(number, 0)),
                "dec1" => Ok(marks.number(number, 1)),
                "dec2" => Ok(marks.number(number, 2)),
                "percent" => Ok(format!("{}\u{a0}%", marks.number(number * 100.0, 0))),
                "set" => Ok(marks.localized(&format!("{}\u{a0}°C", as_set(number)))),
                _ => Err(Error::new(
                    ErrorKind::InvalidOperation,
                    format!("no way to show “{kind}”"),
                )),
            }
        },
    );
    environment.add_filter("localized", move |text: &str| {
        locale.told(text, &of_the_place)
    });
    environment.add_filter("file", |text: &str| file(text));
    environment.add_filter("short", |text: &str| short(text));
    environment.add_filter("capitalized", |text: &str| {
        let mut letters = text.chars();
        letters.next().map_or_else(String::new, |first| {
            first.to_uppercase().chain(letters).collect::<String>()
        })
    });
    environment.add_filter("either", move |parts: Vec<String>| {
        let parts: Vec<_> = parts.iter().map(|part| marks.localized(part)).collect();
        match parts.split_last() {
            None => String::new(),
            Some((only, [])) => only.clone(),
            Some((last, rest)) => format!("{}, or {last}", rest.join(", ")),
        }
    });
    environment.add_filter(
        "any_has",
        |systems: &Value, field: &str| -> Result<bool, Error> {
            for system in systems.try_iter()? {
                let value = system.get_attr(field)?;
                if !value.is_undefined() && !value.is_none() {
                    return Ok(true);
                }
            }
            Ok(false)
        },
    );
}

/// A value as a number, where it is one.
fn number(value: &Value) -> Option<f64> {
    f64::try_from(value.clone()).ok()
}

/// A saving in words: so much less, so much more, or about the same when it would be written as nothing.
fn difference(saving: f64, write: &dyn Fn(f64) -> String) -> String {
    let amount = write(saving.abs());
    if amount == write(0.0) {
        "about the same as".to_owned()
    } else if saving > 0.0 {
        format!("{amount} less")
    } else {
        format!("{amount} more")
    }
}

/// The path of a file without steps back: where a brief names `../tariffs/gas.toml`, `tariffs/gas.toml` beside its own folder.
pub(super) fn file(path: &str) -> String {
    let mut parts: Vec<&str> = Vec::new();
    for part in path.split('/') {
        let back = parts.last().is_some_and(|last| !matches!(*last, "" | ".."));
        match part {
            "." => {}
            ".." if back => {
                parts.pop();
            }
            part => parts.push(part),
        }
    }
    parts.join("/")
}

/// A name cut where many stand together.
fn short(text: &str) -> String {
    if text.chars().count() <= SHORT {
        return text.to_owned();
    }
    let cut: String = text.chars().take(SHORT - 1).collect();
    format!("{}…", cut.trim_end())
}

/// Writes a value; text from outside cannot become Markdown.
fn write_escaped(
    out: &mut Output<'_>,
    state: &mut State<'_, '_>,
    value: &Value,
) -> Result<(), Error> {
    if value.is_undefined() || value.is_none() {
        return Ok(());
    }
    let text = value.to_string();
    let markdown = matches!(state.auto_escape(), AutoEscape::Custom(_));
    let written = if markdown && !value.is_safe() {
        out.write_str(&escaped(&text))
    } else {
        out.write_str(&text)
    };
    written.map_err(Error::from)
}

/// Text as Markdown that reads as the same text: one line, every mark of punctuation escaped (CommonMark 2.4 allows it for all of
/// ASCII), nothing that turns the reading direction.
fn escaped(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in crate::chart::plain_line(text).chars() {
        if c.is_ascii_punctuation() {
            out.push('\\');
        }
        out.push(c);
    }
    out
}
