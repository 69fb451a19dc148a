//! Named places of a view, and how a name such as `bolt.3.centre` finds one.
//!
//! A name is the id of a shape, then, after a dot, a place or a size of it. The id of a repeated
//! shape stands for all its members, `bolt.3` for the third. What each kind of shape offers (sides
//! and corners are those that the reader sees in this view, also for mirrored and turned members):
//!
//! | shape | places | sizes |
//! |---|---|---|
//! | line | bare id (edge), `start`, `end`, `middle` | `length` |
//! | arc | bare id or `rim` (round), `centre`, `start`, `end`, `middle` | `radius` |
//! | circle | bare id or `rim` (round), `centre` or `axis`, `left`, `right`, `top`, `bottom` | `diameter`, `radius` |
//! | slot | bare id or `rim` (round end), `centre`, `start`, `end` (centres of the ends), `axis`, `side1`, `side2`, `left`, `right`, `top`, `bottom` | `width`, `length` (overall), `spacing` (of the end centres), `radius` |
//! | rectangle | `left`, `right`, `top`, `bottom` (edges), `centre`, `top-left`, `top-right`, `bottom-left`, `bottom-right` (sharp corners, also where rounded), `rounding` (round), `axis` if turned | `width`, `height`, `corner_radius`; turned: `diameter` (across the axis), `length` (along it) |
//! | polygon, path | `p1`… (points), `e1`… (edges, straight or round), `left`, `right`, `top`, `bottom` (the outermost straight edge, else the outermost point) | `e1.length`, `e1.radius` |
//! | polar group | `pitch` (round) | `pitch_diameter` |
//!
//! A side of a rectangle or slot that is no straight edge is the outermost point there.

use super::edge::{CentreFeature, View};
use super::figure::Figure;
use crate::geom::{Arc, Line, Point, View as ViewSpace};
use crate::ident::ShapeId;
use crate::source::nearest;
use crate::spec::{LineDirection, SizeSign};

/// What an id of a view stands for.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Named {
    /// One shape, or one member of a repeated one.
    Shape(Figure),
    /// A repeated shape.
    Group {
        /// Its members in order.
        members: Vec<ShapeId>,
        /// The circle through their centres, for a polar repeat.
        pitch: Option<Arc<ViewSpace>>,
    },
}

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

impl View {
    /// The place that `name` stands for, for each member of a group.
    ///
    /// # Errors
    /// [`AnchorError`] if no shape has the id, or if the shape has no such place.
    pub fn anchor(&self, name: &str) -> Result<Measured<Anchor>, AnchorError> {
        let asked = self.split(name)?;
        if let (Named::Group { pitch: Some(circle), .. }, "pitch") = (asked.named, asked.rest) {
            return Ok(Measured { members: vec![(asked.id, Anchor::Round(*circle))] });
        }
        self.each(&asked, |figure| Some(self.with_reach(figure, figure.place(asked.rest)?)))
            .ok_or_else(|| asked.no_such("place", &self.places_of(asked.named)))
    }

    /// The size that `name` stands for, for each member of a group.
    ///
    /// # Errors
    /// [`AnchorError`] if no shape has the id, or if the shape has no such size.
    pub fn size(&self, name: &str) -> Result<Measured<Size>, AnchorError> {
        let asked = self.split(name)?;
        if let (Named::Group { pitch: Some(circle), .. }, "pitch_diameter") =
            (asked.named, asked.rest)
        {
            return Ok(Measured { members: vec![(asked.id, Size::Diameter(*circle))] });
        }
        self.each(&asked, |figure| figure.size(asked.rest))
            .ok_or_else(|| asked.no_such("size", &self.sizes_of(asked.named)))
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

    /// The centre of a circle with the reach of the cross that is drawn round it, its own or that of
    /// a larger concentric circle.
    fn with_reach(&self, figure: &Figure, place: Anchor) -> Anchor {
        match (figure, place) {
            (Figure::Circle(_), Anchor::Centre { at, .. }) => {
                Anchor::Centre { at, reach: self.cross_radius(at) }
            }
            _ => place,
        }
    }

    fn cross_radius(&self, at: Point<ViewSpace>) -> f64 {
        let crosses = self.centres.iter().filter_map(|c| match c {
            CentreFeature::Cross { circle, turn, single: false, .. } => Some((circle, turn)),
            CentreFeature::Cross { .. }
            | CentreFeature::Axis { .. }
            | CentreFeature::Pitch { .. } => None,
        });
        crosses
            .filter(|(circle, turn)| circle.centre.is_at(at) && turn.rem_euclid(90.0) < 1e-6)
            .fold(0.0, |reach, (circle, _)| circle.radius.max(reach))
    }

    /// The ids of the view's shapes, groups and members, in order.
    pub fn shape_ids(&self) -> impl Iterator<Item = &ShapeId> {
        self.names.keys()
    }

    /// The longest id that `name` begins with, and what follows it.
    fn split<'a>(&'a self, name: &'a str) -> Result<Asked<'a>, AnchorError> {
        let dots = name.rmatch_indices('.').map(|(i, _)| i);
        for end in std::iter::once(name.len()).chain(dots) {
            if let Some((id, named)) = self.names.get_key_value(&name[..end]) {
                let rest = name.get(end + 1..).unwrap_or("");
                return Ok(Asked { name, id: id.clone(), named, rest });
            }
        }
        Err(self.no_shape(name))
    }

    fn no_shape(&self, name: &str) -> AnchorError {
        let id = name.split_once('.').map_or(name, |(id, _)| id);
        let groups: Vec<&str> = self.group_ids().collect();
        let help = match nearest(id, groups.iter().copied()) {
            Some(near) => format!("did you mean `{near}`?"),
            None => format!("its shapes are {}", listed(&groups)),
        };
        AnchorError { message: format!("view `{}` has no shape `{id}`", self.id), help }
    }

    /// Ids as the spec gives them: groups and single shapes, not members.
    fn group_ids(&self) -> impl Iterator<Item = &str> {
        let members: std::collections::BTreeSet<&ShapeId> = self
            .names
            .values()
            .flat_map(|n| match n {
                Named::Group { members, .. } => members.as_slice(),
                Named::Shape(_) => &[],
            })
            .collect();
        self.names.keys().filter(move |id| !members.contains(id)).map(ShapeId::as_str)
    }

    fn each<T>(
        &self,
        asked: &Asked<'_>,
        find: impl Fn(&Figure) -> Option<T>,
    ) -> Option<Measured<T>> {
        let members = match asked.named {
            Named::Shape(figure) => vec![(asked.id.clone(), find(figure)?)],
            Named::Group { members, .. } => members
                .iter()
                .map(|id| match self.names.get(id) {
                    Some(Named::Shape(figure)) => Some((id.clone(), find(figure)?)),
                    Some(Named::Group { .. }) | None => None,
                })
                .collect::<Option<Vec<_>>>()?,
        };
        Some(Measured { members })
    }

    fn places_of(&self, named: &Named) -> Vec<String> {
        self.offers(named, Figure::place_names, "pitch")
    }

    fn sizes_of(&self, named: &Named) -> Vec<String> {
        self.offers(named, Figure::size_names, "pitch_diameter")
    }

    fn offers(&self, named: &Named, of: fn(&Figure) -> Vec<String>, group: &str) -> Vec<String> {
        match named {
            Named::Shape(figure) => of(figure),
            Named::Group { members, pitch } => {
                let first = members.first().and_then(|id| self.names.get(id));
                let mut names = first.map_or(Vec::new(), |first| self.offers(first, of, group));
                names.extend(pitch.map(|_| group.to_owned()));
                names
            }
        }
    }
}

/// A name, split into what has the id and what is asked of it.
struct Asked<'a> {
    name: &'a str,
    id: ShapeId,
    named: &'a Named,
    rest: &'a str,
}

impl Asked<'_> {
    fn no_such(&self, what: &str, has: &[String]) -> AnchorError {
        let (id, rest) = (&self.id, self.rest);
        if let (Named::Group { members, .. }, Some(number)) = (self.named, leading_number(rest)) {
            let n = members.len();
            return AnchorError {
                message: format!("`{id}` has {n} members; there is no `{id}.{number}`"),
                help: format!("they are `{id}.1` to `{id}.{n}`; `{id}` alone means all of them"),
            };
        }
        let message = match rest {
            "" => format!("`{}` alone is no {what}", self.name),
            _ => format!("`{id}` has no {what} `{rest}`"),
        };
        let near = nearest(rest, has.iter().map(String::as_str));
        let help = match near {
            Some(near) => format!("did you mean `{id}.{near}`?"),
            None if has.is_empty() => format!("it has no {what}s"),
            None => format!("its {what}s are {}", listed(has)),
        };
        AnchorError { message, help }
    }
}

fn leading_number(rest: &str) -> Option<u64> {
    rest.split('.').next()?.parse().ok()
}

/// Most names that a message lists.
const MOST_LISTED: usize = 12;

fn listed<T: AsRef<str>>(names: &[T]) -> String {
    let shown: Vec<String> =
        names.iter().take(MOST_LISTED).map(|n| format!("`{}`", n.as_ref())).collect();
    let more = if names.len() > MOST_LISTED { ", …" } else { "" };
    format!("{}{more}", shown.join(", "))
}

#[cfg(test)]
mod tests {
    use super::super::sample::*;
    use super::*;
    use crate::geom::Vector;
    use crate::spec::{Axis, Outline, Repeat, Shape};

    fn plate() -> View {
        let rounded = Outline::Rectangle {
            corner: p(-60.0, -40.0),
            size: Vector::new(120.0, 80.0),
            corner_radius: 10.0,
            turned: None,
        };
        let slot = Outline::Slot { from: p(-20.0, 30.0), to: p(20.0, 30.0), width: 8.0 };
        view(vec![
            shape("plate", rounded),
            circle("rim", 0.0, 0.0, 50.0),
            polar(circle("bolt", 20.0, 0.0, 6.0), 4),
            shape("slot", slot),
            path("tab", "M 60 0 L 80 0 A 10 10 0 0 1 80 20 L 60 20 Z"),
            turned("shaft", 100.0, -10.0, 40.0, 20.0),
            line("keel", (0.0, -50.0), (30.0, -90.0)),
        ])
    }

    fn one<T: Clone>(found: Result<Measured<T>, AnchorError>) -> T {
        let found = found.expect("a name that exists");
        assert_eq!(found.members.len(), 1);
        found.members[0].1.clone()
    }

    fn length(from: Anchor, to: Anchor) -> f64 {
        let at = |a: Anchor| match a {
            Anchor::Point(at) | Anchor::Centre { at, .. } => at,
            Anchor::Edge(l) | Anchor::Axis(l) => l.at(0.5),
            Anchor::Round(a) => a.centre,
        };
        at(from).distance(at(to))
    }

    #[test]
    fn places_lie_where_the_table_says() {
        let v = plate();
        let expected = [
            ("rim.left", (-25.0, 0.0)),
            ("rim.centre", (0.0, 0.0)),
            ("plate.top-right", (60.0, 40.0)),
            ("plate.centre", (0.0, 0.0)),
            ("bolt.2.centre", (0.0, 20.0)),
            ("tab.p3", (80.0, 20.0)),
            ("tab.right", (90.0, 10.0)),
            ("slot.right", (24.0, 30.0)),
            ("slot.start", (-20.0, 30.0)),
            ("keel.middle", (15.0, -70.0)),
        ];
        for (name, (x, y)) in expected {
            let at = match one(v.anchor(name)) {
                Anchor::Point(at) | Anchor::Centre { at, .. } => at,
                other => panic!("{name}: {other:?}"),
            };
            assert!(at.distance(p(x, y)) < 1e-9, "{name}: {at:?}");
        }
    }

    #[test]
    fn sides_are_edges_where_they_are_straight() {
        let v = plate();
        let edge = |name: &str| match one(v.anchor(name)) {
            Anchor::Edge(l) | Anchor::Axis(l) => l,
            other => panic!("{name}: {other:?}"),
        };
        assert!((edge("plate.left").length() - 60.0).abs() < 1e-9);
        assert!((edge("slot.top").at(0.5).y - 34.0).abs() < 1e-9);
        assert!((edge("tab.left").length() - 20.0).abs() < 1e-9);
        assert!((edge("keel").length() - 50.0).abs() < 1e-9);
        assert!((edge("shaft.axis").length() - 40.0).abs() < 1e-9);
        assert!(matches!(one(v.anchor("rim")), Anchor::Round(a) if a.radius == 25.0));
        assert!(matches!(one(v.anchor("tab.e2")), Anchor::Round(a) if a.radius == 10.0));
    }

    #[test]
    fn a_group_answers_for_all_its_members() {
        let v = plate();
        let all = v.anchor("bolt.centre").expect("four of them");
        let ids: Vec<&str> = all.members.iter().map(|(id, _)| id.as_str()).collect();
        assert_eq!(ids, ["bolt.1", "bolt.2", "bolt.3", "bolt.4"]);
        assert_eq!(v.size("bolt.diameter").expect("equal holes").members.len(), 4);
        assert!(matches!(one(v.anchor("bolt.pitch")), Anchor::Round(a) if a.radius == 20.0));
        assert!(
            matches!(one(v.size("bolt.pitch_diameter")), Size::Diameter(a) if a.radius == 20.0)
        );
    }

    #[test]
    fn sizes_measure_what_they_say() {
        let v = plate();
        let measured = |name: &str| match one(v.size(name)) {
            Size::Diameter(a) => 2.0 * a.radius,
            Size::Radius(a) => a.radius,
            Size::Distance { from, to, .. } => length(from, to),
        };
        let expected = [
            ("rim.diameter", 50.0),
            ("rim.radius", 25.0),
            ("plate.width", 120.0),
            ("plate.height", 80.0),
            ("plate.corner_radius", 10.0),
            ("slot.width", 8.0),
            ("slot.length", 48.0),
            ("slot.spacing", 40.0),
            ("shaft.diameter", 20.0),
            ("shaft.length", 40.0),
            ("keel.length", 50.0),
            ("tab.e1.length", 20.0),
            ("tab.e2.radius", 10.0),
        ];
        for (name, value) in expected {
            assert!((measured(name) - value).abs() < 1e-9, "{name}: {}", measured(name));
        }
        let Size::Distance { sign, direction, .. } = one(v.size("shaft.diameter")) else {
            panic!()
        };
        assert_eq!((sign, direction), (Some(SizeSign::Diameter), LineDirection::Vertical));
    }

    #[test]
    fn a_wrong_name_gets_a_way_out() {
        let v = plate();
        let error = |name: &str| v.anchor(name).expect_err("no such place");
        assert_eq!(error("plat.left").message, "view `front` has no shape `plat`");
        assert_eq!(error("plat.left").help, "did you mean `plate`?");
        assert_eq!(error("plate.lefft").help, "did you mean `plate.left`?");
        assert_eq!(error("bolt.9.centre").message, "`bolt` has 4 members; there is no `bolt.9`");
        assert_eq!(error("plate").message, "`plate` alone is no place");
        assert!(error("keel.rim").help.contains("`start`, `end`, `middle`"));
        assert!(error("").message.contains("no shape"));
        let size = v.size("keel.diameter").expect_err("a line has none");
        assert_eq!(size.help, "its sizes are `length`");
    }

    #[test]
    fn sides_of_members_are_those_that_the_reader_sees() {
        let wide = || rectangle("bar", 10.0, -2.0, 30.0, 4.0);
        let v = view(vec![
            polar(wide(), 4),
            Shape {
                id: ShapeId::new("ear"),
                repeat: Some(Repeat::Mirror { axis: Axis::Y, at: -100.0 }),
                ..wide()
            },
        ]);
        for name in ["bar.1", "bar.2", "bar.3", "bar.4", "ear.1", "ear.2"] {
            let side = |side: &str| match one(v.anchor(&format!("{name}.{side}"))) {
                Anchor::Edge(l) => l.at(0.5),
                other => panic!("{other:?}"),
            };
            assert!(side("left").x < side("right").x && side("bottom").y < side("top").y, "{name}");
            assert!((side("left").y - side("right").y).abs() < 1e-9, "{name}");
        }
        let height = |name: &str| match one(v.size(name)) {
            Size::Distance { from, to, .. } => length(from, to),
            other => panic!("{other:?}"),
        };
        assert_eq!((height("bar.1.height"), height("bar.2.height")), (4.0, 30.0));
    }
}
