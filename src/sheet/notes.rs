//! General notes: a heading and a numbered list at the lower left, beside the title block or, where
//! that takes the whole width, above it.

use std::sync::Arc;

use super::fit::{Shortage, Slot, broken, cut, pitch};
use super::{Block, Extent, Job, Made, Spot};
use crate::geom::{Point, Rect, Sheet};
use crate::scene::{Item, ItemKind, Mark, PlacedText};
use crate::source::Span;
use crate::text::Run;

/// A line of the block: texts with their distance from its left side.
struct NoteLine {
    runs: Vec<(f64, Run)>,
    /// The note that it belongs to; `None` for the heading.
    span: Option<Span>,
}

/// The measures of the block, mm.
struct Measures {
    heading: f64,
    text: f64,
    indent: f64,
    width: f64,
}

/// The general notes of a sheet; `None` without notes. They grow upwards from the foot of the
/// drawing space; what does not fit below the revision table or the upper side is cut.
pub(super) fn notes(
    job: &Job<'_>,
    title_block: Rect<Sheet>,
    table: Option<Rect<Sheet>>,
) -> Option<Made> {
    if job.drawing.sheet.notes.is_empty() {
        return None;
    }
    let foot = foot(job, &title_block);
    let measures = Measures::of(job, foot.width());
    let mut lines = lines(job, &measures);
    let pitch = line_pitch(&lines, job, &measures);

    // Tails of letters reach below the last base line.
    let tails = lines.last().map_or(0.0, NoteLine::depth);
    let last_base = foot.max.y - tails;
    let top = highest(job, &foot, table);
    let steps = ((last_base - top - measures.heading) / pitch).floor().max(1.0);
    let most = steps as usize + 1;
    let shortage = (lines.len() > most).then(|| Shortage {
        extent: Extent::Height,
        needed: measures.heading + (lines.len() - 1) as f64 * pitch + tails,
        available: foot.max.y - top,
    });
    let first_cut = lines.get(most).and_then(|l| l.span);
    if shortage.is_some() {
        cut_after(&mut lines, most, &measures);
    }

    let id = job.id("general-notes");
    let item = Item::new(id.clone(), ItemKind::Note, marks(lines, pitch, (foot.min.x, last_base)));
    let area = item.bounds().unwrap_or(foot);
    let slot = Slot { item: &id, spot: Spot::Notes, place: area, span: first_cut };
    let heading = job.style.words.get("notes");
    let misfits = shortage.map(|s| s.at(&slot, heading)).into_iter().collect();
    Some(Made { items: vec![item], block: Block { item: id, area }, misfits })
}

/// Height that the heading, one line below it and the distances to other blocks take, mm; 0 without
/// notes. The revision table leaves that much.
pub(super) fn least_height(job: &Job<'_>) -> f64 {
    if job.drawing.sheet.notes.is_empty() {
        return 0.0;
    }
    let measures = Measures::of(job, 0.0);
    let look = &job.style.notes;
    measures.heading + 2.0 * measures.text * look.line_pitch.accented + 2.0 * look.gap
}

/// Where the block may stand: left and right sides, and its lower side; its height is not meant.
fn foot(job: &Job<'_>, title_block: &Rect<Sheet>) -> Rect<Sheet> {
    let look = &job.style.notes;
    let left = job.frame.min.x + look.gap;
    let beside = title_block.min.x - look.gap - left;
    // Half a column is too narrow to read; the block then goes above the title block.
    let (width, bottom) = if beside >= look.width / 2.0 {
        (beside, job.frame.max.y)
    } else {
        (job.frame.max.x - look.gap - left, title_block.min.y)
    };
    let bottom = bottom - look.gap;
    Rect::new(Point::new(left, bottom), Point::new(left + width.min(look.width), bottom))
}

/// The highest place for the top of the heading.
fn highest(job: &Job<'_>, foot: &Rect<Sheet>, table: Option<Rect<Sheet>>) -> f64 {
    let over = table.filter(|t| t.min.x < foot.max.x).map(|t| t.max.y);
    over.unwrap_or(job.frame.min.y) + job.style.notes.gap
}

impl Measures {
    fn of(job: &Job<'_>, width: f64) -> Self {
        let look = &job.style.notes;
        let h = job.style.group_of(&job.format.name).text;
        let widest = Run::new(&job.drawing.sheet.notes.len().to_string(), look.text_h * h).advance;
        Self {
            heading: look.heading_h * h,
            text: look.text_h * h,
            indent: widest + look.indent_h * h,
            width,
        }
    }
}

/// Heading and notes in lines, numbers set against the text so that their units stand below each
/// other.
fn lines(job: &Job<'_>, measures: &Measures) -> Vec<NoteLine> {
    let heading = Run::new(job.style.words.get("notes"), measures.heading);
    let mut all = vec![NoteLine { runs: vec![(0.0, heading)], span: None }];
    let blank = job.style.notes.indent_h / job.style.notes.text_h * measures.text;
    for (i, note) in job.drawing.sheet.notes.iter().enumerate() {
        let number = Run::new(&(i + 1).to_string(), measures.text);
        let number = (measures.indent - blank - number.advance, number);
        let text = note.value.format(&job.style.number);
        let span = Some(note.span);
        let mut texts = broken(&text, measures.text, measures.width - measures.indent).into_iter();
        let first = texts.next().map(|run| (measures.indent, run));
        all.push(NoteLine { runs: std::iter::once(number).chain(first).collect(), span });
        all.extend(texts.map(|run| NoteLine { runs: vec![(measures.indent, run)], span }));
    }
    all
}

/// Base line to base line, mm: the same throughout the block.
fn line_pitch(lines: &[NoteLine], job: &Job<'_>, measures: &Measures) -> f64 {
    let runs: Vec<Run> = lines.iter().flat_map(|l| &l.runs).map(|(_, run)| run.clone()).collect();
    pitch(&runs, measures.text, job.style.notes.line_pitch)
}

/// Leaves the first `most` lines, the last with a mark that something is missing.
fn cut_after(lines: &mut Vec<NoteLine>, most: usize, measures: &Measures) {
    lines.truncate(most);
    if let Some((_, last)) = lines.last_mut().and_then(|l| l.runs.last_mut()) {
        let more = [last.clone(), Run::new("…", measures.text)];
        let shortened = cut(&more, 1, measures.width - measures.indent);
        *last = shortened.into_iter().next().unwrap_or_else(|| last.clone());
    }
}

fn marks(lines: Vec<NoteLine>, pitch: f64, (left, last_base): (f64, f64)) -> Vec<Mark> {
    let count = lines.len();
    let base = |i: usize| last_base - (count - 1 - i) as f64 * pitch;
    let mut marks = Vec::new();
    for (i, line) in lines.into_iter().enumerate() {
        marks.extend(line.runs.into_iter().map(|(indent, run)| {
            let origin = Point::new(left + indent, base(i));
            Mark::Text(PlacedText::new(Arc::new(run), origin, 0.0))
        }));
    }
    marks
}

impl NoteLine {
    /// How far its ink reaches below the base line, mm.
    fn depth(&self) -> f64 {
        self.runs.iter().map(|(_, run)| run.ink.max.y).fold(0.0, f64::max)
    }
}
