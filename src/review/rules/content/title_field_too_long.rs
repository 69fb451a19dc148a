//! `content/title-field-too-long`.

use crate::review::findings::Findings;
use crate::review::rule::{Check, rule};
use crate::review::{ReviewInput, Unit};
#[cfg(test)]
use crate::{
    geom::Rect,
    ident::ItemId,
    review::{
        Misfit,
        testing::{Case, a3, nowhere},
    },
};

rule! {
    /// ## What it checks
    /// A text did not fit its cell of the title block or of a table, not even at the smallest height
    /// that the style allows there. The amount is how much too wide it is, in mm.
    ///
    /// ## Why it matters
    /// What runs over its cell runs into the next one, or is cut off where it matters.
    ///
    /// ## Bad
    /// A title of ninety letters.
    ///
    /// ## Good
    /// A short title, and the rest in the supplementary title.
    ///
    /// ## Source
    /// ISO 7200: recommended numbers of characters.
    TITLE_FIELD_TOO_LONG = "content/title-field-too-long", Should, worse: More,
        "a text does not fit its cell";
    check: Check::Drawing(check);
    examples: bad, good;
}

fn check(input: &ReviewInput<'_>, found: &mut Findings) {
    for misfit in input.misfits {
        let finding = found.report_on_sheet(misfit.sheet, misfit.area, misfit.message.clone());
        finding.measured(misfit.excess, Unit::Millimetre).written_at(misfit.span);
        finding.items = vec![misfit.item.clone()];
    }
}

#[cfg(test)]
fn bad() -> Case {
    let mut case = a3().case();
    case.misfits.push(Misfit {
        sheet: 1,
        item: ItemId::new("title-block"),
        area: Rect::from_sides(230.0, 232.0, 300.0, 241.0),
        excess: 12.5,
        message: "the title is too long for its cell".to_owned(),
        span: Some(nowhere()),
    });
    case
}

#[cfg(test)]
fn good() -> Case {
    a3().case()
}
