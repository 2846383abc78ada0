//! The time of day as files write it, with the offset that may follow it.

/// A time of day.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Clock {
    pub seconds: i64,
    /// Offset from UTC, seconds east, when the text carries one.
    pub offset_s: Option<i32>,
    /// Whether the hour was written as 24.
    pub twenty_four: bool,
}

/// Reads a time of day: `07:30`, `7.30`, `0730`, `07`, `07:30:15.5 PM`, `24:00`, `07:30Z`, `07:30+01:00`.
pub(super) fn clock(text: &[u8]) -> Option<Clock> {
    let (mut hour, rest) = number(text, 6)?;
    let digits = text.len() - rest.len();
    let (mut minute, mut second, mut rest) = (0, 0, rest);
    match digits {
        1 | 2 => {
            if let Some(after) = after_colon(rest) {
                (minute, rest) = two_digits(after)?;
                if let Some(after) = after_colon(rest) {
                    (second, rest) = two_digits(after)?;
                    if let [b'.' | b',', fraction @ ..] = rest {
                        let digits = fraction.iter().take_while(|b| b.is_ascii_digit()).count();
                        rest = &fraction[digits..];
                    }
                }
            }
        }
        3 | 4 => (hour, minute) = (hour / 100, hour % 100),
        6 => (hour, minute, second) = (hour / 10_000, hour / 100 % 100, hour % 100),
        _ => return None,
    }
    rest = rest.trim_ascii_start();
    if let [a, b'M' | b'm', after @ ..] = rest
        && matches!(a, b'A' | b'a' | b'P' | b'p')
    {
        if !(1..=12).contains(&hour) {
            return None;
        }
        let afternoon = matches!(a, b'P' | b'p');
        hour = hour % 12 + if afternoon { 12 } else { 0 };
        rest = after.trim_ascii_start();
    }
    let offset_s = offset(rest)?;
    let within = hour < 24 || (hour == 24 && minute == 0 && second == 0);
    // Second 60 is a leap second; it is read as the end of its minute.
    if !within || minute > 59 || second > 60 {
        return None;
    }
    Some(Clock {
        seconds: hour * 3600 + minute * 60 + second,
        offset_s,
        twenty_four: hour == 24,
    })
}

fn after_colon(text: &[u8]) -> Option<&[u8]> {
    match text.first()? {
        b':' | b'.' | b'h' => Some(&text[1..]),
        _ => None,
    }
}

/// Reads the offset that ends a stamp; the outer nothing means that what stands there is no offset.
fn offset(text: &[u8]) -> Option<Option<i32>> {
    let east = match text {
        [] => return Some(None),
        b"Z" | b"z" | b"UTC" | b"GMT" => return Some(Some(0)),
        [b'+', ..] => 1,
        [b'-', ..] => -1,
        _ => return None,
    };
    let (number, rest) = number(&text[1..], 4)?;
    let digits = text.len() - 1 - rest.len();
    let (hours, minutes) = match (digits, rest) {
        (1 | 2, []) => (number, 0),
        (4, []) => (number / 100, number % 100),
        (1 | 2, [b':', rest @ ..]) => {
            let (minutes, rest) = two_digits(rest)?;
            if !rest.is_empty() {
                return None;
            }
            (number, minutes)
        }
        _ => return None,
    };
    if hours > 14 || minutes > 59 {
        return None;
    }
    Some(Some(
        east * i32::try_from(hours * 3600 + minutes * 60).ok()?,
    ))
}

fn two_digits(text: &[u8]) -> Option<(i64, &[u8])> {
    let (number, rest) = number(text, 2)?;
    Some((number, rest))
}

/// Reads up to `most` digits; more digits than that are not a number here.
pub(super) fn number(text: &[u8], most: usize) -> Option<(i64, &[u8])> {
    let mut value: i64 = 0;
    let mut digits = 0;
    for &byte in text {
        if !byte.is_ascii_digit() {
            break;
        }
        digits += 1;
        if digits > most {
            return None;
        }
        value = value * 10 + i64::from(byte - b'0');
    }
    (digits > 0).then(|| (value, &text[digits..]))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn times_of_day_in_every_spelling() {
        for (text, seconds) in [
            ("7", 25_200),
            ("07", 25_200),
            ("07:30", 27_000),
            ("7.30", 27_000),
            ("7h30", 27_000),
            ("0730", 27_000),
            ("073015", 27_015),
            ("07:30:15.5", 27_015),
            ("7:30 AM", 27_000),
            ("12:30 AM", 1800),
            ("12:30 pm", 45_000),
            ("24:00", 86_400),
            ("07:30Z", 27_000),
        ] {
            assert_eq!(
                clock(text.as_bytes()).map(|clock| clock.seconds),
                Some(seconds),
                "{text}"
            );
        }
        for text in [
            "",
            "noon",
            "25",
            "07:60",
            "24:01",
            "13:00 PM",
            "0:00 AM",
            "07:30X",
            "07:30+99:00",
            "12345",
        ] {
            assert!(clock(text.as_bytes()).is_none(), "{text}");
        }
    }
}
