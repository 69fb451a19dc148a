//! Why a file cannot be read as an issued sheet.

use std::fmt;

/// A place in the text of a file, counted from 1.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct FilePlace {
    /// Line.
    pub line: u32,
    /// Column in characters.
    pub column: u32,
}

/// Why a file is no issued sheet.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum ReadError {
    /// The text is not well-formed XML.
    #[error("this is not well-formed XML: {0}")]
    Xml(String),
    /// It is XML, or even an SVG, but no sheet of this program.
    #[error("this is not a sheet issued by this program: {0}")]
    NotIssued(&'static str),
    /// Some limit is passed.
    #[error("the file has more than {limit} {what}")]
    TooMuch {
        /// What there is too much of.
        what: &'static str,
        /// How much there may be.
        limit: usize,
    },
    /// An attribute does not hold what it should.
    #[error("{place}: {attribute}=\"{value}\" of <{element}> is not {expected}")]
    Attribute {
        /// Name of the element.
        element: String,
        /// Name of the attribute.
        attribute: &'static str,
        /// What it holds, shortened.
        value: String,
        /// What it should hold.
        expected: &'static str,
        /// Where the element begins.
        place: FilePlace,
    },
    /// An element that draws something that a scene cannot hold.
    #[error("{place}: <{element}> cannot be checked: a sheet holds paths, shapes and text only")]
    Unsupported {
        /// Name of the element.
        element: String,
        /// Where it begins.
        place: FilePlace,
    },
}

impl fmt::Display for FilePlace {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "line {}, column {}", self.line, self.column)
    }
}

impl ReadError {
    /// A way out.
    #[must_use]
    pub fn help(&self) -> &'static str {
        match self {
            Self::Xml(_) => "issue the sheet again from its spec, or take an undamaged copy",
            Self::NotIssued(_) => {
                "give an SVG written by `issue`, with its data-kind groups, or a spec"
            }
            Self::TooMuch { .. } => {
                "issued sheets stay far below this limit: issue the sheet again from its spec"
            }
            Self::Attribute { .. } => "correct the attribute, or issue the sheet again",
            Self::Unsupported { .. } => "remove the element, or convert it to paths",
        }
    }

    /// Where in the file it is, if at one place.
    #[must_use]
    pub fn place(&self) -> Option<FilePlace> {
        match self {
            Self::Attribute { place, .. } | Self::Unsupported { place, .. } => Some(*place),
            Self::Xml(_) | Self::NotIssued(_) | Self::TooMuch { .. } => None,
        }
    }
}
