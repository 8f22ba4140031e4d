//! Output files appear whole or not at all.

use std::io::Write;
use std::path::Path;

use crate::failure::Failure;

/// Writes `bytes` beside `path` first and renames at the end.
pub(crate) fn write_whole(path: &Path, bytes: &[u8]) -> Result<(), Failure> {
    let fail = |cause: std::io::Error| {
        Failure::request(format!("cannot write {}: {cause}", path.display()))
            .fix("name a file in a folder that exists and that you may write to")
    };
    let folder = match path.parent() {
        Some(folder) if !folder.as_os_str().is_empty() => folder,
        _ => Path::new("."),
    };
    if path.is_dir() {
        return Err(
            Failure::request(format!("cannot write {}: it is a folder", path.display()))
                .fix("name a file in it"),
        );
    }
    let mut file = tempfile::NamedTempFile::new_in(folder).map_err(fail)?;
    file.write_all(bytes).map_err(fail)?;
    // A temporary file is private by default; a result is an ordinary file.
    #[cfg(unix)]
    {
        use std::os::unix::fs::PermissionsExt;
        let mode = std::fs::Permissions::from_mode(0o644);
        file.as_file().set_permissions(mode).map_err(fail)?;
    }
    file.persist(path).map_err(|error| fail(error.error))?;
    Ok(())
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
