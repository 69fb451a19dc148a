//! Annotations with their anchors bound and their values measured, still free of scale.

use std::sync::Arc;

use super::label::Label;
use crate::geom::{self, Line, Point, Vector, View as ViewSpace};
use crate::ident::{ItemId, ShapeId};
use crate::scene::{ItemKind, Value};
use crate::source::Span;
use crate::spec::Pin;

/// Something to be said about a view.
#[derive(Clone, Debug)]
pub struct Annotation {
    /// Its id.
    pub id: ItemId,
    /// Where the spec asks for it.
    pub span: Span,
    /// The view that it is drawn in: place in the list of views.
    pub view: usize,
    /// Dimension, callout or leader.
    pub kind: ItemKind,
    /// The shapes that it speaks of.
    pub shapes: Vec<ShapeId>,
    /// What it says, where that is one value.
    pub value: Option<Value>,
    /// Its text as one line, for reports.
    pub text: String,
    /// What is to be drawn.
    pub content: Content,
    /// Where the spec wants it.
    pub pin: Pin,
}

/// What is to be drawn. Points in view space, mm of the part.
#[derive(Clone, Debug)]
pub enum Content {
    /// One distance.
    Linear(LinearSize),
    /// Distances end to end on one line, in order along it.
    Chain(Vec<LinearSize>),
    /// Distances from one base, shortest first.
    Baseline(Vec<LinearSize>),
    /// An angle between two edges.
    Angular {
        /// Where the edges, prolonged, meet.
        vertex: Point<ViewSpace>,
        /// The two edges, each walking away from the vertex.
        legs: [Line<ViewSpace>; 2],
        /// Its text.
        label: Arc<Label>,
    },
    /// A diameter seen round; drawn at one of the circles.
    Diameter {
        /// The equal circles.
        circles: Vec<geom::Arc<ViewSpace>>,
        /// Its text.
        label: Arc<Label>,
    },
    /// A radius; drawn at one of the arcs.
    Radius {
        /// The equal arcs.
        arcs: Vec<geom::Arc<ViewSpace>>,
        /// Its text.
        label: Arc<Label>,
    },
    /// Lines of text on a leader that holds on to one of the targets.
    Leader {
        /// Where it may point.
        targets: Vec<Target>,
        /// Its text; further lines stand below the landing.
        label: Arc<Label>,
    },
}

/// One distance to be drawn.
#[derive(Clone, Debug)]
pub struct LinearSize {
    /// First place.
    pub from: Hold,
    /// Second place.
    pub to: Hold,
    /// Unit vector along which the distance is measured, in reading direction.
    pub along: Vector<ViewSpace>,
    /// Its text.
    pub label: Arc<Label>,
}

/// Where an extension line begins.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Hold {
    /// At a point.
    Point(Point<ViewSpace>),
    /// At the end of the centre lines through a point; they go round this radius (0: there are none).
    Centre(Point<ViewSpace>, f64),
    /// At the nearer end of an edge that runs square to the dimension.
    Edge(Line<ViewSpace>),
    /// At the nearer end of a centre line that reaches past this line.
    Axis(Line<ViewSpace>),
}

/// Where a leader may point.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Target {
    /// At a point.
    Point(Point<ViewSpace>),
    /// Anywhere on a straight edge.
    Edge(Line<ViewSpace>),
    /// At the rim of a circle or arc, aiming at its centre.
    Round(geom::Arc<ViewSpace>),
}

impl Hold {
    /// A point of it; for edges and axes their middle.
    #[must_use]
    pub fn point(&self) -> Point<ViewSpace> {
        match *self {
            Self::Point(p) | Self::Centre(p, _) => p,
            Self::Edge(l) | Self::Axis(l) => l.at(0.5),
        }
    }
}

impl LinearSize {
    /// Signed place of a hold along the measured direction, mm from the view's origin.
    #[must_use]
    pub fn station(&self, hold: &Hold) -> f64 {
        (hold.point() - Point::new(0.0, 0.0)).dot(self.along)
    }

    /// The measured distance, mm.
    #[must_use]
    pub fn length(&self) -> f64 {
        (self.station(&self.to) - self.station(&self.from)).abs()
    }
}
