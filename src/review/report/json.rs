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

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;
    use crate::review::testing::a3;
    use crate::scene::ItemKind;

    #[test]
    fn every_key_of_the_contract_is_there() {
        let case = a3()
            .outline("plate", "front", (100.0, 100.0), (180.0, 150.0))
            .item("d1", ItemKind::Dimension, "front")
            .text("80", (140.0, 101.0))
            .case();
        let review = review(&case.input());
        let text = json(&review, Some(&case.scenes[0].sheet), None);
        let read: serde_json::Value = serde_json::from_str(&text).expect("it is JSON");
        assert_eq!(read["drawing"], "WL-1");
        assert!(read["revision"].is_null() && read["caution"].is_string());
        let findings = read["findings"].as_array().expect("a list");
        assert_eq!(findings.len(), review.findings.len());
        for finding in findings {
            let keys: Vec<_> = finding.as_object().expect("a table").keys().cloned().collect();
            let mut expected = [
                "rule", "severity", "sheet", "view", "items", "box", "amount", "unit", "message",
                "file", "line", "column",
            ]
            .map(String::from);
            expected.sort();
            let mut keys = keys;
            keys.sort();
            assert_eq!(keys, expected);
            assert_eq!(finding["box"].as_array().map(Vec::len), Some(4));
        }
        let on_line = findings.iter().find(|f| f["rule"] == "clutter/text-on-line");
        let on_line = on_line.expect("the fault is reported");
        assert_eq!(on_line["severity"], "must");
        assert_eq!(on_line["items"], serde_json::json!(["d1", "plate"]));
        assert_eq!((&on_line["unit"], &on_line["view"]), (&"mm".into(), &"front".into()));
        let sum = ["must", "should", "consider"].map(|s| read["summary"][s].as_u64().unwrap_or(0));
        assert_eq!(sum.iter().sum::<u64>(), findings.len() as u64);
    }

    #[test]
    fn numbers_have_three_decimals_and_no_negative_zero() {
        assert_eq!(rounded(1.234_56), 1.235);
        assert!(rounded(-0.000_1).is_sign_positive());
    }
}
