//! The commonest form of a stamp, read at fixed places: it is what makes reading thirty years fast.

const DAY_S: i64 = 86_400;

/// The commonest form, `2024-01-31 07:30` or with seconds, read at fixed places; anything else is left to the general way.
pub(super) fn iso(text: &[u8]) -> Option<i64> {
    let minutes: &[u8; 16] = text.get(..16)?.try_into().ok()?;
    let [y1, y2, y3, y4, s1, m1, m2, s2, d1, d2, t, h1, h2, c, n1, n2] = *minutes;
    let second = match text[16..] {
        [] => 0,
        [b':', a, b] => two(a, b)?,
        _ => return None,
    };
    let (month, day) = (two(m1, m2)?, two(d1, d2)?);
    let year = two(y1, y2)? * 100 + two(y3, y4)?;
    let (hour, minute) = (two(h1, h2)?, two(n1, n2)?);
    let separated = matches!(s1, b'-' | b'/') && s1 == s2 && matches!(t, b'T' | b' ') && c == b':';
    // Only days that every month has: the others are looked up in the calendar.
    let plain = separated
        && (1..=12).contains(&month)
        && (1..=28).contains(&day)
        && (1800..=2200).contains(&year)
        && hour < 24
        && minute < 60
        && second < 60;
    plain.then(|| {
        let days = days_before(i64::from(year), i64::from(month), i64::from(day));
        days * DAY_S + i64::from(hour * 3600 + minute * 60 + second)
    })
}

fn two(a: u8, b: u8) -> Option<u32> {
    let (a, b) = (a.wrapping_sub(b'0'), b.wrapping_sub(b'0'));
    (a < 10 && b < 10).then(|| u32::from(a) * 10 + u32::from(b))
}

/// Days from 1970-01-01 to a date of the Gregorian calendar after year 0, counted in years that begin in March.
fn days_before(year: i64, month: i64, day: i64) -> i64 {
    let year = if month <= 2 { year - 1 } else { year };
    let of_year = (153 * ((month + 9) % 12) + 2) / 5 + day - 1;
    year * 365 + year / 4 - year / 100 + year / 400 + of_year - 719_468
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn what_has_another_form_is_left_alone() {
        assert_eq!(iso(b"1970-01-02T00:01"), Some(86_460));
        assert_eq!(iso(b"1970/01/02 00:01:02"), Some(86_462));
        for text in [
            "1970-01-02",
            "1970-01-02T00:01Z",
            "1970-01-02T24:00",
            "1970-01/02 00:01",
            "1970-01-31T00:00",
        ] {
            assert_eq!(iso(text.as_bytes()), None, "{text}");
        }
    }

    proptest! {
        /// The short way is chrono's calendar.
        #[test]
        fn the_short_way_counts_as_the_calendar_does(day in 0i64..146_000, minute in 0i64..1440) {
            let seconds = day * DAY_S + minute * 60 - 50 * 365 * DAY_S;
            let text = chrono::DateTime::from_timestamp(seconds, 0).unwrap().format("%Y-%m-%d %H:%M").to_string();
            if let Some(short) = iso(text.as_bytes()) {
                prop_assert_eq!(short, seconds);
            } else {
                prop_assert!(text[8..10].parse::<u32>().unwrap() > 28 || !(1800..=2200).contains(&text[..4].parse().unwrap()));
            }
        }
    }
}
