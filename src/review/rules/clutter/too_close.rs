//! `clutter/too-close`.

use std::collections::BTreeMap;

use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::ink::{Class, Piece};
use crate::review::naming::{ink_words, kind_words, quoted};
use crate::review::page::{Page, is_furniture};
use crate::review::place;
use crate::review::rule::{Check, rule};
use crate::review::shape::{Polygon, Shape};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::{Item, ItemKind, PlacedText};

rule! {
    /// ## What it checks
    /// A text stands nearer to another text, an outline, another line or an arrowhead than the
    /// style's clearance, or any ink nearer to the frame, the title block or a table, without
    /// touching. Two items that overlap anywhere are not counted here: overlap is a rule of its
    /// own. The lines of a text's own annotation do not count, nor does hatching, which
    /// `clutter/dimension-on-hatch` looks at. The amount is the clear distance, in mm.
    ///
    /// ## Why it matters
    /// Copies are coarser than the drawing. What nearly touches on the screen touches on a print
    /// that went through a scanner, with the same harm as an overlap.
    ///
    /// ## Bad
    /// Two values stand a quarter of a millimetre from each other.
    ///
    /// ## Good
    /// The values stand a millimetre apart, better three.
    ///
    /// ## Source
    /// Common practice; the distances are those of the style (`clearance`).
    TOO_CLOSE = "clutter/too-close", Should, worse: Less,
        "ink stands closer than the style's clearance";
    check: Check::Page(check);
    examples: bad, good;
}

/// How two items stand to each other.
#[derive(Default)]
struct Pair<'p> {
    overlaps: bool,
    worst: Option<Near<'p>>,
}

struct Near<'p> {
    text: &'p Piece,
    placed: &'p PlacedText,
    other: &'p Piece,
    gap: f64,
    shortfall: f64,
}

fn check(page: &Page<'_>, found: &mut Findings) {
    near_texts(page, found);
    near_furniture(page, found);
}

fn near_texts(page: &Page<'_>, found: &mut Findings) {
    let c = &page.style.clearance;
    let widest = c.text_text.max(c.text_outline).max(c.text_line).max(c.text_arrow);
    let mut pairs: BTreeMap<(usize, usize), Pair<'_>> = BTreeMap::new();
    for (text, placed) in page.ink.texts() {
        for other in page.ink.near(text.bounds.grown(widest)) {
            let Some(clearance) = clearance(page, text, other) else { continue };
            let gap = text.shape.gap(&other.shape);
            if gap >= clearance - page.limits().overlap_depth {
                continue;
            }
            let key = (text.item.min(other.item), text.item.max(other.item));
            let pair = pairs.entry(key).or_default();
            pair.overlaps |= page.overlap(text, other);
            let shortfall = clearance - gap;
            if pair.worst.as_ref().is_none_or(|w| is_worse(text, other, shortfall, w)) {
                pair.worst = Some(Near { text, placed, other, gap, shortfall });
            }
        }
    }
    let apart = pairs.into_values().filter(|p| !p.overlaps);
    apart.filter_map(|p| p.worst).for_each(|near| report(page, &near, found));
}

/// Worse by distance, then by place: the order of items decides nothing.
fn is_worse(text: &Piece, other: &Piece, shortfall: f64, than: &Near<'_>) -> bool {
    let by_distance = than.shortfall.total_cmp(&shortfall);
    by_distance
        .then_with(|| place::order(&text.bounds, &than.text.bounds))
        .then_with(|| place::order(&other.bounds, &than.other.bounds))
        .is_lt()
}

fn report(page: &Page<'_>, near: &Near<'_>, found: &mut Findings) {
    let (of_text, of_other) = (page.item(near.text), page.item(near.other));
    let message = format!(
        "the text {} of {} stands {:.2} mm from {} of {}; the style wants {:.2} mm",
        quoted(near.placed),
        of_text.id,
        near.gap,
        ink_words(near.other),
        of_other.id,
        near.gap + near.shortfall,
    );
    let area = place::between(&near.text.bounds, &near.other.bounds);
    found.report(page, &[of_text, of_other], area, message).measured(near.gap, Unit::Millimetre);
}

/// How far the two pieces shall stay apart; `None` where it does not matter.
fn clearance(page: &Page<'_>, text: &Piece, other: &Piece) -> Option<f64> {
    let c = &page.style.clearance;
    if text.item == other.item || [&text, &other].iter().any(|p| is_furniture(page.item(p))) {
        return None;
    }
    match (other.class, other.kind) {
        (Class::Text, _) => Some(c.text_text),
        (Class::Termination | Class::Filled, _) => Some(c.text_arrow),
        (Class::Line, ItemKind::Hatch) => None,
        (Class::Line, ItemKind::Outline) => Some(c.text_outline),
        (Class::Line, _) => Some(c.text_line),
    }
}

fn near_furniture(page: &Page<'_>, found: &mut Findings) {
    let items = &page.scene.items;
    for item in items.iter().filter(|i| !is_furniture(i)) {
        near_frame(page, item, found);
    }
    let is_block = |i: &&Item| matches!(i.kind, ItemKind::TitleBlock | ItemKind::Table);
    for block in items.iter().filter(is_block) {
        near_block(page, block, found);
    }
}

fn near_frame(page: &Page<'_>, item: &Item, found: &mut Findings) {
    let Some(b) = item.bounds() else { return };
    let (least, slack) = (page.style.clearance.frame, page.limits().overlap_depth);
    let inner = page.frame.grown(-page.style.frame.line / 2.0);
    let level = (b.min.x - inner.min.x).min(inner.max.x - b.max.x);
    let upright = (b.min.y - inner.min.y).min(inner.max.y - b.max.y);
    let gap = level.min(upright);
    // Ink that reaches onto the frame is a fault of its own.
    if gap >= -slack && gap < least - slack {
        let gap = gap.max(0.0);
        let message = format!(
            "{} stands {gap:.2} mm from the frame; the style wants {least:.2} mm",
            item.id,
        );
        found.report(page, &[item], b, message).measured(gap, Unit::Millimetre);
    }
}

fn near_block(page: &Page<'_>, block: &Item, found: &mut Findings) {
    let Some(b) = block.bounds() else { return };
    let (least, slack) = (page.style.clearance.frame, page.limits().overlap_depth);
    let within = Shape::Area(Polygon::new(b.corners().to_vec()));
    // Clear distance of each item, less than 0 where it stands on the block.
    let mut nearest: BTreeMap<usize, (f64, &Piece)> = BTreeMap::new();
    for piece in page.ink.near(b.grown(least)).filter(|p| !is_furniture(page.item(p))) {
        let gap = within.gap(&piece.shape) - within.depth(&piece.shape);
        let entry = nearest.entry(piece.item).or_insert((gap, piece));
        let nearer = gap.total_cmp(&entry.0);
        if nearer.then_with(|| place::order(&piece.bounds, &entry.1.bounds)).is_lt() {
            *entry = (gap, piece);
        }
    }
    for (gap, piece) in nearest.into_values().filter(|(g, _)| *g >= -slack && *g < least - slack) {
        let (item, gap) = (page.item(piece), gap.max(0.0));
        let message = format!(
            "{} stands {gap:.2} mm from {}; the style wants {least:.2} mm",
            item.id,
            kind_words(block.kind),
        );
        found
            .report(page, &[item, block], place::between(&piece.bounds, &b), message)
            .measured(gap, Unit::Millimetre);
    }
}

#[cfg(test)]
fn sheet(x: f64) -> Case {
    let width = crate::text::Run::new("120", 3.5);
    let end = 100.0 + width.ink.max.x;
    a3().item("d1", ItemKind::Dimension, "front")
        .text("120", (100.0, 100.0))
        .item("d2", ItemKind::Dimension, "front")
        .text("120", (end + x - width.ink.min.x, 100.0))
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(0.25)
}

#[cfg(test)]
fn good() -> Case {
    sheet(1.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    fn amounts(case: &Case) -> Vec<f64> {
        let found = review(&case.input()).findings;
        found.iter().filter(|f| f.rule == &TOO_CLOSE).filter_map(|f| f.amount).collect()
    }

    #[test]
    fn the_amount_is_the_clear_distance() {
        let amounts = amounts(&bad());
        assert!(amounts.len() == 1 && (amounts[0] - 0.25).abs() < 1e-9, "{amounts:?}");
    }

    #[test]
    fn a_pair_that_overlaps_is_not_also_too_close() {
        assert!(amounts(&sheet(-1.0)).is_empty());
    }

    #[test]
    fn ink_near_the_frame_is_found_and_ink_on_it_is_not() {
        let at = |x: f64| {
            let case =
                a3().item("a", ItemKind::Adjacent, "front").narrow((x, 50.0), (x, 80.0)).case();
            amounts(&case)
        };
        // ISO 5457: the frame stands 20 mm from the left edge; its line is 0.7 wide.
        assert_eq!(at(20.35 + 0.125 + 1.0).len(), 0);
        let near = at(20.35 + 0.125 + 0.4);
        assert!(near.len() == 1 && (near[0] - 0.4).abs() < 1e-9, "{near:?}");
        assert_eq!(at(20.0).len(), 0);
    }
}
