//! Files of a sheet: plain folds over the [scene](crate::scene).
//!
//! Takes a [`Scene`](crate::scene::Scene); gives the text of its SVG, and from that very text the
//! pixels of its PNG, so that the two cannot differ. A renderer decides nothing about the drawing:
//! it moves, breaks and measures nothing, and knows no dash pattern, no arrowhead and no wording.
//! What it does decide is how the file says it: ids of shared glyphs, grouping of attributes,
//! rounding of numbers, caps where separate strokes meet.
//!
//! [`read_svg`](crate::scene::read_svg) is the way back from the SVG.

mod base64;
mod number;
mod path_data;
mod png;
mod svg;
mod text;

pub use png::{Colour, PngFacts, RasterError, png};
pub use svg::{TextMode, svg, svg_with};
