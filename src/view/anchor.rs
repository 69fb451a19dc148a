//! Named places and sizes of a view.
//!
//! A name is a shape's id, for a member of a repeat its number, and a place: `bolt.1.centre`. The id
//! of a repeat alone names all members.
//!
//! | shape | places | sizes |
//! | --- | --- | --- |
//! | line | (itself), `start`, `end`, `middle` | `length` |
//! | arc | `rim` or (itself), `centre`, `start`, `end`, `middle` | `radius` |
//! | circle | `rim` or (itself), `centre` or `axis`, `left`, `right`, `top`, `bottom` | `diameter`, `radius` |
//! | slot | `centre`, `start`, `end`, `axis`, `left`, `right`, `top`, `bottom` | `width`, `length`, `spacing` |
//! | rectangle | `left`, `right`, `top`, `bottom`, `centre`, `top-left` … `bottom-right`; turned: `axis` | `width`, `height`, `corner_radius`; turned: `diameter`, `length` |
//! | polygon, path | `p1` …, `e1` …, `left`, `right`, `top`, `bottom` | `e1.length`, `e1.radius` |
//! | polar repeat | `pitch` | `pitch_diameter` |

use std::collections::BTreeMap;

use super::body::Body;
use super::edge::{CentreFeature, View};
use crate::geom::{Arc, Curve, Line, Point, Rect, View as ViewSpace};
use crate::ident::ShapeId;
use crate::source::nearest;
use crate::spec::{LineDirection, SizeSign};

/// A place that an annotation can hold on to, in view space.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Anchor {
    /// A corner, an end, a middle, a quadrant.
    Point(Point<ViewSpace>),
    /// The centre of something round.
    Centre {
        /// The centre.
        at: Point<ViewSpace>,
        /// Radius of what its level and upright centre lines go round; 0 where it has none.
        reach: f64,
    },
    /// A straight edge.
    Edge(Line<ViewSpace>),
    /// A centre line over the length of its feature.
    Axis(Line<ViewSpace>),
    /// A round edge.
    Round(Arc<ViewSpace>),
}

/// A size that a shape names.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Size {
    /// Diameter of a whole circle seen round.
    Diameter(Arc<ViewSpace>),
    /// Radius of an arc.
    Radius(Arc<ViewSpace>),
    /// Distance of two anchors.
    Distance {
        /// From.
        from: Anchor,
        /// To.
        to: Anchor,
        /// Measured so.
        direction: LineDirection,
        /// Sign that the shape implies: ⌀ across a turned body.
        sign: Option<SizeSign>,
    },
}

/// A size or place, and how many equal members of a group it stands for.
#[derive(Clone, Debug, PartialEq)]
pub struct Measured<T> {
    /// The size or place for each member of the group, in order; one for a single shape.
    pub members: Vec<(ShapeId, T)>,
}

/// Why a name is no anchor.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("{message}")]
pub struct AnchorError {
    /// What is wrong.
    pub message: String,
    /// A way out.
    pub help: String,
}

/// A shape of a view, by its id.
#[derive(Clone, Debug)]
pub(super) struct Named {
    /// Its members; one for a shape that is not repeated.
    pub members: Vec<(ShapeId, Body)>,
    /// Whether its members have numbers.
    pub repeated: bool,
    /// The circle through the centres of a polar repeat.
    pub pitch: Option<Arc<ViewSpace>>,
}

impl View {
    /// The place that `name` stands for, once for each member that it names.
    ///
    /// # Errors
    /// [`AnchorError`] if there is no such shape, or the shape has no such place.
    pub fn anchor(&self, name: &str) -> Result<Measured<Anchor>, AnchorError> {
        let asked = self.find(name)?;
        if asked.place == "pitch"
            && let Some(circle) = asked.named.pitch
        {
            let (id, _) = &asked.members[0];
            return Ok(Measured { members: vec![(id.clone(), Anchor::Round(circle))] });
        }
        asked.each(|body| {
            let found = place(body, asked.place)?;
            Some(match (found, body) {
                (Anchor::Centre { at, .. }, Body::Circle(_)) => {
                    Anchor::Centre { at, reach: self.cross_radius(at) }
                }
                _ => found,
            })
        })
    }

    /// The size that `name` stands for, once for each member that it names.
    ///
    /// # Errors
    /// [`AnchorError`] if there is no such shape, or the shape has no such size.
    pub fn size(&self, name: &str) -> Result<Measured<Size>, AnchorError> {
        let asked = self.find(name)?;
        if asked.place == "pitch_diameter"
            && let Some(circle) = asked.named.pitch
        {
            let (id, _) = &asked.members[0];
            return Ok(Measured { members: vec![(id.clone(), Size::Diameter(circle))] });
        }
        asked.each(|body| size(body, asked.place))
    }

    /// Whether the longest axis of a turned body stands upright.
    #[must_use]
    pub fn has_upright_axis(&self) -> bool {
        let axes = self.centres.iter().filter_map(|c| match c {
            CentreFeature::Axis { line, .. } => Some(line),
            CentreFeature::Cross { .. } | CentreFeature::Pitch { .. } => None,
        });
        let longest = axes.max_by(|a, b| a.length().total_cmp(&b.length()));
        longest.is_some_and(|l| l.vector().y.abs() > l.vector().x.abs())
    }

    /// Radius of the largest circle about a centre that has a level and upright cross; 0 if none
    /// has, as on a pitch circle, whose holes have radial strokes.
    fn cross_radius(&self, at: Point<ViewSpace>) -> f64 {
        self.centres
            .iter()
            .filter_map(|c| match c {
                CentreFeature::Cross { circle, turn, single: false, .. }
                    if circle.centre.is_at(at) && turn.rem_euclid(90.0) < 1e-6 =>
                {
                    Some(circle.radius)
                }
                CentreFeature::Cross { .. }
                | CentreFeature::Axis { .. }
                | CentreFeature::Pitch { .. } => None,
            })
            .fold(0.0, f64::max)
    }

    /// The shape and the members that a name begins with, and what follows.
    fn find<'a>(&'a self, name: &'a str) -> Result<Asked<'a>, AnchorError> {
        let (id, rest) = name.split_once('.').unwrap_or((name, ""));
        let Some(named) = self.names.get(id) else {
            return Err(self.unknown_shape(id));
        };
        let (first, after) = rest.split_once('.').unwrap_or((rest, ""));
        let (members, place) = match first.parse::<usize>() {
            Ok(number) if named.repeated => {
                let count = named.members.len();
                let member = number.checked_sub(1).and_then(|i| named.members.get(i));
                let member = member.ok_or_else(|| AnchorError {
                    message: format!("`{id}` has no member {number}"),
                    help: format!("its members are {id}.1 to {id}.{count}"),
                })?;
                (std::slice::from_ref(member), after)
            }
            _ => (named.members.as_slice(), rest),
        };
        Ok(Asked { id, named, members, place, name })
    }

    fn unknown_shape(&self, id: &str) -> AnchorError {
        let ids: Vec<&str> = self.names.keys().map(ShapeId::as_str).collect();
        let help = match nearest(id, ids.iter().copied()) {
            Some(near) => format!("did you mean `{near}`?"),
            None if ids.len() <= 12 => format!("its shapes are {}", ids.join(", ")),
            None => format!("it has {} shapes; give this one its id", ids.len()),
        };
        AnchorError { message: format!("view `{}` has no shape `{id}`", self.id), help }
    }
}

/// A name, taken apart.
struct Asked<'a> {
    id: &'a str,
    named: &'a Named,
    members: &'a [(ShapeId, Body)],
    place: &'a str,
    name: &'a str,
}

impl Asked<'_> {
    fn each<T>(&self, read: impl Fn(&Body) -> Option<T>) -> Result<Measured<T>, AnchorError> {
        let members: Option<Vec<(ShapeId, T)>> =
            self.members.iter().map(|(id, body)| Some((id.clone(), read(body)?))).collect();
        members.map(|members| Measured { members }).ok_or_else(|| self.unknown_place())
    }

    fn unknown_place(&self) -> AnchorError {
        let mut all = self.members.first().map_or_else(Vec::new, |(_, b)| vocabulary(b));
        if self.named.pitch.is_some() {
            all.extend(["pitch", "pitch_diameter"].map(str::to_owned));
        }
        let words: Vec<&str> = all.iter().map(String::as_str).collect();
        let help = match nearest(self.place, words.iter().copied()) {
            Some(near) => format!("did you mean `{}.{near}`?", self.id),
            None => format!("`{}` has {}", self.id, words.join(", ")),
        };
        let message = if self.place.is_empty() {
            format!("`{}` is a whole shape here; name a place or a size of it", self.name)
        } else {
            format!("`{}` has no place or size `{}`", self.id, self.place)
        };
        AnchorError { message, help }
    }
}

fn place(body: &Body, name: &str) -> Option<Anchor> {
    match body {
        Body::Line(l) => line_place(l, name),
        Body::Arc(a) => arc_place(a, name),
        Body::Circle(a) => match name {
            "" | "rim" => Some(Anchor::Round(*a)),
            "centre" | "axis" => Some(Anchor::Centre { at: a.centre, reach: a.radius }),
            side => Some(Anchor::Point(a.towards(quadrant(side)?))),
        },
        Body::Slot { from, to } => match name {
            "centre" => Some(Anchor::Point(from.centre.middle(to.centre))),
            "start" => Some(Anchor::Centre { at: from.centre, reach: from.radius }),
            "end" => Some(Anchor::Centre { at: to.centre, reach: to.radius }),
            "axis" => slot_axis(from, to).map(Anchor::Axis),
            side => extreme(&body.curves(), side),
        },
        Body::Rectangle { corners, axis, radius } => rectangle_place(corners, *radius, *axis, name),
        Body::Outline(_) => outline_place(&body.curves(), name),
    }
}

fn line_place(l: &Line<ViewSpace>, name: &str) -> Option<Anchor> {
    match name {
        "" => Some(Anchor::Edge(*l)),
        "start" => Some(Anchor::Point(l.from)),
        "end" => Some(Anchor::Point(l.to)),
        "middle" => Some(Anchor::Point(l.at(0.5))),
        _ => None,
    }
}

fn arc_place(a: &Arc<ViewSpace>, name: &str) -> Option<Anchor> {
    match name {
        "" | "rim" => Some(Anchor::Round(*a)),
        "centre" => Some(Anchor::Point(a.centre)),
        "start" => Some(Anchor::Point(a.towards(a.start))),
        "end" => Some(Anchor::Point(a.towards(a.start + a.sweep))),
        "middle" => Some(Anchor::Point(a.towards(a.middle()))),
        _ => None,
    }
}

fn rectangle_place(
    corners: &[Point<ViewSpace>; 4],
    radius: f64,
    axis: Option<Line<ViewSpace>>,
    name: &str,
) -> Option<Anchor> {
    let centre = corners[0].middle(corners[2]);
    match name {
        "centre" => return Some(Anchor::Point(centre)),
        "axis" => return axis.map(Anchor::Axis),
        _ => {}
    }
    if let Some((vertical, horizontal)) = name.split_once('-') {
        let up = side_sign(vertical, "top", "bottom")?;
        let right = side_sign(horizontal, "right", "left")?;
        let value = |p: &Point<ViewSpace>| p.x * right + p.y * up;
        let corner = corners.iter().max_by(|a, b| value(a).total_cmp(&value(b)));
        return corner.map(|p| Anchor::Point(*p));
    }
    let degrees = quadrant(name)?;
    let towards = crate::geom::Vector::<ViewSpace>::at_angle(degrees);
    let value = |l: &Line<ViewSpace>| (l.at(0.5) - centre).dot(towards);
    let side = Body::sides(corners).into_iter().max_by(|a, b| value(a).total_cmp(&value(b)));
    // Extension lines begin where the straight part ends, not at a corner that is not there.
    side.map(|l| Anchor::Edge(Body::straight(&l, radius)))
}

fn outline_place(curves: &[Curve<ViewSpace>], name: &str) -> Option<Anchor> {
    if let Some(n) = numbered(name, 'p') {
        return vertices(curves).get(n).map(|p| Anchor::Point(*p));
    }
    if let Some(n) = name.split('.').next().and_then(|first| numbered(first, 'e')) {
        let rest = name.split_once('.').map_or("", |(_, r)| r);
        return match curves.get(n)? {
            Curve::Line(l) => line_place(l, rest),
            Curve::Arc(a) => arc_place(a, rest),
            Curve::Ellipse(_) | Curve::Cubic(_) => None,
        };
    }
    extreme(curves, name)
}

/// The extreme straight edge in a direction if the extreme is an edge, else the extreme point.
fn extreme(curves: &[Curve<ViewSpace>], side: &str) -> Option<Anchor> {
    let towards = crate::geom::Vector::<ViewSpace>::at_angle(quadrant(side)?);
    let value = |p: Point<ViewSpace>| p.x * towards.x + p.y * towards.y;
    let bounds = Rect::union_of(curves.iter().map(Curve::bounds))?;
    let limit = bounds.corners().map(value).into_iter().fold(f64::NEG_INFINITY, f64::max);
    let on_limit = |p: Point<ViewSpace>| (value(p) - limit).abs() <= crate::geom::COINCIDENT;
    let edge = curves.iter().find_map(|c| match c {
        Curve::Line(l) if on_limit(l.from) && on_limit(l.to) => Some(Anchor::Edge(*l)),
        _ => None,
    });
    edge.or_else(|| {
        curves.iter().find_map(|c| match c {
            Curve::Arc(a) => {
                let p = a.towards(quadrant(side)?);
                (a.covers(quadrant(side)?) && on_limit(p)).then_some(Anchor::Point(p))
            }
            other => {
                let ends = [other.start(), other.end()];
                ends.into_iter().find(|p| on_limit(*p)).map(Anchor::Point)
            }
        })
    })
}

fn size(body: &Body, name: &str) -> Option<Size> {
    let between =
        |from, to| Size::Distance { from, to, direction: LineDirection::Auto, sign: None };
    match body {
        Body::Line(l) => (name == "length").then(|| ends(l)),
        Body::Arc(a) => (name == "radius").then_some(Size::Radius(*a)),
        Body::Circle(a) => match name {
            "diameter" => Some(Size::Diameter(*a)),
            "radius" => Some(Size::Radius(*a)),
            _ => None,
        },
        Body::Slot { from, to } => {
            let curves = body.curves();
            let edge = |i: usize| match curves.get(i) {
                Some(Curve::Line(l)) => Some(Anchor::Edge(*l)),
                _ => None,
            };
            match name {
                "width" => Some(between(edge(0)?, edge(2)?)),
                "spacing" => Some(ends(&Line::new(from.centre, to.centre))),
                "length" => slot_axis(from, to).map(|l| ends(&l)),
                _ => None,
            }
        }
        Body::Rectangle { corners, radius, axis } => {
            let side = |name| rectangle_place(corners, *radius, *axis, name);
            let level = axis.map(|l| l.vector().x.abs() >= l.vector().y.abs());
            match (name, level) {
                ("width", _) | ("length", Some(true)) | ("diameter", Some(false)) => {
                    Some(signed(between(side("left")?, side("right")?), name))
                }
                ("height", _) | ("length", Some(false)) | ("diameter", Some(true)) => {
                    Some(signed(between(side("bottom")?, side("top")?), name))
                }
                ("corner_radius", _) if *radius > 0.0 => {
                    body.curves().into_iter().find_map(|c| match c {
                        Curve::Arc(a) => Some(Size::Radius(a)),
                        Curve::Line(_) | Curve::Ellipse(_) | Curve::Cubic(_) => None,
                    })
                }
                _ => None,
            }
        }
        Body::Outline(_) => outline_size(&body.curves(), name),
    }
}

/// A distance across a turned body is a diameter.
fn signed(size: Size, name: &str) -> Size {
    match size {
        Size::Distance { from, to, direction, .. } if name == "diameter" => {
            Size::Distance { from, to, direction, sign: Some(SizeSign::Diameter) }
        }
        other => other,
    }
}

fn outline_size(curves: &[Curve<ViewSpace>], name: &str) -> Option<Size> {
    let (edge, what) = name.split_once('.')?;
    match (curves.get(numbered(edge, 'e')?)?, what) {
        (Curve::Line(l), "length") => Some(ends(l)),
        (Curve::Arc(a), "radius") => Some(Size::Radius(*a)),
        (Curve::Arc(a), "diameter") if a.is_full() => Some(Size::Diameter(*a)),
        _ => None,
    }
}

fn ends(l: &Line<ViewSpace>) -> Size {
    Size::Distance {
        from: Anchor::Point(l.from),
        to: Anchor::Point(l.to),
        direction: LineDirection::Aligned,
        sign: None,
    }
}

fn slot_axis(from: &Arc<ViewSpace>, to: &Arc<ViewSpace>) -> Option<Line<ViewSpace>> {
    let u = (to.centre - from.centre).unit()?;
    Some(Line::new(from.centre - u * from.radius, to.centre + u * to.radius))
}

/// Places between which the curves run, each once.
fn vertices(curves: &[Curve<ViewSpace>]) -> Vec<Point<ViewSpace>> {
    let mut points: Vec<Point<ViewSpace>> = Vec::new();
    for c in curves {
        for p in [c.start(), c.end()] {
            let first_of_loop = points.first().is_some_and(|f| f.is_at(p)) && points.len() > 1;
            if points.last().is_none_or(|l| !l.is_at(p)) && !first_of_loop {
                points.push(p);
            }
        }
    }
    points
}

/// The place in a list that `p3` or `e3` names, counted from 1.
fn numbered(name: &str, letter: char) -> Option<usize> {
    name.strip_prefix(letter)?.parse::<usize>().ok()?.checked_sub(1)
}

fn quadrant(side: &str) -> Option<f64> {
    match side {
        "right" => Some(0.0),
        "top" => Some(90.0),
        "left" => Some(180.0),
        "bottom" => Some(270.0),
        _ => None,
    }
}

fn side_sign(name: &str, positive: &str, negative: &str) -> Option<f64> {
    if name == positive { Some(1.0) } else { (name == negative).then_some(-1.0) }
}

/// The places and sizes that a member has, for messages.
fn vocabulary(body: &Body) -> Vec<String> {
    let sides = ["left", "right", "top", "bottom"];
    let words: Vec<&str> = match body {
        Body::Line(_) => vec!["start", "end", "middle", "length"],
        Body::Arc(_) => vec!["rim", "centre", "start", "end", "middle", "radius"],
        Body::Circle(_) => {
            [vec!["rim", "centre", "axis"], sides.to_vec(), vec!["diameter", "radius"]].concat()
        }
        Body::Slot { .. } => [
            vec!["centre", "start", "end", "axis"],
            sides.to_vec(),
            vec!["width", "length", "spacing"],
        ]
        .concat(),
        Body::Rectangle { radius, axis, .. } => {
            let mut all = sides.to_vec();
            all.extend(["centre", "top-left", "top-right", "bottom-left", "bottom-right"]);
            all.extend(["width", "height"]);
            if *radius > 0.0 {
                all.push("corner_radius");
            }
            if axis.is_some() {
                all.extend(["axis", "diameter", "length"]);
            }
            all
        }
        Body::Outline(_) => {
            let curves = body.curves();
            let edges = (1..=curves.len()).map(|i| format!("e{i}"));
            let points = (1..=vertices(&curves).len()).map(|i| format!("p{i}"));
            let sides = sides.map(str::to_owned);
            return edges.chain(points).chain(sides).collect();
        }
    };
    words.into_iter().map(str::to_owned).collect()
}

/// The shapes of a view by their ids.
pub(super) type Names = BTreeMap<ShapeId, Named>;
