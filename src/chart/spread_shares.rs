//! What makes the spread: the share of every unknown with its limits, the greatest first.

use super::font::{self, Weight};
use super::frame::Axis;
use super::label::{Anchor, BODY, Type};
use super::numbers::Marks;
use super::palette::{AXIS, GRID, INK, PERIWINKLE};
use super::scene::{MARGIN, Scene};
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

const ROW: f64 = 46.0;

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
    let top = scene.heading(title, &subtitle) + 6.0;
    let bottom = top + ROW * unknowns.len() as f64 + 6.0;
    scene.height = bottom + 52.0;
    let highest = all().fold(0.05, f64::max) * 100.0;
    let axis = Axis::linear("Share of the spread, %", 0.0, highest, 6, marks);
    let (left, right) = (MARGIN + 14.0, scene.width - MARGIN - 22.0);
    let at =
        |share: f64| left + (share * 100.0 - axis.low) / (axis.high - axis.low) * (right - left);
    for (value, text) in &axis.ticks {
        let x = at(value / 100.0);
        scene.line(&[(x, top), (x, bottom)], GRID, 1.0);
        scene.tick(text, (x, bottom + 18.0), Anchor::Middle);
    }
    scene.line(&[(left, bottom), (right, bottom)], AXIS, 1.2);
    scene.text(
        &axis.title,
        (right, bottom + 38.0),
        Anchor::End,
        Type::small(),
    );
    for (i, unknown) in unknowns.iter().enumerate() {
        let line = top + ROW * i as f64 + 18.0;
        let (first, last) = (line + 8.0, line + 20.0);
        let figure = figure(unknown);
        let bold = Type::new(BODY, Weight::Bold, INK);
        let room = scene.width - 2.0 * MARGIN - bold.width(&figure) - 28.0;
        let name = font::fit(named(&unknown.label), BODY, Weight::Regular, room);
        scene.plate(&name, (MARGIN, line), Anchor::Start, Type::body());
        scene.plate(&figure, (scene.width - MARGIN, line), Anchor::End, bold);
        let corners = [
            (left, first),
            (at(unknown.share), first),
            (at(unknown.share), last),
            (left, last),
        ];
        scene.area(&corners, PERIWINKLE, 1.0);
        scene.outline(&corners, INK, 1.2);
        let y = (first + last) / 2.0;
        scene.line(&[(at(unknown.low), y), (at(unknown.high), y)], INK, 2.0);
        for end in [unknown.low, unknown.high] {
            scene.line(&[(at(end), y - 4.0), (at(end), y + 4.0)], INK, 2.0);
        }
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
