//! The shapes of a drawn view as exact geometry.
//!
//! Takes an [`Outline`] as the spec resolved it; gives a [`Figure`]: a member of a drawn view that
//! can be moved, traced as paths and asked for its places. An outline that cannot be drawn is a
//! [`Fault`] without a place; the caller knows the spec and adds it.

use super::path_data;
use crate::geom::{Arc, COINCIDENT, Curve, Line, Path, Point, Rect, Vector, View, same};
use crate::spec::{Axis, Outline};

/// Farthest coordinate and largest size that a shape may have, mm of the part: a kilometre. Beyond
/// it f64 no longer holds [`COINCIDENT`] with room for angles.
const FARTHEST: f64 = 1e6;

/// One shape of a view, or one member of a repeated shape.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Figure {
    Line(Line<View>),
    /// Less than a whole circle.
    Arc(Arc<View>),
    Circle(Arc<View>),
    Slot(Slot),
    Rectangle(Rectangle),
    Trace(Trace),
}

/// Two half circles joined by straight sides.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Slot {
    /// Centres of the two ends.
    pub(super) axis: Line<View>,
    pub(super) radius: f64,
}

/// A rectangle, upright unless it was turned by a repeat.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Rectangle {
    /// Counter-clockwise from the lower left one; the first side leans by at most 45°.
    pub(super) corners: [Point<View>; 4],
    pub(super) corner_radius: f64,
    /// The axis of a turned body: along the first side (X) or square to it (Y).
    pub(super) turned: Option<Axis>,
}

/// A polygon or path.
#[derive(Clone, Debug, Default, PartialEq)]
pub(super) struct Trace {
    pub(super) subpaths: Vec<Path<View>>,
    /// The points as written, in order.
    pub(super) vertices: Vec<Point<View>>,
    /// The pieces as written, in order, closing ones included; `None` where one has no length.
    pub(super) edges: Vec<Option<Curve<View>>>,
}

/// Why an outline cannot be drawn.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Fault {
    pub(super) message: String,
    pub(super) help: Option<String>,
}

impl Fault {
    pub(super) fn new(message: impl Into<String>) -> Self {
        Self { message: message.into(), help: None }
    }

    pub(super) fn help(mut self, help: impl Into<String>) -> Self {
        self.help = Some(help.into());
        self
    }
}

/// A movement without change of size: turned over if asked, then turned, then shifted.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Motion {
    flipped: bool,
    turn: f64,
    shift: Vector<View>,
}

impl Motion {
    pub(super) fn shift(shift: Vector<View>) -> Self {
        Self { flipped: false, turn: 0.0, shift }
    }

    /// By `degrees` counter-clockwise about a point.
    pub(super) fn turn(about: Point<View>, degrees: f64) -> Self {
        let from_origin = about - Point::new(0.0, 0.0);
        Self { flipped: false, turn: degrees, shift: from_origin - turned(from_origin, degrees) }
    }

    /// About the line parallel to `axis` that crosses the other axis `at`.
    pub(super) fn mirror(axis: Axis, at: f64) -> Self {
        match axis {
            Axis::Y => Self { flipped: true, turn: 0.0, shift: Vector::new(2.0 * at, 0.0) },
            Axis::X => Self { flipped: true, turn: 180.0, shift: Vector::new(0.0, 2.0 * at) },
        }
    }

    pub(super) fn point(&self, p: Point<View>) -> Point<View> {
        let v = Vector::new(if self.flipped { -p.x } else { p.x }, p.y);
        Point::new(0.0, 0.0) + turned(v, self.turn) + self.shift
    }

    fn line(&self, l: Line<View>) -> Line<View> {
        Line::new(self.point(l.from), self.point(l.to))
    }

    fn angle(&self, degrees: f64) -> f64 {
        self.turn + if self.flipped { 180.0 - degrees } else { degrees }
    }

    fn sense(&self) -> f64 {
        if self.flipped { -1.0 } else { 1.0 }
    }

    fn arc(&self, a: Arc<View>) -> Arc<View> {
        Arc::new(self.point(a.centre), a.radius, self.angle(a.start), a.sweep * self.sense())
    }

    fn curve(&self, c: &Curve<View>) -> Curve<View> {
        match c {
            Curve::Line(l) => Curve::Line(self.line(*l)),
            Curve::Arc(a) => Curve::Arc(self.arc(*a)),
            Curve::Ellipse(e) => Curve::Ellipse(crate::geom::EllipticArc {
                centre: self.point(e.centre),
                radii: e.radii,
                turn: self.angle(e.turn),
                start: e.start * self.sense(),
                sweep: e.sweep * self.sense(),
            }),
            Curve::Cubic(c) => Curve::Cubic(crate::geom::Cubic(c.0.map(|p| self.point(p)))),
        }
    }

    fn path(&self, p: &Path<View>) -> Path<View> {
        Path { curves: p.curves.iter().map(|c| self.curve(c)).collect(), closed: p.closed }
    }
}

/// `v` turned counter-clockwise; quarter turns are exact, so that repeated shapes stay upright.
fn turned(v: Vector<View>, degrees: f64) -> Vector<View> {
    let quarters = degrees / 90.0;
    if (quarters - quarters.round()).abs() < 1e-12 {
        return match (quarters.round() as i64).rem_euclid(4) {
            0 => v,
            1 => Vector::new(-v.y, v.x),
            2 => Vector::new(-v.x, -v.y),
            _ => Vector::new(v.y, -v.x),
        };
    }
    let (sin, cos) = degrees.to_radians().sin_cos();
    Vector::new(v.x * cos - v.y * sin, v.x * sin + v.y * cos)
}

impl Figure {
    /// The figure of an outline.
    ///
    /// # Errors
    /// [`Fault`] for one without extent, out of range, or written in a way that cannot be read.
    pub(super) fn of(outline: &Outline) -> Result<Self, Fault> {
        let figure = match outline {
            Outline::Line { from, to } => line(*from, *to)?,
            Outline::Arc { centre, radius, start, sweep } => arc(*centre, *radius, *start, *sweep)?,
            Outline::Circle { centre, diameter } => {
                Self::Circle(Arc::circle(*centre, positive("diameter", *diameter)? / 2.0))
            }
            Outline::Slot { from, to, width } => slot(*from, *to, *width)?,
            Outline::Rectangle { corner, size, corner_radius, turned } => {
                rectangle(*corner, *size, *corner_radius, *turned)?
            }
            Outline::Polygon { points, closed } => Self::Trace(polygon(points, *closed)?),
            Outline::Path { data } => Self::Trace(path_data::trace(&data.value)?),
        };
        if figure.is_within_reach() {
            return Ok(figure);
        }
        Err(Fault::new("the shape reaches farther than 1 km from the origin").help(
            "check the unit of its numbers: they are mm of the part unless `units` says inch",
        ))
    }

    /// The same figure elsewhere.
    pub(super) fn moved(&self, motion: &Motion) -> Self {
        match self {
            Self::Line(l) => Self::Line(motion.line(*l)),
            Self::Arc(a) => Self::Arc(motion.arc(*a)),
            // A whole circle has no beginning worth keeping: it always starts to the right.
            Self::Circle(a) => Self::Circle(Arc::circle(motion.point(a.centre), a.radius)),
            Self::Slot(s) => Self::Slot(Slot { axis: motion.line(s.axis), radius: s.radius }),
            Self::Rectangle(r) => Self::Rectangle(r.moved(motion)),
            Self::Trace(t) => Self::Trace(Trace {
                subpaths: t.subpaths.iter().map(|p| motion.path(p)).collect(),
                vertices: t.vertices.iter().map(|p| motion.point(*p)).collect(),
                edges: t.edges.iter().map(|e| e.as_ref().map(|c| motion.curve(c))).collect(),
            }),
        }
    }

    /// Its outline as drawn.
    pub(super) fn paths(&self) -> Vec<Path<View>> {
        match self {
            Self::Line(l) => vec![Path::of(Curve::Line(*l))],
            Self::Arc(a) | Self::Circle(a) => vec![Path::of(Curve::Arc(*a))],
            Self::Slot(s) => vec![s.path()],
            Self::Rectangle(r) => vec![r.path()],
            Self::Trace(t) => t.subpaths.clone(),
        }
    }

    /// The middle of a figure that is symmetrical about one.
    pub(super) fn centre(&self) -> Option<Point<View>> {
        match self {
            Self::Circle(a) => Some(a.centre),
            Self::Slot(s) => Some(s.axis.at(0.5)),
            Self::Rectangle(r) => Some(r.centre()),
            Self::Line(_) | Self::Arc(_) | Self::Trace(_) => None,
        }
    }

    /// The place of a subpath that does not close: where it begins and ends.
    pub(super) fn gap(&self) -> Option<(Point<View>, Point<View>)> {
        self.paths().iter().find(|p| !p.meets_itself()).and_then(|p| {
            let (first, last) = (p.curves.first()?, p.curves.last()?);
            Some((first.start(), last.end()))
        })
    }

    /// How many curves its outline has.
    pub(super) fn piece_count(&self) -> usize {
        match self {
            Self::Line(_) | Self::Arc(_) | Self::Circle(_) => 1,
            Self::Slot(_) => 4,
            Self::Rectangle(_) => 8,
            Self::Trace(t) => t.edges.len(),
        }
    }

    /// Whether all of it is near enough to be drawn exactly; a NaN is not.
    pub(super) fn is_within_reach(&self) -> bool {
        let limit = Rect::from_sides(-FARTHEST, -FARTHEST, FARTHEST, FARTHEST);
        let near = |p: Point<View>| limit.contains(p);
        self.paths().iter().flat_map(|p| &p.curves).all(|curve| match curve {
            Curve::Line(l) => near(l.from) && near(l.to),
            Curve::Arc(a) => near(a.centre) && a.radius <= FARTHEST,
            Curve::Ellipse(e) => near(e.centre) && e.radii.0.max(e.radii.1) <= FARTHEST,
            Curve::Cubic(c) => c.0.into_iter().all(near),
        })
    }
}

impl Slot {
    /// The half circle round the far end (`at_start`: the near one), counter-clockwise.
    pub(super) fn end_arc(&self, at_start: bool) -> Arc<View> {
        let along = self.axis.vector().angle();
        if at_start {
            Arc::new(self.axis.from, self.radius, along + 90.0, 180.0)
        } else {
            Arc::new(self.axis.to, self.radius, along - 90.0, 180.0)
        }
    }

    /// The straight side to the right of the walk from start to end, then the one to its left.
    pub(super) fn sides(&self) -> [Line<View>; 2] {
        let left =
            self.axis.vector().unit().map_or(Vector::new(0.0, 0.0), Vector::left) * self.radius;
        [
            Line::new(self.axis.from - left, self.axis.to - left),
            Line::new(self.axis.to + left, self.axis.from + left),
        ]
    }

    /// The axis lengthened to the outermost points of both ends.
    pub(super) fn overall(&self) -> Line<View> {
        let reach = self.axis.vector().unit().unwrap_or(Vector::new(0.0, 0.0)) * self.radius;
        Line::new(self.axis.from - reach, self.axis.to + reach)
    }

    fn path(&self) -> Path<View> {
        let [right, left] = self.sides();
        let curves = vec![
            Curve::Line(right),
            Curve::Arc(self.end_arc(false)),
            Curve::Line(left),
            Curve::Arc(self.end_arc(true)),
        ];
        Path { curves, closed: true }
    }
}

impl Rectangle {
    /// Side `i`, counter-clockwise from the lower one, from corner to corner.
    pub(super) fn side(&self, i: usize) -> Line<View> {
        Line::new(self.corners[i % 4], self.corners[(i + 1) % 4])
    }

    /// The straight part of side `i`; `None` where the corner radii leave nothing of it.
    pub(super) fn straight(&self, i: usize) -> Option<Line<View>> {
        let side = self.side(i);
        let along = side.vector().unit()? * self.corner_radius;
        let line = Line::new(side.from + along, side.to - along);
        (side.length() - 2.0 * self.corner_radius > COINCIDENT).then_some(line)
    }

    /// The rounding of corner `i`, counter-clockwise; `None` for sharp corners.
    pub(super) fn rounding(&self, i: usize) -> Option<Arc<View>> {
        if self.corner_radius <= COINCIDENT {
            return None;
        }
        let out = self.side(i).vector().unit()?;
        let r = self.corner_radius;
        let centre = self.corners[i % 4] + out * r + out.left() * r;
        Some(Arc::new(centre, r, out.angle() + 180.0, 90.0))
    }

    pub(super) fn centre(&self) -> Point<View> {
        self.corners[0].middle(self.corners[2])
    }

    /// The middle line along `axis` of the rectangle's own frame, from side to side.
    pub(super) fn middle(&self, axis: Axis) -> Line<View> {
        let first = match axis {
            Axis::X => 3,
            Axis::Y => 0,
        };
        Line::new(self.side(first).at(0.5), self.side(first + 2).at(0.5))
    }

    fn path(&self) -> Path<View> {
        let mut curves = Vec::new();
        for i in 0..4 {
            curves.extend(self.rounding(i).map(Curve::Arc));
            curves.extend(self.straight(i).map(Curve::Line));
        }
        Path { curves, closed: true }
    }

    /// Moved, with corners and axis named anew as the reader sees them.
    fn moved(&self, motion: &Motion) -> Self {
        let mut corners = self.corners.map(|p| motion.point(p));
        if motion.flipped {
            // A mirror image walks clockwise; the lower side stays the first.
            corners = [corners[1], corners[0], corners[3], corners[2]];
        }
        let mut turned = self.turned;
        let level =
            |c: &[Point<View>; 4]| (-45.0 - 1e-9..45.0 - 1e-9).contains(&(c[1] - c[0]).angle());
        for _ in 0..3 {
            if level(&corners) {
                break;
            }
            corners.rotate_left(1);
            turned = turned.map(|axis| match axis {
                Axis::X => Axis::Y,
                Axis::Y => Axis::X,
            });
        }
        Self { corners, corner_radius: self.corner_radius, turned }
    }
}

fn line(from: Point<View>, to: Point<View>) -> Result<Figure, Fault> {
    if from.is_at(to) {
        return Err(Fault::new(format!("the line begins and ends at {}", written(from)))
            .help("give it two different ends"));
    }
    Ok(Figure::Line(Line::new(from, to)))
}

fn arc(centre: Point<View>, radius: f64, start: f64, sweep: f64) -> Result<Figure, Fault> {
    positive("radius", radius)?;
    if sweep.is_nan() || sweep.abs() > 360.0 + 1e-9 {
        return Err(Fault::new(format!(
            "the arc turns by {}°, more than once round",
            number(sweep)
        ))
        .help("a sweep lies between −360° and 360°"));
    }
    let arc = Arc::new(centre, radius, start, sweep.clamp(-360.0, 360.0));
    if arc.is_full() {
        return Ok(Figure::Circle(Arc::circle(centre, radius)));
    }
    if Curve::Arc(arc).length() <= COINCIDENT {
        return Err(Fault::new("the arc has no length").help("give it a sweep other than 0°"));
    }
    Ok(Figure::Arc(arc))
}

fn slot(from: Point<View>, to: Point<View>, width: f64) -> Result<Figure, Fault> {
    positive("width", width)?;
    if from.is_at(to) {
        return Err(Fault::new(format!(
            "both ends of the slot have their centre at {}",
            written(from)
        ))
        .help("give it two different end centres, or draw a circle"));
    }
    Ok(Figure::Slot(Slot { axis: Line::new(from, to), radius: width / 2.0 }))
}

fn rectangle(
    corner: Point<View>,
    size: Vector<View>,
    corner_radius: f64,
    turned: Option<Axis>,
) -> Result<Figure, Fault> {
    let (width, height) = (positive("width", size.x)?, positive("height", size.y)?);
    let most = width.min(height) / 2.0;
    if !(corner_radius >= 0.0 && corner_radius <= most + COINCIDENT) {
        return Err(Fault::new(format!(
            "the corner radius {} does not fit",
            number(corner_radius)
        ))
        .help(format!("it is at most half the shorter side: {}", number(most))));
    }
    let corners = Rect::new(corner, corner + size).corners();
    Ok(Figure::Rectangle(Rectangle { corners, corner_radius: corner_radius.min(most), turned }))
}

fn polygon(points: &[Point<View>], closed: bool) -> Result<Trace, Fault> {
    let mut edges: Vec<Option<Curve<View>>> =
        points.windows(2).map(|pair| piece(pair[0], pair[1])).collect();
    // A last point on the first closes the polygon already.
    if let (true, [first, .., last]) = (closed, points)
        && !first.is_at(*last)
    {
        edges.push(piece(*last, *first));
    }
    let path = Path { curves: edges.iter().flatten().copied().collect(), closed };
    if path.curves.is_empty() {
        return Err(Fault::new("a polygon needs at least two different points"));
    }
    let closed = closed || path.meets_itself();
    let path = Path { closed, ..path };
    Ok(Trace { subpaths: vec![path], vertices: points.to_vec(), edges })
}

fn piece(from: Point<View>, to: Point<View>) -> Option<Curve<View>> {
    (!from.is_at(to)).then(|| Curve::line(from, to))
}

fn positive(what: &str, value: f64) -> Result<f64, Fault> {
    if value > COINCIDENT {
        return Ok(value);
    }
    Err(Fault::new(format!("the {what} {} is not positive", number(value)))
        .help(format!("a {what} is a length greater than 0")))
}

/// A number as messages write it: at most three decimals.
pub(super) fn number(value: f64) -> String {
    let value = if same(value, 0.0) { 0.0 } else { value };
    let text = format!("{value:.3}");
    text.trim_end_matches('0').trim_end_matches('.').to_owned()
}

/// A point as messages write it.
pub(super) fn written(p: Point<View>) -> String {
    format!("({}, {})", number(p.x), number(p.y))
}
