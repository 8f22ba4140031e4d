//! The surface ψ = ±v of an orbital, with v such that a given share of the density ψ² lies inside.

mod lattice;
mod mesh;
#[cfg(test)]
mod tests;

use orbend_hamiltonian::Basis;

use crate::error::ScanError;
use crate::field::OrbitalField;
use crate::sweep::Sweep;

use lattice::Lattice;
pub use mesh::Mesh;

/// The shares of the density that a surface may enclose.
pub const SURFACE_SHARES: core::ops::RangeInclusive<f64> = 0.01..=0.99;

/// Lattices that are tried, each a little finer and elsewhere, until the surface is closed.
const TRIES: u32 = 6;

/// Why a surface cannot be made.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum SurfaceError {
    /// A share that no surface can enclose.
    #[error(
        "{share} is not a share of the density that a surface can enclose; give a number from {} to {}, for \
         example 0.8",
        SURFACE_SHARES.start(), SURFACE_SHARES.end()
    )]
    Share {
        /// The share as asked for.
        share: f64,
    },
    /// A line that is not there.
    #[error("there is no line {line}, the last one is {last}")]
    Line {
        /// The line as asked for.
        line: usize,
        /// The last line.
        last: usize,
    },
    /// The surface runs through itself at this share.
    #[error(
        "the surface that encloses {share} of the density touches itself and could not be closed; \
         ask for a slightly different share"
    )]
    Touching {
        /// The share as asked for.
        share: f64,
    },
}

/// The two phases of an orbital's surface.
#[derive(Clone, Debug, PartialEq)]
pub struct OrbitalSurface {
    /// The share of the density ψ² inside.
    pub share: f64,
    /// |ψ| on the surface, bohr^(−3/2).
    pub isovalue: f64,
    /// Where ψ is positive.
    pub positive: Mesh,
    /// Where ψ is negative; empty for an orbital of one phase.
    pub negative: Mesh,
}

/// The surface |ψ| = v of the orbital with these coefficients (nuclei in Å) that encloses `share` of
/// ∫ψ² = 1, as the sum over a lattice of the places where |ψ| is largest; each phase closed, its
/// vertices on ψ = ±v by Newton steps along ∇ψ.
///
/// # Errors
/// A share outside 0.01 to 0.99, or a surface that touches itself.
pub fn orbital_surface(
    basis: &Basis,
    coefficients: &[f64],
    positions: &[[f64; 3]],
    share: f64,
) -> Result<OrbitalSurface, SurfaceError> {
    if !SURFACE_SHARES.contains(&share) {
        return Err(SurfaceError::Share { share });
    }
    let field = OrbitalField::new(basis, coefficients, positions);
    for attempt in 0..TRIES {
        let lattice = Lattice::around(&field, share, attempt);
        let values = lattice.values(&field);
        let isovalue = lattice.isovalue(&values, share);
        if lattice.touches_edge(&values, isovalue) {
            continue;
        }
        let [positive, negative] =
            [1.0, -1.0].map(|phase| Mesh::extract(&field, &lattice, &values, phase * isovalue));
        if positive.is_closed() && negative.is_closed() {
            return Ok(OrbitalSurface {
                share,
                isovalue,
                positive,
                negative,
            });
        }
    }
    Err(SurfaceError::Touching { share })
}

impl Sweep {
    /// The surface of a line at a point that encloses `share` of its density.
    ///
    /// # Errors
    /// A line that is not there, a share outside 0.01 to 0.99, or what [`orbital_surface`] says.
    pub fn surface(
        &self,
        line: usize,
        point: usize,
        share: f64,
    ) -> Result<OrbitalSurface, ScanError> {
        let orbitals = self.orbitals(point)?;
        let last = orbitals.coefficients.nrows().saturating_sub(1);
        if line > last {
            return Err(SurfaceError::Line { line, last }.into());
        }
        let positions = self.point(point)?.positions;
        let row = orbitals.coefficients.row(line).to_vec();
        Ok(orbital_surface(
            self.plan().basis(),
            &row,
            &positions,
            share,
        )?)
    }
}
