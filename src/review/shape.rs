//! Exact distances between pieces of ink: strokes with their width, and filled areas.
//!
//! Takes bars (straight strokes with round ends) and areas (polygons); gives the clear distance
//! between two of them and how deep they stand in one another. Round outlines come in as chords
//! and polygons that stray less than the depth at which a meeting counts.

use crate::geom::{Line, Point, Rect, Sheet, distance_line_line};

/// The form of a piece of ink.
#[derive(Clone, Debug)]
pub(crate) enum Shape {
    /// A straight stroke, `half` mm wide to each side of its middle, with round ends.
    Bar {
        /// Its middle.
        line: Line<Sheet>,
        /// Half its width, mm.
        half: f64,
    },
    /// A filled area.
    Area(Polygon),
}

/// A closed outline of straight sides.
#[derive(Clone, Debug)]
pub(crate) struct Polygon {
    corners: Vec<Point<Sheet>>,
    convex: bool,
}

impl Shape {
    /// The box around its ink; `None` for an area without corners.
    pub(crate) fn bounds(&self) -> Option<Rect<Sheet>> {
        match self {
            Self::Bar { line, half } => Some(Rect::new(line.from, line.to).grown(*half)),
            Self::Area(p) => Rect::around(p.corners.iter().copied()),
        }
    }

    /// Clear distance to `other` in mm; 0 where they meet.
    pub(crate) fn gap(&self, other: &Self) -> f64 {
        match (self, other) {
            (Self::Bar { line: a, half: h }, Self::Bar { line: b, half: k }) => {
                (bar_distance(a, b) - h - k).max(0.0)
            }
            (Self::Bar { line, half }, Self::Area(p))
            | (Self::Area(p), Self::Bar { line, half }) => (p.distance_to(line) - half).max(0.0),
            (Self::Area(a), Self::Area(b)) => a.distance(b),
        }
    }

    /// How deep the two stand in one another, mm: how far they would have to move apart, or for a
    /// stroke that enters an area how far it runs inside; 0 where they only touch or are apart.
    pub(crate) fn depth(&self, other: &Self) -> f64 {
        match (self, other) {
            (Self::Bar { line: a, half: h }, Self::Bar { line: b, half: k }) => {
                (h + k - bar_distance(a, b)).max(0.0)
            }
            (Self::Bar { line, half }, Self::Area(p))
            | (Self::Area(p), Self::Bar { line, half }) => {
                let distance = p.distance_to(line);
                if distance > 0.0 {
                    return (half - distance).max(0.0);
                }
                half.max(p.part_inside(line).map_or(0.0, |l| l.length()))
            }
            (Self::Area(a), Self::Area(b)) => a.depth(b),
        }
    }
}

impl Polygon {
    /// The area inside these corners, in walking order.
    pub(crate) fn new(corners: Vec<Point<Sheet>>) -> Self {
        let convex = is_convex(&corners);
        Self { corners, convex }
    }

    /// Its corners in walking order.
    pub(crate) fn corners(&self) -> &[Point<Sheet>] {
        &self.corners
    }

    fn sides(&self) -> impl Iterator<Item = (Point<Sheet>, Point<Sheet>)> + '_ {
        let n = self.corners.len();
        (0..n).map(move |i| (self.corners[i], self.corners[(i + 1) % n]))
    }

    /// Whether `p` lies inside, by the even-odd rule.
    pub(crate) fn contains(&self, p: Point<Sheet>) -> bool {
        let mut inside = false;
        for (a, b) in self.sides() {
            if (a.y > p.y) != (b.y > p.y) && p.x < a.x + (p.y - a.y) / (b.y - a.y) * (b.x - a.x) {
                inside = !inside;
            }
        }
        inside
    }

    /// Shortest distance to a line in mm; 0 if the line enters the area.
    pub(crate) fn distance_to(&self, line: &Line<Sheet>) -> f64 {
        if self.contains(line.from) || self.contains(line.to) {
            return 0.0;
        }
        self.sides()
            .map(|(a, b)| distance_line_line(line.from, line.to, a, b))
            .fold(f64::INFINITY, f64::min)
    }

    /// The stretch of `line` from where it first enters the area to where it last leaves it.
    pub(crate) fn part_inside(&self, line: &Line<Sheet>) -> Option<Line<Sheet>> {
        let v = line.vector();
        let mut cuts = vec![0.0, 1.0];
        for (a, b) in self.sides() {
            let side = b - a;
            let cross = v.cross(side);
            let t = (a - line.from).cross(side) / cross;
            let s = (a - line.from).cross(v) / cross;
            if (0.0..=1.0).contains(&t) && (0.0..=1.0).contains(&s) {
                cuts.push(t);
            }
        }
        cuts.sort_by(f64::total_cmp);
        let inside =
            |pair: &&[f64]| pair[1] > pair[0] && self.contains(line.at((pair[0] + pair[1]) / 2.0));
        let first = cuts.windows(2).find(inside)?[0];
        let last = cuts.windows(2).rfind(inside)?[1];
        Some(Line::new(line.at(first), line.at(last)))
    }

    fn distance(&self, other: &Self) -> f64 {
        if self.depth(other) > 0.0 {
            return 0.0;
        }
        let mut least = f64::INFINITY;
        for (a, b) in self.sides() {
            for (c, d) in other.sides() {
                least = least.min(distance_line_line(a, b, c, d));
            }
        }
        least
    }

    /// How far the two would have to be moved apart. Exact for convex areas (separating axes); for
    /// others the smaller side of their boxes' common part, once they truly meet.
    fn depth(&self, other: &Self) -> f64 {
        if self.convex && other.convex {
            return self.separation(other).min(other.separation(self)).max(0.0);
        }
        let meets = other.corners.first().is_some_and(|p| self.contains(*p))
            || self.corners.first().is_some_and(|p| other.contains(*p))
            || self.sides().any(|(a, b)| other.distance_to(&Line::new(a, b)) <= 0.0);
        let boxes = Rect::around(self.corners.iter().copied())
            .zip(Rect::around(other.corners.iter().copied()));
        match boxes.and_then(|(a, b)| a.intersection(&b)) {
            Some(common) if meets => common.width().min(common.height()),
            _ => 0.0,
        }
    }

    /// Least overlap of the two areas' shadows along the directions square to this one's sides.
    fn separation(&self, other: &Self) -> f64 {
        let mut least = f64::INFINITY;
        for (a, b) in self.sides() {
            let Some(side) = (b - a).unit() else { continue };
            let axis = side.left();
            let shadow = |corners: &[Point<Sheet>]| {
                corners
                    .iter()
                    .map(|p| axis.x * p.x + axis.y * p.y)
                    .fold((f64::INFINITY, f64::NEG_INFINITY), |(lo, hi), v| (lo.min(v), hi.max(v)))
            };
            let ((lo, hi), (other_lo, other_hi)) = (shadow(&self.corners), shadow(&other.corners));
            least = least.min(hi.min(other_hi) - lo.max(other_lo));
        }
        if least.is_finite() { least } else { 0.0 }
    }
}

fn bar_distance(a: &Line<Sheet>, b: &Line<Sheet>) -> f64 {
    distance_line_line(a.from, a.to, b.from, b.to)
}

fn is_convex(corners: &[Point<Sheet>]) -> bool {
    let n = corners.len();
    let (mut left, mut right) = (false, false);
    for i in 0..n {
        let (a, b, c) = (corners[i], corners[(i + 1) % n], corners[(i + 2) % n]);
        let turn = (b - a).cross(c - b);
        left |= turn > 1e-12;
        right |= turn < -1e-12;
    }
    !(left && right)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn bar(x0: f64, y0: f64, x1: f64, y1: f64, width: f64) -> Shape {
        Shape::Bar { line: Line::new(Point::new(x0, y0), Point::new(x1, y1)), half: width / 2.0 }
    }

    fn area(points: &[(f64, f64)]) -> Shape {
        Shape::Area(Polygon::new(points.iter().map(|(x, y)| Point::new(*x, *y)).collect()))
    }

    const SQUARE: [(f64, f64); 4] = [(0.0, 0.0), (4.0, 0.0), (4.0, 4.0), (0.0, 4.0)];

    #[test]
    fn a_wide_stroke_meets_what_its_middle_misses() {
        let square = area(&SQUARE);
        let wide = bar(-5.0, 4.2, 9.0, 4.2, 0.5);
        assert!((square.depth(&wide) - 0.05).abs() < 1e-12 && square.gap(&wide) == 0.0);
        let narrow = bar(-5.0, 4.2, 9.0, 4.2, 0.25);
        assert!(square.depth(&narrow) == 0.0 && (square.gap(&narrow) - 0.075).abs() < 1e-12);
    }

    #[test]
    fn a_stroke_through_an_area_is_as_deep_as_its_run_inside() {
        assert!((area(&SQUARE).depth(&bar(-5.0, 2.0, 9.0, 2.0, 0.25)) - 4.0).abs() < 1e-12);
        assert!((area(&SQUARE).depth(&bar(1.0, 2.0, 3.0, 2.0, 0.25)) - 2.0).abs() < 1e-12);
    }

    #[test]
    fn a_stroke_in_the_notch_of_an_area_stands_clear() {
        let notched = area(&[
            (0.0, 0.0),
            (4.0, 0.0),
            (4.0, 4.0),
            (3.0, 4.0),
            (3.0, 1.0),
            (1.0, 1.0),
            (1.0, 4.0),
            (0.0, 4.0),
        ]);
        let inside = bar(2.0, 2.0, 2.0, 3.5, 0.2);
        assert!((notched.gap(&inside) - 0.9).abs() < 1e-12, "{}", notched.gap(&inside));
        assert_eq!(notched.depth(&inside), 0.0);
    }

    #[test]
    fn areas_are_as_deep_in_each_other_as_they_must_move() {
        let a = area(&SQUARE);
        let b = area(&[(3.5, 1.0), (9.0, 1.0), (9.0, 2.0), (3.5, 2.0)]);
        assert!((a.depth(&b) - 0.5).abs() < 1e-12);
        let c = area(&[(7.0, 8.0), (9.0, 8.0), (9.0, 9.0), (7.0, 9.0)]);
        assert!((a.gap(&c) - 5.0).abs() < 1e-12);
    }
}
