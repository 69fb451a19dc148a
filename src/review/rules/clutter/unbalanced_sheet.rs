//! `clutter/unbalanced-sheet`.

use crate::geom::{Point, Rect, Sheet, Vector};
use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::ItemKind;

rule! {
    /// ## What it checks
    /// The views' ink is heavy on one side of the field (the frame's inside above the title block), or
    /// the views take so little of the field, or so much, that another scale or sheet would do better.
    /// The amount is how far the ink's centroid is off the middle, or how much of the field the views
    /// take, in per cent.
    ///
    /// ## Why it matters
    /// A small view in a corner wastes the paper that its dimensions need; a full sheet has no room for
    /// the next revision.
    ///
    /// ## Bad
    /// One small view in the upper left corner of an A2.
    ///
    /// ## Good
    /// Views spread over the field at the largest scale that leaves room for their dimensions.
    ///
    /// ## Source
    /// Common practice; the shares are the style's.
    UNBALANCED_SHEET = "clutter/unbalanced-sheet", Consider, worse: More,
        "the sheet is heavy on one side, nearly empty or full";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let field = field(page);
    let (width, height) = (field.width(), field.height());
    let Some(centroid) = centroid(page).filter(|_| width > 0.0 && height > 0.0) else { return };
    let off = centroid - field.centre();
    let share = (off.x.abs() / width).max(off.y.abs() / height);
    if share > page.limits().balance {
        let message = format!(
            "the views' ink is heavy on one side: its centroid is {:.0} mm {} and {:.0} mm {} of the field's middle",
            off.x.abs(),
            if off.x < 0.0 { "left" } else { "right" },
            off.y.abs(),
            if off.y < 0.0 { "above" } else { "below" },
        );
        let place = Rect::new(centroid, centroid);
        found.report_on_sheet(page.number(), place, message).measured(100.0 * share, Unit::Percent);
    }
    let filled = filled(page, &field);
    let limits = page.limits();
    if filled < limits.filled_least || filled > limits.filled_most {
        let word = if filled < limits.filled_least { "only " } else { "" };
        let message = format!("the views take {word}{:.0} % of the field", 100.0 * filled);
        found
            .report_on_sheet(page.number(), field, message)
            .measured(100.0 * filled, Unit::Percent);
    }
}

/// The frame's inside, down to the title block.
fn field(page: &Page<'_>) -> Rect<Sheet> {
    let blocks = page.scene.items.iter().filter(|i| i.kind == ItemKind::TitleBlock);
    let top = blocks.filter_map(|i| i.bounds()).map(|b| b.min.y).fold(page.frame.max.y, f64::min);
    // A title block that reaches the upper half is no strip along the lower edge.
    let floor = if top > page.frame.centre().y { top } else { page.frame.max.y };
    Rect::from_sides(page.frame.min.x, page.frame.min.y, page.frame.max.x, floor)
}

/// Centroid of the strokes of all views, weighed by their ink.
fn centroid(page: &Page<'_>) -> Option<Point<Sheet>> {
    let origin = Point::new(0.0, 0.0);
    let (mut sum, mut weight) = (Vector::new(0.0, 0.0), 0.0);
    let of_views = page.ink.pieces().iter().filter(|p| page.item(p).view.is_some());
    for piece in of_views {
        let Some(line) = piece.line() else { continue };
        let ink = line.length() * 2.0 * piece.half_width();
        sum = sum + (line.at(0.5) - origin) * ink;
        weight += ink;
    }
    (weight > 0.0).then(|| origin + sum / weight)
}

/// Share of the field that the boxes of the views take.
fn filled(page: &Page<'_>, field: &Rect<Sheet>) -> f64 {
    let boxes = page.views.values().filter_map(|v| v.all).filter_map(|b| b.intersection(field));
    let taken: f64 = boxes.map(|b| b.width() * b.height()).sum();
    taken / (field.width() * field.height())
}

#[cfg(test)]
fn bad() -> Case {
    a3().outline("plate", "front", (30.0, 20.0), (70.0, 50.0)).case()
}

#[cfg(test)]
fn good() -> Case {
    a3().outline("plate", "front", (100.0, 60.0), (330.0, 237.0)).case()
}
