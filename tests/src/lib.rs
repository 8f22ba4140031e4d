//! What the checks share. Everything in this package is checked against
//! something outside the project; the source stands beside each number.

mod engine;
mod geometry;
mod invariants;

pub use engine::{ElementValues, Matrices, energies, matrices, set_of};
pub use geometry::{Record, atoms, file, moved, named, random_motion, records, ring};
pub use invariants::{Residuals, check_point};

use std::path::{Path, PathBuf};
use std::process::Command;
use std::sync::OnceLock;
use std::time::SystemTime;

/// The built command line. `cargo test --workspace` builds it with the tests;
/// when this package is tested alone and a source is newer, it is built first.
///
/// # Panics
/// The binary does not build: the test that asked for it cannot run.
pub fn orbend_binary() -> &'static Path {
    static BINARY: OnceLock<PathBuf> = OnceLock::new();
    BINARY.get_or_init(|| {
        let test = std::env::current_exe().unwrap_or_default();
        let profile = test.ancestors().nth(2).unwrap_or(Path::new(".")).to_owned();
        let binary = profile.join(format!("orbend{}", std::env::consts::EXE_SUFFIX));
        let built = std::fs::metadata(&binary)
            .and_then(|data| data.modified())
            .ok();
        let sources = Path::new(env!("CARGO_MANIFEST_DIR")).join("..");
        let newest = newest(&sources.join("crates")).max(newest(&sources.join("params")));
        if built.is_none_or(|built| built < newest) {
            let mut build = Command::new(env!("CARGO"));
            build
                .args([
                    "build",
                    "--quiet",
                    "--offline",
                    // The features that the tests were built with: nothing is compiled twice.
                    "--workspace",
                    "--bin",
                    "orbend",
                    "--target-dir",
                ])
                .arg(profile.parent().unwrap_or(&profile))
                .current_dir(env!("CARGO_MANIFEST_DIR"));
            if profile.ends_with("release") {
                build.arg("--release");
            }
            let done = build.status().is_ok_and(|status| status.success());
            assert!(done, "the binary `orbend` does not build");
        }
        binary
    })
}

/// Time of the newest source below a folder.
fn newest(folder: &Path) -> SystemTime {
    let mut latest = SystemTime::UNIX_EPOCH;
    let Ok(entries) = std::fs::read_dir(folder) else {
        return latest;
    };
    for entry in entries.flatten() {
        let path = entry.path();
        let time = if path.is_dir() {
            newest(&path)
        } else if path
            .extension()
            .is_some_and(|ending| ending == "rs" || ending == "toml")
        {
            entry
                .metadata()
                .and_then(|data| data.modified())
                .unwrap_or(latest)
        } else {
            continue;
        };
        latest = latest.max(time);
    }
    latest
}
