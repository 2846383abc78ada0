//! Colours that stay apart for every reader, and the second cue that does without them.
//!
//! The eight series colours were found by a search that kept them apart in CIELAB for normal, protanopic and
//! deuteranopic sight while their lightness rises in equal steps, so that they also differ in grey. Areas carry
//! a hatch, lines a dash and points a shape besides, so nothing rests on colour alone.

/// A colour as red, green, blue, each 0 to 255.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Colour(pub u8, pub u8, pub u8);

impl Colour {
    /// This colour mixed towards white; `share` 0 leaves it, 1 is white.
    pub(crate) fn lighter(self, share: f64) -> Self {
        let mix = |c: u8| (f64::from(c) + (255.0 - f64::from(c)) * share).round() as u8;
        Self(mix(self.0), mix(self.1), mix(self.2))
    }

    /// The text colour, ink or white, that reads better on this colour.
    pub(crate) fn text_on(self) -> Self {
        if luminance(self) > 0.22 { INK } else { WHITE }
    }
}

/// Paper.
pub const WHITE: Colour = Colour(255, 255, 255);
/// Text and the strongest lines.
pub const INK: Colour = Colour(0x1c, 0x23, 0x2e);
/// Secondary text; at least 4.5:1 on white.
pub const MUTED: Colour = Colour(0x55, 0x5f, 0x6d);
/// Grid lines.
pub const GRID: Colour = Colour(0xdf, 0xe3, 0xe9);
/// Axis lines and quiet outlines.
pub const AXIS: Colour = Colour(0x97, 0xa0, 0xad);

/// Deep blue.
pub const NAVY: Colour = Colour(0x1b, 0x3b, 0x7b);
/// Brown.
pub const BROWN: Colour = Colour(0x63, 0x4d, 0x1b);
/// Blue-green.
pub const TEAL: Colour = Colour(0x26, 0x6d, 0x71);
/// Dark yellow.
pub const OCHRE: Colour = Colour(0x94, 0x70, 0x0d);
/// Bright blue.
pub const AZURE: Colour = Colour(0x38, 0x8e, 0xe9);
/// Pale red.
pub const CORAL: Colour = Colour(0xe5, 0x87, 0x76);
/// Pale violet-blue.
pub const PERIWINKLE: Colour = Colour(0xa4, 0xb6, 0xde);
/// Pale green.
pub const MINT: Colour = Colour(0xa2, 0xd7, 0xc3);

/// How an area is hatched.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Hatch {
    /// No hatch.
    Plain,
    /// Lines rising to the right.
    Rising,
    /// Lines falling to the right.
    Falling,
    /// Both.
    Crossed,
    /// Level lines.
    Level,
    /// Upright lines.
    Upright,
}

/// How a line is broken.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Dash {
    /// Unbroken.
    Solid,
    /// Long dashes.
    Long,
    /// Short dashes.
    Short,
    /// Dots.
    Dotted,
    /// A dash and a dot in turn.
    Alternating,
}

impl Dash {
    /// Lengths drawn and left out in turn.
    pub(crate) fn lengths(self) -> &'static [f64] {
        match self {
            Dash::Solid => &[],
            Dash::Long => &[12.0, 5.0],
            Dash::Short => &[6.0, 4.0],
            Dash::Dotted => &[2.0, 4.0],
            Dash::Alternating => &[10.0, 4.0, 2.0, 4.0],
        }
    }
}

/// The shape of a point.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Mark {
    /// Filled circle.
    Circle,
    /// Filled square.
    Square,
    /// Filled triangle, point up.
    Triangle,
    /// Filled square on its corner.
    Diamond,
    /// Open circle.
    Ring,
    /// Open square.
    Frame,
    /// Open triangle.
    Delta,
    /// Two crossing strokes.
    Cross,
}

/// Everything that tells one series from another.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Series {
    /// Colour of line, point and area.
    pub colour: Colour,
    /// Second cue of an area.
    pub hatch: Hatch,
    /// Second cue of a line.
    pub dash: Dash,
    /// Second cue of a point.
    pub mark: Mark,
}

/// Number of different series a picture can tell apart.
pub const SERIES: usize = 8;

/// The look of series `index`; neighbours in this order differ most.
pub fn series(index: usize) -> Series {
    const ALL: [Series; SERIES] = [
        look(NAVY, Hatch::Plain, Dash::Solid, Mark::Circle),
        look(CORAL, Hatch::Rising, Dash::Long, Mark::Square),
        look(TEAL, Hatch::Falling, Dash::Short, Mark::Triangle),
        look(AZURE, Hatch::Level, Dash::Alternating, Mark::Diamond),
        look(BROWN, Hatch::Crossed, Dash::Dotted, Mark::Ring),
        look(MINT, Hatch::Upright, Dash::Solid, Mark::Frame),
        look(OCHRE, Hatch::Rising, Dash::Long, Mark::Delta),
        look(PERIWINKLE, Hatch::Falling, Dash::Short, Mark::Cross),
    ];
    ALL[index % SERIES]
}

const fn look(colour: Colour, hatch: Hatch, dash: Dash, mark: Mark) -> Series {
    Series {
        colour,
        hatch,
        dash,
        mark,
    }
}

/// Relative luminance, 0 black to 1 white (Web Content Accessibility Guidelines 2.2, definition of relative luminance).
pub(crate) fn luminance(colour: Colour) -> f64 {
    let [r, g, b] = linear(colour);
    0.2126 * r + 0.7152 * g + 0.0722 * b
}

/// Linear-light red, green, blue of an sRGB colour (IEC 61966-2-1).
fn linear(colour: Colour) -> [f64; 3] {
    [colour.0, colour.1, colour.2].map(|c| {
        let c = f64::from(c) / 255.0;
        if c <= 0.04045 {
            c / 12.92
        } else {
            ((c + 0.055) / 1.055).powf(2.4)
        }
    })
}

/// Simulated colour sight, for the tests of colours.
#[cfg(test)]
pub(crate) mod sight {
    use super::{Colour, linear};

    pub(crate) type Matrix = [[f64; 3]; 3];

    /// Machado, Oliveira and Fernandes 2009, "A physiologically-based model for simulation of color vision
    /// deficiency", severity 1.0 (doi 10.1109/TVCG.2009.113); equal to PyPI colorspacious 1.1.2.
    pub(crate) const PROTANOPIA: Matrix = [
        [0.152286, 1.052583, -0.204868],
        [0.114503, 0.786281, 0.099216],
        [-0.003882, -0.048116, 1.051998],
    ];
    pub(crate) const DEUTERANOPIA: Matrix = [
        [0.367322, 0.860646, -0.227968],
        [0.280085, 0.672501, 0.047413],
        [-0.011820, 0.042940, 0.968881],
    ];
    pub(crate) const NORMAL: Matrix = [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];

    /// CIELAB under D65 (CIE 15; sRGB primaries of IEC 61966-2-1) of a colour seen through `sight`.
    pub(crate) fn lab(colour: Colour, sight: &Matrix) -> [f64; 3] {
        let rgb = linear(colour);
        let seen =
            sight.map(|row| (row[0] * rgb[0] + row[1] * rgb[1] + row[2] * rgb[2]).clamp(0.0, 1.0));
        let dot = |m: [f64; 3]| m[0] * seen[0] + m[1] * seen[1] + m[2] * seen[2];
        let f = |t: f64| {
            if t > 216.0 / 24389.0 {
                t.cbrt()
            } else {
                (24389.0 / 27.0 * t + 16.0) / 116.0
            }
        };
        let x = f(dot([0.4124564, 0.3575761, 0.1804375]) / 0.95047);
        let y = f(dot([0.2126729, 0.7151522, 0.0721750]));
        let z = f(dot([0.0193339, 0.1191920, 0.9503041]) / 1.08883);
        [116.0 * y - 16.0, 500.0 * (x - y), 200.0 * (y - z)]
    }
}

#[cfg(test)]
mod tests {
    use super::sight::{DEUTERANOPIA, Matrix, NORMAL, PROTANOPIA, lab};
    use super::*;

    const SERIES_COLOURS: [Colour; SERIES] =
        [NAVY, BROWN, TEAL, OCHRE, AZURE, CORAL, PERIWINKLE, MINT];

    fn distance(a: Colour, b: Colour, sight: &Matrix) -> f64 {
        let (a, b) = (lab(a, sight), lab(b, sight));
        (0..3).map(|i| (a[i] - b[i]).powi(2)).sum::<f64>().sqrt()
    }

    /// 2.3 is the just noticeable difference of CIELAB (Mahy et al. 1994); eight times that reads at a glance.
    const APART: f64 = 18.0;

    #[test]
    fn series_stay_apart_for_every_kind_of_sight() {
        for (name, sight) in [
            ("normal", NORMAL),
            ("protan", PROTANOPIA),
            ("deutan", DEUTERANOPIA),
        ] {
            for (i, &a) in SERIES_COLOURS.iter().enumerate() {
                for &b in &SERIES_COLOURS[..i] {
                    let d = distance(a, b, &sight);
                    assert!(d > APART, "{name}: {a:?} and {b:?} are {d:.1} apart");
                }
            }
        }
    }

    #[test]
    fn series_differ_in_grey() {
        let mut lightness: Vec<f64> = SERIES_COLOURS.iter().map(|&c| lab(c, &NORMAL)[0]).collect();
        lightness.sort_by(f64::total_cmp);
        for pair in lightness.windows(2) {
            assert!(pair[1] - pair[0] > 6.0, "lightness {pair:?}");
        }
    }

    #[test]
    fn a_scale_that_looks_alike_in_grey_would_be_found() {
        // The measure itself must be able to fail: a red and a green that deuteranopes confuse.
        let (red, green) = (Colour(0xc0, 0x60, 0x30), Colour(0x80, 0x82, 0x30));
        assert!(distance(red, green, &NORMAL) > APART);
        assert!(distance(red, green, &DEUTERANOPIA) < APART);
    }

    #[test]
    fn series_have_a_second_cue() {
        for i in 0..SERIES {
            for j in 0..i {
                let (a, b) = (series(i), series(j));
                assert_ne!(a.colour, b.colour);
                assert_ne!(a.mark, b.mark, "points of {i} and {j}");
            }
        }
        // Up to five series the hatches and dashes differ as well.
        for i in 0..5 {
            for j in 0..i {
                assert_ne!(series(i).hatch, series(j).hatch);
                assert_ne!(series(i).dash, series(j).dash);
            }
        }
    }

    /// Contrast ratio (Web Content Accessibility Guidelines 2.2, success criterion 1.4.3: 4.5 for text).
    fn contrast(a: Colour, b: Colour) -> f64 {
        let (a, b) = (luminance(a), luminance(b));
        (a.max(b) + 0.05) / (a.min(b) + 0.05)
    }

    #[test]
    fn text_is_readable_on_paper_and_on_every_series() {
        assert!((contrast(Colour(0, 0, 0), WHITE) - 21.0).abs() < 1e-9);
        assert!(contrast(INK, WHITE) > 7.0);
        assert!(contrast(MUTED, WHITE) > 4.5);
        for colour in SERIES_COLOURS {
            let c = contrast(colour, colour.text_on());
            assert!(c > 4.5, "text on {colour:?} has contrast {c:.2}");
        }
    }
}
