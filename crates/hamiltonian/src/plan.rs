//! What does not depend on the geometry: kernels, offsets, coefficients.

use std::ops::Range;

use orbend_overlap::{OverlapError, PairKernel, Shell, Term, one_centre_overlap};
use orbend_structure::{Angstrom, Bohr};

use crate::basis::{Basis, BasisShell};
use crate::contraction::most_probable_radius;
use crate::coupling;
use crate::method::{Coupling, Method};

/// Two atoms, the first before the second.
#[derive(Copy, Clone, Debug, PartialEq, Eq)]
pub struct AtomPair {
    /// First atom, from 0.
    pub a: usize,
    /// Second atom, larger than `a`.
    pub b: usize,
}

/// A plan that cannot be made or changed.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum PlanError {
    /// The overlap of two shells is beyond what is provided for.
    #[error(transparent)]
    Overlap(#[from] OverlapError),
    /// A list has the wrong length.
    #[error("{what}: {given} values for {wanted}")]
    Length {
        /// Which list.
        what: &'static str,
        /// Its length.
        given: usize,
        /// The length that is needed.
        wanted: usize,
    },
    /// A diagonal element is not finite, or not negative where the form needs that.
    #[error(
        "the diagonal element {value} eV of function {function} cannot be used with the {coupling} form"
    )]
    Diagonal {
        /// The function, from 0.
        function: usize,
        /// The value.
        value: f64,
        /// The form of Hᵢⱼ.
        coupling: Coupling,
    },
}

/// Fills S and H of one molecule for any geometry.
///
/// Made once per molecule: kernels shared by pairs of atoms with the same shells, and the
/// coefficients of H. Matrices are n × n, row-major, symmetric, n = [`HamiltonianPlan::len`];
/// positions in Å, H in eV. Filling does not allocate (the Cusachs form does).
#[derive(Clone, Debug)]
pub struct HamiltonianPlan {
    pub(crate) method: Method,
    pub(crate) atoms: Vec<Range<usize>>,
    /// (first function, l, atom) of every shell.
    pub(crate) shells: Vec<(usize, u8, usize)>,
    pub(crate) pairs: Vec<AtomPair>,
    pub(crate) kernels: Vec<PairKernel>,
    /// Kernel of each pair.
    pub(crate) kernel_of: Vec<usize>,
    /// (i, j, S) of two different functions on one atom that overlap: same l and m, other n or ζ.
    pub(crate) one_centre: Vec<(usize, usize, f64)>,
    /// Diagonal in use, and that of the basis, eV.
    pub(crate) diagonal_ev: Vec<f64>,
    basis_diagonal_ev: Vec<f64>,
    /// Orbital radii, Å.
    pub(crate) radii_angstrom: Vec<f64>,
    /// Hᵢⱼ = Sᵢⱼ (a + b e^(−δR)); `b` is empty where δ is nothing.
    pub(crate) a: Vec<f64>,
    pub(crate) b: Vec<f64>,
    pub(crate) decay_per_angstrom: Option<f64>,
}

impl HamiltonianPlan {
    /// The plan for a basis. The method's `polarised_hydrogen` has done its part in the basis.
    ///
    /// # Errors
    /// Shells that the overlap kernels do not provide for.
    pub fn new(basis: &Basis, method: &Method) -> Result<Self, PlanError> {
        let shells_of: Vec<Vec<Shell>> = basis
            .atoms
            .iter()
            .map(|atom| {
                basis.shells[atom.shells.clone()]
                    .iter()
                    .map(overlap_shell)
                    .collect()
            })
            .collect();
        // Atoms with equal shells are of one kind, named by the first of them.
        let kinds: Vec<usize> = (0..shells_of.len())
            .map(|atom| {
                (0..atom)
                    .find(|&other| shells_of[other] == shells_of[atom])
                    .unwrap_or(atom)
            })
            .collect();
        let (mut pairs, mut kernels, mut kernel_of) = (Vec::new(), Vec::new(), Vec::new());
        let mut known: Vec<(usize, usize)> = Vec::new();
        for b in 0..kinds.len() {
            for a in 0..b {
                let key = (kinds[a], kinds[b]);
                let index = match known.iter().position(|other| *other == key) {
                    Some(index) => index,
                    None => {
                        kernels.push(PairKernel::new(&shells_of[a], &shells_of[b])?);
                        known.push(key);
                        known.len() - 1
                    }
                };
                pairs.push(AtomPair { a, b });
                kernel_of.push(index);
            }
        }
        let radii_angstrom = basis
            .functions
            .iter()
            .map(|function| {
                let shell = &basis.shells[function.shell];
                Angstrom::from(Bohr(most_probable_radius(shell.n, &shell.terms))).0
            })
            .collect();
        let diagonal_ev: Vec<f64> = basis.functions.iter().map(|f| f.hii_ev).collect();
        let mut plan = Self {
            method: *method,
            atoms: basis
                .atoms
                .iter()
                .map(|atom| atom.functions.clone())
                .collect(),
            shells: basis
                .shells
                .iter()
                .map(|shell| (shell.first, shell.l, shell.atom))
                .collect(),
            pairs,
            kernels,
            kernel_of,
            one_centre: one_centre(basis),
            basis_diagonal_ev: diagonal_ev.clone(),
            diagonal_ev: Vec::new(),
            radii_angstrom,
            a: Vec::new(),
            b: Vec::new(),
            decay_per_angstrom: None,
        };
        plan.set_diagonal(&diagonal_ev)?;
        Ok(plan)
    }

    /// Number of functions n.
    pub fn len(&self) -> usize {
        self.basis_diagonal_ev.len()
    }

    /// Whether there are no functions.
    pub fn is_empty(&self) -> bool {
        self.basis_diagonal_ev.is_empty()
    }

    /// The functions of each atom.
    pub fn atoms(&self) -> &[Range<usize>] {
        &self.atoms
    }

    /// All pairs of atoms; a pair is named by its index here.
    pub fn pairs(&self) -> &[AtomPair] {
        &self.pairs
    }

    /// The method in use.
    pub fn method(&self) -> &Method {
        &self.method
    }

    /// The diagonal elements in use, eV.
    pub fn diagonal_ev(&self) -> &[f64] {
        &self.diagonal_ev
    }

    /// Takes other diagonal elements (eV, one per function); kernels stay.
    ///
    /// # Errors
    /// Wrong length; a value that is not finite, or not negative in the weighted, the
    /// distance-dependent weighted and the geometric-mean form. The plan is then unchanged.
    pub fn set_diagonal(&mut self, diagonal_ev: &[f64]) -> Result<(), PlanError> {
        self.check_diagonal(diagonal_ev, &self.method)?;
        self.diagonal_ev.clear();
        self.diagonal_ev.extend_from_slice(diagonal_ev);
        self.set_coefficients();
        Ok(())
    }

    /// Moves the diagonal elements of the basis by one number (eV) per atom, as in the charge
    /// response Hᵢᵢ − A q. Shifts do not add up: each call starts from the basis.
    ///
    /// # Errors
    /// As [`HamiltonianPlan::set_diagonal`].
    pub fn set_atom_shifts(&mut self, shifts_ev: &[f64]) -> Result<(), PlanError> {
        length("shifts", shifts_ev.len(), self.atoms.len())?;
        let mut diagonal = self.basis_diagonal_ev.clone();
        for (functions, shift) in self.atoms.iter().zip(shifts_ev) {
            diagonal[functions.clone()]
                .iter_mut()
                .for_each(|value| *value += shift);
        }
        self.set_diagonal(&diagonal)
    }

    /// Takes another form or K; kernels and diagonal stay. `polarised_hydrogen` has no effect
    /// here: it belongs to the basis.
    ///
    /// # Errors
    /// A diagonal element that the form cannot use. The plan is then unchanged.
    pub fn set_method(&mut self, method: &Method) -> Result<(), PlanError> {
        self.check_diagonal(&self.diagonal_ev, method)?;
        self.method = *method;
        self.set_coefficients();
        Ok(())
    }

    fn check_diagonal(&self, diagonal_ev: &[f64], method: &Method) -> Result<(), PlanError> {
        length("diagonal elements", diagonal_ev.len(), self.len())?;
        let negative = match method.coupling {
            Coupling::Weighted | Coupling::GeometricMean => true,
            Coupling::DistanceDependent { weighted, .. } => weighted,
            Coupling::Constant | Coupling::Cusachs | Coupling::Anderson => false,
        };
        for (function, &value) in diagonal_ev.iter().enumerate() {
            if !value.is_finite() || (negative && value >= 0.0) {
                return Err(PlanError::Diagonal {
                    function,
                    value,
                    coupling: method.coupling,
                });
            }
        }
        Ok(())
    }

    fn set_coefficients(&mut self) {
        let n = self.len();
        self.decay_per_angstrom = coupling::decay(&self.method);
        self.a.clear();
        self.a.resize(n * n, 0.0);
        self.b.clear();
        self.b.resize(
            if self.decay_per_angstrom.is_some() {
                n * n
            } else {
                0
            },
            0.0,
        );
        for i in 0..n {
            for j in 0..n {
                let (a, b) = coupling::factors(
                    &self.method,
                    self.diagonal_ev[i],
                    self.diagonal_ev[j],
                    self.radii_angstrom[i],
                    self.radii_angstrom[j],
                );
                self.a[i * n + j] = a;
                if let Some(place) = self.b.get_mut(i * n + j) {
                    *place = b;
                }
            }
        }
    }

    /// The pairs whose displacement from atom to atom is not the same, within 1e-12 Å, in every
    /// geometry: the others keep their block of S, so that along a sweep it is enough to fill one
    /// reference geometry and to refill these (the same reference for every point, or the last
    /// digits would depend on the order of work).
    pub fn moving_pairs<'a>(
        &self,
        geometries: impl IntoIterator<Item = &'a [[f64; 3]]>,
    ) -> Vec<usize> {
        let mut geometries = geometries.into_iter();
        let Some(first) = geometries.next() else {
            return Vec::new();
        };
        let mut moves = vec![false; self.pairs.len()];
        for geometry in geometries {
            for (pair, moves) in self.pairs.iter().zip(&mut moves) {
                *moves |= (0..3).any(|axis| {
                    let here = geometry[pair.b][axis] - geometry[pair.a][axis];
                    let there = first[pair.b][axis] - first[pair.a][axis];
                    (here - there).abs() > 1e-12
                });
            }
        }
        (0..self.pairs.len()).filter(|&pair| moves[pair]).collect()
    }
}

fn length(what: &'static str, given: usize, wanted: usize) -> Result<(), PlanError> {
    if given == wanted {
        Ok(())
    } else {
        Err(PlanError::Length {
            what,
            given,
            wanted,
        })
    }
}

fn overlap_shell(shell: &BasisShell) -> Shell {
    let terms = shell
        .terms
        .iter()
        .map(|&(zeta, coefficient)| Term { zeta, coefficient })
        .collect();
    Shell {
        n: shell.n,
        l: shell.l,
        terms,
    }
}

fn one_centre(basis: &Basis) -> Vec<(usize, usize, f64)> {
    let mut out = Vec::new();
    for atom in &basis.atoms {
        for right in atom.shells.clone() {
            for left in atom.shells.start..right {
                let (left, right) = (&basis.shells[left], &basis.shells[right]);
                if left.l == right.l {
                    let value = one_centre_overlap(&overlap_shell(left), &overlap_shell(right));
                    for index in 0..2 * usize::from(left.l) + 1 {
                        out.push((left.first + index, right.first + index, value));
                    }
                }
            }
        }
    }
    out
}
