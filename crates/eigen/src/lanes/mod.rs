//! Eight problems of one size at once.

pub(crate) mod assemble;
pub(crate) mod chain;
mod reduce;
mod smallest;
mod tridiagonal;
mod workspace;

pub use workspace::{LaneStatus, LaneWorkspace};
