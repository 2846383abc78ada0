//! What makes the spread: the share of every unknown with its limits, the greatest first.

use super::font::{self, Weight};
use super::frame::Axis;
use super::label::{BODY, Type};
use super::numbers::Marks;
use super::palette::{INK, PERIWINKLE};
use super::rows::{FromTo, RowSizes, Rows};
use super::scene::Scene;
use super::{ChartError, Picture, finite, named};

const PICTURE: &str = "shares of the spread";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct SpreadShares {
    /// What is spread, for example "Saving in a year of Air source, larger radiators".
    pub outcome: String,
    /// The unknowns; they are drawn with the greatest share first.
    pub unknowns: Vec<UnknownShare>,
}

/// One unknown. Shares are 0 to 1.
#[derive(Debug, Clone, PartialEq)]
pub struct UnknownShare {
    /// Name.
    pub label: String,
    /// Share of the spread.
    pub share: f64,
    /// Lower limit of it.
    pub low: f64,
    /// Upper limit.
    pub high: f64,
}

const SIZES: RowSizes = RowSizes {
    row: 46.0,
    line: 18.0,
    left: 14.0,
};
const LIMITS: FromTo = FromTo {
    colour: INK,
    width: 2.0,
    across: 4.0,
    end_width: 2.0,
};

/// Draws the shares, ranked.
///
/// # Errors
/// [`ChartError::Empty`] without unknowns, [`ChartError::NotFinite`] for a share that is not a number.
pub fn spread_shares(data: &SpreadShares, marks: &Marks) -> Result<Picture, ChartError> {
    if data.unknowns.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no unknown was given",
        });
    }
    let all = || data.unknowns.iter().flat_map(|u| [u.share, u.low, u.high]);
    finite(PICTURE, all().map(|share| ("share", share)))?;
    let mut unknowns: Vec<&UnknownShare> = data.unknowns.iter().collect();
    unknowns.sort_by(|a, b| b.share.total_cmp(&a.share));

    let title = "What makes it uncertain";
    let outcome = font::fit(
        named(&data.outcome),
        super::label::SMALL,
        Weight::Regular,
        330.0,
    );
    let subtitle = format!("{outcome}: share of its spread that knowing one thing takes away.");
    let mut scene = Scene::of(marks);
    let highest = all().fold(0.05, f64::max) * 100.0;
    let axis = Axis::linear("Share of the spread, %", 0.0, highest, 6, marks);
    let rows = Rows::set(&mut scene, (title, &subtitle), axis, unknowns.len(), &SIZES);
    for (i, unknown) in unknowns.iter().enumerate() {
        let bold = Type::new(BODY, Weight::Bold, INK);
        rows.label(&mut scene, i, &unknown.label, (&figure(unknown), bold));
        let (first, last) = (rows.line(i) + 8.0, rows.line(i) + 20.0);
        let end = rows.at(unknown.share * 100.0);
        let corners = [
            (rows.left, first),
            (end, first),
            (end, last),
            (rows.left, last),
        ];
        scene.area(&corners, PERIWINKLE, 1.0);
        scene.outline(&corners, INK, 1.2);
        let limits = (unknown.low * 100.0, unknown.high * 100.0);
        rows.extent(&mut scene, limits, (first + last) / 2.0, &LIMITS);
    }
    let mut alt = format!(
        "{}: what makes its spread, the greatest share first.",
        named(&data.outcome)
    );
    for unknown in unknowns {
        alt += &format!(" {}: {}.", named(&unknown.label), figure(unknown));
    }
    Ok(Picture::new(title, alt, scene))
}

fn figure(unknown: &UnknownShare) -> String {
    let percent = |share: f64| share * 100.0;
    format!(
        "{:.0} % ({:.0}–{:.0})",
        percent(unknown.share),
        percent(unknown.low),
        percent(unknown.high)
    )
}
