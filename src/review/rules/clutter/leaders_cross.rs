//! `clutter/leaders-cross`.

use crate::review::Unit;
use crate::review::crossing::meetings;
use crate::review::findings::Findings;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::Role;

rule! {
    /// ## What it checks
    /// Leaders of two annotations cross or run on one another. Several leaders of one note may fan
    /// out from one place. The amount is the length that they share, in mm; 0 at a crossing.
    ///
    /// ## Why it matters
    /// A note is followed along its leader to what it means; at a crossing every second reader turns
    /// off.
    ///
    /// ## Bad
    /// Two callouts stand in the opposite order of the holes that they name.
    ///
    /// ## Good
    /// The callouts stand in the order of their holes, with leaders of equal slant.
    ///
    /// ## Source
    /// ISO 128-2; common practice.
    LEADERS_CROSS = "clutter/leaders-cross", Should, worse: More, "leaders cross";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    for meeting in meetings(page, Role::Leader, Role::Leader) {
        let (a, b) = (page.item(meeting.first), page.item(meeting.second));
        if b.id < a.id {
            continue;
        }
        let message = format!("the leaders of {} and {} cross", a.id, b.id);
        found
            .report(page, &[a, b], meeting.area(), message)
            .measured(meeting.along, Unit::Millimetre);
    }
}

#[cfg(test)]
fn sheet(first: f64, second: f64) -> Case {
    a3().leader("n1", "front", (first, 120.0), (130.0, 90.0), "A")
        .leader("n2", "front", (second, 120.0), (160.0, 90.0), "B")
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(160.0, 130.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(100.0, 130.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn a_leader_that_touches_the_elbow_of_another_is_found() {
        let case = a3()
            .leader("n1", "front", (100.0, 120.0), (130.0, 90.0), "A")
            .leader("n2", "front", (160.0, 60.0), (130.0, 90.0), "B")
            .case();
        let findings = review(&case.input()).findings;
        assert!(findings.iter().any(|f| f.rule == &LEADERS_CROSS), "{findings:?}");
    }
}
