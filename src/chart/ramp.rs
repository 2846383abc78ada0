//! A colour scale from cold to warm for heat maps: its lightness rises all the way, so it reads in grey and for every
//! kind of colour sight.

use super::palette::Colour;

/// Colours at equal distances along the scale.
const STOPS: [Colour; 6] = [
    Colour(0x16, 0x22, 0x52),
    Colour(0x2a, 0x4d, 0x8c),
    Colour(0x33, 0x7c, 0x9d),
    Colour(0x68, 0xac, 0x9c),
    Colour(0xb9, 0xd2, 0x94),
    Colour(0xf9, 0xf1, 0xc6),
];

/// The colour at `share` of the scale, 0 coldest to 1 warmest.
pub(crate) fn colour(share: f64) -> Colour {
    let last = STOPS.len() - 1;
    let place = if share.is_finite() {
        share.clamp(0.0, 1.0)
    } else {
        0.0
    } * last as f64;
    let index = (place.floor() as usize).min(last - 1);
    let (a, b, t) = (STOPS[index], STOPS[index + 1], place - index as f64);
    let mix = |a: u8, b: u8| (f64::from(a) + (f64::from(b) - f64::from(a)) * t).round() as u8;
    Colour(mix(a.0, b.0), mix(a.1, b.1), mix(a.2, b.2))
}

#[cfg(test)]
mod tests {
    use super::super::palette::sight;
    use super::*;

    #[test]
    fn lightness_rises_in_even_steps_for_every_kind_of_sight() {
        for (name, matrix) in [
            ("normal", sight::NORMAL),
            ("protan", sight::PROTANOPIA),
            ("deutan", sight::DEUTERANOPIA),
        ] {
            let lightness: Vec<f64> = (0..=20)
                .map(|i| sight::lab(colour(f64::from(i) / 20.0), &matrix)[0])
                .collect();
            for pair in lightness.windows(2) {
                // About 80 units over twenty steps: none less than half or more than double its share.
                let step = pair[1] - pair[0];
                assert!((2.0..8.0).contains(&step), "{name}: a step of {step:.1}");
            }
        }
    }

    #[test]
    fn ends_are_the_ends() {
        assert_eq!(colour(-3.0), STOPS[0]);
        assert_eq!(colour(1.0), STOPS[5]);
        assert_eq!(colour(f64::NAN), STOPS[0]);
    }
}
