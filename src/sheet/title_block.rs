//! The title block: cells in the lower right corner, with a company's own fields on top.
//!
//! Fields are those of ISO 7200:2004 and what a part drawing adds; where each stands is the style's.

use super::entry::{Entry, EntryText, entry};
use super::fit::{Fitted, Room, Slot, fit, heights_from};
use super::projection_sign::projection_sign;
use super::rulings::between_cells;
use super::{Block, Extent, Job, Made, Misfit, Spot};
use crate::geom::{COINCIDENT, Path, Point, Rect, Sheet, same};
use crate::ident::ItemId;
use crate::scene::{Item, ItemKind, Mark, PlacedText, Stroke};
use crate::style::TitleBlockSpec;

/// A cell at its place.
struct PlacedCell {
    area: Rect<Sheet>,
    name: String,
    name_spot: Spot,
    entry: Entry,
    entry_spot: Spot,
    /// Text height of the entry where it fits.
    text: f64,
    centred: bool,
}

/// The title block of a sheet.
pub(super) fn title_block(job: &Job<'_>) -> Made {
    let spec = &job.style.title_block;
    let id = job.id("title-block");
    let corner = job.frame.max;
    let block = Rect::new(Point::new(corner.x - spec.width, corner.y - spec.height), corner);
    let own = OwnFields::placed(job, &block);
    let area = block.union(own.area);

    let cells: Vec<PlacedCell> = standing_cells(job, &block).chain(own.cells).collect();
    let mut marks = lines(&cells, job, &block, &area);
    let mut misfits: Vec<Misfit> = own.shortage.into_iter().collect();
    let mut items = Vec::new();
    for cell in &cells {
        let (name, cut_name) = cell.name(job, &id);
        marks.extend(name);
        misfits.extend(cut_name);
        match &cell.entry.text {
            EntryText::Text(text) => {
                let (lines, cut) = cell.entry(text, spec, &id);
                marks.extend(lines);
                misfits.extend(cut);
            }
            EntryText::ProjectionSign => items.push(cell.sign(job)),
        }
    }
    items.insert(0, Item::new(id.clone(), ItemKind::TitleBlock, marks));
    Made { items, block: Block { item: id, area }, misfits }
}

/// The style's cells, with what they say.
fn standing_cells<'a>(
    job: &'a Job<'_>,
    block: &Rect<Sheet>,
) -> impl Iterator<Item = PlacedCell> + use<'a> {
    let origin = block.min;
    job.style.title_block.cell.iter().map(move |cell| {
        let corner = Point::new(origin.x + cell.x, origin.y + cell.y);
        PlacedCell {
            area: Rect::new(corner, Point::new(corner.x + cell.width, corner.y + cell.height)),
            name: cell.name.clone(),
            name_spot: Spot::FieldName(cell.key),
            entry: entry(cell.key, job.drawing, job.facts, job.style, job.format),
            entry_spot: Spot::Field(cell.key),
            text: cell.text,
            centred: cell.centred,
        }
    })
}

/// A company's own fields in rows on top of the block.
struct OwnFields {
    cells: Vec<PlacedCell>,
    area: Rect<Sheet>,
    /// Set if there are more of them than the drawing space has room for.
    shortage: Option<Misfit>,
}

impl OwnFields {
    fn placed(job: &Job<'_>, block: &Rect<Sheet>) -> Self {
        let spec = &job.style.title_block;
        let fields = &job.drawing.sheet.own_fields;
        let columns = spec.own_columns.max(1) as usize;
        let needed = fields.len().div_ceil(columns);
        let most = ((block.min.y - job.frame.min.y) / spec.own_row).floor().max(0.0) as usize;
        let rows = needed.min(most);
        let top = block.min.y - rows as f64 * spec.own_row;
        let area = Rect::new(Point::new(block.min.x, top), Point::new(block.max.x, block.min.y));
        let shown = fields.len().min(rows * columns);

        let cells = fields.iter().take(shown).enumerate().map(|(i, (name, text))| PlacedCell {
            area: own_area(i, shown, columns, &area, spec.own_row),
            name: name.clone(),
            name_spot: Spot::OwnName(i + 1),
            entry: Entry {
                text: EntryText::Text(text.format(&job.style.number)),
                span: Some(job.drawing.sheet.span),
            },
            entry_spot: Spot::OwnField(i + 1),
            text: spec.own_text,
            centred: false,
        });
        let shortage = fields.get(shown).map(|(name, _)| Misfit {
            item: job.id("title-block"),
            spot: Spot::OwnField(shown + 1),
            text: name.clone(),
            place: area,
            extent: Extent::Height,
            needed: needed as f64 * spec.own_row,
            available: area.height(),
            span: Some(job.drawing.sheet.span),
        });
        Self { cells: cells.collect(), area, shortage }
    }
}

/// The area of own field `i` of `count`: columns of one width, and the last field takes what is
/// left of its row.
fn own_area(i: usize, count: usize, columns: usize, rows: &Rect<Sheet>, row: f64) -> Rect<Sheet> {
    let width = rows.width() / columns as f64;
    let left = rows.min.x + (i % columns) as f64 * width;
    let top = rows.min.y + (i / columns) as f64 * row;
    let right = if i + 1 == count { rows.max.x } else { left + width };
    Rect::new(Point::new(left, top), Point::new(right, top + row))
}

/// Outer lines where the frame does not already stand, the line under own fields, and those
/// between cells.
fn lines(
    cells: &[PlacedCell],
    job: &Job<'_>,
    block: &Rect<Sheet>,
    area: &Rect<Sheet>,
) -> Vec<Mark> {
    let spec = &job.style.title_block;
    let across = |left: Point<Sheet>| [left, Point::new(area.max.x, left.y)];
    let mut outline = across(area.min).to_vec();
    if !same(area.min.x, job.frame.min.x) {
        outline.insert(0, Point::new(area.min.x, area.max.y));
    }
    let mut outer = vec![Path::polyline(&outline, false)];
    let mut inner = Vec::new();
    let (own, standing): (Vec<_>, Vec<_>) =
        cells.iter().map(|c| c.area).partition(|c| c.max.y <= block.min.y + COINCIDENT);
    if !own.is_empty() {
        outer.push(Path::polyline(&across(block.min), false));
        let strip = Rect::new(area.min, Point::new(area.max.x, block.min.y));
        inner.extend(between_cells(&own, &strip));
    }
    inner.extend(between_cells(&standing, block));
    vec![
        Mark::Stroke(Stroke::new(inner, spec.inner_line, None)),
        Mark::Stroke(Stroke::new(outer, spec.line, None)),
    ]
}

impl PlacedCell {
    /// The field name in the upper left corner; one with accents on its capitals stands lower, so
    /// that they keep clear of the line above.
    fn name(&self, job: &Job<'_>, id: &ItemId) -> (Vec<Mark>, Option<Misfit>) {
        let spec = &job.style.title_block;
        let room = Room { width: self.text_width(spec), height: spec.name_text };
        let fitted = fit(&self.name, room, &[spec.name_text], spec.line_pitch);
        let rise = fitted.lines.iter().map(|run| -run.ink.min.y).fold(0.0, f64::max);
        let clear = spec.line / 2.0 + job.style.clearance.text_line;
        let base = self.area.min.y + (spec.name_top + spec.name_text).max(clear + rise);
        let misfit = fitted.misfit(&self.slot(id, self.name_spot), &self.name);
        (self.set(&fitted, base, spec), misfit)
    }

    /// The entry: on its row's common base line, or in the middle of what the field
    /// name leaves.
    fn entry(&self, text: &str, spec: &TitleBlockSpec, id: &ItemId) -> (Vec<Mark>, Option<Misfit>) {
        let height = self.area.height() - spec.entry_top - spec.base;
        let room = Room { width: self.text_width(spec), height };
        let heights = heights_from(self.text, &spec.heights);
        let fitted = fit(text, room, &heights, spec.line_pitch);
        let lift = if self.centred { (height - fitted.used()).max(0.0) / 2.0 } else { 0.0 };
        let misfit = fitted.misfit(&self.slot(id, self.entry_spot), text);
        (self.set(&fitted, self.area.max.y - spec.base - lift, spec), misfit)
    }

    /// The projection sign in the middle of what the field name leaves.
    fn sign(&self, job: &Job<'_>) -> Item {
        let spec = &job.style.title_block;
        let below_name = Rect::new(
            Point::new(self.area.min.x, self.area.min.y + spec.entry_top),
            Point::new(self.area.max.x, self.area.max.y - spec.name_top),
        );
        projection_sign(job.id("projection-sign"), job.style, below_name.centre())
    }

    fn text_width(&self, spec: &TitleBlockSpec) -> f64 {
        self.area.width() - 2.0 * spec.padding
    }

    fn slot<'a>(&self, item: &'a ItemId, spot: Spot) -> Slot<'a> {
        Slot { item, spot, place: self.area, span: self.entry.span }
    }

    /// The lines with the last one's base line at `base`.
    fn set(&self, fitted: &Fitted, base: f64, spec: &TitleBlockSpec) -> Vec<Mark> {
        let left = self.area.min.x + spec.padding;
        let lines = fitted.lines.iter().rev().enumerate();
        let mut marks: Vec<Mark> = lines
            .map(|(up, run)| {
                // Ink, not advance, starts at the padding: else large letters would seem indented.
                let origin = Point::new(left - run.ink.min.x, base - up as f64 * fitted.pitch);
                Mark::Text(PlacedText::new(run.clone(), origin, 0.0))
            })
            .collect();
        marks.reverse();
        marks
    }
}
