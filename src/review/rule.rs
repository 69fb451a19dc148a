//! What a rule is, and how one is declared.

use std::fmt;

use super::findings::Findings;
use super::page::Page;
use super::{ReviewInput, Severity};

/// A rule: what it is called, what it says about itself, and its check.
pub struct Rule {
    /// Area and fault, such as `clutter/text-on-line`.
    pub name: &'static str,
    /// The usual weight of its findings.
    pub severity: Severity,
    /// The fault in a few words.
    pub summary: &'static str,
    /// What it checks, why, a bad and a good example, and the source, under those headings.
    pub docs: &'static str,
    /// Which way its amounts get worse.
    pub(crate) worse: Worse,
    pub(crate) check: Check,
    /// A drawing that breaks the rule.
    #[cfg(test)]
    pub(crate) bad: fn() -> super::testing::Case,
    /// The same drawing put right.
    #[cfg(test)]
    pub(crate) good: fn() -> super::testing::Case,
}

/// Which way the amounts of a rule get worse.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Worse {
    /// More of it is worse, as of overlaps.
    More,
    /// Less of it is worse, as of clearances.
    Less,
}

/// How a rule is checked.
#[derive(Clone, Copy)]
pub(crate) enum Check {
    /// Sheet by sheet.
    Page(fn(&Page<'_>, &mut Findings)),
    /// Once for the whole drawing.
    Drawing(fn(&ReviewInput<'_>, &mut Findings)),
    /// Where findings are excused.
    Allow,
}

impl fmt::Debug for Rule {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.name)
    }
}

impl PartialEq for Rule {
    fn eq(&self, other: &Self) -> bool {
        self.name == other.name
    }
}

impl Rule {
    /// How bad this amount is, growing.
    pub(crate) fn badness(&self, amount: f64) -> f64 {
        match self.worse {
            Worse::More => amount,
            Worse::Less => -amount,
        }
    }

    /// The docs as text: one blank less at the beginning of each line than the source has.
    #[must_use]
    pub fn explanation(&self) -> String {
        let lines = self.docs.lines().map(|l| l.strip_prefix(' ').unwrap_or(l));
        let docs: String = lines.map(|l| format!("{l}\n")).collect();
        format!("{} ({}): {}\n\n{docs}", self.name, self.severity, self.summary)
    }
}

/// Declares a rule: docs, name, weight, summary, check and its two examples, in one place.
macro_rules! rule {
    (
        $(#[doc = $doc:literal])+
        $name:ident = $id:literal, $severity:ident, worse: $worse:ident, $summary:literal;
        check: $check:expr;
        examples: $bad:expr, $good:expr;
    ) => {
        $(#[doc = $doc])+
        pub(crate) static $name: $crate::review::rule::Rule = $crate::review::rule::Rule {
            name: $id,
            severity: $crate::review::Severity::$severity,
            summary: $summary,
            docs: concat!($($doc, "\n"),+),
            worse: $crate::review::rule::Worse::$worse,
            check: $check,
            #[cfg(test)]
            bad: $bad,
            #[cfg(test)]
            good: $good,
        };
    };
}
pub(crate) use rule;
