//! Point groups of molecules: operations, characters, labels, descent.
//!
//! One engine serves all finite groups: operations are found from the geometry, made exact, and
//! everything else (classes, characters, irreps, adapted combinations, descent) follows from them.
//! The crate knows nothing of energies.

mod axes;
mod characters;
mod closure;
mod element;
mod error;
mod find;
mod group;
mod linear;
mod matrix;
mod multiplication;
mod names;
mod nucleus;
mod search;

pub use axes::Frame;
pub use error::SymmetryError;
pub use find::{NearMiss, Symmetry, find, symmetrize};
pub use group::{Class, Irrep, Operation, PointGroup};
pub use matrix::{Matrix3, Vector3};
pub use nucleus::Nucleus;
