//! `content/projection-sign-missing`.

use crate::geom::Rect;
use crate::review::ReviewInput;
use crate::review::findings::Findings;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::{Item, ItemKind};

rule! {
    /// ## What it checks
    /// The first sheet of a drawing with views carries no projection sign: no symbol whose id or
    /// feature names the projection.
    ///
    /// ## Why it matters
    /// First and third angle put the view from the left on opposite sides. Without the sign the part
    /// can be made as its mirror image.
    ///
    /// ## Bad
    /// A sheet whose title block leaves the sign out.
    ///
    /// ## Good
    /// The truncated cone in or beside the title block.
    ///
    /// ## Source
    /// ISO 5456-2, ISO 128-3.
    PROJECTION_SIGN_MISSING = "content/projection-sign-missing", Must, worse: More,
        "no projection sign on the first sheet";
    check: Check::Drawing(check);
    examples: bad, good;
}

fn check(input: &ReviewInput<'_>, found: &mut Findings) {
    let Some(first) = input.scenes.iter().min_by_key(|s| s.sheet.index) else { return };
    let has_views = input.scenes.iter().flat_map(|s| &s.items).any(|i| i.kind == ItemKind::Outline);
    if has_views && !first.items.iter().any(is_sign) {
        let blocks = first.items.iter().filter(|i| i.kind == ItemKind::TitleBlock);
        let area = Rect::union_of(blocks.filter_map(Item::bounds)).unwrap_or(first.sheet.area());
        let message = "the sheet carries no projection sign".to_owned();
        let span = input.drawing.map(|d| d.sheet.span);
        found.report_on_sheet(first.sheet.index, area, message).written_at(span);
    }
}

fn is_sign(item: &Item) -> bool {
    let names = |text: &str| text.contains("projection");
    matches!(item.kind, ItemKind::Symbol | ItemKind::TitleBlock)
        && (names(item.id.as_str()) || item.feature.as_deref().is_some_and(names))
}

#[cfg(test)]
fn bad() -> Case {
    a3().outline("plate", "front", (100.0, 100.0), (180.0, 150.0)).case()
}

#[cfg(test)]
fn good() -> Case {
    a3().outline("plate", "front", (100.0, 100.0), (180.0, 150.0))
        .item("projection-sign", ItemKind::Symbol, "")
        .narrow((380.0, 270.0), (390.0, 270.0))
        .case()
}
