//! What gets centre lines by itself.
//!
//! Common practice: circles seen round get a cross, holes on a pitch circle a radial stroke and the
//! circle, slots their long axis and a cross-line at each end, turned bodies one axis over all
//! steps that lie on it.

use super::anchor::Names;
use super::body::Body;
use super::edge::CentreFeature;
use crate::geom::{Arc, COINCIDENT, Line, View as ViewSpace};
use crate::ident::ShapeId;
use crate::spec::{CentreLines, LineClass, Shape};

/// The centre features of a view.
pub(super) fn features(shapes: &[Shape], names: &Names) -> Vec<CentreFeature> {
    let mut crosses: Vec<CentreFeature> = Vec::new();
    let mut axes: Vec<(ShapeId, Line<ViewSpace>)> = Vec::new();
    let mut rest: Vec<CentreFeature> = Vec::new();
    for shape in shapes.iter().filter(|s| wanted(s)) {
        let Some(named) = names.get(shape.id.as_str()) else { continue };
        if let Some(circle) = named.pitch
            && named.members.len() > 1
        {
            rest.push(CentreFeature::Pitch { shape: shape.id.clone(), circle });
        }
        for (id, body) in &named.members {
            match body {
                Body::Circle(circle) => {
                    let radial = named.pitch.filter(|_| named.members.len() > 1);
                    let turn = radial.map_or(0.0, |p| (circle.centre - p.centre).angle());
                    crosses.push(CentreFeature::Cross {
                        shape: id.clone(),
                        circle: *circle,
                        turn,
                        single: radial.is_some(),
                    });
                }
                Body::Slot { from, to } => rest.extend(slot(id, from, to)),
                Body::Rectangle { axis: Some(axis), .. } => axes.push((id.clone(), *axis)),
                Body::Rectangle { axis: None, .. }
                | Body::Line(_)
                | Body::Arc(_)
                | Body::Outline(_) => {}
            }
        }
    }
    let forced = |id: &ShapeId| {
        shapes.iter().any(|s| {
            s.centre == CentreLines::Yes
                && names
                    .get(s.id.as_str())
                    .is_some_and(|n| n.members.iter().any(|(member, _)| member == id))
        })
    };
    let mut all = outermost(crosses, forced);
    all.extend(rest);
    all.extend(merged(axes));
    all
}

fn wanted(shape: &Shape) -> bool {
    match shape.centre {
        CentreLines::Yes => true,
        CentreLines::No => false,
        CentreLines::Auto => {
            !shape.hatch
                && matches!(shape.class, LineClass::Visible | LineClass::Cut | LineClass::Hidden)
        }
    }
}

/// Of concentric circles only the largest gets a cross, unless another asks for its own.
fn outermost(crosses: Vec<CentreFeature>, forced: impl Fn(&ShapeId) -> bool) -> Vec<CentreFeature> {
    let circle = |f: &CentreFeature| match f {
        CentreFeature::Cross { circle, .. } => Some(*circle),
        CentreFeature::Axis { .. } | CentreFeature::Pitch { .. } => None,
    };
    let mut order: Vec<usize> = (0..crosses.len()).collect();
    let key = |i: usize| {
        circle(&crosses[i]).map_or((0.0, 0.0, 0.0), |c| (c.centre.x, c.centre.y, -c.radius))
    };
    order.sort_by(|a, b| {
        let (p, q) = (key(*a), key(*b));
        p.0.total_cmp(&q.0).then(p.1.total_cmp(&q.1)).then(p.2.total_cmp(&q.2)).then(a.cmp(b))
    });
    let mut keep = vec![true; crosses.len()];
    for (n, i) in order.iter().enumerate() {
        let Some(own) = circle(&crosses[*i]) else { continue };
        let covered = order[..n].iter().rev().take(64).any(|j| {
            circle(&crosses[*j])
                .is_some_and(|c| c.centre.is_at(own.centre) && c.radius >= own.radius && keep[*j])
        });
        let CentreFeature::Cross { shape, .. } = &crosses[*i] else { continue };
        keep[*i] = !covered || forced(shape);
    }
    crosses.into_iter().zip(keep).filter_map(|(c, k)| k.then_some(c)).collect()
}

fn slot(id: &ShapeId, from: &Arc<ViewSpace>, to: &Arc<ViewSpace>) -> Vec<CentreFeature> {
    let v = to.centre - from.centre;
    let Some(u) = v.unit() else { return Vec::new() };
    let across = |circle: &Arc<ViewSpace>| CentreFeature::Cross {
        shape: id.clone(),
        circle: *circle,
        turn: u.left().angle(),
        single: true,
    };
    let line = Line::new(from.centre - u * from.radius, to.centre + u * to.radius);
    vec![CentreFeature::Axis { shape: id.clone(), line }, across(from), across(to)]
}

/// Axes on one line whose spans touch or overlap become one.
fn merged(axes: Vec<(ShapeId, Line<ViewSpace>)>) -> Vec<CentreFeature> {
    let mut done: Vec<(ShapeId, Line<ViewSpace>)> = Vec::new();
    for (id, mut line) in axes {
        // Each merge may make the axis reach the next one, so look again until nothing changes.
        let mut name = id;
        while let Some(i) = done.iter().position(|(_, other)| touching(other, &line)) {
            let (earlier, other) = done.remove(i);
            line = hull(&other, &line);
            name = earlier;
        }
        done.push((name, line));
    }
    done.into_iter().map(|(shape, line)| CentreFeature::Axis { shape, line }).collect()
}

fn touching(a: &Line<ViewSpace>, b: &Line<ViewSpace>) -> bool {
    let Some(u) = a.vector().unit() else { return false };
    let off = |p: crate::geom::Point<ViewSpace>| u.cross(p - a.from).abs() <= COINCIDENT;
    off(b.from) && off(b.to) && crate::geom::overlap_length(a, b) >= -COINCIDENT
}

/// The longest line between ends of two lines that lie on one.
fn hull(a: &Line<ViewSpace>, b: &Line<ViewSpace>) -> Line<ViewSpace> {
    let u = a.vector();
    let at = |p: &crate::geom::Point<ViewSpace>| (*p - a.from).dot(u);
    let mut points = [a.from, a.to, b.from, b.to];
    points.sort_by(|p, q| at(p).total_cmp(&at(q)));
    Line::new(points[0], points[3])
}
