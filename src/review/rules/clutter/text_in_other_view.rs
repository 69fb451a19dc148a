//! `clutter/text-in-other-view`.

use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::intrusion::intrusions;
use crate::review::naming::item_words;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::{
    review::testing::{Case, a3},
    scene::ItemKind,
};

rule! {
    /// ## What it checks
    /// A text of one view stands in the box of the part's edges in another view. The amount is how
    /// deep it stands in there, in mm.
    ///
    /// ## Why it matters
    /// A size is looked for, and believed, in the view that it stands in. It is then taken for the
    /// size of something else.
    ///
    /// ## Bad
    /// The value of a dimension of the front view stands in the view from above.
    ///
    /// ## Good
    /// The value stands on the other side of its own view; or the views stand further apart.
    ///
    /// ## Source
    /// Common practice.
    TEXT_IN_OTHER_VIEW = "clutter/text-in-other-view", Must, worse: More,
        "a text stands in a view that is not its own";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    for i in intrusions(page).into_iter().filter(|i| i.with_text) {
        let item = &page.scene.items[i.item];
        let message =
            format!("the text {} of {} stands in the view {}", item_words(item), item.id, i.view);
        found.report(page, &[item], i.area, message).measured(i.depth, Unit::Millimetre);
    }
}

#[cfg(test)]
fn sheet(y: f64) -> Case {
    a3().outline("plate", "front", (100.0, 60.0), (180.0, 110.0))
        .outline("plan", "top", (100.0, 150.0), (180.0, 200.0))
        .item("d1", ItemKind::Dimension, "front")
        .text("80", (140.0, y))
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(170.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(130.0)
}
