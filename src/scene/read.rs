//! An issued SVG brought back as a scene.

use super::Scene;

/// Why a file is no issued sheet.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum ReadError {
    /// The text is not well-formed XML.
    #[error("this is not well-formed XML: {0}")]
    Xml(String),
}

/// Reads the text of an issued SVG.
///
/// # Errors
/// [`ReadError`] for anything that this program did not issue.
pub fn read_svg(text: &str) -> Result<Scene, ReadError> {
    Err(ReadError::Xml(format!("{} bytes not read", text.len())))
}
