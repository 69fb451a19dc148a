//! From anchors to what is measured: holds, direction, length.

use super::annotation::{Hold, LinearSize};
use crate::geom::{Line, Point, Vector, View as ViewSpace};
use crate::spec::LineDirection;
use crate::view::Anchor;

/// Two directions are the same, or square, within this sine: a thousandth of a degree.
const PARALLEL: f64 = 2e-5;

/// Shorter than this, in mm of the part, two anchors are the same place.
const SAME_PLACE: f64 = 1e-6;

/// Why two anchors have no distance to be drawn.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub(super) enum MeasureError {
    /// Neither level nor upright to each other.
    #[error("the two places are neither level nor upright to each other")]
    NoDirection,
    /// Two edges that are not parallel.
    #[error("the two edges are not parallel, so they have an angle and no distance")]
    NotParallel,
    /// An edge along the measured direction.
    #[error("this edge runs along the measured direction, so it has no one place on it")]
    AlongEdge,
    /// Nothing between them.
    #[error("the two places coincide in the measured direction")]
    Coincident,
}

impl MeasureError {
    /// What to do about it.
    pub(super) fn help(&self) -> &'static str {
        match self {
            Self::NoDirection => "say direction = \"horizontal\", \"vertical\" or \"aligned\"",
            Self::NotParallel => "dimension them with angle = [a, b], or name points on them",
            Self::AlongEdge => "name one of its ends, or measure in the other direction",
            Self::Coincident => "name two places that are apart in that direction",
        }
    }
}

/// The place of an anchor that extension lines begin at.
pub(super) fn hold(anchor: &Anchor) -> Hold {
    match *anchor {
        Anchor::Point(p) => Hold::Point(p),
        Anchor::Centre { at, reach } => Hold::Centre(at, reach),
        Anchor::Edge(l) => Hold::Edge(l),
        Anchor::Axis(l) => Hold::Axis(l),
        Anchor::Round(a) => Hold::Centre(a.centre, a.radius),
    }
}

/// The direction in which `a` and `b` are measured, as a unit vector in reading direction.
pub(super) fn direction(
    a: &Hold,
    b: &Hold,
    asked: LineDirection,
) -> Result<Vector<ViewSpace>, MeasureError> {
    let along = match asked {
        LineDirection::Horizontal => Vector::new(1.0, 0.0),
        LineDirection::Vertical => Vector::new(0.0, 1.0),
        LineDirection::Aligned => {
            reading((b.point() - a.point()).unit().ok_or(MeasureError::Coincident)?)
        }
        LineDirection::Auto => automatic(a, b)?,
    };
    for edge in [a, b].into_iter().filter_map(line_of) {
        let run = edge.vector().unit().ok_or(MeasureError::Coincident)?;
        if run.dot(along).abs() > PARALLEL {
            return Err(MeasureError::AlongEdge);
        }
    }
    Ok(along)
}

/// The distance of two holds along a direction, ready to be drawn; its label is put on later.
pub(super) fn linear(a: Hold, b: Hold, asked: LineDirection) -> Result<LinearSize, MeasureError> {
    let along = direction(&a, &b, asked)?;
    let size = LinearSize { from: a, to: b, along, label: Default::default() };
    if size.length() < SAME_PLACE { Err(MeasureError::Coincident) } else { Ok(size) }
}

/// Where two edges, prolonged, meet; and each of them walking away from there.
pub(super) fn corner(
    a: &Line<ViewSpace>,
    b: &Line<ViewSpace>,
) -> Option<(Point<ViewSpace>, [Line<ViewSpace>; 2])> {
    let (u, v) = (a.vector(), b.vector());
    let cross = u.cross(v);
    if cross.abs() <= PARALLEL * u.length() * v.length() {
        return None;
    }
    let vertex = a.at((b.from - a.from).cross(v) / cross);
    let away = |l: &Line<ViewSpace>| {
        if vertex.distance(l.from) <= vertex.distance(l.to) { *l } else { Line::new(l.to, l.from) }
    };
    Some((vertex, [away(a), away(b)]))
}

/// A direction turned so that text along it reads from below or from the right.
pub(super) fn reading(v: Vector<ViewSpace>) -> Vector<ViewSpace> {
    let backwards = v.x < -1e-9 || (v.x.abs() <= 1e-9 && v.y < 0.0);
    if backwards { -v } else { v }
}

fn line_of(hold: &Hold) -> Option<&Line<ViewSpace>> {
    match hold {
        Hold::Edge(l) | Hold::Axis(l) => Some(l),
        Hold::Point(_) | Hold::Centre(..) => None,
    }
}

fn automatic(a: &Hold, b: &Hold) -> Result<Vector<ViewSpace>, MeasureError> {
    let square_to = |l: &Line<ViewSpace>| {
        l.vector().unit().map(|u| reading(u.left())).ok_or(MeasureError::Coincident)
    };
    match (line_of(a), line_of(b)) {
        (Some(p), Some(q)) => {
            let (u, v) = (square_to(p)?, square_to(q)?);
            if u.cross(v).abs() > PARALLEL { Err(MeasureError::NotParallel) } else { Ok(u) }
        }
        (Some(l), None) | (None, Some(l)) => square_to(l),
        (None, None) => {
            let v = (b.point() - a.point()).unit().ok_or(MeasureError::Coincident)?;
            if v.y.abs() <= PARALLEL {
                Ok(Vector::new(1.0, 0.0))
            } else if v.x.abs() <= PARALLEL {
                Ok(Vector::new(0.0, 1.0))
            } else {
                Err(MeasureError::NoDirection)
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn p(x: f64, y: f64) -> Point<ViewSpace> {
        Point::new(x, y)
    }

    #[test]
    fn an_edge_and_a_point_are_measured_square_to_the_edge() {
        let edge = Hold::Edge(Line::new(p(0.0, 0.0), p(0.0, 10.0)));
        let size = linear(edge, Hold::Point(p(7.0, 3.0)), LineDirection::Auto).expect("apart");
        assert!((size.length() - 7.0).abs() < 1e-12 && size.along.y.abs() < 1e-12);
    }

    #[test]
    fn askew_points_need_a_direction() {
        let ends = (Hold::Point(p(0.0, 0.0)), Hold::Point(p(3.0, 4.0)));
        assert_eq!(
            direction(&ends.0, &ends.1, LineDirection::Auto),
            Err(MeasureError::NoDirection)
        );
        let size = linear(ends.0, ends.1, LineDirection::Aligned).expect("apart");
        assert!((size.length() - 5.0).abs() < 1e-12);
    }

    #[test]
    fn edges_at_an_angle_meet_in_a_corner() {
        let a = Line::new(p(2.0, 0.0), p(10.0, 0.0));
        let b = Line::new(p(5.0, 5.0), p(1.0, 1.0));
        let (vertex, legs) = corner(&a, &b).expect("not parallel");
        assert!(vertex.distance(p(0.0, 0.0)) < 1e-9);
        assert!(legs[1].from.distance(p(1.0, 1.0)) < 1e-12);
    }
}
