//! Displacements of one irrep, split into those that keep every bond length to first order and
//! those that do not, and the geometries along them.

use orbend_eigen::Workspace;
use orbend_structure::{BondGraph, Molecule};
use orbend_symmetry::PointGroup;

use crate::error::ScanError;

/// One displacement vector per atom.
pub(crate) type Displacement = Vec<[f64; 3]>;

/// Below this squared change of lengths (per unit of displacement) a displacement is a bend.
const NO_STRETCH: f64 = 1e-6;

/// The vibrations of one irrep.
#[derive(Clone, Debug)]
pub(crate) struct Directions {
    pub(crate) irrep: usize,
    /// Those that keep the lengths; orthonormal.
    pub(crate) bends: Vec<Displacement>,
    /// The others; orthonormal, orthogonal to the bends.
    pub(crate) stretches: Vec<Displacement>,
}

/// All vibrations of a molecule, irrep by irrep.
pub(crate) fn directions(
    group: &PointGroup,
    molecule: &Molecule,
) -> Result<Vec<Directions>, ScanError> {
    let bonds = BondGraph::new(molecule).bonds();
    group
        .vibrational_displacements(&molecule.positions)?
        .into_iter()
        .map(|set| {
            let m = set.displacements.len();
            let changes: Vec<Vec<f64>> = set
                .displacements
                .iter()
                .map(|d| {
                    bonds
                        .iter()
                        .map(|&bond| stretching(&molecule.positions, bond, d))
                        .collect()
                })
                .collect();
            let mut square = vec![0.0; m * m];
            for i in 0..m {
                for j in 0..m {
                    square[i * m + j] =
                        changes[i].iter().zip(&changes[j]).map(|(a, b)| a * b).sum();
                }
            }
            let (values, vectors) = eigen(m, &square)?;
            let mut split = Directions {
                irrep: set.irrep,
                bends: Vec::new(),
                stretches: Vec::new(),
            };
            for (value, vector) in values.iter().zip(vectors.chunks_exact(m)) {
                let d = combined(&set.displacements, vector);
                if *value < NO_STRETCH {
                    split.bends.push(d);
                } else {
                    split.stretches.push(d);
                }
            }
            Ok(split)
        })
        .collect()
}

/// Eigenvalues, rising, and eigenvectors (row by row) of a symmetric matrix.
pub(crate) fn eigen(size: usize, matrix: &[f64]) -> Result<(Vec<f64>, Vec<f64>), ScanError> {
    let unit: Vec<f64> = (0..size * size)
        .map(|k| f64::from(u8::from(k % (size + 1) == 0)))
        .collect();
    let mut room = Workspace::new(size);
    room.solve(matrix, &unit)
        .map_err(|error| ScanError::Eigen {
            at: "this geometry".to_owned(),
            cause: error.to_string(),
        })?;
    Ok((room.values().to_vec(), room.vectors().to_vec()))
}

/// Σ factor × displacement.
pub(crate) fn combined(displacements: &[Displacement], factors: &[f64]) -> Displacement {
    let mut total = vec![[0.0; 3]; displacements.first().map_or(0, Vec::len)];
    for (d, factor) in displacements.iter().zip(factors) {
        for (sum, x) in total.iter_mut().flatten().zip(d.iter().flatten()) {
            *sum += factor * x;
        }
    }
    total
}

fn stretching(positions: &[[f64; 3]], (a, b): (usize, usize), d: &Displacement) -> f64 {
    let apart: [f64; 3] = std::array::from_fn(|k| positions[b][k] - positions[a][k]);
    let length = apart.iter().map(|x| x * x).sum::<f64>().sqrt();
    (0..3)
        .map(|k| apart[k] / length * (d[b][k] - d[a][k]))
        .sum()
}

/// Positions displaced by `amplitude` (Å over all atoms); with `keep_lengths` the bonds are then
/// brought back to their lengths, bond after bond (Ryckaert, Ciccotti & Berendsen, J. Comput. Phys.
/// 23, 327 (1977), with equal weights).
pub(crate) fn displaced(
    molecule: &Molecule,
    direction: &Displacement,
    amplitude: f64,
    keep_lengths: bool,
) -> Vec<[f64; 3]> {
    let mut positions = molecule.positions.clone();
    for (p, d) in positions
        .iter_mut()
        .flatten()
        .zip(direction.iter().flatten())
    {
        *p += amplitude * d;
    }
    if !keep_lengths {
        return positions;
    }
    let bonds = BondGraph::new(molecule).bonds();
    let wanted: Vec<f64> = bonds
        .iter()
        .map(|&(a, b)| distance(&molecule.positions, a, b))
        .collect();
    for _ in 0..500 {
        let mut worst = 0.0_f64;
        for (&(a, b), length) in bonds.iter().zip(&wanted) {
            let now = distance(&positions, a, b);
            worst = worst.max((now - length).abs());
            let share = 0.5 * (1.0 - length / now);
            let between: [f64; 3] = std::array::from_fn(|k| positions[b][k] - positions[a][k]);
            for (atom, sign) in [(a, share), (b, -share)] {
                for (at, step) in positions[atom].iter_mut().zip(between) {
                    *at += sign * step;
                }
            }
        }
        if worst < 1e-10 {
            break;
        }
    }
    positions
}

fn distance(positions: &[[f64; 3]], a: usize, b: usize) -> f64 {
    (0..3)
        .map(|k| (positions[b][k] - positions[a][k]).powi(2))
        .sum::<f64>()
        .sqrt()
}
