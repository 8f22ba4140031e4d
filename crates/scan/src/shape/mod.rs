//! Which shape a molecule has about one centre, how far that can be trusted, and why.
//!
//! The motion follows from the connections: bend, pyramid, tetrahedral to square-planar, both ends
//! of a chain, a torsion; or it is the user's. Several arguments are worked out along it: sums of
//! orbital energies in several forms ([`SumArgument`]), the frontier line ([`FrontierArgument`])
//! and, as a named reference that never decides, the electron count. An ensemble of perturbed
//! parameters gives the support; a small rule ([`rule`]) weighs them. `undecided` is a normal
//! outcome.
//!
//! # Why hydrogen gets a 2p shell
//! In a minimal basis the sum leaves ammonia planar and water nearly flat, because hydrogen cannot
//! polarise; ab initio work ties the inversion of hydrides to polarisation functions (Rauk, Allen &
//! Clementi, J. Chem. Phys. 52, 4133 (1970), from memory). A 2p shell at the exact level of the
//! atom, −13.6/4 eV, with the exponent of 1s is not fitted to anything. Its whole effect on the
//! bending is the term between the centre's ns and H 2p: the lone-pair line is pure np in the
//! symmetric form (no coupling) and gains ns on bending; for O 2s/H 2p the coupling is −15.4 S eV a
//! pair. In water at 105° the sum relative to the linear form goes from +0.19 to −0.61 eV. The gross
//! population of H 2p is small and negative: it is the level repulsion known as counter-intuitive
//! mixing, which the weighted form was made to damp (there water has 131° and H3O⁺ is planar). That
//! is why the polarised sum with constant K leads and the weighted form stands beside it.

#![allow(
    clippy::needless_range_loop,
    reason = "lanes of several arrays share an index"
)]

mod arguments;
mod centre;
mod charge;
mod electron_count;
mod engine;
mod ensemble;
mod flip;
mod frontier;
mod minimum;
mod motion;
mod random;
pub mod rule;
mod see_saw;
mod verdict;
mod words;

pub use arguments::{Favour, SumArgument};
pub use centre::{Centre, ShapeError};
pub use electron_count::electron_count_rule;
pub use ensemble::Support;
pub use flip::Flip;
pub use frontier::FrontierArgument;
pub use motion::{Motion, MotionKind};
pub use verdict::{ShapeRequest, ShapeVerdict};
