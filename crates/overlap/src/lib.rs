//! Slater-type functions and their two-centre overlaps.
//!
//! A [`PairKernel`] is built once for a pair of atoms (their shells, exponents and contraction
//! coefficients) and then gives the block of overlaps, or its derivative, for any displacement:
//! one geometry at a time or [`LANES`] geometries at once, with the same bits either way.
//!
//! Units are bohr and bohr⁻¹ throughout; the crate knows nothing of molecules or energies.
//!
//! # Conventions
//! - Real harmonics in the order m = 0, +1, −1, +2, −2, +3, −3, without the Condon–Shortley sign
//!   (see [`harmonics`]).
//! - A diatomic integral ([`slater_overlap`]) has both local z axes along A→B. Mulliken, Rieke,
//!   Orloff & Orloff, J. Chem. Phys. 17, 1248 (1949) let the axes face each other instead; their
//!   value is ours times (−1)^(l+m) of the second function.
//!
//! # Method
//! Prolate spheroidal coordinates (ξ, η) turn a diatomic integral into a sum of products of the
//! auxiliary integrals A and B (Mulliken *et al.* 1949). While |β| = R|ζ−ζ′|/2 ≤ 4.7 the B integrals
//! come from their power series, whose terms have one sign; beyond, the polynomial is expanded
//! about the tighter centre, where the density sits, so that no digits cancel.

mod angular;
mod auxiliary;
mod coupling;
mod diatomic;
mod error;
pub mod harmonics;
mod lanes;
mod pair;
mod polynomial;
mod radial;
mod shell;
mod spread;

pub use diatomic::{Primitive, slater_overlap, slater_overlap_derivative};
pub use error::OverlapError;
pub use lanes::{LANES, Lanes};
pub use pair::PairKernel;
pub use shell::{MAX_L, MAX_N, Shell, Term, one_centre_overlap};
