//! `clutter/lines-merge`.

use crate::geom::{Arc, Curve, Line, Rect, Sheet};
use crate::review::Unit;
use crate::review::findings::Findings;
use crate::review::ink::Piece;
use crate::review::naming::kind_words;
use crate::review::page::{Page, is_edge};
use crate::review::place;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::scene::{Item, Mark};

rule! {
    /// ## What it checks
    /// Two edges of the part, straight and nearly parallel or round about one centre, leave less white
    /// between their inks than the style's least, or than two wide lines. Edges that coincide, and
    /// edges that meet at a point, do not count. The amount is the white between them, in mm.
    ///
    /// ## Why it matters
    /// Two lines that run together on a print are one line: a step, a groove or a thin wall has
    /// disappeared.
    ///
    /// ## Bad
    /// A groove 1 mm wide in a view at 1:2.
    ///
    /// ## Good
    /// The same groove in a detail at 5:1; in the small view it is left out or drawn wider.
    ///
    /// ## Source
    /// ISO 128-2: at least 0,7 mm between parallel lines; twice the wide line: common practice
    /// (`clearance.lines`).
    LINES_MERGE = "clutter/lines-merge", Should, worse: Less,
        "parallel edges are too close to be told apart";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let least = page.style.clearance.lines.max(2.0 * page.group.wide);
    let steep = page.style.clearance.parallel_angle.to_radians().sin();
    let straight = |p: &&Piece| p.straight && is_edge(p.kind);
    for a in page.ink.pieces().iter().filter(straight) {
        for b in page.ink.near(a.bounds.grown(least)).filter(straight) {
            // The order of the two comes from their places, so that each pair is met once.
            if !place::order(&a.bounds, &b.bounds).is_lt() {
                continue;
            }
            let Some(clear) = white_between(page, a, b, steep) else { continue };
            if clear < least - page.limits().overlap_depth {
                report(
                    page,
                    (page.item(a), page.item(b)),
                    clear,
                    place::between(&a.bounds, &b.bounds),
                    found,
                );
            }
        }
    }
    concentric(page, least, found);
}

fn report(
    page: &Page<'_>,
    (a, b): (&Item, &Item),
    clear: f64,
    area: Rect<Sheet>,
    found: &mut Findings,
) {
    let (a, b) = if b.id < a.id { (b, a) } else { (a, b) };
    let clear = clear.max(0.0);
    let message = if a.id == b.id {
        format!("two edges of {} leave {clear:.2} mm between them", a.id)
    } else {
        format!(
            "{} and {} ({} and {}) leave {clear:.2} mm between them",
            a.id,
            b.id,
            kind_words(a.kind),
            kind_words(b.kind)
        )
    };
    found.report(page, &[a, b], area, message).measured(clear, Unit::Millimetre);
}

/// White between two nearly parallel strokes where they face each other; `None` where they do not,
/// or where they coincide or meet.
fn white_between(page: &Page<'_>, a: &Piece, b: &Piece, steep: f64) -> Option<f64> {
    let (u, v): (&Line<Sheet>, &Line<Sheet>) = (a.line()?, b.line()?);
    let (axis, other) = (u.vector().unit()?, v.vector().unit()?);
    if axis.cross(other).abs() > steep {
        return None;
    }
    let along = |p| axis.dot(p - u.from);
    let (s, t) = (along(v.from), along(v.to));
    let (lo, hi) = (s.min(t).max(0.0), s.max(t).min(u.length()));
    if hi - lo < 2.0 * page.group.wide {
        return None;
    }
    let off = |place: f64| axis.cross(v.at((place - s) / (t - s)) - u.from);
    let (d, e) = (off(lo), off(hi));
    let meets = d.abs().min(e.abs()) <= page.limits().same_place || d.signum() != e.signum();
    (!meets).then(|| d.abs().max(e.abs()) - a.half_width() - b.half_width())
}

/// A round edge with its item and half its width.
struct Round<'a> {
    item: &'a Item,
    arc: Arc<Sheet>,
    half: f64,
}

fn concentric(page: &Page<'_>, least: f64, found: &mut Findings) {
    let place = page.limits().same_place;
    let mut rounds: Vec<_> = rounds(page).collect();
    rounds.sort_by(|a, b| {
        let key = |r: &Round<'_>| [r.arc.centre.x, r.arc.centre.y, r.arc.radius, r.arc.start];
        let (p, q) = (key(a), key(b));
        p.iter()
            .zip(&q)
            .map(|(x, y)| x.total_cmp(y))
            .find(|o| o.is_ne())
            .unwrap_or(a.item.id.cmp(&b.item.id))
    });
    for (i, a) in rounds.iter().enumerate() {
        let near = rounds[i + 1..].iter().take_while(|b| b.arc.centre.x - a.arc.centre.x <= place);
        for b in near.filter(|b| b.arc.centre.distance(a.arc.centre) <= place) {
            let apart = (a.arc.radius - b.arc.radius).abs();
            let clear = apart - a.half - b.half;
            let faces = [0.0, 0.5, 1.0].iter().any(|t| {
                b.arc.covers(a.arc.start + a.arc.sweep * t)
                    || a.arc.covers(b.arc.start + b.arc.sweep * t)
            });
            if apart > place && faces && clear < least - page.limits().overlap_depth {
                let inner = if a.arc.radius < b.arc.radius { a } else { b };
                let area = Curve::Arc(inner.arc).bounds();
                report(page, (a.item, b.item), clear, area, found);
            }
        }
    }
}

fn rounds<'a>(page: &Page<'a>) -> impl Iterator<Item = Round<'a>> {
    let edges = page.scene.items.iter().filter(|i| is_edge(i.kind));
    edges.flat_map(|item| {
        let strokes = item.marks.iter().filter_map(|m| match m {
            Mark::Stroke(s) => Some(s),
            Mark::Fill(_) | Mark::Text(_) => None,
        });
        strokes.flat_map(move |s| {
            let curves = s.paths.iter().flat_map(|p| &p.curves);
            curves.filter_map(move |c| match c {
                Curve::Arc(arc) => Some(Round { item, arc: *arc, half: s.width / 2.0 }),
                Curve::Line(_) | Curve::Ellipse(_) | Curve::Cubic(_) => None,
            })
        })
    })
}

#[cfg(test)]
fn sheet(width: f64) -> Case {
    use crate::scene::ItemKind;
    a3().item("groove.left", ItemKind::Outline, "front")
        .wide((140.0, 110.0), (140.0, 130.0))
        .item("groove.right", ItemKind::Outline, "front")
        .wide((140.0 + width, 110.0), (140.0 + width, 130.0))
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(1.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(2.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;
    use crate::scene::ItemKind;

    fn amounts(case: &Case) -> Vec<f64> {
        let findings = review(&case.input()).findings;
        findings.iter().filter(|f| f.rule == &LINES_MERGE).filter_map(|f| f.amount).collect()
    }

    #[test]
    fn the_white_between_the_inks_is_measured() {
        let amounts = amounts(&bad());
        assert!(amounts.len() == 1 && (amounts[0] - 0.5).abs() < 1e-9, "{amounts:?}");
    }

    #[test]
    fn round_edges_about_one_centre_merge_too() {
        let rings = |r: f64| {
            a3().item("a", ItemKind::Outline, "front")
                .circle(0.5, (150.0, 100.0), 20.0)
                .item("b", ItemKind::Outline, "front")
                .circle(0.5, (150.0, 100.0), r)
                .case()
        };
        assert_eq!(amounts(&rings(21.0)).len(), 1);
        assert_eq!(amounts(&rings(22.0)).len(), 0);
    }

    #[test]
    fn edges_that_meet_at_a_point_do_not_merge() {
        let wedge = a3()
            .item("a", ItemKind::Outline, "front")
            .wide((100.0, 100.0), (110.0, 100.0))
            .wide((100.0, 100.0), (110.0, 101.0))
            .case();
        assert!(amounts(&wedge).is_empty());
    }
}
