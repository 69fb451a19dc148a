//! A member of a shape, moved to its place: what anchors and sizes are read off.

use super::repeat::Motion;
use crate::geom::{Arc, Curve, Line, Path, Point, Vector, View as ViewSpace};
use crate::spec::{Axis, Outline};

/// One member of a shape in view space.
#[derive(Clone, Debug)]
pub(super) enum Body {
    /// A straight line.
    Line(Line<ViewSpace>),
    /// Part of a circle.
    Arc(Arc<ViewSpace>),
    /// A whole circle.
    Circle(Arc<ViewSpace>),
    /// A slot: the two end arcs' circles, from which all follows.
    Slot {
        /// Circle of one end.
        from: Arc<ViewSpace>,
        /// Circle of the other end.
        to: Arc<ViewSpace>,
    },
    /// A rectangle by its corners in walking order, its corner radius and its axis.
    Rectangle {
        /// The sharp corners.
        corners: [Point<ViewSpace>; 4],
        /// Radius of rounded corners, 0 for sharp.
        radius: f64,
        /// Axis from side to side, if it is a turned body seen from the side.
        axis: Option<Line<ViewSpace>>,
    },
    /// Any other outline.
    Outline(Vec<Path<ViewSpace>>),
}

impl Body {
    /// The member that `motion` makes of an outline; path data come parsed.
    pub(super) fn of(outline: &Outline, parsed: &[Path<ViewSpace>], motion: &Motion) -> Self {
        match outline {
            Outline::Line { from, to } => Self::Line(motion.line(&Line::new(*from, *to))),
            Outline::Arc { centre, radius, start, sweep } => {
                Self::Arc(motion.arc(&Arc::new(*centre, *radius, *start, *sweep)))
            }
            Outline::Circle { centre, diameter } => {
                Self::Circle(motion.arc(&Arc::circle(*centre, diameter / 2.0)))
            }
            Outline::Slot { from, to, width } => {
                let end = |p: &Point<ViewSpace>| motion.arc(&Arc::circle(*p, width / 2.0));
                Self::Slot { from: end(from), to: end(to) }
            }
            Outline::Rectangle { corner, size, corner_radius, turned } => {
                let at = |x: f64, y: f64| *corner + Vector::new(size.x * x, size.y * y);
                let corners = [at(0.0, 0.0), at(1.0, 0.0), at(1.0, 1.0), at(0.0, 1.0)];
                let axis = turned.map(|axis| match axis {
                    Axis::X => Line::new(at(0.0, 0.5), at(1.0, 0.5)),
                    Axis::Y => Line::new(at(0.5, 0.0), at(0.5, 1.0)),
                });
                Self::Rectangle {
                    corners: corners.map(|p| motion.point(p)),
                    radius: *corner_radius,
                    axis: axis.map(|l| motion.line(&l)),
                }
            }
            Outline::Polygon { points, closed } => {
                let moved: Vec<_> = points.iter().map(|p| motion.point(*p)).collect();
                Self::Outline(vec![Path::polyline(&moved, *closed)])
            }
            Outline::Path { .. } => Self::Outline(
                parsed
                    .iter()
                    .map(|p| Path {
                        curves: p.curves.iter().map(|c| motion.curve(c)).collect(),
                        closed: p.closed,
                    })
                    .collect(),
            ),
        }
    }

    /// Its outline as paths.
    pub(super) fn paths(&self) -> Vec<Path<ViewSpace>> {
        match self {
            Self::Line(l) => vec![Path::of(Curve::Line(*l))],
            Self::Arc(a) | Self::Circle(a) => vec![Path::of(Curve::Arc(*a))],
            Self::Slot { from, to } => vec![slot(from, to)],
            Self::Rectangle { corners, radius, .. } => vec![rounded(corners, *radius)],
            Self::Outline(paths) => paths.clone(),
        }
    }

    /// Its curves in walking order, over all subpaths.
    pub(super) fn curves(&self) -> Vec<Curve<ViewSpace>> {
        self.paths().into_iter().flat_map(|p| p.curves).collect()
    }

    /// The straight part of a rectangle's side: without the rounded corners, unless nothing is left.
    pub(super) fn straight(side: &Line<ViewSpace>, radius: f64) -> Line<ViewSpace> {
        match side.vector().unit() {
            Some(u) if side.length() > 2.0 * radius => {
                Line::new(side.from + u * radius, side.to - u * radius)
            }
            _ => *side,
        }
    }

    /// The sides of a rectangle in walking order, sharp.
    pub(super) fn sides(corners: &[Point<ViewSpace>; 4]) -> [Line<ViewSpace>; 4] {
        let [a, b, c, d] = *corners;
        [Line::new(a, b), Line::new(b, c), Line::new(c, d), Line::new(d, a)]
    }
}

/// Two straight sides and two half circles, counter-clockwise from the first side's beginning.
fn slot(from: &Arc<ViewSpace>, to: &Arc<ViewSpace>) -> Path<ViewSpace> {
    let r = from.radius;
    let Some(u) = (to.centre - from.centre).unit() else {
        return Path::of(Curve::Arc(*from));
    };
    let side = u.left() * r;
    let turn = u.angle();
    let (a, b) = (from.centre, to.centre);
    let curves = vec![
        Curve::line(a - side, b - side),
        Curve::Arc(Arc::new(b, r, turn - 90.0, 180.0)),
        Curve::line(b + side, a + side),
        Curve::Arc(Arc::new(a, r, turn + 90.0, 180.0)),
    ];
    Path { curves, closed: true }
}

/// A closed polygon of four corners, each rounded with `radius`.
fn rounded(corners: &[Point<ViewSpace>; 4], radius: f64) -> Path<ViewSpace> {
    if radius <= 0.0 {
        return Path::polyline(corners, true);
    }
    let mut curves = Vec::with_capacity(8);
    let sides = Body::sides(corners);
    let unit = |l: &Line<ViewSpace>| l.vector().unit().unwrap_or(Vector::new(1.0, 0.0));
    for (i, side) in sides.iter().enumerate() {
        let next = &sides[(i + 1) % 4];
        let (u, v) = (unit(side), unit(next));
        let (from, to) = (side.from + u * radius, side.to - u * radius);
        if from.distance(to) > crate::geom::COINCIDENT {
            curves.push(Curve::line(from, to));
        }
        let turns_left = u.cross(v) > 0.0;
        let inward = if turns_left { u.left() } else { -u.left() };
        let sweep = if turns_left { 90.0 } else { -90.0 };
        curves.push(Curve::Arc(Arc::new(to + inward * radius, radius, (-inward).angle(), sweep)));
    }
    Path { curves, closed: true }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn outlines_close_and_have_the_length_of_their_formula() {
        let still = Motion::Shift(Vector::new(0.0, 0.0));
        let slot =
            Outline::Slot { from: Point::new(0.0, 0.0), to: Point::new(20.0, 0.0), width: 8.0 };
        let path = &Body::of(&slot, &[], &still).paths()[0];
        assert!(path.meets_itself());
        assert!((path.length() - (40.0 + 8.0 * std::f64::consts::PI)).abs() < 1e-9);
        let plate = Outline::Rectangle {
            corner: Point::new(-5.0, -5.0),
            size: Vector::new(30.0, 20.0),
            corner_radius: 4.0,
            turned: None,
        };
        let path = &Body::of(&plate, &[], &still).paths()[0];
        assert!(path.meets_itself());
        let expected = 2.0 * (22.0 + 12.0) + 8.0 * std::f64::consts::PI;
        assert!((path.length() - expected).abs() < 1e-9);
        for pair in path.curves.windows(2) {
            assert!(pair[0].end().is_at(pair[1].start()));
        }
    }
}
