//! `clutter/leader-long`.

use crate::geom::Rect;
use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::leader::leaders;
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::{
    review::testing::{Case, a3},
    scene::{ItemKind, Role},
};

rule! {
    /// ## What it checks
    /// A leader is longer than the style's longest, from its target to its landing, or bends more often
    /// than once besides the bend into its landing. The amount is its length, in mm.
    ///
    /// ## Why it matters
    /// Over a long way, and round corners, the eye loses the line among others.
    ///
    /// ## Bad
    /// A callout at the sheet's edge, 90 mm from its hole.
    ///
    /// ## Good
    /// The callout just outside of the view, 20 mm from its hole.
    ///
    /// ## Source
    /// Common practice: 60 mm (`leader.longest`).
    LEADER_LONG = "clutter/leader-long", Consider, worse: More,
        "a leader is long or goes round corners";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let longest = page.style.leader.longest;
    let most_bends = page.limits().leader_bends as usize;
    for leader in leaders(page) {
        let item = &page.scene.items[leader.item];
        let (length, bends) = (leader.length(), leader.bends());
        let message = if length > longest + page.limits().same_place {
            format!(
                "the leader of {} is {length:.0} mm long; the style's longest is {longest:.0} mm",
                item.id
            )
        } else if bends > most_bends {
            format!("the leader of {} bends {bends} times before its landing", item.id)
        } else {
            continue;
        };
        let boxes = leader.shafts.iter().map(|l| Rect::new(l.from, l.to));
        if let Some(area) = Rect::union_of(boxes) {
            found.report(page, &[item], area, message).measured(length, Unit::Millimetre);
        }
    }
}

#[cfg(test)]
fn sheet(elbow: (f64, f64)) -> Case {
    a3().leader("n", "front", (140.0, 150.0), elbow, "A").case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet((200.0, 90.0))
}

#[cfg(test)]
fn good() -> Case {
    sheet((160.0, 130.0))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn a_leader_round_corners_is_found_however_short() {
        let case = a3()
            .item("n", ItemKind::Leader, "front")
            .role(Role::Leader, (100.0, 100.0), (108.0, 92.0))
            .role(Role::Leader, (108.0, 92.0), (112.0, 80.0))
            .role(Role::Leader, (112.0, 80.0), (120.0, 72.0))
            .case();
        assert!(review(&case.input()).findings.iter().any(|f| f.rule == &LEADER_LONG));
    }
}
