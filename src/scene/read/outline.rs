//! Path data and basic shapes as paths of the sheet.
//!
//! Arcs stay arcs: a circle under a similarity stays a circle, under any other transform it
//! becomes an ellipse. The pieces that an arc was written in are joined again.

use kurbo::{Affine, ParamCurve, SvgArc, Vec2};
use roxmltree::Node;
use svgtypes::PathSegment;

use super::error::ReadError;
use super::node::{attribute_error, number_of};
use crate::geom::{Arc, COINCIDENT, Cubic, Curve, EllipticArc, Path, Point, Sheet, Vector};

/// Ends nearer than this are one place: coordinates are written to a micrometre.
const GAP: f64 = 2e-3;
/// How far the centres of two pieces of one arc may be apart, mm.
const CENTRES: f64 = 4e-3;
/// Farthest that a curve may lead from the sheet's corner, mm: checks follow curves in steps, and
/// their number grows with the size.
pub(super) const FARTHEST: f64 = 1e5;
/// Shorter chords and smaller radii make no arc.
const STRAIGHT: f64 = 1e-6;

/// The paths that a shape element draws on the sheet.
pub(super) fn outline(
    node: Node<'_, '_>,
    transform: Affine,
) -> Result<Vec<Path<Sheet>>, ReadError> {
    let (attribute, data) = match node.tag_name().name() {
        "path" => ("d", node.attribute("d").unwrap_or_default().to_owned()),
        "polyline" | "polygon" => {
            let points = node.attribute("points").unwrap_or_default();
            let close = if node.has_tag_name((super::node::SVG, "polygon")) { "Z" } else { "" };
            (
                "points",
                if points.trim().is_empty() { String::new() } else { format!("M{points}{close}") },
            )
        }
        _ => ("d", shape_data(node)?),
    };
    let paths = Walker::new(transform).walk(&data);
    paths.ok_or_else(|| {
        attribute_error(node, attribute, &data, "path data within 100 m of the sheet")
    })
}

/// Path data of a circle, an ellipse, a line or a rectangle.
fn shape_data(node: Node<'_, '_>) -> Result<String, ReadError> {
    let n = |name| number_of(node, name);
    let or0 = |name| n(name).map(|v| v.unwrap_or(0.0));
    Ok(match node.tag_name().name() {
        "line" => format!("M{} {}L{} {}", or0("x1")?, or0("y1")?, or0("x2")?, or0("y2")?),
        "circle" => {
            let r = or0("r")?;
            round_data(or0("cx")?, or0("cy")?, r, r)
        }
        "ellipse" => round_data(or0("cx")?, or0("cy")?, or0("rx")?, or0("ry")?),
        _ => {
            let (x, y, w, h) = (or0("x")?, or0("y")?, or0("width")?, or0("height")?);
            let (rx, ry) = match (n("rx")?, n("ry")?) {
                (Some(rx), Some(ry)) => (rx, ry),
                (Some(r), None) | (None, Some(r)) => (r, r),
                (None, None) => (0.0, 0.0),
            };
            rectangle_data(
                (x, y, w, h),
                rx.clamp(0.0, (w / 2.0).max(0.0)),
                ry.clamp(0.0, (h / 2.0).max(0.0)),
            )
        }
    })
}

fn round_data(cx: f64, cy: f64, rx: f64, ry: f64) -> String {
    if rx <= 0.0 || ry <= 0.0 {
        return String::new();
    }
    let arc = |x: f64, y: f64| format!("A{rx} {ry} 0 0 0 {x} {y}");
    let quarters =
        [arc(cx, cy - ry), arc(cx - rx, cy), arc(cx, cy + ry), arc(cx + rx, cy)].concat();
    format!("M{} {cy}{quarters}Z", cx + rx)
}

fn rectangle_data((x, y, w, h): (f64, f64, f64, f64), rx: f64, ry: f64) -> String {
    if w <= 0.0 || h <= 0.0 {
        return String::new();
    }
    if rx <= 0.0 || ry <= 0.0 {
        return format!("M{x} {y}h{w}v{h}h{}Z", -w);
    }
    let (w, h) = (w - 2.0 * rx, h - 2.0 * ry);
    format!(
        "M{} {y}h{w}a{rx} {ry} 0 0 1 {rx} {ry}v{h}a{rx} {ry} 0 0 1 {} {ry}h{}\
         a{rx} {ry} 0 0 1 {} {}v{}a{rx} {ry} 0 0 1 {rx} {}Z",
        x + rx,
        -rx,
        -w,
        -rx,
        -ry,
        -h,
        -ry
    )
}

/// Walks path data in the element's coordinates and notes curves on the sheet.
struct Walker {
    transform: Affine,
    paths: Vec<Path<Sheet>>,
    curves: Vec<Curve<Sheet>>,
    first: kurbo::Point,
    at: kurbo::Point,
    /// The last control point, for smooth continuation.
    control: Option<(ControlOf, kurbo::Point)>,
}

#[derive(Clone, Copy, PartialEq, Eq)]
enum ControlOf {
    Cubic,
    Quadratic,
}

impl Walker {
    fn new(transform: Affine) -> Self {
        Self {
            transform,
            paths: Vec::new(),
            curves: Vec::new(),
            first: kurbo::Point::ZERO,
            at: kurbo::Point::ZERO,
            control: None,
        }
    }

    /// `None` for data that is no path data or leads too far away.
    fn walk(mut self, data: &str) -> Option<Vec<Path<Sheet>>> {
        if data.trim() == "none" {
            return Some(Vec::new());
        }
        for segment in svgtypes::PathParser::from(data) {
            self.segment(segment.ok()?);
        }
        self.finish(false);
        let near = self.paths.iter().flat_map(|p| &p.curves).all(is_near);
        near.then_some(self.paths)
    }

    fn point(&self, abs: bool, x: f64, y: f64) -> kurbo::Point {
        if abs { kurbo::Point::new(x, y) } else { self.at + Vec2::new(x, y) }
    }

    fn segment(&mut self, segment: PathSegment) {
        let before = self.control.take();
        let mirrored = |of, at: kurbo::Point| match before {
            Some((kind, c)) if kind == of => at + (at - c),
            _ => at,
        };
        match segment {
            PathSegment::MoveTo { abs, x, y } => {
                let to = self.point(abs, x, y);
                self.finish(false);
                (self.first, self.at) = (to, to);
            }
            PathSegment::LineTo { abs, x, y } => self.line(self.point(abs, x, y)),
            PathSegment::HorizontalLineTo { abs, x } => {
                self.line(kurbo::Point::new(if abs { x } else { self.at.x + x }, self.at.y));
            }
            PathSegment::VerticalLineTo { abs, y } => {
                self.line(kurbo::Point::new(self.at.x, if abs { y } else { self.at.y + y }));
            }
            PathSegment::CurveTo { abs, x1, y1, x2, y2, x, y } => {
                let c1 = self.point(abs, x1, y1);
                self.cubic(c1, self.point(abs, x2, y2), self.point(abs, x, y));
            }
            PathSegment::SmoothCurveTo { abs, x2, y2, x, y } => {
                let c1 = mirrored(ControlOf::Cubic, self.at);
                self.cubic(c1, self.point(abs, x2, y2), self.point(abs, x, y));
            }
            PathSegment::Quadratic { abs, x1, y1, x, y } => {
                self.quadratic(self.point(abs, x1, y1), self.point(abs, x, y));
            }
            PathSegment::SmoothQuadratic { abs, x, y } => {
                let c = mirrored(ControlOf::Quadratic, self.at);
                self.quadratic(c, self.point(abs, x, y));
            }
            PathSegment::EllipticalArc { abs, rx, ry, x_axis_rotation, large_arc, sweep, x, y } => {
                let arc = SvgArc {
                    from: self.at,
                    to: self.point(abs, x, y),
                    radii: Vec2::new(rx.abs(), ry.abs()),
                    x_rotation: x_axis_rotation.to_radians(),
                    large_arc,
                    sweep,
                };
                self.arc(&arc);
            }
            PathSegment::ClosePath { .. } => {
                self.finish(true);
                self.at = self.first;
            }
        }
    }

    fn on_sheet(&self, p: kurbo::Point) -> Point<Sheet> {
        Point::from_kurbo(self.transform * p)
    }

    fn line(&mut self, to: kurbo::Point) {
        self.curves.push(Curve::line(self.on_sheet(self.at), self.on_sheet(to)));
        self.at = to;
    }

    fn cubic(&mut self, a: kurbo::Point, b: kurbo::Point, to: kurbo::Point) {
        let points = [self.at, a, b, to].map(|p| self.on_sheet(p));
        self.curves.push(Curve::Cubic(Cubic(points)));
        self.at = to;
        self.control = Some((ControlOf::Cubic, b));
    }

    fn quadratic(&mut self, c: kurbo::Point, to: kurbo::Point) {
        let cubic = kurbo::QuadBez::new(self.at, c, to).raise();
        self.cubic(cubic.p1, cubic.p2, to);
        self.control = Some((ControlOf::Quadratic, c));
    }

    fn arc(&mut self, svg: &SvgArc) {
        let short = (svg.to - svg.from).hypot() < STRAIGHT;
        let flat = svg.radii.x < STRAIGHT || svg.radii.y < STRAIGHT;
        if short {
            // SVG 2 §9.5.1: equal ends draw nothing.
            self.at = svg.to;
            return;
        }
        match kurbo::Arc::from_svg_arc(svg).filter(|_| !flat) {
            Some(arc) => {
                self.curves.push(transformed(&arc, self.transform));
                self.at = svg.to;
            }
            None => self.line(svg.to),
        }
    }

    fn finish(&mut self, close: bool) {
        let mut curves = joined(std::mem::take(&mut self.curves));
        let (Some(first), Some(last)) = (curves.first(), curves.last()) else { return };
        let (start, end) = (first.start(), last.end());
        if close && end.distance(start) > GAP {
            curves.push(Curve::line(end, start));
        }
        let closed = close || matches!(curves.as_slice(), [only] if only.is_loop());
        self.paths.push(Path { curves, closed });
    }
}

fn is_near(curve: &Curve<Sheet>) -> bool {
    let points = match curve {
        Curve::Cubic(c) => c.0.to_vec(),
        Curve::Line(_) | Curve::Arc(_) | Curve::Ellipse(_) => {
            [0.0, 0.25, 0.5, 0.75, 1.0].map(|t| curve.at(t)).to_vec()
        }
    };
    points.iter().all(|p| p.x.abs() <= FARTHEST && p.y.abs() <= FARTHEST)
}

/// An arc of the element's coordinates as a curve of the sheet.
fn transformed(arc: &kurbo::Arc, transform: Affine) -> Curve<Sheet> {
    let ellipse =
        transform * kurbo::Ellipse::new(arc.center, (arc.radii.x, arc.radii.y), arc.x_rotation);
    let (radii, turn) = ellipse.radii_and_rotation();
    let centre = Point::from_kurbo(ellipse.center());
    let start = Point::from_kurbo(transform * arc.eval(0.0)) - centre;
    let turned_over = if transform.determinant() < 0.0 { -1.0 } else { 1.0 };
    // kurbo's angles run clockwise where y points down, those of a scene the other way.
    let sweep = -turned_over * arc.sweep_angle.to_degrees();
    if (radii.x - radii.y).abs() <= COINCIDENT {
        return Curve::Arc(Arc::new(centre, (radii.x + radii.y) / 2.0, start.angle(), sweep));
    }
    let turn = -turn.to_degrees();
    let axis = Vector::<Sheet>::at_angle(turn);
    let (along, across) = (start.dot(axis) / radii.x, start.dot(axis.left()) / radii.y);
    let start = across.atan2(along).to_degrees();
    Curve::Ellipse(EllipticArc { centre, radii: (radii.x, radii.y), turn, start, sweep })
}

/// Joins arcs of one circle or ellipse that follow each other.
fn joined(curves: Vec<Curve<Sheet>>) -> Vec<Curve<Sheet>> {
    let mut out: Vec<Curve<Sheet>> = Vec::with_capacity(curves.len());
    for curve in curves {
        match out.last_mut().and_then(|last| continued(last, &curve)) {
            Some(longer) => *out.last_mut().expect("its last curve was just continued") = longer,
            None => out.push(curve),
        }
    }
    out
}

/// `first` lengthened by `second`, if both are pieces of one round curve.
fn continued(first: &Curve<Sheet>, second: &Curve<Sheet>) -> Option<Curve<Sheet>> {
    if first.end().distance(second.start()) > GAP {
        return None;
    }
    let once_round = second.end().distance(first.start()) <= GAP;
    match (first, second) {
        (Curve::Arc(a), Curve::Arc(b)) => {
            let fits = a.centre.distance(b.centre) <= CENTRES && (a.radius - b.radius).abs() <= GAP;
            let sweep = total(a.sweep, b.sweep, once_round).filter(|_| fits)?;
            // The longer the arc behind an estimate of the centre, the better it is.
            let share = b.sweep / (a.sweep + b.sweep);
            let centre = a.centre + (b.centre - a.centre) * share;
            let start = (first.start() - centre).angle();
            Some(Curve::Arc(Arc::new(centre, a.radius, start, sweep)))
        }
        (Curve::Ellipse(a), Curve::Ellipse(b)) => {
            let fits = a.centre.distance(b.centre) <= CENTRES
                && (a.radii.0 - b.radii.0).abs() <= GAP
                && (a.radii.1 - b.radii.1).abs() <= GAP
                && second.at(1.0).distance(first.at(1.0 + b.sweep / a.sweep)) <= 2.0 * CENTRES;
            let sweep = total(a.sweep, b.sweep, once_round).filter(|_| fits)?;
            Some(Curve::Ellipse(EllipticArc { sweep, ..*a }))
        }
        _ => None,
    }
}

/// Two turns added up, if they go the same way and at most once round; once round is exact.
fn total(a: f64, b: f64, once_round: bool) -> Option<f64> {
    let sum = a + b;
    if a * b <= 0.0 {
        None
    } else if once_round && sum.abs() > 180.0 {
        Some(360.0_f64.copysign(sum))
    } else {
        (sum.abs() < 360.0).then_some(sum)
    }
}
