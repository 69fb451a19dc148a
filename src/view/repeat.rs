//! A shape as written, repeated.

use crate::geom::{Arc, Cubic, Curve, EllipticArc, Line, Point, Vector, View as ViewSpace};
use crate::spec::{Axis, Repeat};

/// A movement of view space that keeps lengths.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Motion {
    /// Shifted.
    Shift(Vector<ViewSpace>),
    /// Turned about a point, degrees counter-clockwise.
    Turn(Point<ViewSpace>, f64),
    /// Mirrored about the line through `at` parallel to an axis.
    Mirror(Axis, f64),
}

/// One motion for each member, the first of which stays where it is.
pub(super) fn motions(repeat: &Repeat) -> Vec<Motion> {
    let still = Motion::Shift(Vector::new(0.0, 0.0));
    match repeat {
        Repeat::Polar { count, about, step } => {
            (0..*count).map(|i| Motion::Turn(*about, step * f64::from(i))).collect()
        }
        Repeat::Grid { count: (columns, rows), pitch } => (0..*rows)
            .flat_map(|r| (0..*columns).map(move |c| (c, r)))
            .map(|(c, r)| {
                Motion::Shift(Vector::new(pitch.x * f64::from(c), pitch.y * f64::from(r)))
            })
            .collect(),
        Repeat::At { offsets } => {
            [still].into_iter().chain(offsets.iter().map(|o| Motion::Shift(*o))).collect()
        }
        Repeat::Mirror { axis, at } => vec![still, Motion::Mirror(*axis, *at)],
    }
}

impl Motion {
    /// Where a point goes.
    pub(super) fn point(&self, p: Point<ViewSpace>) -> Point<ViewSpace> {
        match *self {
            Self::Shift(v) => p + v,
            Self::Turn(about, degrees) => {
                let v = p - about;
                let (sin, cos) = sin_cos(degrees);
                about + Vector::new(v.x * cos - v.y * sin, v.x * sin + v.y * cos)
            }
            Self::Mirror(Axis::X, at) => Point::new(p.x, 2.0 * at - p.y),
            Self::Mirror(Axis::Y, at) => Point::new(2.0 * at - p.x, p.y),
        }
    }

    /// Where a direction, degrees, goes.
    fn angle(&self, degrees: f64) -> f64 {
        match *self {
            Self::Shift(_) => degrees,
            Self::Turn(_, turn) => degrees + turn,
            Self::Mirror(Axis::X, _) => -degrees,
            Self::Mirror(Axis::Y, _) => 180.0 - degrees,
        }
    }

    /// −1 for motions that turn left into right.
    fn sense(&self) -> f64 {
        if matches!(self, Self::Mirror(..)) { -1.0 } else { 1.0 }
    }

    /// Where a circle or arc goes.
    pub(super) fn arc(&self, a: &Arc<ViewSpace>) -> Arc<ViewSpace> {
        Arc::new(self.point(a.centre), a.radius, self.angle(a.start), a.sweep * self.sense())
    }

    /// Where a line goes.
    pub(super) fn line(&self, l: &Line<ViewSpace>) -> Line<ViewSpace> {
        Line::new(self.point(l.from), self.point(l.to))
    }

    /// Where a curve goes.
    pub(super) fn curve(&self, c: &Curve<ViewSpace>) -> Curve<ViewSpace> {
        match c {
            Curve::Line(l) => Curve::Line(self.line(l)),
            Curve::Arc(a) => Curve::Arc(self.arc(a)),
            Curve::Ellipse(e) => Curve::Ellipse(EllipticArc {
                centre: self.point(e.centre),
                radii: e.radii,
                turn: self.angle(e.turn),
                start: e.start * self.sense(),
                sweep: e.sweep * self.sense(),
            }),
            Curve::Cubic(c) => Curve::Cubic(Cubic(c.0.map(|p| self.point(p)))),
        }
    }
}

/// Sine and cosine, exact at whole quarters: f64 leaves 6e-17 where a bolt circle wants 0.
fn sin_cos(degrees: f64) -> (f64, f64) {
    match degrees.rem_euclid(360.0) {
        0.0 => (0.0, 1.0),
        90.0 => (1.0, 0.0),
        180.0 => (0.0, -1.0),
        270.0 => (-1.0, 0.0),
        turned => turned.to_radians().sin_cos(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn a_mirrored_arc_passes_through_mirrored_points() {
        let arc = Curve::Arc(Arc::new(Point::new(3.0, 1.0), 2.0, 10.0, 70.0));
        for motion in [Motion::Mirror(Axis::X, 0.5), Motion::Mirror(Axis::Y, -1.0)] {
            let moved = motion.curve(&arc);
            for t in [0.0, 0.3, 1.0] {
                assert!(moved.at(t).distance(motion.point(arc.at(t))) < 1e-9);
            }
        }
    }

    proptest! {
        #[test]
        fn members_of_a_circle_keep_their_distance(
            n in 2u32..40, x in -50.0..50.0f64, y in -50.0..50.0f64,
        ) {
            let about = Point::new(1.0, -2.0);
            let repeat = Repeat::Polar { count: n, about, step: 360.0 / f64::from(n) };
            let p = Point::new(x, y);
            for m in motions(&repeat) {
                prop_assert!((m.point(p).distance(about) - p.distance(about)).abs() < 1e-9);
            }
        }
    }
}
