//! Views of one part that contradict each other's sizes.

use super::edge::View;
use crate::spec::Direction;

/// An extent that two views must share.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Extent {
    /// Along x of the part.
    Width,
    /// Along z of the part.
    Height,
    /// Along y of the part.
    Depth,
}

/// Two views that show one extent of a part at different lengths.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SizeConflict {
    /// Places of the two views in the list.
    pub views: (usize, usize),
    /// What they show.
    pub extent: Extent,
    /// Its length in each, mm of the part.
    pub lengths: (f64, f64),
}

/// Extents may differ by this much, mm of the part: what a person loses in rounding.
const AGREE: f64 = 0.01;

/// Every pair of orthographic views of one part that disagree, each extent once per pair with the
/// first view that shows it.
#[must_use]
pub fn contradictions(views: &[View]) -> Vec<SizeConflict> {
    let mut conflicts = Vec::new();
    for extent in [Extent::Width, Extent::Height, Extent::Depth] {
        for (j, view) in views.iter().enumerate() {
            let Some(length) = shown(view, extent) else { continue };
            let first = views[..j]
                .iter()
                .enumerate()
                .filter(|(_, v)| v.part == view.part)
                .find_map(|(i, v)| shown(v, extent).map(|l| (i, l)));
            if let Some((i, other)) = first
                && (other - length).abs() > AGREE
            {
                conflicts.push(SizeConflict { views: (i, j), extent, lengths: (other, length) });
            }
        }
    }
    conflicts
}

/// The length of an extent in a view; `None` if the view does not show it. Directions as in the
/// table of part axes: x to the right, y away from the viewer of the front view, z up.
fn shown(view: &View, extent: Extent) -> Option<f64> {
    // A view at a scale of its own shows a piece of the part.
    if view.scale.is_some() {
        return None;
    }
    let (width, height) = (view.bounds.width(), view.bounds.height());
    let (across, up) = match view.from {
        Direction::Front | Direction::Rear => (Extent::Width, Extent::Height),
        Direction::Top | Direction::Bottom => (Extent::Width, Extent::Depth),
        Direction::Left | Direction::Right => (Extent::Depth, Extent::Height),
        Direction::Iso => return None,
    };
    if across == extent { Some(width) } else { (up == extent).then_some(height) }
}
