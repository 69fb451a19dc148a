//! The commands, one file each, and the only module that prints.
//!
//! Exit codes: 0 done, nothing at or above the asked severity; 1 findings; 2 the spec or the call is
//! wrong; 3 could not read or write; of several, the highest.

mod check;
mod explain;
mod files;
mod inspect;
mod issue;
mod job;
mod new;
mod print;
mod style;

use std::ffi::OsString;
use std::process::ExitCode;

use clap::{Parser, Subcommand, ValueEnum};

use crate::review::Severity;

/// Issues engineering drawing sheets from specs and reports what clutters or contradicts.
#[derive(Debug, Parser)]
#[command(name = "witnessline", version, about, max_term_width = 100)]
struct Call {
    #[command(subcommand)]
    command: Command,
}

#[derive(Debug, Subcommand)]
enum Command {
    /// Issue the sheets of one or more specs as SVG and PNG.
    Issue(issue::Options),
    /// Report what a checker would mark on a spec's sheet, or on an issued SVG.
    Check(check::Options),
    /// Tell what a spec says: views, edges, annotations with values and limits.
    Inspect(inspect::Options),
    /// Explain a rule of the report.
    Explain(explain::Options),
    /// Write a starter spec.
    New(new::Options),
    /// Print a compiled-in style.
    Style(style::Options),
}

/// How bad a finding must be to end with exit code 1.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, ValueEnum)]
enum FailOn {
    /// The part can be made wrong, or the sheet cannot be used.
    #[default]
    Must,
    /// Practice is broken; a reader stumbles.
    Should,
    /// A matter of judgement.
    Consider,
}

impl FailOn {
    fn severity(self) -> Severity {
        match self {
            Self::Must => Severity::Must,
            Self::Should => Severity::Should,
            Self::Consider => Severity::Consider,
        }
    }
}

/// A resolution that a raster can have.
fn resolution(text: &str) -> Result<f64, String> {
    match text.parse::<f64>() {
        Ok(dpi) if (10.0..=2400.0).contains(&dpi) => Ok(dpi),
        _ => Err("give a number from 10 to 2400".to_owned()),
    }
}

/// What a command came to; the highest of several is the exit code.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord)]
enum Outcome {
    /// Done.
    #[default]
    Done,
    /// Findings at or above the asked severity.
    Findings,
    /// The spec or the call is wrong.
    Wrong,
    /// Could not read or write.
    Files,
}

impl From<Outcome> for ExitCode {
    fn from(o: Outcome) -> Self {
        Self::from(match o {
            Outcome::Done => 0,
            Outcome::Findings => 1,
            Outcome::Wrong => 2,
            Outcome::Files => 3,
        })
    }
}

/// Runs the program with its arguments, the program's own name first.
pub fn run(arguments: impl IntoIterator<Item = OsString>) -> ExitCode {
    let call = match Call::try_parse_from(arguments) {
        Ok(call) => call,
        Err(e) => {
            let asked_for = !e.use_stderr();
            // Nothing can be done where even the usage cannot be printed.
            let _ = e.print();
            return if asked_for { Outcome::Done } else { Outcome::Wrong }.into();
        }
    };
    match call.command {
        Command::Issue(o) => issue::run(&o),
        Command::Check(o) => check::run(&o),
        Command::Inspect(o) => inspect::run(&o),
        Command::Explain(o) => explain::run(&o),
        Command::New(o) => new::run(&o),
        Command::Style(o) => style::run(&o),
    }
    .into()
}
