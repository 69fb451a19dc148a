//! `style`: prints a compiled-in style, to read or to begin one's own from.

use super::{Outcome, print};
use crate::style;

/// Options of `style`.
#[derive(Debug, clap::Args)]
#[command(after_help = "Example: witnessline style iso")]
pub(super) struct Options {
    /// Name of the style; without it the styles are listed.
    name: Option<String>,
}

pub(super) fn run(options: &Options) -> Outcome {
    let Some(name) = &options.name else {
        for name in style::builtin_names() {
            print::out(&format!("{name}\n"));
        }
        return Outcome::Done;
    };
    match style::builtin_text(name) {
        Some(text) => {
            print::out(text);
            Outcome::Done
        }
        None => {
            let names = style::builtin_names();
            let near = crate::source::nearest(name, names.iter().copied()).unwrap_or(names[0]);
            print::err(&format!("error: there is no style `{name}`; did you mean `{near}`?\n"));
            Outcome::Wrong
        }
    }
}
