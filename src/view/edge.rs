//! A finished view in view space.

use std::collections::BTreeMap;

use super::anchor::Named;
use crate::geom::{Arc, Curve, Line, Path, Rect, View as ViewSpace};
use crate::ident::{PartId, ShapeId, ViewId};
use crate::source::Span;
use crate::spec::{Direction, LineClass, Text};
use crate::units::Scale;

/// A flat picture of a part, in mm of the part, y up.
#[derive(Clone, Debug)]
pub struct View {
    /// Its id.
    pub id: ViewId,
    /// Where the spec describes it.
    pub span: Span,
    /// The part that it shows.
    pub part: PartId,
    /// From where the part is seen.
    pub from: Direction,
    /// Its own scale where it differs from the main one.
    pub scale: Option<Scale>,
    /// Its label.
    pub label: Option<Text>,
    /// Whether it shows a cut.
    pub is_section: bool,
    /// Its edges, no two of them on one another.
    pub edges: Vec<Edge>,
    /// What gets centre lines.
    pub centres: Vec<CentreFeature>,
    /// Cut faces.
    pub regions: Vec<Region>,
    /// Box around visible, hidden and cut edges: the extent of the part in this view.
    pub bounds: Rect<ViewSpace>,
    pub(super) names: BTreeMap<ShapeId, Named>,
}

/// One curve of a view.
#[derive(Clone, Debug, PartialEq)]
pub struct Edge {
    /// How it is drawn.
    pub class: LineClass,
    /// Its curve.
    pub curve: Curve<ViewSpace>,
    /// The shapes or features that make it, in order.
    pub shapes: Vec<ShapeId>,
}

/// Something round or symmetrical that gets centre lines.
#[derive(Clone, Debug, PartialEq)]
pub enum CentreFeature {
    /// A circle seen round: a cross reaching past the rim.
    Cross {
        /// The shape.
        shape: ShapeId,
        /// The circle.
        circle: Arc<ViewSpace>,
        /// Direction of the first line, degrees: radial for holes on a pitch circle, else 0.
        turn: f64,
        /// Whether only the line in direction `turn` is drawn, because a pitch circle or a common
        /// axis already is the other.
        single: bool,
    },
    /// An axis or symmetry line over this length of the feature, to be drawn past both ends.
    Axis {
        /// The shape.
        shape: ShapeId,
        /// From one end of the feature to the other.
        line: Line<ViewSpace>,
    },
    /// The circle through the centres of features spaced around it.
    Pitch {
        /// The group.
        shape: ShapeId,
        /// The circle, or the arc that holds them.
        circle: Arc<ViewSpace>,
    },
}

/// A cut face.
#[derive(Clone, Debug, PartialEq)]
pub struct Region {
    /// The shape that bounds it.
    pub shape: ShapeId,
    /// Its closed outlines by the even-odd rule.
    pub outlines: Vec<Path<ViewSpace>>,
}
