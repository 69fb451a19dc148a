//! Which line is drawn where several coincide.
//!
//! Order after ISO 128-2 as common practice reads it: cut and visible edges win over everything,
//! hidden ones over centre lines, those over adjacent parts, all over construction lines. Smooth
//! edges give way to visible and cut ones only. What a loser shows beyond the winner stays.

use crate::geom::{Arc, COINCIDENT, Curve, View as ViewSpace};
use crate::ident::ShapeId;
use crate::spec::LineClass;

use super::edge::Edge;

/// Sine of the angle within which two lines have one direction: over a metre they then stray by
/// less than the distance at which lines coincide.
const ONE_DIRECTION: f64 = 1e-7;

/// The edges with what is covered taken away and equals drawn once, in walking order.
pub(super) fn settle(edges: Vec<Edge>) -> Vec<Edge> {
    let mut pieces: Vec<(usize, f64, Edge)> = Vec::new();
    let mut lines: Vec<(usize, Run)> = Vec::new();
    let mut arcs: Vec<(usize, Arc<ViewSpace>)> = Vec::new();
    for (i, edge) in edges.iter().enumerate() {
        match &edge.curve {
            Curve::Line(l) => lines.extend(Run::of(l).map(|r| (i, r))),
            Curve::Arc(a) => arcs.push((i, *a)),
            Curve::Ellipse(_) | Curve::Cubic(_) => {
                // Free curves coincide only where they are copies of each other.
                let copied = edges[..i].iter().any(|e| {
                    e.curve == edge.curve
                        && (e.class == edge.class || gives_way(edge.class, e.class))
                });
                if !copied {
                    pieces.push((i, 0.0, edge.clone()));
                }
            }
        }
    }
    for cluster in clusters(lines, |r| [r.angle, r.offset]) {
        pieces.extend(settle_lines(&cluster, &edges));
    }
    for cluster in clusters(arcs, |a| [a.radius, a.centre.x, a.centre.y]) {
        pieces.extend(settle_arcs(&cluster, &edges));
    }
    pieces.sort_by(|a, b| a.0.cmp(&b.0).then(a.1.total_cmp(&b.1)));
    pieces.into_iter().map(|(_, _, e)| e).collect()
}

/// Whether a line of class `loser` is not drawn where one of class `winner` runs.
fn gives_way(loser: LineClass, winner: LineClass) -> bool {
    use LineClass::{Adjacent, Break, Centre, Construction, Cut, Hidden, Smooth, Visible};
    match loser {
        Cut => false,
        Visible => winner == Cut,
        Hidden | Smooth | Break => matches!(winner, Cut | Visible),
        Centre => matches!(winner, Cut | Visible | Hidden),
        Adjacent => matches!(winner, Cut | Visible | Hidden | Centre),
        Construction => {
            matches!(winner, Cut | Visible | Hidden | Smooth | Centre | Adjacent | Break)
        }
    }
}

/// A straight edge by its supporting line and its stretch on it.
#[derive(Clone, Copy)]
struct Run {
    /// Direction, radians in (−π/2, π/2].
    angle: f64,
    /// Signed distance of the supporting line from the origin.
    offset: f64,
    /// Places of its ends along the supporting line.
    ends: (f64, f64),
}

impl Run {
    fn of(l: &crate::geom::Line<ViewSpace>) -> Option<Self> {
        let mut u = l.vector().unit()?;
        if u.x < -ONE_DIRECTION || (u.x <= ONE_DIRECTION && u.y < 0.0) {
            u = -u;
        }
        let along = |p: crate::geom::Point<ViewSpace>| p.x * u.x + p.y * u.y;
        let offset = l.from.y * u.x - l.from.x * u.y;
        Some(Self { angle: u.y.atan2(u.x), offset, ends: (along(l.from), along(l.to)) })
    }

    fn low(&self) -> f64 {
        self.ends.0.min(self.ends.1)
    }

    fn high(&self) -> f64 {
        self.ends.0.max(self.ends.1)
    }
}

/// Groups items whose keys agree within [`COINCIDENT`] (angles within [`ONE_DIRECTION`], which is
/// smaller, so the same bound serves), by sorting once per key.
fn clusters<T: Copy, const N: usize>(
    items: Vec<(usize, T)>,
    key: impl Fn(&T) -> [f64; N] + Copy,
) -> Vec<Vec<(usize, T)>> {
    let mut groups = vec![items];
    for k in 0..N {
        groups = groups.into_iter().flat_map(|g| split_by(g, |t| key(t)[k])).collect();
    }
    groups
}

fn split_by<T: Copy>(mut group: Vec<(usize, T)>, key: impl Fn(&T) -> f64) -> Vec<Vec<(usize, T)>> {
    group.sort_by(|a, b| key(&a.1).total_cmp(&key(&b.1)).then(a.0.cmp(&b.0)));
    let mut groups: Vec<Vec<(usize, T)>> = Vec::new();
    for item in group {
        match groups.last_mut() {
            Some(g) if g.last().is_some_and(|l| key(&item.1) - key(&l.1) <= COINCIDENT) => {
                g.push(item);
            }
            _ => groups.push(vec![item]),
        }
    }
    groups
}

fn settle_lines(cluster: &[(usize, Run)], edges: &[Edge]) -> Vec<(usize, f64, Edge)> {
    if let [(i, _)] = cluster {
        return vec![(*i, 0.0, edges[*i].clone())];
    }
    let mut cuts: Vec<f64> = cluster.iter().flat_map(|(_, r)| [r.low(), r.high()]).collect();
    cuts.sort_by(f64::total_cmp);
    cuts.dedup_by(|a, b| (*a - *b).abs() <= COINCIDENT);
    // Sorted by their beginnings, so that the edges over a stretch are found by sweeping.
    let mut order: Vec<&(usize, Run)> = cluster.iter().collect();
    order.sort_by(|a, b| a.1.low().total_cmp(&b.1.low()).then(a.0.cmp(&b.0)));
    let mut active: Vec<&(usize, Run)> = Vec::new();
    let mut next = 0;
    let mut stretches: Vec<Stretch> = Vec::new();
    for pair in cuts.windows(2) {
        let middle = (pair[0] + pair[1]) / 2.0;
        while order.get(next).is_some_and(|(_, r)| r.low() <= middle) {
            active.push(order[next]);
            next += 1;
        }
        active.retain(|(_, r)| r.high() >= middle);
        let over: Vec<usize> = active.iter().map(|(i, _)| *i).collect();
        stretches.extend(winners(&over, edges, pair[0], pair[1]));
    }
    let runs: std::collections::BTreeMap<usize, Run> = cluster.iter().copied().collect();
    joined(stretches)
        .into_iter()
        .map(|s| {
            let run = runs[&s.owner];
            let share = |t: f64| (t - run.ends.0) / (run.ends.1 - run.ends.0);
            let (a, b) = (share(s.from), share(s.to));
            let curve = edges[s.owner].curve.piece(a.min(b).max(0.0), a.max(b).min(1.0));
            (s.owner, a.min(b), Edge { class: s.class, curve, shapes: s.shapes })
        })
        .collect()
}

fn settle_arcs(cluster: &[(usize, Arc<ViewSpace>)], edges: &[Edge]) -> Vec<(usize, f64, Edge)> {
    if let [(i, _)] = cluster {
        return vec![(*i, 0.0, edges[*i].clone())];
    }
    let slack = (COINCIDENT / cluster[0].1.radius).to_degrees();
    let mut cuts: Vec<f64> = cluster
        .iter()
        .filter(|(_, a)| !a.is_full())
        .flat_map(|(_, a)| [a.start.rem_euclid(360.0), (a.start + a.sweep).rem_euclid(360.0)])
        .collect();
    cuts.sort_by(f64::total_cmp);
    cuts.dedup_by(|a, b| (*a - *b).abs() <= slack);
    if cuts.is_empty() {
        cuts.push(0.0);
    }
    let closing = cuts[0] + 360.0;
    cuts.push(closing);
    let mut stretches = Vec::new();
    for pair in cuts.windows(2) {
        let middle = (pair[0] + pair[1]) / 2.0;
        let over: Vec<usize> =
            cluster.iter().filter(|(_, a)| a.covers(middle)).map(|(i, _)| *i).collect();
        stretches.extend(winners(&over, edges, pair[0], pair[1]));
    }
    let arc = cluster[0].1;
    joined(stretches)
        .into_iter()
        .map(|s| {
            let sweep = s.to - s.from;
            let curve = if sweep >= 360.0 - 1e-9 {
                Curve::circle(arc.centre, arc.radius)
            } else {
                Curve::Arc(Arc::new(arc.centre, arc.radius, s.from, sweep))
            };
            (s.owner, s.from, Edge { class: s.class, curve, shapes: s.shapes })
        })
        .collect()
}

/// A stretch of one supporting line or circle, to be drawn once.
struct Stretch {
    owner: usize,
    class: LineClass,
    shapes: Vec<ShapeId>,
    from: f64,
    to: f64,
}

/// What is drawn between two cuts, of the edges that run there: one stretch for each class that
/// need not give way.
fn winners(over: &[usize], edges: &[Edge], from: f64, to: f64) -> Vec<Stretch> {
    let mut classes: Vec<LineClass> = over.iter().map(|i| edges[*i].class).collect();
    classes.sort_unstable();
    classes.dedup();
    classes
        .iter()
        .filter(|c| !classes.iter().any(|w| gives_way(**c, *w)))
        .filter_map(|class| {
            let own: Vec<usize> =
                over.iter().copied().filter(|i| edges[*i].class == *class).collect();
            let mut shapes: Vec<ShapeId> =
                own.iter().flat_map(|i| edges[*i].shapes.clone()).collect();
            shapes.sort();
            shapes.dedup();
            own.iter().min().map(|o| Stretch { owner: *o, class: *class, shapes, from, to })
        })
        .collect()
}

/// Neighbouring stretches of one owner and equal shapes as one.
fn joined(mut stretches: Vec<Stretch>) -> Vec<Stretch> {
    stretches.sort_by(|a, b| a.owner.cmp(&b.owner).then(a.from.total_cmp(&b.from)));
    let mut all: Vec<Stretch> = Vec::new();
    for s in stretches {
        match all.last_mut() {
            Some(l)
                if l.owner == s.owner
                    && l.class == s.class
                    && l.shapes == s.shapes
                    && (l.to - s.from).abs() <= 1e-9 =>
            {
                l.to = s.to;
            }
            _ => all.push(s),
        }
    }
    all
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geom::{Point, overlap_length};
    use proptest::prelude::*;

    fn edge(class: LineClass, x0: f64, x1: f64, name: &str) -> Edge {
        Edge {
            class,
            curve: Curve::line(Point::new(x0, 2.0), Point::new(x1, 2.0)),
            shapes: vec![ShapeId::new(name)],
        }
    }

    #[test]
    fn a_visible_edge_hides_what_lies_under_it_and_no_more() {
        let out = settle(vec![
            edge(LineClass::Hidden, 0.0, 10.0, "h"),
            edge(LineClass::Visible, 4.0, 6.0, "v"),
        ]);
        let hidden: Vec<_> = out.iter().filter(|e| e.class == LineClass::Hidden).collect();
        assert_eq!(hidden.len(), 2);
        assert!(hidden.iter().all(|e| (e.curve.length() - 4.0).abs() < 1e-9));
        assert_eq!(out.len(), 3);
    }

    #[test]
    fn a_shared_edge_is_drawn_once_and_names_both_shapes() {
        let out = settle(vec![
            edge(LineClass::Visible, 0.0, 10.0, "a"),
            edge(LineClass::Visible, 10.0, 0.0, "b"),
        ]);
        assert_eq!(out.len(), 1);
        assert_eq!(out[0].shapes, vec![ShapeId::new("a"), ShapeId::new("b")]);
    }

    #[test]
    fn hidden_and_smooth_do_not_remove_each_other() {
        let out = settle(vec![
            edge(LineClass::Hidden, 0.0, 10.0, "h"),
            edge(LineClass::Smooth, 0.0, 10.0, "s"),
        ]);
        assert_eq!(out.len(), 2);
    }

    #[test]
    fn an_arc_on_a_circle_is_not_drawn_twice() {
        let round = |class, start, sweep, name: &str| Edge {
            class,
            curve: Curve::Arc(Arc::new(Point::new(0.0, 0.0), 5.0, start, sweep)),
            shapes: vec![ShapeId::new(name)],
        };
        let out = settle(vec![
            round(LineClass::Hidden, 0.0, 360.0, "h"),
            round(LineClass::Visible, -30.0, 60.0, "v"),
        ]);
        let hidden: f64 =
            out.iter().filter(|e| e.class == LineClass::Hidden).map(|e| e.curve.length()).sum();
        assert!((hidden - 300f64.to_radians() * 5.0).abs() < 1e-6, "{out:?}");
    }

    proptest! {
        #[test]
        fn no_two_edges_of_the_result_run_on_one_another(
            spans in prop::collection::vec((0.0..100.0f64, 0.5..40.0f64, 0..3u8), 1..30),
        ) {
            let class = |k: u8| match k {
                0 => LineClass::Visible,
                1 => LineClass::Hidden,
                _ => LineClass::Centre,
            };
            let edges: Vec<Edge> = spans
                .iter()
                .enumerate()
                .map(|(i, (x, w, k))| edge(class(*k), *x, x + w, &format!("s{i}")))
                .collect();
            let once = settle(edges);
            for (i, a) in once.iter().enumerate() {
                for b in &once[i + 1..] {
                    let (Curve::Line(p), Curve::Line(q)) = (&a.curve, &b.curve) else { continue };
                    prop_assert!(overlap_length(p, q) <= COINCIDENT + 1e-9);
                }
            }
            let twice = settle(once.clone());
            prop_assert_eq!(once.len(), twice.len());
        }
    }
}
