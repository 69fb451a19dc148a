//! The report for people.

use std::fmt::Write as _;

use super::CAUTION;
use crate::geom::{Point, Sheet};
use crate::review::{Finding, Review, Severity, Unit};
use crate::source::SourceMap;

/// How places are named in a report.
#[derive(Clone, Copy, Default)]
pub struct Places<'a> {
    /// The files that the spec was read from, for file, line and column.
    pub sources: Option<&'a SourceMap>,
    /// The zone of a sheet (from 1) that a point lies in, such as `B3`.
    pub zone: Option<&'a dyn Fn(u32, Point<Sheet>) -> Option<String>>,
}

/// A review as text: by severity, each finding with its number on the marked-up sheet, its rule,
/// where it stands on the sheet (zone, and mm from the upper left corner) and in the spec; then one
/// line that counts them, and what the check is not.
#[must_use]
pub fn text(review: &Review, places: &Places<'_>) -> String {
    let mut out = String::new();
    for severity in Severity::ALL {
        let mut heading = Some(severity);
        for (i, finding) in review.findings.iter().enumerate() {
            if finding.severity == severity {
                if heading.take().is_some() {
                    push(&mut out, format_args!("{severity}\n"));
                }
                push_finding(&mut out, i + 1, finding, places);
            }
        }
        if heading.is_none() {
            out.push('\n');
        }
    }
    push_summary(&mut out, review);
    push(&mut out, format_args!("\n{CAUTION}\n"));
    out
}

fn push_finding(out: &mut String, number: usize, finding: &Finding, places: &Places<'_>) {
    push(out, format_args!("{number:>4}  {}: {}", finding.rule.name, finding.message));
    push(out, format_args!("\n      {}", place(finding, places)));
    if let Some(amount) = amount(finding) {
        push(out, format_args!(", {amount}"));
    }
    if !finding.items.is_empty() {
        let ids: Vec<_> = finding.items.iter().map(|i| i.as_str()).collect();
        push(out, format_args!("; {}", ids.join(", ")));
    }
    out.push('\n');
    let located = finding.span.zip(places.sources).and_then(|(span, map)| map.locate(span));
    if let Some((file, line, column)) = located {
        push(out, format_args!("      {file}:{line}:{column}\n"));
    }
}

fn place(finding: &Finding, places: &Places<'_>) -> String {
    let middle = finding.area.centre();
    let zone = places.zone.and_then(|zone| zone(finding.sheet, middle));
    let zone = zone.map_or(String::new(), |z| format!(" {z}"));
    format!("sheet {}{zone} at ({:.1}, {:.1}) mm", finding.sheet, middle.x, middle.y)
}

fn amount(finding: &Finding) -> Option<String> {
    let amount = finding.amount?;
    Some(match finding.unit {
        Unit::None => return None,
        Unit::Millimetre => format!("{amount:.2} mm"),
        Unit::Degree => format!("{amount:.1}°"),
        Unit::Count => format!("{amount:.0}"),
        Unit::Percent => format!("{amount:.0} %"),
        Unit::Ratio => format!("{amount:.2}:1"),
    })
}

fn push_summary(out: &mut String, review: &Review) {
    let count = |severity| review.count(severity);
    let (must, should, consider) =
        (count(Severity::Must), count(Severity::Should), count(Severity::Consider));
    if must + should + consider == 0 {
        out.push_str("nothing found");
    } else {
        push(out, format_args!("{must} must, {should} should, {consider} consider"));
    }
    if review.excused > 0 {
        push(out, format_args!(" ({} accepted by the spec)", review.excused));
    }
    out.push('\n');
}

fn push(out: &mut String, words: std::fmt::Arguments<'_>) {
    out.write_fmt(words).expect("writing to a string does not fail");
}

#[cfg(test)]
mod tests {
    use std::sync::Arc;

    use super::*;
    use crate::review::review;
    use crate::review::testing::a3;
    use crate::scene::ItemKind;
    use crate::source::{FileId, Span};

    #[test]
    fn findings_stand_under_their_severity_with_place_amount_and_line() {
        let case = a3()
            .outline("plate", "front", (100.0, 100.0), (180.0, 150.0))
            .item("d1", ItemKind::Dimension, "front")
            .text("80", (140.0, 101.0))
            .case();
        let mut review = review(&case.input());
        let mut sources = SourceMap::default();
        let file = sources.add("plate.toml", Arc::from("[drawing]\n\n[[dimension]]\n"));
        for f in &mut review.findings {
            f.span = Some(Span { file: FileId(file.0), start: 11, end: 24 });
        }
        let zone = |sheet: u32, _| Some(format!("B{sheet}"));
        let places = Places { sources: Some(&sources), zone: Some(&zone) };
        let text = text(&review, &places);
        assert!(text.starts_with("must\n   1  "), "{text}");
        let (_, rest) = text.split_once("clutter/text-on-line: ").expect("the fault is reported");
        assert!(rest.contains("\n      sheet 1 B1 at (14"), "{text}");
        assert!(rest.contains(" mm; d1, plate\n      plate.toml:3:1\n"), "{text}");
        assert!(text.trim_end().ends_with(CAUTION));
    }

    #[test]
    fn an_empty_review_says_so_and_is_no_approval() {
        let text = text(&Review::default(), &Places::default());
        assert_eq!(text, format!("nothing found\n\n{CAUTION}\n"));
        assert!(CAUTION.contains("no approval"));
    }

    #[test]
    fn accepted_findings_are_counted_in_the_summary() {
        let review = Review { findings: Vec::new(), excused: 2 };
        assert!(text(&review, &Places::default()).starts_with("nothing found (2 accepted"));
    }
}
