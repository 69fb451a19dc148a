//! The text of an annotation, typeset: runs side by side and above each other, with frames.

use std::sync::Arc;

use crate::geom::{Paper, Path, Point, Quad, Rect, Space, Vector};
use crate::scene::Value;
use crate::text::Run;

/// Typeset text around its own origin: the beginning of the base line. x along the base line,
/// y down, mm of paper.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Label {
    /// Runs and where their base lines begin.
    pub runs: Vec<(Vector<Paper>, Arc<Run>)>,
    /// Boxes drawn around parts of it.
    pub frames: Vec<Rect<Paper>>,
    /// What it says, where it is one value among several of its annotation.
    pub value: Option<Value>,
    advance: f64,
}

/// A label at its place in space `S`.
#[derive(Clone, Debug, PartialEq)]
pub struct PlacedLabel<S> {
    /// The label; shared by all candidates of its annotation.
    pub label: Arc<Label>,
    /// Where its base line begins.
    pub origin: Point<S>,
    /// How far it is turned, degrees counter-clockwise as the reader sees it.
    pub angle: f64,
}

impl Label {
    /// One run.
    #[must_use]
    pub fn line(text: &str, height: f64) -> Self {
        let mut label = Self::default();
        label.push(text, height);
        label
    }

    /// Adds a run after what is there.
    pub fn push(&mut self, text: &str, height: f64) {
        let run = Run::new(text, height);
        let at = Vector::new(self.advance, 0.0);
        self.advance += run.advance;
        self.runs.push((at, Arc::new(run)));
    }

    /// Leaves a blank of `width` mm.
    pub fn skip(&mut self, width: f64) {
        self.advance += width;
    }

    /// Adds two runs above each other, the lower one on the base line, aligned at `decimal`, the
    /// sign before the decimals.
    pub fn stack(&mut self, upper: &str, lower: &str, height: f64, pitch: f64, decimal: char) {
        let to_decimal = |text: &str| {
            let whole = text.split(decimal).next().unwrap_or(text);
            Run::new(whole, height).advance
        };
        let (up, low) = (to_decimal(upper), to_decimal(lower));
        let left = up.max(low);
        let mut width: f64 = 0.0;
        for (text, before, rise) in [(upper, up, pitch), (lower, low, 0.0)] {
            let run = Run::new(text, height);
            let x = self.advance + left - before;
            width = width.max(left - before + run.advance);
            self.runs.push((Vector::new(x, -rise), Arc::new(run)));
        }
        self.advance += width;
    }

    /// Adds a line of text whose base line lies `drop` mm below that of the first.
    pub fn below(&mut self, text: &str, height: f64, drop: f64) {
        self.runs.push((Vector::new(0.0, drop), Arc::new(Run::new(text, height))));
    }

    /// Lifts runs `from..` by `rise` mm, as to centre a sign beside a stack.
    pub fn lift_run(&mut self, index: usize, rise: f64) {
        if let Some((at, _)) = self.runs.get_mut(index) {
            at.y -= rise;
        }
    }

    /// Draws a box `margin` mm around all that is there.
    pub fn frame(&mut self, margin: f64) {
        let ink = self.ink();
        let boxed = ink.grown(margin);
        let shift = -boxed.min.x;
        for (at, _) in &mut self.runs {
            at.x += shift;
        }
        self.frames.push(boxed.shifted(Vector::new(shift, 0.0)));
        self.advance += 2.0 * shift;
    }

    /// Width from the origin to where a next character would begin, mm.
    #[must_use]
    pub fn advance(&self) -> f64 {
        self.advance
    }

    /// Box around the ink of all runs and frames.
    #[must_use]
    pub fn ink(&self) -> Rect<Paper> {
        let runs = self.runs.iter().map(|(at, run)| run.ink.shifted(*at));
        Rect::union_of(runs.chain(self.frames.iter().copied()))
            .unwrap_or_else(|| Rect::from_sides(0.0, 0.0, 0.0, 0.0))
    }

    /// Box around the ink of the runs on the first base line or above it, and of the frames.
    #[must_use]
    pub fn first_line_ink(&self) -> Rect<Paper> {
        let runs = self.runs.iter().filter(|(at, _)| at.y <= 1e-9);
        let inks = runs.map(|(at, run)| run.ink.shifted(*at)).chain(self.frames.iter().copied());
        Rect::union_of(inks).unwrap_or_else(|| self.ink())
    }
}

impl<S: Space> PlacedLabel<S> {
    /// Where a place of the label lies.
    #[must_use]
    pub fn at(&self, p: Point<Paper>) -> Point<S> {
        let along = Vector::<S>::at_angle(self.angle);
        self.origin + along * p.x + along.left() * -p.y
    }

    /// The boxes of its runs' ink and its frames, turned with it.
    pub fn quads(&self) -> impl Iterator<Item = Quad<S>> + '_ {
        let boxes = self.label.runs.iter().map(|(at, run)| run.ink.shifted(*at));
        boxes
            .chain(self.label.frames.iter().copied())
            .map(|r| Quad(r.corners().map(|p| self.at(p))))
    }

    /// One box around all its ink, turned with it.
    #[must_use]
    pub fn quad(&self) -> Quad<S> {
        Quad(self.label.ink().corners().map(|p| self.at(p)))
    }

    /// The outlines of its frames.
    pub fn frame_paths(&self) -> impl Iterator<Item = Path<S>> + '_ {
        self.label.frames.iter().map(|r| Path::polyline(&r.corners().map(|p| self.at(p)), true))
    }
}
