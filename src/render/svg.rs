//! The SVG of a sheet.
//!
//! One user unit is one millimetre of the sheet. Every item is a group with its id, kind, view and
//! features; a dimension also carries its value and limits. Each stroke, fill and run of text of
//! an item is one element, in drawing order. What most elements share stands on the root, what
//! those of an item share on its group.

use std::collections::BTreeMap;

use svg::node::Text;
use svg::node::element::Element;

use super::text::{GlyphDefs, text_group};
use super::{base64, number, path_data};
use crate::geom::{Path, Sheet};
use crate::scene::{
    Fill, Ink, Item, ItemKind, Mark, Role, SHEET_NAMESPACE, Scene, SheetFacts, Stroke, Value,
    ValueUnit,
};
use crate::text::{FAMILY, FONT_WOFF2};

/// How the letters of a sheet are put into its SVG.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum TextMode {
    /// Shared outlines under transparent text: the same picture in every viewer.
    #[default]
    Outlines,
    /// Text in the embedded font: a smaller file, for viewers that honour embedded fonts.
    Font,
}

/// The text of the SVG of a sheet, letters as outlines.
#[must_use]
pub fn svg(scene: &Scene) -> String {
    svg_with(scene, TextMode::Outlines)
}

/// The text of the SVG of a sheet.
#[must_use]
pub fn svg_with(scene: &Scene, mode: TextMode) -> String {
    let defs = GlyphDefs::of(scene);
    let mut root = root(&scene.sheet);
    append(&mut root, text_element("title", &title(&scene.sheet)));
    append(&mut root, metadata(&scene.sheet));
    if mode == TextMode::Font {
        append(&mut root, text_element("style", &font_face()));
    }
    append(&mut root, defs.element(mode));
    let mut ids = BTreeMap::new();
    for item in &scene.items {
        append(&mut root, item_group(item, &defs, mode, &mut ids));
    }
    format!("<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n{root}\n")
}

fn root(sheet: &SheetFacts) -> Element {
    let (w, h) = (number::length(sheet.width), number::length(sheet.height));
    element(
        "svg",
        &[
            ("xmlns", "http://www.w3.org/2000/svg"),
            ("width", &format!("{w}mm")),
            ("height", &format!("{h}mm")),
            ("viewBox", &format!("0 0 {w} {h}")),
            ("fill", "none"),
            ("fill-rule", "evenodd"),
            ("stroke", "#000"),
            ("stroke-linejoin", "round"),
            ("font-family", &format!("'{FAMILY}'")),
            // Paper is white, also in viewers with a dark ground.
            ("style", "background:#fff"),
        ],
    )
}

fn title(sheet: &SheetFacts) -> String {
    let parts = [&*sheet.number, &*sheet.title];
    let mut title = parts.into_iter().filter(|p| !p.is_empty()).collect::<Vec<_>>().join(" ");
    if sheet.count > 1 {
        title.push_str(&format!(" ({}/{})", sheet.index, sheet.count));
    }
    title
}

fn metadata(sheet: &SheetFacts) -> Element {
    let facts = element(
        "wl:sheet",
        &[
            ("xmlns:wl", SHEET_NAMESPACE),
            ("number", &sheet.number),
            ("title", &sheet.title),
            ("revision", &sheet.revision),
            ("style", &sheet.style),
            ("format", &sheet.format),
            ("index", &sheet.index.to_string()),
            ("count", &sheet.count.to_string()),
        ],
    );
    let mut metadata = element("metadata", &[]);
    append(&mut metadata, facts);
    metadata
}

fn font_face() -> String {
    let data = base64::encode(FONT_WOFF2);
    format!(
        "@font-face{{font-family:\"{FAMILY}\";src:url(data:font/woff2;base64,{data}) \
         format(\"woff2\")}}"
    )
}

fn item_group(
    item: &Item,
    defs: &GlyphDefs,
    mode: TextMode,
    ids: &mut BTreeMap<String, u32>,
) -> Element {
    let id = unique(item.id.as_str(), ids);
    let mut group = element("g", &[("id", &id), ("data-kind", item.kind.name())]);
    if let Some(view) = &item.view {
        set(&mut group, "data-view", view.as_str());
    }
    if let Some(feature) = &item.feature {
        set(&mut group, "data-feature", feature);
    }
    if let Some(value) = &item.value {
        set_value(&mut group, value);
    }
    if ends_are_round(item.kind) {
        set(&mut group, "stroke-linecap", "round");
    }
    let shared = shared_width(item);
    if let Some(width) = &shared {
        set(&mut group, "stroke-width", width);
    }
    for mark in &item.marks {
        match mark {
            Mark::Stroke(s) => append_some(&mut group, stroke(s, shared.is_none())),
            Mark::Fill(f) => append_some(&mut group, fill(f)),
            Mark::Text(t) if t.run.is_blank() => {}
            Mark::Text(t) => append(&mut group, text_group(t, defs, mode)),
        }
    }
    group
}

/// Ids are unique in a drawing by the scene's own promise; should two be equal all the same, the
/// later ones get a number, because a file with an id twice is no valid XML.
fn unique(id: &str, ids: &mut BTreeMap<String, u32>) -> String {
    let mut candidate = clean(id);
    while let Some(times) = ids.get_mut(&candidate) {
        *times += 1;
        candidate = format!("{candidate}~{times}");
    }
    ids.insert(candidate.clone(), 1);
    candidate
}

pub(super) fn set_value(group: &mut Element, value: &Value) {
    set(group, "data-value", &number::factor(value.nominal));
    if let Some(lower) = value.limits.0 {
        set(group, "data-lower", &number::factor(lower));
    }
    if let Some(upper) = value.limits.1 {
        set(group, "data-upper", &number::factor(upper));
    }
    match value.unit {
        ValueUnit::Millimetre => {}
        ValueUnit::Degree => set(group, "data-unit", "deg"),
    }
}

/// Whether strokes of such items end in half circles, so that edges drawn one by one meet at their
/// corners without notches. Dashes and dimension lines end square: their lengths are read off.
fn ends_are_round(kind: ItemKind) -> bool {
    match kind {
        ItemKind::Outline
        | ItemKind::Smooth
        | ItemKind::Break
        | ItemKind::Symbol
        | ItemKind::Balloon
        | ItemKind::Table
        | ItemKind::TitleBlock
        | ItemKind::Frame
        | ItemKind::Note
        | ItemKind::Finding => true,
        ItemKind::Hidden
        | ItemKind::Centre
        | ItemKind::Hatch
        | ItemKind::CuttingLine
        | ItemKind::Adjacent
        | ItemKind::Construction
        | ItemKind::Dimension
        | ItemKind::Leader
        | ItemKind::Callout
        | ItemKind::ViewLabel => false,
    }
}

/// The width of all strokes of an item, if they have one width.
fn shared_width(item: &Item) -> Option<String> {
    let mut widths = item.marks.iter().filter_map(|m| match m {
        Mark::Stroke(s) => Some(number::factor(s.width)),
        Mark::Fill(_) | Mark::Text(_) => None,
    });
    let first = widths.next()?;
    widths.all(|w| w == first).then_some(first)
}

fn stroke(stroke: &Stroke, own_width: bool) -> Option<Element> {
    let mut shape = shape(&stroke.paths, stroke.role)?;
    if own_width {
        set(&mut shape, "stroke-width", &number::factor(stroke.width));
    }
    if let Some(colour) = colour(stroke.ink) {
        set(&mut shape, "stroke", colour);
    }
    Some(shape)
}

fn fill(fill: &Fill) -> Option<Element> {
    let mut shape = shape(&fill.paths, fill.role)?;
    set(&mut shape, "fill", colour(fill.ink).unwrap_or(BLACK));
    set(&mut shape, "stroke", "none");
    Some(shape)
}

fn shape(paths: &[Path<Sheet>], role: Option<Role>) -> Option<Element> {
    let mut shape = match paths {
        [path] if let Some(c) = path_data::as_circle(path) => element(
            "circle",
            &[
                ("cx", &number::length(c.centre.x)),
                ("cy", &number::length(c.centre.y)),
                ("r", &number::fine(c.radius)),
            ],
        ),
        _ => {
            let d = path_data::path_data(paths);
            if d.is_empty() {
                return None;
            }
            element("path", &[("d", &d)])
        }
    };
    if let Some(role) = role {
        set(&mut shape, "data-role", role.name());
    }
    Some(shape)
}

/// The drawing's own ink.
pub(super) const BLACK: &str = "#000";

/// The colour of an ink where it is not the drawing's own.
pub(super) fn colour(ink: Ink) -> Option<&'static str> {
    match ink {
        Ink::Drawing => None,
        Ink::Finding => Some("#d00000"),
    }
}

/// An element with these attributes. Characters that XML has no place for are replaced.
pub(super) fn element(name: &str, attributes: &[(&str, &str)]) -> Element {
    let mut element = Element::new(name);
    for (name, value) in attributes {
        set(&mut element, name, value);
    }
    element
}

/// An element that holds nothing but `text`.
pub(super) fn text_element(name: &str, text: &str) -> Element {
    let mut element = Element::new(name);
    append(&mut element, Text::new(clean(text)));
    element
}

/// Sets an attribute.
pub(super) fn set(element: &mut Element, name: &str, value: &str) {
    element.get_attributes_mut().insert(name.to_owned(), clean(value).into());
}

/// Appends a child.
pub(super) fn append(parent: &mut Element, child: impl Into<Box<dyn svg::Node>>) {
    svg::Node::append(parent, child);
}

fn append_some(parent: &mut Element, child: Option<Element>) {
    if let Some(child) = child {
        append(parent, child);
    }
}

/// Without the characters that XML 1.0 (§2.2) forbids; line ends and tabs become blanks, as
/// attributes are read anyway.
fn clean(text: &str) -> String {
    text.chars()
        .filter_map(|c| match c {
            '\t' | '\n' | '\r' => Some(' '),
            '\u{FFFE}' | '\u{FFFF}' => Some(char::REPLACEMENT_CHARACTER),
            c if c.is_control() => None,
            c => Some(c),
        })
        .collect()
}

#[cfg(test)]
mod tests;
