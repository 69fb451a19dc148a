//! The only ways from one space to another.

use super::{Arc, Cubic, Curve, EllipticArc, Line, Paper, Path, Point, Rect, Sheet, Vector, View};
use crate::units::Scale;

/// From view space to paper around the view's origin: multiplied by the scale, y turned over.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Placement {
    scale: Scale,
}

/// From paper around a view's origin to the sheet: moved to where the view stands.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Shift {
    /// Where the view's origin stands on the sheet.
    pub origin: Point<Sheet>,
}

impl Placement {
    /// A view drawn at `scale`.
    #[must_use]
    pub fn new(scale: Scale) -> Self {
        Self { scale }
    }

    /// The scale of the view.
    #[must_use]
    pub fn scale(&self) -> Scale {
        self.scale
    }

    /// Where a place of the view lands on paper.
    #[must_use]
    pub fn point(&self, p: Point<View>) -> Point<Paper> {
        let k = self.scale.factor();
        Point::new(p.x * k, -p.y * k)
    }

    /// A displacement of the view on paper.
    #[must_use]
    pub fn vector(&self, v: Vector<View>) -> Vector<Paper> {
        let k = self.scale.factor();
        Vector::new(v.x * k, -v.y * k)
    }

    /// A length of the part as a length on paper, in mm.
    #[must_use]
    pub fn length(&self, part_mm: f64) -> f64 {
        part_mm * self.scale.factor()
    }

    /// A box of the view on paper.
    #[must_use]
    pub fn rect(&self, r: &Rect<View>) -> Rect<Paper> {
        Rect::new(self.point(r.min), self.point(r.max))
    }

    /// A curve of the view on paper. Angles as the reader sees them do not change.
    #[must_use]
    pub fn curve(&self, c: &Curve<View>) -> Curve<Paper> {
        let k = self.scale.factor();
        match c {
            Curve::Line(l) => Curve::Line(Line::new(self.point(l.from), self.point(l.to))),
            Curve::Arc(a) => {
                Curve::Arc(Arc::new(self.point(a.centre), a.radius * k, a.start, a.sweep))
            }
            Curve::Ellipse(e) => Curve::Ellipse(EllipticArc {
                centre: self.point(e.centre),
                radii: (e.radii.0 * k, e.radii.1 * k),
                turn: e.turn,
                start: e.start,
                sweep: e.sweep,
            }),
            Curve::Cubic(c) => Curve::Cubic(Cubic(c.0.map(|p| self.point(p)))),
        }
    }
}

impl Shift {
    /// The view's origin stands at `origin`.
    #[must_use]
    pub fn to(origin: Point<Sheet>) -> Self {
        Self { origin }
    }

    /// Where a place around the view lands on the sheet.
    #[must_use]
    pub fn point(&self, p: Point<Paper>) -> Point<Sheet> {
        Point::new(p.x + self.origin.x, p.y + self.origin.y)
    }

    /// A box around the view on the sheet.
    #[must_use]
    pub fn rect(&self, r: &Rect<Paper>) -> Rect<Sheet> {
        Rect { min: self.point(r.min), max: self.point(r.max) }
    }

    /// A curve around the view on the sheet.
    #[must_use]
    pub fn curve(&self, c: &Curve<Paper>) -> Curve<Sheet> {
        match c {
            Curve::Line(l) => Curve::Line(Line::new(self.point(l.from), self.point(l.to))),
            Curve::Arc(a) => Curve::Arc(Arc::new(self.point(a.centre), a.radius, a.start, a.sweep)),
            Curve::Ellipse(e) => Curve::Ellipse(EllipticArc {
                centre: self.point(e.centre),
                radii: e.radii,
                turn: e.turn,
                start: e.start,
                sweep: e.sweep,
            }),
            Curve::Cubic(c) => Curve::Cubic(Cubic(c.0.map(|p| self.point(p)))),
        }
    }

    /// A path around the view on the sheet.
    #[must_use]
    pub fn path(&self, p: &Path<Paper>) -> Path<Sheet> {
        Path { curves: p.curves.iter().map(|c| self.curve(c)).collect(), closed: p.closed }
    }
}
