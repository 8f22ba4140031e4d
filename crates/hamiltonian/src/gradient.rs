//! Derivatives of S and H with respect to the positions, in closed form.

use orbend_overlap::{LANES, Lanes};
use orbend_structure::{Angstrom, Bohr};

use crate::cusachs;
use crate::fill::{lengths, scalar, several};
use crate::method::Coupling;
use crate::plan::HamiltonianPlan;

/// Blocks of one pair of atoms: rows are the functions of its first atom, columns those of its
/// second, row-major; gradients are three blocks, ∂/∂x, ∂/∂y, ∂/∂z of the second atom's position
/// (that of the first atom is the negative; one-centre blocks do not change). Reused between
/// calls without allocation.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct PairGradient<T = f64> {
    /// Number of functions of the first atom.
    pub rows: usize,
    /// Number of functions of the second atom.
    pub columns: usize,
    /// S.
    pub overlap: Vec<T>,
    /// ∂S, Å⁻¹.
    pub overlap_gradient: Vec<T>,
    /// ∂H, eV Å⁻¹.
    pub hamiltonian_gradient: Vec<T>,
}

impl<T: Copy> PairGradient<T> {
    fn resize(&mut self, rows: usize, columns: usize, zero: T) {
        (self.rows, self.columns) = (rows, columns);
        self.overlap.resize(rows * columns, zero);
        self.overlap_gradient.resize(3 * rows * columns, zero);
        self.hamiltonian_gradient.resize(3 * rows * columns, zero);
    }
}

impl HamiltonianPlan {
    /// ∂S and ∂H of the pair with this index at positions in Å, with the diagonal elements held.
    ///
    /// # Panics
    /// If there is no such pair or there are fewer positions than atoms.
    pub fn pair_gradient(
        &self,
        index: usize,
        positions_angstrom: &[[f64; 3]],
        out: &mut PairGradient,
    ) {
        let pair = self.pairs[index];
        let kernel = &self.kernels[self.kernel_of[index]];
        out.resize(kernel.rows(), kernel.columns(), 0.0);
        let displacement = scalar(positions_angstrom)(pair);
        let bohr = displacement.map(|axis| Bohr::from(Angstrom(axis[0])).0);
        kernel.gradient(bohr, &mut out.overlap, &mut out.overlap_gradient);
        self.finish::<1>(
            index,
            &displacement,
            out.overlap.as_chunks().0,
            out.overlap_gradient.as_chunks_mut().0,
            out.hamiltonian_gradient.as_chunks_mut().0,
        );
    }

    /// As [`HamiltonianPlan::pair_gradient`] for eight geometries at once, with the same bits.
    ///
    /// # Panics
    /// As [`HamiltonianPlan::pair_gradient`].
    pub fn pair_gradient_lanes(
        &self,
        index: usize,
        positions_angstrom: &[[Lanes; 3]],
        out: &mut PairGradient<Lanes>,
    ) {
        let pair = self.pairs[index];
        let kernel = &self.kernels[self.kernel_of[index]];
        out.resize(kernel.rows(), kernel.columns(), [0.0; LANES]);
        let displacement = several(positions_angstrom)(pair);
        let bohr = displacement.map(|axis| axis.map(|x| Bohr::from(Angstrom(x)).0));
        kernel.gradient_lanes(&bohr, &mut out.overlap, &mut out.overlap_gradient);
        self.finish(
            index,
            &displacement,
            &out.overlap,
            &mut out.overlap_gradient,
            &mut out.hamiltonian_gradient,
        );
    }

    /// From ∂S per bohr to ∂S and ∂H per Å: ∂H = (a + b e) ∂S − δ b e S u, u the bond's direction.
    fn finish<const N: usize>(
        &self,
        index: usize,
        displacement: &[[f64; N]; 3],
        s: &[[f64; N]],
        ds: &mut [[f64; N]],
        dh: &mut [[f64; N]],
    ) {
        let pair = self.pairs[index];
        let n = self.len();
        let (rows, columns) = (self.atoms[pair.a].clone(), self.atoms[pair.b].clone());
        let width = columns.len();
        let size = rows.len() * width;
        let per_angstrom = Bohr::from(Angstrom(1.0)).0;
        ds.as_flattened_mut()
            .iter_mut()
            .for_each(|value| *value *= per_angstrom);
        let distance = lengths(displacement);
        let decay = self.decays(displacement);
        let delta = self.decay_per_angstrom.unwrap_or(0.0);
        for axis in 0..3 {
            for (row, i) in rows.clone().enumerate() {
                for (column, j) in columns.clone().enumerate() {
                    let at = row * width + column;
                    let a = self.a[i * n + j];
                    let b = self.b.get(i * n + j).copied().unwrap_or(0.0);
                    for lane in 0..N {
                        let factor = a + b * decay[lane];
                        let direction = displacement[axis][lane] / distance[lane];
                        let stretch = delta * b * decay[lane] * direction;
                        dh[axis * size + at][lane] =
                            factor * ds[axis * size + at][lane] - stretch * s[at][lane];
                    }
                }
            }
        }
        if self.method.coupling == Coupling::Cusachs {
            let mut blocks = vec![0.0; 3 * size];
            for lane in 0..N {
                let bohr = displacement.map(|axis| Bohr::from(Angstrom(axis[lane])).0);
                cusachs::gradient(self, index, bohr, &mut blocks);
                for (at, (target, value)) in dh.iter_mut().zip(&blocks).enumerate() {
                    let (i, j) = (rows.start + at % size / width, columns.start + at % width);
                    target[lane] = self.a[i * n + j] * value * per_angstrom;
                }
            }
        }
    }
}
