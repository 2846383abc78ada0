//! Words for messages.

/// A text short enough for a message.
pub(super) fn shorten(text: &str) -> String {
    const MOST: usize = 120;
    if text.chars().count() <= MOST {
        return text.to_owned();
    }
    let start: String = text.chars().take(MOST).collect();
    format!("{start}…")
}

/// `1 field`, `3 fields`.
pub(super) fn count(number: usize, what: &str) -> String {
    format!("{number} {what}{}", if number == 1 { "" } else { "s" })
}
