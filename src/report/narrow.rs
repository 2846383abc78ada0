//! What a phone shows instead of a picture that is too wide for it: the same figures as bars, one below the other.

use std::fmt::Write as _;

use super::page::escaped;
use super::pictures::Bar;

/// The bars as a list; each bar is as wide as its total beside the largest.
pub(super) fn bars(bars: &[Bar]) -> String {
    let total = |bar: &Bar| bar.parts.iter().map(|part| part.amount).sum::<f64>();
    let largest = bars.iter().map(total).fold(0.0, f64::max);
    // Writing to a String cannot fail.
    let mut out = String::from("<ul class=\"narrow\">\n");
    for bar in bars {
        let _ = write!(
            out,
            "<li><span class=\"bar-name\">{}</span>\n<svg viewBox=\"0 0 100 5\" preserveAspectRatio=\"none\" aria-hidden=\"true\">",
            escaped(&bar.label)
        );
        let mut x = 0.0;
        for (i, part) in bar.parts.iter().enumerate() {
            let width = 100.0 * part.amount / largest;
            let _ = write!(
                out,
                "<rect class=\"part-{i}\" x=\"{x:.2}\" y=\"0\" width=\"{width:.2}\" height=\"5\"/>"
            );
            x += width;
        }
        let parts: Vec<_> = bar
            .parts
            .iter()
            .map(|part| format!("{} {}", part.name, part.written))
            .collect();
        let _ = writeln!(
            out,
            "</svg>\n<strong>{}</strong> <span>{}</span></li>",
            escaped(&bar.total),
            escaped(&parts.join(", "))
        );
    }
    out + "</ul>\n"
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::pictures::BarPart;

    #[test]
    fn the_largest_bar_takes_all_the_room_and_names_cannot_break_the_page() {
        let part = |name: &str, amount: f64| BarPart {
            name: name.to_owned(),
            amount,
            written: format!("{amount}"),
        };
        let html = bars(&[
            Bar {
                label: "</ul><b>".to_owned(),
                parts: vec![part("energy", 75.0), part("standing", 25.0)],
                total: "100".to_owned(),
            },
            Bar {
                label: "half".to_owned(),
                parts: vec![part("energy", 50.0)],
                total: "50".to_owned(),
            },
        ]);
        assert!(html.contains("x=\"75.00\" y=\"0\" width=\"25.00\""));
        assert!(html.contains("x=\"0.00\" y=\"0\" width=\"50.00\""));
        assert!(html.contains("&lt;/ul&gt;&lt;b&gt;") && !html.contains("<b>"));
    }
}
