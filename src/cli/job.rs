//! One input file on its way through the pipeline, with what is to be said about it.

use std::path::{Path, PathBuf};

use crate::source::{Diagnostic, Diagnostics, Disk, SourceMap, World, WorldError, render};
use crate::{Drawn, spec};

use super::Outcome;

/// A spec, read and drawn as far as it went.
pub(super) struct Job {
    /// The file, as named in the call.
    pub path: PathBuf,
    /// The sources that it is made of.
    pub sources: SourceMap,
    /// What is wrong with it.
    pub diagnostics: Vec<Diagnostic>,
    /// Its sheets, if nothing forbids them.
    pub drawn: Option<Drawn>,
    /// Wrong where there is no drawing, Files where the spec could not be read.
    pub outcome: Outcome,
}

impl Job {
    /// Reads and draws the spec at `path`.
    pub(super) fn load(path: &Path) -> Self {
        let mut sources = SourceMap::default();
        let mut diagnostics = Diagnostics::default();
        let (drawn, outcome) = match Disk.read(path) {
            Err(e) => {
                let unreadable = !matches!(e, WorldError::NotText(_) | WorldError::TooLarge { .. });
                diagnostics.push(Diagnostic::error(None, e.to_string()).help(help(&e)));
                (None, if unreadable { Outcome::Files } else { Outcome::Wrong })
            }
            Ok(text) => {
                let name = path.display().to_string();
                let drawing = spec::read_text(&name, &text, &mut sources, &mut diagnostics);
                match drawing.and_then(|d| crate::draw(d, &mut diagnostics)) {
                    Some(drawn) => (Some(drawn), Outcome::Done),
                    None => (None, Outcome::Wrong),
                }
            }
        };
        let diagnostics = diagnostics.into_sorted();
        Self { path: path.to_owned(), sources, diagnostics, drawn, outcome }
    }

    /// What is wrong with it, for people.
    pub(super) fn rendered(&self) -> String {
        render::render(&self.diagnostics, &self.sources, super::print::colour())
    }
}

fn help(e: &WorldError) -> &'static str {
    match e {
        WorldError::Missing(_) => "check the path; `witnessline new FILE` writes a starter spec",
        WorldError::NotText(_) => "save the spec as UTF-8 text",
        WorldError::TooLarge { .. } => {
            "a spec is text; split the drawing if it is really this large"
        }
        WorldError::Refused { .. } => "check that it is a file and that you may read it",
    }
}
