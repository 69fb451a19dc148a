//! The drawing as strokes, fills and text at fixed places of the sheet.
//!
//! What a scene guarantees, so that renderers and checks can be plain folds over it:
//!
//! - Every coordinate is in sheet mm, y down; nothing is moved, scaled or wrapped any more.
//! - Dashes, gaps for text and interruptions are separate paths: a renderer knows no dash pattern.
//! - Items stand in drawing order (outlines before annotations), each with an id that is unique in
//!   the drawing, its kind and where it comes from.
//! - Text is measured: each [`PlacedText`] holds its glyphs with their places.
//! - It knows nothing of SVG, pixels or pages beyond its own sheet.
//!
//! [`read`](crate::scene::read_svg) brings an issued SVG back as a scene, so that it can be checked
//! without its spec.

mod item;
mod listing;
mod read;

pub use item::{
    Fill, Ink, Item, ItemKind, Mark, PlacedText, Role, Scene, SheetFacts, Stroke, Value, ValueUnit,
    filled, straight,
};
pub use listing::listing;
pub use read::{FilePlace, ReadError, SHEET_NAMESPACE, read_svg};
