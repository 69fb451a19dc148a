//! A view from the shapes that a spec draws.
//!
//! Takes a resolved [`ViewSpec`]; gives a [`View`], or diagnostics for every shape that cannot be
//! drawn. All shapes are looked at before giving up.

use std::collections::BTreeMap;

use super::anchor::Named;
use super::centre::{centre_features, has_centre, pitch_circle};
use super::edge::{Edge, Region, View};
use super::figure::{Fault, Figure, Motion, written};
use super::precedence::resolved;
use super::repeat::motions;
use crate::geom::{Rect, View as ViewSpace};
use crate::ident::ShapeId;
use crate::source::{Diagnostic, Diagnostics, Span};
use crate::spec::{CentreLines, Geometry, LineClass, Outline, Shape, ViewSpec};

/// Most curves of all shapes of a view; a plate with ten thousand slots has 40 000.
const MOST_PIECES: usize = 200_000;

/// One shape, or one member of a repeated one.
pub(super) struct Member<'a> {
    pub(super) id: ShapeId,
    pub(super) shape: &'a Shape,
    pub(super) figure: Figure,
}

/// The view that `spec` draws. What is wrong with it goes to `diagnostics`; after an error there is
/// no view, after a warning there is.
#[must_use]
pub fn drawn_view(spec: &ViewSpec, diagnostics: &mut Diagnostics) -> Option<View> {
    let Geometry::Drawn(shapes) = &spec.geometry;
    let mut found = Found::default();
    for shape in shapes {
        found.add(shape, diagnostics);
    }
    if found.faulty {
        return None;
    }
    let edges = match resolved(edges_of(&found.members)) {
        Ok(edges) => edges,
        Err(crowd) => {
            let message = format!("view `{}`: {crowd}", spec.id);
            let help = "leave out shapes that lie on others";
            diagnostics.push(Diagnostic::error(spec.span, message).help(help));
            return None;
        }
    };
    let Some(bounds) = bounds_of(&edges) else {
        let message = format!("view `{}` shows nothing", spec.id);
        diagnostics.push(Diagnostic::error(spec.span, message).help("give it at least one shape"));
        return None;
    };
    Some(View {
        id: spec.id.clone(),
        span: spec.span,
        part: spec.part.clone(),
        from: spec.from,
        scale: spec.scale,
        label: spec.label.clone(),
        is_section: spec.is_section,
        edges,
        centres: centre_features(&found.members),
        regions: regions_of(&found.members),
        bounds,
        names: found.names,
    })
}

/// What the shapes looked at so far come to.
#[derive(Default)]
struct Found<'a> {
    members: Vec<Member<'a>>,
    names: BTreeMap<ShapeId, Named>,
    places: BTreeMap<ShapeId, Span>,
    pieces: usize,
    faulty: bool,
}

impl<'a> Found<'a> {
    fn add(&mut self, shape: &'a Shape, diagnostics: &mut Diagnostics) {
        match members_of(shape) {
            Ok(members) => {
                warn(shape, &members, diagnostics);
                self.pieces += members.iter().map(|m| m.figure.piece_count()).sum::<usize>();
                if self.pieces > MOST_PIECES {
                    self.fail(shape, &too_many(), diagnostics);
                    return;
                }
                self.name(shape, &members, diagnostics);
                self.members.extend(members);
            }
            Err(fault) => self.fail(shape, &fault, diagnostics),
        }
    }

    fn fail(&mut self, shape: &Shape, fault: &Fault, diagnostics: &mut Diagnostics) {
        self.faulty = true;
        let message = format!("shape `{}`: {}", shape.id, fault.message);
        let mut d = Diagnostic::error(place_of(shape), message);
        d.help = fault.help.clone();
        diagnostics.push(d);
    }

    fn name(&mut self, shape: &Shape, members: &[Member<'_>], diagnostics: &mut Diagnostics) {
        if shape.repeat.is_some() {
            let pitch = members.first().and_then(pitch_circle);
            let ids = members.iter().map(|m| m.id.clone()).collect();
            self.bind(shape, &shape.id, Named::Group { members: ids, pitch }, diagnostics);
        }
        for member in members {
            self.bind(shape, &member.id, Named::Shape(member.figure.clone()), diagnostics);
        }
    }

    fn bind(&mut self, shape: &Shape, id: &ShapeId, named: Named, diagnostics: &mut Diagnostics) {
        if let Some(earlier) = self.places.get(id) {
            self.faulty = true;
            let d =
                Diagnostic::error(shape.span, format!("two shapes of this view are called `{id}`"))
                    .help("give each its own id; members of a repeat are `id.1`, `id.2` …")
                    .related(*earlier, "the other one");
            diagnostics.push(d);
            return;
        }
        self.places.insert(id.clone(), shape.span);
        self.names.insert(id.clone(), named);
    }
}

/// The shape at all places where it is repeated.
fn members_of(shape: &Shape) -> Result<Vec<Member<'_>>, Fault> {
    let figure = Figure::of(&shape.outline)?;
    if let Figure::Trace(trace) = &figure
        && let Some(i) = trace.edges.iter().position(Option::is_none)
    {
        return Err(Fault::new(format!("its piece `e{}` has no length", i + 1))
            .help("two of its points coincide; move one of them or leave it out"));
    }
    if let (true, Some((from, to))) = (shape.hatch, figure.gap()) {
        let (from, to) = (written(from), written(to));
        return Err(Fault::new(format!(
            "the outline does not close: it begins at {from} and ends at {to}"
        ))
        .help("a cut face is hatched inside a closed outline; end it where it began"));
    }
    let Some(repeat) = &shape.repeat else {
        return Ok(vec![Member { id: shape.id.clone(), shape, figure }]);
    };
    let motions = motions(repeat)?;
    if motions.len().saturating_mul(figure.piece_count()) > MOST_PIECES {
        return Err(too_many());
    }
    let member = |(i, motion): (usize, &Motion)| Member {
        id: ShapeId::new(format!("{}.{}", shape.id, i + 1)),
        shape,
        figure: figure.moved(motion),
    };
    let members: Vec<Member<'_>> = motions.iter().enumerate().map(member).collect();
    match members.iter().find(|m| !m.figure.is_within_reach()) {
        Some(far) => {
            Err(Fault::new(format!("`{}` lies farther than 1 km from the origin", far.id)))
        }
        None => Ok(members),
    }
}

fn too_many() -> Fault {
    Fault::new(format!("with it the view has more than {MOST_PIECES} lines and curves"))
        .help("show a stretch of a large pattern and state the rest in a note")
}

fn warn(shape: &Shape, members: &[Member<'_>], diagnostics: &mut Diagnostics) {
    let Some(first) = members.first() else { return };
    if shape.centre == CentreLines::Yes && !has_centre(&first.figure) {
        let message = format!("shape `{}` has no centre that could be marked", shape.id);
        let d = Diagnostic::warning(shape.span, message);
        diagnostics.push(d.help("draw its centre line as a line of class \"centre\""));
    }
}

/// The text of the spec that a fault is about: the path data, whose faults name the letter, or the
/// shape's table.
fn place_of(shape: &Shape) -> Span {
    match &shape.outline {
        Outline::Path { data } => data.span,
        Outline::Line { .. }
        | Outline::Arc { .. }
        | Outline::Circle { .. }
        | Outline::Slot { .. }
        | Outline::Rectangle { .. }
        | Outline::Polygon { .. } => shape.span,
    }
}

fn edges_of(members: &[Member<'_>]) -> Vec<Edge> {
    let mut edges = Vec::new();
    for member in members {
        let class = member.shape.class;
        for curve in member.figure.paths().into_iter().flat_map(|p| p.curves) {
            edges.push(Edge { class, curve, shapes: vec![member.id.clone()] });
        }
    }
    edges
}

fn regions_of(members: &[Member<'_>]) -> Vec<Region> {
    let hatched = members.iter().filter(|m| m.shape.hatch);
    hatched.map(|m| Region { shape: m.id.clone(), outlines: m.figure.paths() }).collect()
}

/// The extent of the part: around sharp edges, or around all if there are none.
fn bounds_of(edges: &[Edge]) -> Option<Rect<ViewSpace>> {
    let is_sharp =
        |e: &&Edge| matches!(e.class, LineClass::Visible | LineClass::Hidden | LineClass::Cut);
    Rect::union_of(edges.iter().filter(is_sharp).map(|e| e.curve.bounds()))
        .or_else(|| Rect::union_of(edges.iter().map(|e| e.curve.bounds())))
}

#[cfg(test)]
mod tests {
    use super::super::sample::*;
    use super::*;
    use crate::geom::{Curve, Point, Vector};
    use crate::spec::{Axis, Repeat};
    use proptest::prelude::*;

    fn messages(shapes: Vec<Shape>) -> Vec<String> {
        complaints(shapes).into_iter().map(|d| d.message).collect()
    }

    #[test]
    fn all_faults_of_a_view_are_reported_together() {
        let found = messages(vec![
            line("a", (1.0, 1.0), (1.0, 1.0)),
            circle("b", 0.0, 0.0, 0.0),
            cut_face(path("c", "M 0 0 L 9 0 L 9 4")),
            path("d", "M 0 0 L 5 ?"),
            rectangle("e", 0.0, 0.0, -3.0, 4.0),
        ]);
        assert_eq!(found.len(), 5, "{found:?}");
        let closing = "the outline does not close: it begins at (0, 0) and ends at (9, 4)";
        assert!(found.iter().any(|m| m.contains(closing)), "{found:?}");
    }

    #[test]
    fn a_syntax_error_names_the_letter_and_points_at_the_path_data() {
        let found = complaints(vec![path("d", "M 0 0 L 5 ?")]);
        assert_eq!(found[0].span, Some(span(100, 113)));
        assert!(found[0].message.contains("letter 11: expected a number, found `?`"), "{found:?}");
    }

    #[test]
    fn a_view_without_shapes_is_an_error() {
        assert_eq!(messages(vec![]), ["view `front` shows nothing"]);
    }

    #[test]
    fn a_member_and_a_shape_cannot_share_a_name() {
        let found = messages(vec![
            polar(circle("bolt", 9.0, 0.0, 2.0), 3),
            circle("bolt.2", 0.0, 0.0, 1.0),
        ]);
        assert_eq!(found, ["two shapes of this view are called `bolt.2`"]);
    }

    #[test]
    fn absurd_numbers_end_in_a_message() {
        let many = polar(circle("bolt", 9.0, 0.0, 2.0), u32::MAX);
        assert!(messages(vec![many])[0].contains("4294967295 times"));
        assert!(messages(vec![circle("o", 1e9, 0.0, 2.0)])[0].contains("1 km"));
        assert!(messages(vec![path("o", "M 0 0 A 1e200 1e200 0 0 1 5 5")])[0].contains("1 km"));
        assert!(messages(vec![circle("o", f64::NAN, 0.0, 2.0)])[0].contains("1 km"));
    }

    #[test]
    fn coinciding_points_are_refused() {
        let points = vec![p(0.0, 0.0), p(5.0, 0.0), p(5.0, 0.0), p(0.0, 5.0)];
        let found = messages(vec![shape("plate", Outline::Polygon { points, closed: true })]);
        assert_eq!(found, ["shape `plate`: its piece `e2` has no length"]);
    }

    #[test]
    fn a_hatched_shape_is_a_region_with_a_cut_outline() {
        let v = view(vec![cut_face(path("body", "M 0 0 H 40 V 20 H 0 Z M 10 5 H 30 V 15 H 10 Z"))]);
        assert_eq!((v.regions.len(), v.regions[0].outlines.len()), (1, 2));
        assert_eq!(v.edges.len(), 8);
        assert!(v.edges.iter().all(|e| e.class == LineClass::Cut));
    }

    #[test]
    fn bounds_are_those_of_the_part_not_of_its_centre_lines() {
        let v = view(vec![
            rectangle("plate", 0.0, 0.0, 30.0, 20.0),
            class(LineClass::Centre, line("axis", (-9.0, 10.0), (39.0, 10.0))),
        ]);
        assert!((v.bounds.width() - 30.0).abs() < 1e-9);
    }

    #[test]
    fn mirrored_members_have_their_own_left_and_right() {
        let slanted =
            Outline::Polygon { points: vec![p(2.0, 0.0), p(6.0, 0.0), p(6.0, 3.0)], closed: true };
        let repeat = Some(Repeat::Mirror { axis: Axis::Y, at: 0.0 });
        let v = view(vec![Shape { repeat, ..shape("ear", slanted) }]);
        let ends: Vec<Point<ViewSpace>> = v.edges.iter().map(|e| e.curve.start()).collect();
        assert!(ends[3].is_at(p(-2.0, 0.0)) && ends[5].is_at(p(-6.0, 3.0)), "{ends:?}");
    }

    #[test]
    fn growth_is_near_n_log_n() {
        let cells = |n: u32| {
            let grid = Repeat::Grid { count: (n, n), pitch: Vector::new(4.0, 4.0) };
            let cell = Shape { repeat: Some(grid), ..rectangle("cell", 0.0, 0.0, 4.0, 4.0) };
            let started = std::time::Instant::now();
            let v = view(vec![cell]);
            // Neighbouring cells share their sides.
            assert_eq!(v.edges.len(), 2 * n as usize * (n as usize + 1));
            started.elapsed().as_secs_f64()
        };
        let (few, many) = (cells(15), cells(60));
        // Sixteen times the shapes; a quadratic method would take 256 times as long.
        assert!(many < 100.0 * few + 0.5, "{few} {many}");
    }

    #[test]
    fn a_crowd_of_lines_on_one_another_is_refused() {
        let heap = Repeat::At { offsets: vec![Vector::new(0.001, 0.0); 9_000] };
        let found =
            messages(vec![Shape { repeat: Some(heap), ..line("l", (0.0, 0.0), (9.0, 0.0)) }]);
        assert!(found[0].contains("lie on one another"), "{found:?}");
    }

    #[test]
    fn a_repeat_of_a_long_path_is_counted_before_it_is_made() {
        let data = format!("M 0 0 {}", "l 1 0 l 0 1 ".repeat(9_000));
        let grid = Repeat::Grid { count: (100, 100), pitch: Vector::new(4.0, 4.0) };
        let found = messages(vec![Shape { repeat: Some(grid), ..path("long", &data) }]);
        assert!(found[0].contains("more than 200000 lines"), "{found:?}");
    }

    proptest! {
        #[test]
        fn repeating_moves_a_shape_without_changing_it(
            x in -20.0..20.0f64, y in -20.0..20.0f64, turn in 0.0..360.0f64, kind in 0..4u8,
        ) {
            let repeat = match kind {
                0 => Repeat::Polar { count: 3, about: p(x, y), step: turn },
                1 => Repeat::Grid { count: (2, 2), pitch: Vector::new(x + 50.0, y + 50.0) },
                2 => Repeat::At { offsets: vec![Vector::new(x + 80.0, y)] },
                _ => Repeat::Mirror { axis: if x > 0.0 { Axis::X } else { Axis::Y }, at: y - 50.0 },
            };
            let data = "M 1 1 L 6 1 A 3 3 0 0 1 6 7 A 5 2 30 0 0 2 9 C 1 9 0 4 1 1 Z";
            let figure = Figure::of(&path("s", data).outline).expect("sound");
            let lengths = |f: &Figure| -> Vec<f64> {
                f.paths().iter().flat_map(|p| &p.curves).map(Curve::length).collect()
            };
            for motion in motions(&repeat).expect("few members") {
                let moved = figure.moved(&motion);
                for (a, b) in lengths(&figure).iter().zip(lengths(&moved)) {
                    prop_assert!((a - b).abs() < 1e-5, "{} {}", a, b);
                }
                // Every point moves as the motion says, whatever kind of curve it lies on.
                let curves = |f: &Figure| -> Vec<Curve<ViewSpace>> {
                    f.paths().into_iter().flat_map(|p| p.curves).collect()
                };
                for (a, b) in curves(&figure).iter().zip(curves(&moved)) {
                    for t in [0.0, 0.3, 0.5, 1.0] {
                        prop_assert!(motion.point(a.at(t)).distance(b.at(t)) < 1e-9);
                    }
                }
                prop_assert!(moved.gap().is_none());
            }
        }
    }
}
