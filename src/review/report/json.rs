//! The report for programs.

use serde::Serialize;

use super::CAUTION;
use crate::review::{Finding, Review, Severity};
use crate::scene::SheetFacts;
use crate::source::SourceMap;

#[derive(Serialize)]
struct Report<'a> {
    drawing: &'a str,
    revision: Option<&'a str>,
    findings: Vec<Entry<'a>>,
    summary: Summary,
    caution: &'static str,
}

#[derive(Serialize)]
struct Entry<'a> {
    rule: &'static str,
    severity: &'static str,
    sheet: u32,
    view: Option<&'a str>,
    items: Vec<&'a str>,
    #[serde(rename = "box")]
    area: [f64; 4],
    amount: Option<f64>,
    unit: Option<&'static str>,
    message: &'a str,
    file: Option<&'a str>,
    line: Option<usize>,
    column: Option<usize>,
}

#[derive(Serialize)]
struct Summary {
    must: usize,
    should: usize,
    consider: usize,
    excused: usize,
}

/// A review as JSON: `{drawing, revision, findings, summary, caution}`.
///
/// Each finding has `rule`, `severity`, `sheet`, `view`, `items`, `box` (x0, y0, x1, y1 in sheet mm),
/// `amount`, `unit`, `message`, `file`, `line` and `column` (from 1). Every key is always there;
/// what a finding lacks is `null`, as is the revision before the first. Numbers are rounded to
/// three decimals. `sheet` is any sheet of the drawing.
#[must_use]
pub fn json(review: &Review, sheet: Option<&SheetFacts>, sources: Option<&SourceMap>) -> String {
    let count = |severity| review.count(severity);
    let report = Report {
        drawing: sheet.map_or("", |s| s.number.as_str()),
        revision: sheet.map(|s| s.revision.as_str()).filter(|r| !r.is_empty()),
        findings: review.findings.iter().map(|f| entry(f, sources)).collect(),
        summary: Summary {
            must: count(Severity::Must),
            should: count(Severity::Should),
            consider: count(Severity::Consider),
            excused: review.excused,
        },
        caution: CAUTION,
    };
    let mut text = serde_json::to_string_pretty(&report)
        .expect("numbers, texts and lists of them can always be written");
    text.push('\n');
    text
}

fn entry<'a>(f: &'a Finding, sources: Option<&'a SourceMap>) -> Entry<'a> {
    let located = f.span.zip(sources).and_then(|(span, map)| map.locate(span));
    Entry {
        rule: f.rule.name,
        severity: f.severity.name(),
        sheet: f.sheet,
        view: f.view.as_ref().map(|v| v.as_str()),
        items: f.items.iter().map(|i| i.as_str()).collect(),
        area: [f.area.min.x, f.area.min.y, f.area.max.x, f.area.max.y].map(rounded),
        amount: f.amount.map(rounded),
        unit: f.unit.name(),
        message: &f.message,
        file: located.map(|(file, _, _)| file),
        line: located.map(|(_, line, _)| line),
        column: located.map(|(_, _, column)| column),
    }
}

/// Three decimals, and no negative zero.
fn rounded(value: f64) -> f64 {
    (value * 1000.0).round() / 1000.0 + 0.0
}
