//! `content/dimension-double`.

use std::collections::BTreeSet;

use crate::geom::Rect;
use crate::review::Unit;
use crate::review::dimension_line::{DimensionLine, dimension_lines};
use crate::review::findings::Findings;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::{Item, ValueUnit};

rule! {
    /// ## What it checks
    /// Two dimensions of one view measure the same stretch in the same direction and say the same
    /// value, and neither stands in brackets as a reference. All that say one size are one finding; the
    /// amount is how many they are.
    ///
    /// ## Why it matters
    /// At the next change one of the two is forgotten. Then the drawing says two things.
    ///
    /// ## Bad
    /// The length of a plate above the view and again below it.
    ///
    /// ## Good
    /// The length once; where it is wanted a second time, in brackets.
    ///
    /// ## Source
    /// ISO 129-1: each size is dimensioned once.
    DIMENSION_DOUBLE = "content/dimension-double", Must, worse: More, "one size is given twice";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let place = page.limits().same_place;
    let mut lines: Vec<_> =
        dimension_lines(page).into_iter().filter(|l| l.view.is_some() && counts(page, l)).collect();
    lines.sort_by(|a, b| {
        (a.view.cmp(&b.view))
            .then(a.run.direction.total_cmp(&b.run.direction))
            .then(a.span.0.total_cmp(&b.span.0))
            .then_with(|| page.scene.items[a.item].id.cmp(&page.scene.items[b.item].id))
    });
    let mut told: BTreeSet<usize> = BTreeSet::new();
    for (i, first) in lines.iter().enumerate() {
        if told.contains(&first.item) {
            continue;
        }
        let near = lines[i + 1..].iter().take_while(|l| {
            first.view == l.view && first.is_parallel_to(l) && l.span.0 - first.span.0 <= place
        });
        let same =
            near.filter(|l| (l.span.1 - first.span.1).abs() <= place && same_value(page, first, l));
        let group: Vec<_> = std::iter::once(first).chain(same).collect();
        if group.len() > 1 {
            told.extend(group.iter().map(|l| l.item));
            report(page, &group, found);
        }
    }
}

fn report(page: &Page<'_>, group: &[&DimensionLine<'_>], found: &mut Findings) {
    let mut items: Vec<_> = group.iter().map(|l| &page.scene.items[l.item]).collect();
    items.sort_by(|a, b| a.id.cmp(&b.id));
    let ids: Vec<_> = items.iter().map(|i| i.id.as_str()).collect();
    let message = format!("{} give one size", ids.join(" and "));
    if let Some(area) = Rect::union_of(group.iter().map(|l| l.area())) {
        let finding = found.report(page, &items, area, message);
        finding.measured(items.len() as f64, Unit::Count);
    }
}

/// Whether the line belongs to one length with extension lines that say what it measures.
fn counts(page: &Page<'_>, line: &DimensionLine<'_>) -> bool {
    let item = &page.scene.items[line.item];
    let is_length = item.value.is_some_and(|v| v.unit == ValueUnit::Millimetre);
    is_length && line.stations.len() == 2 && !is_reference(item)
}

fn is_reference(item: &Item) -> bool {
    item.texts().any(|t| t.run.text.trim_start().starts_with('('))
}

fn same_value(page: &Page<'_>, a: &DimensionLine<'_>, b: &DimensionLine<'_>) -> bool {
    let value = |l: &DimensionLine<'_>| page.scene.items[l.item].value.map(|v| v.nominal);
    a.item != b.item && value(a).zip(value(b)).is_some_and(|(v, w)| crate::geom::same(v, w))
}

#[cfg(test)]
fn sheet(second: (f64, f64)) -> Case {
    a3().outline("plate", "front", (100.0, 110.0), (180.0, 150.0))
        .dimension("d1", "front", (100.0, 180.0), 110.0, 95.0)
        .value(80.0)
        .feature("plate")
        .dimension("d2", "front", second, 150.0, 165.0)
        .value(second.1 - second.0)
        .feature("plate")
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet((100.0, 180.0))
}

#[cfg(test)]
fn good() -> Case {
    sheet((100.0, 150.0))
}
