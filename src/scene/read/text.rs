//! Runs of text, with the ink that is really drawn.

use std::sync::Arc;

use kurbo::Shape;
use roxmltree::Node;

use super::error::ReadError;
use super::look::Look;
use super::node::{attribute_error, number_of, numbers_of};
use super::outline::FARTHEST;
use crate::geom::{Curve, Paper, Path, Point, Quad, Rect, Sheet, Vector};
use crate::scene::{Ink, Mark, PlacedText};
use crate::text::{Lettering, Run};

/// How far measured and drawn ink may differ before the drawn one is believed, mm.
const AGREED: f64 = 0.1;

/// Tallest letters that are read, mm.
const TALLEST: f64 = 1000.0;

/// What is found inside a group.
#[derive(Debug, Default)]
pub(super) struct Found {
    /// What shows.
    pub(super) marks: Vec<Mark>,
    /// Text that does not show: it says what the outlines under it say.
    pub(super) unseen: Vec<PlacedText>,
}

/// The run that a `<text>` holds, as it would be measured.
pub(super) fn text(node: Node<'_, '_>, look: &Look) -> Result<Option<PlacedText>, ReadError> {
    let content = content(node);
    if content.trim().is_empty() {
        return Ok(None);
    }
    let first = node.descendants().filter(|n| n.has_attribute("x")).find(|n| n.is_element());
    let at = first.unwrap_or(node);
    let x = number_of(at, "x")?.unwrap_or(0.0);
    let y = number_of(if at.has_attribute("y") { at } else { node }, "y")?.unwrap_or(0.0);
    let turn = look.transform.as_coeffs();
    let along = Vector::<Sheet>::new(turn[0], turn[1]);
    let up = turn[2].hypot(turn[3]);
    // Letter heights are written to a fraction of a micrometre; this restores the height meant.
    let height = (look.font_size * up / Lettering::bundled().font_size(1.0) * 1e4).round() / 1e4;
    let origin = Point::from_kurbo(look.transform * kurbo::Point::new(x, y));
    if !(height <= TALLEST && origin.x.abs() <= FARTHEST && origin.y.abs() <= FARTHEST) {
        let value = height.to_string();
        return Err(attribute_error(node, "font-size", &value, "a text on or near the sheet"));
    }
    let run = Run::new(&content, height);
    let shift = match node.attribute("text-anchor") {
        Some("middle") => run.advance / 2.0,
        Some("end") => run.advance,
        _ => 0.0,
    };
    let origin = along.unit().map_or(origin, |a| origin - a * shift);
    Ok(Some(PlacedText {
        run: Arc::new(run),
        origin,
        angle: snapped(along.angle()),
        value: None,
        ink: look.fill_ink().unwrap_or(Ink::Drawing),
    }))
}

/// Turns are written with six decimals; a matrix gives them back with noise.
fn snapped(angle: f64) -> f64 {
    let rounded = (angle * 1e6).round() / 1e6;
    if rounded == -180.0 { 180.0 } else { rounded + 0.0 }
}

fn content(node: Node<'_, '_>) -> String {
    let text: String =
        node.descendants().filter(|n| n.is_text()).filter_map(|n| n.text()).collect();
    let xml = "http://www.w3.org/XML/1998/namespace";
    let space = node.ancestors().find_map(|n| n.attribute((xml, "space")));
    if space == Some("preserve") {
        text
    } else {
        text.split_whitespace().collect::<Vec<_>>().join(" ")
    }
}

/// What a group that is marked as one run of text holds.
///
/// Outlines under one transparent text are that text, with the ink of the outlines. One visible
/// text is itself, with the ink that the group states. Anything else is taken as it is drawn.
pub(super) fn text_group(
    node: Node<'_, '_>,
    look: &Look,
    found: Found,
) -> Result<Vec<Mark>, ReadError> {
    let mut marks = run_of_text(node, look, found)?;
    if let [Mark::Text(text)] = marks.as_mut_slice() {
        text.value = super::value_of(node)?;
    }
    Ok(marks)
}

fn run_of_text(node: Node<'_, '_>, look: &Look, found: Found) -> Result<Vec<Mark>, ReadError> {
    let stated = stated_ink(node, look)?;
    let Found { marks, mut unseen } = found;
    let seen: Vec<_> = marks
        .iter()
        .filter_map(|m| match m {
            Mark::Text(t) => Some(t),
            Mark::Stroke(_) | Mark::Fill(_) => None,
        })
        .collect();
    match (unseen.len(), seen.as_slice()) {
        (1, []) => {
            let text = unseen.remove(0);
            let ink = marks.first().map_or(text.ink, ink_of);
            let drawn = drawn_ink(&marks, &text);
            Ok(drawn
                .map(|d| Mark::Text(believed(PlacedText { ink, ..text }, d)))
                .into_iter()
                .collect())
        }
        (0, [text]) => {
            let text = (*text).clone();
            let ink = stated.map(|q| in_run(&q.0, &text));
            Ok(vec![Mark::Text(ink.map_or(text.clone(), |i| believed(text, i)))])
        }
        _ => Ok(marks),
    }
}

/// The text with the measured ink if that agrees with `ink`, else with `ink`.
fn believed(text: PlacedText, ink: Rect<Paper>) -> PlacedText {
    let (a, b) = (text.run.ink, ink);
    let strays = [a.min.x - b.min.x, a.min.y - b.min.y, a.max.x - b.max.x, a.max.y - b.max.y];
    if strays.into_iter().all(|s| s.abs() <= AGREED) {
        return text;
    }
    let run = Run { ink, ..Run::clone(&text.run) };
    PlacedText { run: Arc::new(run), ..text }
}

fn stated_ink(node: Node<'_, '_>, look: &Look) -> Result<Option<Quad<Sheet>>, ReadError> {
    let on_sheet = |x, y| Point::from_kurbo(look.transform * kurbo::Point::new(x, y));
    if let Some([x0, y0, x1, y1]) = numbers_of(node, "data-bbox", "four numbers x0 y0 x1 y1")? {
        return Ok(Some(Quad([
            on_sheet(x0, y0),
            on_sheet(x1, y0),
            on_sheet(x1, y1),
            on_sheet(x0, y1),
        ])));
    }
    let corners = numbers_of(node, "data-quad", "eight numbers, four corners")?;
    Ok(corners.map(|[a, b, c, d, e, f, g, h]| {
        Quad([on_sheet(a, b), on_sheet(c, d), on_sheet(e, f), on_sheet(g, h)])
    }))
}

fn ink_of(mark: &Mark) -> Ink {
    match mark {
        Mark::Stroke(s) => s.ink,
        Mark::Fill(f) => f.ink,
        Mark::Text(t) => t.ink,
    }
}

/// The box of the marks in the frame of a run: along its base line, and square to it.
fn drawn_ink(marks: &[Mark], text: &PlacedText) -> Option<Rect<Paper>> {
    Rect::union_of(marks.iter().filter_map(|m| match m {
        Mark::Stroke(s) => paths_in_run(&s.paths, text).map(|b| b.grown(s.width / 2.0)),
        Mark::Fill(f) => paths_in_run(&f.paths, text),
        Mark::Text(_) => None,
    }))
}

fn paths_in_run(paths: &[Path<Sheet>], text: &PlacedText) -> Option<Rect<Paper>> {
    Rect::union_of(paths.iter().flat_map(|p| &p.curves).map(|c| curve_in_run(c, text)))
}

fn curve_in_run(curve: &Curve<Sheet>, text: &PlacedText) -> Rect<Paper> {
    match curve {
        Curve::Line(l) => in_run(&[l.from, l.to], text),
        Curve::Cubic(c) => {
            let [a, b, c, d] = c.0.map(|p| point_in_run(p, text).to_kurbo());
            let b = kurbo::CubicBez::new(a, b, c, d).bounding_box();
            Rect::from_sides(b.x0, b.y0, b.x1, b.y1)
        }
        Curve::Arc(_) | Curve::Ellipse(_) => in_run(&curve.flattened(1e-3), text),
    }
}

fn in_run(points: &[Point<Sheet>], text: &PlacedText) -> Rect<Paper> {
    let placed = points.iter().map(|p| point_in_run(*p, text));
    Rect::around(placed).unwrap_or(text.run.ink)
}

fn point_in_run(p: Point<Sheet>, text: &PlacedText) -> Point<Paper> {
    let along = Vector::<Sheet>::at_angle(text.angle);
    let d = p - text.origin;
    Point::new(d.dot(along), -d.dot(along.left()))
}
