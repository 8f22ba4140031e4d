//! What can go wrong.

/// Why a symmetry question has no answer.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum SymmetryError {
    /// There is no atom to look at.
    #[error("no atoms: a point group needs at least one")]
    NoAtoms,
    /// A coordinate is not a finite number.
    #[error("atom {} has a coordinate that is not a finite number", .atom + 1)]
    NotFinite {
        /// Index of the atom, from 0.
        atom: usize,
    },
    /// Two atoms stand on one place.
    #[error("atoms {} and {} stand on the same place", .first + 1, .second + 1)]
    Coincident {
        /// Index of one atom, from 0.
        first: usize,
        /// Index of the other atom, from 0.
        second: usize,
    },
    /// The tolerance cannot be used.
    #[error("tolerance {0} Å cannot be used: it must be between 1e-8 and 0.5 Å")]
    Tolerance(f64),
    /// The geometries of a path do not have the same atoms.
    #[error("geometry {} has {found} atoms where {expected} were expected", .geometry + 1)]
    DifferentAtoms {
        /// Index of the geometry, from 0.
        geometry: usize,
        /// Number of atoms it has.
        found: usize,
        /// Number of atoms it should have.
        expected: usize,
    },
    /// Atoms that an operation exchanges carry different shells, or a shell names an atom that
    /// is not there, or l is above 3.
    #[error("shell {shell}: equivalent atoms must carry the same shells, with l up to 3")]
    Shells {
        /// Index of the shell, from 0.
        shell: usize,
    },
    /// The smaller group has an operation that the bigger one lacks.
    #[error("{small} is no subgroup of {big} in this position: {operation} is missing")]
    NotSubgroup {
        /// Name of the bigger group.
        big: String,
        /// Name of the smaller group.
        small: String,
        /// Label of the operation.
        operation: String,
    },
    /// The numbers contradict group theory: the geometry is at the edge of the tolerance.
    #[error("no consistent group: {0}; try a smaller tolerance")]
    Inconsistent(&'static str),
}
