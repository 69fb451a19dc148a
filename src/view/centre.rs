//! Which features of a drawn view get centre lines.
//!
//! Takes the members of the view's shapes; gives crosses for circles, axes for slots and turned
//! bodies, and pitch circles for groups set round a centre. One of several concentric circles gets
//! the cross (the largest), and turned bodies that follow each other on one axis share it: a
//! stepped shaft has one centre line. How far the lines reach and how they are dashed depends on
//! paper and is decided there.

use std::collections::BTreeSet;

use rstar::RTree;

use super::coincide::joined;
use super::drawn::Member;
use super::edge::CentreFeature;
use super::figure::{Figure, Slot};
use crate::geom::{Arc, COINCIDENT, Line, Point, View, same};
use crate::spec::{Axis, CentreLines, LineClass, Repeat};

/// The centre features of a view, in the order of its shapes.
pub(super) fn centre_features(members: &[Member<'_>]) -> Vec<CentreFeature> {
    let crossed = crossed_circles(members);
    let axes = shared_axes(members);
    let mut features = Vec::new();
    let mut pitches = drawn_circles(members);
    for (i, member) in members.iter().enumerate() {
        if crossed.contains(&i)
            && let Figure::Circle(circle) | Figure::Arc(circle) = &member.figure
        {
            features.extend(pitch_feature(member, &mut pitches));
            features.push(cross(member, circle));
        }
        let own = axes.iter().filter(|(first, _)| *first == i);
        features.extend(own.map(|(_, line)| axis(member, *line)));
        if wants(member) {
            features.extend(other_axes(member).into_iter().map(|line| axis(member, line)));
        }
    }
    features
}

/// The circle through the centres of a shape repeated round a centre, if it is one of several that
/// stand apart.
pub(super) fn pitch_circle(member: &Member<'_>) -> Option<Arc<View>> {
    match (&member.shape.repeat, member.figure.centre()) {
        (Some(Repeat::Polar { count, about, .. }), Some(centre)) if *count > 1 => {
            let radius = about.distance(centre);
            (radius > COINCIDENT).then(|| Arc::circle(*about, radius))
        }
        _ => None,
    }
}

fn wants(member: &Member<'_>) -> bool {
    match member.shape.centre {
        CentreLines::Yes => true,
        CentreLines::No => false,
        CentreLines::Auto => !member.shape.hatch && is_material(member.shape.class),
    }
}

fn is_material(class: LineClass) -> bool {
    match class {
        LineClass::Visible | LineClass::Hidden | LineClass::Smooth | LineClass::Cut => true,
        LineClass::Centre | LineClass::Adjacent | LineClass::Construction | LineClass::Break => {
            false
        }
    }
}

/// Members whose circle gets a cross of its own: of concentric ones the largest.
fn crossed_circles(members: &[Member<'_>]) -> BTreeSet<usize> {
    let mut circles: Vec<(usize, Arc<View>)> = members
        .iter()
        .enumerate()
        .filter(|(_, m)| wants(m))
        .filter_map(|(i, m)| match &m.figure {
            Figure::Circle(a) => Some((i, *a)),
            Figure::Arc(a) if m.shape.centre == CentreLines::Yes => Some((i, *a)),
            _ => None,
        })
        .collect();
    circles.sort_by(|a, b| b.1.radius.total_cmp(&a.1.radius).then(a.0.cmp(&b.0)));
    let mut taken: RTree<[f64; 2]> = RTree::new();
    let mut crossed = BTreeSet::new();
    for (i, circle) in circles {
        let at = [circle.centre.x, circle.centre.y];
        let shared = taken.locate_within_distance(at, COINCIDENT * COINCIDENT).next().is_some();
        if !shared || members[i].shape.centre == CentreLines::Yes {
            crossed.insert(i);
            taken.insert(at);
        }
    }
    crossed
}

fn cross(member: &Member<'_>, circle: &Arc<View>) -> CentreFeature {
    let pitch = pitch_circle(member);
    let turn = pitch.map_or(0.0, |p| (circle.centre - p.centre).angle());
    CentreFeature::Cross {
        shape: member.id.clone(),
        circle: *circle,
        turn,
        single: pitch.is_some(),
    }
}

/// Circles that the spec draws as centre lines itself: no pitch circle is put on them.
fn drawn_circles(members: &[Member<'_>]) -> Vec<Arc<View>> {
    let lines = members.iter().filter(|m| m.shape.class == LineClass::Centre);
    lines
        .filter_map(|m| match &m.figure {
            Figure::Circle(a) => Some(*a),
            _ => None,
        })
        .collect()
}

/// The pitch circle of a member's group, the first time that it is met.
fn pitch_feature(member: &Member<'_>, known: &mut Vec<Arc<View>>) -> Option<CentreFeature> {
    let (Some(Repeat::Polar { count, step, .. }), Figure::Circle(hole)) =
        (&member.shape.repeat, &member.figure)
    else {
        return None;
    };
    let whole = pitch_circle(member)?;
    let circle = holding_arc(&whole, hole, f64::from(*count), *step);
    let is_known = known.iter().any(|k| {
        let one = k.centre.is_at(circle.centre) && same(k.radius, circle.radius);
        one && (k.is_full() || same(k.start, circle.start) && same(k.sweep, circle.sweep))
    });
    if is_known {
        return None;
    }
    known.push(circle);
    Some(CentreFeature::Pitch { shape: member.shape.id.clone(), circle })
}

/// All of the pitch circle where the members go round it, else the part from the first to the last
/// of them. `hole` is the first.
fn holding_arc(whole: &Arc<View>, hole: &Arc<View>, count: f64, step: f64) -> Arc<View> {
    let first = (hole.centre - whole.centre).angle();
    // What the holes themselves take of the circle, on either side of their centres.
    let half = 2.0 * (hole.radius / (2.0 * whole.radius)).min(1.0).asin().to_degrees();
    let sweep = (count - 1.0) * step + 2.0 * half * step.signum();
    if (count * step).abs() >= 360.0 - 1e-6 || sweep.abs() >= 360.0 {
        return Arc::new(whole.centre, whole.radius, first, 360.0);
    }
    Arc::new(whole.centre, whole.radius, first - half * step.signum(), sweep)
}

fn axis(member: &Member<'_>, line: Line<View>) -> CentreFeature {
    CentreFeature::Axis { shape: member.id.clone(), line }
}

/// The axes of turned bodies, joined where bodies follow each other, with the first body of each.
fn shared_axes(members: &[Member<'_>]) -> Vec<(usize, Line<View>)> {
    let (owners, lines): (Vec<usize>, Vec<Line<View>>) = members
        .iter()
        .enumerate()
        .filter(|(_, m)| wants(m))
        .filter_map(|(i, m)| match &m.figure {
            Figure::Rectangle(r) => Some((i, r.middle(r.turned?))),
            _ => None,
        })
        .unzip();
    joined(&lines, 0.0).into_iter().map(|(line, of)| (owners[of[0]], line)).collect()
}

/// Axes of slots, and both middle lines of a rectangle that asks for centre lines.
fn other_axes(member: &Member<'_>) -> Vec<Line<View>> {
    match &member.figure {
        Figure::Slot(s) => slot_axes(s),
        Figure::Rectangle(r) if r.turned.is_none() && member.shape.centre == CentreLines::Yes => {
            vec![r.middle(Axis::X), r.middle(Axis::Y)]
        }
        Figure::Rectangle(_)
        | Figure::Line(_)
        | Figure::Arc(_)
        | Figure::Circle(_)
        | Figure::Trace(_) => Vec::new(),
    }
}

fn slot_axes(s: &Slot) -> Vec<Line<View>> {
    let [right, left] = s.sides();
    let across = |from: Point<View>, to: Point<View>| Line::new(from, to);
    vec![s.overall(), across(right.from, left.to), across(right.to, left.from)]
}

/// Whether `figure` has centre lines that a spec can ask for.
pub(super) fn has_centre(figure: &Figure) -> bool {
    match figure {
        Figure::Arc(_) | Figure::Circle(_) | Figure::Slot(_) | Figure::Rectangle(_) => true,
        Figure::Line(_) | Figure::Trace(_) => false,
    }
}

#[cfg(test)]
mod tests {
    use super::super::sample::*;
    use super::*;
    use crate::spec::{Outline, Shape};

    fn features(shapes: Vec<Shape>) -> Vec<CentreFeature> {
        view(shapes).centres
    }

    #[test]
    fn the_largest_of_concentric_circles_gets_the_cross() {
        let found = features(vec![circle("bore", 1.0, 2.0, 10.0), circle("rim", 1.0, 2.0, 30.0)]);
        let [CentreFeature::Cross { shape, turn, single, .. }] = found.as_slice() else {
            panic!("{found:?}")
        };
        assert_eq!((shape.as_str(), *turn, *single), ("rim", 0.0, false));
    }

    #[test]
    fn a_circle_that_asks_for_its_cross_gets_it() {
        let bore = Shape { centre: CentreLines::Yes, ..circle("bore", 1.0, 2.0, 10.0) };
        assert_eq!(features(vec![bore, circle("rim", 1.0, 2.0, 30.0)]).len(), 2);
    }

    #[test]
    fn holes_on_a_circle_share_it_and_point_to_its_centre() {
        let found = features(vec![
            circle("rim", 0.0, 0.0, 120.0),
            polar(circle("bolt", 45.0, 0.0, 9.0), 6),
            // The counterbores are larger: theirs are the strokes, the holes get none.
            polar(circle("sunk", 45.0, 0.0, 15.0), 6),
        ]);
        let turns: Vec<f64> = found
            .iter()
            .filter_map(|f| match f {
                CentreFeature::Cross { turn, single: true, .. } => {
                    Some(turn.rem_euclid(360.0).round())
                }
                _ => None,
            })
            .collect();
        assert_eq!(turns, [0.0, 60.0, 120.0, 180.0, 240.0, 300.0]);
        let pitches: Vec<_> =
            found.iter().filter(|f| matches!(f, CentreFeature::Pitch { .. })).collect();
        let [CentreFeature::Pitch { shape, circle }] = pitches.as_slice() else {
            panic!("{pitches:?}")
        };
        assert_eq!((shape.as_str(), circle.radius, circle.is_full()), ("sunk", 45.0, true));
        assert_eq!(found.len(), 8);
    }

    #[test]
    fn a_pitch_circle_holds_only_the_holes_that_there_are() {
        let three = Repeat::Polar { count: 3, about: p(0.0, 0.0), step: 30.0 };
        let found = features(vec![Shape { repeat: Some(three), ..circle("bolt", 40.0, 0.0, 8.0) }]);
        let CentreFeature::Pitch { circle, .. } = &found[0] else { panic!("{found:?}") };
        let half = 2.0 * (4.0f64 / 80.0).asin().to_degrees();
        assert!(
            (circle.start + half).abs() < 1e-9 && (circle.sweep - 60.0 - 2.0 * half).abs() < 1e-9
        );
    }

    #[test]
    fn a_stepped_shaft_has_one_axis() {
        let found = features(vec![
            turned("journal", 0.0, -10.0, 30.0, 20.0),
            turned("collar", 30.0, -15.0, 10.0, 30.0),
            class(LineClass::Hidden, turned("bore", 20.0, -3.0, 40.0, 6.0)),
            turned("other", 100.0, -5.0, 10.0, 10.0),
        ]);
        let lines: Vec<_> = found
            .iter()
            .map(|f| match f {
                CentreFeature::Axis { shape, line } => (shape.as_str(), line.from.x, line.to.x),
                _ => panic!("{f:?}"),
            })
            .collect();
        assert_eq!(lines, [("journal", 0.0, 60.0), ("other", 100.0, 110.0)]);
    }

    #[test]
    fn a_slot_has_its_axis_and_a_line_across_each_end() {
        let slot = Outline::Slot { from: p(0.0, 0.0), to: p(20.0, 0.0), width: 8.0 };
        let found = features(vec![shape("slot", slot)]);
        let lengths: Vec<f64> = found
            .iter()
            .map(|f| match f {
                CentreFeature::Axis { line, .. } => line.length(),
                _ => panic!("{f:?}"),
            })
            .collect();
        assert_eq!(lengths, [28.0, 8.0, 8.0]);
    }

    #[test]
    fn arcs_cut_faces_and_thin_lines_get_none() {
        let arc = Outline::Arc { centre: p(0.0, 0.0), radius: 9.0, start: 0.0, sweep: 270.0 };
        let found = features(vec![
            shape("bend", arc),
            cut_face(circle("pin", 40.0, 0.0, 9.0)),
            class(LineClass::Construction, circle("root", 80.0, 0.0, 9.0)),
            Shape { centre: CentreLines::No, ..circle("dot", 120.0, 0.0, 9.0) },
        ]);
        assert!(found.is_empty(), "{found:?}");
    }
}
