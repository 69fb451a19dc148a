//! Named places of a view.

use crate::geom::{Arc, Line, Point, View as ViewSpace};
use crate::ident::ShapeId;
use crate::spec::{LineDirection, SizeSign};

/// A place that an annotation can hold on to, in view space.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Anchor {
    /// A corner, an end, a middle, a quadrant.
    Point(Point<ViewSpace>),
    /// The centre of something round that reaches `reach` mm from it.
    Centre {
        /// The centre.
        at: Point<ViewSpace>,
        /// Radius of the feature.
        reach: f64,
    },
    /// A straight edge.
    Edge(Line<ViewSpace>),
    /// A centre line over the length of its feature.
    Axis(Line<ViewSpace>),
    /// A round edge.
    Round(Arc<ViewSpace>),
}

/// A size that a shape names.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Size {
    /// Diameter of a whole circle seen round.
    Diameter(Arc<ViewSpace>),
    /// Radius of an arc.
    Radius(Arc<ViewSpace>),
    /// Distance of two anchors.
    Distance {
        /// From.
        from: Anchor,
        /// To.
        to: Anchor,
        /// Measured so.
        direction: LineDirection,
        /// Sign that the shape implies: ⌀ across a turned body.
        sign: Option<SizeSign>,
    },
}

/// A size or place, and how many equal members of a group it stands for.
#[derive(Clone, Debug, PartialEq)]
pub struct Measured<T> {
    /// The size or place for each member of the group, in order; one for a single shape.
    pub members: Vec<(ShapeId, T)>,
}

/// Why a name is no anchor.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("{message}")]
pub struct AnchorError {
    /// What is wrong.
    pub message: String,
    /// A way out.
    pub help: String,
}
