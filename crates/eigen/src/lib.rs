//! The symmetric generalised eigenproblem H C = S C ε.
//!
//! One problem at a time ([`solve`], [`Workspace`]) or eight of one size together in the lanes of
//! the machine's registers ([`LaneWorkspace`]), where the serial part of the algorithm costs an
//! eighth. This crate knows nothing of molecules.

#![allow(
    clippy::too_many_arguments, // kernels take the pieces of a workspace one by one
    clippy::needless_range_loop, // several arrays share an index
    clippy::neg_cmp_op_on_partial_ord, // NaN must take the branch too
)]

mod canonical;
mod error;
mod lanes;
mod large;
mod large_tridiagonal;
mod single;
mod wide;

pub use canonical::{fix_degenerate_set, fix_sign};
pub use error::EigenError;
pub use lanes::{LaneStatus, LaneWorkspace};
pub use single::{Quality, Solution, Workspace, solve, solve_into};

/// Problems solved together, on every machine.
pub const LANES: usize = 8;

/// One number of each of the eight problems.
pub type Lanes = [f64; LANES];

/// S is refused as nearly singular when its smallest eigenvalue is below this times its largest.
///
/// Errors of the energies grow as the inverse of that ratio: at 1e-9 about six digits are left.
pub const SINGULAR_RATIO: f64 = 1e-9;

/// From this size on a single problem is solved by the blocked kernels of the faer crate, on one
/// thread. Those use fused multiply–add where the machine has it, so the last digits may differ
/// between machines (not between runs or numbers of threads).
pub const LARGE: usize = 150;

/// Beyond this size lanes do not pay any more: a [`LaneWorkspace`] solves its problems one by one.
pub const MOST_IN_LANES: usize = 128;
