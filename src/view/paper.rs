//! A view drawn at a scale.
//!
//! Takes a finished [`View`], a scale and a style; gives a [`PaperView`]: every stroke with its
//! width, dashes laid, centre lines with their overshoot, cut faces hatched, all in mm of paper
//! around the view's origin, y down. Nothing here knows other views or where this one will stand.

use rstar::RTree;
use rstar::primitives::GeomWithData;

use super::centre_lines::{Stroke, owner, strokes};
use super::crossing::crossings;
use super::dash::{Pattern, Short};
use super::edge::{CentreFeature, Edge, View};
use super::hatch::hatched;
use crate::geom::{COINCIDENT, Curve, Line, Paper, Path, Placement, Point, Rect, Vector};
use crate::ident::ShapeId;
use crate::spec::LineClass;
use crate::style::{DashSpec, Group, Style};
use crate::units::Scale;

/// A view on paper: mm around the view's origin, y down.
#[derive(Clone, Debug, PartialEq)]
pub struct PaperView {
    /// Its edges, in the order of the view's.
    pub edges: Vec<PaperEdge>,
    /// Its centre lines, in the order of the view's features.
    pub centres: Vec<PaperCentre>,
    /// Its hatched regions.
    pub hatch: Vec<PaperHatch>,
    /// Extent of the part in this view, without centre lines.
    pub outline: Rect<Paper>,
    /// How it was brought to paper.
    pub placement: Placement,
}

/// An edge on paper.
#[derive(Clone, Debug, PartialEq)]
pub struct PaperEdge {
    /// Its class.
    pub class: LineClass,
    /// The shapes or features that make it.
    pub shapes: Vec<ShapeId>,
    /// The whole edge.
    pub curve: Curve<Paper>,
    /// What is drawn of it: the edge itself for continuous classes.
    pub dashes: Vec<Curve<Paper>>,
    /// Line width, mm.
    pub width: f64,
}

/// The centre lines of one feature on paper. A line that several features in a row share belongs to
/// the first of them.
#[derive(Clone, Debug, PartialEq)]
pub struct PaperCentre {
    /// The shape or group.
    pub shape: ShapeId,
    /// The whole lines.
    pub lines: Vec<Curve<Paper>>,
    /// What is drawn of them.
    pub dashes: Vec<Curve<Paper>>,
    /// Line width, mm.
    pub width: f64,
}

/// A hatched region on paper.
#[derive(Clone, Debug, PartialEq)]
pub struct PaperHatch {
    /// The shape that bounds it.
    pub shape: ShapeId,
    /// The hatch lines, clipped to the region.
    pub lines: Vec<Line<Paper>>,
    /// Its outlines by the even-odd rule.
    pub outlines: Vec<Path<Paper>>,
    /// Line width, mm.
    pub width: f64,
    /// Direction of the lines, degrees.
    pub angle: f64,
}

/// Draws a view at `scale` with the line widths of `group`.
#[must_use]
pub fn on_paper(view: &View, scale: Scale, style: &Style, group: &Group) -> PaperView {
    let placement = Placement::new(scale);
    let drafting = Drafting::new(view, placement, style, group);
    let chain = Chain::of(&drafting);
    let regions = view.regions.iter().map(|region| {
        let outlines = region.outlines.iter().map(|p| path_on_paper(p, &placement));
        (region.shape.clone(), outlines.collect())
    });
    PaperView {
        edges: paper_edges(&drafting, &chain),
        centres: chain.centres(view, group.narrow),
        hatch: hatched(regions.collect(), &style.hatch, group.narrow),
        outline: placement.rect(&view.bounds),
        placement,
    }
}

fn path_on_paper(p: &Path<crate::geom::View>, placement: &Placement) -> Path<Paper> {
    Path { curves: p.curves.iter().map(|c| placement.curve(c)).collect(), closed: p.closed }
}

/// Longest dashed lines of a view together, mm: a busy A0 sheet has some 100 m. A view with more lies
/// outside every sheet, which is reported where views are placed; its lines are continuous.
const MOST_DASHED: f64 = 1e6;

/// A view, its edges on paper, and how lines are drawn.
struct Drafting<'a> {
    view: &'a View,
    curves: Vec<Curve<Paper>>,
    placement: Placement,
    style: &'a Style,
    group: &'a Group,
    is_dashed: bool,
}

impl<'a> Drafting<'a> {
    fn new(view: &'a View, placement: Placement, style: &'a Style, group: &'a Group) -> Self {
        let curves: Vec<Curve<Paper>> =
            view.edges.iter().map(|e| placement.curve(&e.curve)).collect();
        let edges = view.edges.iter().zip(&curves).filter(|(e, _)| !is_continuous(e.class));
        let of_edges: f64 = edges.map(|(_, c)| c.length()).sum();
        let of_features: f64 = view.centres.iter().map(extent).sum();
        let is_dashed = of_edges + placement.length(of_features) <= MOST_DASHED;
        Self { view, curves, placement, style, group, is_dashed }
    }

    /// Numbers of the edges of some classes.
    fn numbered(&self, of: impl Fn(LineClass) -> bool) -> impl Iterator<Item = usize> {
        self.view.edges.iter().enumerate().filter(move |(_, e)| of(e.class)).map(|(i, _)| i)
    }

    fn pattern(&self, spec: &DashSpec) -> Pattern {
        Pattern::new(spec, self.group.narrow)
    }

    fn dashed(
        &self,
        pattern: &Pattern,
        curve: &Curve<Paper>,
        stops: &[f64],
        short: Short,
    ) -> Vec<Curve<Paper>> {
        if self.is_dashed { pattern.fitted(curve, stops, short) } else { vec![*curve] }
    }
}

/// Length of the centre lines of a feature on the part, without overshoot, mm.
fn extent(feature: &CentreFeature) -> f64 {
    match feature {
        CentreFeature::Cross { circle, .. } => 4.0 * circle.radius,
        CentreFeature::Axis { line, .. } => line.length(),
        CentreFeature::Pitch { circle, .. } => Curve::Arc(*circle).length(),
    }
}

/// All lines of the centre pattern: those of features and those drawn as edges. They are dashed
/// together, because they cross each other.
struct Chain {
    strokes: Vec<Stroke>,
    stroke_dashes: Vec<Vec<Curve<Paper>>>,
    /// By number of the edge.
    edge_dashes: Vec<(usize, Vec<Curve<Paper>>)>,
}

impl Chain {
    fn of(d: &Drafting<'_>) -> Self {
        let pattern = d.pattern(&d.style.dash.centre);
        let curves = &d.curves;
        let stronger: Vec<Curve<Paper>> = d.numbered(gives_way_to).map(|i| curves[i]).collect();
        let strokes =
            strokes(&d.view.centres, &d.placement, &d.style.centre, pattern.gap(), &stronger);
        let drawn: Vec<usize> = d.numbered(|class| class == LineClass::Centre).collect();
        let mut all: Vec<Curve<Paper>> = strokes.iter().map(|s| s.curve).collect();
        all.extend(drawn.iter().map(|i| curves[*i]));
        let mut stops = crossings(&all);
        let edge_stops = stops.split_off(strokes.len());
        let stroke_dashes = strokes
            .iter()
            .zip(stops)
            .map(|(s, stops)| match s.continuous {
                true => vec![s.curve],
                false => chained(d, &pattern, &s.curve, stops),
            })
            .collect();
        let edge_dashes = drawn
            .into_iter()
            .zip(edge_stops)
            .map(|(i, stops)| (i, chained(d, &pattern, &curves[i], stops)))
            .collect();
        Self { strokes, stroke_dashes, edge_dashes }
    }

    fn centres(&self, view: &View, width: f64) -> Vec<PaperCentre> {
        let mut centres: Vec<(usize, PaperCentre)> = Vec::new();
        for (stroke, dashes) in self.strokes.iter().zip(&self.stroke_dashes) {
            if centres.last().is_none_or(|(feature, _)| *feature != stroke.feature) {
                let shape = owner(&view.centres[stroke.feature]).clone();
                let none = PaperCentre { shape, lines: Vec::new(), dashes: Vec::new(), width };
                centres.push((stroke.feature, none));
            }
            if let Some((_, centre)) = centres.last_mut() {
                centre.lines.push(stroke.curve);
                centre.dashes.extend(dashes);
            }
        }
        centres.into_iter().map(|(_, centre)| centre).collect()
    }
}

fn chained(
    d: &Drafting<'_>,
    pattern: &Pattern,
    curve: &Curve<Paper>,
    stops: Vec<f64>,
) -> Vec<Curve<Paper>> {
    let stops = if stops.is_empty() { axis_crossings(curve) } else { stops };
    d.dashed(pattern, curve, &stops, Short::Continuous)
}

/// Edges that a centre line gives way to.
fn gives_way_to(class: LineClass) -> bool {
    match class {
        LineClass::Visible | LineClass::Cut | LineClass::Hidden | LineClass::Centre => true,
        LineClass::Smooth | LineClass::Adjacent | LineClass::Break | LineClass::Construction => {
            false
        }
    }
}

fn is_continuous(class: LineClass) -> bool {
    match class {
        LineClass::Hidden | LineClass::Centre | LineClass::Adjacent => false,
        LineClass::Visible
        | LineClass::Cut
        | LineClass::Smooth
        | LineClass::Break
        | LineClass::Construction => true,
    }
}

fn paper_edges(d: &Drafting<'_>, chain: &Chain) -> Vec<PaperEdge> {
    let mut dashes: Vec<Option<Vec<Curve<Paper>>>> = vec![None; d.curves.len()];
    for (i, drawn) in &chain.edge_dashes {
        dashes[*i] = Some(drawn.clone());
    }
    for (i, drawn) in hidden_dashes(d) {
        dashes[i] = Some(drawn);
    }
    let adjacent = d.pattern(&d.style.dash.adjacent);
    for i in d.numbered(|class| class == LineClass::Adjacent) {
        let stops = axis_crossings(&d.curves[i]);
        dashes[i] = Some(d.dashed(&adjacent, &d.curves[i], &stops, Short::Continuous));
    }
    let drawn = d.view.edges.iter().zip(&d.curves).zip(dashes);
    drawn
        .map(|((edge, curve), dashes)| PaperEdge {
            class: edge.class,
            shapes: edge.shapes.clone(),
            curve: *curve,
            dashes: dashes.unwrap_or_else(|| vec![*curve]),
            width: width_of(edge.class, d.group),
        })
        .collect()
}

fn width_of(class: LineClass, group: &Group) -> f64 {
    match class {
        LineClass::Visible | LineClass::Cut => group.wide,
        LineClass::Hidden
        | LineClass::Smooth
        | LineClass::Centre
        | LineClass::Adjacent
        | LineClass::Break
        | LineClass::Construction => group.narrow,
    }
}

/// The dashes of hidden edges by number. Where hidden edges meet or cross, dashes meet.
fn hidden_dashes(d: &Drafting<'_>) -> Vec<(usize, Vec<Curve<Paper>>)> {
    let pattern = d.pattern(&d.style.dash.hidden);
    let numbers: Vec<usize> = d.numbered(|class| class == LineClass::Hidden).collect();
    let outlines = Ends::of(&d.view.edges, &d.curves, &d.placement);
    let hidden: Vec<Curve<Paper>> =
        numbers.iter().map(|i| outlines.kept_apart(&d.curves[*i], pattern.gap())).collect();
    let stops = crossings(&hidden);
    let fitted = hidden.iter().zip(stops).map(|(curve, stops)| {
        // Around a whole circle only the axes count, so that equal circles look equal.
        let stops = if curve.is_loop() { axis_crossings(curve) } else { stops };
        d.dashed(&pattern, curve, &stops, Short::OneGap)
    });
    numbers.iter().copied().zip(fitted).collect()
}

/// On a whole circle or ellipse the lengths at which its axes cross it, level and upright for a
/// circle; nothing on open curves.
fn axis_crossings(curve: &Curve<Paper>) -> Vec<f64> {
    if !curve.is_loop() {
        return Vec::new();
    }
    let length = curve.length();
    let first = match curve {
        Curve::Arc(a) => (-a.start * a.sweep.signum()).rem_euclid(90.0) / 360.0,
        Curve::Line(_) | Curve::Ellipse(_) | Curve::Cubic(_) => 0.0,
    };
    (0..4).map(|i| (first + f64::from(i) / 4.0) * length).collect()
}

/// Ends of visible edges, each with the direction into the edge.
struct Ends {
    tree: RTree<GeomWithData<[f64; 2], Vector<Paper>>>,
    tolerance: f64,
}

/// Cosine of the angle up to which one line continues another: a degree, as drawn.
const CONTINUES: f64 = 0.99985;

impl Ends {
    fn of(edges: &[Edge], curves: &[Curve<Paper>], placement: &Placement) -> Self {
        let outlines = edges
            .iter()
            .zip(curves)
            .filter(|(e, _)| matches!(e.class, LineClass::Visible | LineClass::Cut));
        let ends = outlines.filter(|(_, c)| !c.is_loop()).flat_map(|(_, c)| {
            let into = [(c.start(), c.direction(0.0)), (c.end(), c.direction(1.0).map(|d| -d))];
            into.into_iter().filter_map(|(p, d)| Some(GeomWithData::new([p.x, p.y], d?)))
        });
        let tree = RTree::bulk_load(ends.collect());
        Self { tree, tolerance: placement.length(COINCIDENT).max(COINCIDENT) }
    }

    /// `hidden` without a gap at each end where a visible edge continues it.
    fn kept_apart(&self, hidden: &Curve<Paper>, gap: f64) -> Curve<Paper> {
        let length = hidden.length();
        // A line of a few gaps would lose what makes it readable.
        if hidden.is_loop() || length < 4.0 * gap {
            return *hidden;
        }
        let back = hidden.direction(0.0).map(|d| -d);
        let from = if self.goes_on(hidden.start(), back) { gap } else { 0.0 };
        let to =
            if self.goes_on(hidden.end(), hidden.direction(1.0)) { length - gap } else { length };
        match (from > 0.0, to < length) {
            (false, false) => *hidden,
            _ => hidden.piece(hidden.parameter_at_length(from), hidden.parameter_at_length(to)),
        }
    }

    fn goes_on(&self, at: Point<Paper>, outwards: Option<Vector<Paper>>) -> bool {
        let Some(outwards) = outwards else { return false };
        let near = self.tree.locate_within_distance([at.x, at.y], self.tolerance * self.tolerance);
        near.into_iter().any(|end| end.data.dot(outwards) > CONTINUES)
    }
}

#[cfg(test)]
mod tests {
    use super::super::sample::*;
    use super::*;
    use crate::spec::{Repeat, Shape};
    use crate::style::builtin;
    use proptest::prelude::*;

    fn drawn(shapes: Vec<Shape>, scale: &str) -> PaperView {
        let style = builtin("iso").expect("compiled in");
        let group = style.group_of("A3").clone();
        on_paper(&view(shapes), scale.parse().expect("a scale"), &style, &group)
    }

    fn is_on(p: Point<Paper>, dashes: &[Curve<Paper>]) -> bool {
        dashes.iter().any(|d| match d {
            Curve::Line(l) => crate::geom::distance_line_line(l.from, l.to, p, p) < 1e-6,
            Curve::Arc(a) => {
                let out = p - a.centre;
                (out.length() - a.radius).abs() < 1e-6 && a.covers(out.angle())
            }
            Curve::Ellipse(_) | Curve::Cubic(_) => panic!("the samples have none"),
        })
    }

    #[test]
    fn a_cross_reaches_past_the_rim_and_crosses_in_dashes() {
        let v = drawn(vec![circle("bore", 10.0, 5.0, 60.0)], "1:2");
        let [centre] = v.centres.as_slice() else { panic!("{:?}", v.centres) };
        assert_eq!(centre.lines.len(), 2);
        // ⌀60 at 1:2 is 30 on paper; 3 mm past the rim on either side (practice: 3).
        assert!(centre.lines.iter().all(|l| (l.length() - 36.0).abs() < 1e-9));
        assert!(centre.dashes.len() > 6);
        assert!(is_on(Point::new(5.0, -2.5), &centre.dashes[..centre.dashes.len() / 2]));
        assert!(is_on(Point::new(5.0, -2.5), &centre.dashes[centre.dashes.len() / 2..]));
    }

    #[test]
    fn a_small_circle_gets_a_continuous_cross() {
        let v = drawn(vec![circle("pin", 0.0, 0.0, 11.0)], "1:1");
        assert_eq!(v.centres[0].dashes, v.centres[0].lines);
        let v = drawn(vec![circle("pin", 0.0, 0.0, 11.0)], "2:1");
        assert!(v.centres[0].dashes.len() > v.centres[0].lines.len());
    }

    #[test]
    fn strokes_of_holes_cross_their_pitch_circle_in_dashes() {
        let v = drawn(
            vec![circle("rim", 0.0, 0.0, 120.0), polar(circle("bolt", 45.0, 0.0, 9.0), 6)],
            "1:1",
        );
        let pitch = v.centres.iter().find(|c| c.shape.as_str() == "bolt").expect("a pitch circle");
        for i in 0..6 {
            let at = Point::new(0.0, 0.0) + Vector::at_angle(60.0 * f64::from(i)) * 45.0;
            assert!(is_on(at, &pitch.dashes), "hole {i}");
        }
        // The holes at 0° and 180° lie on the rim's own level line and need no stroke.
        let strokes: usize = v
            .centres
            .iter()
            .filter(|c| c.shape.as_str().starts_with("bolt."))
            .map(|c| c.lines.len())
            .sum();
        assert_eq!(strokes, 4);
    }

    #[test]
    fn holes_in_a_row_share_a_line() {
        let row = Repeat::Grid { count: (4, 1), pitch: Vector::new(16.0, 0.0) };
        let v = drawn(vec![Shape { repeat: Some(row), ..circle("hole", 0.0, 0.0, 12.0) }], "1:1");
        let level: Vec<_> = v
            .centres
            .iter()
            .flat_map(|c| &c.lines)
            .filter(|l| (l.start().y - l.end().y).abs() < 1e-9)
            .collect();
        assert_eq!(level.len(), 1);
        assert!((level[0].length() - (48.0 + 12.0 + 6.0)).abs() < 1e-9);
    }

    #[test]
    fn a_centre_line_gives_way_to_edges() {
        let v = drawn(
            vec![circle("rim", 0.0, 0.0, 60.0), line("split", (-30.0, 0.0), (30.0, 0.0))],
            "1:1",
        );
        let level = v.centres[0]
            .lines
            .iter()
            .filter(|l| l.start().y.abs() < 1e-9 && l.end().y.abs() < 1e-9);
        assert!(level.map(Curve::length).all(|l| (l - 3.0).abs() < 1e-9));
    }

    #[test]
    fn hidden_corners_meet_in_dashes() {
        let v =
            drawn(vec![class(LineClass::Hidden, rectangle("pocket", 0.0, 0.0, 33.0, 21.0))], "1:1");
        for edge in &v.edges {
            let (first, last) =
                (edge.dashes.first().expect("drawn"), edge.dashes.last().expect("drawn"));
            assert!(first.start().is_at(edge.curve.start()) && last.end().is_at(edge.curve.end()));
            assert!(edge.dashes.len() >= 5);
            assert_eq!(edge.width, 0.25);
        }
    }

    #[test]
    fn a_hidden_line_keeps_a_gap_where_a_visible_one_continues_it() {
        let v = drawn(
            vec![
                line("rib", (0.0, 0.0), (20.0, 0.0)),
                class(LineClass::Hidden, line("rest", (20.0, 0.0), (60.0, 0.0))),
            ],
            "1:1",
        );
        let first = v.edges[1].dashes.first().expect("drawn").start();
        // Gap of ISO 128-2: 3 widths of 0.25.
        assert!((first.x - 20.75).abs() < 1e-9, "{first:?}");
        assert!(v.edges[1].dashes.last().expect("drawn").end().is_at(Point::new(60.0, 0.0)));
    }

    #[test]
    fn classes_have_the_two_widths_of_their_group() {
        let all = [
            (LineClass::Visible, 0.5),
            (LineClass::Cut, 0.5),
            (LineClass::Smooth, 0.25),
            (LineClass::Adjacent, 0.25),
            (LineClass::Construction, 0.25),
        ];
        for (i, (c, width)) in all.into_iter().enumerate() {
            let y = i as f64;
            let v = drawn(vec![class(c, line("l", (0.0, y), (50.0, y)))], "1:1");
            assert_eq!(v.edges[0].width, width);
            assert_eq!(v.edges[0].dashes.len() > 1, c == LineClass::Adjacent);
        }
    }

    #[test]
    fn an_enormous_scale_neither_hangs_nor_fills_the_memory() {
        let v = drawn(
            vec![
                cut_face(rectangle("body", 0.0, 0.0, 9e5, 9e5)),
                class(LineClass::Hidden, circle("bore", 0.0, 0.0, 9e5)),
            ],
            "1000000:1",
        );
        assert!(v.edges.iter().all(|e| e.dashes.len() == 1));
        assert!(v.hatch[0].lines.is_empty());
    }

    #[test]
    fn a_thousand_holes_are_drawn_quickly() {
        let grid = Repeat::Grid { count: (40, 40), pitch: Vector::new(20.0, 20.0) };
        let started = std::time::Instant::now();
        let v = drawn(vec![Shape { repeat: Some(grid), ..circle("hole", 0.0, 0.0, 8.0) }], "1:1");
        assert_eq!(v.edges.len(), 1600);
        assert!(started.elapsed().as_secs_f64() < 8.0, "{:?}", started.elapsed());
    }

    proptest! {
        #[test]
        fn dashes_lie_on_their_edge(
            x in -50.0..50.0f64, y in -50.0..50.0f64, d in 2.0..90.0f64, k in 0..3usize,
        ) {
            let v = drawn(
                vec![
                    class(LineClass::Hidden, circle("a", x, y, d)),
                    class(LineClass::Hidden, line("b", (x, y), (x + d, y + 3.0))),
                    class(LineClass::Centre, circle("c", y, x, d)),
                ],
                ["1:2", "1:1", "5:1"][k],
            );
            for edge in &v.edges {
                prop_assert!(!edge.dashes.is_empty());
                for dash in &edge.dashes {
                    for t in [0.0, 0.5, 1.0] {
                        prop_assert!(is_on(dash.at(t), &[edge.curve]));
                    }
                }
            }
        }
    }
}
