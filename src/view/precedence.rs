//! Which line stays where lines coincide.
//!
//! Takes the edges of a view as its shapes make them; gives edges of which no two lie on one
//! another (but for hidden ones under seen smooth ones, which the contract keeps apart). The order:
//! visible and cut edges remove everything under them; hidden and smooth ones remove centre lines,
//! adjacent parts, break and construction lines, in this order of strength (ISO 128-2 and common
//! practice). Of equal classes, and of whole lines that coincide, one stays with the shapes of both.

use super::coincide::{CurveIndex, Stretch, across_start, covered};
use super::edge::Edge;
use crate::geom::{COINCIDENT, Curve, View};
use crate::ident::ShapeId;
use crate::spec::LineClass;

/// What the edge of one class does to that of another under it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Meeting {
    /// It removes it.
    Removes,
    /// They are one edge of both shapes.
    Merges,
    /// It leaves it alone.
    Leaves,
}

/// Most pairs of edges that may lie near one another; an ordinary view has a few for each edge.
const MOST_PAIRS: usize = 4_000_000;

/// Most edges of one class that may lie on one edge: each may cut it and lends its name to the
/// pieces, so their number grows with the square.
const MOST_EQUALS: usize = 1000;

/// So many edges lie on one another that the view cannot be meant.
#[derive(Clone, Copy, Debug, PartialEq, Eq, thiserror::Error)]
#[error("thousands of its edges lie on one another")]
pub(super) struct Crowd;

/// The edges without what lies under stronger ones, in the order of `edges`.
///
/// # Errors
/// [`Crowd`] instead of running for minutes.
pub(super) fn resolved(edges: Vec<Edge>) -> Result<Vec<Edge>, Crowd> {
    let mut pairs = 0;
    let curves: Vec<Curve<View>> = edges.iter().map(|e| e.curve).collect();
    let index = CurveIndex::new(&curves, COINCIDENT);
    let mut kept = Vec::with_capacity(edges.len());
    for (i, edge) in edges.iter().enumerate() {
        let mut fate = Fate::default();
        let near = index.neighbours(&edge.curve);
        pairs += near.len();
        if pairs > MOST_PAIRS {
            return Err(Crowd);
        }
        for j in near.into_iter().filter(|j| *j != i) {
            let other = &edges[j];
            match meeting(other.class, edge.class) {
                Meeting::Leaves => fate.shared.extend(named_after(edge, other).map(|s| (s, j))),
                Meeting::Removes => fate.lost.extend(covered(&edge.curve, &other.curve)),
                // The first of equals stays and takes the names of the later ones.
                Meeting::Merges if j < i => fate.lost.extend(covered(&edge.curve, &other.curve)),
                Meeting::Merges => {
                    let stretches = covered(&edge.curve, &other.curve).into_iter();
                    fate.shared.extend(stretches.map(|s| (s, j)));
                }
            }
        }
        if fate.shared.len() > MOST_EQUALS {
            return Err(Crowd);
        }
        fate.apply(i, edge, &edges, &mut kept);
    }
    Ok(kept)
}

/// All of `edge` if it removes `other` and the two coincide from end to end: then it keeps the names
/// of both. One that only lies under a part of it would cut it in pieces for nothing that is seen.
fn named_after(edge: &Edge, other: &Edge) -> Option<Stretch> {
    if meeting(edge.class, other.class) != Meeting::Removes {
        return None;
    }
    let is_whole = |on: &Curve<View>, by: &Curve<View>| matches!(covered(on, by).as_slice(), [s] if s.from == 0.0 && s.to == 1.0);
    let both = is_whole(&edge.curve, &other.curve) && is_whole(&other.curve, &edge.curve);
    both.then_some(Stretch { from: 0.0, to: 1.0 })
}

fn meeting(upper: LineClass, lower: LineClass) -> Meeting {
    if upper == lower {
        return Meeting::Merges;
    }
    match rank(upper).cmp(&rank(lower)) {
        std::cmp::Ordering::Less => Meeting::Removes,
        // Cut edges are drawn as visible ones are; the cut one says more.
        std::cmp::Ordering::Equal if upper == LineClass::Cut => Meeting::Removes,
        // Hidden and smooth: a seen tangent edge hides nothing sharp behind it.
        std::cmp::Ordering::Equal | std::cmp::Ordering::Greater => Meeting::Leaves,
    }
}

fn rank(class: LineClass) -> u8 {
    match class {
        LineClass::Visible | LineClass::Cut => 0,
        LineClass::Hidden | LineClass::Smooth => 1,
        LineClass::Centre => 2,
        LineClass::Adjacent => 3,
        LineClass::Break => 4,
        LineClass::Construction => 5,
    }
}

/// What happens to one edge.
#[derive(Default)]
struct Fate {
    lost: Vec<Stretch>,
    /// Stretches that a later edge of the same class shares.
    shared: Vec<(Stretch, usize)>,
}

/// A stretch that stays, and which edges lend their shapes to it.
struct Piece {
    stretch: Stretch,
    shapes: Vec<ShapeId>,
}

impl Fate {
    fn apply(&self, i: usize, edge: &Edge, edges: &[Edge], kept: &mut Vec<Edge>) {
        if self.lost.is_empty() && self.shared.is_empty() {
            kept.push(edge.clone());
            return;
        }
        let mut pieces: Vec<Piece> = Vec::new();
        for stretch in self.stretches(edge.curve.length()) {
            let middle = (stretch.from + stretch.to) / 2.0;
            if self.lost.iter().any(|l| l.holds(middle)) {
                continue;
            }
            let shapes = self.shapes(i, middle, edges);
            match pieces.last_mut() {
                Some(last) if last.stretch.to == stretch.from && last.shapes == shapes => {
                    last.stretch.to = stretch.to;
                }
                _ => pieces.push(Piece { stretch, shapes }),
            }
        }
        kept.extend(curves_of(&edge.curve, pieces).map(|(curve, shapes)| Edge {
            class: edge.class,
            curve,
            shapes,
        }));
    }

    /// The edge cut wherever something begins or ends, without pieces that are no length.
    fn stretches(&self, length: f64) -> Vec<Stretch> {
        let all = self.lost.iter().chain(self.shared.iter().map(|(s, _)| s));
        let mut cuts: Vec<f64> = all.flat_map(|s| [s.from, s.to]).chain([0.0, 1.0]).collect();
        cuts.sort_by(f64::total_cmp);
        let mut clean: Vec<f64> = Vec::with_capacity(cuts.len());
        for t in cuts {
            match clean.last() {
                Some(last) if (t - last) * length <= COINCIDENT => {}
                _ => clean.push(t),
            }
        }
        // The end stays even where the last cut lies close before it.
        if let Some(last) = clean.last_mut() {
            *last = if (1.0 - *last) * length <= COINCIDENT { 1.0 } else { *last };
        }
        clean.windows(2).map(|w| Stretch { from: w[0], to: w[1] }).collect()
    }

    fn shapes(&self, i: usize, t: f64, edges: &[Edge]) -> Vec<ShapeId> {
        let mut shapes = edges[i].shapes.clone();
        for (_, j) in self.shared.iter().filter(|(s, _)| s.holds(t)) {
            for id in &edges[*j].shapes {
                if !shapes.contains(id) {
                    shapes.push(id.clone());
                }
            }
        }
        shapes
    }
}

/// The curves of the pieces; on a whole turn the last and the first may be one.
fn curves_of(
    curve: &Curve<View>,
    mut pieces: Vec<Piece>,
) -> impl Iterator<Item = (Curve<View>, Vec<ShapeId>)> + '_ {
    let mut around = None;
    if let [first, .., last] = pieces.as_slice()
        && curve.is_loop()
        && first.stretch.from == 0.0
        && last.stretch.to == 1.0
        && first.shapes == last.shapes
    {
        around =
            Some((across_start(curve, last.stretch.from, first.stretch.to), last.shapes.clone()));
        pieces.pop();
        pieces.remove(0);
    }
    let inner = pieces.into_iter().map(|p| (curve.piece(p.stretch.from, p.stretch.to), p.shapes));
    around.into_iter().chain(inner)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geom::{Arc, Point};
    use proptest::prelude::*;

    fn resolved(edges: Vec<Edge>) -> Vec<Edge> {
        super::resolved(edges).expect("no crowd")
    }

    fn edge(id: &str, class: LineClass, curve: Curve<View>) -> Edge {
        Edge { class, curve, shapes: vec![ShapeId::new(id)] }
    }

    fn level(id: &str, class: LineClass, x0: f64, x1: f64) -> Edge {
        edge(id, class, Curve::line(Point::new(x0, 0.0), Point::new(x1, 0.0)))
    }

    fn spans(edges: &[Edge]) -> Vec<(LineClass, i64, i64, String)> {
        let ids = |e: &Edge| e.shapes.iter().map(ShapeId::as_str).collect::<Vec<_>>().join("+");
        edges
            .iter()
            .map(|e| {
                let (a, b) = (e.curve.start().x, e.curve.end().x);
                (e.class, a.round() as i64, b.round() as i64, ids(e))
            })
            .collect()
    }

    #[test]
    fn a_visible_edge_removes_what_is_under_it() {
        use LineClass::{Centre, Hidden, Visible};
        let found = resolved(vec![
            level("wall", Hidden, 0.0, 10.0),
            level("rim", Visible, 4.0, 6.0),
            level("axis", Centre, -5.0, 15.0),
        ]);
        let expected = [
            (Hidden, 0, 4, "wall"),
            (Hidden, 6, 10, "wall"),
            (Visible, 4, 6, "rim"),
            (Centre, -5, 0, "axis"),
            (Centre, 10, 15, "axis"),
        ];
        assert_eq!(spans(&found), expected.map(|(c, a, b, id)| (c, a, b, id.to_owned())));
    }

    #[test]
    fn equals_merge_and_keep_both_names() {
        use LineClass::Visible;
        let found = resolved(vec![level("a", Visible, 0.0, 10.0), level("b", Visible, 15.0, 5.0)]);
        let expected = [(Visible, 0, 5, "a"), (Visible, 5, 10, "a+b"), (Visible, 15, 10, "b")];
        assert_eq!(spans(&found), expected.map(|(c, a, b, id)| (c, a, b, id.to_owned())));
    }

    #[test]
    fn the_stronger_of_two_whole_lines_keeps_both_names() {
        use LineClass::{Hidden, Visible};
        let found =
            resolved(vec![level("back", Hidden, 9.0, 0.0), level("face", Visible, 0.0, 9.0)]);
        assert_eq!(spans(&found), [(Visible, 0, 9, "face+back".to_owned())]);
    }

    #[test]
    fn a_hidden_line_stays_under_a_smooth_one() {
        use LineClass::{Hidden, Smooth};
        let found = resolved(vec![level("a", Smooth, 0.0, 9.0), level("b", Hidden, 0.0, 9.0)]);
        assert_eq!(found.len(), 2);
    }

    #[test]
    fn a_circle_with_a_covered_part_stays_one_arc() {
        let circle = |start, sweep| Curve::Arc(Arc::new(Point::new(2.0, 3.0), 8.0, start, sweep));
        let found = resolved(vec![
            edge("hole", LineClass::Hidden, circle(0.0, 360.0)),
            edge("rim", LineClass::Visible, circle(90.0, 60.0)),
        ]);
        assert_eq!(found.len(), 2);
        let Curve::Arc(rest) = found[0].curve else { panic!("{found:?}") };
        assert!((rest.sweep - 300.0).abs() < 1e-9 && (rest.start - 150.0).abs() < 1e-9);
    }

    fn any_edges() -> impl Strategy<Value = Vec<Edge>> {
        let class = prop::sample::select(vec![
            LineClass::Visible,
            LineClass::Hidden,
            LineClass::Cut,
            LineClass::Centre,
            LineClass::Adjacent,
            LineClass::Construction,
        ]);
        let one =
            (class, 0..4u8, 0..12i32, 1..12i32, 0..3i32).prop_map(|(class, kind, a, n, row)| {
                let (a, n, row) = (f64::from(a), f64::from(n), f64::from(row));
                let p = Point::<View>::new;
                match kind {
                    0 => (class, Curve::line(p(a, row), p(a + n, row))),
                    1 => (class, Curve::line(p(row, a + n), p(row, a))),
                    2 => (class, Curve::line(p(a, a + row), p(a + n, a + n + row))),
                    _ => {
                        (class, Curve::Arc(Arc::new(p(0.0, row), 5.0, a * 30.0, n * 30.0 - 180.5)))
                    }
                }
            });
        prop::collection::vec(one, 1..14).prop_map(|all| {
            let numbered = all.into_iter().enumerate();
            numbered.map(|(i, (class, curve))| edge(&format!("s{i}"), class, curve)).collect()
        })
    }

    proptest! {
        #[test]
        fn no_two_edges_that_remain_overlap(edges in any_edges()) {
            let found = resolved(edges);
            for (i, a) in found.iter().enumerate() {
                for b in &found[i + 1..] {
                    let common = covered(&a.curve, &b.curve);
                    prop_assert!(common.is_empty(), "{a:?} {b:?} {common:?}");
                }
            }
        }

        #[test]
        fn resolving_again_changes_nothing(edges in any_edges()) {
            let once = resolved(edges);
            prop_assert_eq!(resolved(once.clone()), once);
        }

        #[test]
        fn every_place_keeps_its_strongest_line(edges in any_edges()) {
            let found = resolved(edges.clone());
            for e in &edges {
                for t in [0.037, 0.513, 0.981] {
                    let p = e.curve.at(t);
                    let on = |other: &&Edge| {
                        let l = other.curve.flattened(1e-5);
                        l.windows(2).any(|w| {
                            crate::geom::distance_line_line(w[0], w[1], p, p + crate::geom::Vector::new(1e-9, 0.0)) < 1e-4
                        })
                    };
                    let strongest = edges.iter().filter(on).map(|o| rank(o.class)).min();
                    let left = found.iter().filter(on).map(|o| rank(o.class)).min();
                    prop_assert_eq!(strongest, left);
                }
            }
        }
    }
}
