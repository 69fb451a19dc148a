//! `content/view-size-differs`.

use crate::geom::{Rect, Sheet};
use crate::ident::ViewId;
use crate::review::findings::Findings;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::{
    Conflict,
    testing::{Case, a3, nowhere},
};
use crate::review::{ReviewInput, Unit};
use crate::scene::{Item, ItemKind};

rule! {
    /// ## What it checks
    /// Two views of one part show it in different sizes along an axis that they share. The amount is
    /// the difference, in mm of the part.
    ///
    /// ## Why it matters
    /// One of the two views is wrong, and nobody at the machine can tell which.
    ///
    /// ## Bad
    /// A front view 120 wide over a view from above 118 wide.
    ///
    /// ## Good
    /// Both drawn from the same parameters.
    ///
    /// ## Source
    /// ISO 128-3, ISO 5456-2: orthographic views show one object.
    VIEW_SIZE_DIFFERS = "content/view-size-differs", Must, worse: More,
        "views show one part in different sizes";
    check: Check::Drawing(check);
    examples: bad, good;
}

fn check(input: &ReviewInput<'_>, found: &mut Findings) {
    for conflict in input.conflicts {
        let (sheet, area) = place(input, &conflict.views);
        let finding = found.report_on_sheet(sheet, area, conflict.message.clone());
        finding.view = conflict.views.first().cloned();
        finding
            .measured(conflict.difference, Unit::Millimetre)
            .written_at(conflict.spans.first().copied());
    }
}

/// The sheet and box of the first of the views that is drawn.
fn place(input: &ReviewInput<'_>, views: &[ViewId]) -> (u32, Rect<Sheet>) {
    let drawn = views.iter().find_map(|view| {
        input.scenes.iter().find_map(|scene| {
            let edges = scene.items.iter().filter(|i| i.kind == ItemKind::Outline);
            let own = edges.filter(|i| i.view.as_ref() == Some(view)).filter_map(Item::bounds);
            Rect::union_of(own).map(|area| (scene.sheet.index, area))
        })
    });
    drawn.unwrap_or((1, Rect::from_sides(0.0, 0.0, 0.0, 0.0)))
}

#[cfg(test)]
fn bad() -> Case {
    let mut case = good();
    case.conflicts.push(Conflict {
        views: vec![ViewId::new("front"), ViewId::new("top")],
        message: "the part is 120 wide in front and 118 in top".to_owned(),
        difference: 2.0,
        spans: vec![nowhere(), nowhere()],
    });
    case
}

#[cfg(test)]
fn good() -> Case {
    a3().outline("plate", "front", (100.0, 110.0), (180.0, 150.0)).case()
}
