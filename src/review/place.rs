//! Places on the sheet: which comes first, and what lies between two.

use std::cmp::Ordering;

use crate::geom::{Rect, Sheet};

/// From the top of the sheet, then from the left. A total order, so that what is picked among
/// equals does not depend on the order of items.
pub(crate) fn order(a: &Rect<Sheet>, b: &Rect<Sheet>) -> Ordering {
    let sides = |r: &Rect<Sheet>| [r.min.y, r.min.x, r.max.y, r.max.x];
    let unequal = sides(a).into_iter().zip(sides(b)).map(|(x, y)| x.total_cmp(&y));
    unequal.fold(Ordering::Equal, Ordering::then)
}

/// The common part of two boxes, or the gap between them where they have none.
pub(crate) fn between(a: &Rect<Sheet>, b: &Rect<Sheet>) -> Rect<Sheet> {
    Rect::from_sides(
        a.min.x.max(b.min.x),
        a.min.y.max(b.min.y),
        a.max.x.min(b.max.x),
        a.max.y.min(b.max.y),
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_gap_of_boxes_side_by_side_is_as_wide_as_their_distance() {
        let (a, b) = (Rect::from_sides(0.0, 0.0, 2.0, 4.0), Rect::from_sides(5.0, 1.0, 6.0, 9.0));
        assert_eq!(between(&a, &b), Rect::from_sides(2.0, 1.0, 5.0, 4.0));
        assert_eq!(between(&a, &b), between(&b, &a));
    }

    #[test]
    fn what_is_higher_comes_first() {
        let (a, b) = (Rect::from_sides(9.0, 1.0, 9.0, 2.0), Rect::from_sides(0.0, 2.0, 1.0, 3.0));
        assert_eq!(order(&a, &b), Ordering::Less);
        assert_eq!(order(&a, &a), Ordering::Equal);
    }
}
