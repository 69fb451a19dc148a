//! What a candidate pays against the geometry of its own view.

use super::Practice;
use super::sketch::{Head, Sketch, Trace};
use crate::geom::{Crossing, Line, Paper, Point, Quad, Rect, distance_line_line, line_crossing};
use crate::scene::Role;
use crate::spec::LineClass;
use crate::view::PaperView;

/// A view's lines, flattened and boxed, ready to be asked.
#[derive(Clone, Debug)]
pub struct Fixed {
    lines: Vec<Chain>,
    hatched: Vec<Face>,
    outline: Rect<Paper>,
}

/// A hatched face.
#[derive(Clone, Debug)]
struct Face {
    bounds: Rect<Paper>,
    outlines: Vec<Vec<Point<Paper>>>,
    /// Direction of its hatching, degrees.
    angle: f64,
}

#[derive(Clone, Debug)]
struct Chain {
    kind: Kind,
    points: Vec<Point<Paper>>,
    bounds: Rect<Paper>,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Kind {
    /// Visible, hidden, cut: text must stay clear.
    Outline,
    /// Centre lines: they may be broken for text.
    Centre,
}

/// Curves are flattened to chords that stray at most this far on paper, mm: a tenth of a narrow
/// line, so no check can tell.
const FLATNESS: f64 = 0.02;

/// Chords in one stretch of a line.
const STRETCH: usize = 8;

/// Lines within this distance, in mm of paper, run on one another.
const ON_ONE_ANOTHER: f64 = 0.3;

impl Fixed {
    /// The lines of a view.
    #[must_use]
    pub fn of(view: &PaperView) -> Self {
        let edges = view.edges.iter().map(|e| {
            let kind = match e.class {
                LineClass::Visible
                | LineClass::Hidden
                | LineClass::Cut
                | LineClass::Smooth
                | LineClass::Adjacent
                | LineClass::Break => Kind::Outline,
                LineClass::Centre | LineClass::Construction => Kind::Centre,
            };
            (kind, &e.curve)
        });
        let centres = view.centres.iter().flat_map(|c| c.lines.iter().map(|l| (Kind::Centre, l)));
        let lines = edges
            .chain(centres)
            .flat_map(|(kind, curve)| chains(kind, &curve.flattened(FLATNESS)))
            .collect();
        let hatched = view
            .hatch
            .iter()
            .filter_map(|h| {
                let outlines: Vec<Vec<Point<Paper>>> = h
                    .outlines
                    .iter()
                    .map(|path| path.curves.iter().flat_map(|c| c.flattened(FLATNESS)).collect())
                    .collect();
                let bounds = Rect::around(outlines.iter().flatten().copied())?;
                Some(Face { bounds, outlines, angle: h.angle })
            })
            .collect();
        Self { lines, hatched, outline: view.outline }
    }

    /// What `sketch` pays; `inside` says that its dimension line is meant to stand in the view.
    #[must_use]
    pub fn cost(&self, sketch: &Sketch<Paper>, inside: bool, practice: &Practice<'_>) -> f64 {
        let texts: f64 = sketch.labels.iter().map(|l| self.text_cost(&l.quad(), practice)).sum();
        let traces: f64 = sketch.traces.iter().map(|t| self.trace_cost(t, sketch, practice)).sum();
        let heads: f64 = if inside {
            0.0
        } else {
            sketch.heads.iter().map(|h| self.head_cost(h, practice)).sum()
        };
        texts + traces + heads + own_text_cost(sketch, practice)
    }

    fn text_cost(&self, quad: &Quad<Paper>, practice: &Practice<'_>) -> f64 {
        let costs = &practice.style.cost.unary;
        let clear = &practice.style.clearance;
        let bounds = quad.bounds();
        let mut cost = 0.0;
        let reach = clear.text_outline + practice.group.wide / 2.0;
        let near = |kind: Kind, reach: f64| {
            self.lines.iter().any(|c| {
                c.kind == kind
                    && c.bounds.is_within(&bounds, reach)
                    && c.points.windows(2).any(|w| quad.distance_to_line(w[0], w[1]) < reach)
            })
        };
        if near(Kind::Outline, reach) {
            cost += costs.text_on_outline;
        }
        if near(Kind::Centre, clear.text_line) {
            cost += costs.text_on_centre;
        }
        let middle = bounds.centre();
        if self.outline.contains(middle) {
            cost += costs.text_inside_view;
        }
        if self.hatch_at(middle).is_some() {
            cost += costs.text_on_hatch;
        }
        cost
    }

    fn trace_cost(
        &self,
        trace: &Trace<Paper>,
        sketch: &Sketch<Paper>,
        practice: &Practice<'_>,
    ) -> f64 {
        let costs = &practice.style.cost.unary;
        let points = trace.curve.flattened(FLATNESS);
        let bounds = trace.curve.bounds();
        let trim = practice.style.cost.trim;
        let pieces: Vec<Line<Paper>> =
            points.windows(2).filter_map(|w| Line::new(w[0], w[1]).trimmed(trim)).collect();
        let mut crossings = 0usize;
        let mut on_outline = false;
        for chain in self.lines.iter().filter(|c| c.kind == Kind::Outline) {
            if !chain.bounds.is_within(&bounds, ON_ONE_ANOTHER) {
                continue;
            }
            for own in &pieces {
                let near = Rect::new(own.from, own.to);
                if near.distance(&chain.bounds) > ON_ONE_ANOTHER {
                    continue;
                }
                for w in chain.points.windows(2) {
                    match line_crossing(own, &Line::new(w[0], w[1]), ON_ONE_ANOTHER) {
                        Crossing::At { .. } => crossings += 1,
                        Crossing::Along { length } if length > 0.5 => on_outline = true,
                        Crossing::Along { .. } | Crossing::Apart => {}
                    }
                }
            }
        }
        let crossings = crossings as f64;
        match trace.role {
            Role::Dim => {
                let on = if on_outline { costs.dim_on_outline } else { 0.0 };
                crossings * costs.dim_crosses_outline + on
            }
            Role::Ext => {
                let inside = length_inside(&trace.curve.start(), &trace.curve.end(), &self.outline);
                crossings * costs.ext_crosses_outline
                    + inside * costs.ext_inside_per_mm
                    + trace.curve.length() * costs.ext_per_mm
            }
            Role::Leader => {
                crossings * costs.leader_crosses_outline
                    + self.leader_along(trace, sketch, practice)
            }
            Role::Arrow | Role::TextFrame => 0.0,
        }
    }

    /// What a leader pays for running along a line that it ends on, or along hatching.
    fn leader_along(
        &self,
        trace: &Trace<Paper>,
        sketch: &Sketch<Paper>,
        practice: &Practice<'_>,
    ) -> f64 {
        let tip = trace.curve.start();
        if !sketch.heads.iter().any(|h| h.tip().is_at(tip)) {
            return 0.0;
        }
        let costs = &practice.style.cost.unary;
        let least = practice.style.leader.least_to_lines;
        let Some(direction) = trace.curve.direction(0.0) else { return 0.0 };
        let steep = |other: f64| {
            let d = (direction.angle() - other).rem_euclid(180.0);
            d.min(180.0 - d) < least
        };
        let near_tip = Rect::new(tip, tip).grown(ON_ONE_ANOTHER);
        let outlines = self.lines.iter().filter(|c| c.kind == Kind::Outline);
        let touching = outlines.filter(|c| c.bounds.is_within(&near_tip, 0.0)).any(|c| {
            c.points.windows(2).any(|w| {
                distance_line_line(tip, tip, w[0], w[1]) < ON_ONE_ANOTHER
                    && w[0].distance(w[1]) > 1.0
                    && steep((w[1] - w[0]).angle())
            })
        });
        let hatching = self.hatched.iter().any(|face| {
            let stretch = length_inside(&tip, &trace.curve.end(), &face.bounds);
            // Every millimetre of the leader over the face's box is asked.
            stretch > 0.0
                && steep(face.angle)
                && (0..=(trace.curve.length().ceil() as usize)).any(|mm| {
                    let t = mm as f64 / trace.curve.length().max(1.0);
                    self.hatch_at(trace.curve.at(t.min(1.0))).is_some()
                })
        });
        if touching || hatching { costs.leader_parallel } else { 0.0 }
    }

    fn head_cost(&self, head: &Head<Paper>, practice: &Practice<'_>) -> f64 {
        let (tip, foot) = (head.tip(), head.foot());
        let Some(own) = Line::new(tip, foot).trimmed(practice.style.cost.trim) else { return 0.0 };
        let bounds = head.bounds();
        let crosses = self.lines.iter().filter(|c| c.kind == Kind::Outline).any(|c| {
            c.bounds.is_within(&bounds, 0.0)
                && c.points.windows(2).any(|w| {
                    let line = Line::new(w[0], w[1]);
                    matches!(line_crossing(&own, &line, 1e-6), Crossing::At { .. })
                })
        });
        if crosses { practice.style.cost.unary.arrow_crosses_outline } else { 0.0 }
    }

    /// The hatching angle at a place, if it lies on a cut face.
    fn hatch_at(&self, p: Point<Paper>) -> Option<f64> {
        let at_p = |face: &&Face| {
            face.bounds.contains(p)
                && face.outlines.iter().filter(|o| winds_around(o, p)).count() % 2 == 1
        };
        self.hatched.iter().find(at_p).map(|face| face.angle)
    }
}

/// What an annotation pays for a leader that passes close by the further lines of its own text.
fn own_text_cost(sketch: &Sketch<Paper>, practice: &Practice<'_>) -> f64 {
    let near = practice.style.clearance.roomy / 2.0;
    let slanted = sketch.traces.iter().filter(|t| {
        let v = t.curve.end() - t.curve.start();
        t.role == Role::Leader && v.y.abs() > 1e-6
    });
    let below = sketch.labels.iter().flat_map(|l| l.quads().skip(1).collect::<Vec<_>>());
    let quads: Vec<Quad<Paper>> = below.collect();
    let passes = |t: &Trace<Paper>| {
        quads.iter().any(|q| q.distance_to_line(t.curve.start(), t.curve.end()) < near)
    };
    let count = slanted.filter(|t| passes(t)).count() as f64;
    count * practice.style.cost.group.texts_crowded
}

/// A flattened line in short stretches, so that a box tells most questions apart.
fn chains(kind: Kind, points: &[Point<Paper>]) -> Vec<Chain> {
    let last = points.len().saturating_sub(1);
    (0..last)
        .step_by(STRETCH)
        .filter_map(|i| {
            let points = points[i..=(i + STRETCH).min(last)].to_vec();
            let bounds = Rect::around(points.iter().copied())?;
            Some(Chain { kind, points, bounds })
        })
        .collect()
}

/// Whether a ray from `p` to the right crosses the closed polygon an odd number of times.
fn winds_around(polygon: &[Point<Paper>], p: Point<Paper>) -> bool {
    let mut inside = false;
    let closing = polygon.last().zip(polygon.first()).map(|(a, b)| [*a, *b]);
    let sides = polygon.windows(2).map(|w| [w[0], w[1]]).chain(closing);
    for [a, b] in sides {
        if (a.y > p.y) != (b.y > p.y) && p.x < a.x + (p.y - a.y) / (b.y - a.y) * (b.x - a.x) {
            inside = !inside;
        }
    }
    inside
}

/// Length of the straight line's part inside the box, mm.
fn length_inside(a: &Point<Paper>, b: &Point<Paper>, rect: &Rect<Paper>) -> f64 {
    let v = *b - *a;
    let (mut t0, mut t1) = (0.0f64, 1.0f64);
    for (p, d, low, high) in
        [(a.x, v.x, rect.min.x, rect.max.x), (a.y, v.y, rect.min.y, rect.max.y)]
    {
        if d.abs() < 1e-12 {
            if p < low || p > high {
                return 0.0;
            }
        } else {
            let (u, w) = ((low - p) / d, (high - p) / d);
            t0 = t0.max(u.min(w));
            t1 = t1.min(u.max(w));
        }
    }
    (t1 - t0).max(0.0) * v.length()
}
