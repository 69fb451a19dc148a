//! The list of all rules, and what each says about itself.

use super::Rule;
use super::rules::ALL;
use crate::source::nearest;

/// A name that was, or could be taken for, a rule, and what stands in its place.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Retired {
    /// The name that is no rule.
    pub name: &'static str,
    /// The rule that covers its fault.
    pub instead: &'static str,
    /// Why.
    pub reason: &'static str,
}

/// Names that are no rules, each with the rule that covers its fault. A removed rule stays here,
/// so that an old spec that accepts it learns what became of it.
pub const RETIRED: &[Retired] = &[Retired {
    name: "clutter/leader-crosses-text",
    instead: "clutter/text-on-line",
    reason: "a leader through a text is a line through a text, and one fault is one finding",
}];

/// A name that is no rule.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum UnknownRule {
    /// It is listed as retired.
    #[error("{} is no rule: its fault is found by {} ({})", .0.name, .0.instead, .0.reason)]
    Retired(Retired),
    /// Nothing has this name; perhaps another one was meant.
    #[error("there is no rule {name:?}{}", meant.map_or(String::new(), |m| format!("; did you mean {m}?")))]
    Nothing {
        /// The name.
        name: String,
        /// The nearest name of a rule.
        meant: Option<&'static str>,
    },
}

/// Every rule, clutter first, in the order of the reference.
#[must_use]
pub fn rules() -> &'static [&'static Rule] {
    ALL
}

/// The rule with this name.
///
/// # Errors
/// [`UnknownRule`] with what may have been meant, in area and fault or in the fault alone.
pub fn rule_named(name: &str) -> Result<&'static Rule, UnknownRule> {
    if let Some(rule) = ALL.iter().find(|r| r.name == name) {
        return Ok(rule);
    }
    if let Some(retired) = RETIRED.iter().find(|r| r.name == name) {
        return Err(UnknownRule::Retired(*retired));
    }
    let whole = || nearest(name, ALL.iter().map(|r| r.name));
    let fault = || {
        let near = nearest(name, ALL.iter().map(|r| fault_of(r.name)))?;
        ALL.iter().map(|r| r.name).find(|n| fault_of(n) == near)
    };
    let meant = if name.contains('/') { whole() } else { fault() };
    let meant = ALL.iter().map(|r| r.name).find(|n| Some(*n) == meant);
    Err(UnknownRule::Nothing { name: name.to_owned(), meant })
}

/// What a rule says about itself: what it checks, why it matters, a bad and a good example, and
/// where it comes from.
///
/// # Errors
/// [`UnknownRule`] with what may have been meant.
pub fn explain(name: &str) -> Result<String, UnknownRule> {
    rule_named(name).map(Rule::explanation)
}

fn fault_of(name: &str) -> &str {
    name.split_once('/').map_or(name, |(_, fault)| fault)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::review::{ReviewInput, Severity, review};

    #[test]
    fn every_rule_finds_its_bad_example_and_leaves_the_good_one_alone() {
        for rule in rules() {
            let found = |case: crate::review::testing::Case| {
                let review = review(&case.input());
                review.findings.into_iter().filter(|f| f.rule.name == rule.name).collect::<Vec<_>>()
            };
            let bad = found((rule.bad)());
            assert!(!bad.is_empty(), "{} does not find its bad example", rule.name);
            let good = found((rule.good)());
            assert!(good.is_empty(), "{} finds its good example: {good:?}", rule.name);
        }
    }

    #[test]
    fn good_examples_break_no_must_rule() {
        for rule in rules() {
            let case = (rule.good)();
            let musts: Vec<_> = review(&case.input())
                .findings
                .into_iter()
                .filter(|f| f.severity == Severity::Must && f.rule.name.starts_with("clutter/"))
                .collect();
            assert!(musts.is_empty(), "good example of {}: {musts:?}", rule.name);
        }
    }

    #[test]
    fn a_misspelt_rule_is_answered_with_the_one_that_was_meant() {
        let words = |name: &str| rule_named(name).err().map_or(String::new(), |e| e.to_string());
        assert!(words("clutter/text-on-lines").ends_with("did you mean clutter/text-on-line?"));
        assert!(words("text-on-line").ends_with("did you mean clutter/text-on-line?"));
        assert!(words("clutter/leader-crosses-text").contains("clutter/text-on-line"));
        assert_eq!(words("qqq"), "there is no rule \"qqq\"");
    }

    #[test]
    fn nothing_is_found_on_no_sheet() {
        let style = crate::style::builtin("iso").expect("compiled in");
        let input =
            ReviewInput { scenes: &[], style: &style, drawing: None, misfits: &[], conflicts: &[] };
        assert!(review(&input).findings.is_empty());
    }
}
