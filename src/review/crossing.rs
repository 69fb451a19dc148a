//! Where strokes of two annotations cross or run on one another.

use super::ink::{Class, Piece};
use super::page::Page;
use crate::geom::{Crossing, Line, Point, Rect, Sheet, line_crossing};
use crate::scene::Role;

/// How far lines may stray from each other and still count as running on one another, mm: below
/// what a chord of a round line strays.
const ON_ONE_ANOTHER: f64 = 1e-3;

/// A place where two strokes cross, or a stretch over which they run on one another.
pub(crate) struct Meeting<'p> {
    /// A stroke of the first kind.
    pub(crate) first: &'p Piece,
    /// A stroke of the second kind, of another item.
    pub(crate) second: &'p Piece,
    /// Where they cross; the middle of the common stretch.
    pub(crate) at: Point<Sheet>,
    /// Length of the common stretch in mm; 0 where they cross.
    pub(crate) along: f64,
}

impl Meeting<'_> {
    /// The place as a box around both strokes' ink there.
    pub(crate) fn area(&self) -> Rect<Sheet> {
        let reach = self.first.half_width().max(self.second.half_width());
        Rect::new(self.at, self.at).grown(reach.max(self.along / 2.0))
    }
}

/// Where strokes with the role `first` cross strokes of other items with the role `second`. Ends
/// that only touch do not cross, but for leaders: as much as the style trims is cut off open paths.
pub(crate) fn meetings<'p>(page: &'p Page<'_>, first: Role, second: Role) -> Vec<Meeting<'p>> {
    let is = |p: &Piece, role| p.class == Class::Line && p.role == Some(role);
    // Leaders have nothing to share: one that only touches another's elbow reads like its branch.
    let both_leaders = first == Role::Leader && second == Role::Leader;
    let trim = if both_leaders { 0.0 } else { page.style.cost.trim };
    let mut found = Vec::new();
    for a in page.ink.pieces().iter().filter(|p| is(p, first)) {
        for b in page.ink.near(a.bounds).filter(|p| is(p, second) && p.item != a.item) {
            let (Some(u), Some(v)) = (a.line(), b.line()) else { continue };
            match line_crossing(u, v, ON_ONE_ANOTHER) {
                Crossing::At { point, .. } if inside(a, point, trim) && inside(b, point, trim) => {
                    found.push(Meeting { first: a, second: b, at: point, along: 0.0 });
                }
                Crossing::Along { length } if a.straight && b.straight && length > trim => {
                    found.push(Meeting { first: a, second: b, at: common(u, v), along: length });
                }
                Crossing::Apart | Crossing::At { .. } | Crossing::Along { .. } => {}
            }
        }
    }
    found
}

/// Whether the point lies on the stroke's path, away from its ends.
fn inside(piece: &Piece, point: Point<Sheet>, trim: f64) -> bool {
    piece.ends.is_none_or(|(a, b)| a.distance(point) >= trim && b.distance(point) >= trim)
}

/// Middle of the common stretch of two lines that run on one another.
fn common(a: &Line<Sheet>, b: &Line<Sheet>) -> Point<Sheet> {
    let v = a.vector();
    let share = |p: Point<Sheet>| (p - a.from).dot(v) / v.dot(v);
    let (s, t) = (share(b.from), share(b.to));
    a.at((s.min(t).max(0.0) + s.max(t).min(1.0)) / 2.0)
}
