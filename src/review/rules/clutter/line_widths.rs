//! `clutter/line-widths`.

use std::collections::BTreeMap;

use crate::geom::Rect;
use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::page::{Page, is_picture};
use crate::review::rule::{Check, rule};
use crate::scene::{Item, Mark};
#[cfg(test)]
use crate::{
    review::testing::{Case, a3},
    scene::ItemKind,
};

rule! {
    /// ## What it checks
    /// The views of a sheet are drawn with more than two widths of line, or the wide one is not twice
    /// the narrow one within the style's share. The items are those drawn with neither of the two
    /// commonest widths. The amount is how many widths there are, or wide over narrow.
    ///
    /// ## Why it matters
    /// The width says what a line is: an edge, or something about an edge. A third width says nothing
    /// and makes the reader doubt the other two.
    ///
    /// ## Bad
    /// Outlines of 0,5 mm and of 0,35 mm beside narrow lines of 0,25 mm.
    ///
    /// ## Good
    /// Outlines of 0,5 mm, everything else 0,25 mm.
    ///
    /// ## Source
    /// ISO 128-2: wide to narrow 2:1.
    LINE_WIDTHS = "clutter/line-widths", Should, worse: More,
        "more than two line widths, or not 2:1";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let widths = widths(page);
    let mut common: Vec<_> = widths.iter().collect();
    common.sort_by_key(|(width, items)| (std::cmp::Reverse(items.len()), **width));
    let pair: Vec<i64> = common.iter().take(2).map(|(width, _)| **width).collect();
    if widths.len() > 2 {
        let mut odd: BTreeMap<_, &Item> = BTreeMap::new();
        for (_, items) in common.iter().skip(2) {
            odd.extend(items.iter().map(|i| (&i.id, *i)));
        }
        let odd: Vec<_> = odd.into_values().collect();
        let list: Vec<_> = widths.keys().map(|w| format!("{:.2}", mm(*w))).collect();
        let message =
            format!("the views are drawn with {} widths: {} mm", list.len(), list.join(", "));
        if let Some(area) = Rect::union_of(odd.iter().filter_map(|i| i.bounds())) {
            found.report(page, &odd, area, message).measured(widths.len() as f64, Unit::Count);
        }
    }
    if let [a, b] = pair.as_slice() {
        ratio(page, mm(*a.max(b)), mm(*a.min(b)), found);
    }
}

fn ratio(page: &Page<'_>, wide: f64, narrow: f64, found: &mut Findings) {
    let limits = page.limits();
    let ratio = wide / narrow;
    let spread = limits.width_ratio * limits.width_spread;
    if (ratio - limits.width_ratio).abs() > spread + 1e-9 {
        let message = format!(
            "wide lines of {wide:.2} mm and narrow ones of {narrow:.2} mm are {ratio:.2}:1; the style wants {}:1",
            limits.width_ratio,
        );
        let area = page.scene.sheet.area();
        found.report_on_sheet(page.number(), area, message).measured(ratio, Unit::Ratio);
    }
}

/// Widths in hundredths of a millimetre, each with the items drawn so.
fn widths<'a>(page: &Page<'a>) -> BTreeMap<i64, Vec<&'a Item>> {
    let mut widths: BTreeMap<i64, Vec<&Item>> = BTreeMap::new();
    for item in page.scene.items.iter().filter(|i| is_picture(i.kind)) {
        for mark in &item.marks {
            let Mark::Stroke(stroke) = mark else { continue };
            let width = (stroke.width * 100.0).round() as i64;
            if width > 0 && !stroke.paths.is_empty() {
                widths.entry(width).or_default().push(item);
            }
        }
    }
    widths
}

fn mm(hundredths: i64) -> f64 {
    hundredths as f64 / 100.0
}

#[cfg(test)]
fn sheet(odd: f64) -> Case {
    a3().outline("a", "front", (100.0, 60.0), (180.0, 110.0))
        .item("b", ItemKind::Outline, "front")
        .stroke(odd, None, (120.0, 70.0), (120.0, 100.0))
        .item("c", ItemKind::Centre, "front")
        .narrow((140.0, 55.0), (140.0, 115.0))
        .item("e", ItemKind::Hidden, "front")
        .narrow((150.0, 55.0), (150.0, 115.0))
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(0.35)
}

#[cfg(test)]
fn good() -> Case {
    sheet(0.5)
}
