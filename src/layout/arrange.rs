//! Views on the sheet: in projection with each other, with the room that their annotations need,
//! balanced in the field that title block and tables leave.

use std::collections::BTreeMap;

use super::grid::{Cell, Stand};
use crate::annotate::Practice;
use crate::geom::{Paper, Point, Rect, Sheet, Shift, Vector};

/// A view and the room that it takes, around its own origin.
#[derive(Clone, Copy, Debug)]
pub(super) struct Room {
    /// Its place among the others.
    pub stand: Stand,
    /// Box around its geometry.
    pub outline: Rect<Paper>,
    /// Box around its geometry, annotations and label.
    pub ink: Rect<Paper>,
}

/// What the views must stay within and keep out of.
#[derive(Clone, Debug)]
pub(super) struct Field {
    /// Inside of the frame.
    pub frame: Rect<Sheet>,
    /// Title block, tables, notes.
    pub blocks: Vec<Rect<Sheet>>,
}

/// How much room the views need, and how much there is, mm.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Shortage {
    /// Width and height of the views with their annotations.
    pub needed: (f64, f64),
    /// Width and height inside the frame.
    pub available: (f64, f64),
}

/// Step of the search for a place, mm.
const STEP: f64 = 2.5;

/// Where each view's origin stands.
pub(super) fn arrange(
    rooms: &[Room],
    field: &Field,
    practice: &Practice<'_>,
) -> Result<Vec<Shift>, Shortage> {
    let spacing = &practice.style.views;
    let mut shortage = None;
    for margin in [spacing.frame_gap, spacing.frame_gap_least] {
        let inner = field.frame.grown(-margin);
        for extra in spacing.extra.iter().copied() {
            let local = relative(rooms, extra, practice);
            match settle(rooms, &local, inner, &field.blocks, practice) {
                Ok(shifts) => return Ok(shifts),
                Err(s) => shortage = Some(s),
            }
        }
    }
    Err(shortage.unwrap_or(Shortage { needed: (0.0, 0.0), available: (0.0, 0.0) }))
}

/// Places of the aligned views' origins relative to each other; `None` for free ones.
fn relative(rooms: &[Room], extra: f64, practice: &Practice<'_>) -> Vec<Option<Point<Sheet>>> {
    let cells: BTreeMap<Cell, usize> = rooms
        .iter()
        .enumerate()
        .filter_map(|(i, r)| match r.stand {
            Stand::Aligned(c) => Some((c, i)),
            Stand::Free => None,
        })
        .collect();
    let columns = tracks(&cells, rooms, |c| c.column, |c| c.row, Along::X, extra, practice);
    let rows = tracks(&cells, rooms, |c| c.row, |c| c.column, Along::Y, extra, practice);
    let mut places = vec![None; rooms.len()];
    for (cell, i) in &cells {
        let across = Along::X.reference(*cell, &cells, rooms, |c| c.column);
        let down = Along::Y.reference(*cell, &cells, rooms, |c| c.row);
        let x = columns.get(&cell.column).copied().unwrap_or(0.0) - across;
        let y = rows.get(&cell.row).copied().unwrap_or(0.0) - down;
        places[*i] = Some(Point::new(x, y));
    }
    places
}

/// A direction of the grid.
#[derive(Clone, Copy)]
enum Along {
    X,
    Y,
}

impl Along {
    /// Beginning and end of a box in this direction.
    fn span(self, r: &Rect<Paper>) -> (f64, f64) {
        match self {
            Self::X => (r.min.x, r.max.x),
            Self::Y => (r.min.y, r.max.y),
        }
    }

    /// The place of a view that its track aligns: the part's origin where the views of the track
    /// agree on it, else the beginning of their outlines, which then have equal extents.
    fn reference(
        self,
        cell: Cell,
        cells: &BTreeMap<Cell, usize>,
        rooms: &[Room],
        track: impl Fn(&Cell) -> i32,
    ) -> f64 {
        let members: Vec<(f64, f64)> = cells
            .iter()
            .filter(|(c, _)| track(c) == track(&cell))
            .map(|(_, i)| self.span(&rooms[*i].outline))
            .collect();
        let equal = members
            .windows(2)
            .all(|w| ((w[0].1 - w[0].0) - (w[1].1 - w[1].0)).abs() < crate::geom::COINCIDENT);
        let own = cells.get(&cell).map_or((0.0, 0.0), |i| self.span(&rooms[*i].outline));
        if equal { own.0 } else { 0.0 }
    }
}

/// Places of the tracks (columns or rows), wide enough for every pair of neighbours in a line.
fn tracks(
    cells: &BTreeMap<Cell, usize>,
    rooms: &[Room],
    track: impl Fn(&Cell) -> i32 + Copy,
    line: impl Fn(&Cell) -> i32,
    along: Along,
    extra: f64,
    practice: &Practice<'_>,
) -> BTreeMap<i32, f64> {
    let spacing = &practice.style.views;
    let mut numbers: Vec<i32> = cells.keys().map(track).collect();
    numbers.sort_unstable();
    numbers.dedup();
    let mut places: BTreeMap<i32, f64> = BTreeMap::new();
    for number in numbers {
        let mut place: f64 = 0.0;
        for (cell, i) in cells.iter().filter(|(c, _)| track(c) == number) {
            let own = along.reference(*cell, cells, rooms, track);
            let (ink, outline) = (along.span(&rooms[*i].ink), along.span(&rooms[*i].outline));
            let before = cells.iter().filter(|(c, _)| line(c) == line(cell) && track(c) < number);
            for (other, j) in before {
                let reference = along.reference(*other, cells, rooms, track);
                let at = places.get(&track(other)).copied().unwrap_or(0.0) - reference;
                let (other_ink, other_outline) =
                    (along.span(&rooms[*j].ink), along.span(&rooms[*j].outline));
                // Rooms are measured to the middles of lines; ink reaches half a line further.
                let ink_gap = spacing.ink_gap + practice.group.wide;
                let by_ink = at + other_ink.1 + ink_gap + extra - (ink.0 - own);
                let by_outline = at + other_outline.1 + spacing.outline_gap - (outline.0 - own);
                place = place.max(by_ink).max(by_outline);
            }
        }
        let last = places.values().next_back().copied();
        places.insert(number, last.map_or(place, |l| place.max(l)));
    }
    places
}

/// Moves the aligned views together to the best place of the field, then finds room for the others.
fn settle(
    rooms: &[Room],
    local: &[Option<Point<Sheet>>],
    inner: Rect<Sheet>,
    blocks: &[Rect<Sheet>],
    practice: &Practice<'_>,
) -> Result<Vec<Shift>, Shortage> {
    let spacing = &practice.style.views;
    let blocks: Vec<Rect<Sheet>> = blocks.iter().map(|b| b.grown(spacing.block_gap)).collect();
    let inks: Vec<Rect<Sheet>> =
        rooms.iter().zip(local).filter_map(|(r, p)| p.map(|p| Shift::to(p).rect(&r.ink))).collect();
    let short = |all: Rect<Sheet>| Shortage {
        needed: (all.width(), all.height()),
        available: (inner.width(), inner.height()),
    };
    let mut shift = Vector::new(0.0, 0.0);
    if let Some(all) = Rect::union_of(inks.iter().copied()) {
        shift = best_shift(&inks, all, inner, &blocks).ok_or(short(all))?;
    }
    let mut taken: Vec<Rect<Sheet>> = inks.iter().map(|r| r.shifted(shift)).collect();
    let mut shifts = Vec::with_capacity(rooms.len());
    for (room, place) in rooms.iter().zip(local) {
        if let Some(p) = place {
            shifts.push(Shift::to(*p + shift));
            continue;
        }
        let at_origin = Shift::to(Point::new(0.0, 0.0)).rect(&room.ink);
        let mut obstacles = blocks.clone();
        obstacles.extend(taken.iter().map(|t| t.grown(spacing.ink_gap + practice.group.wide)));
        let free =
            best_shift(&[at_origin], at_origin, inner, &obstacles).ok_or(short(at_origin))?;
        taken.push(at_origin.shifted(free));
        shifts.push(Shift::to(Point::new(free.x, free.y)));
    }
    Ok(shifts)
}

/// The displacement that brings all boxes inside `inner` and clear of the blocks, with the middle
/// of the whole nearest to the middle of the room above the blocks at the sheet's foot.
fn best_shift(
    inks: &[Rect<Sheet>],
    all: Rect<Sheet>,
    inner: Rect<Sheet>,
    blocks: &[Rect<Sheet>],
) -> Option<Vector<Sheet>> {
    let (room_x, room_y) = (inner.width() - all.width(), inner.height() - all.height());
    if room_x < 0.0 || room_y < 0.0 {
        return None;
    }
    let ideal = middle_of_field(inner, blocks);
    let steps = |room: f64| (room / STEP).floor() as usize + 1;
    let mut best: Option<(f64, Vector<Sheet>)> = None;
    for j in 0..steps(room_y) {
        for i in 0..steps(room_x) {
            let corner = Point::new(inner.min.x + i as f64 * STEP, inner.min.y + j as f64 * STEP);
            let shift = corner - all.min;
            let middle = all.shifted(shift).centre();
            let distance = middle.distance(ideal);
            if best.is_none_or(|(d, _)| distance < d - 1e-9)
                && inks.iter().all(|k| {
                    let k = k.shifted(shift);
                    blocks.iter().all(|b| !k.overlaps(b))
                })
            {
                best = Some((distance, shift));
            }
        }
    }
    best.map(|(_, shift)| shift)
}

/// Middle of the largest upright or level strip beside the blocks: where the eye wants the views.
fn middle_of_field(inner: Rect<Sheet>, blocks: &[Rect<Sheet>]) -> Point<Sheet> {
    let foot = blocks
        .iter()
        .filter(|b| b.overlaps(&inner) && b.centre().y > inner.centre().y)
        .map(|b| b.min.y)
        .fold(inner.max.y, f64::min);
    Point::new(inner.centre().x, (inner.min.y + foot.max(inner.centre().y)) / 2.0)
}
