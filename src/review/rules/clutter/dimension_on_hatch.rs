//! `clutter/dimension-on-hatch`.

use std::collections::BTreeMap;

use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::ink::Piece;
use crate::review::naming::quoted;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, SheetBuilder, a3};
use crate::scene::ItemKind;

rule! {
    /// ## What it checks
    /// A text of an annotation stands on a hatched face, and the hatching comes nearer to its ink than
    /// the style's margin. Hatching that runs through the text is `clutter/text-on-line`. The amount
    /// is the clear distance, in mm.
    ///
    /// ## Why it matters
    /// Slanted strokes beside figures are read as part of them: 1, 7 and 4 suffer most.
    ///
    /// ## Bad
    /// A value on a cut face with hatch strokes up to its figures.
    ///
    /// ## Good
    /// The hatching leaves a clear margin round the value; better, the value stands off the face.
    ///
    /// ## Source
    /// ISO 128-3: hatching is interrupted for lettering. The margin is the style's
    /// (`hatch.text_margin`).
    DIMENSION_ON_HATCH = "clutter/dimension-on-hatch", Should, worse: Less,
        "a value on hatching without a clear margin";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let margin = page.style.hatch.text_margin;
    for (text, placed) in page.ink.texts().filter(|(t, _)| t.kind.is_annotation()) {
        let mut nearest: BTreeMap<usize, f64> = BTreeMap::new();
        let near = page.ink.near(text.bounds.grown(margin));
        for stroke in near.filter(|p| p.kind == ItemKind::Hatch && stands_on(page, text, p)) {
            let overlaps = page.overlap(text, stroke);
            let gap = if overlaps { f64::NEG_INFINITY } else { text.shape.gap(&stroke.shape) };
            nearest.entry(stroke.item).and_modify(|g| *g = g.min(gap)).or_insert(gap);
        }
        for (hatch, gap) in nearest {
            if gap < 0.0 || gap >= margin - page.limits().overlap_depth {
                continue;
            }
            let (of_text, of_hatch) = (page.item(text), &page.scene.items[hatch]);
            let message = format!(
                "the hatching of {} leaves {gap:.2} mm round the text {} of {}; the style wants {margin:.2} mm",
                of_hatch.id,
                quoted(placed),
                of_text.id,
            );
            found
                .report(page, &[of_text, of_hatch], text.bounds, message)
                .measured(gap, Unit::Millimetre);
        }
    }
}

fn stands_on(page: &Page<'_>, text: &Piece, stroke: &Piece) -> bool {
    page.item(stroke).bounds().is_some_and(|b| b.contains(text.bounds.centre()))
}

/// A hatched face whose strokes stop `margin` mm from the text "25".
#[cfg(test)]
fn sheet(margin: f64) -> Case {
    let ink = crate::text::Run::new("25", 3.5).ink;
    let (x0, x1) = (140.0 + ink.min.x - margin - 0.125, 140.0 + ink.max.x + margin + 0.125);
    let mut sheet: SheetBuilder = a3().item("cut", ItemKind::Hatch, "front");
    for y in [94.0, 97.0, 100.0, 103.0, 106.0] {
        // Level strokes keep the arithmetic plain.
        let clear =
            y < 100.0 + ink.min.y - margin - 0.125 || y > 100.0 + ink.max.y + margin + 0.125;
        sheet = if clear {
            sheet.narrow((120.0, y), (170.0, y))
        } else {
            sheet.narrow((120.0, y), (x0, y)).narrow((x1, y), (170.0, y))
        };
    }
    sheet.item("d1", ItemKind::Dimension, "front").text("25", (140.0, 100.0)).case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(0.2)
}

#[cfg(test)]
fn good() -> Case {
    sheet(1.0)
}
