//! `content/material-missing`.

use super::title_field_missing::{block, field_is_empty};
use crate::review::ReviewInput;
use crate::review::findings::Findings;
use crate::review::rule::{Check, rule};
use crate::spec::FieldKey;
#[cfg(test)]
use crate::{
    review::testing::{Case, a3, bare_drawing, spanned},
    spec::{Text, TextPiece},
};

rule! {
    /// ## What it checks
    /// The spec names no material.
    ///
    /// ## Why it matters
    /// The shop takes what lies on the shelf.
    ///
    /// ## Bad
    /// A part drawing whose material field is empty.
    ///
    /// ## Good
    /// `material = "S235JR"`.
    ///
    /// ## Source
    /// Common practice: a part drawing states its material.
    MATERIAL_MISSING = "content/material-missing", Must, worse: More, "no material is named";
    check: Check::Drawing(check);
    examples: bad, good;
}

fn check(input: &ReviewInput<'_>, found: &mut Findings) {
    let Some(drawing) = input.drawing else { return };
    if field_is_empty(drawing, FieldKey::Material) {
        let message = "the title block names no material".to_owned();
        found.report_on_sheet(1, block(input), message).written_at(drawing.sheet.span);
    }
}

#[cfg(test)]
fn bad() -> Case {
    a3().case().with_drawing(bare_drawing())
}

#[cfg(test)]
fn good() -> Case {
    let mut drawing = bare_drawing();
    let text = Text { pieces: vec![TextPiece::Literal("S235JR".to_owned())] };
    drawing.sheet.fields.push((FieldKey::Material, spanned(text)));
    a3().case().with_drawing(drawing)
}
