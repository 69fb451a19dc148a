//! Lines between cells that tile a rectangle.

use crate::geom::{Path, Point, Rect, Sheet, same};

/// A stretch of a line at `at` on the other axis.
#[derive(Clone, Copy)]
struct Stretch {
    at: f64,
    from: f64,
    to: f64,
}

/// The borders between `cells`, each drawn once and as long as it goes on straight. The sides of
/// `outer`, which the cells tile, are left out.
pub(super) fn between_cells(cells: &[Rect<Sheet>], outer: &Rect<Sheet>) -> Vec<Path<Sheet>> {
    // Every inner border is the left or the upper side of the cell behind it.
    let level = cells.iter().filter(|c| !same(c.min.y, outer.min.y)).map(|c| Stretch {
        at: c.min.y,
        from: c.min.x,
        to: c.max.x,
    });
    let upright = cells.iter().filter(|c| !same(c.min.x, outer.min.x)).map(|c| Stretch {
        at: c.min.x,
        from: c.min.y,
        to: c.max.y,
    });
    let level = joined(level.collect())
        .into_iter()
        .map(|s| Path::polyline(&[Point::new(s.from, s.at), Point::new(s.to, s.at)], false));
    let upright = joined(upright.collect())
        .into_iter()
        .map(|s| Path::polyline(&[Point::new(s.at, s.from), Point::new(s.at, s.to)], false));
    level.chain(upright).collect()
}

/// Stretches that follow each other on one line, made one.
fn joined(mut stretches: Vec<Stretch>) -> Vec<Stretch> {
    stretches.sort_by(|a, b| a.at.total_cmp(&b.at).then(a.from.total_cmp(&b.from)));
    let mut all: Vec<Stretch> = Vec::new();
    for next in stretches {
        match all.last_mut() {
            Some(last) if same(last.at, next.at) && same(last.to, next.from) => last.to = next.to,
            Some(_) | None => all.push(next),
        }
    }
    all
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn borders_go_on_as_far_as_they_are_straight() {
        let outer = Rect::from_sides(0.0, 0.0, 30.0, 20.0);
        let cells = [
            Rect::from_sides(0.0, 0.0, 10.0, 20.0),
            Rect::from_sides(10.0, 0.0, 20.0, 10.0),
            Rect::from_sides(20.0, 0.0, 30.0, 10.0),
            Rect::from_sides(10.0, 10.0, 30.0, 20.0),
        ];
        let mut lengths: Vec<f64> =
            between_cells(&cells, &outer).iter().map(Path::length).collect();
        lengths.sort_by(f64::total_cmp);
        assert_eq!(lengths, [10.0, 20.0, 20.0]);
    }
}
