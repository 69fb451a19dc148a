//! Straight dimension lines with their direction, place and span, as drawn.
//!
//! Takes the ink of dimensions; gives one [`DimensionLine`] for each straight line of a dimension,
//! its interrupted pieces joined. Round dimension lines (of angles) are not among them.

use super::ink::{Class, Piece};
use super::page::Page;
use crate::geom::{Line, Point, Rect, Sheet, Vector};
use crate::ident::ViewId;
use crate::scene::{ItemKind, Role};

/// Lines whose directions differ by no more than this count as parallel: a hundredth of a degree
/// moves the end of a line of 200 mm by 0.03 mm.
const PARALLEL_DEG: f64 = 0.01;

/// Straight strokes on one line, joined.
#[derive(Clone, Debug)]
pub(crate) struct Run {
    /// Direction of the line in [0°, 180°), degrees as the reader sees it.
    pub(crate) direction: f64,
    /// Unit vector of that direction.
    pub(crate) axis: Vector<Sheet>,
    /// Place of the line square to its direction, mm from the sheet's corner.
    pub(crate) offset: f64,
    /// From where to where it reaches along its direction.
    pub(crate) extent: (f64, f64),
}

/// A dimension line.
#[derive(Clone, Debug)]
pub(crate) struct DimensionLine<'a> {
    /// Its item's place in the scene.
    pub(crate) item: usize,
    /// The view that it belongs to.
    pub(crate) view: Option<&'a ViewId>,
    /// The line itself.
    pub(crate) run: Run,
    /// What it measures: from one extension line to the other where both are drawn, else from one
    /// end of the line to the other.
    pub(crate) span: (f64, f64),
    /// The extension lines' places along the line, in order.
    pub(crate) stations: Vec<f64>,
}

impl Run {
    fn of(line: &Line<Sheet>) -> Option<Self> {
        let unit = line.vector().unit()?;
        let mut direction = unit.angle().rem_euclid(180.0);
        if direction >= 180.0 - PARALLEL_DEG / 2.0 {
            direction = 0.0;
        }
        let axis = if unit.angle() < 0.0 || unit.angle() > 179.0 && direction == 0.0 {
            -unit
        } else {
            unit
        };
        let from_corner = |p: Point<Sheet>| p - Point::new(0.0, 0.0);
        let (a, b) = (axis.dot(from_corner(line.from)), axis.dot(from_corner(line.to)));
        let offset = axis.left().dot(from_corner(line.from));
        Some(Self { direction, axis, offset, extent: (a.min(b), a.max(b)) })
    }

    /// Place of a point square to the line's direction.
    pub(crate) fn offset_of(&self, p: Point<Sheet>) -> f64 {
        self.axis.left().dot(p - Point::new(0.0, 0.0))
    }

    /// Place of a point along the line's direction.
    pub(crate) fn along(&self, p: Point<Sheet>) -> f64 {
        self.axis.dot(p - Point::new(0.0, 0.0))
    }

    /// The point at this place along the line.
    pub(crate) fn at(&self, along: f64) -> Point<Sheet> {
        Point::new(0.0, 0.0) + self.axis * along + self.axis.left() * self.offset
    }

    /// The whole line.
    pub(crate) fn line(&self) -> Line<Sheet> {
        Line::new(self.at(self.extent.0), self.at(self.extent.1))
    }

    /// Length of the common stretch of the two lines' shadows on each other, mm; negative: a gap.
    pub(crate) fn facing(&self, other: &Self) -> f64 {
        self.extent.1.min(other.extent.1) - self.extent.0.max(other.extent.0)
    }

    fn continues(&self, other: &Self, place: f64) -> bool {
        (self.direction - other.direction).abs() <= PARALLEL_DEG
            && (self.offset - other.offset).abs() <= place
    }
}

/// Straight strokes joined where they lie on one line, whatever the gaps between them. In the
/// order of direction, then of place.
pub(crate) fn joined<'p>(lines: impl Iterator<Item = &'p Line<Sheet>>, place: f64) -> Vec<Run> {
    let mut runs: Vec<Run> = lines.filter_map(Run::of).collect();
    runs.sort_by(|a, b| {
        (a.direction.total_cmp(&b.direction))
            .then(a.offset.total_cmp(&b.offset))
            .then(a.extent.0.total_cmp(&b.extent.0))
    });
    let mut joined: Vec<Run> = Vec::new();
    for run in runs {
        match joined.last_mut() {
            Some(last) if last.continues(&run, place) => {
                last.extent.0 = last.extent.0.min(run.extent.0);
                last.extent.1 = last.extent.1.max(run.extent.1);
            }
            _ => joined.push(run),
        }
    }
    joined
}

/// Every straight dimension line of the sheet, by direction and then from place to place.
pub(crate) fn dimension_lines<'a>(page: &Page<'a>) -> Vec<DimensionLine<'a>> {
    let place = page.limits().same_place;
    let pieces = page.ink.pieces();
    let mut found = Vec::new();
    for of_item in pieces.chunk_by(|a, b| a.item == b.item) {
        if of_item[0].kind != ItemKind::Dimension {
            continue;
        }
        let view = page.item(&of_item[0]).view.as_ref();
        for run in joined(straight(of_item, Role::Dim), place) {
            let stations = stations(of_item, &run, place);
            let span = match (stations.first(), stations.last()) {
                (Some(a), Some(b)) if b - a > place => (*a, *b),
                _ => run.extent,
            };
            found.push(DimensionLine { item: of_item[0].item, view, run, span, stations });
        }
    }
    found.sort_by(|a, b| {
        (a.run.direction.total_cmp(&b.run.direction))
            .then(a.run.offset.total_cmp(&b.run.offset))
            .then(a.run.extent.0.total_cmp(&b.run.extent.0))
            .then_with(|| page.scene.items[a.item].id.cmp(&page.scene.items[b.item].id))
    });
    found
}

impl DimensionLine<'_> {
    /// On which side of the box the line stands: −1 or 1 along its normal, 0 where it enters it.
    pub(crate) fn side_of(&self, area: &Rect<Sheet>) -> i8 {
        let beyond = area.corners().map(|p| self.run.offset - self.run.offset_of(p));
        if beyond.iter().all(|d| *d > 0.0) {
            1
        } else if beyond.iter().all(|d| *d < 0.0) {
            -1
        } else {
            0
        }
    }

    /// Whether the two lines are parallel.
    pub(crate) fn is_parallel_to(&self, other: &Self) -> bool {
        (self.run.direction - other.run.direction).abs() <= PARALLEL_DEG
    }

    /// The box around it.
    pub(crate) fn area(&self) -> Rect<Sheet> {
        let line = self.run.line();
        Rect::new(line.from, line.to)
    }
}

fn straight(pieces: &[Piece], role: Role) -> impl Iterator<Item = &Line<Sheet>> {
    pieces
        .iter()
        .filter(move |p| p.class == Class::Line && p.straight && p.role == Some(role))
        .filter_map(Piece::line)
}

/// Where extension lines of the item reach the line.
fn stations(pieces: &[Piece], run: &Run, place: f64) -> Vec<f64> {
    let mut found: Vec<f64> = straight(pieces, Role::Ext)
        .filter_map(|ext| {
            let (a, b) = (run.offset_of(ext.from), run.offset_of(ext.to));
            let reaches = a.min(b) <= run.offset + place && a.max(b) >= run.offset - place;
            let share = (run.offset - a) / (b - a);
            (reaches && share.is_finite()).then(|| run.along(ext.at(share.clamp(0.0, 1.0))))
        })
        .collect();
    found.sort_by(f64::total_cmp);
    found.dedup_by(|later, first| *later - *first <= place);
    found
}
