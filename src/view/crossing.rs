//! Where lines and arcs on paper cross each other.
//!
//! Takes the curves that share a dash pattern; gives for each the lengths along it at which others
//! cross or meet it, so that dashes can be laid there. Straight lines and circular arcs only: free
//! curves are neither axes nor circles, and their crossings fall where they fall.

use rstar::primitives::{GeomWithData, Rectangle};
use rstar::{AABB, RTree};

use crate::geom::{Arc, COINCIDENT, Crossing, Curve, Line, Paper, Point, line_crossing};

/// Most pairs of curves that are looked at; beyond it crossings fall where they fall.
const MOST_PAIRS: usize = 4_000_000;

/// For each curve, mm along it to where another one crosses or touches it.
pub(super) fn crossings(curves: &[Curve<Paper>]) -> Vec<Vec<f64>> {
    let entries = curves.iter().enumerate().map(|(i, c)| {
        let (a, b) = corners(c);
        GeomWithData::new(Rectangle::from_corners(a, b), i)
    });
    let tree = RTree::bulk_load(entries.collect());
    let mut found = vec![Vec::new(); curves.len()];
    let mut pairs = 0;
    for (i, curve) in curves.iter().enumerate() {
        let (a, b) = corners(curve);
        if pairs > MOST_PAIRS {
            break;
        }
        for entry in tree.locate_in_envelope_intersecting(AABB::from_corners(a, b)) {
            pairs += 1;
            if entry.data != i {
                let points = common_points(curve, &curves[entry.data]);
                found[i].extend(points.into_iter().filter_map(|p| length_to(curve, p)));
            }
        }
        found[i].sort_by(f64::total_cmp);
    }
    found
}

fn corners(c: &Curve<Paper>) -> ([f64; 2], [f64; 2]) {
    let b = c.bounds().grown(COINCIDENT);
    ([b.min.x, b.min.y], [b.max.x, b.max.y])
}

fn common_points(a: &Curve<Paper>, b: &Curve<Paper>) -> Vec<Point<Paper>> {
    match (a, b) {
        (Curve::Line(a), Curve::Line(b)) => match line_crossing(a, b, COINCIDENT) {
            Crossing::At { point, .. } => vec![point],
            Crossing::Along { .. } | Crossing::Apart => Vec::new(),
        },
        (Curve::Line(l), Curve::Arc(a)) | (Curve::Arc(a), Curve::Line(l)) => line_and_arc(l, a),
        (Curve::Arc(a), Curve::Arc(b)) => arc_and_arc(a, b),
        (Curve::Ellipse(_) | Curve::Cubic(_), _) | (_, Curve::Ellipse(_) | Curve::Cubic(_)) => {
            Vec::new()
        }
    }
}

fn line_and_arc(l: &Line<Paper>, a: &Arc<Paper>) -> Vec<Point<Paper>> {
    let Some(u) = l.vector().unit() else { return Vec::new() };
    let foot = u.dot(a.centre - l.from);
    let off = (a.centre - (l.from + u * foot)).length();
    let Some(half) = half_chord(a.radius, off) else { return Vec::new() };
    [foot - half, foot + half]
        .into_iter()
        .filter(|s| *s >= -COINCIDENT && *s <= l.length() + COINCIDENT)
        .map(|s| l.from + u * s)
        .filter(|p| a.covers((*p - a.centre).angle()))
        .collect()
}

fn arc_and_arc(a: &Arc<Paper>, b: &Arc<Paper>) -> Vec<Point<Paper>> {
    let between = b.centre - a.centre;
    let (d, Some(u)) = (between.length(), between.unit()) else { return Vec::new() };
    if d <= COINCIDENT {
        return Vec::new();
    }
    let foot = (d * d + a.radius * a.radius - b.radius * b.radius) / (2.0 * d);
    let Some(half) = half_chord(a.radius, foot.abs()) else { return Vec::new() };
    [-half, half]
        .into_iter()
        .map(|h| a.centre + u * foot + u.left() * h)
        .filter(|p| a.covers((*p - a.centre).angle()) && b.covers((*p - b.centre).angle()))
        .collect()
}

/// Half the chord at distance `off` from the centre; `None` where the circle does not reach.
fn half_chord(radius: f64, off: f64) -> Option<f64> {
    (off <= radius + COINCIDENT).then(|| (radius * radius - off * off).max(0.0).sqrt())
}

fn length_to(curve: &Curve<Paper>, p: Point<Paper>) -> Option<f64> {
    match curve {
        Curve::Line(l) => Some(l.from.distance(p).min(l.length())),
        Curve::Arc(a) => {
            let turn = ((p - a.centre).angle() - a.start) * a.sweep.signum();
            let turn = turn.rem_euclid(360.0);
            // Rounding just before the beginning must not count as almost a whole turn.
            let turn = if turn > 360.0 - 1e-7 { 0.0 } else { turn };
            Some(turn.min(a.sweep.abs()).to_radians() * a.radius)
        }
        Curve::Ellipse(_) | Curve::Cubic(_) => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_cross_on_a_pitch_circle_is_found_from_both_sides() {
        let p = Point::<Paper>::new;
        let curves = [
            Curve::Arc(Arc::circle(p(0.0, 0.0), 20.0)),
            Curve::line(p(15.0, 0.0), p(25.0, 0.0)),
            Curve::line(p(0.0, 30.0), p(0.0, -30.0)),
        ];
        let found = crossings(&curves);
        let quarter = 10.0 * std::f64::consts::PI;
        assert_eq!(found[0].len(), 3);
        for (at, expected) in found[0].iter().zip([0.0, quarter, 3.0 * quarter]) {
            assert!((at - expected).abs() < 1e-9, "{at} {expected}");
        }
        assert!((found[1][0] - 5.0).abs() < 1e-9);
        assert!((found[2][0] - 10.0).abs() < 1e-9 && (found[2][1] - 50.0).abs() < 1e-9);
    }

    #[test]
    fn circles_that_miss_each_other_have_no_crossing() {
        let p = Point::<Paper>::new;
        let curves = [
            Curve::circle(p(0.0, 0.0), 5.0),
            Curve::circle(p(0.0, 1.0), 3.0),
            Curve::circle(p(20.0, 0.0), 4.0),
        ];
        assert!(crossings(&curves).iter().all(Vec::is_empty));
    }
}
