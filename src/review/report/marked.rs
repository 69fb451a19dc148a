//! The sheet with its findings marked where they stand.

use std::sync::Arc;

use crate::geom::{Path, Point, Rect, Sheet};
use crate::ident::ItemId;
use crate::review::Finding;
use crate::scene::{Ink, Item, ItemKind, Mark, PlacedText, Scene, Stroke};
use crate::text::Run;

/// How far a mark's box stands off what it is about, mm: enough to leave the fault in sight.
const MARGIN: f64 = 1.0;
/// Least side of a mark's box, mm: smaller ones are overlooked.
const LEAST: f64 = 4.0;
/// Width of a mark's line, mm: as wide as an outline, and in another colour.
const WIDTH: f64 = 0.5;
/// Height of a mark's number, mm.
const HEIGHT: f64 = 3.5;
/// How far a number stands off its box and off other numbers, mm.
const GAP: f64 = 0.8;

/// The sheet with a numbered box, in a checker's colour, round each of its findings. Numbers are
/// places in `findings`, from 1, as in the text report; findings of other sheets are passed over.
/// Numbers keep clear of each other and of the sheet's edge as long as one of twelve places around
/// their box is free.
#[must_use]
pub fn marked(scene: &Scene, findings: &[Finding]) -> Scene {
    let mut out = scene.clone();
    let sheet = scene.sheet.area();
    let mut taken: Vec<Rect<Sheet>> = Vec::new();
    for (i, finding) in findings.iter().enumerate() {
        let Some(area) = mark_box(finding, &sheet) else { continue };
        if finding.sheet != scene.sheet.index {
            continue;
        }
        let run = Arc::new(Run::new(&(i + 1).to_string(), HEIGHT));
        let origin = number_place(&run, &area, &sheet, &taken);
        taken.push(run.quad(origin, 0.0).bounds());
        let outline = Stroke {
            paths: vec![Path::polyline(&area.corners(), true)],
            width: WIDTH,
            role: None,
            ink: Ink::Finding,
        };
        let number = PlacedText { ink: Ink::Finding, ..PlacedText::new(run, origin, 0.0) };
        let id = ItemId::new(format!("finding-{}", i + 1));
        let marks = vec![Mark::Stroke(outline), Mark::Text(number)];
        out.items.push(Item::new(id, ItemKind::Finding, marks));
    }
    out
}

/// The finding's area with a margin, on the sheet; `None` where it stands at no place.
fn mark_box(finding: &Finding, sheet: &Rect<Sheet>) -> Option<Rect<Sheet>> {
    let a = finding.area;
    let sides = [a.min.x, a.min.y, a.max.x, a.max.y];
    if !sides.iter().all(|v| v.is_finite()) {
        return None;
    }
    let spare = |side: f64| ((LEAST - side) / 2.0).max(MARGIN);
    let (dx, dy) = (spare(a.width()), spare(a.height()));
    let within = |v: f64, lo: f64, hi: f64| v.clamp(lo + WIDTH, hi - WIDTH);
    let x = |v| within(v, sheet.min.x, sheet.max.x.max(sheet.min.x + 2.0 * WIDTH));
    let y = |v| within(v, sheet.min.y, sheet.max.y.max(sheet.min.y + 2.0 * WIDTH));
    Some(Rect::from_sides(x(a.min.x - dx), y(a.min.y - dy), x(a.max.x + dx), y(a.max.y + dy)))
}

/// Where the number's base line begins: the first free place around the box, else the first.
fn number_place(
    run: &Run,
    area: &Rect<Sheet>,
    sheet: &Rect<Sheet>,
    taken: &[Rect<Sheet>],
) -> Point<Sheet> {
    let (w, h) = (run.ink.width(), run.ink.height());
    let ring = |k: f64| {
        let out = GAP + WIDTH / 2.0 + k * (h + GAP);
        let (left, right) = (area.min.x, area.max.x - w);
        let (top, bottom) = (area.min.y - out, area.max.y + out + h);
        let aside = k * (w + GAP);
        [
            (area.max.x + GAP + WIDTH / 2.0 + aside, area.min.y + h),
            (left, top),
            (right, top),
            (area.min.x - GAP - WIDTH / 2.0 - w - aside, area.min.y + h),
            (left, bottom),
            (right, bottom),
        ]
    };
    let places = [0.0, 1.0].into_iter().flat_map(ring);
    let origins: Vec<Point<Sheet>> =
        places.map(|(x, y)| Point::new(x - run.ink.min.x, y - run.ink.max.y)).collect();
    let is_free = |origin: &&Point<Sheet>| {
        let ink = run.quad(**origin, 0.0).bounds();
        sheet.holds(&ink) && !taken.iter().any(|t| t.grown(GAP / 2.0).overlaps(&ink))
    };
    *origins.iter().find(is_free).unwrap_or(&origins[0])
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;
    use crate::review::testing::a3;

    fn crowd() -> (Scene, Vec<Finding>) {
        let mut sheet = a3();
        for i in 0..12 {
            sheet = sheet
                .item(&format!("d{i}"), ItemKind::Dimension, "front")
                .text("120", (100.0 + 4.0 * f64::from(i), 100.0));
        }
        let case = sheet.case();
        let findings = review(&case.input()).findings;
        (case.scenes[0].clone(), findings)
    }

    #[test]
    fn every_finding_of_the_sheet_gets_a_box_and_its_number() {
        let (scene, findings) = crowd();
        let marks = marked(&scene, &findings);
        let added: Vec<_> = marks.items[scene.items.len()..].iter().collect();
        assert_eq!(added.len(), findings.len());
        for (i, (item, finding)) in added.iter().zip(&findings).enumerate() {
            assert_eq!(item.kind, ItemKind::Finding);
            assert_eq!(item.texts().next().map(|t| t.run.text.clone()), Some((i + 1).to_string()));
            let bounds = item.bounds().expect("a mark draws something");
            assert!(scene.sheet.area().holds(&bounds) && bounds.contains(finding.area.centre()));
        }
    }

    #[test]
    fn marks_are_no_ink_of_the_drawing() {
        let (scene, findings) = crowd();
        let marks = marked(&scene, &findings);
        let style = crate::style::builtin("iso").expect("compiled in");
        let input = crate::review::ReviewInput {
            scenes: &[marks],
            style: &style,
            drawing: None,
            misfits: &[],
            conflicts: &[],
        };
        assert_eq!(review(&input).findings.len(), findings.len());
    }

    #[test]
    fn numbers_keep_clear_of_each_other_where_there_is_room() {
        let (scene, mut findings) = crowd();
        let spread =
            |i: usize| Rect::from_sides(40.0 + 9.0 * i as f64, 60.0, 46.0 + 9.0 * i as f64, 64.0);
        findings.truncate(11);
        findings.iter_mut().enumerate().for_each(|(i, f)| f.area = spread(i));
        let marks = marked(&scene, &findings);
        let numbers: Vec<_> = marks.items[scene.items.len()..]
            .iter()
            .flat_map(Item::texts)
            .map(|t| t.quad().bounds())
            .collect();
        for (i, a) in numbers.iter().enumerate() {
            assert!(numbers[i + 1..].iter().all(|b| !a.overlaps(b)), "{i}");
        }
    }
}
