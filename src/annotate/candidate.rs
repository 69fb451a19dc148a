//! All sensible ways to draw an annotation around its view.

use super::annotation::{Annotation, Content};
use super::fixed::Fixed;
use super::sketch::Sketch;
use super::{Practice, angular, diameter, leader, linear, set};
use crate::geom::{Paper, Placement, Vector};
use crate::spec::Side;
use crate::view::PaperView;

/// One way to draw an annotation, around its view's origin.
#[derive(Clone, Debug)]
pub struct Candidate {
    /// The drawing.
    pub sketch: Sketch<Paper>,
    /// What it costs by itself and against the view it belongs to.
    pub cost: f64,
    /// Where its dimension lines sit among the tiers of their side; none for what has no tier.
    pub seats: Vec<Seat>,
}

/// Place among the tiers of one side of a view.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Seat {
    /// Direction from the view to the dimension line.
    pub side: Side,
    /// Tier, 0 is the innermost.
    pub tier: u8,
    /// Beginning of the dimension along its side, mm of paper.
    pub low: f64,
    /// End of the dimension along its side, mm of paper.
    pub high: f64,
}

/// Everything that a generator needs to know about the view.
#[derive(Clone, Copy)]
pub(super) struct Ground<'a> {
    /// The view on paper.
    pub view: &'a PaperView,
    /// From view space to paper.
    pub on: Placement,
    /// The style's numbers.
    pub practice: Practice<'a>,
}

/// Texts on leaders nearer than this, mm, count as the same way to draw an annotation.
const ALIKE: f64 = 3.0;

/// How many candidates an annotation keeps in a view with `annotations` of them. Costs of pairs grow
/// with the square of this and memory with them, so views beyond any readable sheet get fewer.
fn kept(annotations: usize) -> usize {
    match annotations {
        0..=150 => 48,
        151..=400 => 32,
        _ => 16,
    }
}

/// The candidates of one of `annotations` annotations of a view, cheapest first; never none.
#[must_use]
pub fn candidates(
    annotation: &Annotation,
    view: &PaperView,
    fixed: &Fixed,
    annotations: usize,
    practice: Practice<'_>,
) -> Vec<Candidate> {
    let ground = Ground { view, on: view.placement, practice };
    let pin = &annotation.pin;
    let mut all = match &annotation.content {
        Content::Linear(size) => linear::candidates(size, pin, &ground),
        Content::Chain(links) => set::chain(links, pin, &ground),
        Content::Baseline(members) => set::baseline(members, pin, &ground),
        Content::Angular { vertex, legs, label } => {
            angular::candidates(*vertex, legs, label, pin, &ground)
        }
        Content::Diameter { circles, label } => diameter::candidates(circles, label, pin, &ground),
        Content::Radius { arcs, label } => diameter::radius_candidates(arcs, label, pin, &ground),
        Content::Leader { targets, label } => leader::candidates(targets, label, pin, &ground),
    };
    for c in &mut all {
        c.cost += fixed.cost(&c.sketch, c.seats.iter().any(|s| s.side == Side::Inside), &practice);
    }
    keep(all, kept(annotations))
}

/// The cheapest three fifths of what is kept, and the rest evenly sampled from what follows, so
/// that a crowded sheet still finds a place far away.
fn keep(mut all: Vec<Candidate>, kept: usize) -> Vec<Candidate> {
    // Stable, so equal costs stay in the order in which they were offered.
    all.sort_by(|a, b| a.cost.total_cmp(&b.cost));
    all = distinct(all, kept);
    if all.len() <= kept {
        return all;
    }
    let cheap = kept * 3 / 5;
    let rest = all.len() - cheap;
    let sampled = kept - cheap;
    let mut index = 0;
    all.retain(|_| {
        let i = index;
        index += 1;
        // Keeps the i-th of the rest where i·sampled/rest steps to a new whole number.
        i < cheap || ((i - cheap) * sampled / rest) != ((i - cheap + 1) * sampled / rest)
    });
    all
}

/// Of candidates whose texts stand within [`ALIKE`] mm of each other the cheapest, as long as there
/// are more than are kept: what is nearly the same way cannot help where the first one fails.
fn distinct(all: Vec<Candidate>, kept: usize) -> Vec<Candidate> {
    let mut surplus = all.len().saturating_sub(kept);
    let mut chosen: Vec<Candidate> = Vec::with_capacity(all.len());
    for c in all {
        let alike = |other: &Candidate| {
            c.seats.is_empty()
                && other.seats.is_empty()
                && match (c.sketch.labels.first(), other.sketch.labels.first()) {
                    (Some(a), Some(b)) => a.origin.distance(b.origin) < ALIKE,
                    _ => false,
                }
        };
        if surplus > 0 && chosen.iter().any(alike) {
            surplus -= 1;
        } else {
            chosen.push(c);
        }
    }
    chosen
}

/// Whether something that lies along `v` from the view is on the side that a pin asks for. Slanted
/// dimensions may be asked for by either of the two sides that they face.
pub(super) fn is_on(side: Side, v: Vector<Paper>) -> bool {
    let towards = match side {
        Side::Above => Vector::at_angle(90.0),
        Side::Below => Vector::at_angle(270.0),
        Side::Left => Vector::at_angle(180.0),
        Side::Right => Vector::at_angle(0.0),
        Side::Inside => return false,
    };
    v.dot(towards) > 0.3
}

/// The side of the view towards which `v` points, by its larger component.
pub(super) fn side_towards(v: Vector<Paper>) -> Side {
    if v.x.abs() > v.y.abs() {
        if v.x > 0.0 { Side::Right } else { Side::Left }
    } else if v.y > 0.0 {
        Side::Below
    } else {
        Side::Above
    }
}
