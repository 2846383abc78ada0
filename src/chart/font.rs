//! The typeface of every picture, and how wide a text is in it.
//!
//! Two weights of one open-licensed family lie in `src/chart/font/` (licence and recipe beside them). They are
//! compiled in, so a PNG needs no system font, and every SVG carries them as a web font, so it looks the same
//! wherever it is opened. Widths come from the same files, so a label box is known before anything is drawn.
//!
//! They hold Latin, Greek and Cyrillic with their extensions. As web fonts the further letters are files of their own, which a text carries
//! only where it uses one of them. What they lack is shown by the fonts of whoever opens an SVG or page; a PNG and paper print a mark.

use super::ChartError;
use ab_glyph::{Font as _, FontRef};
use std::sync::OnceLock;

/// Family name under which the fonts are embedded and registered.
pub const FAMILY: &str = "Winterledger Sans";
/// What a viewer that ignores embedded fonts may fall back to, for the `font-family` of an SVG or page.
pub const FAMILY_STACK: &str = "Winterledger Sans, Noto Sans, DejaVu Sans, sans-serif";
/// The regular weight as an OpenType file.
pub const REGULAR: &[u8] = include_bytes!("font/regular.otf");
/// The bold weight as an OpenType file.
pub const BOLD: &[u8] = include_bytes!("font/bold.otf");
const REGULAR_WEB: &str = include_str!("font/regular.woff2.base64");
const BOLD_WEB: &str = include_str!("font/bold.woff2.base64");
const REGULAR_MORE: &str = include_str!("font/regular-more.woff2.base64");
const BOLD_MORE: &str = include_str!("font/bold-more.woff2.base64");
/// Characters of the further files, as the `unicode-range` of CSS.
const MORE_RANGE: &str = include_str!("font/more-range.txt");
/// What is printed in place of characters that no font here has.
pub(crate) const UNPRINTABLE: &str = "[?]";

/// Room kept, in ems, for a character the fonts lack: a viewer's own font will show it in an SVG, about this wide.
const UNKNOWN_EM: f32 = 1.6;

/// Weight of a text.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Weight {
    /// Body text.
    Regular,
    /// Titles and the figures that matter most.
    Bold,
}

/// The `@font-face` rules for an SVG or a page that shows `text`, fonts included.
pub fn css(text: &str) -> String {
    let face = |weight: &str, data: &str, more: &str| {
        format!(
            "@font-face{{font-family:\"{FAMILY}\";font-weight:{weight};{more}\
             src:url(data:font/woff2;base64,{data}) format(\"woff2\")}}"
        )
    };
    let mut css = face("normal", REGULAR_WEB, "") + &face("bold", BOLD_WEB, "");
    if text.chars().any(is_further) {
        let range = format!("unicode-range:{MORE_RANGE};");
        css += &face("normal", REGULAR_MORE, &range);
        css += &face("bold", BOLD_MORE, &range);
    }
    css
}

/// Whether a character stands in the further files.
fn is_further(c: char) -> bool {
    static RANGES: OnceLock<Vec<(u32, u32)>> = OnceLock::new();
    let ranges = RANGES.get_or_init(|| {
        let read = |code: &str| u32::from_str_radix(code, 16).ok();
        let runs = MORE_RANGE.split(',').filter_map(|run| {
            let run = run.trim().strip_prefix("U+")?;
            let (low, high) = run.split_once('-').unwrap_or((run, run));
            Some((read(low)?, read(high)?))
        });
        runs.collect()
    });
    let code = u32::from(c);
    ranges
        .iter()
        .any(|(low, high)| (*low..=*high).contains(&code))
}

/// `text` with a mark in place of each run of characters that the font lacks.
pub(crate) fn printable(text: &str, mark: &str) -> String {
    let mut out = String::with_capacity(text.len());
    let mut lacking = false;
    for c in text.chars() {
        let lacks = !has(c);
        if !lacks {
            out.push(c);
        } else if !lacking {
            out.push_str(mark);
        }
        lacking = lacks;
    }
    out
}

/// The parsed font of a weight.
///
/// # Errors
/// Only when the embedded file itself is damaged.
pub(crate) fn face(weight: Weight) -> Result<&'static FontRef<'static>, ChartError> {
    static FACES: [OnceLock<Option<FontRef<'static>>>; 2] = [OnceLock::new(), OnceLock::new()];
    let (slot, bytes) = match weight {
        Weight::Regular => (&FACES[0], REGULAR),
        Weight::Bold => (&FACES[1], BOLD),
    };
    slot.get_or_init(|| FontRef::try_from_slice(bytes).ok())
        .as_ref()
        .ok_or(ChartError::Font)
}

/// Width of `text` set at `size`, in the unit of `size`.
pub(crate) fn width(text: &str, size: f64, weight: Weight) -> f64 {
    let Ok(font) = face(weight) else { return 0.0 };
    let em = font.units_per_em().unwrap_or(1000.0);
    let ems: f32 = text.chars().map(|c| advance_em(font, em, c)).sum();
    f64::from(ems) * size
}

/// Advance of one character in ems.
pub(crate) fn advance_em(font: &FontRef<'_>, units_per_em: f32, c: char) -> f32 {
    match font.glyph_id(c) {
        id if id.0 == 0 => UNKNOWN_EM,
        id => font.h_advance_unscaled(id) / units_per_em,
    }
}

/// The glyph and the advance in ems of every character of a printable text.
#[cfg(feature = "pdf")]
pub(crate) fn glyphs(text: &str, weight: Weight) -> Vec<(u16, f32)> {
    let Ok(font) = face(weight) else {
        return Vec::new();
    };
    let em = font.units_per_em().unwrap_or(1000.0);
    text.chars()
        .map(|c| (font.glyph_id(c).0, advance_em(font, em, c)))
        .collect()
}

/// Whether the font has a sign for `c`, or needs none.
pub(crate) fn has(c: char) -> bool {
    c.is_whitespace() || face(Weight::Regular).is_ok_and(|font| font.glyph_id(c).0 != 0)
}

/// `text` as it may be drawn: one line, without control characters, without marks that would turn the reading
/// direction of what follows, without characters that XML forbids.
pub fn clean(text: &str) -> String {
    let turns = |c: char| {
        matches!(c, '\u{61C}' | '\u{200B}' | '\u{200E}' | '\u{200F}' | '\u{FEFF}'
            | '\u{202A}'..='\u{202E}' | '\u{2060}'..='\u{206F}')
    };
    let forbidden = |c: char| matches!(c, '\u{FFFE}' | '\u{FFFF}');
    let spaced: String = text
        .chars()
        .filter(|&c| !turns(c) && !forbidden(c))
        .map(|c| if c.is_control() { ' ' } else { c })
        .collect();
    // Only plain white space is folded: a no-break space keeps a number together with its unit.
    spaced
        .split([' ', '\u{2028}', '\u{2029}'])
        .filter(|word| !word.is_empty())
        .collect::<Vec<_>>()
        .join(" ")
}

/// `text` shortened with an ellipsis until it is at most `room` wide.
pub(crate) fn fit(text: &str, size: f64, weight: Weight, room: f64) -> String {
    let text = clean(text);
    if width(&text, size, weight) <= room {
        return text;
    }
    let mut kept = String::new();
    let mut used = width("…", size, weight);
    for c in text.chars() {
        used += width(c.encode_utf8(&mut [0; 4]), size, weight);
        if used > room {
            break;
        }
        kept.push(c);
    }
    format!("{}…", kept.trim_end())
}

/// `text` broken between words into at most `lines` lines no wider than `room`; the last is shortened if need be.
pub(crate) fn wrap(text: &str, size: f64, weight: Weight, room: f64, lines: usize) -> Vec<String> {
    let text = clean(text);
    let mut words = text.split(' ').peekable();
    let mut out: Vec<String> = Vec::new();
    while words.peek().is_some() && out.len() + 1 < lines.max(1) {
        let mut line = String::new();
        while let Some(word) = words.peek() {
            let longer = if line.is_empty() {
                (*word).to_string()
            } else {
                format!("{line} {word}")
            };
            if !line.is_empty() && width(&longer, size, weight) > room {
                break;
            }
            line = longer;
            words.next();
        }
        out.push(fit(&line, size, weight, room));
    }
    let rest: Vec<&str> = words.collect();
    if !rest.is_empty() {
        out.push(fit(&rest.join(" "), size, weight, room));
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn both_weights_have_every_sign_the_pictures_use() {
        for weight in [Weight::Regular, Weight::Bold] {
            let font = face(weight).expect("embedded font");
            for c in "0123456789£€$¥°–—−²³₂Δ×≤≥≈·…→’%/ηλÅŁșЖ\u{202f}\u{a0}".chars()
            {
                assert_ne!(font.glyph_id(c).0, 0, "{c:?} is missing in {weight:?}");
            }
        }
    }

    #[test]
    fn what_the_font_lacks_is_marked_once_a_run() {
        let text = "Ngôi nhà ấm, θερμό, Жылыту, Ŵyneb";
        assert_eq!(printable(text, UNPRINTABLE), text);
        assert_eq!(
            printable("家 の 中 no. 5", UNPRINTABLE),
            "[?] [?] [?] no. 5"
        );
        assert_eq!(printable("東京home", UNPRINTABLE), "[?]home");
        assert_eq!(
            printable("a\u{a0}b\u{202f}c", UNPRINTABLE),
            "a\u{a0}b\u{202f}c"
        );
    }

    #[test]
    fn digits_are_all_as_wide_as_each_other() {
        for weight in [Weight::Regular, Weight::Bold] {
            let one = width("1", 100.0, weight);
            assert!(one > 0.0);
            for digit in "0234567890".chars() {
                // The bold four of the typeface itself is 0.16 % narrower than the other digits.
                let ratio = width(&digit.to_string(), 100.0, weight) / one;
                assert!((ratio - 1.0).abs() < 0.002, "{digit} {ratio}");
            }
        }
    }

    #[test]
    fn width_grows_with_size_and_text() {
        let w = |t, s| width(t, s, Weight::Regular);
        assert!((w("Winter", 20.0) - 2.0 * w("Winter", 10.0)).abs() < 1e-4);
        assert!(w("Winter ledger", 10.0) > w("Winter", 10.0));
    }

    #[test]
    fn clean_removes_what_would_break_a_page_or_turn_a_line() {
        assert_eq!(clean("a\tb\n\u{0}c"), "a b c");
        assert_eq!(clean("safe\u{202E}exe"), "safeexe");
        assert_eq!(clean("  5\u{a0}kW  "), "5\u{a0}kW");
        assert_eq!(clean("<b>&\"שלום\""), "<b>&\"שלום\"");
    }

    #[test]
    fn fitted_text_fits_and_says_it_was_cut() {
        let long = "x".repeat(400);
        let short = fit(&long, 15.0, Weight::Regular, 120.0);
        assert!(short.ends_with('…') && width(&short, 15.0, Weight::Regular) <= 120.0);
        assert_eq!(fit("short", 15.0, Weight::Regular, 120.0), "short");
    }

    #[test]
    fn wrapped_text_keeps_its_words_and_its_width() {
        let text = "one two three four five six seven eight nine ten";
        let lines = wrap(text, 15.0, Weight::Regular, 120.0, 9);
        assert_eq!(lines.join(" "), text);
        assert!(
            lines
                .iter()
                .all(|l| width(l, 15.0, Weight::Regular) <= 120.0)
        );
        assert_eq!(wrap(text, 15.0, Weight::Regular, 120.0, 2).len(), 2);
    }

    #[test]
    fn css_carries_both_weights() {
        let usual = css("Gas boiler, 5 °C, Ж");
        assert_eq!(usual.matches("@font-face").count(), 2);
        // "wOF2", the signature of the web font format (WOFF2 recommendation, section 4.1), in base64.
        assert_eq!(usual.matches("base64,d09GM").count(), 2);
        // Vietnamese, polytonic Greek and Kazakh letters need the further files.
        for letter in ["ệ", "ἀ", "Қ"] {
            let further = css(letter);
            assert_eq!(further.matches("@font-face").count(), 4, "{letter}");
            assert_eq!(further.matches("unicode-range:U+").count(), 2);
        }
    }
}
