//! SVG path data of sheet curves and of font outlines.

use super::number;
use crate::geom::{Arc, COINCIDENT, Curve, EllipticArc, Path, Point, Sheet};

/// Arcs are written in pieces of at most this many degrees: the centre that a reader derives from
/// two rounded ends then strays by no more than the ends do. Half circles in one piece would let
/// it stray by √(2·r·rounding), a tenth of a millimetre.
const LONGEST_PIECE: f64 = 90.0;

/// The circle that a path is, if it is nothing else.
pub(super) fn as_circle(path: &Path<Sheet>) -> Option<Arc<Sheet>> {
    match path.curves.as_slice() {
        [Curve::Arc(a)] if a.is_full() => Some(*a),
        _ => None,
    }
}

/// The `d` attribute of all `paths`.
pub(super) fn path_data(paths: &[Path<Sheet>]) -> String {
    let mut d = String::new();
    for path in paths {
        push_path(&mut d, path);
    }
    d
}

fn push_path(d: &mut String, path: &Path<Sheet>) {
    let write = precision(path);
    let Some(first) = path.curves.first() else { return };
    let mut pen = Pen { d, write };
    pen.point('M', first.start());
    // The line back to the beginning is what Z draws.
    let (body, back) = match path.curves.split_last() {
        Some((Curve::Line(l), rest))
            if path.closed && !rest.is_empty() && l.to.is_at(first.start()) =>
        {
            (rest, Some(l))
        }
        _ => (path.curves.as_slice(), None),
    };
    let mut at = first.start();
    for curve in body {
        if curve.start().distance(at) > COINCIDENT {
            pen.point('M', curve.start());
        }
        pen.curve(curve);
        at = curve.end();
    }
    if path.closed {
        if let Some(line) = back.filter(|l| l.from.distance(at) > COINCIDENT) {
            pen.point('L', line.from);
        }
        pen.d.push('Z');
    }
}

/// A reader derives the centre of an arc from its ends; across a flat ellipse their rounding is
/// magnified by the ratio of the axes.
fn precision(path: &Path<Sheet>) -> fn(f64) -> String {
    let has = |kind: fn(&Curve<Sheet>) -> bool| path.curves.iter().any(kind);
    if has(|c| matches!(c, Curve::Ellipse(_))) {
        number::factor
    } else if has(|c| matches!(c, Curve::Arc(_))) {
        number::fine
    } else {
        number::length
    }
}

struct Pen<'a> {
    d: &'a mut String,
    write: fn(f64) -> String,
}

impl Pen<'_> {
    fn point(&mut self, command: char, p: Point<Sheet>) {
        self.d.push(command);
        self.pair(p);
    }

    fn pair(&mut self, p: Point<Sheet>) {
        self.d.push_str(&(self.write)(p.x));
        self.d.push(' ');
        self.d.push_str(&(self.write)(p.y));
    }

    fn curve(&mut self, curve: &Curve<Sheet>) {
        match curve {
            Curve::Line(l) => self.point('L', l.to),
            Curve::Arc(a) => self.arc(curve, (a.radius, a.radius), 0.0, a.sweep),
            Curve::Ellipse(EllipticArc { radii, turn, sweep, .. }) => {
                self.arc(curve, *radii, *turn, *sweep);
            }
            Curve::Cubic(c) => {
                let [_, a, b, end] = c.0;
                self.point('C', a);
                self.d.push(' ');
                self.pair(b);
                self.d.push(' ');
                self.pair(end);
            }
        }
    }

    /// Angles of a scene are counter-clockwise as the reader sees them; SVG's run with its
    /// downward y axis, clockwise.
    fn arc(&mut self, curve: &Curve<Sheet>, radii: (f64, f64), turn: f64, sweep: f64) {
        let pieces = ((sweep.abs() / LONGEST_PIECE - 1e-9).ceil()).clamp(1.0, 4.0) as u32;
        let flag = if sweep > 0.0 { '0' } else { '1' };
        let (rx, ry) = ((self.write)(radii.0), (self.write)(radii.1));
        let turn = number::factor(-turn);
        for i in 1..=pieces {
            self.d.push_str(&format!("A{rx} {ry} {turn} 0 {flag} "));
            self.pair(curve.at(f64::from(i) / f64::from(pieces)));
        }
    }
}

/// The `d` attribute of an outline in shares of the letter height, y up, written in y down and
/// multiplied by `factor` with `places` decimals.
pub(super) fn outline_data(outline: &kurbo::BezPath, factor: f64, places: usize) -> String {
    let mut d = String::new();
    let mut push = |command: char, points: &[kurbo::Point]| {
        d.push(command);
        for (i, p) in points.iter().enumerate() {
            if i > 0 {
                d.push(' ');
            }
            d.push_str(&number::written(p.x * factor, places));
            d.push(' ');
            d.push_str(&number::written(-p.y * factor, places));
        }
    };
    for el in outline.elements() {
        match *el {
            kurbo::PathEl::MoveTo(p) => push('M', &[p]),
            kurbo::PathEl::LineTo(p) => push('L', &[p]),
            kurbo::PathEl::QuadTo(a, p) => push('Q', &[a, p]),
            kurbo::PathEl::CurveTo(a, b, p) => push('C', &[a, b, p]),
            kurbo::PathEl::ClosePath => push('Z', &[]),
        }
    }
    d
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_closed_polyline_leaves_its_last_line_to_z() {
        let p = |x, y| Point::new(x, y);
        let path = Path::polyline(&[p(0.0, 0.0), p(2.0, 0.0), p(2.0, 1.5)], true);
        assert_eq!(path_data(&[path]), "M0 0L2 0L2 1.5Z");
    }

    #[test]
    fn arcs_turn_the_way_the_reader_sees() {
        // From the right of the centre counter-clockwise to its top: upwards, so y falls.
        let arc = Curve::Arc(Arc::new(Point::<Sheet>::new(10.0, 10.0), 5.0, 0.0, 90.0));
        assert_eq!(path_data(&[Path::of(arc)]), "M15 10A5 5 0 0 0 10 5");
        assert_eq!(path_data(&[Path::of(arc.reversed())]), "M10 5A5 5 0 0 1 15 10");
    }

    #[test]
    fn half_circles_are_written_in_two_pieces() {
        let arc = Curve::Arc(Arc::new(Point::<Sheet>::new(0.0, 0.0), 2.0, 0.0, -180.0));
        assert_eq!(path_data(&[Path::of(arc)]), "M2 0A2 2 0 0 1 0 2A2 2 0 0 1 -2 0");
    }
}
