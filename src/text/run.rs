//! One line of text at one height: which glyph or symbol stands where.

use super::{GlyphId, Lettering, Symbol};
use crate::geom::{Paper, Point, Quad, Rect, Space, Vector};

/// A measured line of text. Lengths in mm of paper; x from the run's beginning along the base
/// line, y down as on the sheet.
#[derive(Clone, Debug, PartialEq)]
pub struct Run {
    /// The text as a reader would type it; symbols by their characters.
    pub text: String,
    /// Height of its capitals in mm.
    pub height: f64,
    /// Its glyphs and symbols from left to right.
    pub pieces: Vec<Piece>,
    /// Width from the beginning to where a next character would begin.
    pub advance: f64,
    /// Box of the ink; empty at the origin for a blank run.
    pub ink: Rect<Paper>,
    /// Characters that the lettering cannot draw, in order of appearance.
    pub missing: Vec<char>,
}

/// One glyph or symbol of a run.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Piece {
    /// Where it begins, mm from the run's beginning.
    pub x: f64,
    /// What it is.
    pub kind: PieceKind,
}

/// What stands at a place of a run.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PieceKind {
    /// A glyph of the bundled font.
    Glyph(GlyphId),
    /// A symbol drawn as strokes.
    Symbol(Symbol),
}

impl Run {
    /// Measures `text` with capitals of `height` mm. Line ends and other control characters have
    /// no place in a run and are left out.
    #[must_use]
    pub fn new(text: &str, height: f64) -> Self {
        let font = Lettering::bundled();
        let mut run = Self {
            text: text.chars().filter(|c| !c.is_control()).collect(),
            height,
            pieces: Vec::new(),
            advance: 0.0,
            ink: Rect::new(Point::new(0.0, 0.0), Point::new(0.0, 0.0)),
            missing: Vec::new(),
        };
        let mut ink: Option<Rect<Paper>> = None;
        for c in run.text.chars() {
            let (kind, advance, box_h) = match Symbol::of_char(c) {
                Some(s) => (PieceKind::Symbol(s), s.advance(), Some(s.ink_box())),
                None => {
                    let glyph = font.glyph(c).unwrap_or_else(|| {
                        run.missing.push(c);
                        font.missing()
                    });
                    (PieceKind::Glyph(glyph), font.advance(glyph), font.ink(glyph))
                }
            };
            if let Some(b) = box_h {
                let x = run.advance;
                let placed = Rect::from_sides(
                    x + b.x0 * height,
                    -b.y0 * height,
                    x + b.x1 * height,
                    -b.y1 * height,
                );
                ink = Some(ink.map_or(placed, |i| i.union(placed)));
                run.pieces.push(Piece { x, kind });
            }
            run.advance += advance * height;
        }
        if let Some(ink) = ink {
            run.ink = ink;
        }
        run
    }

    /// Whether it puts nothing on paper.
    #[must_use]
    pub fn is_blank(&self) -> bool {
        self.pieces.is_empty()
    }

    /// The ink box of the run when its base line begins at `origin` and is turned by `angle`
    /// degrees counter-clockwise as the reader sees it.
    #[must_use]
    pub fn quad<S: Space>(&self, origin: Point<S>, angle: f64) -> Quad<S> {
        let along = Vector::<S>::at_angle(angle);
        let up = along.left();
        Quad(self.ink.corners().map(|p| origin + along * p.x + up * -p.y))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geom::Sheet;

    #[test]
    fn figures_are_as_wide_as_each_other() {
        let w = Run::new("0", 3.5).advance;
        assert!(
            "123456789".chars().all(|c| (Run::new(&c.to_string(), 3.5).advance - w).abs() < 1e-9)
        );
    }

    #[test]
    fn capitals_are_as_high_as_asked() {
        let ink = Run::new("H", 3.5).ink;
        assert!((ink.height() - 3.5).abs() < 0.02, "{ink:?}");
    }

    #[test]
    fn a_turned_run_reads_upwards() {
        let quad = Run::new("1000", 3.5).quad(Point::<Sheet>::new(50.0, 50.0), 90.0);
        let b = quad.bounds();
        assert!(b.max.y <= 50.0 && b.max.x <= 50.5 && b.height() > b.width());
    }

    #[test]
    fn unknown_characters_are_named() {
        assert_eq!(Run::new("A漢B", 3.5).missing, vec!['漢']);
    }
}
