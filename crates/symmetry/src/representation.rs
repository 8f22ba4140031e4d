//! Matrices of the irreps with more than one dimension: the rows of degenerate sets.
//!
//! The matrices are taken from functions that span the irrep once: cos kφ and sin kφ about the
//! main axis (times the sign of z where needed) for axial groups, the real harmonics up to l = 3
//! (times the determinant where needed) for cubic and icosahedral ones.

use crate::error::SymmetryError;
use crate::group::{Irrep, PointGroup};
use crate::linear::multiplicity;
use crate::matrix::{Matrix3, determinant, product, transpose};
use orbend_overlap::harmonics;

/// One square matrix per operation of the group, row by row.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Representation {
    pub(crate) dimension: usize,
    pub(crate) matrices: Vec<Vec<f64>>,
}

impl Representation {
    pub(crate) fn at(&self, op: usize, row: usize, column: usize) -> f64 {
        self.matrices[op][row * self.dimension + column]
    }

    fn character(&self, op: usize) -> f64 {
        (0..self.dimension).map(|k| self.at(op, k, k)).sum()
    }

    /// The same representation in another orthonormal basis; the columns of `basis` (each of
    /// full length) are the new rows in order.
    pub(crate) fn in_basis(&self, basis: &[Vec<f64>]) -> Self {
        let (n, d) = (self.dimension, basis.len());
        let matrices = self
            .matrices
            .iter()
            .map(|m| {
                let mut out = vec![0.0; d * d];
                for (j, right) in basis.iter().enumerate() {
                    let image: Vec<f64> = (0..n)
                        .map(|r| {
                            m[r * n..(r + 1) * n]
                                .iter()
                                .zip(right)
                                .map(|(a, b)| a * b)
                                .sum()
                        })
                        .collect();
                    for (i, left) in basis.iter().enumerate() {
                        out[i * d + j] = left.iter().zip(&image).map(|(a, b)| a * b).sum();
                    }
                }
                out
            })
            .collect();
        Self {
            dimension: d,
            matrices,
        }
    }

    /// Σ over operations of weight × matrix.
    fn weighted(&self, weight: impl Fn(usize) -> f64) -> Vec<f64> {
        let mut out = vec![0.0; self.dimension * self.dimension];
        for (op, m) in self.matrices.iter().enumerate() {
            let w = weight(op);
            for (total, x) in out.iter_mut().zip(m) {
                *total += w * x;
            }
        }
        out
    }
}

/// Matrices of all irreps of a finite group (or of the stand-in of a linear one).
pub(crate) fn matrices(group: &PointGroup) -> Result<Vec<Representation>, SymmetryError> {
    let mut found: Vec<Option<Representation>> = group
        .irreps
        .iter()
        .map(|irrep| {
            (irrep.dimension == 1).then(|| Representation {
                dimension: 1,
                matrices: group
                    .class_of
                    .iter()
                    .map(|&c| vec![irrep.characters[c]])
                    .collect(),
            })
        })
        .collect();
    let sizes = group.class_sizes();
    // A carrier is built only while irreps are missing.
    for number in 0..carrier_count(group) {
        if found.iter().all(Option::is_some) {
            break;
        }
        let carrier = carrier(group, number);
        let values: Vec<f64> = group
            .classes
            .iter()
            .map(|class| carrier.character(class.operations[0]))
            .collect();
        for (irrep, place) in group.irreps.iter().zip(&mut found) {
            let once = (multiplicity(irrep, &sizes, &values) - 1.0).abs() < 1e-6;
            if place.is_none() && once {
                *place = part(group, irrep, &carrier);
            }
        }
    }
    found
        .into_iter()
        .collect::<Option<Vec<Representation>>>()
        .ok_or(SymmetryError::Inconsistent(
            "no functions span a degenerate irrep",
        ))
}

/// The part of a carrier that belongs to an irrep.
fn part(group: &PointGroup, irrep: &Irrep, carrier: &Representation) -> Option<Representation> {
    let norm = if irrep.paired { 2.0 } else { 1.0 };
    let factor = irrep.dimension as f64 / (norm * group.order() as f64);
    let projector = carrier.weighted(|op| factor * irrep.characters[group.class_of[op]]);
    let basis = columns(&projector, carrier.dimension, irrep.dimension);
    (basis.len() == irrep.dimension).then(|| carrier.in_basis(&basis))
}

/// Rows of a degenerate irrep reordered and turned so that each belongs to one irrep of a
/// subgroup; `rows` are the matrices of the subgroup's irreps, `kept[k]` is the operation of the big group that is operation k of the small one.
pub(crate) fn along(
    big: &Representation,
    small: &PointGroup,
    rows: &[Representation],
    kept: &[usize],
) -> Result<Representation, SymmetryError> {
    let restricted = Representation {
        dimension: big.dimension,
        matrices: kept.iter().map(|&op| big.matrices[op].clone()).collect(),
    };
    let mut basis: Vec<Vec<f64>> = Vec::new();
    for (irrep, own) in small.irreps.iter().zip(rows) {
        let inner = if irrep.paired {
            1.0
        } else {
            irrep.dimension as f64
        };
        let factor = inner / small.order() as f64;
        if irrep.paired {
            let p = restricted.weighted(|op| factor * irrep.characters[small.class_of[op]]);
            basis.extend(columns(&p, big.dimension, big.dimension));
            continue;
        }
        let first = restricted.weighted(|op| factor * own.at(op, 0, 0));
        for start in columns(&first, big.dimension, big.dimension) {
            basis.push(start.clone());
            for row in 1..irrep.dimension {
                let shift = restricted.weighted(|op| factor * own.at(op, row, 0));
                basis.push(times(&shift, &start));
            }
        }
    }
    if basis.len() != big.dimension {
        return Err(SymmetryError::Inconsistent(
            "a degenerate set does not split cleanly",
        ));
    }
    Ok(big.in_basis(&basis))
}

fn times(m: &[f64], v: &[f64]) -> Vec<f64> {
    m.chunks_exact(v.len())
        .map(|row| row.iter().zip(v).map(|(a, b)| a * b).sum())
        .collect()
}

/// Up to `wanted` orthonormal vectors that span the columns of a projector, the largest remaining
/// column first.
fn columns(projector: &[f64], n: usize, wanted: usize) -> Vec<Vec<f64>> {
    let mut left: Vec<Vec<f64>> = (0..n)
        .map(|j| (0..n).map(|i| projector[i * n + j]).collect())
        .collect();
    let mut basis: Vec<Vec<f64>> = Vec::new();
    while basis.len() < wanted {
        let sizes: Vec<f64> = left.iter().map(|v| v.iter().map(|x| x * x).sum()).collect();
        let mut best = 0;
        for k in 1..n {
            if sizes[k] > sizes[best] + 1e-6 {
                best = k;
            }
        }
        if sizes[best] < 1e-6 {
            break;
        }
        let length = sizes[best].sqrt();
        let unit: Vec<f64> = left[best].iter().map(|x| x / length).collect();
        for v in &mut left {
            let overlap: f64 = v.iter().zip(&unit).map(|(a, b)| a * b).sum();
            for (x, u) in v.iter_mut().zip(&unit) {
                *x -= overlap * u;
            }
        }
        basis.push(unit);
    }
    basis
}

fn in_frame(group: &PointGroup, matrix: &Matrix3) -> Matrix3 {
    let frame = group.axes.rotation();
    product(&product(&frame, matrix), &transpose(&frame))
}

fn carrier_count(group: &PointGroup) -> u32 {
    if group.family.is_cubic() {
        6
    } else {
        4 * group.n.max(1)
    }
}

/// Functions that may span irreps: even numbers plain, odd ones times det or the sign of z.
fn carrier(group: &PointGroup, number: u32) -> Representation {
    let degree = number / 2 + 1;
    let turned = !number.is_multiple_of(2);
    let local = group
        .operations
        .iter()
        .map(|op| in_frame(group, &op.matrix));
    if group.family.is_cubic() {
        let size = 2 * degree as usize + 1;
        let l = degree as u8;
        let matrices = local.map(|m| {
            let sign = if turned && determinant(&m) < 0.0 {
                -1.0
            } else {
                1.0
            };
            let d = harmonics::rotation(l, &m);
            d[..size]
                .iter()
                .flat_map(|row| row[..size].iter().map(|x| sign * x))
                .collect()
        });
        return Representation {
            dimension: size,
            matrices: matrices.collect(),
        };
    }
    let matrices = local.map(|m| {
        let sign = if turned && m[2][2] < 0.0 { -1.0 } else { 1.0 };
        wave_matrix(&m, degree).map(|x| sign * x).to_vec()
    });
    Representation {
        dimension: 2,
        matrices: matrices.collect(),
    }
}

/// The matrix on (cos kφ, sin kφ) of an operation that keeps the z axis.
fn wave_matrix(local: &Matrix3, k: u32) -> [f64; 4] {
    // φ goes to ±φ + α; (c, s) becomes the direction at kα.
    let (a, b) = (local[0][0], local[1][0]);
    let (mut c, mut s) = (1.0, 0.0);
    for _ in 0..k {
        (c, s) = (c * a - s * b, c * b + s * a);
    }
    let proper = local[0][0] * local[1][1] - local[0][1] * local[1][0] > 0.0;
    if proper { [c, -s, s, c] } else { [c, s, s, -c] }
}
