//! Lines, arcs, ellipses and Béziers in one space, and paths made of them.

use super::{Point, Rect, Space, Vector, same};
use kurbo::{ParamCurve, ParamCurveArclen, ParamCurveExtrema};

/// A straight line between two points.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Line<S> {
    /// Where it begins.
    pub from: Point<S>,
    /// Where it ends.
    pub to: Point<S>,
}

/// Part of a circle, or all of it. Angles are degrees counter-clockwise as the reader sees them,
/// in every space.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Arc<S> {
    /// Centre of the circle.
    pub centre: Point<S>,
    /// Radius in mm, positive.
    pub radius: f64,
    /// Direction from the centre to the beginning, degrees.
    pub start: f64,
    /// How far it turns, degrees in [−360, 360]; positive is counter-clockwise.
    pub sweep: f64,
}

/// Part of an ellipse, or all of it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct EllipticArc<S> {
    /// Centre of the ellipse.
    pub centre: Point<S>,
    /// Half-lengths of its two axes in mm.
    pub radii: (f64, f64),
    /// Direction of the first axis, degrees as the reader sees it.
    pub turn: f64,
    /// Eccentric angle of the beginning, degrees from the first axis.
    pub start: f64,
    /// Eccentric angle passed through, degrees in [−360, 360].
    pub sweep: f64,
}

/// A cubic Bézier curve by its four control points.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cubic<S>(pub [Point<S>; 4]);

/// One smooth piece of an edge.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Curve<S> {
    /// Straight.
    Line(Line<S>),
    /// Circular.
    Arc(Arc<S>),
    /// Elliptic.
    Ellipse(EllipticArc<S>),
    /// Free.
    Cubic(Cubic<S>),
}

/// Curves that follow each other end to end, drawn as one stroke.
#[derive(Clone, Debug, PartialEq)]
pub struct Path<S> {
    /// The curves in walking order, each beginning where the one before ends.
    pub curves: Vec<Curve<S>>,
    /// Whether the last curve ends where the first begins, with a joint there.
    pub closed: bool,
}

impl<S: Space> Line<S> {
    /// The line between two points.
    #[must_use]
    pub fn new(from: Point<S>, to: Point<S>) -> Self {
        Self { from, to }
    }

    /// Displacement from beginning to end.
    #[must_use]
    pub fn vector(&self) -> Vector<S> {
        self.to - self.from
    }

    /// Length in mm.
    #[must_use]
    pub fn length(&self) -> f64 {
        self.vector().length()
    }

    /// The point at `t` of the way, 0 to 1.
    #[must_use]
    pub fn at(&self, t: f64) -> Point<S> {
        self.from + self.vector() * t
    }

    /// The line without `by` mm at both ends; `None` if nothing is left.
    #[must_use]
    pub fn trimmed(&self, by: f64) -> Option<Self> {
        let length = self.length();
        (length > 2.0 * by).then(|| Self::new(self.at(by / length), self.at(1.0 - by / length)))
    }
}

impl<S: Space> Arc<S> {
    /// The arc with this centre and radius from `start` through `sweep` degrees.
    #[must_use]
    pub fn new(centre: Point<S>, radius: f64, start: f64, sweep: f64) -> Self {
        Self { centre, radius, start, sweep }
    }

    /// The whole circle.
    #[must_use]
    pub fn circle(centre: Point<S>, radius: f64) -> Self {
        Self::new(centre, radius, 0.0, 360.0)
    }

    /// Whether it goes all the way round.
    #[must_use]
    pub fn is_full(&self) -> bool {
        self.sweep.abs() >= 360.0 - 1e-9
    }

    /// The point of the circle in direction `degrees` from the centre.
    #[must_use]
    pub fn towards(&self, degrees: f64) -> Point<S> {
        self.centre + Vector::at_angle(degrees) * self.radius
    }

    /// Whether the direction `degrees` from the centre meets the arc.
    #[must_use]
    pub fn covers(&self, degrees: f64) -> bool {
        if self.is_full() {
            return true;
        }
        let first = if self.sweep >= 0.0 { self.start } else { self.start + self.sweep };
        (degrees - first).rem_euclid(360.0) <= self.sweep.abs() + 1e-7
            || (degrees - first).rem_euclid(360.0) >= 360.0 - 1e-7
    }

    /// Direction from the centre to the middle of the arc, degrees.
    #[must_use]
    pub fn middle(&self) -> f64 {
        self.start + self.sweep / 2.0
    }
}

impl<S: Space> EllipticArc<S> {
    fn to_kurbo(self) -> kurbo::Arc {
        // kurbo turns from +x to +y, which the reader sees clockwise where y points down.
        let sign = if S::Y_UP { 1.0 } else { -1.0 };
        kurbo::Arc {
            center: self.centre.to_kurbo(),
            radii: kurbo::Vec2::new(self.radii.0, self.radii.1),
            start_angle: sign * self.start.to_radians(),
            sweep_angle: sign * self.sweep.to_radians(),
            x_rotation: sign * self.turn.to_radians(),
        }
    }
}

impl<S: Space> Cubic<S> {
    fn to_kurbo(self) -> kurbo::CubicBez {
        let [a, b, c, d] = self.0.map(Point::to_kurbo);
        kurbo::CubicBez::new(a, b, c, d)
    }

    fn from_kurbo(c: kurbo::CubicBez) -> Self {
        Self([c.p0, c.p1, c.p2, c.p3].map(Point::from_kurbo))
    }
}

impl<S: Space> Curve<S> {
    /// A straight curve between two points.
    #[must_use]
    pub fn line(from: Point<S>, to: Point<S>) -> Self {
        Self::Line(Line::new(from, to))
    }

    /// A whole circle.
    #[must_use]
    pub fn circle(centre: Point<S>, radius: f64) -> Self {
        Self::Arc(Arc::circle(centre, radius))
    }

    /// The point at parameter `t`, 0 to 1. On lines and arcs `t` is the share of the length.
    #[must_use]
    pub fn at(&self, t: f64) -> Point<S> {
        match self {
            Self::Line(l) => l.at(t),
            Self::Arc(a) => a.towards(a.start + a.sweep * t),
            Self::Ellipse(e) => {
                let (sin, cos) = (e.start + e.sweep * t).to_radians().sin_cos();
                let axis = Vector::<S>::at_angle(e.turn);
                e.centre + axis * (e.radii.0 * cos) + axis.left() * (e.radii.1 * sin)
            }
            Self::Cubic(c) => Point::from_kurbo(c.to_kurbo().eval(t)),
        }
    }

    /// Where it begins.
    #[must_use]
    pub fn start(&self) -> Point<S> {
        self.at(0.0)
    }

    /// Where it ends.
    #[must_use]
    pub fn end(&self) -> Point<S> {
        self.at(1.0)
    }

    /// Unit direction of travel at parameter `t`; `None` where the curve stands still.
    #[must_use]
    pub fn direction(&self, t: f64) -> Option<Vector<S>> {
        match self {
            Self::Line(l) => l.vector().unit(),
            Self::Arc(a) => {
                let out = Vector::<S>::at_angle(a.start + a.sweep * t);
                Some(out.left() * a.sweep.signum())
            }
            Self::Ellipse(_) | Self::Cubic(_) => {
                let h = 1e-6;
                let (t0, t1) = ((t - h).max(0.0), (t + h).min(1.0));
                (self.at(t1) - self.at(t0)).unit()
            }
        }
    }

    /// Whether it closes on itself (a whole circle or ellipse).
    #[must_use]
    pub fn is_loop(&self) -> bool {
        match self {
            Self::Arc(a) => a.is_full(),
            Self::Ellipse(e) => e.sweep.abs() >= 360.0 - 1e-9,
            Self::Line(_) | Self::Cubic(_) => false,
        }
    }

    /// Length in mm; exact for lines and arcs, to 1e-6 mm otherwise.
    #[must_use]
    pub fn length(&self) -> f64 {
        match self {
            Self::Line(l) => l.length(),
            Self::Arc(a) => a.radius * a.sweep.abs().to_radians(),
            Self::Ellipse(e) => {
                use kurbo::Shape;
                e.to_kurbo().perimeter(1e-6)
            }
            Self::Cubic(c) => c.to_kurbo().arclen(1e-6),
        }
    }

    /// The smallest axis-aligned box around it.
    #[must_use]
    pub fn bounds(&self) -> Rect<S> {
        match self {
            Self::Line(l) => Rect::new(l.from, l.to),
            Self::Arc(a) => [0.0, 90.0, 180.0, 270.0]
                .into_iter()
                .filter(|d| a.covers(*d))
                .map(|d| a.towards(d))
                .fold(Rect::new(self.start(), self.end()), Rect::including),
            Self::Ellipse(_) => {
                let points = self.flattened(1e-4);
                Rect::around(points).unwrap_or_else(|| Rect::new(self.start(), self.end()))
            }
            Self::Cubic(c) => {
                let b = c.to_kurbo().bounding_box();
                Rect::from_sides(b.x0, b.y0, b.x1, b.y1)
            }
        }
    }

    /// The piece between parameters `t0 < t1`.
    #[must_use]
    pub fn piece(&self, t0: f64, t1: f64) -> Self {
        match self {
            Self::Line(l) => Self::line(l.at(t0), l.at(t1)),
            Self::Arc(a) => {
                Self::Arc(Arc::new(a.centre, a.radius, a.start + a.sweep * t0, a.sweep * (t1 - t0)))
            }
            Self::Ellipse(e) => Self::Ellipse(EllipticArc {
                start: e.start + e.sweep * t0,
                sweep: e.sweep * (t1 - t0),
                ..*e
            }),
            Self::Cubic(c) => Self::Cubic(Cubic::from_kurbo(c.to_kurbo().subsegment(t0..t1))),
        }
    }

    /// The same curve walked the other way.
    #[must_use]
    pub fn reversed(&self) -> Self {
        match self {
            Self::Line(l) => Self::line(l.to, l.from),
            Self::Arc(a) => Self::Arc(Arc::new(a.centre, a.radius, a.start + a.sweep, -a.sweep)),
            Self::Ellipse(e) => {
                Self::Ellipse(EllipticArc { start: e.start + e.sweep, sweep: -e.sweep, ..*e })
            }
            Self::Cubic(c) => Self::Cubic(Cubic([c.0[3], c.0[2], c.0[1], c.0[0]])),
        }
    }

    /// Points along the curve so dense that the chords stray at most `tolerance` mm from it,
    /// beginning and end included. 1e-3 mm suits checks on paper; a circle of 50 mm then takes
    /// some 250 chords.
    #[must_use]
    pub fn flattened(&self, tolerance: f64) -> Vec<Point<S>> {
        match self {
            Self::Line(l) => vec![l.from, l.to],
            Self::Arc(a) => {
                // Sagitta of a chord: r (1 − cos(φ/2)).
                let step = 2.0 * (1.0 - (tolerance / a.radius).min(1.0)).acos();
                self.sampled((a.sweep.abs().to_radians() / step.max(1e-3)).ceil())
            }
            Self::Ellipse(e) => {
                let r = e.radii.0.max(e.radii.1).max(tolerance);
                let step = 2.0 * (1.0 - (tolerance / r).min(1.0)).acos();
                self.sampled((e.sweep.abs().to_radians() / step.max(1e-3)).ceil())
            }
            Self::Cubic(c) => {
                let mut points = Vec::new();
                let path = [kurbo::PathEl::MoveTo(c.0[0].to_kurbo()), {
                    let [_, b, c, d] = c.0.map(Point::to_kurbo);
                    kurbo::PathEl::CurveTo(b, c, d)
                }];
                kurbo::flatten(path, tolerance, |el| match el {
                    kurbo::PathEl::MoveTo(p) | kurbo::PathEl::LineTo(p) => {
                        points.push(Point::from_kurbo(p));
                    }
                    _ => {}
                });
                points
            }
        }
    }

    /// The parameter at `length` mm along the curve, clamped to its ends.
    #[must_use]
    pub fn parameter_at_length(&self, length: f64) -> f64 {
        let whole = self.length();
        if whole <= 0.0 {
            return 0.0;
        }
        let share = (length / whole).clamp(0.0, 1.0);
        match self {
            Self::Line(_) | Self::Arc(_) => share,
            Self::Cubic(c) => c.to_kurbo().inv_arclen(share * whole, 1e-6),
            Self::Ellipse(_) => {
                let points = self.sampled(512.0);
                let mut walked = 0.0;
                for (i, pair) in points.windows(2).enumerate() {
                    let step = pair[0].distance(pair[1]);
                    if walked + step >= share * whole {
                        let inside = if step > 0.0 { (share * whole - walked) / step } else { 0.0 };
                        return ((i as f64) + inside.clamp(0.0, 1.0)) / 512.0;
                    }
                    walked += step;
                }
                1.0
            }
        }
    }

    /// Moved by `v`.
    #[must_use]
    pub fn shifted(&self, v: Vector<S>) -> Self {
        match self {
            Self::Line(l) => Self::line(l.from + v, l.to + v),
            Self::Arc(a) => Self::Arc(Arc { centre: a.centre + v, ..*a }),
            Self::Ellipse(e) => Self::Ellipse(EllipticArc { centre: e.centre + v, ..*e }),
            Self::Cubic(c) => Self::Cubic(Cubic(c.0.map(|p| p + v))),
        }
    }

    fn sampled(&self, chords: f64) -> Vec<Point<S>> {
        let n = chords.clamp(1.0, 4096.0) as usize;
        (0..=n).map(|i| self.at(i as f64 / n as f64)).collect()
    }
}

impl<S: Space> Path<S> {
    /// A path of one open curve.
    #[must_use]
    pub fn of(curve: Curve<S>) -> Self {
        let closed = curve.is_loop();
        Self { curves: vec![curve], closed }
    }

    /// Straight lines through `points`, closed back to the first if asked.
    #[must_use]
    pub fn polyline(points: &[Point<S>], closed: bool) -> Self {
        let mut curves: Vec<_> =
            points.windows(2).map(|pair| Curve::line(pair[0], pair[1])).collect();
        if let (true, [first, .., last]) = (closed, points)
            && !first.is_at(*last)
        {
            curves.push(Curve::line(*last, *first));
        }
        Self { curves, closed }
    }

    /// The smallest box around it; `None` for an empty path.
    #[must_use]
    pub fn bounds(&self) -> Option<Rect<S>> {
        Rect::union_of(self.curves.iter().map(Curve::bounds))
    }

    /// Length in mm.
    #[must_use]
    pub fn length(&self) -> f64 {
        self.curves.iter().map(Curve::length).sum()
    }

    /// Moved by `v`.
    #[must_use]
    pub fn shifted(&self, v: Vector<S>) -> Self {
        Self { curves: self.curves.iter().map(|c| c.shifted(v)).collect(), closed: self.closed }
    }

    /// Whether the end meets the beginning, whatever `closed` says.
    #[must_use]
    pub fn meets_itself(&self) -> bool {
        match (self.curves.first(), self.curves.last()) {
            (Some(first), Some(last)) => {
                let (a, b) = (first.start(), last.end());
                same(a.x, b.x) && same(a.y, b.y)
            }
            _ => false,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geom::{Sheet, View};

    #[test]
    fn a_quarter_circle_has_the_box_of_its_quadrant() {
        let arc = Curve::Arc(Arc::new(Point::<View>::new(0.0, 0.0), 10.0, 0.0, 90.0));
        let b = arc.bounds();
        assert!(b.min.distance(Point::new(0.0, 0.0)) < 1e-9);
        assert!(b.max.distance(Point::new(10.0, 10.0)) < 1e-9);
        let down = Curve::Arc(Arc::new(Point::<Sheet>::new(0.0, 0.0), 10.0, 0.0, 90.0));
        assert!(down.bounds().min.distance(Point::new(0.0, -10.0)) < 1e-9);
    }

    #[test]
    fn flattened_arcs_stray_no_further_than_asked() {
        let arc = Curve::Arc(Arc::circle(Point::<View>::new(3.0, 4.0), 25.0));
        let points = arc.flattened(1e-3);
        for pair in points.windows(2) {
            let middle = pair[0].middle(pair[1]);
            assert!(25.0 - middle.distance(Point::new(3.0, 4.0)) <= 1e-3 + 1e-9);
        }
    }

    #[test]
    fn an_ellipse_turns_the_same_way_in_both_kinds_of_space() {
        fn top<S: Space>() -> Vector<S> {
            let e = Curve::Ellipse(EllipticArc {
                centre: Point::<S>::new(0.0, 0.0),
                radii: (4.0, 2.0),
                turn: 30.0,
                start: 0.0,
                sweep: 360.0,
            });
            e.at(0.0) - Point::new(0.0, 0.0)
        }
        assert!((top::<View>().angle() - 30.0).abs() < 1e-9);
        assert!((top::<Sheet>().angle() - 30.0).abs() < 1e-9);
    }

    #[test]
    fn pieces_of_a_curve_join_where_it_was_cut() {
        let curves = [
            Curve::line(Point::<View>::new(0.0, 0.0), Point::new(8.0, 2.0)),
            Curve::Arc(Arc::new(Point::new(1.0, 1.0), 5.0, 20.0, -130.0)),
            Curve::Cubic(Cubic(
                [(0.0, 0.0), (1.0, 3.0), (4.0, 3.0), (5.0, 0.0)].map(|(x, y)| Point::new(x, y)),
            )),
        ];
        for c in curves {
            let (a, b) = (c.piece(0.0, 0.4), c.piece(0.4, 1.0));
            assert!(a.end().distance(b.start()) < 1e-9);
            assert!((a.length() + b.length() - c.length()).abs() < 1e-5);
        }
    }
}
