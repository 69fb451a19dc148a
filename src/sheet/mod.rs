//! Everything on a sheet that is not a view or an annotation.
//!
//! Takes the drawing's standing data, what is known of the sheet (scale, place among the sheets),
//! the style and the sheet size; gives [`Furniture`]: frame with zones and centring marks, title
//! block with projection sign, revision table and general notes as scene items, and the areas that
//! views must keep out of. Where cells stand and how high their text is comes from the style; what
//! they say comes from the spec and nowhere else: no clock, no name and no approval is filled in.
//!
//! A text that has no room is drawn smaller, then on several lines, and at last cut, never spilt
//! or squeezed; each one that was cut is a [`Misfit`], from which a finding is made.

mod entry;
mod fit;
mod frame;
mod misfit;
mod notes;
mod projection_sign;
mod revision_table;
mod rulings;
mod title_block;
mod zone;

pub use entry::{Entry, EntryText, cell_of, entry};
pub use misfit::{Extent, Misfit, Spot};
pub use zone::zone;

use crate::geom::{Point, Rect, Sheet};
use crate::ident::ItemId;
use crate::scene::Item;
use crate::spec::Drawing;
use crate::style::{FormatSpec, FrameSpec, Style};
use crate::units::Scale;

/// What is known of a sheet besides the spec.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FurnitureFacts {
    /// Main scale; `None` where no scale is common to the views.
    pub scale: Option<Scale>,
    /// This sheet's place among the drawing's sheets, from 1.
    pub index: u32,
    /// How many sheets the drawing has.
    pub count: u32,
}

/// What stands on a sheet before any view does.
#[derive(Clone, Debug, PartialEq)]
pub struct Furniture {
    /// Frame, title block, projection sign, revision table and notes, in drawing order.
    pub items: Vec<Item>,
    /// The drawing space: its sides are the middles of the frame line.
    pub frame: Rect<Sheet>,
    /// Areas that views must keep out of.
    pub blocks: Vec<Block>,
    /// Texts that had to be cut.
    pub misfits: Vec<Misfit>,
}

/// An area of the drawing space that is taken.
#[derive(Clone, Debug, PartialEq)]
pub struct Block {
    /// What takes it.
    pub item: ItemId,
    /// The area, of lines to their middles and of text to its ink.
    pub area: Rect<Sheet>,
}

/// What one piece of furniture comes to.
struct Made {
    items: Vec<Item>,
    block: Block,
    misfits: Vec<Misfit>,
}

/// What every piece of furniture is made from.
#[derive(Clone, Copy)]
struct Job<'a> {
    drawing: &'a Drawing,
    facts: &'a FurnitureFacts,
    style: &'a Style,
    format: &'a FormatSpec,
    frame: Rect<Sheet>,
}

/// Frame, title block, revision table and notes of one sheet.
///
/// Revision table and notes stand on the first sheet alone. A drawing without revisions has no
/// table, and one without notes no heading.
#[must_use]
pub fn furniture(
    drawing: &Drawing,
    facts: &FurnitureFacts,
    style: &Style,
    format: &FormatSpec,
) -> Furniture {
    let frame = drawing_space(format, &style.frame);
    let job = Job { drawing, facts, style, format, frame };
    let title_block = title_block::title_block(&job);
    let table = job.is_first().then(|| revision_table::revision_table(&job, &title_block.block));
    let table = table.flatten();
    let notes = job
        .is_first()
        .then(|| notes::notes(&job, title_block.block.area, table.as_ref().map(|t| t.block.area)));
    let pieces: Vec<Made> =
        [Some(title_block), table, notes.flatten()].into_iter().flatten().collect();

    let areas: Vec<_> = pieces.iter().map(|p| p.block.area).collect();
    let mut all = Furniture {
        items: vec![frame::frame(&job, &areas)],
        frame,
        blocks: Vec::new(),
        misfits: Vec::new(),
    };
    for piece in pieces {
        all.items.extend(piece.items);
        all.blocks.push(piece.block);
        all.misfits.extend(piece.misfits);
    }
    all
}

/// The drawing space of a sheet: what its margins leave.
#[must_use]
pub fn drawing_space(format: &FormatSpec, spec: &FrameSpec) -> Rect<Sheet> {
    Rect::new(
        Point::new(spec.left, spec.top),
        Point::new(format.width - spec.right, format.height - spec.bottom),
    )
}

impl Job<'_> {
    fn is_first(&self) -> bool {
        self.facts.index <= 1
    }

    /// The id of a piece of furniture: ids are unique in a drawing, so further sheets add their
    /// number.
    fn id(&self, name: &str) -> ItemId {
        if self.is_first() {
            ItemId::new(name)
        } else {
            ItemId::new(format!("{name}-{}", self.facts.index))
        }
    }
}

#[cfg(test)]
mod testing;
#[cfg(test)]
mod tests;
