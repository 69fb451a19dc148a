//! Where lines give way to text and arrowheads.

use rstar::{AABB, RTree, RTreeObject};

use crate::annotate::{Head, Practice};
use crate::geom::{Curve, Line, Point, Quad, Rect, Sheet, distance_line_line};
use crate::layout::Layout;

/// Areas that lines keep out of, found by place.
pub(super) struct Gaps {
    texts: RTree<Area>,
    heads: RTree<Area>,
}

/// A convex area; of an arrowhead also its tip.
struct Area {
    corners: Quad<Sheet>,
    tip: Option<Point<Sheet>>,
    bounds: Rect<Sheet>,
}

/// A line this near to an arrowhead's tip, mm, is the one that the arrowhead stands on.
const ON_TIP: f64 = 0.05;
/// A part shorter than this, mm, is not worth drawing between two gaps.
const CRUMB: f64 = 0.3;

impl RTreeObject for Area {
    type Envelope = AABB<[f64; 2]>;
    fn envelope(&self) -> Self::Envelope {
        let (a, b) = (self.bounds.min, self.bounds.max);
        AABB::from_corners([a.x, a.y], [b.x, b.y])
    }
}

impl Gaps {
    /// The texts and arrowheads of a layout with the style's clear distance around them.
    pub(super) fn of(layout: &Layout, practice: &Practice<'_>) -> Self {
        let look = &practice.style.dimension;
        let labels = layout.annotations.iter().flat_map(|p| &p.sketch.labels);
        let view_labels = layout.views.iter().filter_map(|v| v.label.as_ref());
        let texts = labels
            .chain(view_labels)
            .flat_map(|l| l.quads().collect::<Vec<_>>())
            .map(|q| Area::new(grown(&q, look.text_gap), None))
            .collect();
        let heads = layout
            .annotations
            .iter()
            .flat_map(|p| &p.sketch.heads)
            .filter_map(|h| head_area(h, look.arrow_gap).map(|q| Area::new(q, Some(h.tip()))))
            .collect();
        Self { texts: RTree::bulk_load(texts), heads: RTree::bulk_load(heads) }
    }

    /// What is left of a curve that gives way to texts.
    pub(super) fn around_texts(&self, curve: &Curve<Sheet>) -> Vec<Curve<Sheet>> {
        cut(curve, &self.texts)
    }

    /// What is left of a curve that gives way to texts and arrowheads.
    pub(super) fn around_all(&self, curve: &Curve<Sheet>) -> Vec<Curve<Sheet>> {
        let after = cut(curve, &self.texts);
        after.iter().flat_map(|c| cut(c, &self.heads)).collect()
    }
}

impl Area {
    fn new(corners: Quad<Sheet>, tip: Option<Point<Sheet>>) -> Self {
        Self { bounds: corners.bounds(), corners, tip }
    }

    /// Whether a line is the one that this arrowhead stands on.
    fn stands_on(&self, curve: &Curve<Sheet>) -> bool {
        let Some(tip) = self.tip else { return false };
        curve.flattened(0.02).windows(2).any(|w| distance_line_line(tip, tip, w[0], w[1]) < ON_TIP)
    }
}

/// An arrowhead, widened by `gap` on both sides.
fn head_area(head: &Head<Sheet>, gap: f64) -> Option<Quad<Sheet>> {
    match *head {
        Head::Arrow { tip, towards, length, width } => {
            let across = towards.left() * (width / 2.0 + gap);
            let foot = tip - towards * length;
            Some(Quad([tip + across, foot + across, foot - across, tip - across]))
        }
        Head::Dot { .. } => None,
    }
}

fn grown(quad: &Quad<Sheet>, by: f64) -> Quad<Sheet> {
    let [a, b, c, d] = quad.0;
    let unit = |p: Point<Sheet>, q: Point<Sheet>| {
        (q - p).unit().unwrap_or(crate::geom::Vector::new(0.0, 0.0)) * by
    };
    let (u, v) = (unit(a, b), unit(a, d));
    Quad([a - u - v, b + u - v, c + u + v, d - u + v])
}

fn cut(curve: &Curve<Sheet>, areas: &RTree<Area>) -> Vec<Curve<Sheet>> {
    let b = curve.bounds();
    let envelope = AABB::from_corners([b.min.x, b.min.y], [b.max.x, b.max.y]);
    let mut covered: Vec<(f64, f64)> = areas
        .locate_in_envelope_intersecting(envelope)
        .filter(|area| !area.stands_on(curve))
        .flat_map(|area| covered_by(curve, &area.corners))
        .collect();
    if covered.is_empty() {
        return vec![*curve];
    }
    covered.sort_by(|a, b| a.0.total_cmp(&b.0));
    let length = curve.length();
    let mut left = Vec::new();
    let mut from = 0.0;
    for (t0, t1) in covered.into_iter().chain([(1.0, 1.0)]) {
        if (t0 - from) * length > CRUMB {
            left.push(curve.piece(from, t0));
        }
        from = f64::max(from, t1);
    }
    left
}

/// The stretches of a curve, as parameters, inside a convex area. Curves that are not straight
/// are asked chord by chord.
fn covered_by(curve: &Curve<Sheet>, area: &Quad<Sheet>) -> Vec<(f64, f64)> {
    if let Curve::Line(l) = curve {
        return inside(l, area).into_iter().collect();
    }
    let chords = (curve.length() / 0.25).ceil().clamp(8.0, 2000.0) as usize;
    let at = |i: usize| i as f64 / chords as f64;
    (0..chords)
        .filter(|i| {
            let line = Line::new(curve.at(at(*i)), curve.at(at(*i + 1)));
            inside(&line, area).is_some()
        })
        .map(|i| (at(i), at(i + 1)))
        .collect()
}

/// The part of a straight line inside a convex area, as shares of its length.
fn inside(line: &Line<Sheet>, area: &Quad<Sheet>) -> Option<(f64, f64)> {
    let [a, b, c, d] = area.0;
    let middle = a.middle(c);
    let v = line.vector();
    let (mut t0, mut t1) = (0.0f64, 1.0f64);
    for (p, q) in [(a, b), (b, c), (c, d), (d, a)] {
        let side = q - p;
        // Positive on the side of the middle, whichever way round the corners go.
        let sense = if side.cross(middle - p) >= 0.0 { 1.0 } else { -1.0 };
        let at_start = side.cross(line.from - p) * sense;
        let slope = side.cross(v) * sense;
        if slope.abs() < 1e-12 {
            if at_start < 0.0 {
                return None;
            }
        } else if slope > 0.0 {
            t0 = t0.max(-at_start / slope);
        } else {
            t1 = t1.min(-at_start / slope);
        }
    }
    (t1 > t0).then_some((t0, t1))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn p(x: f64, y: f64) -> Point<Sheet> {
        Point::new(x, y)
    }

    #[test]
    fn a_line_through_a_box_is_covered_between_its_sides() {
        let area = Quad::from(Rect::new(p(2.0, -1.0), p(4.0, 1.0)));
        let line = Line::new(p(0.0, 0.0), p(10.0, 0.0));
        let (t0, t1) = inside(&line, &area).expect("it passes through");
        assert!((t0 - 0.2).abs() < 1e-12 && (t1 - 0.4).abs() < 1e-12);
        assert_eq!(inside(&Line::new(p(0.0, 2.0), p(10.0, 2.0)), &area), None);
    }

    #[test]
    fn a_line_that_an_arrowhead_stands_on_stays_whole() {
        let head = Head::Arrow {
            tip: p(0.0, 0.0),
            towards: crate::geom::Vector::new(1.0, 0.0),
            length: 3.5,
            width: 0.92,
        };
        let area = Area::new(head_area(&head, 1.5).expect("it has a body"), Some(head.tip()));
        assert!(area.stands_on(&Curve::line(p(0.0, -9.0), p(0.0, 9.0))));
        let through = Curve::line(p(-2.0, -9.0), p(-2.0, 9.0));
        assert!(!area.stands_on(&through) && !covered_by(&through, &area.corners).is_empty());
    }
}
