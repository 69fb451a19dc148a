//! Output for people and programs. A closed pipe is no error: whoever reads has read enough.

use std::io::{IsTerminal, Write};

/// Writes to standard output.
pub(super) fn out(text: &str) {
    let mut stdout = std::io::stdout().lock();
    let _ = stdout.write_all(text.as_bytes());
    let _ = stdout.flush();
}

/// Writes to standard error.
pub(super) fn err(text: &str) {
    let _ = std::io::stderr().lock().write_all(text.as_bytes());
}

/// Whether diagnostics may be coloured.
pub(super) fn colour() -> bool {
    std::io::stderr().is_terminal() && std::env::var_os("NO_COLOR").is_none()
}
