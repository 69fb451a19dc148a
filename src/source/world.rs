//! Files and places in them, and the trait through which they arrive.

use std::path::{Path, PathBuf};
use std::sync::Arc;

/// Number of a source file in its [`SourceMap`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct FileId(pub u32);

/// A stretch of a source file, in bytes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Span {
    /// The file.
    pub file: FileId,
    /// First byte.
    pub start: usize,
    /// Byte after the last.
    pub end: usize,
}

/// The text of a file and the name to call it by.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Source {
    /// Path as the user wrote it.
    pub name: String,
    /// Its text.
    pub text: Arc<str>,
}

/// The files that a run has read.
#[derive(Clone, Debug, Default)]
pub struct SourceMap {
    files: Vec<Source>,
}

/// Why a file cannot be read.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum WorldError {
    /// Nothing is there.
    #[error("there is no file {0}")]
    Missing(PathBuf),
    /// It is not UTF-8 text.
    #[error("{0} is not a text file in UTF-8")]
    NotText(PathBuf),
    /// It is larger than any spec can be.
    #[error("{path} has {bytes} bytes; the limit is {limit}")]
    TooLarge {
        /// The file.
        path: PathBuf,
        /// Its size.
        bytes: u64,
        /// The largest size that is read.
        limit: u64,
    },
    /// The system refuses.
    #[error("{path} cannot be read: {reason}")]
    Refused {
        /// The file.
        path: PathBuf,
        /// What the system says.
        reason: String,
    },
}

/// Everything that reaches the pipeline from outside.
pub trait World: Sync {
    /// The text of a file.
    ///
    /// # Errors
    /// [`WorldError`] if it cannot be read as text.
    fn read(&self, path: &Path) -> Result<Arc<str>, WorldError>;
}

/// The real file system.
#[derive(Clone, Copy, Debug, Default)]
pub struct Disk;

impl Disk {
    /// Largest file that is read, bytes: a spec of ten thousand shapes takes about one megabyte, an
    /// issued sheet of two thousand annotations about twenty.
    pub const LIMIT: u64 = 64 << 20;
}

impl World for Disk {
    fn read(&self, path: &Path) -> Result<Arc<str>, WorldError> {
        let refused = |e: std::io::Error| match e.kind() {
            std::io::ErrorKind::NotFound => WorldError::Missing(path.to_owned()),
            std::io::ErrorKind::InvalidData => WorldError::NotText(path.to_owned()),
            _ => WorldError::Refused { path: path.to_owned(), reason: e.to_string() },
        };
        let bytes = std::fs::metadata(path).map_err(refused)?.len();
        if bytes > Self::LIMIT {
            return Err(WorldError::TooLarge { path: path.to_owned(), bytes, limit: Self::LIMIT });
        }
        std::fs::read_to_string(path).map(Arc::from).map_err(refused)
    }
}

impl SourceMap {
    /// Takes a file and gives its number.
    pub fn add(&mut self, name: impl Into<String>, text: Arc<str>) -> FileId {
        let id = FileId(u32::try_from(self.files.len()).unwrap_or(u32::MAX));
        self.files.push(Source { name: name.into(), text });
        id
    }

    /// The file with this number.
    #[must_use]
    pub fn get(&self, id: FileId) -> Option<&Source> {
        self.files.get(id.0 as usize)
    }

    /// Name, line and column (both from 1, columns in characters) of a span's beginning.
    #[must_use]
    pub fn locate(&self, span: Span) -> Option<(&str, usize, usize)> {
        let source = self.get(span.file)?;
        let before = source.text.get(..span.start.min(source.text.len()))?;
        let line = before.matches('\n').count() + 1;
        let column = before.rsplit('\n').next().map_or(0, |l| l.chars().count()) + 1;
        Some((&source.name, line, column))
    }
}
