//! Matrices and energies of one geometry, without symmetry and without lines.

#![allow(
    clippy::expect_used,
    reason = "a failed expectation in a check is its message"
)]

use std::fmt::Write;

use orbend_hamiltonian::{Basis, HamiltonianPlan, Method, ParameterSet};
use orbend_structure::Molecule;

/// Overlap and Hamiltonian of one geometry, `n × n` row by row, eV.
#[derive(Debug)]
pub struct Matrices {
    /// Number of functions.
    pub n: usize,
    /// Overlap.
    pub s: Vec<f64>,
    /// Hamiltonian, eV.
    pub h: Vec<f64>,
}

/// S and H of a molecule.
///
/// # Panics
/// An element without parameters.
pub fn matrices(molecule: &Molecule, set: &ParameterSet, method: &Method) -> Matrices {
    let basis = Basis::new(&molecule.elements, set, method).expect("a basis");
    let plan = HamiltonianPlan::new(&basis, method).expect("a plan");
    let n = plan.len();
    let (mut s, mut h) = (vec![0.0; n * n], vec![0.0; n * n]);
    plan.fill(&molecule.positions, &mut s, &mut h);
    Matrices { n, s, h }
}

/// Level energies by rising energy, eV, from the whole matrices.
///
/// # Panics
/// A geometry that cannot be solved.
pub fn energies(molecule: &Molecule, set: &ParameterSet, method: &Method) -> Vec<f64> {
    let m = matrices(molecule, set, method);
    orbend_eigen::solve(m.n, &m.h, &m.s).expect("solved").values
}

/// The default set with other values of some elements: symbol, then shells with name, Hii and ζ
/// (bohr⁻¹); `unit` is the unit of Hii.
///
/// # Panics
/// Values that are refused.
pub fn set_of(unit: &str, elements: &[(&str, &[(&str, f64, f64)])]) -> ParameterSet {
    let mut text = format!("[set]\nname = \"check\"\nenergy = \"{unit}\"\nexponent = \"1/bohr\"\n");
    for (symbol, shells) in elements {
        writeln!(
            text,
            "[{symbol}]\nsource = \"check\"\nchecked = \"memory\"\nshells = ["
        )
        .expect("memory");
        for (shell, hii, zeta) in *shells {
            writeln!(
                text,
                "{{ shell = \"{shell}\", hii = {hii:?}, zeta = {zeta:?} }},"
            )
            .expect("memory");
        }
        text.push_str("]\n");
    }
    ParameterSet::default()
        .overlay(&text, "check.toml")
        .expect("a set")
}
