//! One problem at a time.

mod chain;
mod check;
mod dense;
pub(crate) mod smallest;
mod tridiagonal;
mod workspace;

pub use check::Quality;
pub use workspace::{Solution, Workspace, solve, solve_into};
