//! `clutter/leader-crosses-dimension`.

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
    /// A leader crosses the dimension line of another annotation, or runs on it. The amount is the
    /// length that they share, in mm; 0 at a crossing.
    ///
    /// ## Why it matters
    /// A leader over a dimension line looks like the leader *of* that dimension.
    ///
    /// ## Bad
    /// A callout stands above the dimensions of a view and its leader cuts through them.
    ///
    /// ## Good
    /// The callout stands on a side of the view that has no dimensions.
    ///
    /// ## Source
    /// ISO 128-2, ISO 129-1; common practice.
    LEADER_CROSSES_DIMENSION = "clutter/leader-crosses-dimension", Should, worse: More,
        "a leader crosses a dimension line";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    for meeting in meetings(page, Role::Leader, Role::Dim) {
        let (leader, dimension) = (page.item(meeting.first), page.item(meeting.second));
        let message =
            format!("the leader of {} crosses the dimension line of {}", leader.id, dimension.id);
        found
            .report(page, &[leader, dimension], meeting.area(), message)
            .measured(meeting.along, Unit::Millimetre);
    }
}

#[cfg(test)]
fn sheet(elbow: (f64, f64)) -> Case {
    a3().dimension("d1", "front", (100.0, 180.0), 110.0, 95.0)
        .leader("n", "front", (120.0, 115.0), elbow, "A")
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet((160.0, 75.0))
}

#[cfg(test)]
fn good() -> Case {
    sheet((160.0, 155.0))
}
