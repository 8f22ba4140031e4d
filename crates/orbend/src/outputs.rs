//! The files of `--out`: checked before anything runs, written at the end.

use std::path::{Path, PathBuf};

use crate::failure::Failure;
use crate::write::write_whole;

/// Files to write, each with its ending.
pub(crate) struct Outputs<'a> {
    files: Vec<(&'a Path, String)>,
}

impl<'a> Outputs<'a> {
    /// Checks endings, doubles and folders before the calculation.
    pub(crate) fn check(files: &'a [PathBuf], endings: &[&str]) -> Result<Self, Failure> {
        let mut checked: Vec<(&Path, String)> = Vec::new();
        for file in files {
            let name = file
                .file_name()
                .map(|name| name.to_string_lossy().to_ascii_lowercase())
                .unwrap_or_default();
            // The longest ending that fits: `.qcschema.json` before `.json`.
            let ending = endings
                .iter()
                .filter(|ending| name.ends_with(&format!(".{ending}")))
                .max_by_key(|ending| ending.len());
            let Some(ending) = ending else {
                let known: Vec<String> =
                    endings.iter().map(|ending| format!(".{ending}")).collect();
                return Err(Failure::request(format!(
                    "--out {}: cannot tell what to write from the ending",
                    file.display()
                ))
                .fix(format!("end the name in {}", known.join(", "))));
            };
            if checked.iter().any(|(seen, _)| *seen == file.as_path()) {
                return Err(
                    Failure::request(format!("--out {}: named twice", file.display()))
                        .fix("name each file once"),
                );
            }
            let folder = file
                .parent()
                .filter(|folder| !folder.as_os_str().is_empty());
            if let Some(folder) = folder
                && !folder.is_dir()
            {
                return Err(Failure::request(format!(
                    "--out {}: there is no folder {}",
                    file.display(),
                    folder.display()
                ))
                .fix("make the folder first or name another"));
            }
            checked.push((file, (*ending).to_owned()));
        }
        Ok(Self { files: checked })
    }

    /// Whether a file with one of these endings is asked for.
    pub(crate) fn any(&self, endings: &[&str]) -> bool {
        self.files
            .iter()
            .any(|(_, ending)| endings.contains(&ending.as_str()))
    }

    /// The only table asked for, where everything else can do without most of the points of a long
    /// sweep; `None` where some other file needs them.
    pub(crate) fn streamed(&self) -> Option<Option<&'a Path>> {
        let mut table = None;
        for (path, ending) in &self.files {
            match ending.as_str() {
                "csv" if table.is_none() => table = Some(*path),
                "xyz" => {}
                _ => return None,
            }
        }
        Some(table)
    }

    /// The same without the table, which is written already.
    pub(crate) fn without_table(mut self) -> Self {
        self.files.retain(|(_, ending)| ending != "csv");
        self
    }

    /// Makes every file's bytes first and writes them then.
    pub(crate) fn write(
        &self,
        make: impl Fn(&str) -> Result<Vec<u8>, Failure>,
    ) -> Result<(), Failure> {
        let made = self
            .files
            .iter()
            .map(|(path, ending)| Ok((*path, make(ending)?)))
            .collect::<Result<Vec<_>, Failure>>()?;
        for (path, bytes) in made {
            write_whole(path, &bytes)?;
        }
        Ok(())
    }
}
