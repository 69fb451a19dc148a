//! `clutter/dimension-lines-cross`.

use crate::review::Unit;
use crate::review::crossing::meetings;
use crate::review::findings::Findings;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
use crate::scene::Role;
#[cfg(test)]
use crate::{
    review::testing::{Case, a3},
    scene::ItemKind,
};

rule! {
    /// ## What it checks
    /// Dimension lines of two dimensions cross, or run on one another for longer than an outside
    /// arrow with its tail takes. Links of a chain that meet end to end do not cross. The amount is
    /// the length that they share, in mm; 0 at a crossing.
    ///
    /// ## Why it matters
    /// Where dimension lines cross, the eye follows the wrong one to the wrong arrow.
    ///
    /// ## Bad
    /// A long dimension stands nearer to the view than a short one that it crosses.
    ///
    /// ## Good
    /// The short dimension stands nearest to the view and the longer ones outside of it.
    ///
    /// ## Source
    /// ISO 129-1: dimension lines shall not cross one another where this can be avoided.
    DIMENSION_LINES_CROSS = "clutter/dimension-lines-cross", Must, worse: More,
        "two dimension lines cross";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    // The tail of an outside arrow may lie on the neighbour's line: short links of a chain do that.
    let arrow = page.style.arrow.length_h * page.group.text;
    let tail = arrow + page.style.dimension.outside_tail + page.limits().overlap_depth;
    for meeting in meetings(page, Role::Dim, Role::Dim) {
        let (a, b) = (page.item(meeting.first), page.item(meeting.second));
        let is_tail = meeting.along > 0.0 && meeting.along <= tail;
        if is_tail || b.id < a.id {
            continue;
        }
        let message = if meeting.along > 0.0 {
            format!("the dimension lines of {} and {} run on one another", a.id, b.id)
        } else {
            format!("the dimension lines of {} and {} cross", a.id, b.id)
        };
        found
            .report(page, &[a, b], meeting.area(), message)
            .measured(meeting.along, Unit::Millimetre);
    }
}

#[cfg(test)]
fn sheet(top: f64) -> Case {
    a3().dimension("d1", "front", (100.0, 180.0), 110.0, 95.0)
        .item("d2", ItemKind::Dimension, "front")
        .role(Role::Dim, (140.0, top), (140.0, 110.0))
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    a3().item("d1", ItemKind::Dimension, "front")
        .role(Role::Dim, (100.0, 95.0), (180.0, 95.0))
        .item("d2", ItemKind::Dimension, "front")
        .role(Role::Dim, (140.0, 70.0), (140.0, 110.0))
        .case()
}

#[cfg(test)]
fn good() -> Case {
    sheet(98.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    fn found(case: &Case) -> usize {
        review(&case.input()).findings.iter().filter(|f| f.rule == &DIMENSION_LINES_CROSS).count()
    }

    #[test]
    fn links_of_a_chain_meet_and_do_not_cross() {
        let chain = a3()
            .dimension("c.1", "front", (100.0, 140.0), 110.0, 95.0)
            .dimension("c.2", "front", (140.0, 180.0), 110.0, 95.0)
            .case();
        assert_eq!(found(&chain), 0);
    }

    #[test]
    fn dimensions_on_one_another_are_found() {
        let case = a3()
            .dimension("d1", "front", (100.0, 140.0), 110.0, 95.0)
            .dimension("d2", "front", (110.0, 180.0), 110.0, 95.0)
            .case();
        assert_eq!(found(&case), 1);
    }

    #[test]
    fn round_dimension_lines_cross_too() {
        use crate::geom::{Arc, Curve, Path, Point};
        use crate::scene::{Mark, Stroke};
        let arc = Path::of(Curve::Arc(Arc::new(Point::new(100.0, 100.0), 20.0, 0.0, 90.0)));
        let case = a3()
            .item("a", ItemKind::Dimension, "front")
            .mark(Mark::Stroke(Stroke::new(vec![arc], 0.25, Some(Role::Dim))))
            .item("d", ItemKind::Dimension, "front")
            .role(Role::Dim, (100.0, 100.0), (130.0, 70.0))
            .case();
        assert_eq!(found(&case), 1);
    }
}
