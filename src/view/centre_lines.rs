//! Centre lines on paper.
//!
//! Takes the centre features of a view and the curves that are drawn anyway; gives whole lines with
//! their overshoot, joined where features stand in a row, and free of what lies under other edges.
//! Dashes are laid later, when all crossings are known.

use super::coincide::{CurveIndex, Stretch, covered, joined};
use super::edge::CentreFeature;
use crate::geom::{Arc, Curve, Line, Paper, Placement, Point, Vector};
use crate::ident::ShapeId;
use crate::style::CentreSpec;

/// One centre line before it is dashed.
pub(super) struct Stroke {
    /// Number of the feature that it belongs to.
    pub(super) feature: usize,
    pub(super) curve: Curve<Paper>,
    /// Whether it is drawn without dashes whatever its length.
    pub(super) continuous: bool,
}

/// The centre lines of all features. `gap` is that of their dash pattern: lines in a row that come
/// closer than it are one. `drawn` are edges that a centre line gives way to.
pub(super) fn strokes(
    features: &[CentreFeature],
    placement: &Placement,
    spec: &CentreSpec,
    gap: f64,
    drawn: &[Curve<Paper>],
) -> Vec<Stroke> {
    let single: Vec<Stroke> = features
        .iter()
        .enumerate()
        .flat_map(|(i, feature)| strokes_of(i, feature, placement, spec))
        .collect();
    without(in_rows(single, gap), drawn, gap)
}

/// The shape that a feature belongs to.
pub(super) fn owner(feature: &CentreFeature) -> &ShapeId {
    match feature {
        CentreFeature::Cross { shape, .. }
        | CentreFeature::Axis { shape, .. }
        | CentreFeature::Pitch { shape, .. } => shape,
    }
}

fn strokes_of(
    number: usize,
    feature: &CentreFeature,
    placement: &Placement,
    spec: &CentreSpec,
) -> Vec<Stroke> {
    let stroke = |curve, continuous| Stroke { feature: number, curve, continuous };
    match feature {
        CentreFeature::Cross { circle, turn, single, .. } => {
            let (at, radius) = (placement.point(circle.centre), placement.length(circle.radius));
            let small = 2.0 * radius < spec.small_circle;
            let through = |degrees: f64| {
                let reach = Vector::at_angle(degrees) * (radius + spec.overshoot);
                stroke(Curve::line(at - reach, at + reach), small)
            };
            let square = (!single).then(|| through(turn + 90.0));
            std::iter::once(through(*turn)).chain(square).collect()
        }
        CentreFeature::Axis { line, .. } => {
            let (from, to) = (placement.point(line.from), placement.point(line.to));
            vec![stroke(Curve::Line(lengthened(from, to, spec.overshoot)), false)]
        }
        CentreFeature::Pitch { circle, .. } => {
            let radius = placement.length(circle.radius);
            let spare = (spec.overshoot / radius).to_degrees() * circle.sweep.signum();
            let (start, sweep) = match circle.is_full() {
                true => (circle.start, circle.sweep),
                false => (circle.start - spare, (circle.sweep + 2.0 * spare).clamp(-360.0, 360.0)),
            };
            let arc = Arc::new(placement.point(circle.centre), radius, start, sweep);
            vec![stroke(Curve::Arc(arc), false)]
        }
    }
}

fn lengthened(from: Point<Paper>, to: Point<Paper>, by: f64) -> Line<Paper> {
    let reach = (to - from).unit().map_or(Vector::new(0.0, 0.0), |u| u * by);
    Line::new(from - reach, to + reach)
}

/// Straight lines that overlap or nearly touch in one direction, as one line of the first feature.
fn in_rows(strokes: Vec<Stroke>, gap: f64) -> Vec<Stroke> {
    let mut numbers = Vec::new();
    let mut lines = Vec::new();
    for (i, stroke) in strokes.iter().enumerate() {
        if let Curve::Line(l) = stroke.curve {
            numbers.push(i);
            lines.push(l);
        }
    }
    let mut rows: Vec<Stroke> = strokes
        .iter()
        .filter(|s| !matches!(s.curve, Curve::Line(_)))
        .map(|s| Stroke { ..*s })
        .collect();
    for (line, of) in joined(&lines, gap) {
        let members = || of.iter().map(|n| &strokes[numbers[*n]]);
        let feature = members().map(|s| s.feature).min().unwrap_or(0);
        let continuous = members().all(|s| s.continuous);
        rows.push(Stroke { feature, curve: Curve::Line(line), continuous });
    }
    rows.sort_by_key(|s| s.feature);
    rows
}

/// The strokes without what lies under `drawn`, and without rests shorter than `least`.
fn without(strokes: Vec<Stroke>, drawn: &[Curve<Paper>], least: f64) -> Vec<Stroke> {
    let index = CurveIndex::new(drawn, 0.0);
    let mut left = Vec::with_capacity(strokes.len());
    for stroke in strokes {
        let under = index.neighbours(&stroke.curve);
        let lost: Vec<Stretch> =
            under.into_iter().flat_map(|j| covered(&stroke.curve, &drawn[j])).collect();
        if lost.is_empty() {
            left.push(stroke);
            continue;
        }
        let length = stroke.curve.length();
        let rests = free(lost).into_iter().filter(|s| (s.to - s.from) * length > least);
        left.extend(rests.map(|s| Stroke { curve: stroke.curve.piece(s.from, s.to), ..stroke }));
    }
    left
}

/// What the stretches leave of the range from 0 to 1.
fn free(mut taken: Vec<Stretch>) -> Vec<Stretch> {
    taken.sort_by(|a, b| a.from.total_cmp(&b.from));
    let mut rests = Vec::new();
    let mut at = 0.0;
    for s in taken {
        if s.from > at {
            rests.push(Stretch { from: at, to: s.from });
        }
        at = s.to.max(at);
    }
    if at < 1.0 {
        rests.push(Stretch { from: at, to: 1.0 });
    }
    rests
}
