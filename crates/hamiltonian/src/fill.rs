//! Filling S and H, one geometry or eight at once, with the same operations in the same order.

use orbend_overlap::{LANES, Lanes, PairKernel};
use orbend_structure::{Angstrom, Bohr};

use crate::coupling;
use crate::cusachs;
use crate::method::{Coupling, Method};
use crate::plan::{AtomPair, HamiltonianPlan};

/// R_b − R_a of a pair, Å, for N geometries.
pub(crate) type Displacement<const N: usize> = [[f64; N]; 3];

impl HamiltonianPlan {
    /// Fills S and H (eV), each n × n row-major, for positions in Å.
    ///
    /// # Panics
    /// If there are fewer positions than atoms, or a matrix is smaller than n × n.
    pub fn fill(&self, positions_angstrom: &[[f64; 3]], s: &mut [f64], h: &mut [f64]) {
        let all = 0..self.pairs.len();
        self.fill_pairs(
            scalar(positions_angstrom),
            PairKernel::block_one,
            all,
            true,
            lanes_of_one(s),
            lanes_of_one(h),
        );
    }

    /// As [`HamiltonianPlan::fill`] for eight geometries at once; each lane has the bits that
    /// `fill` gives.
    ///
    /// # Panics
    /// As [`HamiltonianPlan::fill`].
    pub fn fill_lanes(&self, positions_angstrom: &[[Lanes; 3]], s: &mut [Lanes], h: &mut [Lanes]) {
        let all = 0..self.pairs.len();
        self.fill_pairs(
            several(positions_angstrom),
            PairKernel::block_lanes,
            all,
            true,
            s,
            h,
        );
    }

    /// Fills anew only the blocks of the `pairs` (indices into [`HamiltonianPlan::pairs`]) in
    /// matrices filled before by this plan with the same diagonal and method: right where the
    /// other pairs have kept their displacement ([`HamiltonianPlan::moving_pairs`]).
    ///
    /// # Panics
    /// As [`HamiltonianPlan::fill`], or if there is no such pair.
    pub fn refill(
        &self,
        positions_angstrom: &[[f64; 3]],
        pairs: &[usize],
        s: &mut [f64],
        h: &mut [f64],
    ) {
        let pairs = pairs.iter().copied();
        self.fill_pairs(
            scalar(positions_angstrom),
            PairKernel::block_one,
            pairs,
            false,
            lanes_of_one(s),
            lanes_of_one(h),
        );
    }

    /// As [`HamiltonianPlan::refill`] for eight geometries at once, where only the blocks of the
    /// pairs `read` (and of the atoms themselves) will be read: the elements of all other pairs are
    /// left in disorder. What symmetry says twice need not be computed twice.
    ///
    /// # Panics
    /// As [`HamiltonianPlan::refill`].
    pub fn refill_lanes(
        &self,
        positions_angstrom: &[[Lanes; 3]],
        pairs: &[usize],
        read: &[usize],
        s: &mut [Lanes],
        h: &mut [Lanes],
    ) {
        let displacement = several(positions_angstrom);
        let block = PairKernel::block_lanes;
        self.overlaps(&displacement, block, pairs.iter().copied(), s, h);
        self.couplings(&displacement, read.iter().copied(), s, h);
    }

    /// H from an S that is there already, for other diagonal elements (eV) and another K in each
    /// lane: what an iteration of charges or an ensemble of parameters needs. Weighted and
    /// geometric-mean forms want negative diagonal elements.
    ///
    /// # Panics
    /// As [`HamiltonianPlan::fill`], or if there are fewer diagonal elements than functions.
    pub fn couple_lanes(
        &self,
        positions_angstrom: &[[Lanes; 3]],
        diagonal_ev: &[Lanes],
        k: &Lanes,
        s: &[Lanes],
        h: &mut [Lanes],
    ) {
        let n = self.len();
        let displacement = several(positions_angstrom);
        for atom in &self.atoms {
            for i in atom.clone() {
                h[i * n..][atom.clone()].fill([0.0; LANES]);
                h[i * n + i] = diagonal_ev[i];
            }
        }
        let methods = k.map(|k| Method { k, ..self.method });
        for (index, &pair) in self.pairs.iter().enumerate() {
            let decay = self.decays(&displacement(pair));
            let (rows, columns) = (self.atoms[pair.a].clone(), self.atoms[pair.b].clone());
            for i in rows {
                for j in columns.clone() {
                    let mut value = [0.0; LANES];
                    for lane in 0..LANES {
                        let (a, b) = coupling::factors(
                            &methods[lane],
                            diagonal_ev[i][lane],
                            diagonal_ev[j][lane],
                            self.radii_angstrom[i],
                            self.radii_angstrom[j],
                        );
                        value[lane] = s[i * n + j][lane] * (a + b * decay[lane]);
                    }
                    h[i * n + j] = value;
                    h[j * n + i] = value;
                }
            }
            if self.method.coupling == Coupling::Cusachs {
                let mean = |i: usize, j: usize, lane: usize| {
                    0.5 * (diagonal_ev[i][lane] + diagonal_ev[j][lane])
                };
                cusachs::couple(self, index, &displacement(pair), mean, h);
            }
        }
    }

    fn fill_pairs<const N: usize>(
        &self,
        displacement: impl Fn(AtomPair) -> Displacement<N>,
        block: impl Fn(&PairKernel, &[[f64; N]; 3], &mut [[f64; N]]),
        pairs: impl Iterator<Item = usize>,
        all: bool,
        s: &mut [[f64; N]],
        h: &mut [[f64; N]],
    ) {
        self.overlaps(&displacement, block, pairs, s, h);
        if all {
            self.one_centre_blocks(s);
        }
        self.couplings(&displacement, 0..self.pairs.len(), s, h);
    }

    /// S of the given pairs. The block of a pair is written to the front of `h` first, which is
    /// made from S afterwards: so nothing is allocated.
    fn overlaps<const N: usize>(
        &self,
        displacement: impl Fn(AtomPair) -> Displacement<N>,
        block: impl Fn(&PairKernel, &[[f64; N]; 3], &mut [[f64; N]]),
        pairs: impl Iterator<Item = usize>,
        s: &mut [[f64; N]],
        h: &mut [[f64; N]],
    ) {
        let n = self.len();
        assert!(
            s.len() >= n * n && h.len() >= n * n,
            "S and H need {n} x {n} numbers"
        );
        for index in pairs {
            let pair = self.pairs[index];
            let kernel = &self.kernels[self.kernel_of[index]];
            let bohr = displacement(pair).map(|axis| axis.map(|x| Bohr::from(Angstrom(x)).0));
            block(kernel, &bohr, h);
            let (rows, columns) = (self.atoms[pair.a].clone(), self.atoms[pair.b].clone());
            let width = columns.len();
            for (row, i) in rows.enumerate() {
                for (column, j) in columns.clone().enumerate() {
                    let value = h[row * width + column];
                    s[i * n + j] = value;
                    s[j * n + i] = value;
                }
            }
        }
    }

    /// H of the atoms and of the given pairs. `h` was used as scratch: all of it is made anew,
    /// which costs one product per element.
    fn couplings<const N: usize>(
        &self,
        displacement: impl Fn(AtomPair) -> Displacement<N>,
        pairs: impl Iterator<Item = usize>,
        s: &[[f64; N]],
        h: &mut [[f64; N]],
    ) {
        let n = self.len();
        for atom in &self.atoms {
            for i in atom.clone() {
                h[i * n..][atom.clone()].fill([0.0; N]);
                h[i * n + i] = [self.diagonal_ev[i]; N];
            }
        }
        for index in pairs {
            self.couple(index, &displacement(self.pairs[index]), s, h);
        }
    }

    fn one_centre_blocks<const N: usize>(&self, s: &mut [[f64; N]]) {
        let n = self.len();
        for atom in &self.atoms {
            for i in atom.clone() {
                s[i * n..][atom.clone()].fill([0.0; N]);
                s[i * n + i] = [1.0; N];
            }
        }
        for &(i, j, value) in &self.one_centre {
            s[i * n + j] = [value; N];
            s[j * n + i] = [value; N];
        }
    }

    /// The block of H of one pair from its block of S.
    fn couple<const N: usize>(
        &self,
        index: usize,
        displacement: &Displacement<N>,
        s: &[[f64; N]],
        h: &mut [[f64; N]],
    ) {
        let n = self.len();
        let pair = self.pairs[index];
        if self.method.coupling == Coupling::Cusachs {
            let mean = |i: usize, j: usize, _| self.a[i * n + j];
            return cusachs::couple(self, index, displacement, mean, h);
        }
        let columns = self.atoms[pair.b].clone();
        let decay = self.decays(displacement);
        for i in self.atoms[pair.a].clone() {
            for j in columns.clone() {
                let at = i * n + j;
                let mut value = s[at];
                let a = self.a[at];
                if let Some(&b) = self.b.get(at) {
                    for lane in 0..N {
                        value[lane] *= a + b * decay[lane];
                    }
                } else {
                    value.iter_mut().for_each(|value| *value *= a);
                }
                h[at] = value;
                h[j * n + i] = value;
            }
        }
    }

    /// e^(−δR) of a pair, or zeros.
    pub(crate) fn decays<const N: usize>(&self, displacement: &Displacement<N>) -> [f64; N] {
        match self.decay_per_angstrom {
            Some(delta) => lengths(displacement).map(|r| libm::exp(-delta * r)),
            None => [0.0; N],
        }
    }
}

/// |R_b − R_a| in each lane.
pub(crate) fn lengths<const N: usize>(displacement: &Displacement<N>) -> [f64; N] {
    let mut out = [0.0; N];
    for lane in 0..N {
        let [x, y, z] = [
            displacement[0][lane],
            displacement[1][lane],
            displacement[2][lane],
        ];
        out[lane] = (x * x + y * y + z * z).sqrt();
    }
    out
}

pub(crate) fn scalar(positions: &[[f64; 3]]) -> impl Fn(AtomPair) -> Displacement<1> + '_ {
    |pair| {
        let (from, to) = (&positions[pair.a], &positions[pair.b]);
        [[to[0] - from[0]], [to[1] - from[1]], [to[2] - from[2]]]
    }
}

pub(crate) fn several(positions: &[[Lanes; 3]]) -> impl Fn(AtomPair) -> Displacement<LANES> + '_ {
    |pair| {
        let (from, to) = (&positions[pair.a], &positions[pair.b]);
        let mut out = [[0.0; LANES]; 3];
        for axis in 0..3 {
            for lane in 0..LANES {
                out[axis][lane] = to[axis][lane] - from[axis][lane];
            }
        }
        out
    }
}

fn lanes_of_one(matrix: &mut [f64]) -> &mut [[f64; 1]] {
    matrix.as_chunks_mut::<1>().0
}

/// [`PairKernel::block`] with the shape of one lane.
pub(crate) trait BlockOne {
    fn block_one(&self, displacement_bohr: &[[f64; 1]; 3], out: &mut [[f64; 1]]);
}

impl BlockOne for PairKernel {
    fn block_one(&self, displacement_bohr: &[[f64; 1]; 3], out: &mut [[f64; 1]]) {
        self.block(
            displacement_bohr.map(|axis| axis[0]),
            out.as_flattened_mut(),
        );
    }
}
