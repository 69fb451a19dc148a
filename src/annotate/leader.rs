//! Candidates of text on a leader: callouts, notes, chamfers.
//!
//! The leader ends in an arrowhead on its target, runs straight to an elbow and on as a level
//! landing under the first line of the text.

use std::sync::Arc;

use super::annotation::Target;
use super::candidate::{Candidate, Ground};
use super::label::{Label, PlacedLabel};
use super::sketch::Sketch;
use crate::geom::{Line, Paper, Point, Rect, Vector};
use crate::scene::Role;
use crate::spec::Pin;

/// Most members of a group that a leader is tried on.
const TRIED: usize = 6;

/// All candidates of `label` pointing at one of the targets.
pub(super) fn candidates(
    targets: &[Target],
    label: &Arc<Label>,
    pin: &Pin,
    ground: &Ground<'_>,
) -> Vec<Candidate> {
    let mut all = Vec::new();
    for target in spread(targets) {
        for direction in directions(pin, ground) {
            for (tip, aim_cost) in tips(target, direction, ground) {
                for length in lengths(tip, direction, ground) {
                    let sketch = draw(tip, direction, length, label, ground);
                    let cost = aim_cost + leader_cost(direction, length, ground);
                    all.push(Candidate { sketch, cost, seats: Vec::new() });
                }
            }
        }
    }
    all
}

/// At most [`TRIED`] of the targets, evenly spread.
pub(super) fn spread<T>(targets: &[T]) -> impl Iterator<Item = &T> {
    let n = targets.len().clamp(1, TRIED);
    (0..n).filter_map(move |i| targets.get(i * targets.len() / n))
}

/// Directions from the target to the text: the style's angles in all four quadrants.
pub(super) fn directions(pin: &Pin, ground: &Ground<'_>) -> Vec<f64> {
    if let Some(angle) = pin.angle {
        return vec![angle];
    }
    let angles = &ground.practice.style.leader.angles;
    angles.iter().flat_map(|a| [*a, 180.0 - a, 360.0 - a, 180.0 + a]).collect()
}

/// Lengths of the slanted stroke: short ones, and what leads past the view's outline.
pub(super) fn lengths(tip: Point<Paper>, degrees: f64, ground: &Ground<'_>) -> Vec<f64> {
    let look = &ground.practice.style.leader;
    let mut all = look.lengths.clone();
    if let Some(exit) = exit_length(tip, degrees, &ground.view.outline) {
        all.extend(look.beyond.iter().map(|b| exit + b));
    }
    all.retain(|l| *l <= look.longest * 2.0);
    all
}

/// What a leader costs by its angle and length.
pub(super) fn leader_cost(degrees: f64, length: f64, ground: &Ground<'_>) -> f64 {
    let costs = &ground.practice.style.cost.unary;
    let look = &ground.practice.style.leader;
    let level = {
        let a = degrees.rem_euclid(180.0);
        a.min(180.0 - a)
    };
    let angle = if level < look.least_angle || level > 90.0 - look.least_angle {
        costs.leader_angle_off
    } else if look.angles.first().is_some_and(|preferred| (level - preferred).abs() > 1e-6) {
        costs.leader_angle_steep
    } else {
        0.0
    };
    let down =
        if (180.0..360.0).contains(&degrees.rem_euclid(360.0)) { costs.leader_down } else { 0.0 };
    angle + down + costs.leader_per_mm * (length - costs.leader_free).max(0.0)
}

/// Draws leader, landing and text; the arrowhead's tip stands at `tip`.
pub(super) fn draw(
    tip: Point<Paper>,
    degrees: f64,
    length: f64,
    label: &Arc<Label>,
    ground: &Ground<'_>,
) -> Sketch<Paper> {
    let p = &ground.practice;
    let mut sketch = Sketch::default();
    let out = Vector::<Paper>::at_angle(degrees);
    let elbow = tip + out * length;
    sketch.line(tip, elbow, Role::Leader);
    sketch.heads.push(p.head(tip, -out));
    land(&mut sketch, elbow, (out.x >= 0.0, Role::Leader), label, ground);
    sketch
}

/// Draws the landing from `elbow` to the right or left, as part of a line with this role, and the
/// text on it.
pub(super) fn land(
    sketch: &mut Sketch<Paper>,
    elbow: Point<Paper>,
    (rightwards, role): (bool, Role),
    label: &Arc<Label>,
    ground: &Ground<'_>,
) {
    let look = &ground.practice.style.leader;
    let first = label.first_line_ink();
    let whole = label.ink();
    let width = first.max.x.max(0.0) + look.landing_spare;
    let far = Vector::new(if rightwards { width } else { -width }, 0.0);
    sketch.line(elbow, elbow + far, role);
    let x = if rightwards { elbow.x } else { elbow.x - width };
    // Lines below the first may be wider than it; leftwards they must end at the elbow too.
    let spill = if rightwards { 0.0 } else { (whole.max.x - width).max(0.0) };
    let lift = look.text_lift + first.max.y.max(0.0);
    sketch.labels.push(PlacedLabel {
        label: label.clone(),
        origin: Point::new(x - spill, elbow.y - lift),
        angle: 0.0,
    });
    if spill > 0.0 {
        sketch.line(elbow + far, elbow + far - Vector::new(spill, 0.0), role);
    }
}

/// Where the arrowhead may stand on a target seen from the text's side, and what that costs.
fn tips(target: &Target, degrees: f64, ground: &Ground<'_>) -> Vec<(Point<Paper>, f64)> {
    let on = &ground.on;
    match *target {
        Target::Point(p) => vec![(on.point(p), 0.0)],
        Target::Round(arc) if arc.covers(degrees) => vec![(on.point(arc.towards(degrees)), 0.0)],
        Target::Round(_) => Vec::new(),
        Target::Edge(l) => {
            let (a, b) = (on.point(l.from), on.point(l.to));
            let edge = Line::new(a, b);
            let angle = between(edge.vector().angle(), degrees);
            if angle < ground.practice.style.leader.least_to_lines {
                return Vec::new();
            }
            // On a short edge, as of a chamfer, only its middle tells it from its neighbours.
            let roomy = edge.length() > 2.0 * ground.practice.arrow();
            let places = [(0.5, 0.0), (0.3, 0.5), (0.7, 0.5), (0.12, 1.0), (0.88, 1.0)];
            places
                .into_iter()
                .take(if roomy { places.len() } else { 1 })
                .map(|(t, cost)| (edge.at(t), cost))
                .collect()
        }
    }
}

/// Angle between two undirected lines, degrees in [0, 90].
fn between(a: f64, b: f64) -> f64 {
    let d = (a - b).rem_euclid(180.0);
    d.min(180.0 - d)
}

/// How far it is from `from` to the border of `rect` in a direction; `None` from outside.
fn exit_length(from: Point<Paper>, degrees: f64, rect: &Rect<Paper>) -> Option<f64> {
    if !rect.grown(1e-6).contains(from) {
        return None;
    }
    let v = Vector::<Paper>::at_angle(degrees);
    let reach = |p: f64, d: f64, low: f64, high: f64| {
        if d > 1e-9 {
            (high - p) / d
        } else if d < -1e-9 {
            (low - p) / d
        } else {
            f64::INFINITY
        }
    };
    let x = reach(from.x, v.x, rect.min.x, rect.max.x);
    let y = reach(from.y, v.y, rect.min.y, rect.max.y);
    Some(x.min(y).max(0.0))
}
