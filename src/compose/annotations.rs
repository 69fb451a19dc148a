//! Annotations as scene items.

use super::gaps::Gaps;
use crate::annotate::{Head, PlacedLabel, Practice, Sketch};
use crate::geom::{Arc, Curve, Path, Sheet};
use crate::ident::{ItemId, ViewId};
use crate::layout::{Layout, Placed};
use crate::scene::{Fill, Ink, Item, ItemKind, Mark, PlacedText, Role, Stroke, filled};

/// One item for each annotation and each view label, in the order of the drawing.
pub(super) fn items(layout: &Layout, gaps: &Gaps, practice: &Practice<'_>) -> Vec<Item> {
    let annotations = layout.annotations.iter().map(|p| annotation(p, layout, gaps, practice));
    let labels = layout.views.iter().filter_map(|v| {
        let label = v.label.as_ref()?;
        let id = ItemId::new(format!("{}.label", v.id));
        let mut item = Item::new(id, ItemKind::ViewLabel, texts(label).collect());
        item.view = Some(v.id.clone());
        Some(item)
    });
    annotations.chain(labels).collect()
}

fn annotation(placed: &Placed, layout: &Layout, gaps: &Gaps, practice: &Practice<'_>) -> Item {
    let a = &placed.annotation;
    let view: Option<ViewId> = layout.views.get(a.view).map(|v| v.id.clone());
    let feature = a.shapes.iter().map(|s| s.as_str()).collect::<Vec<_>>().join(" ");
    Item {
        id: a.id.clone(),
        kind: a.kind,
        view,
        feature: (!feature.is_empty()).then_some(feature),
        value: a.value,
        marks: marks(&placed.sketch, gaps, practice),
    }
}

fn marks(sketch: &Sketch<Sheet>, gaps: &Gaps, practice: &Practice<'_>) -> Vec<Mark> {
    let mut marks = Vec::new();
    for role in [Role::Ext, Role::Dim, Role::Leader] {
        let paths: Vec<Path<Sheet>> = sketch
            .traces
            .iter()
            .filter(|t| t.role == role)
            .flat_map(|t| match role {
                Role::Ext => gaps.around_all(&t.curve),
                Role::Dim | Role::Leader | Role::Arrow | Role::TextFrame => vec![t.curve],
            })
            .map(Path::of)
            .collect();
        let paths = without_repeats(paths);
        if !paths.is_empty() {
            marks.push(Mark::Stroke(Stroke::new(paths, practice.group.narrow, Some(role))));
        }
    }
    marks.extend(sketch.heads.iter().map(head));
    for label in &sketch.labels {
        marks.extend(texts(label));
        let frames: Vec<Path<Sheet>> = label.frame_paths().collect();
        if !frames.is_empty() {
            let stroke = Stroke::new(frames, practice.group.narrow, Some(Role::TextFrame));
            marks.push(Mark::Stroke(stroke));
        }
    }
    marks
}

/// Members of a set share extension lines: each is drawn once, the longest of those that lie on
/// one another.
fn without_repeats(paths: Vec<Path<Sheet>>) -> Vec<Path<Sheet>> {
    let mut kept: Vec<Path<Sheet>> = Vec::new();
    for path in paths {
        let covers =
            |a: &Path<Sheet>, b: &Path<Sheet>| match (a.curves.as_slice(), b.curves.as_slice()) {
                ([Curve::Line(a)], [Curve::Line(b)]) => {
                    let (da, db) = (a.vector(), b.vector());
                    let off = |p| da.cross(p).abs() <= crate::geom::COINCIDENT * da.length();
                    off(db)
                        && off(b.from - a.from)
                        && [b.from, b.to].iter().all(|p| {
                            let t = (*p - a.from).dot(da) / da.dot(da);
                            (-1e-9..=1.0 + 1e-9).contains(&t)
                        })
                }
                _ => a == b,
            };
        if kept.iter().any(|k| covers(k, &path)) {
            continue;
        }
        kept.retain(|k| !covers(&path, k));
        kept.push(path);
    }
    kept
}

fn head(head: &Head<Sheet>) -> Mark {
    match (head.corners(), *head) {
        (Some(corners), _) => filled(&corners, Role::Arrow),
        (None, Head::Dot { at, diameter }) => {
            let circle = Path::of(Curve::Arc(Arc::circle(at, diameter / 2.0)));
            Mark::Fill(Fill { paths: vec![circle], role: Some(Role::Arrow), ink: Ink::Drawing })
        }
        (None, Head::Arrow { tip, .. }) => filled(&[tip, tip, tip], Role::Arrow),
    }
}

fn texts(label: &PlacedLabel<Sheet>) -> impl Iterator<Item = Mark> + '_ {
    label.label.runs.iter().enumerate().map(|(i, (at, run))| {
        let origin = label.at(crate::geom::Point::new(at.x, at.y));
        let text = PlacedText::new(run.clone(), origin, label.angle);
        // A size and its deviations are several runs; the first one carries what they say.
        Mark::Text(PlacedText { value: label.label.value.filter(|_| i == 0), ..text })
    })
}
