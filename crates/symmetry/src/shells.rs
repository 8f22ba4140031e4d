//! Orbital shells on atoms, how operations act on them, and which irreps they span.

use crate::error::SymmetryError;
use crate::group::PointGroup;
use crate::linear::{multiplicity, shell_character};
use crate::matrix::Matrix3;

/// The 2l+1 functions of one shell of an atom, in the order m = 0, +1, −1, +2, −2, +3, −3.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct OrbitalShell {
    /// Index of the atom.
    pub atom: usize,
    /// Angular momentum, up to 3.
    pub l: u8,
}

/// Places of the functions of a list of shells, and the shell that each operation puts where.
pub(crate) struct Layout {
    pub(crate) functions: usize,
    /// First function of each shell.
    pub(crate) first: Vec<usize>,
    /// Sets of equivalent shells.
    pub(crate) orbits: Vec<Vec<usize>>,
    /// `images[operation][shell]`.
    pub(crate) images: Vec<Vec<usize>>,
}

impl Layout {
    pub(crate) fn new(group: &PointGroup, shells: &[OrbitalShell]) -> Result<Self, SymmetryError> {
        let atoms = group
            .operations
            .first()
            .map_or(0, |op| op.permutation.len());
        let mut first = Vec::with_capacity(shells.len());
        let mut functions = 0;
        // Which of the shells of its atom and l each one is.
        let mut rank = Vec::with_capacity(shells.len());
        for (k, shell) in shells.iter().enumerate() {
            if shell.atom >= atoms || shell.l > 3 {
                return Err(SymmetryError::Shells { shell: k });
            }
            first.push(functions);
            functions += 2 * usize::from(shell.l) + 1;
            rank.push(shells[..k].iter().filter(|s| *s == shell).count());
        }
        // Shells by atom, so that images are found without a search over everything.
        let mut of_atom: Vec<Vec<usize>> = vec![Vec::new(); atoms];
        for (k, shell) in shells.iter().enumerate() {
            of_atom[shell.atom].push(k);
        }
        let mut images = Vec::with_capacity(group.operations.len());
        for op in &group.operations {
            let mut image = Vec::with_capacity(shells.len());
            for (k, shell) in shells.iter().enumerate() {
                let target = of_atom[op.permutation[shell.atom]]
                    .iter()
                    .copied()
                    .find(|&t| shells[t].l == shell.l && rank[t] == rank[k])
                    .ok_or(SymmetryError::Shells { shell: k })?;
                image.push(target);
            }
            images.push(image);
        }
        let mut seen = vec![false; shells.len()];
        let mut orbits = Vec::new();
        for k in 0..shells.len() {
            if seen[k] {
                continue;
            }
            let mut orbit: Vec<usize> = images.iter().map(|image| image[k]).collect();
            orbit.sort_unstable();
            orbit.dedup();
            for &s in &orbit {
                seen[s] = true;
            }
            orbits.push(orbit);
        }
        Ok(Self {
            functions,
            first,
            orbits,
            images,
        })
    }
}

impl PointGroup {
    /// Character of any orthogonal matrix (in the frame of the input, about the centre) in an
    /// irrep: for finite groups that of the operation with this matrix, for linear molecules and
    /// atoms by formula. `None` if the matrix is no operation of the group.
    pub fn character(&self, irrep: usize, matrix: &Matrix3) -> Option<f64> {
        let irrep = self.irreps.get(irrep)?;
        if self.linear {
            return crate::linear::linear_character(&irrep.parts, self.axes.z, matrix);
        }
        if self.is_atom() {
            return Some(shell_character((irrep.dimension - 1) / 2, matrix));
        }
        let op = self.operation_of(matrix)?;
        Some(irrep.characters[self.class_of[op]])
    }

    /// Index of the operation with a matrix; axes of two geometries on a path may differ a little.
    pub(crate) fn operation_of(&self, matrix: &Matrix3) -> Option<usize> {
        self.operations
            .iter()
            .position(|op| crate::matrix::largest_difference(&op.matrix, matrix) < 0.05)
    }

    pub(crate) fn is_atom(&self) -> bool {
        self.family == crate::element::Family::Spherical
    }

    pub(crate) fn class_sizes(&self) -> Vec<usize> {
        self.classes
            .iter()
            .map(|class| class.operations.len())
            .collect()
    }

    /// How many sets of each irrep a list of shells spans, one number per irrep.
    ///
    /// # Errors
    /// Shells that the group does not map onto each other.
    pub fn count(&self, shells: &[OrbitalShell]) -> Result<Vec<usize>, SymmetryError> {
        let layout = Layout::new(self, shells)?;
        let mut total = vec![0; self.irreps.len()];
        for orbit in &layout.orbits {
            let l = usize::from(shells[orbit[0]].l);
            for (sum, found) in total.iter_mut().zip(self.count_orbit(&layout, orbit, l)) {
                *sum += found;
            }
        }
        Ok(total)
    }

    pub(crate) fn count_orbit(&self, layout: &Layout, orbit: &[usize], l: usize) -> Vec<usize> {
        if self.is_atom() {
            return (0..self.irreps.len())
                .map(|k| usize::from(k == l))
                .collect();
        }
        let values: Vec<f64> = self
            .classes
            .iter()
            .map(|class| {
                let op = class.operations[0];
                let fixed = orbit.iter().filter(|&&s| layout.images[op][s] == s).count();
                fixed as f64 * shell_character(l, &self.operations[op].matrix)
            })
            .collect();
        let sizes = self.class_sizes();
        self.irreps
            .iter()
            .map(|irrep| multiplicity(irrep, &sizes, &values).round().max(0.0) as usize)
            .collect()
    }

    /// Content as chemists write it: `3a1 + b1 + 2b2`.
    pub fn content(&self, counts: &[usize]) -> String {
        let terms: Vec<String> = self
            .irreps
            .iter()
            .zip(counts)
            .filter(|(_, count)| **count > 0)
            .map(|(irrep, count)| match count {
                1 => irrep.plain.clone(),
                _ => format!("{count}{}", irrep.plain),
            })
            .collect();
        if terms.is_empty() {
            "nothing".to_owned()
        } else {
            terms.join(" + ")
        }
    }
}
