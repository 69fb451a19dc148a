//! Hatching of cut faces.
//!
//! Takes the outlines of the regions of one view on paper; gives straight lines clipped to them by
//! the even-odd rule. All regions of a view are one part: they share direction, spacing and one
//! grid of lines through the view's origin, so that the hatching reads as one cut (ISO 128-3). The
//! spacing goes by the hatched area. Clipping is exact for every kind of curve: outlines are split
//! where they turn back square to the hatching, and each piece then crosses a line once or not.

use std::collections::BTreeMap;

use super::paper::PaperHatch;
use crate::geom::{COINCIDENT, Curve, Line, Paper, Path, Point, Vector};
use crate::ident::ShapeId;
use crate::style::HatchSpec;

/// Shorter pieces are not drawn, mm: a corner that a line just touches would show as a speck, some
/// three dots of a printer.
const LEAST_STROKE: f64 = 0.3;

/// Most lines of all regions of a view; one over all of an A0 sheet takes some 700. A view with more
/// lies outside every sheet, which is reported where views are placed; it gets none.
const MOST_LINES: f64 = 200_000.0;

/// A region needs this many lines to read as hatched.
const FEWEST_LINES: usize = 2;

/// The hatching of a view's regions.
pub(super) fn hatched(
    regions: Vec<(ShapeId, Vec<Path<Paper>>)>,
    spec: &HatchSpec,
    width: f64,
) -> Vec<PaperHatch> {
    let strips: Vec<Strips> =
        regions.iter().map(|(_, paths)| Strips::of(paths, spec.angle)).collect();
    let spacing = common_spacing(&strips, spec);
    regions
        .into_iter()
        .zip(strips)
        .map(|((shape, outlines), strips)| {
            let lines = spacing.map_or(Vec::new(), |s| strips.lines(s));
            PaperHatch { shape, lines, outlines, width, angle: spec.angle }
        })
        .collect()
}

/// One spacing for all: by their area together, halved as long as a region would get too few lines
/// to be seen as cut, but never closer than the style's closest.
fn common_spacing(strips: &[Strips], spec: &HatchSpec) -> Option<f64> {
    let closest = spec.spacing.iter().map(|(_, s)| *s).reduce(f64::min)?;
    if strips.iter().map(|s| s.breadth() / closest).sum::<f64>() > MOST_LINES {
        return None;
    }
    let area: f64 = strips.iter().map(|s| s.area(closest)).sum();
    let by_area = spec.spacing.iter().find(|(up_to, _)| area <= *up_to).or(spec.spacing.last())?;
    let mut spacing = by_area.1;
    let is_bare = |spacing: f64| strips.iter().any(|s| s.lines(spacing).len() < FEWEST_LINES);
    while spacing > closest && is_bare(spacing) {
        spacing = (spacing / 2.0).max(closest);
    }
    Some(spacing)
}

/// Outlines cut into pieces that run one way across the hatching.
struct Strips {
    pieces: Vec<Strip>,
    /// Along the hatching.
    along: Vector<Paper>,
    /// Square to it.
    across: Vector<Paper>,
}

/// A piece of an outline between two parameters, and its distances from the first hatch line there.
struct Strip {
    curve: Curve<Paper>,
    parameters: (f64, f64),
    levels: (f64, f64),
}

impl Strips {
    fn of(paths: &[Path<Paper>], angle: f64) -> Self {
        let along = Vector::at_angle(angle);
        let across = along.left();
        let mut strips = Self { pieces: Vec::new(), along, across };
        for path in paths {
            strips.add(path);
        }
        strips
    }

    /// Adds an outline. Where one piece ends and the next begins both get the very same level, the
    /// last that of the first, so that a line through the joint meets exactly one of them.
    fn add(&mut self, path: &Path<Paper>) {
        let Some(first) = path.curves.first() else { return };
        let begin = self.level(first.start());
        let mut level = begin;
        let last = path.curves.len() - 1;
        for (i, curve) in path.curves.iter().enumerate() {
            let mut stops = curve.extremes(self.across);
            stops.push(1.0);
            let mut from = 0.0;
            for to in stops {
                let ends = i == last && to == 1.0;
                let next = if ends { begin } else { self.level(curve.at(to)) };
                let (parameters, levels) = ((from, to), (level, next));
                self.pieces.push(Strip { curve: *curve, parameters, levels });
                (from, level) = (to, next);
            }
        }
    }

    fn level(&self, p: Point<Paper>) -> f64 {
        self.across.dot(p - Point::new(0.0, 0.0))
    }

    /// Extent square to the hatching, mm.
    fn breadth(&self) -> f64 {
        let ends = self.pieces.iter().flat_map(|s| [s.levels.0, s.levels.1]);
        let (low, high) = ends.fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), level| {
            (level.min(low), level.max(high))
        });
        (high - low).max(0.0)
    }

    /// Area by the even-odd rule, mm², from lines at `spacing`: good to some percent, and it only
    /// chooses among a few spacings.
    fn area(&self, spacing: f64) -> f64 {
        self.lines(spacing).iter().map(|l| l.length() * spacing).sum()
    }

    /// The lines at whole multiples of `spacing` from the view's origin, inside by even-odd.
    fn lines(&self, spacing: f64) -> Vec<Line<Paper>> {
        let mut meetings: BTreeMap<i64, Vec<f64>> = BTreeMap::new();
        for strip in &self.pieces {
            let (low, high) =
                (strip.levels.0.min(strip.levels.1), strip.levels.0.max(strip.levels.1));
            let (first, end) = ((low / spacing).ceil(), (high / spacing).ceil());
            // Half open: a line through a joint belongs to the piece above it.
            for k in first as i64..end as i64 {
                let p = strip.at_level(k as f64 * spacing, self);
                meetings.entry(k).or_default().push(self.along.dot(p - Point::new(0.0, 0.0)));
            }
        }
        let mut lines = Vec::new();
        for (k, mut stops) in meetings {
            stops.sort_by(f64::total_cmp);
            for pair in stops.chunks_exact(2).filter(|p| p[1] - p[0] >= LEAST_STROKE) {
                let base = Point::new(0.0, 0.0) + self.across * (k as f64 * spacing);
                lines.push(Line::new(base + self.along * pair[0], base + self.along * pair[1]));
            }
        }
        lines
    }
}

impl Strip {
    /// Where the piece crosses `level`; its level runs one way, so halving finds the place.
    fn at_level(&self, level: f64, strips: &Strips) -> Point<Paper> {
        let (mut low, mut high) = self.parameters;
        if let Curve::Line(line) = &self.curve {
            let share = (level - self.levels.0) / (self.levels.1 - self.levels.0);
            return line.at(low + (high - low) * share);
        }
        let rising = self.levels.1 > self.levels.0;
        // 60 halvings bring any parameter range below the spacing of f64.
        for _ in 0..60 {
            let middle = (low + high) / 2.0;
            if (strips.level(self.curve.at(middle)) < level) == rising {
                low = middle;
            } else {
                high = middle;
            }
            if high - low <= COINCIDENT * 1e-9 {
                break;
            }
        }
        self.curve.at((low + high) / 2.0)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geom::{Arc, Cubic};
    use crate::style::builtin;
    use proptest::prelude::*;

    fn p(x: f64, y: f64) -> Point<Paper> {
        Point::new(x, y)
    }

    fn square(x: f64, y: f64, side: f64) -> Path<Paper> {
        Path::polyline(&[p(x, y), p(x + side, y), p(x + side, y + side), p(x, y + side)], true)
    }

    fn circle(x: f64, y: f64, radius: f64) -> Path<Paper> {
        Path::of(Curve::Arc(Arc::circle(p(x, y), radius)))
    }

    fn hatch(paths: Vec<Path<Paper>>) -> Vec<Line<Paper>> {
        let spec = builtin("iso").expect("compiled in").hatch;
        hatched(vec![(ShapeId::new("cut"), paths)], &spec, 0.25).remove(0).lines
    }

    #[test]
    fn lines_rise_at_the_styles_angle_and_keep_the_spacing_for_their_area() {
        // 40 × 40 = 1600 mm²: spacing 3 (practice: 2 below 200 mm², 3 to 5000 mm²).
        let lines = hatch(vec![square(-7.0, 5.0, 40.0)]);
        let across = Vector::<Paper>::at_angle(135.0);
        for l in &lines {
            assert!((l.vector().angle() - 45.0).abs() < 1e-9);
            let level = across.dot(l.from - p(0.0, 0.0)) / 3.0;
            assert!((level - level.round()).abs() < 1e-9, "{level}");
        }
        // The square's diagonal of 56.57 mm holds 18 or 19 lines at 3 mm.
        assert!((18..=19).contains(&lines.len()), "{}", lines.len());
    }

    #[test]
    fn a_hole_in_the_face_stays_free() {
        let lines = hatch(vec![square(-20.0, -20.0, 40.0), circle(0.0, 0.0, 8.0)]);
        for l in &lines {
            for t in [0.001, 0.3, 0.5, 0.999] {
                assert!(l.at(t).distance(p(0.0, 0.0)) > 8.0 - 1e-2 - COINCIDENT, "{l:?}");
            }
        }
        // Ends lie on the rim to the precision of the arithmetic.
        let on_rim = lines
            .iter()
            .flat_map(|l| [l.from, l.to])
            .filter(|q| (q.distance(p(0.0, 0.0)) - 8.0).abs() < 1e-9);
        assert!(on_rim.count() >= 8);
    }

    #[test]
    fn a_narrow_region_beside_a_wide_one_is_still_hatched() {
        let spec = builtin("iso").expect("compiled in").hatch;
        let regions = vec![
            (ShapeId::new("body"), vec![square(0.0, 0.0, 150.0)]),
            (ShapeId::new("ring"), vec![square(200.3, 1.1, 3.0)]),
        ];
        let found = hatched(regions, &spec, 0.25);
        assert!(found.iter().all(|h| h.lines.len() >= FEWEST_LINES), "{:?}", found[1].lines);
    }

    #[test]
    fn free_curves_are_clipped_exactly() {
        let arch = Path {
            curves: vec![
                Curve::Cubic(Cubic([p(0.0, 0.0), p(5.0, -30.0), p(25.0, -30.0), p(30.0, 0.0)])),
                Curve::line(p(30.0, 0.0), p(0.0, 0.0)),
            ],
            closed: true,
        };
        let lines = hatch(vec![arch.clone()]);
        assert!(lines.len() > 5);
        let rim: Vec<_> = arch.curves.iter().flat_map(|c| c.flattened(1e-6)).collect();
        for end in lines.iter().flat_map(|l| [l.from, l.to]) {
            let off = rim
                .windows(2)
                .map(|w| {
                    crate::geom::distance_line_line(w[0], w[1], end, end + Vector::new(1e-9, 0.0))
                })
                .fold(f64::INFINITY, f64::min);
            assert!(off < 1e-4, "{off}");
        }
    }

    proptest! {
        #[test]
        fn hatched_area_comes_near_the_true_area(
            x in -50.0..50.0f64, y in -50.0..50.0f64, r in 15.0..60.0f64, share in 0.2..0.8f64,
        ) {
            let paths = [circle(x, y, r), circle(x + 1.0, y, r * share)];
            let strips = Strips::of(&paths, 45.0);
            let exact = std::f64::consts::PI * r * r * (1.0 - share * share);
            prop_assert!((strips.area(0.05) / exact - 1.0).abs() < 0.01);
        }

        #[test]
        fn a_line_through_corners_is_clipped_like_any_other(k in -5..5i32, n in 1..9i32) {
            // Corners on the very grid of the hatching: 45° lines through whole multiples.
            let side = 3.0 * std::f64::consts::SQRT_2 * f64::from(n);
            let x = 1.5 * std::f64::consts::SQRT_2 * f64::from(k);
            for l in hatch(vec![square(x, -x, side)]) {
                let m = l.at(0.5);
                prop_assert!(m.x > x - 1e-9 && m.x < x + side + 1e-9);
                prop_assert!(m.y > -x - 1e-9 && m.y < -x + side + 1e-9);
            }
        }
    }
}
