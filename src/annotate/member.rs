//! One linear dimension in the frame of its own reading direction: extension lines, dimension
//! line, terminations, text.
//!
//! In that frame `t` runs along the measured direction, which is also the reading direction, and
//! `n` to the left of it: up for a level dimension, left for an upright one. Both are mm of paper.

use std::sync::Arc;

use super::Practice;
use super::annotation::{Hold, LinearSize};
use super::candidate::Ground;
use super::label::{Label, PlacedLabel};
use super::sketch::Sketch;
use crate::geom::{COINCIDENT, Curve, Paper, Placement, Point, Rect, Vector};
use crate::scene::Role;
use crate::spec::LineClass;
use crate::view::PaperView;

/// The frame of a linear dimension on paper.
#[derive(Clone, Copy, Debug)]
pub(super) struct Axes {
    /// Reading direction.
    pub along: Vector<Paper>,
    /// To the left of it.
    pub left: Vector<Paper>,
}

/// Where a hold lies in the frame: one place along, a stretch across.
#[derive(Clone, Copy, Debug)]
pub(super) struct Station {
    /// Place along the measured direction.
    pub t: f64,
    /// Least place across.
    pub low: f64,
    /// Greatest place across.
    pub high: f64,
    /// How far a centre line already reaches past the stretch.
    pub reach: f64,
    /// Least and greatest place across of what is drawn on the extension line's own line: the
    /// stretch itself and outlines in its prolongation.
    pub drawn: (f64, f64),
}

/// Where the text of a dimension stands.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Spot {
    /// Between the extension lines, its middle at this share of the span.
    Between(f64),
    /// On the prolonged line before the first extension line.
    Before,
    /// On the prolonged line past the second extension line.
    After,
    /// Lifted off the line between the extension lines, tied to it by a short leader.
    Lifted,
}

/// What ends a dimension line at one of its two places.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum End {
    /// An arrowhead between the extension lines, pointing out.
    Inside,
    /// An arrowhead outside, pointing in, with its tail.
    Outside,
    /// A dot shared with a short neighbour.
    Dot,
    /// Nothing: a neighbour's arrowhead already points here.
    Shared,
}

/// One linear dimension, measured on paper.
#[derive(Clone, Debug)]
pub(super) struct Member {
    /// The place with the smaller `t`.
    pub first: Station,
    /// The place with the greater `t`.
    pub second: Station,
    /// Its text.
    pub label: Arc<Label>,
}

impl Axes {
    /// The frame whose reading direction is `along` (a unit vector of the view).
    pub(super) fn new(along: Vector<crate::geom::View>) -> Self {
        let along = Vector::<Paper>::new(along.x, -along.y);
        Self { along, left: along.left() }
    }

    /// The point at `t` along and `n` across.
    pub(super) fn point(&self, t: f64, n: f64) -> Point<Paper> {
        Point::new(0.0, 0.0) + self.along * t + self.left * n
    }

    /// Place of a point across the frame.
    pub(super) fn across(&self, p: Point<Paper>) -> f64 {
        self.left.dot(p - Point::new(0.0, 0.0))
    }

    /// Place of a point along the frame.
    fn position(&self, p: Point<Paper>) -> f64 {
        self.along.dot(p - Point::new(0.0, 0.0))
    }

    /// Least and greatest place across of a box.
    pub(super) fn span_across(&self, r: &Rect<Paper>) -> (f64, f64) {
        bounds(r.corners().map(|p| self.across(p)))
    }

    /// Whether extension lines run level or upright, as the crosses of circles do.
    fn is_upright(&self) -> bool {
        self.along.x.abs() < 1e-6 || self.along.y.abs() < 1e-6
    }

    /// The station with the outlines in its prolongation: an extension line begins where the last
    /// of them ends, instead of running over them and through the view.
    fn prolonged(&self, mut station: Station, view: &PaperView) -> Station {
        for edge in &view.edges {
            let Curve::Line(l) = &edge.curve else { continue };
            if !matches!(edge.class, LineClass::Visible | LineClass::Cut) {
                continue;
            }
            let on_it = |p| (self.position(p) - station.t).abs() <= COINCIDENT;
            if on_it(l.from) && on_it(l.to) {
                let (a, b) = (self.across(l.from), self.across(l.to));
                station.drawn.0 = station.drawn.0.min(a.min(b));
                station.drawn.1 = station.drawn.1.max(a.max(b));
            }
        }
        station
    }

    fn station(&self, hold: &Hold, on: &Placement, overshoot: f64) -> Station {
        let at = |p| {
            let p = on.point(p);
            (self.position(p), self.across(p))
        };
        match *hold {
            Hold::Point(p) => {
                let (t, n) = at(p);
                Station { t, low: n, high: n, reach: 0.0, drawn: (n, n) }
            }
            Hold::Centre(p, radius) => {
                let (t, n) = at(p);
                Station {
                    t,
                    low: n,
                    high: n,
                    reach: if radius > 0.0 && self.is_upright() {
                        on.length(radius) + overshoot
                    } else {
                        0.0
                    },
                    drawn: (n, n),
                }
            }
            Hold::Edge(l) | Hold::Axis(l) => {
                let ((t, a), (_, b)) = (at(l.from), at(l.to));
                let reach = if matches!(hold, Hold::Axis(_)) { overshoot } else { 0.0 };
                let (low, high) = (a.min(b), a.max(b));
                Station { t, low, high, reach, drawn: (low, high) }
            }
        }
    }

    /// The dimension `size` in this frame.
    pub(super) fn member(&self, size: &LinearSize, ground: &Ground<'_>) -> Member {
        let overshoot = ground.practice.style.centre.overshoot;
        let [a, b] = [&size.from, &size.to].map(|hold| {
            let station = self.station(hold, &ground.on, overshoot);
            match hold {
                Hold::Point(_) | Hold::Edge(_) => self.prolonged(station, ground.view),
                Hold::Centre(..) | Hold::Axis(_) => station,
            }
        });
        let (first, second) = if a.t <= b.t { (a, b) } else { (b, a) };
        Member { first, second, label: size.label.clone() }
    }
}

impl Member {
    /// Distance between the extension lines on paper.
    pub(super) fn span(&self) -> f64 {
        self.second.t - self.first.t
    }

    /// Whether arrowheads may stand between the extension lines.
    pub(super) fn arrows_fit(&self, p: &Practice<'_>) -> bool {
        let look = &p.style.dimension;
        self.span() >= (look.inside_arrows * p.arrow()).max(look.inside_least) - 1e-9
    }

    /// Whether the text may stand between the extension lines.
    pub(super) fn text_fits(&self, p: &Practice<'_>) -> bool {
        let clear = p.style.clearance.text_line + p.group.narrow;
        self.span() >= self.label.advance() + 2.0 * clear
    }

    /// Draws the extension lines up to a dimension line at `level` across.
    pub(super) fn extensions(
        &self,
        sketch: &mut Sketch<Paper>,
        axes: &Axes,
        level: f64,
        p: &Practice<'_>,
    ) {
        for station in [&self.first, &self.second] {
            extension(sketch, axes, station, level, p);
        }
    }

    /// Draws the dimension line at `level` with its terminations and its text.
    pub(super) fn body(
        &self,
        sketch: &mut Sketch<Paper>,
        axes: &Axes,
        level: f64,
        spot: Spot,
        ends: [End; 2],
        p: &Practice<'_>,
    ) {
        let (t0, t1) = (self.first.t, self.second.t);
        let w = self.label.advance();
        let a = p.arrow();
        let tail = a + p.style.dimension.outside_tail;
        let clear = p.style.clearance.text_arrow;
        let mut line = (t0, t1);
        for (t, end, out) in [(t0, ends[0], -1.0), (t1, ends[1], 1.0)] {
            let tip = axes.point(t, level);
            match end {
                End::Inside => sketch.heads.push(p.head(tip, axes.along * out)),
                End::Outside => {
                    sketch.heads.push(p.head(tip, axes.along * -out));
                    if out < 0.0 { line.0 = t - tail } else { line.1 = t + tail }
                }
                End::Dot => sketch.heads.push(p.chain_dot(tip)),
                End::Shared => {}
            }
        }
        let past = |end: End| if end == End::Outside { a + clear } else { clear + p.group.narrow };
        let text_at = match spot {
            Spot::Between(share) => t0 + (t1 - t0) * share - w / 2.0,
            Spot::Lifted => (t0 + t1 - w) / 2.0,
            Spot::Before => {
                let begin = t0 - past(ends[0]) - w;
                line.0 = line.0.min(begin);
                begin
            }
            Spot::After => {
                let begin = t1 + past(ends[1]);
                line.1 = line.1.max(begin + w);
                begin
            }
        };
        sketch.line(axes.point(line.0, level), axes.point(line.1, level), Role::Dim);
        let mut lift = p.style.dimension.text_lift + self.label.ink().max.y.max(0.0);
        let mut text_at = text_at;
        if spot == Spot::Lifted {
            // The stem leans at 60°, so that it is no upright leader, and the text stands on it.
            let middle = f64::midpoint(t0, t1);
            let rise = p.group.text + p.style.dimension.text_lift;
            let lean = rise / 3f64.sqrt();
            let foot = axes.point(middle, level);
            sketch.line(foot, axes.point(middle + lean, level + rise), Role::Leader);
            lift += rise;
            text_at += lean;
        }
        sketch.labels.push(PlacedLabel {
            label: self.label.clone(),
            origin: axes.point(text_at, level + lift),
            angle: axes.along.angle(),
        });
    }
}

/// Draws the extension line from a station to a dimension line at `level`, if it needs one.
pub(super) fn extension(
    sketch: &mut Sketch<Paper>,
    axes: &Axes,
    station: &Station,
    level: f64,
    p: &Practice<'_>,
) {
    let look = &p.style.dimension;
    let gap = station.reach.max(look.extension_gap);
    // Where the dimension line lies among the outlines in prolongation, the own end counts.
    let begin = |outer: f64, own: f64, reaches: bool| if reaches { outer } else { own };
    let (from, to) = if level > station.high + gap {
        let high = begin(station.drawn.1, station.high, level > station.drawn.1 + gap);
        (high + gap, level + look.overshoot)
    } else if level < station.low - gap {
        let low = begin(station.drawn.0, station.low, level < station.drawn.0 - gap);
        (low - gap, level - look.overshoot)
    } else {
        return;
    };
    sketch.line(axes.point(station.t, from), axes.point(station.t, to), Role::Ext);
}

fn bounds(values: [f64; 4]) -> (f64, f64) {
    values
        .into_iter()
        .fold((f64::INFINITY, f64::NEG_INFINITY), |(lo, hi), v| (lo.min(v), hi.max(v)))
}
