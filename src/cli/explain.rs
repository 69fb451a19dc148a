//! `explain`: what a rule checks, why, and how to mend it.

use super::{Outcome, print};
use crate::review;

/// Options of `explain`.
#[derive(Debug, clap::Args)]
#[command(after_help = "Example: witnessline explain clutter/text-on-line")]
pub(super) struct Options {
    /// Name of a rule; without it all rules are listed.
    rule: Option<String>,
}

pub(super) fn run(options: &Options) -> Outcome {
    match &options.rule {
        None => {
            for rule in review::rules() {
                print::out(&format!(
                    "{:<40} {:<9} {}\n",
                    rule.name,
                    rule.severity.name(),
                    rule.summary
                ));
            }
            Outcome::Done
        }
        Some(name) => match review::explain(name) {
            Ok(text) => {
                print::out(&text);
                Outcome::Done
            }
            Err(message) => {
                print::err(&format!("error: {message}\n"));
                Outcome::Wrong
            }
        },
    }
}
