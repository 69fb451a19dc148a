//! SVG path data as curves of view space, y up. Circular arcs stay arcs.
//!
//! Grammar: SVG 2, chapter 9; the conversion of arcs to centre form is its appendix B.2.4, done by
//! kurbo.

use svgtypes::{PathParser, PathSegment};

use crate::geom::{Arc, Cubic, Curve, EllipticArc, Path, Point, View as ViewSpace};

/// Why path data cannot be drawn.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub(super) enum PathDataError {
    /// Not path data.
    #[error("this is no path data: {0}")]
    Syntax(String),
    /// Nothing to draw.
    #[error("the path draws nothing")]
    Empty,
    /// Absurdly many segments or large numbers.
    #[error("the path has {0}")]
    Excess(&'static str),
}

/// Segments in one path at most; a knurled outline takes some hundreds.
const MOST_SEGMENTS: usize = 20_000;
/// Largest coordinate, mm: a kilometre.
const FARTHEST: f64 = 1e6;

/// The subpaths of `data`. A `Z` closes its subpath.
pub(super) fn parse(data: &str) -> Result<Vec<Path<ViewSpace>>, PathDataError> {
    let mut pen = Pen::default();
    for (i, segment) in PathParser::from(data).enumerate() {
        if i >= MOST_SEGMENTS {
            return Err(PathDataError::Excess("more than 20 000 segments"));
        }
        pen.take(segment.map_err(|e| PathDataError::Syntax(e.to_string()))?);
        if !(pen.at.x.abs() <= FARTHEST && pen.at.y.abs() <= FARTHEST) {
            return Err(PathDataError::Excess("coordinates beyond a kilometre"));
        }
    }
    pen.lift();
    if pen.done.is_empty() { Err(PathDataError::Empty) } else { Ok(pen.done) }
}

struct Pen {
    at: Point<ViewSpace>,
    start: Point<ViewSpace>,
    /// Control point that a smooth segment mirrors, cubic or quadratic.
    cubic: Option<Point<ViewSpace>>,
    quadratic: Option<Point<ViewSpace>>,
    curves: Vec<Curve<ViewSpace>>,
    done: Vec<Path<ViewSpace>>,
}

impl Default for Pen {
    fn default() -> Self {
        let origin = Point::new(0.0, 0.0);
        Self {
            at: origin,
            start: origin,
            cubic: None,
            quadratic: None,
            curves: Vec::new(),
            done: Vec::new(),
        }
    }
}

impl Pen {
    fn place(&self, abs: bool, x: f64, y: f64) -> Point<ViewSpace> {
        if abs { Point::new(x, y) } else { Point::new(self.at.x + x, self.at.y + y) }
    }

    fn take(&mut self, segment: PathSegment) {
        let (mut cubic, mut quadratic) = (None, None);
        match segment {
            PathSegment::MoveTo { abs, x, y } => {
                let to = self.place(abs, x, y);
                self.lift();
                (self.at, self.start) = (to, to);
            }
            PathSegment::LineTo { abs, x, y } => self.line_to(self.place(abs, x, y)),
            PathSegment::HorizontalLineTo { abs, x } => {
                let x = if abs { x } else { self.at.x + x };
                self.line_to(Point::new(x, self.at.y));
            }
            PathSegment::VerticalLineTo { abs, y } => {
                let y = if abs { y } else { self.at.y + y };
                self.line_to(Point::new(self.at.x, y));
            }
            PathSegment::CurveTo { abs, x1, y1, x2, y2, x, y } => {
                let (a, b) = (self.place(abs, x1, y1), self.place(abs, x2, y2));
                cubic = Some(b);
                self.cubic_to(a, b, self.place(abs, x, y));
            }
            PathSegment::SmoothCurveTo { abs, x2, y2, x, y } => {
                let a = self.mirrored(self.cubic);
                let b = self.place(abs, x2, y2);
                cubic = Some(b);
                self.cubic_to(a, b, self.place(abs, x, y));
            }
            PathSegment::Quadratic { abs, x1, y1, x, y } => {
                let c = self.place(abs, x1, y1);
                quadratic = Some(c);
                self.quadratic_to(c, self.place(abs, x, y));
            }
            PathSegment::SmoothQuadratic { abs, x, y } => {
                let c = self.mirrored(self.quadratic);
                quadratic = Some(c);
                self.quadratic_to(c, self.place(abs, x, y));
            }
            PathSegment::EllipticalArc { abs, rx, ry, x_axis_rotation, large_arc, sweep, x, y } => {
                let to = self.place(abs, x, y);
                self.arc_to(kurbo::SvgArc {
                    from: self.at.to_kurbo(),
                    to: to.to_kurbo(),
                    radii: kurbo::Vec2::new(rx, ry),
                    x_rotation: x_axis_rotation.to_radians(),
                    large_arc,
                    sweep,
                });
                self.at = to;
            }
            PathSegment::ClosePath { .. } => {
                self.line_to(self.start);
                self.finish(true);
            }
        }
        (self.cubic, self.quadratic) = (cubic, quadratic);
    }

    fn mirrored(&self, control: Option<Point<ViewSpace>>) -> Point<ViewSpace> {
        control.map_or(self.at, |c| self.at + (self.at - c))
    }

    fn line_to(&mut self, to: Point<ViewSpace>) {
        if !self.at.is_at(to) {
            self.curves.push(Curve::line(self.at, to));
        }
        self.at = to;
    }

    fn cubic_to(&mut self, a: Point<ViewSpace>, b: Point<ViewSpace>, to: Point<ViewSpace>) {
        self.curves.push(Curve::Cubic(Cubic([self.at, a, b, to])));
        self.at = to;
    }

    fn quadratic_to(&mut self, c: Point<ViewSpace>, to: Point<ViewSpace>) {
        let third = |p: Point<ViewSpace>| p + (c - p) * (2.0 / 3.0);
        self.cubic_to(third(self.at), third(to), to);
    }

    fn arc_to(&mut self, arc: kurbo::SvgArc) {
        let to = Point::from_kurbo(arc.to);
        let Some(k) = kurbo::Arc::from_svg_arc(&arc) else {
            // Equal ends or no radius: SVG draws nothing, or a straight line.
            self.line_to(to);
            return;
        };
        let centre = Point::from_kurbo(k.center);
        let (start, sweep) = (k.start_angle.to_degrees(), k.sweep_angle.to_degrees());
        let turn = k.x_rotation.to_degrees();
        // View space has y up, and so has kurbo's reading of the data: angles agree.
        self.curves.push(if (k.radii.x - k.radii.y).abs() <= 1e-9 * k.radii.x.abs() {
            Curve::Arc(Arc::new(centre, k.radii.x, start + turn, sweep))
        } else {
            let radii = (k.radii.x, k.radii.y);
            Curve::Ellipse(EllipticArc { centre, radii, turn, start, sweep })
        });
    }

    fn lift(&mut self) {
        self.finish(false);
    }

    fn finish(&mut self, closed: bool) {
        let curves = std::mem::take(&mut self.curves);
        if !curves.is_empty() {
            self.done.push(Path { curves, closed });
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn arcs_keep_their_radius_and_turn_the_way_svg_says() {
        let paths = parse("M 10 0 A 10 10 0 0 1 0 10").expect("sound data");
        let Curve::Arc(arc) = paths[0].curves[0] else { panic!("an arc") };
        // Sweep flag 1 turns from +x to +y, counter-clockwise where y points up (SVG 2, 9.3.8).
        assert!((arc.radius - 10.0).abs() < 1e-12);
        assert!(
            (arc.sweep - 90.0).abs() < 1e-9 && arc.centre.distance(Point::new(0.0, 0.0)) < 1e-9
        );
    }

    #[test]
    fn relative_and_closed_subpaths_are_kept_apart() {
        let paths = parse("m 1 1 h 4 v 3 z l -2 0 M 9 9 L 10 9").expect("sound data");
        assert_eq!(paths.len(), 3);
        assert!(paths[0].closed && !paths[1].closed);
        assert!(paths[1].curves[0].start().is_at(Point::new(1.0, 1.0)));
    }

    #[test]
    fn faults_are_named() {
        assert!(matches!(parse("L 1 x"), Err(PathDataError::Syntax(_))));
        assert_eq!(parse("M 1 1"), Err(PathDataError::Empty));
        assert!(matches!(parse("M 0 0 L 1e30 0"), Err(PathDataError::Excess(_))));
    }

    #[test]
    fn a_smooth_quadratic_mirrors_the_last_control_point() {
        let paths = parse("M 0 0 Q 5 10 10 0 T 20 0").expect("sound data");
        assert!(paths[0].curves[1].at(0.5).y < 0.0);
    }
}
