//! `clutter/text-small`.

use crate::review::findings::Findings;
use crate::review::naming::quoted;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
use crate::review::{Severity, Unit};
#[cfg(test)]
use crate::{
    review::testing::{Case, a3},
    scene::ItemKind,
};

rule! {
    /// ## What it checks
    /// The capitals of a text are lower than can be read on paper: `must` below the style's
    /// `text_must`, `should` below `text_should`. The amount is their height, in mm.
    ///
    /// ## Why it matters
    /// Prints are often half size, and shops have dirty lenses and poor light.
    ///
    /// ## Bad
    /// A value 1,2 mm high.
    ///
    /// ## Good
    /// Values 3,5 mm high.
    ///
    /// ## Source
    /// ISO 3098-1 begins its series of heights at 1,8 mm. The limits are common practice.
    TEXT_SMALL = "clutter/text-small", Should, worse: Less, "a text is too small to read";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let limits = page.limits();
    for (text, placed) in page.ink.texts() {
        let height = placed.run.height;
        if height >= limits.text_should - limits.overlap_depth {
            continue;
        }
        let item = page.item(text);
        let message = format!("the text {} of {} is {height:.2} mm high", quoted(placed), item.id);
        let finding = found.report(page, &[item], text.bounds, message);
        finding.measured(height, Unit::Millimetre);
        if height < limits.text_must - limits.overlap_depth {
            finding.weighing(Severity::Must);
        }
    }
}

#[cfg(test)]
fn sheet(height: f64) -> Case {
    a3().item("n", ItemKind::Note, "").text_of("Deburr", (100.0, 100.0), height, 0.0).case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(1.5)
}

#[cfg(test)]
fn good() -> Case {
    sheet(1.8)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn what_cannot_be_read_at_all_is_a_must() {
        let severity = |h: f64| {
            let findings = review(&sheet(h).input()).findings;
            findings.iter().find(|f| f.rule == &TEXT_SMALL).map(|f| f.severity)
        };
        assert_eq!(severity(1.2), Some(Severity::Must));
        assert_eq!(severity(1.5), Some(Severity::Should));
        assert_eq!(severity(2.5), None);
    }
}
