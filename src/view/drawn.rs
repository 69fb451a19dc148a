//! From shapes drawn in the spec to a finished view.

use super::anchor::{Named, Names};
use super::body::Body;
use super::centre;
use super::edge::{Edge, Region, View};
use super::path_data;
use super::precedence::settle;
use super::repeat::{Motion, motions};
use crate::geom::{Arc, Path, Rect, Vector, View as ViewSpace};
use crate::ident::ShapeId;
use crate::source::{Diagnostic, Diagnostics};
use crate::spec::{Geometry, LineClass, Outline, Repeat, Shape, ViewSpec};

/// Edges shorter than this, mm of the part, are faults of the spec and not features.
const SHORTEST: f64 = 1e-6;

/// The view that a spec draws; `None`, with the reason reported, if it cannot be made.
#[must_use]
pub fn drawn_view(spec: &ViewSpec, diagnostics: &mut Diagnostics) -> Option<View> {
    let Geometry::Drawn(shapes) = &spec.geometry;
    let mut maker = Maker { diagnostics, sound: true, edges: Vec::new(), regions: Vec::new() };
    let names: Names =
        shapes.iter().filter_map(|s| maker.shape(s).map(|n| (s.id.clone(), n))).collect();
    let Maker { sound, edges, regions, .. } = maker;
    if !sound {
        return None;
    }
    let extent = edges
        .iter()
        .filter(|e| matches!(e.class, LineClass::Visible | LineClass::Cut | LineClass::Hidden));
    let bounds = Rect::union_of(extent.map(|e| e.curve.bounds()))
        .or_else(|| Rect::union_of(edges.iter().map(|e| e.curve.bounds())));
    let Some(bounds) = bounds else {
        let problem = Diagnostic::error(spec.span, format!("view `{}` draws nothing", spec.id))
            .help("give it shapes");
        diagnostics.push(problem);
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
        centres: centre::features(shapes, &names),
        edges: settle(edges),
        regions,
        bounds,
        names,
    })
}

struct Maker<'a> {
    diagnostics: &'a mut Diagnostics,
    sound: bool,
    edges: Vec<Edge>,
    regions: Vec<Region>,
}

impl Maker<'_> {
    fn fault(&mut self, problem: Diagnostic) {
        self.sound = false;
        self.diagnostics.push(problem);
    }

    fn shape(&mut self, shape: &Shape) -> Option<Named> {
        let parsed = self.parsed(shape)?;
        let all = match &shape.repeat {
            Some(repeat) => motions(repeat),
            None => vec![Motion::Shift(Vector::new(0.0, 0.0))],
        };
        let mut members = Vec::with_capacity(all.len());
        for (i, motion) in all.iter().enumerate() {
            let id = match shape.repeat {
                Some(_) => ShapeId::new(format!("{}.{}", shape.id, i + 1)),
                None => shape.id.clone(),
            };
            let body = Body::of(&shape.outline, &parsed, motion);
            let paths = body.paths();
            if i == 0 && !self.check(shape, &paths) {
                return None;
            }
            if shape.hatch {
                self.regions.push(Region { shape: id.clone(), outlines: paths.clone() });
            }
            let class = match (shape.class, shape.hatch) {
                (LineClass::Visible, true) => LineClass::Cut,
                (class, _) => class,
            };
            self.edges.extend(paths.into_iter().flat_map(|p| p.curves).map(|curve| Edge {
                class,
                curve,
                shapes: vec![id.clone()],
            }));
            members.push((id, body));
        }
        let pitch = match &shape.repeat {
            Some(Repeat::Polar { about, .. }) => pitch_circle(&members, *about),
            Some(Repeat::Grid { .. } | Repeat::At { .. } | Repeat::Mirror { .. }) | None => None,
        };
        Some(Named { members, repeated: shape.repeat.is_some(), pitch })
    }

    fn parsed(&mut self, shape: &Shape) -> Option<Vec<Path<ViewSpace>>> {
        let Outline::Path { data } = &shape.outline else { return Some(Vec::new()) };
        match path_data::parse(&data.value) {
            Ok(paths) => Some(paths),
            Err(e) => {
                let problem = Diagnostic::error(data.span, e.to_string())
                    .help("write SVG path data with y upwards, such as \"M 0 0 L 40 0 L 40 20 Z\"");
                self.fault(problem);
                None
            }
        }
    }

    /// Whether the outline can be drawn: no edge without length, cut faces closed.
    fn check(&mut self, shape: &Shape, paths: &[Path<ViewSpace>]) -> bool {
        let short = paths.iter().flat_map(|p| &p.curves).any(|c| c.length() < SHORTEST);
        if short || paths.iter().all(|p| p.curves.is_empty()) {
            let message = format!("shape `{}` has an edge without length", shape.id);
            let problem = Diagnostic::error(shape.span, message)
                .help("two of its points coincide; move one of them or leave it out");
            self.fault(problem);
            return false;
        }
        if !shape.hatch {
            return true;
        }
        let open = paths.iter().find(|p| !p.closed && !p.meets_itself());
        if let Some((first, last)) =
            open.and_then(|p| Some((p.curves.first()?.start(), p.curves.last()?.end())))
        {
            let message = format!(
                "the cut face `{}` does not close: it begins at ({}, {}) and ends at ({}, {})",
                shape.id, first.x, first.y, last.x, last.y
            );
            let problem = Diagnostic::error(shape.span, message)
                .help("close a path with Z, a polygon with closed = true");
            self.fault(problem);
            return false;
        }
        true
    }
}

/// The circle through the members' centres about `about`, beginning at the first member.
fn pitch_circle(
    members: &[(ShapeId, Body)],
    about: crate::geom::Point<ViewSpace>,
) -> Option<Arc<ViewSpace>> {
    let centre = match &members.first()?.1 {
        Body::Circle(a) | Body::Arc(a) => a.centre,
        Body::Slot { from, to } => from.centre.middle(to.centre),
        Body::Line(_) | Body::Rectangle { .. } | Body::Outline(_) => return None,
    };
    let v = centre - about;
    (v.length() > SHORTEST).then(|| Arc::new(about, v.length(), v.angle(), 360.0))
}
