//! One sheet with what its rules ask for again and again.

use std::collections::BTreeMap;

use super::ink::{InkIndex, Piece};
use crate::geom::{Path, Rect, Sheet};
use crate::ident::ViewId;
use crate::scene::{Item, ItemKind, Mark, Scene};
use crate::style::{Group, ReviewSpec, Style};

/// A sheet, its ink, its views and the style that it is judged by.
pub(crate) struct Page<'a> {
    /// The sheet.
    pub(crate) scene: &'a Scene,
    /// The practice that it shall follow.
    pub(crate) style: &'a Style,
    /// The part of the style that goes with the sheet's size.
    pub(crate) group: &'a Group,
    /// All its ink.
    pub(crate) ink: InkIndex<'a>,
    /// The middle of the frame's line.
    pub(crate) frame: Rect<Sheet>,
    /// Its views, by id.
    pub(crate) views: BTreeMap<&'a ViewId, ViewInk>,
}

/// Where a view's ink is.
#[derive(Clone, Debug, Default)]
pub(crate) struct ViewInk {
    /// Box of the edges of the part: outlines, hidden and smooth edges.
    pub(crate) part: Option<Rect<Sheet>>,
    /// Box of everything: edges, centre lines, annotations, label.
    pub(crate) all: Option<Rect<Sheet>>,
    /// Places in the scene of its items.
    pub(crate) items: Vec<usize>,
}

impl<'a> Page<'a> {
    /// Prepares a sheet for its rules.
    pub(crate) fn new(scene: &'a Scene, style: &'a Style) -> Self {
        Self {
            scene,
            style,
            group: style.group_of(&scene.sheet.format),
            ink: InkIndex::new(scene),
            frame: frame_of(scene, style),
            views: views_of(scene),
        }
    }

    /// The sheet's place among the drawing's sheets, from 1.
    pub(crate) fn number(&self) -> u32 {
        self.scene.sheet.index
    }

    /// The limits that only checking needs.
    pub(crate) fn limits(&self) -> &'a ReviewSpec {
        &self.style.review
    }

    /// The item of a piece of ink.
    pub(crate) fn item(&self, piece: &Piece) -> &'a Item {
        &self.scene.items[piece.item]
    }

    /// Whether two pieces of ink meet, and are not only drawn side by side.
    pub(crate) fn overlap(&self, a: &Piece, b: &Piece) -> bool {
        a.bounds.distance(&b.bounds) <= 0.0 && a.shape.depth(&b.shape) > self.limits().overlap_depth
    }
}

/// Whether the item is part of the sheet's own furniture: frame, title block, tables, and signs
/// that belong to no view.
pub(crate) fn is_furniture(item: &Item) -> bool {
    match item.kind {
        ItemKind::Frame | ItemKind::TitleBlock | ItemKind::Table => true,
        ItemKind::Symbol => item.view.is_none(),
        _ => false,
    }
}

/// Whether items of this kind are edges of the part.
pub(crate) fn is_edge(kind: ItemKind) -> bool {
    matches!(kind, ItemKind::Outline | ItemKind::Hidden | ItemKind::Smooth)
}

/// Whether items of this kind are lines of a picture rather than annotations or furniture.
pub(crate) fn is_picture(kind: ItemKind) -> bool {
    match kind {
        ItemKind::Outline
        | ItemKind::Hidden
        | ItemKind::Smooth
        | ItemKind::Centre
        | ItemKind::Hatch
        | ItemKind::CuttingLine
        | ItemKind::Break
        | ItemKind::Adjacent
        | ItemKind::Construction => true,
        ItemKind::Dimension
        | ItemKind::Leader
        | ItemKind::Callout
        | ItemKind::Symbol
        | ItemKind::Balloon
        | ItemKind::ViewLabel
        | ItemKind::Table
        | ItemKind::TitleBlock
        | ItemKind::Frame
        | ItemKind::Note
        | ItemKind::Finding => false,
    }
}

fn views_of(scene: &Scene) -> BTreeMap<&ViewId, ViewInk> {
    let mut views: BTreeMap<&ViewId, ViewInk> = BTreeMap::new();
    for (i, item) in scene.items.iter().enumerate() {
        let (Some(id), Some(b)) = (&item.view, item.bounds()) else { continue };
        let view = views.entry(id).or_default();
        let grow = |old: &mut Option<Rect<Sheet>>| *old = Some(old.map_or(b, |o| o.union(b)));
        grow(&mut view.all);
        if is_edge(item.kind) {
            grow(&mut view.part);
        }
        view.items.push(i);
    }
    views
}

/// The frame: the smallest closed outline of the frame's item around most of the sheet, or where
/// none is drawn the style's margins.
fn frame_of(scene: &Scene, style: &Style) -> Rect<Sheet> {
    let sheet = scene.sheet.area();
    let size = |r: &Rect<Sheet>| r.width() * r.height();
    let outlines = scene
        .items
        .iter()
        .filter(|i| i.kind == ItemKind::Frame)
        .flat_map(|i| &i.marks)
        .filter_map(|m| match m {
            Mark::Stroke(s) => Some(s),
            Mark::Fill(_) | Mark::Text(_) => None,
        })
        .flat_map(|s| &s.paths)
        .filter(|p| p.closed || p.meets_itself())
        .filter_map(Path::bounds);
    let drawn = outlines
        .filter(|r| r.contains(sheet.centre()) && size(r) > size(&sheet) / 2.0)
        .min_by(|a, b| size(a).total_cmp(&size(b)));
    drawn.unwrap_or_else(|| {
        let f = &style.frame;
        Rect::from_sides(f.left, f.top, sheet.max.x - f.right, sheet.max.y - f.bottom)
    })
}
