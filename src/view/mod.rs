//! Pictures of the part: edges by line class, and the places that annotations hold on to.
//!
//! Takes a resolved [`ViewSpec`](crate::spec::ViewSpec); gives a [`View`] in view space (mm of the
//! part, y up): edges with their class after the precedence of coinciding lines, features that get
//! centre lines, regions to hatch, and named anchors. [`on_paper`] then draws it at a
//! scale: what depends on paper (dashes, overshoots, hatch spacing) is decided there and nowhere
//! else. Later stages do not ask where edges came from.

mod agreement;
mod anchor;
mod centre;
mod centre_lines;
mod coincide;
mod crossing;
mod dash;
mod drawn;
mod edge;
mod figure;
mod hatch;
mod paper;
mod path_data;
mod places;
mod precedence;
mod repeat;
#[cfg(test)]
mod sample;

pub use agreement::{AGREEMENT, Extent, SizeConflict, contradictions};
pub use anchor::{Anchor, AnchorError, Measured, Size};
pub use drawn::drawn_view;
pub use edge::{CentreFeature, Edge, Region, View};
pub use paper::{PaperCentre, PaperEdge, PaperHatch, PaperView, on_paper};
