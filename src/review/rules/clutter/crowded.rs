//! `clutter/crowded`.

use std::collections::BTreeSet;

use rstar::primitives::GeomWithData;
use rstar::{AABB, RTree};

use crate::geom::{Rect, Sheet};
use crate::review::findings::Findings;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
use crate::review::{Severity, Unit};
use crate::scene::Item;
#[cfg(test)]
use crate::{
    review::testing::{Case, SheetBuilder, a3},
    scene::ItemKind,
};

rule! {
    /// ## What it checks
    /// In a square of ten text heights there stand so many lettered annotations that even neat
    /// placement leaves no white: `consider` from the style's `crowd_consider` on, `should` from
    /// `crowd_should` on. Annotations count by the middle of their texts. Crowds that hang together
    /// are one finding. The amount is the greatest number in one square.
    ///
    /// ## Why it matters
    /// In a crowd nothing overlaps and still nothing is found. A second view, a detail, a larger scale
    /// or a hole table costs less than one scrapped part.
    ///
    /// ## Bad
    /// Twenty dimensions on a hand's breadth of a busy view.
    ///
    /// ## Good
    /// The same dimensions shared out among a view, a section and a detail at 2:1.
    ///
    /// ## Source
    /// Common practice; the numbers are the style's.
    CROWDED = "clutter/crowded", Consider, worse: More, "too many annotations on too little paper";
    check: Check::Page(check);
    examples: bad, good;
}

type Spot = GeomWithData<[f64; 2], usize>;

fn check(page: &Page<'_>, found: &mut Findings) {
    let half = page.limits().crowd_window_h * page.group.text / 2.0;
    let spots = spots(page);
    let tree = RTree::bulk_load(spots.clone());
    let around = |spot: &Spot| -> Vec<&Spot> {
        let [x, y] = *spot.geom();
        let square = AABB::from_corners([x - half, y - half], [x + half, y + half]);
        tree.locate_in_envelope(square).collect()
    };
    let crowded = |spot: &Spot| around(spot).len() >= page.limits().crowd_consider as usize;
    let mut seen: BTreeSet<usize> = BTreeSet::new();
    for start in spots.iter().filter(|s| crowded(s)) {
        if !seen.insert(start.data) {
            continue;
        }
        let (mut members, mut most, mut open) = (BTreeSet::new(), 0, vec![start]);
        while let Some(spot) = open.pop() {
            let near = around(spot);
            most = most.max(near.len());
            members.extend(near.iter().map(|s| s.data));
            open.extend(near.into_iter().filter(|s| crowded(s) && seen.insert(s.data)));
        }
        report(page, &members, most, found);
    }
}

/// The middle of each annotation's texts.
fn spots(page: &Page<'_>) -> Vec<Spot> {
    let mut spots: Vec<Spot> = Vec::new();
    let texts: Vec<_> =
        page.ink.texts().map(|(p, _)| p).filter(|p| p.kind.is_annotation()).collect();
    for of_item in texts.chunk_by(|a, b| a.item == b.item) {
        if let Some(all) = Rect::union_of(of_item.iter().map(|p| p.bounds)) {
            let middle = all.centre();
            spots.push(GeomWithData::new([middle.x, middle.y], of_item[0].item));
        }
    }
    spots
}

fn report(page: &Page<'_>, members: &BTreeSet<usize>, most: usize, found: &mut Findings) {
    let mut items: Vec<&Item> = members.iter().map(|i| &page.scene.items[*i]).collect();
    items.sort_by(|a, b| a.id.cmp(&b.id));
    let area: Option<Rect<Sheet>> = Rect::union_of(items.iter().filter_map(|i| i.bounds()));
    let side = page.limits().crowd_window_h * page.group.text;
    let message = format!(
        "{} annotations crowd each other, up to {most} on {side:.0} mm × {side:.0} mm",
        items.len(),
    );
    let Some(area) = area else { return };
    let finding = found.report(page, &items, area, message);
    finding.measured(most as f64, Unit::Count);
    if most >= page.limits().crowd_should as usize {
        finding.weighing(Severity::Should);
    }
}

#[cfg(test)]
fn sheet(pitch: (f64, f64)) -> Case {
    let mut sheet: SheetBuilder = a3();
    for i in 0..16 {
        let (column, row) = (f64::from(i % 4), f64::from(i / 4));
        sheet = sheet
            .item(&format!("d{i}"), ItemKind::Dimension, "front")
            .text("12", (100.0 + column * pitch.0, 100.0 + row * pitch.1));
    }
    sheet.case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet((8.0, 5.0))
}

#[cfg(test)]
fn good() -> Case {
    sheet((25.0, 16.0))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn a_crowd_is_one_finding_with_all_its_members() {
        let findings = review(&bad().input()).findings;
        let of_rule: Vec<_> = findings.iter().filter(|f| f.rule == &CROWDED).collect();
        assert_eq!(of_rule.len(), 1);
        assert_eq!((of_rule[0].severity, of_rule[0].items.len()), (Severity::Should, 16));
    }
}
