//! Figures and sentences on the terminal in the form of a place.

use crate::locale::Locale;

/// How the figures and sentences of an answer are written.
pub(super) struct Told<'a> {
    locale: &'a Locale,
    currency: &'a str,
}

impl<'a> Told<'a> {
    pub(super) fn new(locale: &'a Locale, currency: &'a str) -> Self {
        Self { locale, currency }
    }

    pub(super) fn currency(&self) -> &str {
        self.currency
    }

    /// A figure with so many decimals.
    pub(super) fn n(&self, value: f64, decimals: usize) -> String {
        self.locale.marks.number(value, decimals)
    }

    /// An amount in whole units.
    pub(super) fn money(&self, amount: f64) -> String {
        self.locale.marks.money(self.currency, amount)
    }

    /// An amount with so many decimals.
    pub(super) fn money_to(&self, amount: f64, decimals: usize) -> String {
        self.locale.marks.money_to(self.currency, amount, decimals)
    }

    /// A whole difference with its sign.
    pub(super) fn signed(&self, value: f64) -> String {
        let text = self.n(value, 0);
        let plus = if text.starts_with('−') || text == "0" {
            ""
        } else {
            "+"
        };
        format!("{plus}{text}")
    }

    /// A difference of money with its sign.
    pub(super) fn signed_money(&self, amount: f64) -> String {
        let plus = if amount >= 0.5 { "+" } else { "" };
        format!("{plus}{}", self.money(amount))
    }

    /// A sentence of the answer in the form of the place; a true minus before a figure.
    pub(super) fn said(&self, sentence: &str) -> String {
        let words = sentence.split(' ').map(|word| {
            let rest = word.strip_prefix('-');
            let figure = rest.filter(|rest| rest.starts_with(|c: char| c.is_ascii_digit()));
            figure.map_or_else(|| word.to_owned(), |figure| format!("−{figure}"))
        });
        let sentence = words.collect::<Vec<_>>().join(" ");
        self.locale.told(&sentence, self.currency)
    }
}
