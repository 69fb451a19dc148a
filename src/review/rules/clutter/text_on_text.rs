//! `clutter/text-on-text`.

use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::ink::Class;
use crate::review::naming::quoted;
use crate::review::page::{Page, is_furniture};
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::{
    review::testing::{Case, a3},
    scene::ItemKind,
};

rule! {
    /// ## What it checks
    /// The inks of two texts overlap, of two annotations or within one. Texts count as the boxes of
    /// their ink, turned with them. The amount is how far they would have to move apart, in mm.
    ///
    /// ## Why it matters
    /// Two numbers on one another are read as a third one, or not at all.
    ///
    /// ## Bad
    /// The values of two dimensions stand at one place.
    ///
    /// ## Good
    /// The second value stands on its own tier, or beside the first.
    ///
    /// ## Source
    /// ISO 129-1; common practice.
    TEXT_ON_TEXT = "clutter/text-on-text", Must, worse: More, "texts overlap";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    for (text, placed) in page.ink.texts() {
        let others = page.ink.near(text.bounds).filter(|p| p.class == Class::Text);
        for other in others.filter(|p| !std::ptr::eq(*p, text) && page.overlap(text, p)) {
            let (of_text, of_other) = (page.item(text), page.item(other));
            if is_furniture(of_text) != is_furniture(of_other) || of_other.id < of_text.id {
                continue;
            }
            let area = text.bounds.intersection(&other.bounds).unwrap_or(text.bounds);
            let message = format!(
                "the text {} of {} overlaps a text of {}",
                quoted(placed),
                of_text.id,
                of_other.id,
            );
            found
                .report(page, &[of_text, of_other], area, message)
                .measured(text.shape.depth(&other.shape), Unit::Millimetre);
        }
    }
}

#[cfg(test)]
fn sheet(x: f64) -> Case {
    a3().item("d1", ItemKind::Dimension, "front")
        .text("120", (100.0, 100.0))
        .item("d2", ItemKind::Dimension, "front")
        .text("85", (x, 100.5))
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(106.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(112.0)
}
