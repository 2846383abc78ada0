//! How figures and dates are written in a place: marks, money, order of a date, size of paper.

use chrono::{Datelike as _, NaiveDate};

/// How a report is written in a place.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub struct Locale {
    /// Marks in numbers.
    pub marks: Marks,
    /// Order of a date.
    pub dates: DateOrder,
    /// Paper that it is printed on.
    pub paper: Paper,
}

impl Locale {
    /// The same for a page as wide as a phone.
    pub fn on_a_phone(self) -> Self {
        Self {
            marks: self.marks.on_a_phone(),
            ..self
        }
    }
}

impl Locale {
    /// A sentence written for a program in the form of the place: decimal marks, dates (`2024-01-14`), and amounts whose currency
    /// code stands behind them (`80 GBP`).
    pub fn told(&self, sentence: &str, currency: &str) -> String {
        let words = sentence.split(' ').collect::<Vec<_>>();
        let mut out: Vec<String> = Vec::with_capacity(words.len());
        for word in words {
            let bare = word.trim_end_matches(|c: char| c.is_ascii_punctuation());
            let behind = &word[bare.len()..];
            let amount = (bare == currency).then(|| out.last()?.parse::<f64>().ok());
            if let Some(amount) = amount.flatten() {
                let plus = out.pop().filter(|number| number.starts_with('+'));
                let money = self.marks.money(currency, amount) + behind;
                out.push(plus.map_or(money.clone(), |_| format!("+{money}")));
            } else if let Ok(date) = NaiveDate::parse_from_str(bare, "%Y-%m-%d") {
                out.push(self.dates.write(date) + behind);
            } else {
                out.push(self.marks.localized(word));
            }
        }
        out.join(" ")
    }
}

/// Order of a date.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub enum DateOrder {
    /// 14 January 2024.
    #[default]
    DayFirst,
    /// January 14, 2024.
    MonthFirst,
    /// 2024-01-14, as ISO 8601 writes it.
    YearFirst,
}

/// Size of paper.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub enum Paper {
    /// 210 mm × 297 mm, ISO 216.
    #[default]
    A4,
    /// 8.5 in × 11 in.
    Letter,
}

impl Paper {
    /// Width and height in points of 1/72 inch.
    pub fn points(self) -> (f64, f64) {
        match self {
            Self::A4 => (595.28, 841.89),
            Self::Letter => (612.0, 792.0),
        }
    }

    /// Its name in a style sheet.
    pub fn css(self) -> &'static str {
        match self {
            Self::A4 => "A4",
            Self::Letter => "letter",
        }
    }
}

/// English names of the months.
pub const MONTHS: [&str; 12] = [
    "January",
    "February",
    "March",
    "April",
    "May",
    "June",
    "July",
    "August",
    "September",
    "October",
    "November",
    "December",
];

impl DateOrder {
    /// A date in words or figures.
    pub fn write(self, date: NaiveDate) -> String {
        let month = MONTHS[date.month0() as usize];
        match self {
            Self::DayFirst => format!("{} {month} {}", date.day(), date.year()),
            Self::MonthFirst => format!("{month} {}, {}", date.day(), date.year()),
            Self::YearFirst => date.format("%Y-%m-%d").to_string(),
        }
    }
}

/// The marks of a place.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Marks {
    /// Between whole and fraction.
    pub decimal: char,
    /// Between thousands; none for none.
    pub thousands: Option<char>,
    /// Whether what is written must fit a page as wide as a phone; pictures are then drawn narrow.
    pub phone: bool,
}

impl Default for Marks {
    /// A point and a comma, as in English.
    fn default() -> Self {
        Self {
            decimal: '.',
            thousands: Some(','),
            phone: false,
        }
    }
}

impl Marks {
    /// The same marks for a page as wide as a phone.
    pub fn on_a_phone(self) -> Self {
        Self {
            phone: true,
            ..self
        }
    }

    /// `value` with so many decimals, a true minus sign, and no minus before a zero.
    pub fn number(&self, value: f64, decimals: usize) -> String {
        if !value.is_finite() {
            return "–".into();
        }
        let text = format!("{:.decimals$}", value.abs());
        let (whole, fraction) = text.split_once('.').unwrap_or((&text, ""));
        let mut out = String::new();
        if value < 0.0 && text.bytes().any(|b| b.is_ascii_digit() && b != b'0') {
            out.push('−');
        }
        for (i, digit) in whole.chars().enumerate() {
            if let Some(mark) = self.thousands
                && i > 0
                && (whole.len() - i).is_multiple_of(3)
            {
                out.push(mark);
            }
            out.push(digit);
        }
        if !fraction.is_empty() {
            out.push(self.decimal);
            out.push_str(fraction);
        }
        out
    }

    /// A sentence written with decimal points, with the mark of the place instead of each point between two digits.
    pub fn localized(&self, sentence: &str) -> String {
        if self.decimal == '.' {
            return sentence.to_owned();
        }
        let letters: Vec<char> = sentence.chars().collect();
        let digit = |at: Option<usize>| {
            at.and_then(|at| letters.get(at))
                .is_some_and(char::is_ascii_digit)
        };
        letters
            .iter()
            .enumerate()
            .map(|(i, c)| {
                let between = digit(i.checked_sub(1)) && digit(Some(i + 1));
                if *c == '.' && between {
                    self.decimal
                } else {
                    *c
                }
            })
            .collect()
    }

    /// A count with its noun: `1 hour`, `8,760 hours`.
    pub(crate) fn count(&self, n: usize, noun: &str) -> String {
        let plural = if n == 1 { "" } else { "s" };
        format!("{} {noun}{plural}", self.number(n as f64, 0))
    }

    /// An amount of money in whole units, the sign before the symbol: `−£1,234`, `1.234 kr`-like codes as `CHF 1,234`.
    pub fn money(&self, currency: &str, amount: f64) -> String {
        self.money_to(currency, amount, 0)
    }

    /// An amount of money with so many decimals.
    pub fn money_to(&self, currency: &str, amount: f64, decimals: usize) -> String {
        let number = self.number(amount, decimals);
        let (sign, digits) = match number.strip_prefix('−') {
            Some(rest) => ("−", rest),
            None => ("", number.as_str()),
        };
        format!("{sign}{}{digits}", symbol(currency))
    }
}

/// The sign written before an amount: the symbol of the three commonest codes (ISO 4217), else the code itself and a
/// space that does not break.
pub(crate) fn symbol(currency: &str) -> String {
    match currency {
        "GBP" => "£".into(),
        "EUR" => "€".into(),
        "USD" => "$".into(),
        other => {
            let code: String = other
                .chars()
                .filter(|c| c.is_alphanumeric())
                .take(LONGEST_CODE)
                .collect();
            if code.trim().is_empty() {
                String::new()
            } else {
                format!("{code}\u{a0}")
            }
        }
    }
}

/// Letters kept of a currency code; a real one has three.
const LONGEST_CODE: usize = 5;

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn dates_follow_their_order() {
        let date = NaiveDate::from_ymd_opt(2024, 1, 14).unwrap();
        assert_eq!(DateOrder::DayFirst.write(date), "14 January 2024");
        assert_eq!(DateOrder::MonthFirst.write(date), "January 14, 2024");
        assert_eq!(DateOrder::YearFirst.write(date), "2024-01-14");
    }

    #[test]
    fn a_sentence_takes_the_form_of_the_place() {
        let mut place = Locale::default();
        let said = "between 80 EUR and 1370 EUR cheaper, from 2024-01-14, 1.5 K; a EUR; +5 EUR.";
        assert_eq!(
            place.told(said, "EUR"),
            "between €80 and €1,370 cheaper, from 14 January 2024, 1.5 K; a EUR; +€5."
        );
        place.marks.decimal = ',';
        place.marks.thousands = Some('.');
        place.dates = DateOrder::YearFirst;
        assert_eq!(
            place.told(said, "EUR"),
            "between €80 and €1.370 cheaper, from 2024-01-14, 1,5 K; a EUR; +€5."
        );
    }

    #[test]
    fn numbers_are_written_as_people_write_them() {
        let en = Marks::default();
        assert_eq!(en.number(1234567.891, 2), "1,234,567.89");
        assert_eq!(en.number(-0.4, 0), "0");
        assert_eq!(en.number(-12.5, 1), "−12.5");
        assert_eq!(en.number(f64::NAN, 1), "–");
        let de = Marks {
            decimal: ',',
            thousands: Some('.'),
            phone: false,
        };
        assert_eq!(de.number(12345.6, 1), "12.345,6");
        assert_eq!(
            Marks {
                decimal: '.',
                thousands: None,
                phone: false,
            }
            .number(12345.6, 0),
            "12346"
        );
    }

    #[test]
    fn a_sentence_takes_the_mark_of_the_place() {
        let de = Marks {
            decimal: ',',
            thousands: Some('.'),
            phone: false,
        };
        let sentence = "electricity 0.5 % dearer (25.43 ct/kWh). 3 hours.";
        assert_eq!(
            de.localized(sentence),
            "electricity 0,5 % dearer (25,43 ct/kWh). 3 hours."
        );
        assert_eq!(Marks::default().localized(sentence), sentence);
    }

    #[test]
    fn money_has_its_sign_first() {
        let en = Marks::default();
        assert_eq!(en.money("GBP", -1234.4), "−£1,234");
        assert_eq!(en.money("EUR", 0.0), "€0");
        assert_eq!(en.money("CHF", 12.0), "CHF\u{a0}12");
        assert_eq!(en.money_to("USD", 3.5, 2), "$3.50");
    }
}
