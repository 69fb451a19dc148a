//! Whether the views of a part agree on its size.
//!
//! Takes finished views; gives each pair of orthographic views of one part whose common extent
//! differs: width in front, rear, top and bottom view, height in front, rear and side views, depth
//! in top, bottom and side views. Sections and views with a break may show less than the whole
//! part, never more. Isometric views, views without sharp edges and views at a scale of their own
//! (pieces of the part, drawn larger) say nothing.

use std::fmt;

use super::edge::View;
use crate::ident::{PartId, ViewId};
use crate::spec::{Direction, LineClass};

/// Extents that differ by no more than this agree, mm of the part: drawn coordinates are often
/// rounded to hundredths.
pub const AGREEMENT: f64 = 0.01;

/// A direction of the part.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Extent {
    /// Along the part's x.
    Width,
    /// Along the part's z.
    Height,
    /// Along the part's y.
    Depth,
}

impl fmt::Display for Extent {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Self::Width => "width",
            Self::Height => "height",
            Self::Depth => "depth",
        })
    }
}

/// Two views that contradict each other.
#[derive(Clone, Debug, PartialEq)]
pub struct SizeConflict {
    /// The part that both show.
    pub part: PartId,
    /// In which direction of the part.
    pub extent: Extent,
    /// The view that comes first.
    pub first: ViewId,
    /// What it shows, mm.
    pub first_length: f64,
    /// The view that says otherwise.
    pub second: ViewId,
    /// What that one shows, mm.
    pub second_length: f64,
}

/// Views whose sizes contradict those of the first whole view that shows the same extent, in the
/// order of `views`.
#[must_use]
pub fn contradictions(views: &[&View]) -> Vec<SizeConflict> {
    let seen: Vec<Seen<'_>> = views.iter().flat_map(|view| extents_of(view)).collect();
    let mut conflicts = Vec::new();
    for (i, second) in seen.iter().enumerate() {
        let same =
            |other: &Seen<'_>| other.view.part == second.view.part && other.extent == second.extent;
        let Some(first) = seen.iter().position(|s| same(s) && s.is_whole) else { continue };
        let is_pair = first < i || (!second.is_whole && first != i);
        if is_pair && seen[first].contradicts(second) {
            conflicts.push(seen[first].conflict(second));
        }
    }
    conflicts
}

/// One extent as one view shows it.
struct Seen<'a> {
    view: &'a View,
    extent: Extent,
    length: f64,
    is_whole: bool,
}

impl Seen<'_> {
    /// For a whole view: whether `other` shows another size, or a part of it shows more.
    fn contradicts(&self, other: &Self) -> bool {
        let more = other.length - self.length;
        more > AGREEMENT || (other.is_whole && more < -AGREEMENT)
    }

    fn conflict(&self, second: &Self) -> SizeConflict {
        SizeConflict {
            part: self.view.part.clone(),
            extent: self.extent,
            first: self.view.id.clone(),
            first_length: self.length,
            second: second.view.id.clone(),
            second_length: second.length,
        }
    }
}

fn extents_of(view: &View) -> Vec<Seen<'_>> {
    let has = |class| view.edges.iter().any(|e| e.class == class);
    let is_outline = has(LineClass::Visible) || has(LineClass::Hidden) || has(LineClass::Cut);
    let speaks = is_outline && view.scale.is_none();
    let (Some((across, up)), true) = (axes_of(view.from), speaks) else { return Vec::new() };
    let is_whole = !view.is_section && !has(LineClass::Break);
    let seen = |extent, length| Seen { view, extent, length, is_whole };
    vec![seen(across, view.bounds.width()), seen(up, view.bounds.height())]
}

/// What a view shows to the right and upwards.
fn axes_of(from: Direction) -> Option<(Extent, Extent)> {
    match from {
        Direction::Front | Direction::Rear => Some((Extent::Width, Extent::Height)),
        Direction::Top | Direction::Bottom => Some((Extent::Width, Extent::Depth)),
        Direction::Right | Direction::Left => Some((Extent::Depth, Extent::Height)),
        Direction::Iso => None,
    }
}

#[cfg(test)]
mod tests {
    use super::super::drawn_view;
    use super::super::sample::*;
    use super::*;
    use crate::source::Diagnostics;
    use crate::spec::ViewSpec;

    fn view_of(spec: &ViewSpec) -> View {
        drawn_view(spec, &mut Diagnostics::default()).expect("sound")
    }

    fn block(id: &str, from: Direction, width: f64, height: f64) -> View {
        view_of(&spec(id, from, vec![rectangle("block", 0.0, 0.0, width, height)]))
    }

    #[test]
    fn neighbours_that_differ_are_named_with_both_sizes() {
        let views = [
            block("front", Direction::Front, 80.0, 40.0),
            block("top", Direction::Top, 80.0, 25.0),
            block("side", Direction::Left, 26.0, 40.0),
        ];
        let found = contradictions(&views.iter().collect::<Vec<_>>());
        let [c] = found.as_slice() else { panic!("{found:?}") };
        assert_eq!((c.extent, c.first.as_str(), c.second.as_str()), (Extent::Depth, "top", "side"));
        assert!((c.first_length - 25.0).abs() < 1e-9 && (c.second_length - 26.0).abs() < 1e-9);
    }

    #[test]
    fn rounding_to_hundredths_is_no_contradiction() {
        let views =
            [block("a", Direction::Front, 80.0, 40.0), block("b", Direction::Bottom, 80.009, 9.0)];
        assert!(contradictions(&views.iter().collect::<Vec<_>>()).is_empty());
    }

    #[test]
    fn a_section_may_show_less_but_not_more() {
        let cut = |width| {
            let mut s = spec("cut", Direction::Front, vec![rectangle("b", 0.0, 0.0, width, 40.0)]);
            s.is_section = true;
            view_of(&s)
        };
        let front = block("front", Direction::Front, 80.0, 40.0);
        assert!(contradictions(&[&cut(60.0), &front]).is_empty());
        let found = contradictions(&[&cut(90.0), &front]);
        assert_eq!(found.len(), 1);
        assert_eq!(found[0].second.as_str(), "cut");
    }

    #[test]
    fn views_of_different_parts_have_nothing_to_agree_on() {
        let mut other = block("b", Direction::Top, 70.0, 9.0);
        other.part = PartId::new("lid");
        assert!(contradictions(&[&block("a", Direction::Front, 80.0, 40.0), &other]).is_empty());
    }
}
