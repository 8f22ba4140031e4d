//! Coefficients and shares of every level along a sweep: what a reader needs to draw its orbitals.

use orbend_scan::{Orbitals, Sweep};

use crate::document::SweepDocument;
use crate::from_scan::{FromScanError, Provenance, sweep_document};
use crate::from_scan_populations::{basis_functions, describe_orbitals};

/// The document of a sweep along one coordinate with the coefficients and shell populations of every
/// level. The sign of an orbital is kept from point to point: its overlap with the same line at the
/// point before is positive.
///
/// # Errors
/// A position or coordinate that is not finite, or a point that cannot be read back.
pub fn sweep_document_with_orbitals(
    sweep: &Sweep,
    provenance: &Provenance,
) -> Result<SweepDocument, FromScanError> {
    let mut document = sweep_document(sweep, provenance)?;
    let plan = sweep.plan();
    let mut before: Option<Orbitals> = None;
    for (index, point) in document.points.iter_mut().enumerate() {
        let mut orbitals = sweep.orbitals(index)?;
        if let Some(before) = &before {
            keep_signs(before, &mut orbitals);
        }
        describe_orbitals(plan, &orbitals, point)?;
        before = Some(orbitals);
    }
    document.basis = Some(basis_functions(plan));
    Ok(document)
}

/// Turns the sign of every orbital whose overlap with its predecessor is negative; neighbouring
/// points are close, so that the overlap matrix of either serves.
fn keep_signs(before: &Orbitals, now: &mut Orbitals) {
    let projected = before.coefficients.dot(&now.overlap);
    for (mut row, seen) in now
        .coefficients
        .rows_mut()
        .into_iter()
        .zip(projected.rows())
    {
        if row.dot(&seen) < 0.0 {
            row.mapv_inplace(|c| -c);
        }
    }
}
