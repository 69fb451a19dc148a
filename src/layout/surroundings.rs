//! What a candidate pays against everything on the sheet that is not its own view or another
//! annotation: the frame, title block and tables, other views.

use super::ink::{Ink, InkKind};
use crate::annotate::Practice;
use crate::geom::{Rect, Sheet, distance_line_rect};

/// The fixed areas of a sheet.
#[derive(Clone, Debug)]
pub(super) struct Surroundings {
    /// Inside of the frame.
    pub frame: Rect<Sheet>,
    /// Title block, tables, notes.
    pub blocks: Vec<Rect<Sheet>>,
    /// The views' outlines, in the order of the drawing.
    pub views: Vec<Rect<Sheet>>,
}

impl Surroundings {
    /// What ink of a candidate of view `own` pays.
    pub(super) fn cost(&self, ink: &Ink<Sheet>, own: usize, practice: &Practice<'_>) -> f64 {
        let costs = &practice.style.cost.unary;
        let clear = &practice.style.clearance;
        let mut cost = 0.0;
        if !self.frame.grown(-clear.frame).holds(&ink.bounds) {
            cost += costs.outside_frame;
        }
        let near = clear.text_text.max(clear.text_outline);
        for block in &self.blocks {
            if ink.bounds.distance(block) < near {
                cost += f64::from(touches(ink, block, near)) * costs.on_block;
            }
        }
        for (i, view) in self.views.iter().enumerate() {
            if i != own && ink.bounds.distance(view) < near {
                cost += in_view(ink, view, near, practice);
            }
        }
        cost
    }
}

/// How many texts and lines of `ink` come nearer than `near` to an area.
fn touches(ink: &Ink<Sheet>, area: &Rect<Sheet>, near: f64) -> u32 {
    let texts = ink.texts.iter().filter(|(_, b)| b.distance(area) < near).count();
    let lines = ink
        .lines
        .iter()
        .filter(|l| distance_line_rect(l.line.from, l.line.to, area) < near)
        .count();
    u32::try_from(texts + lines).unwrap_or(u32::MAX)
}

/// What ink pays for standing in another view: extension lines may pass, nothing else.
fn in_view(ink: &Ink<Sheet>, view: &Rect<Sheet>, near: f64, practice: &Practice<'_>) -> f64 {
    let costs = &practice.style.cost.unary;
    let texts = ink.texts.iter().filter(|(_, b)| b.distance(view) < near).count() as f64;
    let lines: f64 = ink
        .lines
        .iter()
        .filter(|l| distance_line_rect(l.line.from, l.line.to, view) <= 0.0)
        .map(|l| match l.kind {
            InkKind::Ext => costs.ext_crosses_other_view,
            InkKind::Dim | InkKind::Leader | InkKind::Arrow => costs.in_other_view,
        })
        .sum();
    texts * costs.in_other_view + lines
}
