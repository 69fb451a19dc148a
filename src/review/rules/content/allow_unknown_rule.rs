//! `content/allow-unknown-rule`.

use crate::review::rule::{Check, rule};
#[cfg(test)]
use crate::{
    review::testing::{Case, a3, bare_drawing, nowhere, spanned},
    spec::Allow,
};

rule! {
    /// ## What it checks
    /// An `[[allow]]` of the spec names no rule. The message has the nearest name, or what became of a
    /// rule that was removed. Nothing excuses this finding.
    ///
    /// ## Why it matters
    /// A misspelt excuse excuses nothing, while its author believes that the fault was looked at.
    ///
    /// ## Bad
    /// `rule = "clutter/leader-longs"`.
    ///
    /// ## Good
    /// `rule = "clutter/leader-long"`.
    ///
    /// ## Source
    /// The project's own.
    ALLOW_UNKNOWN_RULE = "content/allow-unknown-rule", Must, worse: More,
        "an accepted finding names no rule";
    check: Check::Allow;
    examples: bad, good;
}

#[cfg(test)]
fn sheet(rule: &str) -> Case {
    let mut drawing = bare_drawing();
    drawing.allow.push(Allow {
        rule: spanned(rule.to_owned()),
        items: Vec::new(),
        reason: "Only free space on this side.".to_owned(),
        span: nowhere(),
    });
    a3().case().with_drawing(drawing)
}

#[cfg(test)]
fn bad() -> Case {
    sheet("clutter/leader-longs")
}

#[cfg(test)]
fn good() -> Case {
    sheet("clutter/leader-long")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::review;

    #[test]
    fn the_nearest_name_is_offered() {
        let findings = review(&bad().input()).findings;
        let found = findings.iter().find(|f| f.rule == &ALLOW_UNKNOWN_RULE);
        assert!(found.is_some_and(|f| f.message.ends_with("did you mean clutter/leader-long?")));
    }
}
