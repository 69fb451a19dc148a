//! `content/allow-unused`.

use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::{
    review::testing::{Case, a3, bare_drawing, nowhere, spanned},
    scene::ItemKind,
    spec::Allow,
};

rule! {
    /// ## What it checks
    /// An `[[allow]]` of the spec excuses no finding: the fault that it accepts does not occur. Nothing
    /// excuses this finding.
    ///
    /// ## Why it matters
    /// An excuse that outlives its fault hides the next one.
    ///
    /// ## Bad
    /// A long leader accepted in spring; since then it was shortened.
    ///
    /// ## Good
    /// The table removed together with the fault.
    ///
    /// ## Source
    /// The project's own.
    ALLOW_UNUSED = "content/allow-unused", Should, worse: More,
        "an accepted finding does not occur";
    check: Check::Allow;
    examples: bad, good;
}

/// A note in small letters, and a finding about it accepted.
#[cfg(test)]
fn sheet(height: f64) -> Case {
    let mut drawing = bare_drawing();
    drawing.allow.push(Allow {
        rule: spanned("clutter/text-small".to_owned()),
        items: vec![spanned("n".to_owned())],
        reason: "Carried over from an old form.".to_owned(),
        span: nowhere(),
    });
    a3().item("n", ItemKind::Note, "")
        .text_of("Form 7", (100.0, 100.0), height, 0.0)
        .case()
        .with_drawing(drawing)
}

#[cfg(test)]
fn bad() -> Case {
    sheet(3.5)
}

#[cfg(test)]
fn good() -> Case {
    sheet(1.5)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    fn small(case: &Case) -> (usize, usize) {
        let review = review(&case.input());
        let left = review.findings.iter().filter(|f| f.rule.name == "clutter/text-small").count();
        (left, review.excused)
    }

    #[test]
    fn an_accepted_finding_is_taken_out_and_counted() {
        assert_eq!(small(&good()), (0, 1));
    }

    #[test]
    fn an_excuse_holds_for_the_items_that_it_names_and_no_others() {
        let mut case = good();
        if let Some(drawing) = &mut case.drawing {
            drawing.allow[0].items = vec![spanned("m".to_owned())];
        }
        assert_eq!(small(&case), (1, 0));
        if let Some(drawing) = &mut case.drawing {
            drawing.allow[0].items.clear();
        }
        assert_eq!(small(&case), (0, 1));
    }
}
