//! A scene replayed on the two outputs of plotters: SVG text and PNG bytes.
//!
//! Plotters counts in whole pixels, so the SVG is drawn ten times larger under a view box, and the PNG twice larger
//! than it is written and averaged down, which smooths every edge alike.

use super::font::{self, Weight};
use super::geometry::Point;
use super::label::{Anchor, Label};
use super::palette::Colour;
use super::scene::{Item, Scene};
use super::{ChartError, Picture};
use ab_glyph::{Font as _, point};
use plotters::backend::{BitMapBackend, DrawingBackend, SVGBackend};
use plotters::style::text_anchor::{HPos, Pos, VPos};
use plotters::style::{Color as _, FontFamily, FontStyle, RGBColor, ShapeStyle, TextStyle};

/// SVG units in a point.
const SVG_UNITS: f64 = 10.0;
/// PNG pixels in a point: 720 points are 2160 pixels, 300 to the inch on 180 mm of paper.
pub const PNG_PIXELS: u32 = 3;
/// Pixels drawn for each pixel written, in each direction.
const OVERSAMPLING: u32 = 2;
/// The SVG output puts a text's base line this many font sizes below its upper anchor and divides the size it is
/// given by this other number; both are undone so that base line and size are ours.
const SVG_TOP_TO_BASELINE: f64 = 0.76;
const SVG_SIZE_DIVISOR: f64 = 1.24;

/// One of the two outputs: what plotters draws alike, and text, which it does not.
trait Output: DrawingBackend {
    fn text(&mut self, label: &Label, scale: f64) -> Result<(), ChartError>;
    fn stroke(&mut self, points: &[(i32, i32)], style: ShapeStyle) -> Result<(), ChartError>;
}

/// The picture as an SVG document with alt text; with the fonts inside when `with_fonts`.
pub(crate) fn svg(picture: &Picture, with_fonts: bool) -> Result<String, ChartError> {
    let scene = &picture.scene;
    let size = (
        (scene.width * SVG_UNITS) as u32,
        (scene.height * SVG_UNITS).ceil() as u32,
    );
    let mut drawn = String::new();
    {
        let mut output = SVGBackend::with_string(&mut drawn, size);
        replay(scene, &mut output, SVG_UNITS)?;
        output.present().map_err(ChartError::drawing)?;
    }
    // The root element is ours: plotters knows neither view box scale nor description.
    let body = drawn
        .split_once('>')
        .map(|(_, rest)| rest)
        .ok_or_else(|| ChartError::Drawing("the SVG output is empty".into()))?;
    let body = body
        .replace(" opacity=\"1\"", "")
        .replace(" stroke=\"none\"", "");
    let style = if with_fonts {
        let texts: String = scene.labels.iter().map(|l| l.text.as_str()).collect();
        format!("<style>{}</style>\n", font::css(&texts))
    } else {
        String::new()
    };
    Ok(format!(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" role=\"img\" width=\"{}\" height=\"{}\" viewBox=\"0 0 {} {}\" \
         stroke-linejoin=\"round\">\n<title>{}</title>\n<desc>{}</desc>\n{style}{}",
        scene.width,
        scene.height.ceil(),
        size.0,
        size.1,
        escape(&picture.title),
        escape(&picture.alt),
        body.trim_start()
    ))
}

/// The picture as PNG bytes, `PNG_PIXELS` to a point.
pub(crate) fn png(picture: &Picture) -> Result<Vec<u8>, ChartError> {
    let scene = &picture.scene;
    let (width, height) = (
        scene.width as u32 * PNG_PIXELS,
        scene.height.ceil() as u32 * PNG_PIXELS,
    );
    let (drawn_width, drawn_height) = (width * OVERSAMPLING, height * OVERSAMPLING);
    let mut drawn = vec![255_u8; drawn_width as usize * drawn_height as usize * 3];
    {
        let mut output = BitMapBackend::with_buffer(&mut drawn, (drawn_width, drawn_height));
        replay(scene, &mut output, f64::from(PNG_PIXELS * OVERSAMPLING))?;
        output.present().map_err(ChartError::drawing)?;
    }
    let pixels = average(&drawn, width as usize, height as usize);
    let mut out = Vec::new();
    let mut encoder = png::Encoder::new(&mut out, width, height);
    encoder.set_color(png::ColorType::Rgb);
    encoder.set_depth(png::BitDepth::Eight);
    encoder.set_compression(png::Compression::Default);
    encoder.set_filter(png::FilterType::Up);
    // 300 pixels to the inch, so that a word processor places the picture at 183 mm.
    encoder.set_pixel_dims(Some(png::PixelDimensions {
        xppu: 11811,
        yppu: 11811,
        unit: png::Unit::Meter,
    }));
    encoder
        .write_header()
        .and_then(|mut writer| writer.write_image_data(&pixels))
        .map_err(ChartError::drawing)?;
    Ok(out)
}

/// Averages each square of drawn pixels into one.
fn average(drawn: &[u8], width: usize, height: usize) -> Vec<u8> {
    let n = OVERSAMPLING as usize;
    let row = width * n * 3;
    let mut out = Vec::with_capacity(width * height * 3);
    for y in 0..height {
        for x in 0..width {
            for channel in 0..3 {
                let sum: u32 = (0..n * n)
                    .map(|i| {
                        let (dx, dy) = (i % n, i / n);
                        u32::from(drawn[(y * n + dy) * row + (x * n + dx) * 3 + channel])
                    })
                    .sum();
                out.push((sum / (OVERSAMPLING * OVERSAMPLING)) as u8);
            }
        }
    }
    out
}

fn replay<O: Output>(scene: &Scene, output: &mut O, scale: f64) -> Result<(), ChartError> {
    let pixel = |p: Point| ((p.0 * scale).round() as i32, (p.1 * scale).round() as i32);
    let canvas = [pixel((0.0, 0.0)), pixel((scene.width, scene.height.ceil()))];
    let white = RGBColor(255, 255, 255).filled();
    output
        .draw_rect(canvas[0], canvas[1], &white, true)
        .map_err(ChartError::drawing)?;
    for item in &scene.items {
        match item {
            Item::Area {
                points,
                colour,
                opacity,
            } => {
                let style = rgb(*colour).mix(*opacity).filled();
                let drawn = match rectangle(points) {
                    Some((a, b)) => output.draw_rect(pixel(a), pixel(b), &style, true),
                    None => output.fill_polygon(points.iter().map(|&p| pixel(p)), &style),
                };
                drawn.map_err(ChartError::drawing)?;
            }
            Item::Line {
                points,
                colour,
                width,
            } => {
                let stroke = ((width * scale).round() as u32).max(1);
                let mut pixels: Vec<_> = points.iter().map(|&p| pixel(p)).collect();
                pixels.dedup();
                output.stroke(&pixels, rgb(*colour).stroke_width(stroke))?;
            }
            Item::Disc {
                centre,
                radius,
                colour,
            } => {
                let radius = (radius * scale).round() as u32;
                output
                    .draw_circle(pixel(*centre), radius, &rgb(*colour).filled(), true)
                    .map_err(ChartError::drawing)?;
            }
            Item::Text(index) => {
                if let Some(label) = scene.labels.get(*index) {
                    output.text(label, scale)?;
                }
            }
        }
    }
    Ok(())
}

/// Upper left and lower right of a polygon that is an upright rectangle: a shorter SVG, a faster PNG.
fn rectangle(points: &[Point]) -> Option<(Point, Point)> {
    let [a, b, c, d] = points else { return None };
    let upright = a.1 == b.1 && b.0 == c.0 && c.1 == d.1 && d.0 == a.0;
    upright.then(|| ((a.0.min(c.0), a.1.min(c.1)), (a.0.max(c.0), a.1.max(c.1))))
}

impl Output for SVGBackend<'_> {
    fn text(&mut self, label: &Label, scale: f64) -> Result<(), ChartError> {
        let size = label.size * scale;
        let horizontal = match label.anchor {
            Anchor::Start => HPos::Left,
            Anchor::Middle => HPos::Center,
            Anchor::End => HPos::Right,
        };
        let style = match label.weight {
            Weight::Regular => FontStyle::Normal,
            Weight::Bold => FontStyle::Bold,
        };
        let colour = rgb(label.colour);
        let set = TextStyle::from((
            FontFamily::Name(font::FAMILY_STACK),
            size * SVG_SIZE_DIVISOR,
            style,
        ))
        .color(&colour)
        .pos(Pos::new(horizontal, VPos::Top));
        let at = (
            (label.at.0 * scale).round() as i32,
            (label.at.1 * scale - SVG_TOP_TO_BASELINE * size).round() as i32,
        );
        self.draw_text(&label.text, &set, at)
            .map_err(ChartError::drawing)
    }

    fn stroke(&mut self, points: &[(i32, i32)], style: ShapeStyle) -> Result<(), ChartError> {
        self.draw_path(points.iter().copied(), &style)
            .map_err(ChartError::drawing)
    }
}

impl Output for BitMapBackend<'_> {
    /// Glyph by glyph from the outlines, with the very advances that the layout measured.
    fn text(&mut self, label: &Label, scale: f64) -> Result<(), ChartError> {
        let face = font::face(label.weight)?;
        let em = face.units_per_em().unwrap_or(1000.0);
        let size = (label.size * scale) as f32;
        let pixels = face.pt_to_px_scale(size * 0.75).ok_or(ChartError::Font)?;
        let mut pen = (label.area.left * scale) as f32;
        let baseline = (label.at.1 * scale) as f32;
        let colour = rgb(label.colour);
        let (width, height) = self.get_size();
        // What the font lacks is marked: something stands here, and a viewer of the SVG will show it.
        for c in font::printable(&label.text, font::UNPRINTABLE).chars() {
            let glyph = face
                .glyph_id(c)
                .with_scale_and_position(pixels, point(pen, baseline));
            pen += font::advance_em(face, em, c) * size;
            let Some(outline) = face.outline_glyph(glyph) else {
                continue;
            };
            let corner = outline.px_bounds().min;
            let mut inked = Vec::new();
            outline.draw(|x, y, cover| inked.push((x, y, cover)));
            for (x, y, cover) in inked {
                let (x, y) = (corner.x as i32 + x as i32, corner.y as i32 + y as i32);
                if x >= 0 && y >= 0 && x < width as i32 && y < height as i32 {
                    let ink = colour
                        .mix(f64::from(cover.clamp(0.0, 1.0)))
                        .to_backend_color();
                    self.draw_pixel((x, y), ink).map_err(ChartError::drawing)?;
                }
            }
        }
        Ok(())
    }

    /// Each piece as a rectangle of its own with round joints: the path of plotters leaves spikes at sharp bends.
    fn stroke(&mut self, points: &[(i32, i32)], style: ShapeStyle) -> Result<(), ChartError> {
        let half = f64::from(style.stroke_width) / 2.0;
        let fill = style.color.filled();
        for pair in points.windows(2) {
            let [a, b] = [pair[0], pair[1]].map(|p| (f64::from(p.0), f64::from(p.1)));
            let (dx, dy) = (b.0 - a.0, b.1 - a.1);
            let length = dx.hypot(dy);
            let (nx, ny) = (-dy / length * half, dx / length * half);
            let corner = |p: Point, side: f64| {
                (
                    (p.0 + side * nx).round() as i32,
                    (p.1 + side * ny).round() as i32,
                )
            };
            let strip = [
                corner(a, 1.0),
                corner(b, 1.0),
                corner(b, -1.0),
                corner(a, -1.0),
            ];
            self.fill_polygon(strip, &fill)
                .map_err(ChartError::drawing)?;
        }
        let joints = points.len().saturating_sub(2);
        if half > 2.0 {
            for &joint in points.iter().skip(1).take(joints) {
                self.draw_circle(joint, half as u32, &fill, true)
                    .map_err(ChartError::drawing)?;
            }
        }
        Ok(())
    }
}

fn rgb(colour: Colour) -> RGBColor {
    RGBColor(colour.0, colour.1, colour.2)
}

/// Text for the inside of an XML element.
fn escape(text: &str) -> String {
    font::clean(text)
        .replace('&', "&amp;")
        .replace('<', "&lt;")
        .replace('>', "&gt;")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn averaging_keeps_flat_colour_and_halves_an_edge() {
        // Two by two drawn pixels for each written one: the left square is flat, the right one half black.
        let mut drawn = Vec::new();
        for _ in 0..2 {
            for value in [200, 200, 0, 255] {
                drawn.extend([value; 3]);
            }
        }
        assert_eq!(average(&drawn, 2, 1), [200, 200, 200, 127, 127, 127]);
    }

    #[test]
    fn escaped_text_cannot_close_its_element() {
        assert_eq!(escape("</title>&\u{1}"), "&lt;/title&gt;&amp;");
    }
}
