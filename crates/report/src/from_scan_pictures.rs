//! Pictures of the orbitals at both ends of a sweep.

use orbend_scan::{ScanError, Sweep};

use crate::figure::{EndPictures, OrbitalPicture};

/// Points along an edge of a picture's lattice.
const POINTS: usize = 65;

/// Pictures of every line at the first and the last point of a sweep.
///
/// # Errors
/// A point that cannot be read back.
pub fn end_pictures(sweep: &Sweep) -> Result<EndPictures, ScanError> {
    let at = |point: usize| -> Result<Vec<OrbitalPicture>, ScanError> {
        Ok(sweep
            .pictures(point, POINTS)?
            .into_iter()
            .enumerate()
            .map(|(line, found)| OrbitalPicture {
                line: line as u32,
                plane: found.plane.words,
                points: found.values.points,
                half: found.values.half,
                values: found.values.values,
                nuclei: found.nuclei,
                bonds: found.bonds,
            })
            .collect())
    };
    Ok(EndPictures {
        start: at(0)?,
        end: at(sweep.points() - 1)?,
    })
}
