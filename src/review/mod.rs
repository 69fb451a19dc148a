//! The checker: rules that read finished sheets, and the reports of what they find.
//!
//! Takes [`Scene`](crate::scene::Scene)s, from the pipeline or read back from issued files, with the style that they
//! shall follow and, where there is one, the spec; gives a [`Review`]. Rules judge the ink as it
//! is drawn, by exact geometry. They never see how anything was placed: a mistake of the placement
//! must not hide behind its own tables.
//!
//! A rule is one file under `rules/`, with its docs, its check and the drawings that prove it. The
//! [`registry`](fn@rules) is the one list of them; [`explain`] and the reports read the same source.

mod allow;
mod crossing;
mod dimension_line;
mod finding;
mod findings;
mod ink;
mod intrusion;
mod leader;
mod naming;
mod page;
mod place;
mod registry;
pub mod report;
mod rule;
mod rules;
mod run;
mod shape;
#[cfg(test)]
mod testing;

pub use finding::{Finding, Severity, Unit};
pub use registry::{RETIRED, Retired, UnknownRule, explain, rule_named, rules};
pub use rule::Rule;
pub use run::{Conflict, Misfit, Review, ReviewInput, review};
