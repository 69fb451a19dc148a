//! `clutter/centre-line-long`.

use crate::geom::{Crossing, Line, Rect, Sheet, line_crossing};
use crate::review::Unit;
use crate::review::dimension_line::{Run, joined};
use crate::review::findings::Findings;
use crate::review::ink::{Class, Piece};
use crate::review::page::{Page, is_edge};
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::{Item, ItemKind, Role};

rule! {
    /// ## What it checks
    /// A straight centre line runs past the last edge that it crosses by more than the style's limit,
    /// and no dimension crosses it out there. The amount is how far it runs past the edge, in mm.
    ///
    /// ## Why it matters
    /// A centre line that goes on into the dimensions is taken for an extension line.
    ///
    /// ## Bad
    /// The axis of a bore drawn 20 mm beyond the part on both sides.
    ///
    /// ## Good
    /// The axis ends 3 mm beyond the part.
    ///
    /// ## Source
    /// ISO 128-2; the length is common practice (`review.centre_longest`).
    CENTRE_LINE_LONG = "clutter/centre-line-long", Consider, worse: More,
        "a centre line runs far past its feature";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    for of_item in page.ink.pieces().chunk_by(|a, b| a.item == b.item) {
        if of_item[0].kind != ItemKind::Centre {
            continue;
        }
        let item = page.item(&of_item[0]);
        let lines = of_item.iter().filter(|p| p.straight).filter_map(Piece::line);
        for run in joined(lines, page.limits().same_place) {
            check_run(page, item, &run, found);
        }
    }
}

fn check_run(page: &Page<'_>, item: &Item, run: &Run, found: &mut Findings) {
    let line = run.line();
    let crossed: Vec<f64> =
        crossings(page, &line, |p| is_edge(p.kind) && page.item(p).view == item.view);
    let (Some(first), Some(last)) = (crossed.first(), crossed.last()) else { return };
    let ends = [(0.0, *first), (*last, 1.0)];
    for (from, to) in ends {
        let over = Line::new(line.at(from), line.at(to));
        let length = over.length();
        let used = || !crossings(page, &over, |p| p.role == Some(Role::Dim)).is_empty();
        if length > page.limits().centre_longest + page.limits().same_place && !used() {
            let message =
                format!("{} runs {length:.1} mm past the last edge that it crosses", item.id);
            let area = Rect::new(over.from, over.to);
            found.report(page, &[item], area, message).measured(length, Unit::Millimetre);
        }
    }
}

/// Where strokes of some sort cross the line: shares of its length, in order.
fn crossings(page: &Page<'_>, line: &Line<Sheet>, of: impl Fn(&Piece) -> bool) -> Vec<f64> {
    let near = page.ink.near(Rect::new(line.from, line.to));
    let strokes = near.filter(|p| p.class == Class::Line && of(p)).filter_map(Piece::line);
    let mut shares: Vec<f64> = strokes
        .filter_map(|l| match line_crossing(line, l, 1e-6) {
            Crossing::At { along_first, .. } => Some(along_first),
            Crossing::Apart | Crossing::Along { .. } => None,
        })
        .collect();
    shares.sort_by(f64::total_cmp);
    shares
}

#[cfg(test)]
fn sheet(over: f64) -> Case {
    a3().outline("plate", "front", (100.0, 110.0), (180.0, 150.0))
        .item("axis", ItemKind::Centre, "front")
        .narrow((140.0, 110.0 - over), (140.0, 128.0))
        .narrow((140.0, 130.0), (140.0, 153.0))
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(20.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(3.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn a_centre_line_that_a_dimension_hangs_on_may_be_long() {
        let case = a3()
            .outline("plate", "front", (100.0, 110.0), (180.0, 150.0))
            .item("axis", ItemKind::Centre, "front")
            .narrow((140.0, 90.0), (140.0, 153.0))
            .item("d", ItemKind::Dimension, "front")
            .role(Role::Dim, (100.0, 95.0), (140.0, 95.0))
            .case();
        assert!(!review(&case.input()).findings.iter().any(|f| f.rule == &CENTRE_LINE_LONG));
    }
}
