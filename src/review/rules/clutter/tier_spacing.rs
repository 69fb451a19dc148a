//! `clutter/tier-spacing`.

use std::collections::BTreeMap;

use crate::geom::{Rect, Sheet};
use crate::review::Unit;
use crate::review::dimension_line::{DimensionLine, dimension_lines};
use crate::review::findings::Findings;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::Item;

rule! {
    /// ## What it checks
    /// Parallel dimension lines that face each other stand nearer than the style's least pitch or twice
    /// the text height; or the pitches of a stack of them on one side of a view differ by more than
    /// the style's share. The amount is the pitch in mm, or for uneven pitches the widest over the
    /// least.
    ///
    /// ## Why it matters
    /// Values belong to the line that they stand on only as long as the lines stand apart. An even
    /// ladder is read at a glance; an uneven one looks like a mistake or like two groups.
    ///
    /// ## Bad
    /// Two dimension lines 4 mm apart, or tiers at 10, 18 and 31 mm.
    ///
    /// ## Good
    /// Tiers at 10, 18 and 26 mm.
    ///
    /// ## Source
    /// ISO 129-1 leaves the distances open; common practice is 7 mm to 10 mm.
    TIER_SPACING = "clutter/tier-spacing", Should, worse: Less,
        "dimension lines too close or unevenly spaced";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let lines = dimension_lines(page);
    for stack in lines.chunk_by(DimensionLine::is_parallel_to) {
        too_close(page, stack, found);
    }
    for (view, ink) in &page.views {
        let Some(part) = ink.part else { continue };
        let own: Vec<_> = lines.iter().filter(|l| l.view == Some(*view)).collect();
        for stack in own.chunk_by(|a, b| a.is_parallel_to(b)) {
            for side in [-1, 1] {
                uneven(page, stack.iter().copied().filter(|l| l.side_of(&part) == side), found);
            }
        }
    }
}

/// `stack` holds parallel lines from place to place.
fn too_close(page: &Page<'_>, stack: &[DimensionLine<'_>], found: &mut Findings) {
    let least = page.group.least_pitch.max(2.0 * page.group.text);
    let place = page.limits().same_place;
    for (i, line) in stack.iter().enumerate() {
        let next = stack[i + 1..].iter();
        let near = next.take_while(|l| l.run.offset - line.run.offset < least - place);
        for other in near.filter(|l| faces(page, line, l)) {
            let pitch = other.run.offset - line.run.offset;
            if pitch <= place || other.item == line.item {
                continue;
            }
            let items = sorted(page, [line.item, other.item]);
            let message = format!(
                "the dimension lines of {} and {} stand {pitch:.2} mm apart; the style wants {least:.2} mm",
                items[0].id, items[1].id,
            );
            found
                .report(page, &items, line.area().union(other.area()), message)
                .measured(pitch, Unit::Millimetre);
        }
    }
}

/// Whether the lines run beside each other, not only with the tails of outside arrows.
fn faces(page: &Page<'_>, a: &DimensionLine<'_>, b: &DimensionLine<'_>) -> bool {
    a.run.facing(&b.run) > page.style.arrow.length_h * page.group.text
}

fn sorted<'a>(page: &Page<'a>, items: [usize; 2]) -> [&'a Item; 2] {
    let mut items = items.map(|i| &page.scene.items[i]);
    items.sort_by(|a, b| a.id.cmp(&b.id));
    items
}

/// A pitch between two tiers that face each other.
struct Pitch<'l, 'a> {
    size: f64,
    inner: &'l DimensionLine<'a>,
    outer: &'l DimensionLine<'a>,
}

fn uneven<'l, 'a: 'l>(
    page: &Page<'a>,
    lines: impl Iterator<Item = &'l DimensionLine<'a>>,
    found: &mut Findings,
) {
    let lines: Vec<_> = lines.collect();
    let pitches = pitches(page, &lines);
    let (Some(least), Some(most)) = (
        pitches.iter().min_by(|a, b| a.size.total_cmp(&b.size)),
        pitches.iter().max_by(|a, b| a.size.total_cmp(&b.size)),
    ) else {
        return;
    };
    if most.size <= least.size * (1.0 + page.limits().tier_spread) {
        return;
    }
    let mut items: BTreeMap<_, &Item> = BTreeMap::new();
    let mut area: Option<Rect<Sheet>> = None;
    for line in [least, most].into_iter().flat_map(|p| [p.inner, p.outer]) {
        let item = &page.scene.items[line.item];
        items.insert(item.id.clone(), item);
        area = Some(area.map_or(line.area(), |a| a.union(line.area())));
    }
    let items: Vec<_> = items.into_values().collect();
    let message = format!(
        "the tiers of one side stand unevenly: from {:.2} mm to {:.2} mm apart",
        least.size, most.size,
    );
    let area = area.unwrap_or(most.outer.area());
    found.report(page, &items, area, message).measured(most.size / least.size, Unit::Ratio);
}

/// For each line and the next one that faces it, the last step from tier to tier between them: a
/// tier taken by a third line further along the side is a step of the same ladder.
fn pitches<'l, 'a>(page: &Page<'a>, lines: &[&'l DimensionLine<'a>]) -> Vec<Pitch<'l, 'a>> {
    let place = page.limits().same_place;
    let mut pitches = Vec::new();
    for (i, inner) in lines.iter().enumerate() {
        let mut next = lines[i + 1..].iter();
        let outer = next.find(|o| o.run.offset - inner.run.offset > place && faces(page, inner, o));
        if let Some(outer) = outer {
            let before = lines[i..]
                .iter()
                .map(|l| l.run.offset)
                .filter(|o| outer.run.offset - o > place)
                .fold(inner.run.offset, f64::max);
            pitches.push(Pitch { size: outer.run.offset - before, inner, outer });
        }
    }
    pitches
}

#[cfg(test)]
fn sheet(tiers: [f64; 3]) -> Case {
    let [a, b, c] = tiers.map(|t| 110.0 - t);
    a3().outline("plate", "front", (100.0, 110.0), (180.0, 150.0))
        .dimension("d1", "front", (120.0, 160.0), 110.0, a)
        .dimension("d2", "front", (110.0, 170.0), 110.0, b)
        .dimension("d3", "front", (100.0, 180.0), 110.0, c)
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet([10.0, 14.0, 18.0])
}

#[cfg(test)]
fn good() -> Case {
    sheet([10.0, 18.0, 26.0])
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn uneven_tiers_are_one_finding_even_where_none_is_too_close() {
        let case = sheet([10.0, 18.0, 31.0]);
        let findings = review(&case.input()).findings;
        let of_rule: Vec<_> = findings.iter().filter(|f| f.rule == &TIER_SPACING).collect();
        assert_eq!(of_rule.len(), 1);
        assert!((of_rule[0].amount.unwrap_or(0.0) - 13.0 / 8.0).abs() < 1e-9);
        assert_eq!(of_rule[0].items.len(), 3);
    }
}
