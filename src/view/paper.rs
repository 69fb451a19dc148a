//! A view drawn at a scale: dashes, overshoots and hatching, which are sizes of paper.

use super::dash::{Pattern, Tip};
use super::edge::{CentreFeature, View};
use super::hatch;
use crate::geom::{
    Crossing, Curve, Line, Paper, Path, Placement, Rect, Vector, View as ViewSpace, line_crossing,
};
use crate::ident::ShapeId;
use crate::spec::LineClass;
use crate::style::{Group, Style};
use crate::units::Scale;

/// A view around its origin, in mm of paper, y down.
#[derive(Clone, Debug)]
pub struct PaperView {
    /// Its edges.
    pub edges: Vec<PaperEdge>,
    /// Its centre lines.
    pub centres: Vec<PaperCentre>,
    /// Its hatching.
    pub hatch: Vec<PaperHatch>,
    /// Box around visible, hidden and cut edges.
    pub outline: Rect<Paper>,
    /// How view space lies on paper.
    pub placement: Placement,
}

/// An edge on paper.
#[derive(Clone, Debug)]
pub struct PaperEdge {
    /// Its class.
    pub class: LineClass,
    /// The shapes that make it.
    pub shapes: Vec<ShapeId>,
    /// The whole edge.
    pub curve: Curve<Paper>,
    /// What is drawn of it.
    pub dashes: Vec<Curve<Paper>>,
    /// Line width.
    pub width: f64,
}

/// The centre lines of one feature.
#[derive(Clone, Debug)]
pub struct PaperCentre {
    /// The feature.
    pub shape: ShapeId,
    /// The whole lines.
    pub lines: Vec<Curve<Paper>>,
    /// What is drawn of them.
    pub dashes: Vec<Curve<Paper>>,
    /// Line width.
    pub width: f64,
}

/// The hatching of one cut face.
#[derive(Clone, Debug)]
pub struct PaperHatch {
    /// The face.
    pub shape: ShapeId,
    /// Its hatch lines.
    pub lines: Vec<Line<Paper>>,
    /// Its closed outlines.
    pub outlines: Vec<Path<Paper>>,
    /// Line width.
    pub width: f64,
    /// Direction of the lines, degrees.
    pub angle: f64,
}

/// The view at `scale`, with what the style and its group fix on paper.
#[must_use]
pub fn on_paper(view: &View, scale: Scale, style: &Style, group: &Group) -> PaperView {
    let placement = Placement::new(scale);
    let table = Table { placement, style, group };
    let axes = table.axes(view);
    let edges = view
        .edges
        .iter()
        .filter(|e| e.class != LineClass::Centre)
        .map(|e| {
            let curve = placement.curve(&e.curve);
            let width = table.width(e.class);
            let dashes = table.dashed(&curve, e.class);
            PaperEdge { class: e.class, shapes: e.shapes.clone(), curve, dashes, width }
        })
        .collect();
    let mut centres: Vec<PaperCentre> = Vec::new();
    for feature in &view.centres {
        match feature {
            CentreFeature::Cross { shape, circle, turn, single } => {
                centres.push(table.cross(shape, circle, *turn, *single));
            }
            CentreFeature::Pitch { shape, circle } => centres.push(table.pitch(shape, circle)),
            CentreFeature::Axis { .. } => {}
        }
    }
    centres.extend(table.axis_lines(&axes, &centres));
    PaperView {
        edges,
        centres,
        hatch: table.hatching(view),
        outline: placement.rect(&view.bounds),
        placement,
    }
}

struct Table<'a> {
    placement: Placement,
    style: &'a Style,
    group: &'a Group,
}

impl Table<'_> {
    fn width(&self, class: LineClass) -> f64 {
        match class {
            LineClass::Visible | LineClass::Cut => self.group.wide,
            LineClass::Hidden
            | LineClass::Smooth
            | LineClass::Centre
            | LineClass::Adjacent
            | LineClass::Construction
            | LineClass::Break => self.group.narrow,
        }
    }

    fn centre_pattern(&self) -> Pattern {
        Pattern::new(&self.style.dash.centre, self.group.narrow, true)
    }

    /// What is drawn of an edge.
    fn dashed(&self, curve: &Curve<Paper>, class: LineClass) -> Vec<Curve<Paper>> {
        let dash = &self.style.dash;
        let pattern = match class {
            LineClass::Hidden => Pattern::new(&dash.hidden, self.group.narrow, false),
            LineClass::Adjacent => Pattern::new(&dash.adjacent, self.group.narrow, true),
            LineClass::Centre => self.centre_pattern(),
            LineClass::Visible
            | LineClass::Cut
            | LineClass::Smooth
            | LineClass::Construction
            | LineClass::Break => return vec![*curve],
        };
        match curve {
            Curve::Arc(a) if a.is_full() => circle_dashes(a, &pattern, 4),
            Curve::Line(_) | Curve::Arc(_) | Curve::Ellipse(_) | Curve::Cubic(_) => {
                pieces(curve, &pattern.fit(curve.length(), [Tip::Free, Tip::Free]))
            }
        }
    }

    /// The cross of a circle: two lines whose dashes cross in the centre, or one of them.
    fn cross(
        &self,
        shape: &ShapeId,
        circle: &crate::geom::Arc<ViewSpace>,
        turn: f64,
        single: bool,
    ) -> PaperCentre {
        let radius = self.placement.length(circle.radius);
        let reach = radius + self.style.centre.overshoot;
        let centre = self.placement.point(circle.centre);
        let directions = if single { vec![turn] } else { vec![turn, turn + 90.0] };
        let lines: Vec<Line<Paper>> = directions
            .into_iter()
            .map(|d| {
                let out = Vector::<Paper>::at_angle(d) * reach;
                Line::new(centre - out, centre + out)
            })
            .collect();
        let small = 2.0 * radius < self.style.centre.small_circle;
        let dashes = lines
            .iter()
            .flat_map(|l| if small { vec![Curve::Line(*l)] } else { self.split_dashes(l, &[0.5]) })
            .collect();
        let lines = lines.into_iter().map(Curve::Line).collect();
        PaperCentre { shape: shape.clone(), lines, dashes, width: self.group.narrow }
    }

    /// The circle through the centres of a group, a dash on each of its members.
    fn pitch(&self, shape: &ShapeId, circle: &crate::geom::Arc<ViewSpace>) -> PaperCentre {
        let arc = crate::geom::Arc::new(
            self.placement.point(circle.centre),
            self.placement.length(circle.radius),
            circle.start,
            circle.sweep,
        );
        // A multiple of 12 puts dashes on 3, 4, 6 and 12 equally spaced holes and on the axes.
        let pattern = self.centre_pattern();
        let dashes = circle_dashes(&arc, &pattern, 12);
        PaperCentre {
            shape: shape.clone(),
            lines: vec![Curve::Arc(arc)],
            dashes,
            width: self.group.narrow,
        }
    }

    /// Axes of features, drawn past both ends, and centre lines drawn in the spec, as they are.
    fn axes(&self, view: &View) -> Vec<(ShapeId, Curve<Paper>)> {
        let overshoot = self.style.centre.overshoot;
        let of_features = view.centres.iter().filter_map(|c| match c {
            CentreFeature::Axis { shape, line } => {
                let (a, b) = (self.placement.point(line.from), self.placement.point(line.to));
                let past = (b - a).unit()? * overshoot;
                Some((shape.clone(), Curve::line(a - past, b + past)))
            }
            CentreFeature::Cross { .. } | CentreFeature::Pitch { .. } => None,
        });
        let drawn = view.edges.iter().filter(|e| e.class == LineClass::Centre).map(|e| {
            let shape = e.shapes.first().cloned().unwrap_or_else(|| ShapeId::new("centre"));
            (shape, self.placement.curve(&e.curve))
        });
        of_features.chain(drawn).collect()
    }

    /// Axes fitted so that they cross other centre lines in dashes where there is room for it.
    fn axis_lines(
        &self,
        axes: &[(ShapeId, Curve<Paper>)],
        others: &[PaperCentre],
    ) -> Vec<PaperCentre> {
        let all: Vec<Line<Paper>> = axes
            .iter()
            .map(|(_, c)| c)
            .chain(others.iter().flat_map(|c| &c.lines))
            .filter_map(|c| match c {
                Curve::Line(l) => Some(*l),
                Curve::Arc(_) | Curve::Ellipse(_) | Curve::Cubic(_) => None,
            })
            .collect();
        axes.iter()
            .map(|(shape, curve)| {
                let dashes = match curve {
                    Curve::Line(l) => self.split_dashes(l, &crossing_places(l, &all)),
                    Curve::Arc(_) | Curve::Ellipse(_) | Curve::Cubic(_) => {
                        self.dashed(curve, LineClass::Centre)
                    }
                };
                PaperCentre {
                    shape: shape.clone(),
                    lines: vec![*curve],
                    dashes,
                    width: self.group.narrow,
                }
            })
            .collect()
    }

    /// Dashes of a line that crosses others at these shares of its length. A crossing too near to
    /// the one before, or to an end, for a dash and a gap is not waited for.
    fn split_dashes(&self, line: &Line<Paper>, crossings: &[f64]) -> Vec<Curve<Paper>> {
        let pattern = self.centre_pattern();
        let length = line.length();
        let room = self.style.dash.centre.dash * self.group.narrow;
        let mut stops = vec![(0.0, Tip::Free)];
        for t in crossings {
            let last = stops.last().map_or(0.0, |s: &(f64, Tip)| s.0);
            if (t - last) * length >= room && (1.0 - t) * length >= room {
                stops.push((*t, Tip::Crossing));
            }
        }
        stops.push((1.0, Tip::Free));
        let mut ink: Vec<(f64, f64)> = Vec::new();
        for pair in stops.windows(2) {
            let ((t0, a), (t1, b)) = (pair[0], pair[1]);
            let offset = t0 * length;
            for (p, q) in pattern.fit((t1 - t0) * length, [a, b]) {
                match ink.last_mut() {
                    // The two half dashes at a crossing are one.
                    Some(last) if (last.1 - (offset + p)).abs() < 1e-6 => last.1 = offset + q,
                    _ => ink.push((offset + p, offset + q)),
                }
            }
        }
        pieces(&Curve::Line(*line), &ink)
    }

    /// Hatching of all cut faces: one direction and spacing, because they are one part.
    fn hatching(&self, view: &View) -> Vec<PaperHatch> {
        let look = &self.style.hatch;
        let faces: Vec<(ShapeId, Vec<Path<Paper>>)> = view
            .regions
            .iter()
            .map(|r| {
                let outlines = r
                    .outlines
                    .iter()
                    .map(|p| Path {
                        curves: p.curves.iter().map(|c| self.placement.curve(c)).collect(),
                        closed: p.closed,
                    })
                    .collect();
                (r.shape.clone(), outlines)
            })
            .collect();
        let largest = faces.iter().map(|(_, o)| hatch::area(o)).fold(0.0, f64::max);
        let spacing = look
            .spacing
            .iter()
            .find(|(up_to, _)| largest <= *up_to)
            .or(look.spacing.last())
            .map_or(look.text_margin, |(_, s)| *s);
        faces
            .into_iter()
            .map(|(shape, outlines)| PaperHatch {
                lines: hatch::lines(&outlines, look.angle, spacing),
                shape,
                outlines,
                width: self.group.narrow,
                angle: look.angle,
            })
            .collect()
    }
}

/// Where other lines cross this one, as sorted shares of its length.
fn crossing_places(line: &Line<Paper>, others: &[Line<Paper>]) -> Vec<f64> {
    let mut places: Vec<f64> = others
        .iter()
        .filter_map(|o| match line_crossing(line, o, 1e-6) {
            Crossing::At { along_first, .. } => Some(along_first),
            Crossing::Along { .. } | Crossing::Apart => None,
        })
        .collect();
    places.sort_by(f64::total_cmp);
    places.dedup_by(|a, b| (*a - *b).abs() < 1e-6);
    places
}

fn pieces(curve: &Curve<Paper>, ink: &[(f64, f64)]) -> Vec<Curve<Paper>> {
    if let [(_, _)] = ink {
        return vec![*curve];
    }
    ink.iter()
        .map(|(a, b)| curve.piece(curve.parameter_at_length(*a), curve.parameter_at_length(*b)))
        .collect()
}

fn circle_dashes(
    circle: &crate::geom::Arc<Paper>,
    pattern: &Pattern,
    parts: u32,
) -> Vec<Curve<Paper>> {
    let round = Curve::Arc(*circle).length();
    let ink = pattern.fit_circle(round, parts);
    if let [_] = ink.as_slice() {
        return vec![Curve::Arc(*circle)];
    }
    let degrees = |mm: f64| mm / round * 360.0;
    ink.into_iter()
        .map(|(a, b)| {
            let start = circle.start + degrees(a);
            Curve::Arc(crate::geom::Arc::new(circle.centre, circle.radius, start, degrees(b - a)))
        })
        .collect()
}
