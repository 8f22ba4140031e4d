//! Point groups of molecules: operations, characters, labels, descent.
//!
//! One engine serves all finite groups: operations are found from the geometry, made exact, and
//! everything else (classes, characters, irreps, adapted combinations, descent) follows from them.
//! The crate knows nothing of energies.
//!
//! ```
//! use orbend_symmetry::{Nucleus, OrbitalShell, find};
//!
//! let atom = |kind, y, z| Nucleus { kind, position: [0.0, y, z] };
//! let water = [atom(8, 0.0, 0.0), atom(1, 0.757, 0.587), atom(1, -0.757, 0.587)];
//! let group = find(&water, 1e-3)?.group;
//! assert_eq!(group.name, "C2v");
//! let shells = [(0, 0), (0, 1), (1, 0), (2, 0)].map(|(atom, l)| OrbitalShell { atom, l });
//! assert_eq!(group.content(&group.count(&shells)?), "3a1 + b1 + 2b2");
//! # Ok::<(), orbend_symmetry::SymmetryError>(())
//! ```

mod adapt;
mod axes;
mod block;
mod characters;
mod closure;
mod descent;
mod element;
mod error;
mod find;
mod group;
mod label;
mod linear;
mod matrix;
mod multiplication;
mod names;
mod nucleus;
mod numbering;
mod path;
mod products;
mod representation;
mod screen;
mod search;
mod shells;
mod vibration;

pub use adapt::AdaptedBasis;
pub use axes::Frame;
pub use block::Block;
pub use descent::Descent;
pub use error::SymmetryError;
pub use find::{NearMiss, Symmetry, find, symmetrize};
pub use group::{Class, Irrep, Operation, PointGroup};
pub use label::{Label, degenerate_sets};
pub use matrix::{Matrix3, Vector3};
pub use nucleus::Nucleus;
pub use numbering::Numbering;
pub use path::{PathGroup, path_group};
pub use screen::GroupScreen;
pub use shells::OrbitalShell;
pub use vibration::SymmetryDisplacements;
