//! Axis-aligned boxes and turned ones.

use super::{Point, Space, Vector};

/// An axis-aligned box in space `S`, in mm; `x0 <= x1` and `y0 <= y1`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Rect<S> {
    /// Corner with the smallest coordinates.
    pub min: Point<S>,
    /// Corner with the largest coordinates.
    pub max: Point<S>,
}

impl<S: Space> Rect<S> {
    /// The box with these two opposite corners, in whatever order.
    #[must_use]
    pub fn new(a: Point<S>, b: Point<S>) -> Self {
        Self {
            min: Point::new(a.x.min(b.x), a.y.min(b.y)),
            max: Point::new(a.x.max(b.x), a.y.max(b.y)),
        }
    }

    /// The box from `x0`, `y0` to `x1`, `y1`.
    #[must_use]
    pub fn from_sides(x0: f64, y0: f64, x1: f64, y1: f64) -> Self {
        Self::new(Point::new(x0, y0), Point::new(x1, y1))
    }

    /// The smallest box around the points; `None` if there are none.
    pub fn around(points: impl IntoIterator<Item = Point<S>>) -> Option<Self> {
        let mut points = points.into_iter();
        let first = points.next()?;
        Some(points.fold(Self::new(first, first), Self::including))
    }

    /// The smallest box around the boxes; `None` if there are none.
    pub fn union_of(boxes: impl IntoIterator<Item = Self>) -> Option<Self> {
        boxes.into_iter().reduce(Self::union)
    }

    /// This box, stretched to hold `p`.
    #[must_use]
    pub fn including(self, p: Point<S>) -> Self {
        Self {
            min: Point::new(self.min.x.min(p.x), self.min.y.min(p.y)),
            max: Point::new(self.max.x.max(p.x), self.max.y.max(p.y)),
        }
    }

    /// The smallest box around both.
    #[must_use]
    pub fn union(self, other: Self) -> Self {
        self.including(other.min).including(other.max)
    }

    /// Width in mm.
    #[must_use]
    pub fn width(&self) -> f64 {
        self.max.x - self.min.x
    }

    /// Height in mm.
    #[must_use]
    pub fn height(&self) -> f64 {
        self.max.y - self.min.y
    }

    /// Middle of the box.
    #[must_use]
    pub fn centre(&self) -> Point<S> {
        self.min.middle(self.max)
    }

    /// The box grown by `margin` mm on every side (shrunk if negative, never inside out).
    #[must_use]
    pub fn grown(&self, margin: f64) -> Self {
        let dx = margin.max(-self.width() / 2.0);
        let dy = margin.max(-self.height() / 2.0);
        Self { min: self.min - Vector::new(dx, dy), max: self.max + Vector::new(dx, dy) }
    }

    /// The box moved by `v`.
    #[must_use]
    pub fn shifted(&self, v: Vector<S>) -> Self {
        Self { min: self.min + v, max: self.max + v }
    }

    /// Whether `p` lies inside or on the border.
    #[must_use]
    pub fn contains(&self, p: Point<S>) -> bool {
        p.x >= self.min.x && p.x <= self.max.x && p.y >= self.min.y && p.y <= self.max.y
    }

    /// Whether `other` lies wholly inside or on the border.
    #[must_use]
    pub fn holds(&self, other: &Self) -> bool {
        self.contains(other.min) && self.contains(other.max)
    }

    /// Whether the two boxes share more than a border.
    #[must_use]
    pub fn overlaps(&self, other: &Self) -> bool {
        self.min.x < other.max.x
            && other.min.x < self.max.x
            && self.min.y < other.max.y
            && other.min.y < self.max.y
    }

    /// The common part; `None` if the boxes share no area.
    #[must_use]
    pub fn intersection(&self, other: &Self) -> Option<Self> {
        self.overlaps(other).then(|| Self {
            min: Point::new(self.min.x.max(other.min.x), self.min.y.max(other.min.y)),
            max: Point::new(self.max.x.min(other.max.x), self.max.y.min(other.max.y)),
        })
    }

    /// Shortest distance between the two boxes in mm, 0 if they meet.
    #[must_use]
    pub fn distance(&self, other: &Self) -> f64 {
        let dx = (other.min.x - self.max.x).max(self.min.x - other.max.x).max(0.0);
        let dy = (other.min.y - self.max.y).max(self.min.y - other.max.y).max(0.0);
        (dx * dx + dy * dy).sqrt()
    }

    /// Whether the boxes are at most `reach` mm apart. Says the same as [`distance`](Self::distance),
    /// but most boxes are told apart by one subtraction; placing asks this millions of times.
    #[must_use]
    pub fn is_within(&self, other: &Self, reach: f64) -> bool {
        other.min.x - self.max.x <= reach
            && self.min.x - other.max.x <= reach
            && other.min.y - self.max.y <= reach
            && self.min.y - other.max.y <= reach
            && self.distance(other) <= reach
    }

    /// The four corners, walking around the box.
    #[must_use]
    pub fn corners(&self) -> [Point<S>; 4] {
        [self.min, Point::new(self.max.x, self.min.y), self.max, Point::new(self.min.x, self.max.y)]
    }
}

/// A turned box: four corners in walking order, as of a slanted text.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Quad<S>(pub [Point<S>; 4]);

impl<S: Space> Quad<S> {
    /// The smallest axis-aligned box around it.
    #[must_use]
    pub fn bounds(&self) -> Rect<S> {
        let [a, b, c, d] = self.0;
        Rect::new(a, b).including(c).including(d)
    }

    /// Whether its sides are parallel to the axes within `tolerance` mm.
    #[must_use]
    pub fn is_upright(&self, tolerance: f64) -> bool {
        let [a, b, c, _] = self.0;
        let level = |p: Point<S>, q: Point<S>| {
            (p.x - q.x).abs() <= tolerance || (p.y - q.y).abs() <= tolerance
        };
        level(a, b) && level(b, c)
    }

    /// Shortest distance to `other` in mm; 0 if they touch or overlap.
    #[must_use]
    pub fn distance(&self, other: &Self) -> f64 {
        if self.separating_gap(other) <= 0.0 && other.separating_gap(self) <= 0.0 {
            return 0.0;
        }
        let mut best = f64::INFINITY;
        for (a, b) in self.sides() {
            for (c, d) in other.sides() {
                best = best.min(super::distance_line_line(a, b, c, d));
            }
        }
        best
    }

    /// Whether `p` lies inside or on the border.
    #[must_use]
    pub fn contains(&self, p: Point<S>) -> bool {
        let turn = |(a, b): (Point<S>, Point<S>)| (b - a).cross(p - a);
        let mut signs = self.sides().into_iter().map(turn);
        let (mut left, mut right) = (true, true);
        for s in &mut signs {
            left &= s >= -1e-9;
            right &= s <= 1e-9;
        }
        left || right
    }

    /// Shortest distance to the straight line from `a` to `b`; 0 if it enters the box.
    #[must_use]
    pub fn distance_to_line(&self, a: Point<S>, b: Point<S>) -> f64 {
        if self.contains(a) || self.contains(b) {
            return 0.0;
        }
        self.sides()
            .into_iter()
            .map(|(c, d)| super::distance_line_line(a, b, c, d))
            .fold(f64::INFINITY, f64::min)
    }

    fn sides(&self) -> [(Point<S>, Point<S>); 4] {
        let [a, b, c, d] = self.0;
        [(a, b), (b, c), (c, d), (d, a)]
    }

    /// Largest gap found along the directions square to this box's own sides; positive: apart.
    fn separating_gap(&self, other: &Self) -> f64 {
        let mut widest = f64::NEG_INFINITY;
        for (a, b) in self.sides() {
            let Some(side) = (b - a).unit() else { continue };
            let axis = side.left();
            let span = |q: &Self| {
                q.0.iter()
                    .map(|p| axis.x * p.x + axis.y * p.y)
                    .fold((f64::INFINITY, f64::NEG_INFINITY), |(lo, hi), v| (lo.min(v), hi.max(v)))
            };
            let (lo, hi) = span(self);
            let (other_lo, other_hi) = span(other);
            widest = widest.max(other_lo - hi).max(lo - other_hi);
        }
        widest
    }
}

impl<S: Space> From<Rect<S>> for Quad<S> {
    fn from(r: Rect<S>) -> Self {
        Self(r.corners())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geom::Sheet;

    fn rect(x0: f64, y0: f64, x1: f64, y1: f64) -> Rect<Sheet> {
        Rect::from_sides(x0, y0, x1, y1)
    }

    #[test]
    fn boxes_that_share_a_border_do_not_overlap() {
        assert!(!rect(0.0, 0.0, 1.0, 1.0).overlaps(&rect(1.0, 0.0, 2.0, 1.0)));
    }

    #[test]
    fn distance_of_boxes_on_a_diagonal_is_that_of_their_corners() {
        let d = rect(0.0, 0.0, 1.0, 1.0).distance(&rect(4.0, 5.0, 6.0, 6.0));
        assert!((d - 5.0).abs() < 1e-12);
    }

    #[test]
    fn a_turned_box_beside_another_keeps_its_true_distance() {
        let diamond = Quad([
            Point::<Sheet>::new(0.0, -1.0),
            Point::new(1.0, 0.0),
            Point::new(0.0, 1.0),
            Point::new(-1.0, 0.0),
        ]);
        let square = Quad::from(rect(2.0, -1.0, 3.0, 1.0));
        assert!((diamond.distance(&square) - 1.0).abs() < 1e-9);
        let overlapping = Quad::from(rect(0.5, -0.2, 3.0, 0.2));
        assert_eq!(diamond.distance(&overlapping), 0.0);
    }
}
