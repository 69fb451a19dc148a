//! Where everything goes: sheet size, scale, views on the sheet, annotations around the views.
//!
//! Takes views and annotations; gives a [`Layout`]: the views on paper where they stand, and for
//! each annotation the one drawing that was chosen among its candidates. First each view's
//! annotations are placed as if it were alone; the room that they take decides how the views are
//! arranged and, where the spec leaves them open, scale and sheet size. Then all annotations are
//! placed once more among everything else on the sheet.
//!
//! The choice knows costs and no meaning: see `choice`. It is deterministic: integer
//! costs, a total order on ties, bounds in rounds and never in time.

mod arrange;
mod choice;
mod conflict;
mod grid;
mod ink;
mod sheet_choice;
mod surroundings;

pub use sheet_choice::{LayoutError, Placed, PlacedView, lay_out};

use crate::geom::Sheet;
use crate::scene::Item;
use crate::sheet::Misfit;
use crate::style::FormatSpec;
use crate::units::Scale;

/// A drawing with everything in its place.
#[derive(Clone, Debug)]
pub struct Layout {
    /// The sheet's size.
    pub format: FormatSpec,
    /// The main scale.
    pub scale: Scale,
    /// The views, in the order of the drawing.
    pub views: Vec<PlacedView>,
    /// The annotations, in the order of the drawing.
    pub annotations: Vec<Placed>,
    /// Frame, title block, tables, notes.
    pub furniture: Vec<Item>,
    /// Texts that did not fit their cells.
    pub misfits: Vec<Misfit>,
    /// Inside of the frame.
    pub frame: crate::geom::Rect<Sheet>,
}
