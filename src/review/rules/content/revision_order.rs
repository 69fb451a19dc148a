//! `content/revision-order`.

use super::title_field_missing::block;
use crate::review::ReviewInput;
use crate::review::findings::Findings;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3, bare_drawing, spanned};
use crate::spec::Revision;

rule! {
    /// ## What it checks
    /// The revisions of the spec, oldest first, do not rise: an index comes before or equals the one
    /// above it, or a date is earlier than the one above it.
    ///
    /// ## Why it matters
    /// Of two prints the shop takes the one with the higher index. It must be the newer one.
    ///
    /// ## Bad
    /// Revision B of March above revision C of February.
    ///
    /// ## Good
    /// A, B, C, each on or after the day of the one before.
    ///
    /// ## Source
    /// Common practice.
    REVISION_ORDER = "content/revision-order", Should, worse: More, "revisions are out of order";
    check: Check::Drawing(check);
    examples: bad, good;
}

fn check(input: &ReviewInput<'_>, found: &mut Findings) {
    let Some(drawing) = input.drawing else { return };
    for pair in drawing.revisions.windows(2) {
        let (before, after) = (&pair[0], &pair[1]);
        let (old, new) = (&before.mark.value, &after.mark.value);
        if rank(after) <= rank(before) {
            let message = format!("revision {new} follows revision {old}");
            found.report_on_sheet(1, block(input), message).written_at(after.mark.span);
        }
        // ISO 8601 dates sort as text.
        if after.date.value < before.date.value {
            let message = format!(
                "revision {new} is dated {}, before revision {old} of {}",
                after.date.value, before.date.value,
            );
            found.report_on_sheet(1, block(input), message).written_at(after.date.span);
        }
    }
}

/// Numbers by value, letters by length and then by alphabet: A … Z, AA, AB …; numbers first.
fn rank(revision: &Revision) -> (bool, u64, usize, &str) {
    let mark = revision.mark.value.as_str();
    let number = mark.parse::<u64>().ok();
    (number.is_none(), number.unwrap_or(0), mark.chars().count(), mark)
}

#[cfg(test)]
fn sheet(rows: &[(&str, &str)]) -> Case {
    let mut drawing = bare_drawing();
    drawing.revisions = rows
        .iter()
        .map(|(mark, date)| Revision {
            mark: spanned((*mark).to_owned()),
            date: spanned((*date).to_owned()),
            change: crate::spec::Text::default(),
            by: "RT".to_owned(),
        })
        .collect();
    a3().case().with_drawing(drawing)
}

#[cfg(test)]
fn bad() -> Case {
    sheet(&[("B", "2026-03-01"), ("C", "2026-02-01")])
}

#[cfg(test)]
fn good() -> Case {
    sheet(&[("A", "2026-03-01"), ("B", "2026-03-01"), ("C", "2026-04-02")])
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn letters_go_on_with_two_after_z_and_numbers_by_value() {
        let found = |marks: [&str; 2]| {
            let rows = marks.map(|m| (m, "2026-01-01"));
            review(&sheet(&rows).input()).findings.iter().any(|f| f.rule == &REVISION_ORDER)
        };
        assert!(!found(["Z", "AA"]) && !found(["9", "10"]) && !found(["2", "A"]));
        assert!(found(["B", "A"]) && found(["A", "A"]) && found(["10", "9"]));
    }
}
