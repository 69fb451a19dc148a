//! Symbols drawn as strokes in proportion to the letter height.
//!
//! Coordinates are shares of the letter height h, y **up**, origin on the base line at the left
//! edge; stroke h/10. Proportions after ISO 3098-1 and ISO 129-1; the shapes are those of the
//! standards, proportions other than ⌀ and □ are common practice (from memory).

use kurbo::{BezPath, Circle, Point, Shape};

/// A symbol that stands in a line of text.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Symbol {
    /// ⌀ before a diameter.
    Diameter,
    /// □ before the side of a square.
    Square,
    /// ↧ before a depth.
    Depth,
    /// ⌴ before the diameter of a counterbore, in ISO also of a spotface.
    Counterbore,
    /// ⌵ before the diameter of a countersink.
    Countersink,
}

/// What a symbol puts on paper, in h, y up.
#[derive(Clone, Debug, Default)]
pub struct SymbolInk {
    /// Centre lines of its strokes, drawn h/10 wide.
    pub strokes: BezPath,
    /// Filled areas.
    pub fills: BezPath,
}

impl Symbol {
    /// Every symbol.
    pub const ALL: [Self; 5] =
        [Self::Diameter, Self::Square, Self::Depth, Self::Counterbore, Self::Countersink];

    /// Stroke width in h (ISO 3098-1 type B).
    pub const STROKE: f64 = 0.1;

    /// The symbol that stands for a character in a text, if it is one.
    #[must_use]
    pub fn of_char(c: char) -> Option<Self> {
        Self::ALL.into_iter().find(|s| s.to_char() == c)
    }

    /// The character that stands for it in plain text.
    #[must_use]
    pub fn to_char(self) -> char {
        match self {
            Self::Diameter => '⌀',
            Self::Square => '□',
            Self::Depth => '↧',
            Self::Counterbore => '⌴',
            Self::Countersink => '⌵',
        }
    }

    /// Width to the next character in h.
    #[must_use]
    pub fn advance(self) -> f64 {
        match self {
            Self::Diameter | Self::Square => 0.95,
            Self::Depth => 1.15,
            Self::Counterbore | Self::Countersink => 2.2,
        }
    }

    /// Its strokes and fills.
    #[must_use]
    pub fn ink(self) -> SymbolInk {
        let mut ink = SymbolInk::default();
        match self {
            Self::Diameter => {
                ink.strokes.extend(Circle::new((0.45, 0.5), 0.35).path_elements(1e-4));
                stroke(&mut ink.strokes, &[(0.316, 0.0), (0.584, 1.0)]);
            }
            Self::Square => {
                stroke(&mut ink.strokes, &[(0.1, 0.0), (0.8, 0.0), (0.8, 0.7), (0.1, 0.7)]);
                ink.strokes.close_path();
            }
            Self::Depth => {
                stroke(&mut ink.strokes, &[(0.0, 1.0), (1.0, 1.0)]);
                stroke(&mut ink.strokes, &[(0.5, 1.0), (0.5, 0.4)]);
                stroke(&mut ink.fills, &[(0.5, 0.0), (0.3, 0.5), (0.7, 0.5)]);
                ink.fills.close_path();
            }
            Self::Counterbore => {
                stroke(&mut ink.strokes, &[(0.0, 1.0), (0.0, 0.0), (2.0, 0.0), (2.0, 1.0)]);
            }
            Self::Countersink => {
                stroke(&mut ink.strokes, &[(0.0, 1.0), (1.0, 0.0), (2.0, 1.0)]);
            }
        }
        ink
    }

    /// Ink box in h, y up, stroke width included.
    #[must_use]
    pub fn ink_box(self) -> kurbo::Rect {
        let SymbolInk { strokes, fills } = self.ink();
        // Strokes are drawn with round caps and joins, so half a width all round is exact.
        let half = Self::STROKE / 2.0;
        let mut ink = strokes.bounding_box().inflate(half, half);
        if !fills.elements().is_empty() {
            ink = ink.union(fills.bounding_box());
        }
        ink
    }
}

fn stroke(path: &mut BezPath, points: &[(f64, f64)]) {
    if let [(x, y), rest @ ..] = points {
        path.move_to(Point::new(*x, *y));
        for (x, y) in rest {
            path.line_to(Point::new(*x, *y));
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn characters_and_symbols_stand_for_each_other() {
        for s in Symbol::ALL {
            assert_eq!(Symbol::of_char(s.to_char()), Some(s));
        }
        assert_eq!(Symbol::of_char('A'), None);
    }

    #[test]
    fn ink_stays_within_the_advance_but_for_half_a_stroke() {
        for s in Symbol::ALL {
            let ink = s.ink_box();
            assert!(ink.x0 >= -Symbol::STROKE && ink.x1 <= s.advance(), "{s:?} {ink:?}");
        }
    }
}
