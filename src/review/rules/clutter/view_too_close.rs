//! `clutter/view-too-close`.

use crate::geom::{Rect, Sheet};
use crate::ident::ViewId;
use crate::review::findings::Findings;
use crate::review::ink::Piece;
use crate::review::page::{Page, ViewInk};
use crate::review::place;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::review::{Severity, Unit};

rule! {
    /// ## What it checks
    /// The ink of two views, their annotations included, meets or stands nearer to each other than
    /// the style's distance of views. `must` where ink meets or one part's edges stand in the box of
    /// the other's; `should` where it is only too near. The amount is the clear distance, in mm.
    ///
    /// ## Why it matters
    /// Views that run into each other are read as one, and a dimension between two views belongs to
    /// neither for certain.
    ///
    /// ## Bad
    /// The dimensions above one view stand 4 mm below the dimensions of the view over it.
    ///
    /// ## Good
    /// There are 15 mm of white paper between the annotations of the two.
    ///
    /// ## Source
    /// Common practice; the distance is the style's (`clearance.view_view`).
    VIEW_TOO_CLOSE = "clutter/view-too-close", Should, worse: Less,
        "views stand closer than their annotations need";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let least = page.style.clearance.view_view;
    let views: Vec<_> = page.views.iter().filter_map(|(id, v)| Some((*id, v, v.all?))).collect();
    for (i, (id, view, all)) in views.iter().enumerate() {
        for (other_id, other, other_all) in &views[i + 1..] {
            if all.distance(other_all) >= least {
                continue;
            }
            let (gap, area) = nearest(page, (view, other_id, *other_all), least);
            let parts = view.part.zip(other.part);
            let nested = parts.and_then(|(a, b)| a.intersection(&b));
            let meets = gap <= 0.0 || nested.is_some();
            if meets || gap < least - page.limits().overlap_depth {
                // Which of many meetings is met first depends on the order of items: take them all.
                let common = nested.or_else(|| all.intersection(other_all));
                let place = if meets { common.unwrap_or(area) } else { area };
                report(page, (id, other_id), if meets { 0.0 } else { gap }, place, found);
            }
        }
    }
}

fn report(
    page: &Page<'_>,
    (id, other): (&ViewId, &ViewId),
    gap: f64,
    area: Rect<Sheet>,
    found: &mut Findings,
) {
    let least = page.style.clearance.view_view;
    let message = if gap > 0.0 {
        format!("the views {id} and {other} stand {gap:.2} mm apart; the style wants {least:.2} mm")
    } else {
        format!("the views {id} and {other} run into each other")
    };
    let finding = found.report_on_sheet(page.number(), area, message);
    finding.view = Some(id.clone());
    finding.measured(gap, Unit::Millimetre);
    if gap <= 0.0 {
        finding.weighing(Severity::Must);
    }
}

/// Clear distance from one view's ink to that of another, at most `limit`, and where it is.
fn nearest(
    page: &Page<'_>,
    (view, other, other_all): (&ViewInk, &ViewId, Rect<Sheet>),
    limit: f64,
) -> (f64, Rect<Sheet>) {
    let mut best = (limit, other_all);
    let belongs = |p: &Piece| view.items.binary_search(&p.item).is_ok();
    let own = page.ink.near(other_all.grown(limit)).filter(|p| belongs(p));
    for piece in own {
        if piece.bounds.distance(&other_all) > best.0 {
            continue;
        }
        for foe in page.ink.near(piece.bounds.grown(best.0)) {
            let is_other = page.item(foe).view.as_ref() == Some(other);
            if !is_other || piece.bounds.distance(&foe.bounds) > best.0 {
                continue;
            }
            let gap = if page.overlap(piece, foe) {
                0.0
            } else {
                // Ink that only touches is as near as can be, and does not run into the other.
                piece.shape.gap(&foe.shape).max(f64::MIN_POSITIVE)
            };
            let area = place::between(&piece.bounds, &foe.bounds);
            if gap < best.0 || gap == best.0 && place::order(&area, &best.1).is_lt() {
                best = (gap, area);
            }
        }
        if best.0 <= 0.0 {
            return best;
        }
    }
    best
}

#[cfg(test)]
fn sheet(y: f64) -> Case {
    a3().outline("plate", "front", (100.0, 60.0), (180.0, 110.0))
        .outline("plan", "top", (100.0, y + 25.0), (180.0, 200.0))
        .dimension("d1", "top", (100.0, 180.0), y + 25.0, y + 15.0)
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(102.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(117.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    fn found(case: &Case) -> Vec<(Severity, f64)> {
        let findings = review(&case.input()).findings;
        let of_rule = findings.iter().filter(|f| f.rule == &VIEW_TOO_CLOSE);
        of_rule.map(|f| (f.severity, f.amount.unwrap_or(-1.0))).collect()
    }

    #[test]
    fn the_distance_is_that_of_the_ink_and_not_of_the_outlines() {
        // The outline's edge is at 110.25; the value stands 1.125 above the line at 117.
        let top = 117.0 - 1.125 + crate::text::Run::new("80", 3.5).ink.min.y;
        let found = found(&bad());
        assert!(found.len() == 1 && found[0].0 == Severity::Should, "{found:?}");
        assert!((found[0].1 - (top - 110.25)).abs() < 1e-9, "{found:?}");
    }

    #[test]
    fn views_on_one_another_are_a_must() {
        let case = a3()
            .outline("a", "front", (100.0, 60.0), (180.0, 110.0))
            .outline("b", "top", (120.0, 100.0), (160.0, 150.0))
            .case();
        assert_eq!(found(&case), [(Severity::Must, 0.0)]);
    }
}
