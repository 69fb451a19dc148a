//! `clutter/extension-crosses-dimension`.

use crate::review::crossing::{Meeting, meetings};
use crate::review::dimension_line::{DimensionLine, dimension_lines};
use crate::review::findings::Findings;
use crate::review::ink::{Class, Piece};
use crate::review::page::Page;
use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::review::testing::{Case, a3};
use crate::review::{Severity, Unit};
use crate::scene::{ItemKind, Role};

rule! {
    /// ## What it checks
    /// An extension line of one dimension crosses the dimension line of another (`consider`) or one of
    /// its arrowheads (`should`). Its own ends do not count, nor does a line that two links of a chain
    /// share. The amount is the length that the two share, in mm; 0 at a plain crossing.
    ///
    /// ## Why it matters
    /// A crossed dimension line is read as ending at the crossing. An arrowhead with a line through it
    /// seems to point at that line.
    ///
    /// ## Bad
    /// A long dimension stands nearer to the view than a short one, so that the short one's extension
    /// lines cut through it.
    ///
    /// ## Good
    /// The shortest dimension stands nearest to the view; at arrowheads the extension line is
    /// interrupted.
    ///
    /// ## Source
    /// ISO 129-1; common practice.
    EXTENSION_CROSSES_DIMENSION = "clutter/extension-crosses-dimension", Consider, worse: More,
        "an extension line crosses a dimension line";
    check: Check::Page(check);
    examples: bad, good;
}

fn check(page: &Page<'_>, found: &mut Findings) {
    let lines = dimension_lines(page);
    for meeting in meetings(page, Role::Ext, Role::Dim) {
        if is_shared(page, &lines, &meeting) {
            continue;
        }
        let (ext, dim) = (page.item(meeting.first), page.item(meeting.second));
        let message =
            format!("an extension line of {} crosses the dimension line of {}", ext.id, dim.id);
        found
            .report(page, &[ext, dim], meeting.area(), message)
            .measured(meeting.along, Unit::Millimetre);
    }
    let is_ext = |p: &&Piece| p.class == Class::Line && p.role == Some(Role::Ext);
    for ext in page.ink.pieces().iter().filter(is_ext) {
        for arrow in page.ink.near(ext.bounds) {
            let shared =
                if is_foreign_arrow(ext, arrow) { inside_arrow(page, ext, arrow) } else { 0.0 };
            if shared > page.limits().overlap_depth {
                report_arrow(page, (ext, arrow), shared, found);
            }
        }
    }
}

/// Whether the dimension has an extension line of its own at the crossing: links of a chain share
/// one, and with outside arrows their dimension lines go on past it.
fn is_shared(page: &Page<'_>, lines: &[DimensionLine<'_>], meeting: &Meeting<'_>) -> bool {
    let place = page.limits().same_place;
    let of_item = lines.iter().filter(|l| l.item == meeting.second.item);
    let mut own = of_item.filter(|l| (l.run.offset_of(meeting.at) - l.run.offset).abs() <= place);
    own.any(|l| l.stations.iter().any(|s| (l.run.along(meeting.at) - s).abs() <= place))
}

fn is_foreign_arrow(ext: &Piece, arrow: &Piece) -> bool {
    arrow.item != ext.item && arrow.class == Class::Termination && arrow.kind == ItemKind::Dimension
}

/// How far the middle of an extension line runs inside an arrowhead. A line that passes through
/// the middle of a termination is the one that this dot or stroke stands on, shared with it.
fn inside_arrow(page: &Page<'_>, ext: &Piece, arrow: &Piece) -> f64 {
    let (Some(line), Some(outline)) = (ext.line(), arrow.polygon()) else { return 0.0 };
    let middle = arrow.bounds.centre();
    let off = line.vector().unit().map_or(0.0, |u| u.cross(middle - line.from).abs());
    if off <= page.limits().same_place {
        return 0.0;
    }
    outline.part_inside(line).map_or(0.0, |l| l.length())
}

fn report_arrow(
    page: &Page<'_>,
    (ext, arrow): (&Piece, &Piece),
    shared: f64,
    found: &mut Findings,
) {
    let (of_ext, of_arrow) = (page.item(ext), page.item(arrow));
    let message =
        format!("an extension line of {} runs through an arrowhead of {}", of_ext.id, of_arrow.id);
    let area = ext.bounds.intersection(&arrow.bounds).unwrap_or(arrow.bounds);
    found
        .report(page, &[of_ext, of_arrow], area, message)
        .measured(shared, Unit::Millimetre)
        .weighing(Severity::Should);
}

#[cfg(test)]
fn sheet(short: f64, long: f64) -> Case {
    a3().dimension("d1", "front", (100.0, 180.0), 110.0, long)
        .dimension("d2", "front", (115.0, 165.0), 110.0, short)
        .case()
}

#[cfg(test)]
fn bad() -> Case {
    sheet(90.0, 100.0)
}

#[cfg(test)]
fn good() -> Case {
    sheet(100.0, 90.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    fn severities(case: &Case) -> Vec<Severity> {
        let findings = review(&case.input()).findings;
        let of_rule = findings.iter().filter(|f| f.rule == &EXTENSION_CROSSES_DIMENSION);
        of_rule.map(|f| f.severity).collect()
    }

    #[test]
    fn at_an_arrowhead_it_weighs_more() {
        let case = a3()
            .dimension("d1", "front", (100.0, 180.0), 110.0, 100.0)
            .dimension("d2", "front", (102.0, 178.0), 110.0, 90.0)
            .case();
        assert_eq!(severities(&bad()), [Severity::Consider]);
        assert_eq!(severities(&case), [Severity::Should]);
    }

    #[test]
    fn links_of_a_chain_share_an_extension_line() {
        let case = a3()
            .dimension("c.1", "front", (100.0, 140.0), 110.0, 95.0)
            .dimension("c.2", "front", (140.0, 180.0), 110.0, 95.0)
            .case();
        assert!(severities(&case).is_empty());
    }
}
