//! Hatching of cut faces, in paper space.

use crate::geom::{Curve, Line, Paper, Path, Point, Vector};

/// Curved outlines are clipped against chords that stray at most this far on paper, mm.
const FLATNESS: f64 = 0.005;
/// Hatch lines shorter than this, mm, are left out.
const SHORTEST: f64 = 0.3;
/// Most hatch lines in one face; beyond that the spacing is absurd for the sheet.
const MOST: f64 = 20_000.0;

/// The hatch lines of one face, at `angle` degrees and `spacing` mm, on a grid that all faces of the
/// view share. Area inside by the even-odd rule.
pub(super) fn lines(outlines: &[Path<Paper>], angle: f64, spacing: f64) -> Vec<Line<Paper>> {
    let along = Vector::<Paper>::at_angle(angle);
    let across = along.left();
    let turned = |p: Point<Paper>| {
        let v = p - Point::new(0.0, 0.0);
        (v.dot(along), v.dot(across))
    };
    let polygons: Vec<Vec<(f64, f64)>> = outlines
        .iter()
        .map(|path| path.curves.iter().flat_map(|c| c.flattened(FLATNESS)).map(turned).collect())
        .collect();
    let heights = polygons.iter().flatten().map(|p| p.1);
    let (low, high) =
        heights.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), v| (l.min(v), h.max(v)));
    if low > high || (high - low) / spacing > MOST {
        return Vec::new();
    }
    let back = |t: f64, n: f64| Point::new(0.0, 0.0) + along * t + across * n;
    let (first, last) = ((low / spacing).ceil() as i64, (high / spacing).floor() as i64);
    let mut all = Vec::new();
    for k in first..=last {
        let n = k as f64 * spacing;
        let mut hits: Vec<f64> = polygons.iter().flat_map(|p| crossings(p, n)).collect();
        hits.sort_by(f64::total_cmp);
        for pair in hits.chunks_exact(2) {
            if pair[1] - pair[0] >= SHORTEST {
                all.push(Line::new(back(pair[0], n), back(pair[1], n)));
            }
        }
    }
    all
}

/// Area of a face, mm² of paper: the largest outline less the others in it.
pub(super) fn area(outlines: &[Path<Paper>]) -> f64 {
    let mut areas: Vec<f64> = outlines
        .iter()
        .map(|path| {
            let points: Vec<Point<Paper>> =
                path.curves.iter().flat_map(|c: &Curve<Paper>| c.flattened(FLATNESS)).collect();
            let closing = points.last().zip(points.first()).map(|(a, b)| [*a, *b]);
            let sides = points.windows(2).map(|w| [w[0], w[1]]).chain(closing);
            (sides.map(|[a, b]| a.x * b.y - b.x * a.y).sum::<f64>() / 2.0).abs()
        })
        .collect();
    areas.sort_by(f64::total_cmp);
    let largest = areas.pop().unwrap_or(0.0);
    (largest - areas.iter().sum::<f64>()).max(0.0)
}

/// Where the closed polygon crosses the level line at `n`. A vertex on it counts for the side above.
fn crossings(polygon: &[(f64, f64)], n: f64) -> Vec<f64> {
    let closing = polygon.last().zip(polygon.first()).map(|(a, b)| (*a, *b));
    let sides = polygon.windows(2).map(|w| (w[0], w[1])).chain(closing);
    sides
        .filter(|(a, b)| (a.1 > n) != (b.1 > n))
        .map(|(a, b)| a.0 + (n - a.1) / (b.1 - a.1) * (b.0 - a.0))
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn square(x: f64, side: f64) -> Path<Paper> {
        let p = |x: f64, y: f64| Point::new(x, y);
        Path::polyline(&[p(x, x), p(x + side, x), p(x + side, x + side), p(x, x + side)], true)
    }

    // Mean chord of a convex area along parallel lines times their spacing is its area (Cavalieri).
    #[test]
    fn hatching_covers_the_area_and_spares_the_hole() {
        let face = [square(0.0, 40.0), square(10.0, 12.0)];
        let spacing = 0.1;
        let length: f64 = lines(&face, 45.0, spacing).iter().map(Line::length).sum();
        assert!((length * spacing - (1600.0 - 144.0)).abs() < 8.0, "{}", length * spacing);
        assert!((area(&face) - (1600.0 - 144.0)).abs() < 1e-9);
        let hole = lines(&face, 45.0, 3.0);
        assert!(hole.iter().all(|l| {
            let m = l.at(0.5);
            !(m.x > 10.1 && m.x < 21.9 && m.y > 10.1 && m.y < 21.9)
        }));
    }
}
