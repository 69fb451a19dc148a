//! `clutter/text-on-line`.

use std::collections::BTreeMap;

use crate::geom::{Rect, Sheet};
use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::ink::{Class, Piece};
use crate::review::naming::{ink_words, quoted};
use crate::review::page::{Page, is_furniture};
use crate::review::place;
use crate::review::rule::{Check, rule};
use crate::scene::ItemKind;
#[cfg(test)]
use crate::{
    review::testing::{Case, a3},
    scene::Role,
};

rule! {
    /// ## What it checks
    /// A stroke of whatever kind (outline, hidden edge, centre line, dimension line, extension
    /// line, leader, hatching…) meets the ink of a text. The stroke counts with its width, the text
    /// as the box of its ink, turned with the text. The lines of the text's own annotation count
    /// too, once they really meet its ink. What stands on the frame, the title block or a table is
    /// `clutter/outside-frame`. The amount is how far the stroke runs inside the text, in mm; for
    /// several strokes of one item the longest.
    ///
    /// ## Why it matters
    /// A 3 with a line through it is read as an 8. The number that cannot be read for certain is
    /// the number that is made wrong.
    ///
    /// ## Bad
    /// A dimension stands inside the view, and an edge of the part runs through its value.
    ///
    /// ## Good
    /// The same value outside the view; or the line is interrupted round the value.
    ///
    /// ## Source
    /// ISO 128-2 and ISO 129-1: lettering is kept free of lines. Common practice.
    TEXT_ON_LINE = "clutter/text-on-line", Must, worse: More, "a line runs through a text";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    for (text, placed) in page.ink.texts() {
        for run in runs_through(page, text).into_values() {
            let area = text.bounds.intersection(&run.area).unwrap_or(run.area);
            let (of_text, of_line) = (page.item(text), page.item(run.line));
            let message = format!(
                "{} of {} runs through the text {} of {}",
                ink_words(run.line),
                of_line.id,
                quoted(placed),
                of_text.id,
            );
            found
                .report(page, &[of_text, of_line], area, message)
                .measured(run.length, Unit::Millimetre);
        }
    }
}

/// A stroke's run through a text.
struct Run<'p> {
    line: &'p Piece,
    length: f64,
    area: Rect<Sheet>,
}

/// The longest run of each item through the text. The chords of a round stroke add up.
fn runs_through<'p>(page: &'p Page<'_>, text: &Piece) -> BTreeMap<usize, Run<'p>> {
    let lines = page.ink.near(text.bounds).filter(|p| is_about(page, text, p));
    let mut met: Vec<&Piece> = lines.filter(|p| page.overlap(text, p)).collect();
    met.sort_by_key(|p| (p.item, p.curve));
    let mut longest: BTreeMap<usize, Run<'p>> = BTreeMap::new();
    for chords in met.chunk_by(|a, b| a.curve == b.curve) {
        let length = length_inside(text, chords);
        let (line, bounds) = (chords[0], chords.iter().map(|p| p.bounds));
        let area = Rect::union_of(bounds).unwrap_or(line.bounds);
        let run = Run { line, length, area };
        let old = longest.get(&line.item);
        if old.is_none_or(|o| run.is_worse_than(o)) {
            longest.insert(line.item, run);
        }
    }
    longest
}

fn length_inside(text: &Piece, chords: &[&Piece]) -> f64 {
    let part = |p: &&Piece| text.polygon()?.part_inside(p.line()?);
    let inside: f64 = chords.iter().filter_map(part).map(|l| l.length()).sum();
    // A stroke whose middle stays outside grazes the text with its width.
    chords.iter().map(|p| text.shape.depth(&p.shape)).fold(inside, f64::max)
}

impl Run<'_> {
    /// Longer, or at equal length higher up or further left: the order of marks decides nothing.
    fn is_worse_than(&self, other: &Self) -> bool {
        let by_length = self.length.total_cmp(&other.length).reverse();
        by_length.then_with(|| place::order(&self.area, &other.area)).is_lt()
    }
}

fn is_about(page: &Page<'_>, text: &Piece, line: &Piece) -> bool {
    line.class == Class::Line
        && line.kind != ItemKind::Frame
        && is_furniture(page.item(text)) == is_furniture(page.item(line))
}

#[cfg(test)]
fn sheet(text_y: f64) -> Case {
    a3().outline("plate", "front", (100.0, 100.0), (180.0, 150.0))
        .item("d1", ItemKind::Dimension, "front")
        .text("80", (140.0, text_y))
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(101.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(90.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    fn found(case: &Case) -> Vec<crate::review::Finding> {
        review(&case.input()).findings.into_iter().filter(|f| f.rule == &TEXT_ON_LINE).collect()
    }

    #[test]
    fn several_strokes_of_one_item_are_one_finding_with_the_longest_run() {
        let case = a3()
            .item("h", ItemKind::Hatch, "front")
            .narrow((95.0, 99.0), (101.0, 99.0))
            .narrow((95.0, 98.0), (180.0, 98.0))
            .item("d1", ItemKind::Dimension, "front")
            .text("120", (100.0, 100.0))
            .case();
        let found = found(&case);
        assert_eq!(found.len(), 1);
        let width = crate::text::Run::new("120", 3.5).ink.width();
        assert!((found[0].amount.unwrap_or(0.0) - width).abs() < 1e-9, "{found:?}");
    }

    #[test]
    fn the_width_of_a_stroke_counts() {
        // Capitals and figures end on the base line; the round 8 reaches a little below it.
        let ink = crate::text::Run::new("11", 3.5).ink;
        let at = |clear: f64| {
            let y = 100.0 + ink.max.y + 0.25 + clear;
            let case = a3()
                .outline("o", "front", (60.0, y), (200.0, 150.0))
                .item("d1", ItemKind::Dimension, "front")
                .text("11", (100.0, 100.0))
                .case();
            found(&case).len()
        };
        assert_eq!(at(-0.05), 1);
        assert_eq!(at(0.01), 0);
    }

    #[test]
    fn the_landing_under_a_note_is_no_line_through_it() {
        let case = a3().leader("n", "front", (100.0, 100.0), (120.0, 80.0), "Deburr").case();
        assert!(found(&case).is_empty());
        let case = a3()
            .item("n", ItemKind::Leader, "front")
            .text("Deburr", (120.0, 80.0))
            .role(Role::Leader, (115.0, 79.0), (140.0, 79.0))
            .case();
        assert_eq!(found(&case).len(), 1);
    }

    #[test]
    fn a_slanted_text_is_met_only_by_what_meets_its_turned_box() {
        let sheet = |x: f64| {
            a3().item("c", ItemKind::Centre, "front")
                .narrow((x, 60.0), (x, 75.0))
                .item("d1", ItemKind::Dimension, "front")
                .text_of("1000", (100.0, 100.0), 3.5, 60.0)
                .case()
        };
        // Upper left of the text's upright bounding box, clear of the slanted text itself.
        assert!(found(&sheet(97.5)).is_empty());
        let through = a3()
            .item("c", ItemKind::Centre, "front")
            .narrow((97.5, 95.0), (107.0, 95.0))
            .item("d1", ItemKind::Dimension, "front")
            .text_of("1000", (100.0, 100.0), 3.5, 60.0)
            .case();
        assert_eq!(found(&through).len(), 1);
    }
}
