//! `clutter/outside-frame`.

use crate::geom::{Rect, Sheet};
use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::naming::kind_words;
use crate::review::page::{Page, is_furniture};
use crate::review::rule::{Check, rule};
use crate::review::shape::{Polygon, Shape};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::{Item, ItemKind};

rule! {
    /// ## What it checks
    /// Ink reaches onto or beyond the frame, or stands in the title block or on a table; or a table
    /// overlaps the title block or another table. The frame is the innermost closed line of the
    /// sheet's frame, or the style's margins where none is drawn. The amount is how far the ink
    /// reaches, in mm.
    ///
    /// ## Why it matters
    /// The margin is cut off, bound in, or not printed. A view over the title block hides the
    /// material, the tolerances or the number of the drawing.
    ///
    /// ## Bad
    /// A view stands so low that its dimensions reach into the title block.
    ///
    /// ## Good
    /// The view stands higher, at a smaller scale, or on a larger sheet.
    ///
    /// ## Source
    /// ISO 5457 (drawing space), ISO 7200 (title block); common practice.
    OUTSIDE_FRAME = "clutter/outside-frame", Must, worse: More,
        "ink beyond the frame or on the sheet's tables";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let items = &page.scene.items;
    for item in items.iter().filter(|i| i.kind != ItemKind::Frame && i.kind != ItemKind::Finding) {
        beyond_frame(page, item, found);
    }
    for block in items.iter().filter(|i| is_block(i)) {
        on_block(page, block, found);
    }
}

fn is_block(item: &Item) -> bool {
    matches!(item.kind, ItemKind::TitleBlock | ItemKind::Table)
}

fn beyond_frame(page: &Page<'_>, item: &Item, found: &mut Findings) {
    let Some(b) = item.bounds() else { return };
    // Blocks share the frame's line; everything else stays inside of it.
    let half = page.style.frame.line / 2.0;
    let room = page.frame.grown(if is_furniture(item) { half } else { -half });
    let excess = excess(&b, &room);
    if excess > page.limits().overlap_depth {
        let message = format!("{} reaches {excess:.2} mm beyond the frame", item.id);
        found.report(page, &[item], b, message).measured(excess, Unit::Millimetre);
    }
}

fn excess(b: &Rect<Sheet>, room: &Rect<Sheet>) -> f64 {
    let sides =
        [room.min.x - b.min.x, room.min.y - b.min.y, b.max.x - room.max.x, b.max.y - room.max.y];
    sides.into_iter().fold(f64::NEG_INFINITY, f64::max)
}

fn on_block(page: &Page<'_>, block: &Item, found: &mut Findings) {
    let Some(b) = block.bounds() else { return };
    let within = Shape::Area(Polygon::new(b.corners().to_vec()));
    for piece in page.ink.near(b).filter(|p| !is_furniture(page.item(p))) {
        let depth = piece.shape.depth(&within);
        if depth <= page.limits().overlap_depth {
            continue;
        }
        let item = page.item(piece);
        let area = piece.bounds.intersection(&b).unwrap_or(piece.bounds);
        let message = format!("{} stands on {}", item.id, kind_words(block.kind));
        found.report(page, &[item, block], area, message).measured(depth, Unit::Millimetre);
    }
    let tables = page.scene.items.iter().filter(|i| i.kind == ItemKind::Table && i.id != block.id);
    for table in tables.filter(|t| block.kind == ItemKind::TitleBlock || block.id < t.id) {
        // Neighbouring blocks share a line.
        let shared = page.style.title_block.line.max(page.style.revision_table.line);
        let common = table.bounds().and_then(|t| t.intersection(&b));
        let Some(common) = common else { continue };
        let depth = common.width().min(common.height());
        if depth > shared + page.limits().overlap_depth {
            let message = format!("{} overlaps {}", table.id, kind_words(block.kind));
            found.report(page, &[table, block], common, message).measured(depth, Unit::Millimetre);
        }
    }
}

#[cfg(test)]
fn sheet(y: f64) -> Case {
    a3().item("block", ItemKind::TitleBlock, "")
        .wide((230.0, 232.0), (410.0, 232.0))
        .wide((230.0, 232.0), (230.0, 287.0))
        .outline("plate", "front", (250.0, 150.0), (320.0, y))
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(240.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(220.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn ink_beyond_the_frame_is_measured_from_its_inner_edge() {
        let case = a3().item("n", ItemKind::Note, "").narrow((15.0, 50.0), (60.0, 50.0)).case();
        let findings = review(&case.input()).findings;
        let found = findings.iter().find(|f| f.rule == &OUTSIDE_FRAME);
        let amount = found.and_then(|f| f.amount).unwrap_or(0.0);
        // ISO 5457: 20 mm on the left, line 0.7; the stroke's round end adds 0.125.
        assert!((amount - (20.35 - 14.875)).abs() < 1e-9, "{amount}");
    }

    #[test]
    fn a_drawn_frame_wins_over_the_margins_of_the_style() {
        use crate::geom::{Path, Point};
        use crate::scene::{Mark, Stroke};
        let corners = [(50.0, 50.0), (400.0, 50.0), (400.0, 280.0), (50.0, 280.0)];
        let frame = Path::polyline(&corners.map(|(x, y)| Point::new(x, y)), true);
        let case = a3()
            .item("frame", ItemKind::Frame, "")
            .mark(Mark::Stroke(Stroke::new(vec![frame], 0.7, None)))
            .outline("plate", "front", (40.0, 100.0), (90.0, 150.0))
            .case();
        assert!(review(&case.input()).findings.iter().any(|f| f.rule == &OUTSIDE_FRAME));
    }
}
