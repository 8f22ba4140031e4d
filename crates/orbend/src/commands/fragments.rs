//! The argument of `--fragments`.

use orbend_scan::ScanError;
use orbend_scan::Sweep;
use orbend_scan::reasons::{Fragment, FragmentAnalysis};

use crate::failure::Failure;

/// Reads it for a molecule of so many atoms.
pub(crate) fn fragments(text: &str, atoms: usize) -> Result<Vec<Fragment>, Failure> {
    Fragment::parse(text, atoms)
        .map_err(|error| Failure::from_library(error).within(&format!("--fragments {text}")))
}

/// A fragment that cannot be solved.
pub(crate) fn fragment_failure(error: ScanError) -> Failure {
    Failure::scan(&error).within("--fragments")
}

/// At every point of a sweep.
pub(crate) fn along(
    sweep: &Sweep,
    fragments: &[Fragment],
) -> Result<Vec<orbend_report::FragmentsRecord>, Failure> {
    (0..sweep.points())
        .map(|point| {
            let analysis =
                FragmentAnalysis::new(sweep, point, fragments).map_err(fragment_failure)?;
            orbend_report::fragments_record(sweep.plan(), &analysis).map_err(Failure::document)
        })
        .collect()
}
