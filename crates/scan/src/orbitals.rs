//! The orbitals of one geometry: coefficients, and what Mulliken's analysis
//! makes of them.

use ndarray::{Array1, Array2, Axis};
use orbend_eigen::{Workspace, fix_sign};
use orbend_hamiltonian::Basis;

use crate::error::ScanError;
use crate::plan::SweepPlan;

/// Coefficients of every line at one geometry, and the overlap matrix.
#[derive(Clone, Debug)]
pub struct Orbitals {
    /// `lines × functions`; C†SC = 1.
    pub coefficients: Array2<f64>,
    /// `functions × functions`.
    pub overlap: Array2<f64>,
    /// One energy per line, eV.
    pub energies: Vec<f64>,
}

/// Mulliken populations of one geometry (J. Chem. Phys. 23, 1833 (1955)).
#[derive(Clone, Debug)]
pub struct Populations {
    /// Net charge of each atom: its valence electrons minus its gross population.
    pub charges: Vec<f64>,
    /// Overlap population of each pair of atoms, `atoms × atoms`, symmetric,
    /// zero on the diagonal.
    pub pairs: Array2<f64>,
    /// `lines × shells`: gross population of each shell for one electron in the line.
    pub shares: Array2<f64>,
}

impl Orbitals {
    /// Gross and overlap populations for the given occupations (one per line).
    pub fn populations(&self, basis: &Basis, occupations: &[f64]) -> Populations {
        let functions = basis.functions.len();
        let atoms = basis.atoms.len();
        let weighted = self.coefficients.dot(&self.overlap);
        let products = &self.coefficients * &weighted;
        let mut shares = Array2::zeros((self.coefficients.nrows(), basis.shells.len()));
        for (index, function) in basis.functions.iter().enumerate() {
            let mut column = shares.index_axis_mut(Axis(1), function.shell);
            column += &products.index_axis(Axis(1), index);
        }
        let occupations = Array1::from(occupations.to_vec());
        let gross = occupations.dot(&products);
        let mut charges: Vec<f64> = basis
            .atoms
            .iter()
            .map(|atom| f64::from(atom.valence_electrons))
            .collect();
        for (index, function) in basis.functions.iter().enumerate() {
            charges[function.atom] -= gross[index];
        }
        let scaled = &self.coefficients * &occupations.insert_axis(Axis(1));
        let density = self.coefficients.t().dot(&scaled);
        let mut pairs = Array2::zeros((atoms, atoms));
        for i in 0..functions {
            for j in 0..functions {
                let (a, b) = (basis.functions[i].atom, basis.functions[j].atom);
                if a != b {
                    pairs[[a, b]] += 2.0 * density[[i, j]] * self.overlap[[i, j]];
                }
            }
        }
        Populations {
            charges,
            pairs,
            shares,
        }
    }
}

impl SweepPlan {
    /// Coefficients of all lines at any coordinate values inside the path.
    ///
    /// # Errors
    /// Values outside the path, or a geometry that cannot be solved.
    pub fn orbitals(&self, values: &[f64]) -> Result<Orbitals, ScanError> {
        let n = self.basis.functions.len();
        let mut positions = vec![[0.0; 3]; self.molecule.positions.len()];
        self.path.positions(values, &mut positions)?;
        let mut overlap = vec![0.0; n * n];
        let mut hamiltonian = vec![0.0; n * n];
        self.hamiltonian
            .fill(&positions, &mut overlap, &mut hamiltonian);
        let mut coefficients = Array2::zeros((self.lines.len(), n));
        let mut energies = vec![0.0; self.lines.len()];
        for (index, block) in self.adapted.blocks.iter().enumerate() {
            let m = block.size();
            let mut s = vec![0.0; m * m];
            let mut h = vec![0.0; m * m];
            block.transform(n, &overlap, &mut s);
            block.transform(n, &hamiltonian, &mut h);
            let mut room = Workspace::new(m);
            room.solve(&h, &s)
                .map_err(|error| self.explain(&self.adapted, index, error, values))?;
            let mut expanded = vec![0.0; m * n];
            for row in 0..block.row_count() {
                block.expand(row, n, room.vectors(), &mut expanded);
                for (line, head) in self.lines.iter().enumerate() {
                    if head.block == index && head.row == row {
                        let vector = &mut expanded[head.place * n..(head.place + 1) * n];
                        fix_sign(vector);
                        energies[line] = room.values()[head.place];
                        coefficients
                            .row_mut(line)
                            .assign(&ndarray::ArrayView1::from(&*vector));
                    }
                }
            }
        }
        let overlap = Array2::from_shape_fn((n, n), |(i, j)| overlap[i * n + j]);
        Ok(Orbitals {
            coefficients,
            overlap,
            energies,
        })
    }
}
