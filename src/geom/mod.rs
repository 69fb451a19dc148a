//! Points, transforms and curves, typed by the space they live in.
//!
//! Three spaces never mix: [`View`] space (mm of the part, y up), [`Paper`] space (mm of paper
//! around one view's origin, y down) and [`Sheet`] space (mm of paper from the sheet's upper left
//! corner, y down, as in SVG). A [`Point<View>`](Point) cannot be added to a
//! [`Vector<Sheet>`](Vector): the compiler refuses. Only a [`Placement`] or a
//! [`Shift`] leads from one space to the next.
//!
//! Scalars are `f64` millimetres of the space that the surrounding type names; angles are degrees,
//! counter-clockwise as the reader sees them in every space.
//! The numeric work (arc lengths, Bézier bounds) is done by [kurbo].

mod curve;
mod extreme;
mod hit;
mod point;
mod rect;
mod transform;

pub use curve::{Arc, Cubic, Curve, EllipticArc, Line, Path};
pub use hit::{Crossing, distance_line_line, distance_line_rect, line_crossing, overlap_length};
pub use point::{Paper, Point, Sheet, Space, Vector, View};
pub use rect::{Quad, Rect};
pub use transform::{Placement, Shift};

/// Two lengths that differ by less than this are drawn as one: a tenth of a micrometre, far below
/// what a plotter or a pixel can show and far above rounding in f64 at sheet sizes.
pub const COINCIDENT: f64 = 1e-4;

/// Whether two coordinates or lengths in mm are the same place for drawing purposes.
#[must_use]
pub fn same(a: f64, b: f64) -> bool {
    (a - b).abs() <= COINCIDENT
}
