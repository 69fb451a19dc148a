//! `clutter/order-of-tiers`.

use crate::geom::Rect;
use crate::review::Unit;
use crate::review::dimension_line::{DimensionLine, dimension_lines};
use crate::review::findings::Findings;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};

rule! {
    /// ## What it checks
    /// On one side of a view, a longer dimension stands nearer to the part than a shorter one that
    /// lies within its length. The amount is how much longer it is on paper, in mm.
    ///
    /// ## Why it matters
    /// The extension lines of the short one then cut through the long one, and the overall size, which
    /// the shop looks for first, is not where it looks: outermost.
    ///
    /// ## Bad
    /// The overall length on the first line, a hole's distance on the second.
    ///
    /// ## Good
    /// The hole's distance on the first line, the overall length outermost.
    ///
    /// ## Source
    /// ISO 129-1; common practice.
    ORDER_OF_TIERS = "clutter/order-of-tiers", Should, worse: More,
        "a longer dimension stands inside a shorter one";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let lines = dimension_lines(page);
    for (view, ink) in &page.views {
        let Some(part) = ink.part else { continue };
        let own: Vec<_> = lines.iter().filter(|l| l.view == Some(*view)).collect();
        for stack in own.chunk_by(|a, b| a.is_parallel_to(b)) {
            for side in [-1, 1] {
                let on_side = stack.iter().copied().filter(|l| l.side_of(&part) == side);
                order(page, side, on_side.collect(), found);
            }
        }
    }
}

/// `lines` are those on one side, by place along its normal.
fn order(page: &Page<'_>, side: i8, mut lines: Vec<&DimensionLine<'_>>, found: &mut Findings) {
    if side < 0 {
        lines.reverse();
    }
    // From the part outwards: the longest so far that could hold a later, shorter one inside.
    let place = page.limits().same_place;
    for (i, outer) in lines.iter().enumerate() {
        let longer = lines[..i].iter().filter(|inner| {
            (inner.run.offset - outer.run.offset).abs() > place
                && length(inner) > length(outer) + place
                && inner.span.0 <= outer.span.0 + place
                && inner.span.1 >= outer.span.1 - place
        });
        let Some(inner) = longer.max_by(|a, b| length(a).total_cmp(&length(b))) else { continue };
        let (a, b) = (&page.scene.items[inner.item], &page.scene.items[outer.item]);
        let message = format!("{} is longer than {} and stands inside of it", a.id, b.id);
        let area = Rect::union(inner.area(), outer.area());
        found
            .report(page, &[a, b], area, message)
            .measured(length(inner) - length(outer), Unit::Millimetre);
    }
}

fn length(line: &DimensionLine<'_>) -> f64 {
    line.span.1 - line.span.0
}

#[cfg(test)]
fn sheet(short: f64, long: f64) -> Case {
    a3().outline("plate", "front", (100.0, 110.0), (180.0, 150.0))
        .dimension("d1", "front", (100.0, 180.0), 110.0, long)
        .dimension("d2", "front", (115.0, 165.0), 110.0, short)
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(90.0, 100.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(100.0, 90.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn every_side_of_a_view_has_its_own_order() {
        let below = a3()
            .outline("plate", "front", (100.0, 110.0), (180.0, 150.0))
            .dimension("long", "front", (100.0, 180.0), 150.0, 162.0)
            .dimension("short", "front", (115.0, 165.0), 150.0, 172.0)
            .dimension("above", "front", (120.0, 140.0), 110.0, 90.0)
            .case();
        let findings = review(&below.input()).findings;
        let of_rule: Vec<_> = findings.iter().filter(|f| f.rule == &ORDER_OF_TIERS).collect();
        assert_eq!(of_rule.len(), 1);
        let items: Vec<_> = of_rule[0].items.iter().map(|i| i.as_str()).collect();
        assert_eq!(items, ["long", "short"]);
    }
}
