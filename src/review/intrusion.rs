//! Annotations that stand in a view that is not theirs.

use std::collections::BTreeMap;

use super::ink::Class;
use super::page::Page;
use super::shape::{Polygon, Shape};
use crate::geom::{Rect, Sheet};
use crate::ident::ViewId;

/// How an annotation of one view stands in the part's box of another.
pub(crate) struct Intrusion<'a> {
    /// The annotation's place in the scene.
    pub(crate) item: usize,
    /// The view that it stands in.
    pub(crate) view: &'a ViewId,
    /// Whether a text of it does, and not only lines.
    pub(crate) with_text: bool,
    /// How deep it reaches in, mm.
    pub(crate) depth: f64,
    /// Where.
    pub(crate) area: Rect<Sheet>,
}

/// Every annotation that reaches into the box of a part's edges in another view.
pub(crate) fn intrusions<'a>(page: &Page<'a>) -> Vec<Intrusion<'a>> {
    let mut found: BTreeMap<(&ViewId, usize), Intrusion<'a>> = BTreeMap::new();
    for (view, ink) in &page.views {
        let Some(part) = ink.part else { continue };
        let within = Shape::Area(Polygon::new(part.corners().to_vec()));
        for piece in page.ink.near(part).filter(|p| p.kind.is_annotation()) {
            let foreign = page.item(piece).view.as_ref().is_some_and(|own| own != *view);
            let depth = if foreign { piece.shape.depth(&within) } else { 0.0 };
            if depth <= page.limits().overlap_depth {
                continue;
            }
            let area = piece.bounds.intersection(&part).unwrap_or(piece.bounds);
            let with_text = piece.class == Class::Text;
            let new = Intrusion { item: piece.item, view, with_text, depth, area };
            found.entry((view, piece.item)).and_modify(|old| old.take(&new)).or_insert(new);
        }
    }
    found.into_values().collect()
}

impl Intrusion<'_> {
    fn take(&mut self, other: &Self) {
        if other.with_text && !self.with_text {
            self.with_text = true;
            (self.depth, self.area) = (other.depth, other.area);
        } else if other.with_text == self.with_text {
            self.depth = self.depth.max(other.depth);
            self.area = self.area.union(other.area);
        }
    }
}
