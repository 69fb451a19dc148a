//! Every piece of ink of a sheet, in one spatial index.
//!
//! Takes a scene; gives its strokes as bars, its fills and text boxes as polygons, each with its
//! item and role, and finds the pieces near a box. All clutter rules ask this index, so they see
//! the same ink: strokes with their width, texts as the turned boxes of their ink, arrowheads as
//! their outlines. Strokes are taken to end round, as `Mark::bounds` does: at a flat end that is half
//! a line width too much ink, never too little.
//!
//! Ink further than [`FAR`] mm from the sheet's corner, or at no number at all, is in no index;
//! the frame rule reports its item by its box.

use rstar::{AABB, RTree, RTreeObject};

use super::shape::{Polygon, Shape};
use crate::geom::{Curve, Line, Path, Point, Rect, Sheet};
use crate::scene::{Fill, Ink, Item, ItemKind, Mark, PlacedText, Role, Scene, Stroke};

/// How far chords stray from the curve they stand for, mm: half of the depth at which styles count a
/// meeting, a fiftieth of a narrow line; a circle of 50 mm then takes some 220 chords.
const CHORD: f64 = 0.005;

/// No sheet reaches this far, mm; larger coordinates would overflow in products.
const FAR: f64 = 1e6;

/// What a piece of ink is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Class {
    /// A run of text.
    Text,
    /// An arrowhead or another termination, filled or stroked.
    Termination,
    /// Another filled area, as in a symbol.
    Filled,
    /// A stroke.
    Line,
}

/// A piece of ink.
#[derive(Clone, Debug)]
pub(crate) struct Piece {
    /// Its item's place in the scene.
    pub(crate) item: usize,
    /// Its item's kind.
    pub(crate) kind: ItemKind,
    /// What it is.
    pub(crate) class: Class,
    /// What it does in its annotation.
    pub(crate) role: Option<Role>,
    /// Its form.
    pub(crate) shape: Shape,
    /// The box around it.
    pub(crate) bounds: Rect<Sheet>,
    /// Whether it is a whole straight curve, not a chord of a round one.
    pub(crate) straight: bool,
    /// Number of the curve that it is a chord of; another one for every other piece.
    pub(crate) curve: usize,
    /// Beginning and end of the open path that it belongs to.
    pub(crate) ends: Option<(Point<Sheet>, Point<Sheet>)>,
}

/// All pieces of a sheet.
pub(crate) struct InkIndex<'a> {
    pieces: Vec<Piece>,
    texts: Vec<(usize, &'a PlacedText)>,
    tree: RTree<Leaf>,
}

/// Chords of one curve in one leaf: the tree of a sheet full of circles would otherwise be ten times
/// as large, and slower to build than all rules are to check.
const CHORDS_IN_LEAF: usize = 16;

/// Some consecutive pieces of one curve.
struct Leaf {
    pieces: std::ops::Range<usize>,
    bounds: AABB<[f64; 2]>,
}

impl RTreeObject for Leaf {
    type Envelope = AABB<[f64; 2]>;
    fn envelope(&self) -> Self::Envelope {
        self.bounds
    }
}

impl Piece {
    /// The middle of a stroke; `None` for areas.
    pub(crate) fn line(&self) -> Option<&Line<Sheet>> {
        match &self.shape {
            Shape::Bar { line, .. } => Some(line),
            Shape::Area(_) => None,
        }
    }

    /// The outline of an area; `None` for strokes.
    pub(crate) fn polygon(&self) -> Option<&Polygon> {
        match &self.shape {
            Shape::Bar { .. } => None,
            Shape::Area(p) => Some(p),
        }
    }

    /// Half the width of a stroke; 0 for areas.
    pub(crate) fn half_width(&self) -> f64 {
        match &self.shape {
            Shape::Bar { half, .. } => *half,
            Shape::Area(_) => 0.0,
        }
    }
}

impl<'a> InkIndex<'a> {
    /// The ink of a scene, without a checker's marks.
    pub(crate) fn new(scene: &'a Scene) -> Self {
        let mut index = Self { pieces: Vec::new(), texts: Vec::new(), tree: RTree::new() };
        for (i, item) in scene.items.iter().enumerate() {
            if item.kind != ItemKind::Finding {
                item.marks.iter().for_each(|mark| index.take(i, item, mark));
            }
        }
        index.tree = RTree::bulk_load(leaves(&index.pieces));
        index
    }

    /// Every piece, in drawing order.
    pub(crate) fn pieces(&self) -> &[Piece] {
        &self.pieces
    }

    /// Every text that puts ink on paper, with its piece.
    pub(crate) fn texts(&self) -> impl Iterator<Item = (&Piece, &'a PlacedText)> {
        self.texts.iter().map(|(i, t)| (&self.pieces[*i], *t))
    }

    /// The pieces whose boxes meet `area`, in no particular order.
    pub(crate) fn near(&self, area: Rect<Sheet>) -> impl Iterator<Item = &Piece> + use<'_, 'a> {
        let leaves = self.tree.locate_in_envelope_intersecting(envelope(&area));
        leaves
            .flat_map(|l| &self.pieces[l.pieces.clone()])
            .filter(move |p| p.bounds.distance(&area) <= 0.0)
    }

    fn take(&mut self, i: usize, item: &Item, mark: &'a Mark) {
        match mark {
            Mark::Stroke(s) if s.ink == Ink::Drawing => self.take_stroke((i, item.kind), s),
            Mark::Fill(f) if f.ink == Ink::Drawing => self.take_fill((i, item.kind), f),
            Mark::Text(t) if t.ink == Ink::Drawing && !t.run.is_blank() => {
                let shape = Shape::Area(Polygon::new(t.quad().0.to_vec()));
                let look = Look { class: Class::Text, role: None, straight: false, ends: None };
                if self.push((i, item.kind), look, [shape]) {
                    self.texts.push((self.pieces.len() - 1, t));
                }
            }
            Mark::Stroke(_) | Mark::Fill(_) | Mark::Text(_) => {}
        }
    }

    fn take_stroke(&mut self, of: (usize, ItemKind), stroke: &Stroke) {
        let role = stroke.role;
        let class = if role == Some(Role::Arrow) { Class::Termination } else { Class::Line };
        for path in &stroke.paths {
            let ends = open_ends(path);
            for curve in &path.curves {
                let straight = matches!(curve, Curve::Line(_));
                let half = stroke.width / 2.0;
                let chords = curve.flattened(CHORD);
                let bars = chords.windows(2).map(|pair| Line::new(pair[0], pair[1]));
                let shapes = bars.map(|line| Shape::Bar { line, half });
                self.push(of, Look { class, role, straight, ends }, shapes);
            }
        }
    }

    fn take_fill(&mut self, of: (usize, ItemKind), fill: &Fill) {
        let class = if fill.role == Some(Role::Arrow) { Class::Termination } else { Class::Filled };
        for path in &fill.paths {
            let mut corners: Vec<Point<Sheet>> = Vec::new();
            for point in path.curves.iter().flat_map(|c| c.flattened(CHORD)) {
                if !corners.last().is_some_and(|last| last.is_at(point)) {
                    corners.push(point);
                }
            }
            if corners.len() > 1 && corners[0].is_at(corners[corners.len() - 1]) {
                corners.pop();
            }
            let look = Look { class, role: fill.role, straight: false, ends: None };
            self.push(of, look, [Shape::Area(Polygon::new(corners))]);
        }
    }

    /// Takes the pieces of one curve that lie anywhere near a sheet; says whether there were any.
    fn push(
        &mut self,
        (item, kind): (usize, ItemKind),
        look: Look,
        shapes: impl IntoIterator<Item = Shape>,
    ) -> bool {
        let before = self.pieces.len();
        for shape in shapes {
            let Some(bounds) = shape.bounds().filter(is_near) else { continue };
            let Look { class, role, straight, ends } = look;
            let curve = before;
            self.pieces.push(Piece {
                item,
                kind,
                class,
                role,
                shape,
                bounds,
                straight,
                curve,
                ends,
            });
        }
        self.pieces.len() > before
    }
}

/// What the pieces of one curve have in common.
#[derive(Clone, Copy)]
struct Look {
    class: Class,
    role: Option<Role>,
    straight: bool,
    ends: Option<(Point<Sheet>, Point<Sheet>)>,
}

fn leaves(pieces: &[Piece]) -> Vec<Leaf> {
    let mut leaves = Vec::new();
    let mut first = 0;
    for curve in pieces.chunk_by(|a, b| a.curve == b.curve) {
        for chunk in curve.chunks(CHORDS_IN_LEAF) {
            let bounds = Rect::union_of(chunk.iter().map(|p| p.bounds));
            let bounds = envelope(&bounds.expect("a chunk is never empty"));
            leaves.push(Leaf { pieces: first..first + chunk.len(), bounds });
            first += chunk.len();
        }
    }
    leaves
}

fn open_ends(path: &Path<Sheet>) -> Option<(Point<Sheet>, Point<Sheet>)> {
    let (first, last) = (path.curves.first()?, path.curves.last()?);
    (!path.closed && !path.meets_itself()).then(|| (first.start(), last.end()))
}

fn is_near(r: &Rect<Sheet>) -> bool {
    [r.min.x, r.min.y, r.max.x, r.max.y].iter().all(|v| v.abs() <= FAR)
}

fn envelope(r: &Rect<Sheet>) -> AABB<[f64; 2]> {
    AABB::from_corners([r.min.x, r.min.y], [r.max.x, r.max.y])
}
