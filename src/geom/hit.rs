//! How two straight lines, or a line and a box, lie to each other.

use super::{Line, Point, Rect, Space};

/// How two straight lines meet.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Crossing<S> {
    /// They share no point.
    Apart,
    /// They meet in one point, at these shares of their lengths.
    At {
        /// The common point.
        point: Point<S>,
        /// Share of the first line's length, 0 to 1.
        along_first: f64,
        /// Share of the second line's length, 0 to 1.
        along_second: f64,
    },
    /// They run on one another over this length in mm (may be 0 where only ends touch).
    Along {
        /// Length of the common stretch.
        length: f64,
    },
}

/// How the lines `a` and `b` meet; lines within `tolerance` mm of each other over their whole
/// common stretch count as running on one another. 1e-6 suits exact geometry, 0.3 mm drawn lines.
#[must_use]
pub fn line_crossing<S: Space>(a: &Line<S>, b: &Line<S>, tolerance: f64) -> Crossing<S> {
    let (u, v) = (a.vector(), b.vector());
    let (lu, lv) = (u.length(), v.length());
    if lu <= 1e-12 || lv <= 1e-12 {
        return Crossing::Apart;
    }
    let cross = u.cross(v);
    // Sine of the angle between them times the shorter length: how far the shorter one strays.
    let stray = (cross / (lu * lv)).abs() * lu.min(lv);
    if stray <= tolerance {
        let off = ((b.from - a.from).cross(u) / lu).abs();
        return if off <= tolerance {
            let length = overlap_length(a, b);
            if length >= 0.0 { Crossing::Along { length } } else { Crossing::Apart }
        } else {
            Crossing::Apart
        };
    }
    let d = b.from - a.from;
    let (s, t) = (d.cross(v) / cross, d.cross(u) / cross);
    let slack = |l: f64| 1e-9 / l.max(1e-9);
    let within = |x: f64, l: f64| x >= -slack(l) && x <= 1.0 + slack(l);
    if within(s, lu) && within(t, lv) {
        Crossing::At { point: a.at(s), along_first: s, along_second: t }
    } else {
        Crossing::Apart
    }
}

/// Length of `b`'s shadow on `a`, seen square to `a`, in mm; negative: the gap between them.
#[must_use]
pub fn overlap_length<S: Space>(a: &Line<S>, b: &Line<S>) -> f64 {
    let Some(axis) = a.vector().unit() else { return f64::NEG_INFINITY };
    let at = |p: Point<S>| axis.dot(p - a.from);
    let (p, q) = (at(b.from), at(b.to));
    p.max(q).min(a.length()) - p.min(q).max(0.0)
}

/// Shortest distance between the straight lines `a b` and `c d` in mm, 0 if they meet.
#[must_use]
pub fn distance_line_line<S: Space>(a: Point<S>, b: Point<S>, c: Point<S>, d: Point<S>) -> f64 {
    if let Crossing::At { .. } = line_crossing(&Line::new(a, b), &Line::new(c, d), 1e-12) {
        return 0.0;
    }
    [
        distance_point_line(a, c, d),
        distance_point_line(b, c, d),
        distance_point_line(c, a, b),
        distance_point_line(d, a, b),
    ]
    .into_iter()
    .fold(f64::INFINITY, f64::min)
}

/// Shortest distance from the straight line `a b` to the box in mm; 0 if it enters it.
#[must_use]
pub fn distance_line_rect<S: Space>(a: Point<S>, b: Point<S>, rect: &Rect<S>) -> f64 {
    if rect.contains(a) || rect.contains(b) {
        return 0.0;
    }
    let [p, q, r, s] = rect.corners();
    [(p, q), (q, r), (r, s), (s, p)]
        .into_iter()
        .map(|(c, d)| distance_line_line(a, b, c, d))
        .fold(f64::INFINITY, f64::min)
}

fn distance_point_line<S: Space>(p: Point<S>, a: Point<S>, b: Point<S>) -> f64 {
    let v = b - a;
    let square = v.dot(v);
    let t = if square > 0.0 { ((p - a).dot(v) / square).clamp(0.0, 1.0) } else { 0.0 };
    p.distance(a + v * t)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geom::View;
    use proptest::prelude::*;

    fn line(x0: f64, y0: f64, x1: f64, y1: f64) -> Line<View> {
        Line::new(Point::new(x0, y0), Point::new(x1, y1))
    }

    #[test]
    fn crossing_lines_meet_in_a_point() {
        match line_crossing(&line(0.0, 0.0, 4.0, 0.0), &line(1.0, -1.0, 1.0, 3.0), 1e-6) {
            Crossing::At { point, along_first, along_second } => {
                assert!(point.distance(Point::new(1.0, 0.0)) < 1e-12);
                assert!((along_first - 0.25).abs() < 1e-12 && (along_second - 0.25).abs() < 1e-12);
            }
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn lines_on_one_another_say_how_far() {
        let c = line_crossing(&line(0.0, 0.0, 4.0, 0.0), &line(3.0, 0.0, 9.0, 0.0), 1e-6);
        assert_eq!(c, Crossing::Along { length: 1.0 });
        let c = line_crossing(&line(0.0, 0.0, 4.0, 0.0), &line(5.0, 0.0, 9.0, 0.0), 1e-6);
        assert_eq!(c, Crossing::Apart);
    }

    proptest! {
        #[test]
        fn distance_does_not_depend_on_order_or_place(
            v in prop::array::uniform8(-50.0..50.0f64), dx in -20.0..20.0f64, turn in 0.0..360.0f64,
        ) {
            let p = |i: usize| Point::<View>::new(v[i], v[i + 1]);
            let d = distance_line_line(p(0), p(2), p(4), p(6));
            let (sin, cos) = turn.to_radians().sin_cos();
            let moved = |p: Point<View>| {
                Point::<View>::new(p.x * cos - p.y * sin + dx, p.x * sin + p.y * cos)
            };
            let e = distance_line_line(moved(p(6)), moved(p(4)), moved(p(0)), moved(p(2)));
            prop_assert!((d - e).abs() < 1e-7, "{} {}", d, e);
        }
    }
}
