//! One drafting practice as data: line widths, lettering, arrowheads, spacing, formats.
//!
//! Takes the text of a style file; gives a [`Style`]. No drafting number stands in code: what a
//! checker could argue about is a key of a style. Lengths are mm of paper, angles degrees, and
//! keys ending in `_h` are multiples of the lettering height of the sheet's group. A style is
//! read once and then only looked at.

#[cfg(test)]
mod against_standards;
mod builtin;
mod cost;
mod format;
mod number;
mod review;
mod sections;

pub use builtin::{builtin, builtin_names, builtin_text};
pub use cost::{Costs, GroupCosts, PairCosts, UnaryCosts};
pub use format::{
    Cell, CellKey, FormatSpec, FrameSpec, LinePitch, RevisionColumn, RevisionKey,
    RevisionTableSpec, SheetSide, SignSpec, TitleBlockSpec, ZoneSpec,
};
pub use review::ReviewSpec;
pub use sections::{
    ArrowSpec, CentreSpec, ClearanceSpec, DashSet, DashSpec, DimensionSpec, Group, HatchSpec,
    LeaderSpec, NumberSpec, Projection, SheetLook, Style, ToleranceLook, ViewSpacing, WordSpec,
};
