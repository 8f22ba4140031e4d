//! Output files appear whole or not at all.

use std::io::Write;
use std::path::Path;

use crate::failure::Failure;

/// A file that appears under its name when it is whole.
pub(crate) struct Whole<'a> {
    path: &'a Path,
    file: tempfile::NamedTempFile,
}

fn unwritable(path: &Path, cause: impl std::fmt::Display) -> Failure {
    Failure::request(format!("cannot write {}: {cause}", path.display()))
        .fix("name a file in a folder that exists and that you may write to")
}

impl<'a> Whole<'a> {
    /// Starts a file beside `path`.
    pub(crate) fn begin(path: &'a Path) -> Result<Self, Failure> {
        let folder = match path.parent() {
            Some(folder) if !folder.as_os_str().is_empty() => folder,
            _ => Path::new("."),
        };
        if path.is_dir() {
            return Err(Failure::request(format!(
                "cannot write {}: it is a folder",
                path.display()
            ))
            .fix("name a file in it"));
        }
        let file =
            tempfile::NamedTempFile::new_in(folder).map_err(|cause| unwritable(path, cause))?;
        Ok(Self { path, file })
    }

    /// Gives the file its name.
    pub(crate) fn finish(self) -> Result<(), Failure> {
        let fail = |cause: std::io::Error| unwritable(self.path, cause);
        // A temporary file is private by default; a result is an ordinary file.
        #[cfg(unix)]
        {
            use std::os::unix::fs::PermissionsExt;
            let mode = std::fs::Permissions::from_mode(0o644);
            self.file.as_file().set_permissions(mode).map_err(fail)?;
        }
        self.file
            .persist(self.path)
            .map_err(|error| fail(error.error))?;
        Ok(())
    }
}

impl Write for Whole<'_> {
    fn write(&mut self, bytes: &[u8]) -> std::io::Result<usize> {
        self.file.write(bytes)
    }

    fn flush(&mut self) -> std::io::Result<()> {
        self.file.flush()
    }
}

/// Writes `bytes` beside `path` first and renames at the end.
pub(crate) fn write_whole(path: &Path, bytes: &[u8]) -> Result<(), Failure> {
    let mut file = Whole::begin(path)?;
    file.write_all(bytes)
        .map_err(|cause| unwritable(path, cause))?;
    file.finish()
}

/// Data on standard output; a reader that has closed the pipe is no failure.
pub(crate) fn write_stdout(bytes: &[u8]) -> Result<(), Failure> {
    let mut out = std::io::stdout().lock();
    match out.write_all(bytes).and_then(|()| out.flush()) {
        Err(error) if error.kind() != std::io::ErrorKind::BrokenPipe => Err(Failure::running(
            format!("cannot write to standard output: {error}"),
        )),
        _ => Ok(()),
    }
}
