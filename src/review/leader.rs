//! Leaders as drawn: slanted strokes to the target, and the landing at the text.

use super::ink::{Class, Piece};
use super::page::Page;
use crate::geom::{Line, Point, Sheet};
use crate::scene::Role;

/// The leader strokes of one item.
pub(crate) struct Leader<'p> {
    /// Its item's place in the scene.
    pub(crate) item: usize,
    /// The strokes from target to landing.
    pub(crate) shafts: Vec<&'p Line<Sheet>>,
    /// The ends of shafts that carry an arrowhead or a dot.
    pub(crate) tips: Vec<Point<Sheet>>,
}

/// Every leader of the sheet, in drawing order.
pub(crate) fn leaders<'p>(page: &'p Page<'_>) -> Vec<Leader<'p>> {
    let place = page.limits().same_place;
    let groups = page.ink.pieces().chunk_by(|a, b| a.item == b.item);
    groups.filter_map(|of_item| leader(of_item, place)).collect()
}

fn leader(pieces: &[Piece], place: f64) -> Option<Leader<'_>> {
    let strokes: Vec<&Line<Sheet>> = pieces
        .iter()
        .filter(|p| p.class == Class::Line && p.straight && p.role == Some(Role::Leader))
        .filter_map(Piece::line)
        .filter(|l| l.length() > place)
        .collect();
    let ends_in_termination = |p: Point<Sheet>| {
        let mut terminations = pieces.iter().filter(|t| t.class == Class::Termination);
        terminations.any(|t| {
            t.bounds.grown(place).contains(p)
                && t.polygon().is_none_or(|o| o.distance_to(&Line::new(p, p)) <= place)
        })
    };
    let is_landing = |l: &Line<Sheet>| {
        let goes_on = strokes.iter().any(|o| !std::ptr::eq(*o, l) && share_an_end(o, l, place));
        let is_level = (l.from.y - l.to.y).abs() <= place;
        is_level && goes_on && ![l.from, l.to].into_iter().any(ends_in_termination)
    };
    let shafts: Vec<_> = strokes.iter().copied().filter(|l| !is_landing(l)).collect();
    let ends = shafts.iter().flat_map(|l| [l.from, l.to]);
    let tips = ends.filter(|p| ends_in_termination(*p)).collect();
    let item = pieces.first()?.item;
    (!shafts.is_empty()).then_some(Leader { item, shafts, tips })
}

fn share_an_end(a: &Line<Sheet>, b: &Line<Sheet>, place: f64) -> bool {
    [a.from, a.to].iter().any(|p| p.distance(b.from) <= place || p.distance(b.to) <= place)
}

impl Leader<'_> {
    /// Length from target to landing in mm; the longest of several leaders to one text.
    pub(crate) fn length(&self) -> f64 {
        let lengths = self.shafts.iter().map(|l| l.length());
        if self.tips.len() > 1 { lengths.fold(0.0, f64::max) } else { lengths.sum() }
    }

    /// How often it bends before its landing; several leaders to one text do not count.
    pub(crate) fn bends(&self) -> usize {
        if self.tips.len() > 1 { 0 } else { self.shafts.len().saturating_sub(1) }
    }
}
