//! `content/general-tolerance-missing`.

use super::title_field_missing::{block, field_is_empty};
use crate::review::findings::Findings;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3, bare_drawing, nowhere, spanned};
use crate::review::{ReviewInput, Unit};
#[cfg(test)]
use crate::spec::{AnchorRef, AnnotationSpec, Measure, Pin, Text, TextPiece};
use crate::spec::{FieldKey, Form, Says, Standing, Tolerance};

rule! {
    /// ## What it checks
    /// The spec names no general tolerance, yet has sizes without a tolerance of their own that are
    /// neither reference nor theoretically exact. The amount is how many.
    ///
    /// ## Why it matters
    /// A size without a tolerance has no limits: nobody can say whether the part is good.
    ///
    /// ## Bad
    /// A length of 80 and nothing that says how exactly.
    ///
    /// ## Good
    /// `general_tolerance = "ISO 2768-m"`, or a tolerance on every size.
    ///
    /// ## Source
    /// ISO 8015, ISO 2768-1; common practice.
    GENERAL_TOLERANCE_MISSING = "content/general-tolerance-missing", Must, worse: More,
        "sizes without any tolerance";
    check: Check::Drawing(check);
    examples: bad, good;
}

fn check(input: &ReviewInput<'_>, found: &mut Findings) {
    let Some(drawing) = input.drawing else { return };
    if !field_is_empty(drawing, FieldKey::GeneralTolerance) {
        return;
    }
    let open: Vec<_> = drawing.annotations.iter().filter(|a| is_open(&a.says)).collect();
    if let Some(first) = open.first() {
        let count = open.len();
        let message = format!(
            "no general tolerance is named, and {count} annotation{} without one of their own (first {})",
            if count == 1 { " has sizes" } else { "s have sizes" },
            first.id,
        );
        found
            .report_on_sheet(1, block(input), message)
            .measured(count as f64, Unit::Count)
            .written_at(drawing.sheet.span);
    }
}

fn is_open(says: &Says) -> bool {
    match says {
        Says::Dimension(_, form) => lacks_tolerance(form),
        Says::Chain(anchors, _, forms) | Says::Baseline(anchors, _, forms) => {
            forms.len() + 1 < anchors.len() || forms.iter().any(lacks_tolerance)
        }
        Says::Hole(_, note) => note.thread.is_none() && lacks_tolerance(&note.form),
        Says::Note(..) => false,
    }
}

fn lacks_tolerance(form: &Form) -> bool {
    form.tolerance == Tolerance::None && form.fit.is_none() && form.standing == Standing::Plain
}

#[cfg(test)]
fn drawing() -> crate::spec::Drawing {
    let anchor = AnchorRef { name: "rim.diameter".to_owned(), span: nowhere() };
    let mut drawing = bare_drawing();
    drawing.annotations.push(AnnotationSpec {
        id: crate::ident::ItemId::new("d1"),
        span: nowhere(),
        view: None,
        says: Says::Dimension(Measure::Of(anchor), Form::default()),
        pin: Pin::default(),
    });
    drawing
}

#[cfg(test)]
fn bad() -> Case {
    a3().case().with_drawing(drawing())
}

#[cfg(test)]
fn good() -> Case {
    let mut drawing = drawing();
    let text = Text { pieces: vec![TextPiece::Literal("ISO 2768-m".to_owned())] };
    drawing.sheet.fields.push((FieldKey::GeneralTolerance, spanned(text)));
    a3().case().with_drawing(drawing)
}
