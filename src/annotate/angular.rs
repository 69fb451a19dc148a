//! Candidates of an angle between two edges: arcs about the vertex at several radii.

use std::sync::Arc;

use super::candidate::{Candidate, Ground};
use super::label::{Label, PlacedLabel};
use super::sketch::{Sketch, Trace};
use crate::geom::{self, Curve, Line, Paper, Point, Vector, View as ViewSpace};
use crate::scene::Role;
use crate::spec::Pin;

/// How many radii are offered.
const RADII: u8 = 8;

/// All candidates of the angle at `vertex` between two edges that walk away from it.
pub(super) fn candidates(
    vertex: Point<ViewSpace>,
    legs: &[Line<ViewSpace>; 2],
    label: &Arc<Label>,
    pin: &Pin,
    ground: &Ground<'_>,
) -> Vec<Candidate> {
    let group = ground.practice.group;
    let (from, sweep) = sector(legs);
    let ends = legs.map(|l| {
        let reach = |p: Point<ViewSpace>| ground.on.length(vertex.distance(p));
        (reach(l.from), reach(l.to))
    });
    let least = ends.iter().map(|e| e.0).fold(0.0, f64::max).max(group.first_line);
    let mut all = Vec::new();
    let steps = match pin.tier {
        Some(tier) => tier.saturating_sub(1)..tier.max(1),
        None => 0..RADII,
    };
    for step in steps {
        let radius = least + f64::from(step) * group.pitch;
        let fits = radius * sweep.to_radians() >= label.advance() + 2.0 * ground.practice.arrow();
        for outside in [false, true] {
            if outside == fits {
                continue;
            }
            let arc = geom::Arc::new(ground.on.point(vertex), radius, from, sweep);
            let sketch = draw(&arc, &ends, outside, label, ground);
            let costs = &ground.practice.style.cost.unary;
            let cost = costs.tier_per_mm * f64::from(step) * group.pitch
                + if outside { costs.text_outside + costs.arrows_outside } else { 0.0 };
            all.push(Candidate { sketch, cost, seats: Vec::new() });
        }
    }
    all
}

/// Direction of the first leg and how far it is, counter-clockwise, to the second.
fn sector(legs: &[Line<ViewSpace>; 2]) -> (f64, f64) {
    let [a, b] = legs.map(|l| l.vector().angle());
    let turn = (b - a).rem_euclid(360.0);
    if turn <= 180.0 { (a, turn) } else { (b, 360.0 - turn) }
}

fn draw(
    arc: &geom::Arc<Paper>,
    ends: &[(f64, f64); 2],
    outside: bool,
    label: &Arc<Label>,
    ground: &Ground<'_>,
) -> Sketch<Paper> {
    let p = &ground.practice;
    let mut sketch = Sketch::default();
    let arrow_turn = (p.arrow() / arc.radius).to_degrees();
    let tail = if outside { 2.0 * arrow_turn } else { 0.0 };
    for (degrees, (near, far), sense) in
        [(arc.start, ends[0], 1.0), (arc.start + arc.sweep, ends[1], -1.0)]
    {
        extend(&mut sketch, arc, degrees, near, far, p.style.dimension.overshoot);
        // A chord's direction half an arrow in: the head lies on the arc, not on its tangent.
        let inward = if outside { -sense } else { sense };
        let foot = arc.towards(degrees + inward * arrow_turn);
        let tip = arc.towards(degrees);
        if let Some(towards) = (tip - foot).unit() {
            sketch.heads.push(p.head(tip, towards));
        }
    }
    let drawn = geom::Arc { start: arc.start - tail, sweep: arc.sweep + 2.0 * tail, ..*arc };
    sketch.traces.push(Trace { curve: Curve::Arc(drawn), role: Role::Dim });
    let at = if outside {
        let half = (label.advance() / 2.0 / arc.radius).to_degrees();
        arc.start - tail - half
    } else {
        arc.middle()
    };
    sketch.labels.push(text_on(arc, at, label, ground));
    sketch
}

/// An extension line from the end of an edge to the arc, where the edge does not reach it.
fn extend(
    sketch: &mut Sketch<Paper>,
    arc: &geom::Arc<Paper>,
    degrees: f64,
    near: f64,
    far: f64,
    overshoot: f64,
) {
    let out = Vector::<Paper>::at_angle(degrees);
    if arc.radius > far {
        sketch.line(arc.centre + out * far, arc.centre + out * (arc.radius + overshoot), Role::Ext);
    } else if arc.radius < near {
        let from = (arc.radius - overshoot).max(0.0);
        sketch.line(arc.centre + out * near, arc.centre + out * from, Role::Ext);
    }
}

/// Text along the arc at direction `degrees`, clear of it on the side that reads as above.
fn text_on(
    arc: &geom::Arc<Paper>,
    degrees: f64,
    label: &Arc<Label>,
    ground: &Ground<'_>,
) -> PlacedLabel<Paper> {
    let upper = Vector::<Paper>::at_angle(degrees).y <= 1e-9;
    let turn = if upper { degrees - 90.0 } else { degrees + 90.0 };
    let along = Vector::<Paper>::at_angle(turn);
    let half = label.advance() / 2.0;
    // The line bends away from the text's ends, or towards them where the text is inside the arc.
    let bend = arc.radius - (arc.radius * arc.radius - half * half).max(0.0).sqrt();
    let lift = ground.practice.style.dimension.text_lift
        + label.ink().max.y.max(0.0)
        + if upper { 0.0 } else { bend };
    let middle = arc.towards(degrees);
    PlacedLabel {
        label: label.clone(),
        origin: middle - along * half + along.left() * lift,
        angle: along.angle(),
    }
}
