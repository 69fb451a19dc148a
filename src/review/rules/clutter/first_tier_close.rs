//! `clutter/first-tier-close`.

use crate::geom::{Rect, Sheet, distance_line_line};
use crate::review::Unit;
use crate::review::dimension_line::{DimensionLine, dimension_lines};
use crate::review::findings::Findings;
use crate::review::page::Page;
use crate::review::place;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::ItemKind;

rule! {
    /// ## What it checks
    /// A dimension line outside of the view stands nearer to an outline of the view than the style's
    /// first line. Measured from the middle of one line to the middle of the other. The amount is that
    /// distance, in mm.
    ///
    /// ## Why it matters
    /// A dimension line close to the outline is taken for an edge, and its value stands on the part.
    ///
    /// ## Bad
    /// The first dimension line 5 mm above the part.
    ///
    /// ## Good
    /// The first dimension line 10 mm above the part.
    ///
    /// ## Source
    /// Common practice: 10 mm; the distance is the style's (`first_line`).
    FIRST_TIER_CLOSE = "clutter/first-tier-close", Should, worse: Less,
        "the first dimension line stands too near the outline";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let least = page.group.first_line;
    for line in dimension_lines(page) {
        let part = line.view.and_then(|v| page.views.get(v)).and_then(|v| v.part);
        if part.is_none_or(|p| line.side_of(&p) == 0) {
            continue;
        }
        let Some((gap, edge)) = nearest_outline(page, &line, least) else { continue };
        if gap < least - page.limits().same_place {
            let item = &page.scene.items[line.item];
            let message = format!(
                "the dimension line of {} stands {gap:.2} mm from the outline; the style wants {least:.2} mm",
                item.id,
            );
            let area = line.area().union(edge);
            found.report(page, &[item], area, message).measured(gap, Unit::Millimetre);
        }
    }
}

/// Distance of the line to the nearest outline of its view within `limit`, and where that is.
fn nearest_outline(
    page: &Page<'_>,
    line: &DimensionLine<'_>,
    limit: f64,
) -> Option<(f64, Rect<Sheet>)> {
    // Tails of outside arrows may pass over another part of the outline: only the span counts.
    let (a, b) = (line.run.at(line.span.0), line.run.at(line.span.1));
    let near = page.ink.near(Rect::new(a, b).grown(limit));
    let outlines =
        near.filter(|p| p.kind == ItemKind::Outline && page.item(p).view.as_ref() == line.view);
    let distances = outlines.filter_map(|p| {
        let edge = p.line()?;
        Some((distance_line_line(a, b, edge.from, edge.to), p.bounds))
    });
    distances.min_by(|(d, r), (e, s)| d.total_cmp(e).then_with(|| place::order(r, s)))
}

#[cfg(test)]
fn sheet(line: f64) -> Case {
    a3().outline("plate", "front", (100.0, 110.0), (180.0, 150.0))
        .dimension("d1", "front", (100.0, 180.0), 110.0, line)
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(104.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(100.0)
}
