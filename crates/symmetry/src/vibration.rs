//! The vibrations that a molecule has, and displacements that span them.

use crate::error::SymmetryError;
use crate::group::PointGroup;
use crate::linear::shell_character;
use crate::matrix::{Vector3, apply, cross, determinant, difference, dot};
use crate::shells::OrbitalShell;

/// Displacements that belong to one irrep, free of translation and rotation.
#[derive(Clone, Debug, PartialEq)]
pub struct SymmetryDisplacements {
    /// Index of the irrep in [`PointGroup::irreps`].
    pub irrep: usize,
    /// One displacement (a vector per atom, in the frame of the input) per vibration of the irrep,
    /// in its first row (in all rows where the irrep is a pair of complex-conjugate ones); each of
    /// length 1 over all atoms, orthogonal to each other.
    pub displacements: Vec<Vec<[f64; 3]>>,
}

impl PointGroup {
    /// How many vibrations of each irrep the molecule has: the displacements of all atoms minus
    /// translations and rotations (Wilson, Decius & Cross, *Molecular Vibrations*, 1955, chapter 6).
    pub fn vibrations(&self) -> Vec<usize> {
        if self.is_atom() {
            return vec![0; self.irreps.len()];
        }
        let values: Vec<f64> = self
            .classes
            .iter()
            .map(|class| {
                let op = &self.operations[class.operations[0]];
                let fixed = (0..op.permutation.len())
                    .filter(|&atom| op.permutation[atom] == atom)
                    .count();
                let vector = shell_character(1, &op.matrix);
                let sign = determinant(&op.matrix).signum();
                // About its own line a linear molecule does not turn.
                let about_line = if self.linear {
                    dot(apply(&op.matrix, self.axes.z), self.axes.z)
                } else {
                    0.0
                };
                fixed as f64 * vector - vector - sign * (vector - about_line)
            })
            .collect();
        self.counts(&values)
    }

    /// Displacements that span the vibrations, irrep by irrep in the order of the group; irreps
    /// without vibrations are left out. `positions` are those that the group was found for, Å.
    ///
    /// # Errors
    /// Positions that the group does not map onto each other.
    pub fn vibrational_displacements(
        &self,
        positions: &[[f64; 3]],
    ) -> Result<Vec<SymmetryDisplacements>, SymmetryError> {
        let counts = self.vibrations();
        if self.is_atom() {
            return Ok(Vec::new());
        }
        let shells: Vec<OrbitalShell> = (0..positions.len())
            .map(|atom| OrbitalShell { atom, l: 1 })
            .collect();
        let rigid = rigid_motions(positions, self.axes.origin);
        let mut all = Vec::new();
        for block in &self.adapt(&shells)?.blocks {
            let wanted = match self.irreps[block.irrep].paired {
                true => counts[block.irrep] * block.dimension,
                false => counts[block.irrep],
            };
            if wanted == 0 {
                continue;
            }
            let columns = block.first.iter().map(|column| {
                let mut vector = vec![0.0; 3 * positions.len()];
                for &(function, coefficient) in column {
                    // p functions run z, x, y.
                    let axis = [2, 0, 1][function % 3];
                    vector[3 * (function / 3) + axis] = coefficient;
                }
                for motion in &rigid {
                    remove(&mut vector, motion);
                }
                vector
            });
            let basis = span(columns.collect(), wanted);
            if basis.len() != wanted {
                return Err(SymmetryError::Inconsistent(
                    "the displacements of an irrep are not as many as its vibrations",
                ));
            }
            all.push(SymmetryDisplacements {
                irrep: block.irrep,
                displacements: basis
                    .iter()
                    .map(|vector| vector.as_chunks::<3>().0.to_vec())
                    .collect(),
            });
        }
        Ok(all)
    }
}

/// Orthonormal translations and rotations, one number per atom and axis.
fn rigid_motions(positions: &[[f64; 3]], centre: Vector3) -> Vec<Vec<f64>> {
    let axes: [Vector3; 3] = [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];
    let translations = axes.iter().map(|axis| axis.repeat(positions.len()));
    let rotations = axes.iter().map(|axis| {
        positions
            .iter()
            .flat_map(|&p| cross(*axis, difference(p, centre)))
            .collect()
    });
    let mut found: Vec<Vec<f64>> = Vec::new();
    for mut motion in translations.chain(rotations) {
        for other in &found {
            remove(&mut motion, other);
        }
        let size = length(&motion);
        if size > 1e-4 {
            motion.iter_mut().for_each(|x| *x /= size);
            found.push(motion);
        }
    }
    found
}

/// Up to `wanted` orthonormal vectors that span the given ones, the largest remaining one first.
fn span(mut left: Vec<Vec<f64>>, wanted: usize) -> Vec<Vec<f64>> {
    let mut basis: Vec<Vec<f64>> = Vec::new();
    while basis.len() < wanted {
        let mut best = 0;
        for k in 1..left.len() {
            if length(&left[k]) > length(&left[best]) + 1e-6 {
                best = k;
            }
        }
        let size = left.get(best).map_or(0.0, |vector| length(vector));
        if size < 1e-4 {
            break;
        }
        let unit: Vec<f64> = left[best].iter().map(|x| x / size).collect();
        for vector in &mut left {
            remove(vector, &unit);
        }
        basis.push(unit);
    }
    basis
}

fn length(vector: &[f64]) -> f64 {
    vector.iter().map(|x| x * x).sum::<f64>().sqrt()
}

fn remove(vector: &mut [f64], unit: &[f64]) {
    let share: f64 = vector.iter().zip(unit).map(|(a, b)| a * b).sum();
    for (x, u) in vector.iter_mut().zip(unit) {
        *x -= share * u;
    }
}
