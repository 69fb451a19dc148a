//! Which views stand beside, above and below each other.
//!
//! ISO 5456-2: in first angle each view stands on the far side of what it shows, in third angle on
//! the near side. Views of one column share their places across, views of one row their heights.

use crate::spec::Direction;
use crate::style::Projection;
use crate::view::View;

/// A view's place in the grid; columns count to the right, rows downwards, the front view at 0, 0.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) struct Cell {
    /// Column.
    pub column: i32,
    /// Row.
    pub row: i32,
}

/// Whether a view stands in the grid or where there is room.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Stand {
    /// In projection with its neighbours.
    Aligned(Cell),
    /// Anywhere: pictorial views, and views at a scale of their own.
    Free,
}

/// The place of each view, whatever the order in which they are written.
pub(super) fn stands(views: &[View], projection: Projection) -> Vec<Stand> {
    let mut taken: Vec<(Cell, &str)> = Vec::new();
    let mut order: Vec<usize> = (0..views.len()).collect();
    // Several views from one direction stand in a row outwards, in the order of their ids.
    order.sort_by(|a, b| (views[*a].from, &views[*a].id).cmp(&(views[*b].from, &views[*b].id)));
    let mut stands = vec![Stand::Free; views.len()];
    for i in order {
        let view = &views[i];
        if view.scale.is_some() {
            continue;
        }
        let Some((step_x, step_y)) = outward(view.from, projection) else { continue };
        let mut cell = Cell { column: step_x, row: step_y };
        let part = view.part.as_str();
        while taken.iter().any(|(c, p)| *c == cell && *p == part) {
            cell.column += if step_y == 0 { step_x.signum().max(-1) } else { 0 };
            cell.row += step_y.signum();
            if step_x == 0 && step_y == 0 {
                cell.column += 1;
            }
        }
        taken.push((cell, part));
        stands[i] = Stand::Aligned(cell);
    }
    stands
}

/// Column and row of the first view from a direction; `None` for pictorial views.
fn outward(from: Direction, projection: Projection) -> Option<(i32, i32)> {
    let near = match projection {
        Projection::FirstAngle => -1,
        Projection::ThirdAngle => 1,
    };
    match from {
        Direction::Front => Some((0, 0)),
        Direction::Top => Some((0, -near)),
        Direction::Bottom => Some((0, near)),
        Direction::Right => Some((near, 0)),
        Direction::Left => Some((-near, 0)),
        Direction::Rear => Some((2, 0)),
        Direction::Iso => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // ISO 5456-2:1996 and ISO 128-3: places of the views relative to the front view.
    #[test]
    fn first_and_third_angle_are_mirror_images() {
        let place = |d, p| outward(d, p);
        let (first, third) = (Projection::FirstAngle, Projection::ThirdAngle);
        assert_eq!(place(Direction::Top, first), Some((0, 1)), "below the front view");
        assert_eq!(place(Direction::Top, third), Some((0, -1)), "above the front view");
        assert_eq!(place(Direction::Left, first), Some((1, 0)), "at the right");
        assert_eq!(place(Direction::Left, third), Some((-1, 0)), "at the left");
        assert_eq!(place(Direction::Right, first), Some((-1, 0)), "at the left");
        assert_eq!(place(Direction::Right, third), Some((1, 0)), "at the right");
    }
}
