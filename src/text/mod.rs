//! Lettering: the bundled font, the drawn symbols, and lines of text measured once.
//!
//! Takes a text and a letter height; gives a [`Run`]: which glyph or symbol stands where, how far
//! the run advances and where its ink is, in mm. Every later stage (layout, checks, renderers)
//! uses that one measurement, so text looks and measures alike everywhere.
//!
//! The font has no layout tables, so a run's width is the sum of its glyphs' advances. Characters
//! such as `⌀` or `↧` are not taken from the font but drawn as strokes in proportion to the letter
//! height ([`Symbol`]).

mod lettering;
mod run;
mod symbol;

pub use lettering::{FAMILY, FONT_TTF, FONT_WOFF2, GlyphId, Lettering};
pub use run::{Piece, PieceKind, Run};
pub use symbol::{Symbol, SymbolInk};
