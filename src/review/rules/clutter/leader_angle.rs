//! `clutter/leader-angle`.

use crate::geom::{Line, Point, Rect, Sheet};
use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::ink::Piece;
use crate::review::leader::{Leader, leaders};
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::ItemKind;

rule! {
    /// ## What it checks
    /// A leader is level or upright, or nearly; or it runs nearly parallel to the hatching that it lies
    /// on or to the outline that it touches. Its landing at the text does not count. The amount is the
    /// angle, in degrees.
    ///
    /// ## Why it matters
    /// Level and upright strokes are dimension lines, extension lines and edges; a leader is known by
    /// its slant. Along hatching or along an edge it disappears.
    ///
    /// ## Bad
    /// A level leader; a leader at 45° on hatching at 45°.
    ///
    /// ## Good
    /// A leader at 60°, or at 45° the other way.
    ///
    /// ## Source
    /// ISO 128-2: leaders are drawn at an angle to the lines around them. 30° to 60°, never under 15°:
    /// common practice (`leader.least_angle`, `leader.least_to_lines`).
    LEADER_ANGLE = "clutter/leader-angle", Should, worse: Less,
        "a leader is level, upright, or parallel to hatching or outline";
    check: Check::Page(check);
    examples: bad, good;
}

/// Rounding that an angle may carry, degrees.
const SLACK: f64 = 1e-3;

fn check(page: &Page<'_>, found: &mut Findings) {
    for leader in leaders(page) {
        for shaft in &leader.shafts {
            check_shaft(page, &leader, shaft, found);
        }
    }
}

fn check_shaft(page: &Page<'_>, leader: &Leader<'_>, shaft: &Line<Sheet>, found: &mut Findings) {
    let spec = &page.style.leader;
    let level = Line::new(Point::new(0.0, 0.0), Point::new(1.0, 0.0));
    let to_level = angle_between(shaft, &level);
    let (angle, word) =
        if to_level <= 45.0 { (to_level, "level") } else { (90.0 - to_level, "upright") };
    if angle < spec.least_angle - SLACK {
        report(page, leader, shaft, (angle, &format!("{word} within {angle:.0}°")), found);
    }
    if let Some(angle) = angle_to_outline(page, leader, shaft)
        && angle < spec.least_to_lines - SLACK
    {
        let words = format!("within {angle:.0}° of the outline that it touches");
        report(page, leader, shaft, (angle, &words), found);
    }
    if let Some(angle) = angle_to_hatching(page, shaft)
        && angle < spec.least_to_lines - SLACK
    {
        let words = format!("within {angle:.0}° of the hatching that it lies on");
        report(page, leader, shaft, (angle, &words), found);
    }
}

fn report(
    page: &Page<'_>,
    leader: &Leader<'_>,
    shaft: &Line<Sheet>,
    (angle, words): (f64, &str),
    found: &mut Findings,
) {
    let item = &page.scene.items[leader.item];
    let message = format!("the leader of {} is {words}", item.id);
    let area = Rect::new(shaft.from, shaft.to);
    found.report(page, &[item], area, message).measured(angle, Unit::Degree);
}

/// Angle between two lines, 0° to 90°.
fn angle_between(a: &Line<Sheet>, b: &Line<Sheet>) -> f64 {
    let (u, v) = (a.vector(), b.vector());
    u.cross(v).abs().atan2(u.dot(v).abs()).to_degrees()
}

/// Least angle to an outline at a tip of the leader that lies on the shaft.
fn angle_to_outline(page: &Page<'_>, leader: &Leader<'_>, shaft: &Line<Sheet>) -> Option<f64> {
    let place = page.limits().same_place;
    let tips =
        leader.tips.iter().filter(|t| t.distance(shaft.from).min(t.distance(shaft.to)) <= place);
    let touched = tips.flat_map(|tip| {
        let at_tip = Rect::new(*tip, *tip).grown(place);
        let outlines = page.ink.near(at_tip).filter(|p| p.kind == ItemKind::Outline);
        outlines
            .filter_map(Piece::line)
            .filter(move |l| crate::geom::distance_line_line(*tip, *tip, l.from, l.to) <= place)
    });
    touched.map(|edge| angle_between(shaft, edge)).min_by(f64::total_cmp)
}

/// Least angle to hatching that runs on both sides of the shaft or across it.
fn angle_to_hatching(page: &Page<'_>, shaft: &Line<Sheet>) -> Option<f64> {
    let widest = page.style.hatch.spacing.iter().map(|(_, spacing)| *spacing).fold(0.0, f64::max);
    let unit = shaft.vector().unit()?;
    let (mut left, mut right, mut least) = (false, false, None);
    for stroke in page.ink.near(Rect::new(shaft.from, shaft.to).grown(widest)) {
        let Some(line) = stroke.line().filter(|_| stroke.kind == ItemKind::Hatch) else { continue };
        let apart = crate::geom::distance_line_line(shaft.from, shaft.to, line.from, line.to);
        if apart > widest {
            continue;
        }
        let side = unit.cross(line.at(0.5) - shaft.from);
        left |= side < 0.0 || apart <= 0.0;
        right |= side > 0.0 || apart <= 0.0;
        let angle = angle_between(shaft, line);
        least = Some(least.map_or(angle, |a: f64| a.min(angle)));
    }
    least.filter(|_| left && right)
}

#[cfg(test)]
fn sheet(elbow: (f64, f64)) -> Case {
    a3().outline("plate", "front", (100.0, 110.0), (180.0, 150.0))
        .leader("n", "front", (140.0, 110.0), elbow, "A")
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet((142.0, 85.0))
}

#[cfg(test)]
fn good() -> Case {
    sheet((155.0, 85.0))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    fn angles(case: &Case) -> Vec<f64> {
        let findings = review(&case.input()).findings;
        findings.iter().filter(|f| f.rule == &LEADER_ANGLE).filter_map(|f| f.amount).collect()
    }

    #[test]
    fn a_leader_along_its_hatching_is_found_and_one_across_it_is_not() {
        let on_hatch = |dx: f64| {
            let mut sheet = a3().item("cut", ItemKind::Hatch, "front");
            for i in 0..20 {
                let x = 100.0 + 3.0 * f64::from(i);
                sheet = sheet.narrow((x, 150.0), (x + 40.0, 110.0));
            }
            sheet.leader("n", "front", (140.0, 130.0), (140.0 + dx, 100.0), "A").case()
        };
        let along = angles(&on_hatch(28.0));
        assert!(along.len() == 1 && along[0] < 3.0, "{along:?}");
        assert!(angles(&on_hatch(-28.0)).is_empty());
    }

    #[test]
    fn the_landing_may_be_level() {
        assert!(angles(&good()).is_empty());
        let level = a3()
            .item("n", ItemKind::Leader, "front")
            .role(crate::scene::Role::Leader, (100.0, 100.0), (120.0, 100.0))
            .case();
        assert_eq!(angles(&level), [0.0]);
    }

    #[test]
    fn a_leader_that_grazes_its_edge_is_found() {
        let case = a3()
            .item("o", ItemKind::Outline, "front")
            .wide((100.0, 150.0), (140.0, 110.0))
            .leader("n", "front", (120.0, 130.0), (145.0, 101.0), "A")
            .case();
        assert_eq!(angles(&case).len(), 1);
    }
}
