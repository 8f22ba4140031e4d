//! Orbitals of different geometries compared.

use orbend_eigen::Workspace;

use crate::error::ScanError;
use crate::plan::SweepPlan;

/// The lines of one geometry as orthonormal vectors: S^½ C, Löwdin's
/// orthogonalised functions (J. Chem. Phys. 18, 365 (1950)) taken as the same
/// in both geometries.
#[derive(Clone, Debug)]
pub(crate) struct Character {
    functions: usize,
    /// `lines × functions`.
    vectors: Vec<f64>,
}

impl Character {
    pub(crate) fn new(plan: &SweepPlan, values: &[f64]) -> Result<Self, ScanError> {
        let orbitals = plan.orbitals(values)?;
        let n = plan.basis.functions.len();
        let overlap: Vec<f64> = orbitals.overlap.iter().copied().collect();
        let unit: Vec<f64> = (0..n * n).map(|k| f64::from(u8::from(k % (n + 1) == 0))).collect();
        let mut room = Workspace::new(n);
        room.solve(&overlap, &unit).map_err(|error| ScanError::Eigen {
            at: plan.path.place(values),
            cause: error.to_string(),
        })?;
        let (roots, basis) = (room.values(), room.vectors());
        let mut vectors = vec![0.0; plan.lines.len() * n];
        for (line, target) in vectors.chunks_exact_mut(n.max(1)).enumerate() {
            for (root, eigenvector) in roots.iter().zip(basis.chunks_exact(n)) {
                let amount: f64 =
                    orbitals.coefficients.row(line).iter().zip(eigenvector).map(|(c, x)| c * x).sum();
                let amount = amount * root.max(0.0).sqrt();
                for (t, x) in target.iter_mut().zip(eigenvector) {
                    *t += amount * x;
                }
            }
        }
        Ok(Self { functions: n, vectors })
    }

    /// The vector of a line.
    pub(crate) fn of(&self, line: usize) -> &[f64] {
        &self.vectors[line * self.functions..(line + 1) * self.functions]
    }
}

/// Squared overlap of two vectors.
pub(crate) fn share(a: &[f64], b: &[f64]) -> f64 {
    let overlap: f64 = a.iter().zip(b).map(|(x, y)| x * y).sum();
    overlap * overlap
}
