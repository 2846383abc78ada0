//! Words for messages.

/// A text short enough for a message, on one line.
pub(super) fn shorten(text: &str) -> String {
    const MOST: usize = 80;
    let mut start: String = text
        .chars()
        .take(MOST)
        .map(|c| if c.is_control() { ' ' } else { c })
        .collect();
    if text.chars().nth(MOST).is_some() {
        start.push('…');
    }
    start
}

/// `1 field`, `3 fields`.
pub(super) fn count(number: usize, what: &str) -> String {
    format!("{number} {what}{}", if number == 1 { "" } else { "s" })
}
