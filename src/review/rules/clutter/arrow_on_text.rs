//! `clutter/arrow-on-text`.

use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::ink::Class;
use crate::review::naming::{ink_words, quoted};
use crate::review::page::{Page, is_furniture};
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::{
    review::testing::{Case, a3},
    scene::ItemKind,
};

rule! {
    /// ## What it checks
    /// An arrowhead, a dot or another filled area meets the ink of a text, of its own annotation or
    /// of another one. Arrowheads count as their outlines. The amount is how far the two would have
    /// to move apart, in mm.
    ///
    /// ## Why it matters
    /// An arrowhead on a figure hides both: which number it is, and where the size begins.
    ///
    /// ## Bad
    /// A value too wide for its dimension stands over the arrowheads at the line's ends.
    ///
    /// ## Good
    /// The value stands beyond the arrowheads on the prolonged line.
    ///
    /// ## Source
    /// ISO 129-1; common practice.
    ARROW_ON_TEXT = "clutter/arrow-on-text", Must, worse: More, "an arrowhead stands on a text";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    for (text, placed) in page.ink.texts() {
        let marks = page.ink.near(text.bounds);
        let marks = marks.filter(|p| matches!(p.class, Class::Termination | Class::Filled));
        for mark in marks.filter(|p| page.overlap(text, p)) {
            let (of_text, of_mark) = (page.item(text), page.item(mark));
            if is_furniture(of_text) != is_furniture(of_mark) {
                continue;
            }
            let area = text.bounds.intersection(&mark.bounds).unwrap_or(mark.bounds);
            let message = format!(
                "{} of {} stands on the text {} of {}",
                ink_words(mark),
                of_mark.id,
                quoted(placed),
                of_text.id,
            );
            found
                .report(page, &[of_text, of_mark], area, message)
                .measured(text.shape.depth(&mark.shape), Unit::Millimetre);
        }
    }
}

#[cfg(test)]
fn sheet(x: f64) -> Case {
    a3().item("d1", ItemKind::Dimension, "front")
        .arrow((104.0, 99.0), 0.0)
        .text("120", (x, 100.0))
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(102.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(105.0)
}
