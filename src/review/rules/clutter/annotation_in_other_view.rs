//! `clutter/annotation-in-other-view`.

use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::intrusion::intrusions;
use crate::review::naming::kind_words;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::{
    review::testing::{Case, a3},
    scene::{ItemKind, Role},
};

rule! {
    /// ## What it checks
    /// Lines of an annotation of one view run into the box of the part's edges in another view. Where
    /// its text stands there too, `clutter/text-in-other-view` says so, and this rule does not. The
    /// amount is how far the lines reach in, in mm.
    ///
    /// ## Why it matters
    /// A line that passes through a view is read as one of its edges, and an arrow that ends there as
    /// pointing at it.
    ///
    /// ## Bad
    /// The leader of a note on the front view runs through the view from above.
    ///
    /// ## Good
    /// The note stands on the other side of its own view.
    ///
    /// ## Source
    /// Common practice.
    ANNOTATION_IN_OTHER_VIEW = "clutter/annotation-in-other-view", Should, worse: More,
        "an annotation runs into a view that is not its own";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    for i in intrusions(page).into_iter().filter(|i| !i.with_text) {
        let item = &page.scene.items[i.item];
        let message =
            format!("{} ({}) runs into the view {}", item.id, kind_words(item.kind), i.view);
        found.report(page, &[item], i.area, message).measured(i.depth, Unit::Millimetre);
    }
}

#[cfg(test)]
fn sheet(y: f64) -> Case {
    a3().outline("plate", "front", (100.0, 60.0), (180.0, 110.0))
        .outline("plan", "top", (100.0, 150.0), (180.0, 200.0))
        .item("n", ItemKind::Leader, "front")
        .role(Role::Leader, (120.0, 110.0), (200.0, y))
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(190.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(130.0)
}
