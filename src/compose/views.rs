//! The views as scene items: one for each shape and line class.

use std::collections::BTreeMap;

use super::gaps::Gaps;
use crate::geom::{Curve, Path, Sheet};
use crate::ident::ItemId;
use crate::layout::{Layout, PlacedView};
use crate::scene::{Item, ItemKind, Mark, Stroke};
use crate::spec::LineClass;

/// Hatching first, then narrow lines, then outlines, so that wide ink lies on top.
pub(super) fn items(layout: &Layout, gaps: &Gaps) -> Vec<Item> {
    layout.views.iter().flat_map(|v| view_items(v, gaps)).collect()
}

fn view_items(view: &PlacedView, gaps: &Gaps) -> Vec<Item> {
    let mut items = Vec::new();
    for hatch in &view.paper.hatch {
        let lines = hatch
            .lines
            .iter()
            .map(|l| view.shift.curve(&Curve::Line(*l)))
            .flat_map(|c| gaps.around_texts(&c));
        let what = format!("{}.hatch", hatch.shape);
        items.push(item(view, &what, ItemKind::Hatch, lines, hatch.width, hatch.shape.as_str()));
    }
    for centre in &view.paper.centres {
        let lines =
            centre.dashes.iter().map(|c| view.shift.curve(c)).flat_map(|c| gaps.around_all(&c));
        let what = format!("{}.centre", centre.shape);
        items.push(item(view, &what, ItemKind::Centre, lines, centre.width, centre.shape.as_str()));
    }
    items.extend(edges(view, gaps));
    items.retain(|i| !i.marks.is_empty());
    merged(items)
}

/// Edges grouped by their class and the shapes that make them, in the order of their first edge.
fn edges(view: &PlacedView, gaps: &Gaps) -> Vec<Item> {
    let mut places: BTreeMap<(LineClass, String), usize> = BTreeMap::new();
    let mut groups: Vec<(LineClass, String, f64, Vec<Curve<Sheet>>)> = Vec::new();
    for edge in &view.paper.edges {
        let shapes = edge.shapes.iter().map(|s| s.as_str()).collect::<Vec<_>>().join(" ");
        let place = *places.entry((edge.class, shapes.clone())).or_insert_with(|| {
            groups.push((edge.class, shapes, edge.width, Vec::new()));
            groups.len() - 1
        });
        let gives_way = matches!(edge.class, LineClass::Centre | LineClass::Construction);
        for dash in &edge.dashes {
            let curve = view.shift.curve(dash);
            if gives_way {
                groups[place].3.extend(gaps.around_all(&curve));
            } else {
                groups[place].3.push(curve);
            }
        }
    }
    groups
        .into_iter()
        .map(|(class, shapes, width, curves)| {
            let kind = kind_of(class);
            let what = format!("{}.{kind}", shapes.replace(' ', "+"));
            item(view, &what, kind, curves.into_iter(), width, &shapes)
        })
        .collect()
}

fn kind_of(class: LineClass) -> ItemKind {
    match class {
        LineClass::Visible | LineClass::Cut => ItemKind::Outline,
        LineClass::Hidden => ItemKind::Hidden,
        LineClass::Smooth => ItemKind::Smooth,
        LineClass::Centre => ItemKind::Centre,
        LineClass::Adjacent => ItemKind::Adjacent,
        LineClass::Construction => ItemKind::Construction,
        LineClass::Break => ItemKind::Break,
    }
}

fn item(
    view: &PlacedView,
    what: &str,
    kind: ItemKind,
    curves: impl Iterator<Item = Curve<Sheet>>,
    width: f64,
    shapes: &str,
) -> Item {
    let paths = joined(curves);
    let marks = if paths.is_empty() {
        Vec::new()
    } else {
        vec![Mark::Stroke(Stroke::new(paths, width, None))]
    };
    let mut item = Item::new(ItemId::new(format!("{}.{what}", view.id)), kind, marks);
    item.view = Some(view.id.clone());
    item.feature = Some(shapes.to_owned());
    item
}

/// Curves that follow each other end to end become one path, so that corners are joined.
fn joined(curves: impl Iterator<Item = Curve<Sheet>>) -> Vec<Path<Sheet>> {
    let mut paths: Vec<Path<Sheet>> = Vec::new();
    for curve in curves {
        match paths.last_mut() {
            Some(path)
                if !curve.is_loop()
                    && path
                        .curves
                        .last()
                        .is_some_and(|l| !l.is_loop() && l.end().is_at(curve.start())) =>
            {
                path.curves.push(curve);
            }
            _ => paths.push(Path::of(curve)),
        }
    }
    for path in &mut paths {
        path.closed = path.closed || (path.curves.len() > 1 && path.meets_itself());
    }
    paths
}

/// Items that would share an id (a shape with edges and centre lines of one class) become one.
fn merged(items: Vec<Item>) -> Vec<Item> {
    let mut places: BTreeMap<ItemId, usize> = BTreeMap::new();
    let mut all: Vec<Item> = Vec::new();
    for item in items {
        match places.get(&item.id) {
            Some(place) => all[*place].marks.extend(item.marks),
            None => {
                places.insert(item.id.clone(), all.len());
                all.push(item);
            }
        }
    }
    all
}
