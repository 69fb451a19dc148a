//! One way to draw an annotation, as lines, heads and labels.

use super::label::PlacedLabel;
use crate::geom::{Curve, Paper, Point, Rect, Sheet, Shift, Space, Vector};
use crate::scene::Role;

/// One way to draw an annotation in space `S`.
#[derive(Clone, Debug, PartialEq)]
pub struct Sketch<S> {
    /// Its lines, in drawing order.
    pub traces: Vec<Trace<S>>,
    /// Its arrowheads and dots.
    pub heads: Vec<Head<S>>,
    /// Its texts.
    pub labels: Vec<PlacedLabel<S>>,
}

/// A line of a sketch.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Trace<S> {
    /// Where it runs.
    pub curve: Curve<S>,
    /// What it does.
    pub role: Role,
}

/// What a line of a sketch ends in.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Head<S> {
    /// A filled arrowhead.
    Arrow {
        /// Its tip.
        tip: Point<S>,
        /// Unit vector in which it points.
        towards: Vector<S>,
        /// Length, mm.
        length: f64,
        /// Width at its foot, mm.
        width: f64,
    },
    /// A filled dot.
    Dot {
        /// Its middle.
        at: Point<S>,
        /// Diameter, mm.
        diameter: f64,
    },
}

impl<S> Default for Sketch<S> {
    fn default() -> Self {
        Self { traces: Vec::new(), heads: Vec::new(), labels: Vec::new() }
    }
}

impl<S: Space> Sketch<S> {
    /// Adds a straight line unless it has no length.
    pub fn line(&mut self, from: Point<S>, to: Point<S>, role: Role) {
        if from.distance(to) > 1e-6 {
            self.traces.push(Trace { curve: Curve::line(from, to), role });
        }
    }

    /// The smallest box around its ink, lines taken without width.
    #[must_use]
    pub fn bounds(&self) -> Option<Rect<S>> {
        let traces = self.traces.iter().map(|t| t.curve.bounds());
        let heads = self.heads.iter().map(Head::bounds);
        let labels = self.labels.iter().map(|l| l.quad().bounds());
        Rect::union_of(traces.chain(heads).chain(labels))
    }
}

impl Sketch<Paper> {
    /// The same sketch where its view stands on the sheet.
    #[must_use]
    pub fn on_sheet(&self, shift: &Shift) -> Sketch<Sheet> {
        let vector = |v: Vector<Paper>| Vector::<Sheet>::new(v.x, v.y);
        Sketch {
            traces: self
                .traces
                .iter()
                .map(|t| Trace { curve: shift.curve(&t.curve), role: t.role })
                .collect(),
            heads: self
                .heads
                .iter()
                .map(|h| match *h {
                    Head::Arrow { tip, towards, length, width } => Head::Arrow {
                        tip: shift.point(tip),
                        towards: vector(towards),
                        length,
                        width,
                    },
                    Head::Dot { at, diameter } => Head::Dot { at: shift.point(at), diameter },
                })
                .collect(),
            labels: self
                .labels
                .iter()
                .map(|l| PlacedLabel {
                    label: l.label.clone(),
                    origin: shift.point(l.origin),
                    angle: l.angle,
                })
                .collect(),
        }
    }
}

impl<S: Space> Head<S> {
    /// Middle of an arrowhead's foot; the middle of a dot.
    #[must_use]
    pub fn foot(&self) -> Point<S> {
        match *self {
            Self::Arrow { tip, towards, length, .. } => tip - towards * length,
            Self::Dot { at, .. } => at,
        }
    }

    /// Tip of an arrowhead; the middle of a dot.
    #[must_use]
    pub fn tip(&self) -> Point<S> {
        match *self {
            Self::Arrow { tip, .. } => tip,
            Self::Dot { at, .. } => at,
        }
    }

    /// Half its width, mm.
    #[must_use]
    pub fn half_width(&self) -> f64 {
        match *self {
            Self::Arrow { width, .. } => width / 2.0,
            Self::Dot { diameter, .. } => diameter / 2.0,
        }
    }

    /// The corners of an arrowhead from the tip on; none for a dot.
    #[must_use]
    pub fn corners(&self) -> Option<[Point<S>; 3]> {
        match *self {
            Self::Arrow { tip, towards, width, .. } => {
                let across = towards.left() * (width / 2.0);
                let foot = self.foot();
                Some([tip, foot + across, foot - across])
            }
            Self::Dot { .. } => None,
        }
    }

    /// The smallest box around its ink.
    #[must_use]
    pub fn bounds(&self) -> Rect<S> {
        match (self.corners(), *self) {
            (Some([a, b, c]), _) => Rect::new(a, b).including(c),
            (None, Self::Dot { at, diameter }) => Rect::new(at, at).grown(diameter / 2.0),
            (None, Self::Arrow { tip, .. }) => Rect::new(tip, tip),
        }
    }
}
