//! `content/title-field-missing`.

use crate::geom::{Rect, Sheet};
use crate::review::ReviewInput;
use crate::review::findings::Findings;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3, bare_drawing, spanned};
use crate::scene::{Item, ItemKind};
use crate::spec::{Drawing, FieldKey, Status, Text, TextPiece};

rule! {
    /// ## What it checks
    /// The spec leaves out a field that every title block must have: title, owner, creator, date of
    /// issue, document type; on a released drawing also who approved it.
    ///
    /// ## Why it matters
    /// Without them nobody knows whose drawing it is, how old it is, and whether it is valid.
    ///
    /// ## Bad
    /// A released drawing with no name under "approved".
    ///
    /// ## Good
    /// All of these fields filled in by people who know; the program fills in no approval.
    ///
    /// ## Source
    /// ISO 7200: mandatory fields.
    TITLE_FIELD_MISSING = "content/title-field-missing", Must, worse: More,
        "a mandatory title-block field is empty";
    check: Check::Drawing(check);
    examples: bad, good;
}

/// Fields that ISO 7200 makes mandatory, but for number and title, which a spec keeps elsewhere.
const MANDATORY: [(FieldKey, &str); 4] = [
    (FieldKey::Owner, "owner"),
    (FieldKey::Creator, "creator"),
    (FieldKey::Date, "date"),
    (FieldKey::DocumentType, "document_type"),
];

fn check(input: &ReviewInput<'_>, found: &mut Findings) {
    let Some(drawing) = input.drawing else { return };
    let mut missing = Vec::new();
    if drawing.sheet.title.as_ref().is_none_or(|t| t.value.trim().is_empty()) {
        missing.push("title");
    }
    let empty = MANDATORY.iter().filter(|(key, _)| field_is_empty(drawing, *key));
    missing.extend(empty.map(|(_, name)| *name));
    if drawing.sheet.status == Status::Released && field_is_empty(drawing, FieldKey::Approver) {
        missing.push("approver");
    }
    for name in missing {
        let message = format!("the title block has no {name}");
        found.report_on_sheet(1, block(input), message).written_at(drawing.sheet.span);
    }
}

/// Whether the spec leaves a field of the title block out or blank.
pub(super) fn field_is_empty(drawing: &Drawing, key: FieldKey) -> bool {
    let field = drawing.sheet.fields.iter().find(|(k, _)| *k == key);
    field.is_none_or(|(_, text)| is_blank(&text.value))
}

fn is_blank(text: &Text) -> bool {
    text.pieces.iter().all(|p| match p {
        TextPiece::Literal(words) => words.trim().is_empty(),
        TextPiece::Number(_) => false,
    })
}

/// Where the title block of the first sheet stands; the sheet's corner where there is none.
pub(super) fn block(input: &ReviewInput<'_>) -> Rect<Sheet> {
    let first = input.scenes.iter().min_by_key(|s| s.sheet.index);
    let items = first.into_iter().flat_map(|s| &s.items);
    let blocks = items.filter(|i| i.kind == ItemKind::TitleBlock).filter_map(Item::bounds);
    Rect::union_of(blocks).unwrap_or_else(|| Rect::from_sides(0.0, 0.0, 0.0, 0.0))
}

#[cfg(test)]
fn drawing() -> Drawing {
    let mut drawing = bare_drawing();
    drawing.sheet.title = Some(spanned("Plate".to_owned()));
    for (key, name) in MANDATORY {
        let text = Text { pieces: vec![TextPiece::Literal(name.to_owned())] };
        drawing.sheet.fields.push((key, spanned(text)));
    }
    drawing
}

#[cfg(test)]
fn bad() -> Case {
    let mut drawing = drawing();
    drawing.sheet.status = Status::Released;
    a3().case().with_drawing(drawing)
}

#[cfg(test)]
fn good() -> Case {
    a3().case().with_drawing(drawing())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn every_empty_field_is_a_finding_of_its_own() {
        let case = a3().case().with_drawing(bare_drawing());
        let findings = review(&case.input()).findings;
        assert_eq!(findings.iter().filter(|f| f.rule == &TITLE_FIELD_MISSING).count(), 5);
    }
}
