//! The places and sizes that each kind of figure offers: the table of [`anchor`](super::anchor).

use super::anchor::{Anchor, Size};
use super::figure::{Figure, Rectangle, Slot, Trace};
use crate::geom::{Arc, COINCIDENT, Curve, Line, Path, Point, Vector, View};
use crate::spec::{Axis, LineDirection, SizeSign};

/// The sides of a figure as the reader sees them, and the direction in which each looks.
const SIDES: [(&str, f64); 4] = [("bottom", -90.0), ("right", 0.0), ("top", 90.0), ("left", 180.0)];

/// Names of a rectangle's corners, counter-clockwise from the lower left one.
const CORNERS: [&str; 4] = ["bottom-left", "bottom-right", "top-right", "top-left"];

impl Figure {
    /// The place called `name`; the empty name is the bare id.
    pub(super) fn place(&self, name: &str) -> Option<Anchor> {
        if let Self::Trace(trace) = self
            && let Some(place) = trace.numbered(name)
        {
            return Some(place);
        }
        self.places().into_iter().find(|(n, _)| *n == name).map(|(_, place)| place)
    }

    /// The size called `name`.
    pub(super) fn size(&self, name: &str) -> Option<Size> {
        match self {
            Self::Trace(trace) => trace.edge_size(name),
            _ => self.sizes().into_iter().find(|(n, _)| *n == name).map(|(_, size)| size),
        }
    }

    /// Names of all its places, for messages.
    pub(super) fn place_names(&self) -> Vec<String> {
        let fixed = self.places().into_iter().map(|(n, _)| n.to_owned());
        let mut names: Vec<String> = fixed.filter(|n| !n.is_empty()).collect();
        if let Self::Trace(trace) = self {
            names.push(format!("p1 … p{}", trace.vertices.len()));
            names.push(format!("e1 … e{}", trace.edges.len()));
        }
        names
    }

    /// Names of all its sizes, for messages.
    pub(super) fn size_names(&self) -> Vec<String> {
        match self {
            Self::Trace(_) => vec!["e1.length".to_owned(), "e1.radius".to_owned()],
            _ => self.sizes().into_iter().map(|(n, _)| n.to_owned()).collect(),
        }
    }

    fn places(&self) -> Vec<(&'static str, Anchor)> {
        match self {
            Self::Line(l) => vec![
                ("", Anchor::Edge(*l)),
                ("start", Anchor::Point(l.from)),
                ("end", Anchor::Point(l.to)),
                ("middle", Anchor::Point(l.at(0.5))),
            ],
            Self::Arc(a) => vec![
                ("", Anchor::Round(*a)),
                ("rim", Anchor::Round(*a)),
                ("centre", centre_of(a)),
                ("start", Anchor::Point(a.towards(a.start))),
                ("end", Anchor::Point(a.towards(a.start + a.sweep))),
                ("middle", Anchor::Point(a.towards(a.middle()))),
            ],
            Self::Circle(a) => {
                let mut places = vec![
                    ("", Anchor::Round(*a)),
                    ("rim", Anchor::Round(*a)),
                    ("centre", centre_of(a)),
                    ("axis", centre_of(a)),
                ];
                places.extend(SIDES.map(|(n, degrees)| (n, Anchor::Point(a.towards(degrees)))));
                places
            }
            Self::Slot(s) => self.slot_places(s),
            Self::Rectangle(r) => self.rectangle_places(r),
            Self::Trace(_) => self.sides().into(),
        }
    }

    fn slot_places(&self, s: &Slot) -> Vec<(&'static str, Anchor)> {
        let end = |at| Anchor::Centre { at, reach: s.radius };
        let [right, left] = s.sides();
        let mut places = vec![
            ("", Anchor::Round(s.end_arc(false))),
            ("rim", Anchor::Round(s.end_arc(false))),
            ("centre", Anchor::Point(s.axis.at(0.5))),
            ("start", end(s.axis.from)),
            ("end", end(s.axis.to)),
            ("axis", Anchor::Axis(s.overall())),
            ("side1", Anchor::Edge(right)),
            ("side2", Anchor::Edge(left)),
        ];
        places.extend(self.sides());
        places
    }

    fn rectangle_places(&self, r: &Rectangle) -> Vec<(&'static str, Anchor)> {
        let mut places: Vec<(&'static str, Anchor)> =
            SIDES.into_iter().enumerate().map(|(i, (name, _))| (name, side_of(r, i))).collect();
        places.push(("centre", Anchor::Point(r.centre())));
        places.extend(CORNERS.into_iter().zip(r.corners.map(Anchor::Point)));
        // The lower right one: dimensions stand above and to the left more often.
        places.extend(r.rounding(1).map(|arc| ("rounding", Anchor::Round(arc))));
        places.extend(r.turned.map(|axis| ("axis", Anchor::Axis(r.middle(axis)))));
        places
    }

    fn sides(&self) -> [(&'static str, Anchor); 4] {
        let paths = self.paths();
        SIDES.map(|(name, degrees)| (name, outermost(&paths, Vector::at_angle(degrees))))
    }

    fn sizes(&self) -> Vec<(&'static str, Size)> {
        match self {
            Self::Line(l) => vec![("length", length_of(*l))],
            Self::Arc(a) => vec![("radius", Size::Radius(*a))],
            Self::Circle(a) => vec![("diameter", Size::Diameter(*a)), ("radius", Size::Radius(*a))],
            Self::Slot(s) => slot_sizes(s),
            Self::Rectangle(r) => rectangle_sizes(r),
            Self::Trace(_) => Vec::new(),
        }
    }
}

impl Trace {
    /// `p3` or `e3`, counted from 1.
    fn numbered(&self, name: &str) -> Option<Anchor> {
        if let Some(point) = name.strip_prefix('p') {
            return self.vertices.get(index(point)?).copied().map(Anchor::Point);
        }
        Some(match self.edge(name)? {
            Curve::Line(l) => Anchor::Edge(*l),
            Curve::Arc(a) => Anchor::Round(*a),
            // Neither straight nor round: its middle is the one place that is sure to lie on it.
            free @ (Curve::Ellipse(_) | Curve::Cubic(_)) => Anchor::Point(free.at(0.5)),
        })
    }

    fn edge(&self, name: &str) -> Option<&Curve<View>> {
        self.edges.get(index(name.strip_prefix('e')?)?)?.as_ref()
    }

    fn edge_size(&self, name: &str) -> Option<Size> {
        let (edge, size) = name.split_once('.')?;
        match (self.edge(edge)?, size) {
            (Curve::Line(l), "length") => Some(length_of(*l)),
            (Curve::Arc(a), "radius") => Some(Size::Radius(*a)),
            _ => None,
        }
    }
}

fn index(number: &str) -> Option<usize> {
    number.parse::<usize>().ok()?.checked_sub(1)
}

fn centre_of(a: &Arc<View>) -> Anchor {
    Anchor::Centre { at: a.centre, reach: a.radius }
}

fn length_of(l: Line<View>) -> Size {
    between(Anchor::Point(l.from), Anchor::Point(l.to), LineDirection::Aligned, None)
}

fn between(from: Anchor, to: Anchor, direction: LineDirection, sign: Option<SizeSign>) -> Size {
    Size::Distance { from, to, direction, sign }
}

fn slot_sizes(s: &Slot) -> Vec<(&'static str, Size)> {
    let [right, left] = s.sides();
    let end = |at| Anchor::Centre { at, reach: s.radius };
    let aligned = LineDirection::Aligned;
    vec![
        ("width", between(Anchor::Edge(right), Anchor::Edge(left), LineDirection::Auto, None)),
        ("length", length_of(s.overall())),
        ("spacing", between(end(s.axis.from), end(s.axis.to), aligned, None)),
        ("radius", Size::Radius(s.end_arc(false))),
    ]
}

fn rectangle_sizes(r: &Rectangle) -> Vec<(&'static str, Size)> {
    let along = |axis: Axis, sign| {
        let (first, second, upright) = match axis {
            Axis::X => (3, 1, LineDirection::Horizontal),
            Axis::Y => (0, 2, LineDirection::Vertical),
        };
        // A rectangle turned out of the upright is measured square to its own sides.
        let direction = if is_upright(r) { upright } else { LineDirection::Auto };
        between(side_of(r, first), side_of(r, second), direction, sign)
    };
    let mut sizes = vec![("width", along(Axis::X, None)), ("height", along(Axis::Y, None))];
    sizes.extend(r.rounding(1).map(|arc| ("corner_radius", Size::Radius(arc))));
    if let Some(axis) = r.turned {
        let across = match axis {
            Axis::X => Axis::Y,
            Axis::Y => Axis::X,
        };
        sizes.push(("diameter", along(across, Some(SizeSign::Diameter))));
        sizes.push(("length", along(axis, None)));
    }
    sizes
}

fn is_upright(r: &Rectangle) -> bool {
    (r.corners[0].y - r.corners[1].y).abs() <= COINCIDENT
}

/// Side `i` as an edge; its middle where the roundings leave nothing straight.
fn side_of(r: &Rectangle, i: usize) -> Anchor {
    r.straight(i).map_or_else(|| Anchor::Point(r.side(i).at(0.5)), Anchor::Edge)
}

/// What lies farthest in `direction`: the longest straight edge square to it, else the first point.
fn outermost(paths: &[Path<View>], direction: Vector<View>) -> Anchor {
    let curves = || paths.iter().flat_map(|p| &p.curves);
    let reach = |p: Point<View>| direction.dot(p - Point::new(0.0, 0.0));
    let mut best: Option<Point<View>> = None;
    for p in curves().flat_map(|c| farthest_points(c, direction)) {
        if best.is_none_or(|b| reach(p) > reach(b) + COINCIDENT) {
            best = Some(p);
        }
    }
    // Every figure has a curve: `Figure::of` refuses the others.
    let best = best.unwrap_or(Point::new(0.0, 0.0));
    let level = |p: Point<View>| (reach(p) - reach(best)).abs() <= COINCIDENT;
    let edges = curves().filter_map(|c| match c {
        Curve::Line(l) if level(l.from) && level(l.to) => Some(*l),
        Curve::Line(_) | Curve::Arc(_) | Curve::Ellipse(_) | Curve::Cubic(_) => None,
    });
    edges
        .reduce(|a, b| if b.length() > a.length() + COINCIDENT { b } else { a })
        .map_or(Anchor::Point(best), Anchor::Edge)
}

fn farthest_points(c: &Curve<View>, direction: Vector<View>) -> Vec<Point<View>> {
    let mut points = vec![c.start()];
    points.extend(c.extremes(direction).into_iter().map(|t| c.at(t)));
    points.push(c.end());
    points
}
