//! `clutter/text-heights`.

use std::collections::BTreeMap;

use crate::geom::{Rect, Sheet};
use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::{Item, ItemKind};

rule! {
    /// ## What it checks
    /// Dimensions, callouts and notes on leaders of one sheet are lettered in more than one height.
    /// Deviations beside a value may be smaller; only each annotation's largest text counts. The items
    /// are those that differ from the commonest height. The amount is how many heights there are.
    ///
    /// ## Why it matters
    /// A smaller value looks less important, or as if it had been squeezed in; neither is meant.
    ///
    /// ## Bad
    /// One value 5 mm high among others of 3,5 mm.
    ///
    /// ## Good
    /// All values 3,5 mm high; stacked deviations at the height that the style gives them.
    ///
    /// ## Source
    /// ISO 3098-1; one height on a drawing is common practice.
    TEXT_HEIGHTS = "clutter/text-heights", Should, worse: More,
        "dimensions are lettered in different heights";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    // Stacked deviations and limits have a height of their own in the style.
    let stacked = hundredths(page.group.deviation);
    let lettered: Vec<_> = page
        .scene
        .items
        .iter()
        .filter_map(height_of)
        .filter(|(_, height)| hundredths(*height) != stacked)
        .collect();
    // Heights in hundredths of a millimetre: what is drawn alike is written alike.
    let mut heights: BTreeMap<i64, usize> = BTreeMap::new();
    for (_, height) in &lettered {
        *heights.entry(hundredths(*height)).or_default() += 1;
    }
    if heights.len() < 2 {
        return;
    }
    let common = heights.iter().max_by_key(|(height, count)| (**count, **height)).map(|(h, _)| *h);
    let mut odd: Vec<&Item> =
        lettered.iter().filter(|(_, h)| Some(hundredths(*h)) != common).map(|(i, _)| *i).collect();
    odd.sort_by(|a, b| a.id.cmp(&b.id));
    let area: Option<Rect<Sheet>> = Rect::union_of(odd.iter().filter_map(|i| i.bounds()));
    let list: Vec<_> = heights.keys().map(|h| format!("{:.2}", *h as f64 / 100.0)).collect();
    let message = format!("dimensions are {} mm high on one sheet", list.join(" and "));
    if let Some(area) = area {
        found.report(page, &odd, area, message).measured(heights.len() as f64, Unit::Count);
    }
}

fn height_of(item: &Item) -> Option<(&Item, f64)> {
    let is_lettered =
        matches!(item.kind, ItemKind::Dimension | ItemKind::Callout | ItemKind::Leader);
    let heights = item.texts().filter(|t| !t.run.is_blank()).map(|t| t.run.height);
    let tallest = heights.filter(|h| h.is_finite()).max_by(f64::total_cmp);
    tallest.filter(|_| is_lettered).map(|h| (item, h))
}

fn hundredths(height: f64) -> i64 {
    (height * 100.0).round() as i64
}

#[cfg(test)]
fn sheet(height: f64) -> Case {
    a3().item("d1", ItemKind::Dimension, "front")
        .text("80", (100.0, 100.0))
        .item("d2", ItemKind::Dimension, "front")
        .text("40", (140.0, 100.0))
        .item("d3", ItemKind::Dimension, "front")
        .text_of("20", (180.0, 100.0), height, 0.0)
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(5.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(3.5)
}
