//! What a candidate puts on paper, reduced to what conflicts are made of.

use crate::annotate::{Seat, Sketch};
use crate::geom::{Line, Point, Quad, Rect, Space};
use crate::scene::Role;

/// Texts and lines of one candidate, with boxes around each and around all.
#[derive(Clone, Debug)]
pub(super) struct Ink<S> {
    /// Text boxes.
    pub texts: Vec<(Quad<S>, Rect<S>)>,
    /// Straight lines.
    pub lines: Vec<InkLine<S>>,
    /// Box around everything.
    pub bounds: Rect<S>,
}

/// A straight piece of a candidate.
#[derive(Clone, Copy, Debug)]
pub(super) struct InkLine<S> {
    /// Where it runs.
    pub line: Line<S>,
    /// What it does.
    pub kind: InkKind,
    /// Box around it.
    pub bounds: Rect<S>,
    /// Half of what it is wider than a line: an arrowhead's.
    pub half_width: f64,
}

/// What a piece of a candidate does.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum InkKind {
    /// Dimension line.
    Dim,
    /// Extension line.
    Ext,
    /// Leader or landing.
    Leader,
    /// Axis of an arrowhead.
    Arrow,
}

/// One way to draw an annotation, as the choice sees it.
#[derive(Clone, Debug)]
pub(super) struct Choice<S> {
    /// What it costs by itself, 1/100.
    pub cost: i64,
    /// Its ink.
    pub ink: Ink<S>,
    /// Its places among tiers.
    pub seats: Vec<Seat>,
}

/// An annotation as the choice sees it.
#[derive(Clone, Debug)]
pub(super) struct Chooser<S> {
    /// The view that it belongs to.
    pub view: usize,
    /// Its ways to be drawn; never none.
    pub choices: Vec<Choice<S>>,
}

/// A cost as an integer, so that sums do not depend on their order.
pub(super) fn whole(cost: f64) -> i64 {
    (cost * 100.0).round() as i64
}

impl<S: Space> Ink<S> {
    /// The ink of a sketch. Arcs count as chords that stray at most 0.1 mm.
    pub(super) fn of(sketch: &Sketch<S>) -> Self {
        let texts: Vec<_> = sketch
            .labels
            .iter()
            .map(|l| {
                let q = l.quad();
                (q, q.bounds())
            })
            .collect();
        let mut lines = Vec::new();
        for trace in &sketch.traces {
            let kind = match trace.role {
                Role::Dim => InkKind::Dim,
                Role::Ext => InkKind::Ext,
                Role::Leader => InkKind::Leader,
                Role::Arrow => InkKind::Arrow,
                Role::TextFrame => continue,
            };
            let points = trace.curve.flattened(0.1);
            lines.extend(points.windows(2).map(|w| InkLine::new(w[0], w[1], kind, 0.0)));
        }
        for head in &sketch.heads {
            let (tip, foot) = (head.tip(), head.foot());
            lines.push(InkLine::new(tip, foot, InkKind::Arrow, head.half_width()));
        }
        let boxes = texts.iter().map(|t| t.1).chain(lines.iter().map(|l| l.bounds));
        let nowhere = Rect::from_sides(0.0, 0.0, 0.0, 0.0);
        let bounds = Rect::union_of(boxes).unwrap_or(nowhere);
        Self { texts, lines, bounds }
    }
}

impl<S: Space> InkLine<S> {
    fn new(a: Point<S>, b: Point<S>, kind: InkKind, half_width: f64) -> Self {
        Self { line: Line::new(a, b), kind, bounds: Rect::new(a, b), half_width }
    }
}
