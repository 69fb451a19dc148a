//! `clutter/arrow-crowded`.

use crate::geom::{Point, Sheet};
use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::ink::{Class, Piece};
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::ItemKind;

rule! {
    /// ## What it checks
    /// A dimension whose arrows stand between its ends is shorter than they need; or the arrowheads of
    /// two dimensions overlap. An arrowhead that two links of a chain share, drawn twice at one place,
    /// does not count. The amount is the distance of the tips, in mm; for overlapping arrowheads 0.
    ///
    /// ## Why it matters
    /// Arrowheads that touch look like one blot: where the size begins and ends is anybody's guess.
    ///
    /// ## Bad
    /// Two arrows between extension lines that stand 5 mm apart.
    ///
    /// ## Good
    /// The same dimension with arrows from outside, or with dots between short links of a chain.
    ///
    /// ## Source
    /// ISO 129-1: arrows go outside where space is short. The length is common practice
    /// (`dimension.inside_arrows`).
    ARROW_CROWDED = "clutter/arrow-crowded", Should, worse: Less,
        "arrowheads overlap or do not fit";
    check: Check::Page(check);
    examples: bad, good;
}

/// A pointed arrowhead.
struct Head<'p> {
    piece: &'p Piece,
    tip: Point<Sheet>,
    base: Point<Sheet>,
}

fn check(page: &Page<'_>, found: &mut Findings) {
    for of_item in page.ink.pieces().chunk_by(|a, b| a.item == b.item) {
        if of_item[0].kind == ItemKind::Dimension {
            let heads: Vec<_> = of_item.iter().filter_map(head).collect();
            if let [a, b] = heads.as_slice() {
                do_not_fit(page, a, b, found);
            }
        }
    }
    for arrow in page.ink.pieces().iter().filter(|p| p.class == Class::Termination) {
        for other in page.ink.near(arrow.bounds).filter(|p| p.class == Class::Termination) {
            overlap(page, arrow, other, found);
        }
    }
}

/// The arrowhead that a three-cornered termination is: its tip lies opposite its shortest side.
fn head(piece: &Piece) -> Option<Head<'_>> {
    let outline = piece.polygon().filter(|_| piece.class == Class::Termination)?;
    let &[a, b, c] = outline.corners() else { return None };
    let sides = [(a, b, c), (b, c, a), (c, a, b)];
    let (tip, p, q) = sides
        .into_iter()
        .min_by(|(_, p, q), (_, r, s)| p.distance(*q).total_cmp(&r.distance(*s)))?;
    Some(Head { piece, tip, base: p.middle(q) })
}

fn do_not_fit(page: &Page<'_>, a: &Head<'_>, b: &Head<'_>, found: &mut Findings) {
    let span = a.tip.distance(b.tip);
    let is_inside = a.base.distance(b.base) < span;
    let arrow = a.tip.distance(a.base).max(b.tip.distance(b.base));
    let least = page.style.dimension.inside_arrows * arrow;
    if is_inside && span < least - page.limits().overlap_depth {
        let item = page.item(a.piece);
        let message = format!("{} is {span:.2} mm long; arrows inside need {least:.2} mm", item.id);
        let area = a.piece.bounds.union(b.piece.bounds);
        found.report(page, &[item], area, message).measured(span, Unit::Millimetre);
    }
}

fn overlap(page: &Page<'_>, arrow: &Piece, other: &Piece, found: &mut Findings) {
    let (a, b) = (page.item(arrow), page.item(other));
    if b.id <= a.id || !page.overlap(arrow, other) || is_same_ink(page, arrow, other) {
        return;
    }
    let message = format!("arrowheads of {} and {} overlap", a.id, b.id);
    let area = arrow.bounds.intersection(&other.bounds).unwrap_or(arrow.bounds);
    found.report(page, &[a, b], area, message).measured(0.0, Unit::Millimetre);
}

fn is_same_ink(page: &Page<'_>, a: &Piece, b: &Piece) -> bool {
    let place = page.limits().same_place;
    a.bounds.min.distance(b.bounds.min) <= place && a.bounds.max.distance(b.bounds.max) <= place
}

#[cfg(test)]
fn sheet(width: f64) -> Case {
    a3().dimension("d1", "front", (100.0, 100.0 + width), 110.0, 95.0).case()
}

#[cfg(test)]
fn bad() -> Case {
    a3().item("d1", ItemKind::Dimension, "front")
        .arrow((100.0, 95.0), 180.0)
        .arrow((105.0, 95.0), 0.0)
        .case()
}

#[cfg(test)]
fn good() -> Case {
    sheet(20.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    fn found(case: &Case) -> usize {
        review(&case.input()).findings.iter().filter(|f| f.rule == &ARROW_CROWDED).count()
    }

    #[test]
    fn arrows_from_outside_fit_anywhere() {
        let case = a3()
            .item("d1", ItemKind::Dimension, "front")
            .arrow((100.0, 95.0), 0.0)
            .arrow((103.0, 95.0), 180.0)
            .case();
        assert_eq!(found(&case), 0);
    }

    #[test]
    fn arrowheads_of_neighbours_may_touch_and_may_be_shared_but_not_overlap() {
        let neighbours = |x: f64, towards: f64| {
            a3().item("d1", ItemKind::Dimension, "front")
                .arrow((100.0, 95.0), 0.0)
                .item("d2", ItemKind::Dimension, "front")
                .arrow((x, 95.0), towards)
                .case()
        };
        assert_eq!(found(&neighbours(100.0, 180.0)), 0);
        assert_eq!(found(&neighbours(100.0, 0.0)), 0);
        assert_eq!(found(&neighbours(99.0, 180.0)), 1);
    }
}
