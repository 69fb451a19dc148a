//! Candidates of diameters and radii seen round.

use std::sync::Arc;

use super::candidate::{Candidate, Ground};
use super::label::Label;
use super::leader::{directions, draw, land, leader_cost, lengths, spread};
use super::sketch::Sketch;
use crate::geom::{self, Paper, Vector, View as ViewSpace};
use crate::scene::Role;
use crate::spec::Pin;

/// A diameter: a line through the centre with two arrowheads where the circle is large enough, or
/// a leader that aims at the centre.
pub(super) fn candidates(
    circles: &[geom::Arc<ViewSpace>],
    label: &Arc<Label>,
    pin: &Pin,
    ground: &Ground<'_>,
) -> Vec<Candidate> {
    let mut all = Vec::new();
    let arrow = ground.practice.arrow();
    for circle in spread(circles) {
        let radius = ground.on.length(circle.radius);
        for degrees in directions(pin, ground) {
            let rim = ground.on.point(circle.towards(degrees));
            for length in lengths(rim, degrees, ground) {
                let cost = leader_cost(degrees, length, ground);
                let sketch = draw(rim, degrees, length, label, ground);
                all.push(Candidate { sketch, cost, seats: Vec::new() });
                if 2.0 * radius >= ground.practice.style.dimension.across_arrows * arrow {
                    // Both arrowheads stand on the circle itself: the plainest form, so cheaper.
                    let sketch = across(circle, degrees, length, label, ground);
                    let prize = ground.practice.style.cost.unary.leader_angle_steep;
                    all.push(Candidate { sketch, cost: cost - prize, seats: Vec::new() });
                }
            }
        }
    }
    all
}

/// A radius: a leader whose arrowhead stands on the arc and whose line aims at the centre, from
/// outside or from the side of the centre.
pub(super) fn radius_candidates(
    arcs: &[geom::Arc<ViewSpace>],
    label: &Arc<Label>,
    pin: &Pin,
    ground: &Ground<'_>,
) -> Vec<Candidate> {
    let mut all = Vec::new();
    for arc in spread(arcs) {
        let radius = ground.on.length(arc.radius);
        for degrees in radius_directions(arc, pin, ground) {
            let rim = ground.on.point(arc.towards(degrees));
            for length in lengths(rim, degrees, ground) {
                let sketch = draw(rim, degrees, length, label, ground);
                let cost = leader_cost(degrees, length, ground);
                all.push(Candidate { sketch, cost, seats: Vec::new() });
            }
            // From the centre's side: the line starts at the text and passes the centre only where
            // the arc is too small to hold it.
            let inward = degrees + 180.0;
            for length in lengths(rim, inward, ground) {
                let length = length.max(radius.min(ground.practice.style.leader.longest));
                let sketch = draw(rim, inward, length, label, ground);
                let cost = leader_cost(inward, length, ground);
                all.push(Candidate { sketch, cost, seats: Vec::new() });
            }
        }
    }
    all
}

/// Directions from the centre that meet the arc: the style's angles, else places along it that are
/// neither level nor upright.
fn radius_directions(arc: &geom::Arc<ViewSpace>, pin: &Pin, ground: &Ground<'_>) -> Vec<f64> {
    let mut found: Vec<f64> =
        directions(pin, ground).into_iter().filter(|d| arc.covers(*d)).collect();
    if found.is_empty() {
        found.extend([0.5, 0.25, 0.75].map(|t| arc.start + arc.sweep * t));
    }
    found
}

/// A line across the circle with an arrowhead at each rim, going on to a landing outside.
fn across(
    circle: &geom::Arc<ViewSpace>,
    degrees: f64,
    length: f64,
    label: &Arc<Label>,
    ground: &Ground<'_>,
) -> Sketch<Paper> {
    let mut sketch = Sketch::default();
    let out = Vector::<Paper>::at_angle(degrees);
    let near = ground.on.point(circle.towards(degrees));
    let far = ground.on.point(circle.towards(degrees + 180.0));
    let elbow = near + out * length;
    sketch.line(far, elbow, Role::Dim);
    sketch.heads.push(ground.practice.head(near, out));
    sketch.heads.push(ground.practice.head(far, -out));
    land(&mut sketch, elbow, (out.x >= 0.0, Role::Dim), label, ground);
    sketch
}
