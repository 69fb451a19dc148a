//! Frame line, zone border with strokes and characters, centring marks: ISO 5457:1999 clause 5.

use super::Job;
use super::zone::{Fields, letters, numeral};
use crate::geom::{Path, Point, Rect, Sheet, Vector};
use crate::scene::{Item, ItemKind, Mark, PlacedText, Stroke};
use crate::style::{FrameSpec, SheetSide};
use crate::text::Run;

/// The strip between frame and border along one side of the sheet.
struct Strip {
    side: SheetSide,
    frame: Rect<Sheet>,
    border: Rect<Sheet>,
}

/// The frame of a sheet. A centring mark that would run into one of `taken` ends at the frame
/// line: on an upright A4 the title block spans the width (common practice).
pub(super) fn frame(job: &Job<'_>, taken: &[Rect<Sheet>]) -> Item {
    let spec = &job.style.frame;
    let border = job.frame.grown(spec.border_offset);
    let strips: Vec<Strip> = [SheetSide::Top, SheetSide::Bottom, SheetSide::Left, SheetSide::Right]
        .map(|side| Strip { side, frame: job.frame, border })
        .into();
    let with_zones: Vec<(&Strip, Fields)> = strips
        .iter()
        .filter(|s| job.format.zones_on.contains(&s.side))
        .map(|s| (s, Fields::along(s.side_length(job), &spec.zone)))
        .collect();

    let strokes = with_zones.iter().flat_map(|(strip, fields)| strip.strokes(fields));
    let outline = Path::polyline(&border.corners(), true);
    let border_paths = std::iter::once(outline).chain(strokes).collect();
    let marks = strips.iter().map(|s| s.centring_mark(job, taken)).collect();
    let mut ink = vec![
        Mark::Stroke(Stroke::new(border_paths, spec.border_line, None)),
        Mark::Stroke(Stroke::new(marks, spec.centring_line, None)),
        Mark::Stroke(Stroke::new(
            vec![Path::polyline(&job.frame.corners(), true)],
            spec.line,
            None,
        )),
    ];
    ink.extend(with_zones.iter().flat_map(|(strip, fields)| strip.characters(fields, spec)));
    Item::new(job.id("frame"), ItemKind::Frame, ink)
}

impl Strip {
    /// Whether the strip lies level.
    fn is_level(&self) -> bool {
        match self.side {
            SheetSide::Top | SheetSide::Bottom => true,
            SheetSide::Left | SheetSide::Right => false,
        }
    }

    fn side_length(&self, job: &Job<'_>) -> f64 {
        if self.is_level() { job.format.width } else { job.format.height }
    }

    /// The point `along` mm from the trimmed corner and `out` of the way from frame to border.
    fn at(&self, along: f64, out: f64) -> Point<Sheet> {
        let between = |frame: f64, border: f64| frame + (border - frame) * out;
        match self.side {
            SheetSide::Top => Point::new(along, between(self.frame.min.y, self.border.min.y)),
            SheetSide::Bottom => Point::new(along, between(self.frame.max.y, self.border.max.y)),
            SheetSide::Left => Point::new(between(self.frame.min.x, self.border.min.x), along),
            SheetSide::Right => Point::new(between(self.frame.max.x, self.border.max.x), along),
        }
    }

    /// Direction into the drawing space.
    fn inwards(&self) -> Vector<Sheet> {
        match self.side {
            SheetSide::Top => Vector::new(0.0, 1.0),
            SheetSide::Bottom => Vector::new(0.0, -1.0),
            SheetSide::Left => Vector::new(1.0, 0.0),
            SheetSide::Right => Vector::new(-1.0, 0.0),
        }
    }

    /// The strokes between fields; the centring mark stands for the middle one.
    fn strokes(&self, fields: &Fields) -> Vec<Path<Sheet>> {
        let middle = fields.strokes.len() / 2;
        let drawn = fields.strokes.iter().enumerate().filter(|(i, _)| *i != middle);
        drawn.map(|(_, s)| line(self.at(*s, 0.0), self.at(*s, 1.0))).collect()
    }

    /// The mark at the end of the sheet's axis.
    fn centring_mark(&self, job: &Job<'_>, taken: &[Rect<Sheet>]) -> Path<Sheet> {
        let spec = &job.style.frame;
        let middle = self.side_length(job) / 2.0;
        let (outer, at_frame) = (self.at(middle, 1.0), self.at(middle, 0.0));
        let inner = at_frame + self.inwards() * spec.centring_reach;
        let room =
            Rect::new(at_frame, inner).grown(spec.centring_line / 2.0 + job.style.clearance.frame);
        let is_free = taken.iter().all(|t| !t.overlaps(&room));
        line(outer, if is_free { inner } else { at_frame })
    }

    /// Letters or numerals in the middles of the fields.
    fn characters(&self, fields: &Fields, spec: &FrameSpec) -> Vec<Mark> {
        let (from, to) = match self.is_level() {
            true => (self.frame.min.x, self.frame.max.x),
            false => (self.frame.min.y, self.frame.max.y),
        };
        let name = |i| if self.is_level() { numeral(i) } else { letters(i, &spec.zone) };
        // The two lines differ in width, so the middle of what is left white between them lies off
        // the middle between their middles.
        let shift = (spec.line - spec.border_line) / 4.0 / spec.border_offset;
        let spans = fields.spans(from, to).into_iter().enumerate();
        spans
            .map(|(i, (a, b))| {
                let middle = self.at((a + b) / 2.0, 0.5 + shift);
                let run = Run::new(&name(i), spec.zone.text);
                let left = middle.x - run.ink.centre().x;
                let origin = Point::new(left, middle.y + spec.zone.text / 2.0);
                Mark::Text(PlacedText::new(run.into(), origin, 0.0))
            })
            .collect()
    }
}

fn line(from: Point<Sheet>, to: Point<Sheet>) -> Path<Sheet> {
    Path::polyline(&[from, to], false)
}
