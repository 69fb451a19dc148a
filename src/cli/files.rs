//! Files written whole or not at all.

use std::io::{self, BufWriter, Write};
use std::path::{Path, PathBuf};

/// Why a file could not be written.
#[derive(Debug, thiserror::Error)]
#[error("{path} cannot be written: {reason}")]
pub(super) struct WriteError {
    path: String,
    reason: String,
}

impl WriteError {
    fn new(path: &Path, reason: impl ToString) -> Self {
        Self { path: path.display().to_string(), reason: reason.to_string() }
    }
}

/// Makes the folder, with those above it.
pub(super) fn folder(path: &Path) -> Result<(), WriteError> {
    std::fs::create_dir_all(path).map_err(|e| WriteError::new(path, e))
}

/// Writes `path` through `fill`, beside its target first and renamed over it. A file whose bytes
/// would not change is left alone; says whether it was written.
pub(super) fn write_whole<E: ToString>(
    path: &Path,
    fill: impl FnOnce(&mut dyn Write) -> Result<(), E>,
) -> Result<bool, WriteError> {
    let fail = |e: io::Error| WriteError::new(path, e);
    let dir: PathBuf = match path.parent() {
        Some(p) if !p.as_os_str().is_empty() => p.to_owned(),
        _ => PathBuf::from("."),
    };
    let mut file = tempfile::Builder::new()
        .prefix(".witnessline-")
        .permissions_if_unix()
        .tempfile_in(&dir)
        .map_err(fail)?;
    {
        let mut buffered = BufWriter::new(file.as_file_mut());
        fill(&mut buffered).map_err(|e| WriteError::new(path, e.to_string()))?;
        buffered.flush().map_err(fail)?;
    }
    if same_bytes(file.path(), path) {
        return Ok(false);
    }
    file.persist(path).map_err(|e| fail(e.error))?;
    Ok(true)
}

fn same_bytes(a: &Path, b: &Path) -> bool {
    let size = |p: &Path| std::fs::metadata(p).map(|m| m.len()).ok();
    size(a).is_some()
        && size(a) == size(b)
        && matches!((std::fs::read(a), std::fs::read(b)), (Ok(x), Ok(y)) if x == y)
}

/// Ordinary permissions for issued files: temporary ones are readable by their owner alone.
trait Permissions {
    fn permissions_if_unix(&mut self) -> &mut Self;
}

impl Permissions for tempfile::Builder<'_, '_> {
    fn permissions_if_unix(&mut self) -> &mut Self {
        #[cfg(unix)]
        {
            use std::os::unix::fs::PermissionsExt;
            // The process's umask still takes away what the user does not grant.
            self.permissions(std::fs::Permissions::from_mode(0o666));
        }
        self
    }
}
