//! `[[part]]` and `[[view]]`.
//!
//! Takes the tables; gives parts, views and the annotations that stand inside views. Ids of parts
//! and views are unique in a spec, ids of shapes in their view.

use std::collections::BTreeMap;

use toml::de::DeValue;

use super::annotations::{Home, callout, dimension};
use super::drawing::{AnnotationSpec, Direction, Geometry, PartSpec, Shape, Spanned, ViewSpec};
use super::reader::{Field, Keys, Reader, Table, excerpt};
use super::shapes::{CurveBudget, shape};
use super::sheet::scale;
use crate::ident::{PartId, ViewId};
use crate::source::{Diagnostic, Span, nearest};

/// Most parts and most views of one spec.
const MOST_VIEWS: usize = 200;
/// Most shape tables of one view.
const MOST_SHAPES: usize = 100_000;
/// Most dimensions or callouts of one list.
pub(super) const MOST_ANNOTATIONS: usize = 10_000;

/// What to say where the language has views that are computed from a solid.
pub(super) const DRAWN_ONLY: &str =
    "this version reads drawn views only: give the view's outline as `shapes`";

const VIEW: Keys = Keys {
    known: &["id", "from", "part", "scale", "label", "section", "shapes", "dimensions", "callouts"],
    later: &[("detail", DRAWN_ONLY), ("break", DRAWN_ONLY), ("breaks", DRAWN_ONLY)],
};

const PART: Keys =
    Keys { known: &["id"], later: &[("feature", DRAWN_ONLY), ("place", DRAWN_ONLY)] };

const DIRECTIONS: [(&str, Direction); 7] = [
    ("front", Direction::Front),
    ("top", Direction::Top),
    ("right", Direction::Right),
    ("left", Direction::Left),
    ("rear", Direction::Rear),
    ("bottom", Direction::Bottom),
    ("iso", Direction::Iso),
];

/// Id of the part of a spec that names none.
const ONLY_PART: &str = "part";

/// `[[part]]`, all of them; one if the spec names none.
pub(super) fn read_parts(reader: &mut Reader<'_>, f: Option<Field<'_>>) -> Vec<PartSpec> {
    let Some(f) = f else { return vec![PartSpec { id: PartId::new(ONLY_PART) }] };
    let ids = reader.rows(f, MOST_VIEWS, |r, f| {
        let table = r.table(f, "a part", PART)?;
        r.need(&table, "id", |r, f| Some((r.id(f)?, f.span)))
    });
    unique(reader, "parts", ids.iter().copied());
    ids.into_iter().map(|(id, _)| PartSpec { id: PartId::new(id) }).collect()
}

/// Reports ids that are given twice.
fn unique<'t>(reader: &mut Reader<'_>, what: &str, ids: impl Iterator<Item = (&'t str, Span)>) {
    let mut seen: BTreeMap<&str, Span> = BTreeMap::new();
    for (id, span) in ids {
        if let Some(first) = seen.get(id) {
            let d = Diagnostic::error(span, format!("two {what} have the id `{id}`"));
            reader.report(d.related(*first, "the first is here"));
        } else {
            seen.insert(id, span);
        }
    }
}

/// `[[view]]`, all of them, and the annotations inside.
pub(super) fn read_views(
    reader: &mut Reader<'_>,
    f: Field<'_>,
    parts: &[PartSpec],
) -> (Vec<ViewSpec>, Vec<AnnotationSpec>) {
    let mut annotations = Vec::new();
    let mut ids = Vec::new();
    let mut budget = CurveBudget::default();
    let views = reader.rows(f, MOST_VIEWS, |r, f| {
        let table = r.table(f, "a view", VIEW)?;
        let id = r.need(&table, "id", |r, f| Some((r.id(f)?, f.span)));
        ids.extend(id);
        let id = id.map(|(id, span)| Spanned { value: ViewId::new(id), span });
        // Without an id all the rest is read as well, for what is wrong with it.
        let home = id.clone().unwrap_or(Spanned { value: ViewId::new("view"), span: f.span });
        annotations.extend(annotations_of(r, &table, &home));
        let view = view(r, &table, home.value, parts, &mut budget);
        id.and(view)
    });
    unique(reader, "views", ids.into_iter());
    (views, annotations)
}

fn annotations_of(
    reader: &mut Reader<'_>,
    table: &Table<'_>,
    view: &Spanned<ViewId>,
) -> Vec<AnnotationSpec> {
    let home = Home::View(view);
    let mut all = Vec::new();
    if let Some(f) = table.get("dimensions") {
        all.extend(reader.rows(f, MOST_ANNOTATIONS, |r, f| dimension(r, f, home)));
    }
    if let Some(f) = table.get("callouts") {
        all.extend(reader.rows(f, MOST_ANNOTATIONS, |r, f| callout(r, f, home)));
    }
    all
}

fn view(
    reader: &mut Reader<'_>,
    table: &Table<'_>,
    id: ViewId,
    parts: &[PartSpec],
    budget: &mut CurveBudget,
) -> Option<ViewSpec> {
    let from = reader.need(table, "from", |r, f| r.choice(f, &DIRECTIONS));
    let part = part_of(reader, table, parts);
    let scale = reader.maybe(table, "scale", own_scale);
    let label = reader.maybe(table, "label", Reader::text);
    let is_section = reader.maybe(table, "section", section).unwrap_or(false);
    let shapes = match table.get("shapes") {
        Some(f) => shapes(reader, f, budget),
        None if table.is_suspect() || is_computed(table) => None,
        None => {
            let message = format!("the view `{id}` has no shapes");
            reader.fail(Diagnostic::error(table.span, message).help(DRAWN_ONLY))
        }
    };
    Some(ViewSpec {
        id,
        span: table.span,
        part: part?,
        from: from?,
        scale,
        label,
        is_section,
        geometry: Geometry::Drawn(shapes?),
    })
}

fn own_scale(reader: &mut Reader<'_>, f: Field<'_>) -> Option<crate::units::Scale> {
    match f.value {
        DeValue::String(s) if s == "auto" => {
            let message = "the scale of a single view cannot be \"auto\"";
            let help = "leave it out to take the drawing's, or write one such as \"2:1\"";
            reader.fail(Diagnostic::error(f.span, message).help(help))
        }
        _ => scale(reader, f),
    }
}

/// Whether the view is a section in the form that is for later, and has been reported as one.
fn is_computed(table: &Table<'_>) -> bool {
    table.get("section").is_some_and(|f| matches!(f.value, DeValue::Table(_)))
}

/// Whether the drawn shapes show a cut; the language's computed sections are for later.
fn section(reader: &mut Reader<'_>, f: Field<'_>) -> Option<bool> {
    match f.value {
        DeValue::Table(_) => {
            let message = "sections are not computed by this version of the program";
            let help = "draw the cut as `shapes`, with hatch = true on its faces, and write \
                        section = true";
            reader.fail(Diagnostic::error(f.span, message).help(help))
        }
        _ => reader.boolean(f),
    }
}

fn shapes(reader: &mut Reader<'_>, f: Field<'_>, budget: &mut CurveBudget) -> Option<Vec<Shape>> {
    let shapes = reader.rows(f, MOST_SHAPES, |r, f| shape(r, f, budget));
    unique(reader, "shapes of this view", shapes.iter().map(|s| (s.id.as_str(), s.span)));
    if matches!(f.value, DeValue::Array(a) if a.is_empty()) {
        let d = Diagnostic::error(f.span, "this view has no shapes");
        return reader.fail(d.help(DRAWN_ONLY));
    }
    Some(shapes)
}

/// The part that a view shows: named, or the only one.
fn part_of(reader: &mut Reader<'_>, table: &Table<'_>, parts: &[PartSpec]) -> Option<PartId> {
    let names: Vec<&str> = parts.iter().map(|p| p.id.as_str()).collect();
    let Some(f) = table.get("part") else {
        if let [only] = parts {
            return Some(only.id.clone());
        }
        let message = "this view does not say which part it shows";
        let help = format!("write part = \"…\"; the parts are {}", names.join(", "));
        return reader.fail(Diagnostic::error(table.span, message).help(help));
    };
    let name = reader.string(f)?;
    if let Some(part) = parts.iter().find(|p| p.id.as_str() == name) {
        return Some(part.id.clone());
    }
    let help = nearest(name, names.iter().copied()).map_or_else(
        || format!("the parts are {}", names.join(", ")),
        |meant| format!("did you mean \"{meant}\"?"),
    );
    let message = format!("there is no part \"{}\"", excerpt(name));
    reader.fail(Diagnostic::error(f.span, message).help(help))
}
