//! Which curves lie on one another, and where.
//!
//! Takes curves of one space; finds for each the others that run on it, in near n log n through an
//! R-tree over what identifies the infinite curve (place and direction of a line, centre and
//! radius of a circle). Straight lines, circular and elliptic arcs are compared by stretches,
//! Béziers only as a whole. Two curves run on one another where they stay within
//! [`COINCIDENT`] of each other.

use rstar::primitives::{GeomWithData, Rectangle};
use rstar::{AABB, RTree};

use crate::geom::{Arc, COINCIDENT, Cubic, Curve, EllipticArc, Line, Point, Space, same};

/// A stretch of a curve between two of its parameters, `from < to`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Stretch {
    pub(super) from: f64,
    pub(super) to: f64,
}

/// Curves that can be asked which of them may lie on a given one.
pub(super) struct CurveIndex {
    tree: RTree<GeomWithData<Rectangle<[f64; 4]>, usize>>,
    margin: f64,
}

/// First coordinate of the index, so far apart that kinds never meet.
const LINES: f64 = 0.0;
const CIRCLES: f64 = 10.0;
const ELLIPSES: f64 = 20.0;
const BEZIERS: f64 = 30.0;

type Box4 = ([f64; 4], [f64; 4]);

impl CurveIndex {
    /// An index in which curves within `margin` mm of each other (at least [`COINCIDENT`]) are
    /// neighbours.
    pub(super) fn new<S: Space>(curves: &[Curve<S>], margin: f64) -> Self {
        let margin = margin.max(COINCIDENT);
        let entries = curves
            .iter()
            .enumerate()
            .flat_map(|(i, c)| {
                let boxes = boxes_of(c, margin).into_iter();
                boxes.map(move |(a, b)| GeomWithData::new(Rectangle::from_corners(a, b), i))
            })
            .collect();
        Self { tree: RTree::bulk_load(entries), margin }
    }

    /// Numbers of the curves that may run on `curve`, in order.
    pub(super) fn neighbours<S: Space>(&self, curve: &Curve<S>) -> Vec<usize> {
        let mut found: Vec<usize> = boxes_of(curve, self.margin)
            .into_iter()
            .flat_map(|(a, b)| self.tree.locate_in_envelope_intersecting(AABB::from_corners(a, b)))
            .map(|entry| entry.data)
            .collect();
        found.sort_unstable();
        found.dedup();
        found
    }
}

/// Where a curve lies in the index. A line whose direction is near 0° has a second box near 180°.
fn boxes_of<S: Space>(curve: &Curve<S>, margin: f64) -> Vec<Box4> {
    let around = |kind: f64, v: [f64; 3]| {
        let [a, b, c] = v;
        let m = margin;
        vec![([kind, a - m, b - m, c - m], [kind, a + m, b + m, c + m])]
    };
    match curve {
        Curve::Line(l) => line_boxes(l, margin),
        Curve::Arc(a) => around(CIRCLES, [a.centre.x, a.centre.y, a.radius]),
        Curve::Ellipse(e) => {
            let e = long_axis_first(e);
            around(ELLIPSES, [e.centre.x, e.centre.y, e.radii.0])
        }
        Curve::Cubic(_) => {
            let middle = curve.at(0.5);
            around(BEZIERS, [middle.x, middle.y, 0.0])
        }
    }
}

fn line_boxes<S: Space>(l: &Line<S>, margin: f64) -> Vec<Box4> {
    let direction = l.vector().angle().rem_euclid(180.0);
    // The shorter the line, the less its ends say about its direction.
    let slack = (COINCIDENT / l.length().max(COINCIDENT)).asin().to_degrees() + 1e-9;
    let (x, y) = ((l.from.x, l.to.x), (l.from.y, l.to.y));
    let at = |angle: f64| {
        let low = [LINES, x.0.min(x.1) - margin, y.0.min(y.1) - margin, angle - slack];
        let high = [LINES, x.0.max(x.1) + margin, y.0.max(y.1) + margin, angle + slack];
        (low, high)
    };
    let mut boxes = vec![at(direction)];
    if direction - slack < 90.0 {
        boxes.push(at(direction + 180.0));
    }
    boxes
}

/// The stretches of `on` that `by` covers, in order; each longer than [`COINCIDENT`].
pub(super) fn covered<S: Space>(on: &Curve<S>, by: &Curve<S>) -> Vec<Stretch> {
    match (on, by) {
        (Curve::Line(on), Curve::Line(by)) => covered_line(on, by).into_iter().collect(),
        (Curve::Arc(on), Curve::Arc(by)) => {
            if !on.centre.is_at(by.centre) || !same(on.radius, by.radius) {
                return Vec::new();
            }
            covered_turn(on.start, on.sweep, by.start, by.sweep, slack(on.radius))
        }
        (Curve::Ellipse(on), Curve::Ellipse(by)) => covered_ellipse(on, by),
        (Curve::Cubic(on), Curve::Cubic(by)) => {
            let all = |points: [Point<S>; 4]| on.0.iter().zip(points).all(|(p, q)| p.is_at(q));
            let Cubic([a, b, c, d]) = *by;
            let whole = all([a, b, c, d]) || all([d, c, b, a]);
            whole.then_some(Stretch { from: 0.0, to: 1.0 }).into_iter().collect()
        }
        _ => Vec::new(),
    }
}

/// Whether two straight lines lie on one infinite line and the gap between them is at most `gap`.
pub(super) fn in_one_line<S: Space>(a: &Line<S>, b: &Line<S>, gap: f64) -> bool {
    let (long, short) = if a.length() >= b.length() { (a, b) } else { (b, a) };
    let Some(u) = long.vector().unit() else { return false };
    let off = |p: Point<S>| u.cross(p - long.from).abs();
    let along = |p: Point<S>| u.dot(p - long.from);
    let (s, t) = (along(short.from), along(short.to));
    off(short.from) <= COINCIDENT
        && off(short.to) <= COINCIDENT
        && s.max(t) >= -gap
        && s.min(t) <= long.length() + gap
}

/// Most pairs of lines that are looked at for joining: beyond it so many centre lines lie on one
/// another that whether they are one or many no longer shows.
const MOST_PAIRS: usize = 4_000_000;

/// Lines that lie in one another's continuation, at most `gap` apart, as one line each, with the
/// numbers of those that it replaces, in order of the first of them. Past [`MOST_PAIRS`] what is left
/// stays as it is.
pub(super) fn joined<S: Space>(lines: &[Line<S>], gap: f64) -> Vec<(Line<S>, Vec<usize>)> {
    let curves: Vec<Curve<S>> = lines.iter().map(|l| Curve::Line(*l)).collect();
    let index = CurveIndex::new(&curves, gap / 2.0 + COINCIDENT);
    let mut group: Vec<Option<usize>> = vec![None; lines.len()];
    let mut groups: Vec<Vec<usize>> = Vec::new();
    let mut pairs = 0;
    for first in 0..lines.len() {
        if group[first].is_some() {
            continue;
        }
        let number = groups.len();
        group[first] = Some(number);
        let (mut members, mut open) = (vec![first], vec![first]);
        while let Some(i) = open.pop() {
            if pairs > MOST_PAIRS {
                break;
            }
            let near = index.neighbours(&curves[i]);
            pairs += near.len();
            for j in near {
                if group[j].is_none() && in_one_line(&lines[i], &lines[j], gap) {
                    group[j] = Some(number);
                    members.push(j);
                    open.push(j);
                }
            }
        }
        members.sort_unstable();
        groups.push(members);
    }
    groups.into_iter().map(|members| (hull(lines, &members), members)).collect()
}

/// The line from the first to the last point of lines in one direction.
fn hull<S: Space>(lines: &[Line<S>], members: &[usize]) -> Line<S> {
    let first = lines[members[0]];
    let Some(u) = first.vector().unit() else { return first };
    let (mut low, mut high) = ((0.0, first.from), (first.length(), first.to));
    for p in members[1..].iter().flat_map(|m| [lines[*m].from, lines[*m].to]) {
        let along = u.dot(p - first.from);
        if along < low.0 {
            low = (along, p);
        }
        if along > high.0 {
            high = (along, p);
        }
    }
    Line::new(low.1, high.1)
}

fn covered_line<S: Space>(on: &Line<S>, by: &Line<S>) -> Option<Stretch> {
    let length = on.length();
    let (u, v) = (on.vector().unit()?, by.vector());
    let along = |p: Point<S>| u.dot(p - on.from);
    let (s, t) = (along(by.from), along(by.to));
    let (low, high) = (s.min(t).max(0.0), s.max(t).min(length));
    if high - low <= COINCIDENT {
        return None;
    }
    // How far `by` strays from `on` where the common stretch begins and ends.
    let off = |at: f64| u.cross(by.from + v * ((at - s) / (t - s)) - on.from).abs();
    if off(low) > COINCIDENT || off(high) > COINCIDENT {
        return None;
    }
    Some(snapped(low / length, high / length, COINCIDENT / length))
}

fn covered_ellipse<S: Space>(on: &EllipticArc<S>, by: &EllipticArc<S>) -> Vec<Stretch> {
    let (a, b) = (long_axis_first(on), long_axis_first(by));
    let turned = (b.turn - a.turn).rem_euclid(180.0);
    let parallel = turned.min(180.0 - turned).to_radians() * a.radii.0 <= COINCIDENT;
    let equal = same(a.radii.0, b.radii.0) && same(a.radii.1, b.radii.1);
    if !a.centre.is_at(b.centre) || !equal || !parallel {
        return Vec::new();
    }
    // Half a turn of the axes moves the beginning by half a turn.
    let half = ((b.turn - a.turn) / 180.0).round() * 180.0;
    covered_turn(a.start, a.sweep, b.start + half, b.sweep, slack(a.radii.0))
}

fn long_axis_first<S: Space>(e: &EllipticArc<S>) -> EllipticArc<S> {
    if e.radii.0 >= e.radii.1 {
        return *e;
    }
    let radii = (e.radii.1, e.radii.0);
    EllipticArc { radii, turn: e.turn + 90.0, start: e.start - 90.0, ..*e }
}

/// Degrees on a circle of this radius that are no length.
fn slack(radius: f64) -> f64 {
    (COINCIDENT / radius).to_degrees()
}

/// The common stretches of two turns round one centre, in parameters of the first.
fn covered_turn(start: f64, sweep: f64, by_start: f64, by_sweep: f64, slack: f64) -> Vec<Stretch> {
    let whole = sweep.abs();
    let first = if sweep >= 0.0 { start } else { start + sweep };
    let by_first = if by_sweep >= 0.0 { by_start } else { by_start + by_sweep };
    let offset = (by_first - first).rem_euclid(360.0);
    let mut found: Vec<Stretch> = [offset - 360.0, offset]
        .into_iter()
        .map(|low| (low.max(0.0), (low + by_sweep.abs()).min(whole)))
        .filter(|(low, high)| high - low > slack)
        .map(|(low, high)| {
            // Parameters run against the angle where the first arc turns clockwise.
            let (low, high) = if sweep >= 0.0 { (low, high) } else { (whole - high, whole - low) };
            snapped(low / whole, high / whole, slack / whole)
        })
        .collect();
    found.sort_by(|a, b| a.from.total_cmp(&b.from));
    found
}

fn snapped(from: f64, to: f64, slack: f64) -> Stretch {
    Stretch {
        from: if from <= slack { 0.0 } else { from },
        to: if to >= 1.0 - slack { 1.0 } else { to },
    }
}

impl Stretch {
    pub(super) fn holds(&self, t: f64) -> bool {
        t > self.from && t < self.to
    }
}

/// A whole turn whose pieces at both ends of the parameter range are one piece: from `t0` through
/// the beginning to `t1`.
pub(super) fn across_start<S: Space>(curve: &Curve<S>, t0: f64, t1: f64) -> Curve<S> {
    match curve {
        Curve::Arc(a) => {
            let sweep = a.sweep * (1.0 - t0 + t1);
            Curve::Arc(Arc { start: a.start + a.sweep * t0, sweep, ..*a })
        }
        Curve::Ellipse(e) => {
            let sweep = e.sweep * (1.0 - t0 + t1);
            Curve::Ellipse(EllipticArc { start: e.start + e.sweep * t0, sweep, ..*e })
        }
        Curve::Line(_) | Curve::Cubic(_) => curve.piece(t0, 1.0),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geom::View;

    fn line(x0: f64, y0: f64, x1: f64, y1: f64) -> Curve<View> {
        Curve::line(Point::new(x0, y0), Point::new(x1, y1))
    }

    #[test]
    fn a_line_covers_what_they_share() {
        let c = covered(&line(0.0, 0.0, 10.0, 0.0), &line(14.0, 0.0, 4.0, 0.0));
        assert_eq!(c, vec![Stretch { from: 0.4, to: 1.0 }]);
        assert!(covered(&line(0.0, 0.0, 10.0, 0.0), &line(10.0, 0.0, 20.0, 0.0)).is_empty());
        assert!(covered(&line(0.0, 0.0, 10.0, 0.0), &line(0.0, 0.001, 10.0, 0.001)).is_empty());
    }

    #[test]
    fn an_arc_may_cover_both_ends_of_another() {
        let arc =
            |start, sweep| Curve::Arc(Arc::<View>::new(Point::new(1.0, 1.0), 9.0, start, sweep));
        let c = covered(&arc(0.0, 360.0), &arc(-36.0, 72.0));
        assert_eq!(c.len(), 2);
        assert!((c[0].to - 0.1).abs() < 1e-9 && (c[1].from - 0.9).abs() < 1e-9);
        let c = covered(&arc(90.0, -90.0), &arc(0.0, 45.0));
        assert_eq!(c.len(), 1);
        assert!((c[0].from - 0.5).abs() < 1e-9 && c[0].to == 1.0);
    }

    #[test]
    fn an_ellipse_is_the_same_with_its_axes_named_the_other_way() {
        let e = |radii, turn, start| {
            Curve::Ellipse(EllipticArc {
                centre: Point::<View>::new(0.0, 0.0),
                radii,
                turn,
                start,
                sweep: 90.0,
            })
        };
        let c = covered(&e((5.0, 3.0), 20.0, 0.0), &e((3.0, 5.0), 110.0, -90.0));
        assert_eq!(c, vec![Stretch { from: 0.0, to: 1.0 }]);
        let c = covered(&e((5.0, 3.0), 20.0, 0.0), &e((5.0, 3.0), 200.0, 180.0));
        assert_eq!(c, vec![Stretch { from: 0.0, to: 1.0 }]);
    }

    #[test]
    fn lines_near_level_find_each_other_across_the_turn_of_the_angle() {
        let curves = [line(0.0, 0.0, 100.0, 5e-5), line(0.0, 0.0, 100.0, -5e-5)];
        let index = CurveIndex::new(&curves, COINCIDENT);
        assert_eq!(index.neighbours(&curves[0]), vec![0, 1]);
        assert_eq!(index.neighbours(&curves[1]), vec![0, 1]);
    }

    #[test]
    fn touching_lines_join_and_distant_ones_do_not() {
        let l = |a: f64, b: f64| Line::<View>::new(Point::new(a, 1.0), Point::new(b, 1.0));
        let lines = [l(0.0, 10.0), l(30.0, 20.0), l(10.0, 20.0), l(31.0, 40.0)];
        let found = joined(&lines, 0.0);
        assert_eq!(found.len(), 2);
        assert_eq!(found[0].1, vec![0, 1, 2]);
        assert!((found[0].0.length() - 30.0).abs() < 1e-9);
    }
}
