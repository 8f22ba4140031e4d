//! Derivatives of level energies and of their sum with respect to the positions.

use std::ops::Range;

use ndarray::{Array2, ArrayView1, Axis};
use orbend_hamiltonian::{AtomPair, HamiltonianPlan, PairGradient};

use crate::error::ScanError;
use crate::plan::SweepPlan;

/// ∂S and ∂H of every pair of atoms at one geometry, and what follows from them.
///
/// The diagonal elements Hᵢᵢ are held: where they follow the charges, their response is not in
/// these derivatives. Only two-centre blocks change, so every derivative is a sum over pairs of
/// atoms, and moving the whole molecule gives zero.
///
/// A level: ∂ε = c†(∂H − ε ∂S)c for c†Sc = 1, the Hellmann–Feynman expression of the generalised
/// problem (Hurley, Proc. R. Soc. London A 226, 179 (1954); Pulay, Mol. Phys. 17, 197 (1969), whose
/// "wave-function force" is the ∂S term).
#[derive(Clone, Debug)]
pub struct Gradients {
    atoms: Vec<Range<usize>>,
    pairs: Vec<AtomPair>,
    blocks: Vec<PairGradient>,
}

impl Gradients {
    /// All pairs at positions in Å.
    ///
    /// # Panics
    /// If there are fewer positions than atoms.
    pub fn new(plan: &HamiltonianPlan, positions_angstrom: &[[f64; 3]]) -> Self {
        let blocks = (0..plan.pairs().len())
            .map(|pair| {
                let mut block = PairGradient::default();
                plan.pair_gradient(pair, positions_angstrom, &mut block);
                block
            })
            .collect();
        Self {
            atoms: plan.atoms().to_vec(),
            pairs: plan.pairs().to_vec(),
            blocks,
        }
    }

    /// Number of atoms.
    pub fn atoms(&self) -> usize {
        self.atoms.len()
    }

    /// Number of functions n.
    pub fn functions(&self) -> usize {
        self.atoms.last().map_or(0, |functions| functions.end)
    }

    /// ∂S and ∂H (n × n, symmetric) per unit of a displacement of all atoms, given in Å per unit
    /// (one vector per atom): Å⁻¹ · Å and eV.
    pub fn along(&self, displacement: &[[f64; 3]]) -> (Array2<f64>, Array2<f64>) {
        let n = self.functions();
        let (mut s, mut h) = (Array2::zeros((n, n)), Array2::zeros((n, n)));
        for (pair, block) in self.pairs.iter().zip(&self.blocks) {
            let size = block.rows * block.columns;
            let (from, to) = (displacement[pair.a], displacement[pair.b]);
            let change = [to[0] - from[0], to[1] - from[1], to[2] - from[2]];
            for (row, i) in self.atoms[pair.a].clone().enumerate() {
                for (column, j) in self.atoms[pair.b].clone().enumerate() {
                    let at = row * block.columns + column;
                    let (mut ds, mut dh) = (0.0, 0.0);
                    for (axis, change) in change.iter().enumerate() {
                        ds += change * block.overlap_gradient[axis * size + at];
                        dh += change * block.hamiltonian_gradient[axis * size + at];
                    }
                    s[[i, j]] = ds;
                    s[[j, i]] = ds;
                    h[[i, j]] = dh;
                    h[[j, i]] = dh;
                }
            }
        }
        (s, h)
    }

    /// c_a†(∂H − ε ∂S)c_b for the three directions of every atom, eV/Å; `energy_ev` is ε: that of
    /// the level for a = b, the mean of the two for the coupling of two levels.
    pub fn element(
        &self,
        a: ArrayView1<'_, f64>,
        b: ArrayView1<'_, f64>,
        energy_ev: f64,
    ) -> Vec<[f64; 3]> {
        self.contract(|i, j| {
            let product = a[i] * b[j] + a[j] * b[i];
            (product, energy_ev * product)
        })
    }

    /// ∂ε of a level that is alone (or of a component of a set under a displacement that keeps
    /// the set together), for the three directions of every atom, eV/Å.
    pub fn level(&self, coefficients: ArrayView1<'_, f64>, energy_ev: f64) -> Vec<[f64; 3]> {
        self.element(coefficients, coefficients, energy_ev)
    }

    /// The matrix c_a†(∂H − ε ∂S)c_b of a degenerate set (the rows `set` of all coefficients) under a displacement
    /// of all atoms in Å per unit, eV per unit: its eigenvalues are the slopes of the levels into
    /// which the set splits (Wigner's first-order perturbation theory of degenerate levels), its
    /// trace is the slope of their sum.
    pub fn within_set(
        &self,
        coefficients: &Array2<f64>,
        set: &[usize],
        energy_ev: f64,
        displacement: &[[f64; 3]],
    ) -> Array2<f64> {
        let (s, h) = self.along(displacement);
        let change = h - s * energy_ev;
        let vectors = coefficients.select(Axis(0), set);
        vectors.dot(&change).dot(&vectors.t())
    }

    /// ∂Σ nᵢεᵢ for the three directions of every atom at fixed occupations, eV/Å: Σ P ∂H − Σ W ∂S
    /// with the density P = Σ n c c† and the energy-weighted density W = Σ n ε c c† (Pulay 1969).
    /// Right also for degenerate sets whose components hold equal numbers of electrons.
    pub fn sum(
        &self,
        coefficients: &Array2<f64>,
        energies_ev: &[f64],
        occupations: &[f64],
    ) -> Vec<[f64; 3]> {
        let n = self.functions();
        let mut density = Array2::<f64>::zeros((n, n));
        let mut weighted = Array2::<f64>::zeros((n, n));
        for (line, vector) in coefficients.outer_iter().enumerate() {
            let (occupation, energy) = (occupations[line], energies_ev[line]);
            if occupation.abs() > 0.0 {
                for i in 0..n {
                    for j in 0..n {
                        let product = occupation * vector[i] * vector[j];
                        density[[i, j]] += product;
                        weighted[[i, j]] += energy * product;
                    }
                }
            }
        }
        self.contract(|i, j| (2.0 * density[[i, j]], 2.0 * weighted[[i, j]]))
    }

    /// Σ over functions of both atoms of each pair: p ∂H − w ∂S with (p, w) = `weights(i, j)`.
    fn contract(&self, weights: impl Fn(usize, usize) -> (f64, f64)) -> Vec<[f64; 3]> {
        let mut out = vec![[0.0; 3]; self.atoms.len()];
        for (pair, block) in self.pairs.iter().zip(&self.blocks) {
            let size = block.rows * block.columns;
            let mut total = [0.0; 3];
            for (row, i) in self.atoms[pair.a].clone().enumerate() {
                for (column, j) in self.atoms[pair.b].clone().enumerate() {
                    let at = row * block.columns + column;
                    let (of_h, of_s) = weights(i, j);
                    for (axis, total) in total.iter_mut().enumerate() {
                        *total += of_h * block.hamiltonian_gradient[axis * size + at]
                            - of_s * block.overlap_gradient[axis * size + at];
                    }
                }
            }
            for (axis, total) in total.into_iter().enumerate() {
                out[pair.b][axis] += total;
                out[pair.a][axis] -= total;
            }
        }
        out
    }
}

/// Σ over atoms of a gradient (per Å) times a displacement (Å per unit): the slope along it.
pub fn slope(gradient: &[[f64; 3]], displacement: &[[f64; 3]]) -> f64 {
    gradient
        .iter()
        .zip(displacement)
        .map(|(g, d)| g[0] * d[0] + g[1] * d[1] + g[2] * d[2])
        .sum()
}

impl SweepPlan {
    /// Derivatives at any coordinate values inside the path.
    ///
    /// # Errors
    /// Values outside the path.
    pub fn gradients(&self, values: &[f64]) -> Result<Gradients, ScanError> {
        let mut positions = vec![[0.0; 3]; self.molecule.positions.len()];
        self.path.positions(values, &mut positions)?;
        Ok(Gradients::new(&self.hamiltonian, &positions))
    }

    /// How the atoms move per unit of the coordinate `axis`, Å per degree or Å per Å
    /// ([`orbend_structure::PathPlan::speeds`]).
    ///
    /// # Errors
    /// Values outside the path, no such coordinate, no finite derivative.
    pub fn speeds(&self, values: &[f64], axis: usize) -> Result<Vec<[f64; 3]>, ScanError> {
        let mut speeds = vec![[0.0; 3]; self.molecule.positions.len()];
        self.path.speeds(values, axis, &mut speeds)?;
        Ok(speeds)
    }
}
