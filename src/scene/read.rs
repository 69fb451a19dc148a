//! An issued SVG brought back as a scene, so that it can be checked without its spec.
//!
//! Takes the text of an SVG; gives the items that its `data-kind` groups are, with strokes, fills
//! and text where they are *drawn*: all transforms of their ancestors are applied, inherited
//! widths and paints are followed, and the ink of a text is that of its outlines, wherever somebody
//! moved them. So a sheet that was edited by hand or by another program is judged as it looks.
//!
//! What shows outside of every item is gathered in one more item. Style sheets, dash patterns,
//! markers, clipping and filters are not followed: issued sheets have none.

mod error;
mod look;
mod node;
mod outline;
mod text;

use std::collections::{BTreeMap, BTreeSet};

use kurbo::Affine;
use roxmltree::{Document, Node};

use self::look::Look;
use self::node::{SVG, XLINK, attribute_error, number_of, numbers_of, place};
use self::text::Found;
use super::{Fill, Item, ItemKind, Mark, Scene, SheetFacts, Stroke, Value, ValueUnit};
use crate::ident::{ItemId, ViewId};
use crate::units::MM_PER_INCH;

pub use self::error::{FilePlace, ReadError};

/// Namespace of the element in an SVG's `<metadata>` that says what the sheet is.
pub const SHEET_NAMESPACE: &str = "urn:witnessline:sheet";

/// Largest file that is read, bytes. A crowded A0 sheet has some 7 MB.
const MOST_BYTES: usize = 64 << 20;
/// Most XML nodes of a file.
const MOST_NODES: u32 = 2_000_000;
/// Most elements drawn, each use of a shared one counted.
const MOST_DRAWN: usize = 2_000_000;
/// Most bytes of elements drawn, each use of a shared one counted.
const MOST_BYTES_DRAWN: usize = 1 << 30;
/// Most curves and letters drawn.
const MOST_CURVES: usize = 4_000_000;
/// Deepest nesting of elements and uses.
const DEEPEST: usize = 64;
/// Longest side of a sheet, mm.
const LONGEST_SIDE: f64 = 5000.0;
/// Pixels of a unitless length per inch (CSS).
const CSS_DPI: f64 = 96.0;
/// Name of the item that holds what belongs to none.
const UNASSIGNED: &str = "unassigned";

/// Reads the text of an issued SVG.
///
/// # Errors
/// [`ReadError`] for anything that is not an issued sheet, is damaged, or passes the limits on
/// size, nesting and number of elements.
pub fn read_svg(text: &str) -> Result<Scene, ReadError> {
    if text.len() > MOST_BYTES {
        return Err(ReadError::TooMuch { what: "bytes", limit: MOST_BYTES });
    }
    let options = roxmltree::ParsingOptions { nodes_limit: MOST_NODES, ..Default::default() };
    let doc = Document::parse_with_options(text, options).map_err(|e| match e {
        roxmltree::Error::NodesLimitReached => {
            ReadError::TooMuch { what: "XML nodes", limit: MOST_NODES as usize }
        }
        other => ReadError::Xml(other.to_string()),
    })?;
    let root = doc.root_element();
    if !root.has_tag_name((SVG, "svg")) {
        return Err(ReadError::NotIssued("it is no SVG"));
    }
    let stated = doc.descendants().find(|n| n.has_tag_name((SHEET_NAMESPACE, "sheet")));
    if stated.is_none() && !doc.descendants().any(|n| n.has_attribute("data-kind")) {
        return Err(ReadError::NotIssued("no group of it has a data-kind"));
    }
    let (size, transform) = viewport(root)?;
    let mut reader = Reader::new(&doc);
    let mut loose = Found::default();
    if let Some(look) = Look::initial(transform).of(root)? {
        reader.children(root, &look, &mut loose, 0)?;
    }
    Ok(Scene { sheet: sheet_facts(size, stated), items: reader.finish(loose.marks) })
}

fn sheet_facts((width, height): (f64, f64), stated: Option<Node<'_, '_>>) -> SheetFacts {
    let text = |name| stated.and_then(|n| n.attribute(name)).unwrap_or_default().to_owned();
    let count = |name| text(name).parse().unwrap_or(1);
    SheetFacts {
        width,
        height,
        number: text("number"),
        title: text("title"),
        revision: text("revision"),
        style: text("style"),
        format: text("format"),
        index: count("index"),
        count: count("count"),
    }
}

/// Size of the sheet in mm, and the way from user units to it.
fn viewport(root: Node<'_, '_>) -> Result<((f64, f64), Affine), ReadError> {
    let [width, height] = ["width", "height"].map(|name| millimetres(root, name));
    let (width, height) = (width?, height?);
    let view_box = numbers_of(root, "viewBox", "four numbers, x y width height")?;
    let (size, transform) = match (view_box, width, height) {
        (Some([x, y, w, h]), width, height) => {
            let (width, height) = (width.unwrap_or(w), height.unwrap_or(h));
            // SVG fits the view box in, as large as it goes, in the middle (xMidYMid meet).
            let scale = (width / w).min(height / h);
            let margin = ((width - w * scale) / 2.0, (height - h * scale) / 2.0);
            (
                (width, height),
                Affine::new([scale, 0.0, 0.0, scale, margin.0 - x * scale, margin.1 - y * scale]),
            )
        }
        (None, Some(width), Some(height)) => {
            ((width, height), Affine::scale(MM_PER_INCH / CSS_DPI))
        }
        (None, _, _) => return Err(ReadError::NotIssued("it states no size")),
    };
    let sound = |side: f64| side > 0.0 && side <= LONGEST_SIDE;
    if sound(size.0) && sound(size.1) && transform.is_finite() {
        Ok((size, transform))
    } else {
        let value = format!("{} × {} mm", size.0, size.1);
        Err(attribute_error(root, "viewBox", &value, "a sheet of paper"))
    }
}

/// A physical length of the root element; `None` where it is absent or relative.
fn millimetres(root: Node<'_, '_>, name: &'static str) -> Result<Option<f64>, ReadError> {
    use svgtypes::LengthUnit;
    let Some(text) = root.attribute(name) else { return Ok(None) };
    let length: svgtypes::Length =
        text.parse().map_err(|_| attribute_error(root, name, text, "a length"))?;
    let unit = match length.unit {
        LengthUnit::Mm => 1.0,
        LengthUnit::Cm => 10.0,
        LengthUnit::In => MM_PER_INCH,
        LengthUnit::Pt => MM_PER_INCH / 72.0,
        LengthUnit::Pc => MM_PER_INCH / 6.0,
        LengthUnit::None | LengthUnit::Px => MM_PER_INCH / CSS_DPI,
        LengthUnit::Em | LengthUnit::Ex | LengthUnit::Percent => return Ok(None),
    };
    Ok(Some(length.number * unit))
}

struct Reader<'a, 'i> {
    by_id: BTreeMap<&'a str, Node<'a, 'i>>,
    items: Vec<Item>,
    drawn: usize,
    bytes: usize,
    curves: usize,
}

impl<'a, 'i> Reader<'a, 'i> {
    fn new(doc: &'a Document<'i>) -> Self {
        let with_id = doc.descendants().filter_map(|n| Some((n.attribute("id")?, n)));
        Self { by_id: with_id.collect(), items: Vec::new(), drawn: 0, bytes: 0, curves: 0 }
    }

    /// The items, with what belongs to none as a last one and every id once.
    fn finish(mut self, loose: Vec<Mark>) -> Vec<Item> {
        if !loose.is_empty() {
            self.items.push(Item::new(ItemId::new(UNASSIGNED), ItemKind::Note, loose));
        }
        let mut taken = BTreeSet::new();
        for item in &mut self.items {
            let wanted = item.id.as_str().to_owned();
            let mut times = 1;
            while !taken.insert(item.id.as_str().to_owned()) {
                times += 1;
                item.id = ItemId::new(format!("{wanted}~{times}"));
            }
        }
        self.items
    }

    fn children(
        &mut self,
        parent: Node<'a, 'i>,
        look: &Look,
        found: &mut Found,
        depth: usize,
    ) -> Result<(), ReadError> {
        if depth > DEEPEST {
            return Err(ReadError::TooMuch { what: "levels of nested elements", limit: DEEPEST });
        }
        for node in parent.children().filter(|n| n.tag_name().namespace() == Some(SVG)) {
            self.element(node, look, found, depth)?;
        }
        Ok(())
    }

    fn element(
        &mut self,
        node: Node<'a, 'i>,
        outer: &Look,
        found: &mut Found,
        depth: usize,
    ) -> Result<(), ReadError> {
        self.drawn = counted(self.drawn, 1, MOST_DRAWN, "drawn elements")?;
        let bytes = node.range().len();
        self.bytes = counted(self.bytes, bytes, MOST_BYTES_DRAWN, "bytes of drawn elements")?;
        let Some(look) = outer.of(node)? else { return Ok(()) };
        match node.tag_name().name() {
            "g" | "a" | "switch" if node.has_attribute("data-kind") => {
                self.item(node, &look, depth)
            }
            "g" | "a" | "switch"
                if node.has_attribute("data-bbox") || node.has_attribute("data-quad") =>
            {
                let mut inner = Found::default();
                self.children(node, &look, &mut inner, depth + 1)?;
                found.marks.extend(text::text_group(node, &look, inner)?);
                Ok(())
            }
            "g" | "a" | "switch" => self.children(node, &look, found, depth + 1),
            "use" => self.used(node, &look, found, depth),
            "path" | "circle" | "ellipse" | "line" | "rect" | "polyline" | "polygon" => {
                self.shape(node, &look, &mut found.marks)
            }
            "text" => {
                if let Some(placed) = text::text(node, &look)? {
                    let letters = placed.run.pieces.len();
                    self.curves = counted(self.curves, letters, MOST_CURVES, "curves")?;
                    match look.fill_ink() {
                        Some(_) => found.marks.push(Mark::Text(placed)),
                        None => found.unseen.push(placed),
                    }
                }
                Ok(())
            }
            "image" | "foreignObject" | "svg" => Err(ReadError::Unsupported {
                element: node.tag_name().name().to_owned(),
                place: place(node),
            }),
            // Definitions, titles, metadata: they draw nothing where they stand.
            _ => Ok(()),
        }
    }

    fn item(&mut self, node: Node<'a, 'i>, look: &Look, depth: usize) -> Result<(), ReadError> {
        let item = item_facts(node, self.items.len())?;
        let at = self.items.len();
        self.items.push(item);
        let mut found = Found::default();
        self.children(node, look, &mut found, depth + 1)?;
        self.items[at].marks = found.marks;
        Ok(())
    }

    fn used(
        &mut self,
        node: Node<'a, 'i>,
        look: &Look,
        found: &mut Found,
        depth: usize,
    ) -> Result<(), ReadError> {
        if depth > DEEPEST {
            return Err(ReadError::TooMuch { what: "levels of nested elements", limit: DEEPEST });
        }
        let href = node.attribute("href").or_else(|| node.attribute((XLINK, "href")));
        let target = href.and_then(|h| h.strip_prefix('#')).and_then(|id| self.by_id.get(id));
        let Some(target) = target.copied() else {
            let href = href.unwrap_or_default();
            return Err(attribute_error(node, "href", href, "an element of this file"));
        };
        let (x, y) = (number_of(node, "x")?.unwrap_or(0.0), number_of(node, "y")?.unwrap_or(0.0));
        let mut moved = *look;
        moved.transform *= Affine::translate((x, y));
        if target.has_tag_name((SVG, "symbol")) {
            let inner = moved.of(target)?;
            return inner.map_or(Ok(()), |l| self.children(target, &l, found, depth + 1));
        }
        self.element(target, &moved, found, depth + 1)
    }

    fn shape(
        &mut self,
        node: Node<'a, 'i>,
        look: &Look,
        marks: &mut Vec<Mark>,
    ) -> Result<(), ReadError> {
        // A straight line has no inside.
        let fill = look.fill_ink().filter(|_| !node.has_tag_name((SVG, "line")));
        let stroke = look.stroke_ink();
        if fill.is_none() && stroke.is_none() {
            return Ok(());
        }
        let paths = outline::outline(node, look.transform)?;
        let curves = paths.iter().map(|p| p.curves.len()).sum();
        self.curves = counted(self.curves, curves, MOST_CURVES, "curves")?;
        if paths.is_empty() {
            return Ok(());
        }
        let role = look.role;
        if let Some(ink) = fill {
            marks.push(Mark::Fill(Fill { paths: paths.clone(), role, ink }));
        }
        if let Some(ink) = stroke {
            marks.push(Mark::Stroke(Stroke { paths, width: look.width_on_sheet(), role, ink }));
        }
        Ok(())
    }
}

/// A count with `more` added, as long as it stays within `limit`.
fn counted(
    count: usize,
    more: usize,
    limit: usize,
    what: &'static str,
) -> Result<usize, ReadError> {
    let count = count.saturating_add(more);
    if count <= limit { Ok(count) } else { Err(ReadError::TooMuch { what, limit }) }
}

/// An item's facts without its marks. A group that lost its id gets one from its kind and place in
/// the file.
fn item_facts(node: Node<'_, '_>, index: usize) -> Result<Item, ReadError> {
    let text = node.attribute("data-kind").unwrap_or_default();
    let kind: ItemKind =
        text.parse().map_err(|()| attribute_error(node, "data-kind", text, "a kind of item"))?;
    let id = node.attribute("id").map_or_else(|| format!("{kind}.{index}"), str::to_owned);
    Ok(Item {
        id: ItemId::new(id),
        kind,
        view: node.attribute("data-view").map(ViewId::new),
        feature: node.attribute("data-feature").map(str::to_owned),
        value: value_of(node)?,
        marks: Vec::new(),
    })
}

/// What a dimension, or one text of a set of dimensions, says.
fn value_of(node: Node<'_, '_>) -> Result<Option<Value>, ReadError> {
    let value = number_of(node, "data-value")?;
    let limits = (number_of(node, "data-lower")?, number_of(node, "data-upper")?);
    let unit = match node.attribute("data-unit") {
        Some("deg") => ValueUnit::Degree,
        None | Some("mm") => ValueUnit::Millimetre,
        Some(other) => return Err(attribute_error(node, "data-unit", other, "mm or deg")),
    };
    Ok(value.map(|nominal| Value { nominal, limits, unit }))
}

#[cfg(test)]
mod tests;
