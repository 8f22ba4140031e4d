//! Atoms as symmetry sees them.

use crate::error::SymmetryError;
use crate::matrix::{Vector3, difference, distance, norm, scaled, sum};

/// An atom: only atoms of one kind can be exchanged by an operation.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Nucleus {
    /// Any number that tells kinds apart, for instance the atomic number.
    pub kind: u32,
    /// Position in Å.
    pub position: [f64; 3],
}

/// The atoms about their common centre, the fixed point of every operation.
#[derive(Clone, Debug)]
pub(crate) struct Centred {
    pub(crate) kinds: Vec<u32>,
    pub(crate) positions: Vec<Vector3>,
    pub(crate) centre: Vector3,
    pub(crate) radii: Vec<f64>,
}

pub(crate) fn centroid(positions: impl ExactSizeIterator<Item = Vector3>) -> Vector3 {
    let count = positions.len() as f64;
    scaled(positions.fold([0.0; 3], sum), 1.0 / count)
}

impl Centred {
    pub(crate) fn new(nuclei: &[Nucleus]) -> Result<Self, SymmetryError> {
        if nuclei.is_empty() {
            return Err(SymmetryError::NoAtoms);
        }
        for (atom, nucleus) in nuclei.iter().enumerate() {
            if nucleus.position.iter().any(|x| !x.is_finite()) {
                return Err(SymmetryError::NotFinite { atom });
            }
        }
        for (second, b) in nuclei.iter().enumerate() {
            for (first, a) in nuclei[..second].iter().enumerate() {
                if distance(a.position, b.position) < 1e-6 {
                    return Err(SymmetryError::Coincident { first, second });
                }
            }
        }
        let centre = centroid(nuclei.iter().map(|n| n.position));
        let positions: Vec<Vector3> = nuclei
            .iter()
            .map(|n| difference(n.position, centre))
            .collect();
        Ok(Self {
            kinds: nuclei.iter().map(|n| n.kind).collect(),
            radii: positions.iter().map(|p| norm(*p)).collect(),
            positions,
            centre,
        })
    }

    pub(crate) fn len(&self) -> usize {
        self.kinds.len()
    }
}
