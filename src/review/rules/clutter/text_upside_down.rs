//! `clutter/text-upside-down`.

use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::naming::quoted;
use crate::review::page::{Page, is_furniture};
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::{
    review::testing::{Case, a3},
    scene::ItemKind,
};

rule! {
    /// ## What it checks
    /// A text cannot be read from below or from the right: its base line is turned to −90° or further,
    /// or beyond 90°. The amount is the angle, in degrees counter-clockwise from level.
    ///
    /// ## Why it matters
    /// 6 and 9, 86 and 98 change into each other upside down.
    ///
    /// ## Bad
    /// An upright dimension whose value reads from the left.
    ///
    /// ## Good
    /// The same value turned by 90°, to be read from the right.
    ///
    /// ## Source
    /// ISO 129-1: values read from the bottom or from the right-hand side.
    TEXT_UPSIDE_DOWN = "clutter/text-upside-down", Should, worse: More,
        "a text reads from the left or upside down";
    check: Check::Page(check);
    examples: bad, good;
}

/// Rounding that an angle may carry, degrees.
const SLACK: f64 = 1e-3;

fn check(page: &Page<'_>, found: &mut Findings) {
    for (text, placed) in page.ink.texts().filter(|(t, _)| !is_furniture(page.item(t))) {
        // (−180°, 180°]
        let angle = 180.0 - (180.0 - placed.angle).rem_euclid(360.0);
        if angle > -90.0 + SLACK && angle <= 90.0 + SLACK {
            continue;
        }
        let item = page.item(text);
        let message =
            format!("the text {} of {} is turned by {angle:.0}°", quoted(placed), item.id);
        found.report(page, &[item], text.bounds, message).measured(angle, Unit::Degree);
    }
}

#[cfg(test)]
fn sheet(angle: f64) -> Case {
    a3().item("d1", ItemKind::Dimension, "front").text_of("86", (100.0, 100.0), 3.5, angle).case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(-90.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(90.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn the_half_circle_of_readable_angles_is_open_at_its_lower_end() {
        let found = |angle: f64| {
            review(&sheet(angle).input()).findings.iter().any(|f| f.rule == &TEXT_UPSIDE_DOWN)
        };
        assert!([0.0, 45.0, 90.0, -89.0, 360.0, 450.0].into_iter().all(|a| !found(a)));
        assert!([91.0, 135.0, 180.0, -90.0, -120.0, 270.0].into_iter().all(found));
    }
}
