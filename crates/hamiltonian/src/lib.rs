//! Published extended-Hückel parameters, the basis of a molecule, and its overlap and
//! Wolfsberg–Helmholz Hamiltonian matrices.
//!
//! What this crate is for: from a list of elements, a [`ParameterSet`] and a [`Method`] it makes
//! a [`Basis`] (which function sits on which atom, with which Hᵢᵢ and exponents) and a
//! [`HamiltonianPlan`], which holds everything that does not depend on the geometry and fills S
//! and H for one geometry or for eight at once.
//!
//! What it is not for: it solves nothing, knows no symmetry and reads no geometry.
//!
//! Units: eV for energies, bohr⁻¹ for exponents, Å for positions.

mod basis;
mod contraction;
mod coupling;
mod cusachs;
mod fill;
mod gradient;
mod method;
mod nearest;
mod parameters;
mod plan;
mod repulsion;

pub use basis::{AtomFunctions, Basis, BasisError, BasisFunction, BasisShell};
pub use contraction::{contraction_norm, most_probable_radius};
pub use coupling::{distance_dependent_k, weighted_k};
pub use gradient::PairGradient;
pub use method::{
    Coupling, Method, MethodError, POLARISED_HYDROGEN_HII_EV, POLARISED_HYDROGEN_ZETA,
};
pub use parameters::{
    Checked, Confidence, DEFAULT_SET, ElementParameters, FileProblems, ParameterError,
    ParameterSet, Problem, SET_NAMES, ShellName, ShellParameters, Variant,
};
pub use plan::{AtomPair, HamiltonianPlan, PlanError};
pub use repulsion::PairRepulsion;
