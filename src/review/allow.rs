//! Findings that the spec accepts on purpose.

use super::findings::Findings;
use super::registry::rule_named;
use super::rules::content::allow_unknown_rule::ALLOW_UNKNOWN_RULE;
use super::rules::content::allow_unused::ALLOW_UNUSED;
use super::{Finding, ReviewInput};
use crate::geom::{Point, Rect};
use crate::spec::Allow;

/// Takes accepted findings out and says how many they were. Entries that excuse nothing, or name
/// no rule, become findings themselves, which nothing excuses.
pub(super) fn excuse(input: &ReviewInput<'_>, findings: &mut Vec<Finding>) -> usize {
    let Some(drawing) = input.drawing else { return 0 };
    let before = findings.len();
    let mut used = vec![false; drawing.allow.len()];
    findings.retain(|f| {
        let mut kept = true;
        for (allow, used) in drawing.allow.iter().zip(&mut used) {
            if excuses(allow, f) {
                *used = true;
                kept = false;
            }
        }
        kept
    });
    let excused = before - findings.len();
    let (mut unused, mut unknown) =
        (Findings::of(&ALLOW_UNUSED), Findings::of(&ALLOW_UNKNOWN_RULE));
    for (allow, used) in drawing.allow.iter().zip(used) {
        if let Err(e) = rule_named(&allow.rule.value) {
            report(&mut unknown, allow, e.to_string());
        } else if !used {
            let message = format!("the accepted finding {} does not occur", what(allow));
            report(&mut unused, allow, message);
        }
    }
    findings.extend(unused.into_merged());
    findings.extend(unknown.into_merged());
    excused
}

fn report(to: &mut Findings, allow: &Allow, message: String) {
    let nowhere = Rect::new(Point::new(0.0, 0.0), Point::new(0.0, 0.0));
    let span = if allow.rule.value.is_empty() { allow.span } else { allow.rule.span };
    to.report_on_sheet(1, nowhere, message).written_at(span);
}

fn what(allow: &Allow) -> String {
    let items: Vec<_> = allow.items.iter().map(|i| i.value.as_str()).collect();
    match items.as_slice() {
        [] => allow.rule.value.clone(),
        items => format!("{} of {}", allow.rule.value, items.join(", ")),
    }
}

fn excuses(allow: &Allow, finding: &Finding) -> bool {
    let named = |id: &str| allow.items.iter().any(|i| i.value == id);
    allow.rule.value == finding.rule.name
        && (allow.items.is_empty()
            || (!finding.items.is_empty() && finding.items.iter().all(|i| named(i.as_str()))))
}
