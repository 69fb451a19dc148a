//! The revision table: upper right corner, header on top, newest row at the bottom.

use std::sync::Arc;

use super::fit::{Room, Shortage, Slot, broken, fit, pitch};
use super::notes::least_height;
use super::{Block, Extent, Job, Made, Misfit, Spot};
use crate::geom::{Path, Point, Rect, Sheet, same};
use crate::ident::ItemId;
use crate::scene::{Item, ItemKind, Mark, PlacedText, Stroke};
use crate::source::Span;
use crate::spec::Revision;
use crate::style::{RevisionColumn, RevisionKey, RevisionTableSpec};
use crate::text::Run;

/// A row before it has its place.
struct Row {
    /// Lines of each column, and base line to base line, mm.
    cells: Vec<(Vec<Arc<Run>>, f64)>,
    height: f64,
    misfits: Vec<Misfit>,
}

/// The revision table of a sheet; `None` without revisions. Where the rows have no room above
/// title block and notes, the oldest are left out.
pub(super) fn revision_table(job: &Job<'_>, title_block: &Block) -> Option<Made> {
    if job.drawing.revisions.is_empty() {
        return None;
    }
    let spec = &job.style.revision_table;
    let id = job.id("revision-table");
    let width: f64 = spec.column.iter().map(|c| c.width).sum();
    let corner = Point::new(job.frame.max.x - width, job.frame.min.y);
    let below = job.style.views.block_gap + least_height(job);
    let available = title_block.area.min.y - below - job.frame.min.y;

    let mut rows = vec![header(job, &id, corner)];
    let revisions = job.drawing.revisions.iter().enumerate();
    let entries: Vec<Row> = revisions.map(|(i, r)| entry_row(job, &id, (i, r), corner)).collect();
    let needed = rows[0].height + entries.iter().map(|r| r.height).sum::<f64>();
    let dropped = oldest_without_room(&entries, available - rows[0].height);
    rows.extend(entries.into_iter().skip(dropped));

    let height: f64 = rows.iter().map(|r| r.height).sum();
    let area = Rect::new(corner, Point::new(job.frame.max.x, corner.y + height));
    let mut misfits: Vec<Misfit> = rows.iter_mut().flat_map(|r| r.misfits.split_off(0)).collect();
    if dropped > 0 {
        let slot = Slot { item: &id, spot: Spot::RevisionTable, place: area, span: None };
        let shortage = Shortage { extent: Extent::Height, needed, available };
        misfits.push(shortage.at(&slot, &job.drawing.revisions[0].mark.value));
    }
    let mut marks = lines(&rows, job, &area);
    marks.extend(texts(&rows, spec, corner));
    let item = Item::new(id.clone(), ItemKind::Table, marks);
    Some(Made { items: vec![item], block: Block { item: id, area }, misfits })
}

fn header(job: &Job<'_>, id: &ItemId, corner: Point<Sheet>) -> Row {
    let spec = &job.style.revision_table;
    let mut row = Row { cells: Vec::new(), height: spec.row, misfits: Vec::new() };
    for column in &spec.column {
        row.put_fitted(
            job,
            id,
            column,
            &column.name,
            (Spot::RevisionHeading(column.key), None),
            corner,
        );
    }
    row
}

fn entry_row(
    job: &Job<'_>,
    id: &ItemId,
    (i, revision): (usize, &Revision),
    corner: Point<Sheet>,
) -> Row {
    let spec = &job.style.revision_table;
    let mut row = Row { cells: Vec::new(), height: spec.row, misfits: Vec::new() };
    for column in &spec.column {
        let text = match column.key {
            RevisionKey::Mark => revision.mark.value.clone(),
            RevisionKey::Date => revision.date.value.clone(),
            RevisionKey::Change => revision.change.format(&job.style.number),
            RevisionKey::By => revision.by.clone(),
        };
        match column.key {
            RevisionKey::Mark | RevisionKey::Date => {
                let slot = (Spot::Revision(i + 1, column.key), Some(revision.mark.span));
                row.put_fitted(job, id, column, &text, slot, corner);
            }
            RevisionKey::Change | RevisionKey::By => row.put_wrapped(spec, column, &text),
        }
    }
    row
}

impl Row {
    /// Text that stays on one line and is cut if it must be.
    fn put_fitted(
        &mut self,
        job: &Job<'_>,
        item: &ItemId,
        column: &RevisionColumn,
        text: &str,
        (spot, span): (Spot, Option<Span>),
        corner: Point<Sheet>,
    ) {
        let spec = &job.style.revision_table;
        let room = Room { width: column.width - 2.0 * spec.padding, height: spec.text };
        let fitted = fit(text, room, &[spec.text], spec.line_pitch);
        // The row's own place depends on the rows above, so the table's place stands for it.
        let left = corner.x + left_of(spec, column);
        let place = Rect::new(
            Point::new(left, corner.y),
            Point::new(left + column.width, corner.y + spec.row),
        );
        self.misfits.extend(fitted.misfit(&Slot { item, spot, place, span }, text));
        self.cells.push((fitted.lines, fitted.pitch));
    }

    /// Text on as many lines as it takes; the row grows with it.
    fn put_wrapped(&mut self, spec: &RevisionTableSpec, column: &RevisionColumn, text: &str) {
        let lines = broken(text, spec.text, column.width - 2.0 * spec.padding);
        let more = lines.len().saturating_sub(1) as f64;
        let pitch = pitch(&lines, spec.text, spec.line_pitch);
        self.height = self.height.max(spec.row + more * pitch);
        self.cells.push((lines.into_iter().map(Arc::new).collect(), pitch));
    }
}

/// How many rows from the oldest on must be left out for the others to have room. The newest row
/// always stays.
fn oldest_without_room(rows: &[Row], available: f64) -> usize {
    let mut used = 0.0;
    let kept = rows.iter().rev().take_while(|row| {
        used += row.height;
        used <= available
    });
    rows.len() - kept.count().max(1)
}

/// Left side of a column from the table's left side.
fn left_of(spec: &RevisionTableSpec, column: &RevisionColumn) -> f64 {
    spec.column.iter().take_while(|c| c.key != column.key).map(|c| c.width).sum()
}

/// Outer lines where the frame does not already stand, a wide line below the header, narrow ones
/// between rows and between columns.
fn lines(rows: &[Row], job: &Job<'_>, area: &Rect<Sheet>) -> Vec<Mark> {
    let spec = &job.style.revision_table;
    let line = |x0, y0, x1, y1| Path::polyline(&[Point::new(x0, y0), Point::new(x1, y1)], false);
    let level = |y| line(area.min.x, y, area.max.x, y);
    let mut below = area.min.y;
    let bottoms: Vec<f64> = rows
        .iter()
        .map(|row| {
            below += row.height;
            below
        })
        .collect();
    let mut outline = vec![Point::new(area.min.x, area.max.y), area.max];
    if !same(area.min.x, job.frame.min.x) {
        outline.insert(0, area.min);
    }
    let wide = vec![level(bottoms[0]), Path::polyline(&outline, false)];
    let between = bottoms[1..].iter().take(rows.len().saturating_sub(2)).map(|y| level(*y));
    let columns = spec.column.iter().skip(1).map(|c| {
        let x = area.min.x + left_of(spec, c);
        line(x, area.min.y, x, area.max.y)
    });
    vec![
        Mark::Stroke(Stroke::new(between.chain(columns).collect(), spec.inner_line, None)),
        Mark::Stroke(Stroke::new(wide, spec.line, None)),
    ]
}

/// The first line of each cell in the middle of a plain row, further ones below.
fn texts(rows: &[Row], spec: &RevisionTableSpec, corner: Point<Sheet>) -> Vec<Mark> {
    let mut marks = Vec::new();
    let mut top = corner.y;
    for row in rows {
        for (column, (lines, pitch)) in spec.column.iter().zip(&row.cells) {
            let left = corner.x + left_of(spec, column) + spec.padding;
            let first = top + (spec.row + spec.text) / 2.0;
            marks.extend(lines.iter().enumerate().map(|(i, run)| {
                let base = first + i as f64 * pitch;
                let origin = Point::new(left - run.ink.min.x, base);
                Mark::Text(PlacedText::new(run.clone(), origin, 0.0))
            }));
        }
        top += row.height;
    }
    marks
}
