//! Points → lines → crossings → shapes, in parallel.
//!
//! A [`Request`] is checked into a [`SweepPlan`]: path, path group and axes are
//! fixed once, basis, pair list and symmetry-adapted combinations laid out
//! once. [`Sweep::run`] solves the points eight at a time on the caller's rayon
//! pool and joins them to lines. The result does not depend on the number of
//! threads.
//!
//! Not for: reading or writing files, printing, or drawing.

mod character;
mod crossing;
mod error;
mod field;
mod filling;
mod follow;
mod line;
mod naming;
mod orbitals;
mod plan;
mod plane;
mod point_levels;
pub mod reasons;
mod request;
pub mod shape;
mod solve;
mod special;
mod stretch;
mod surface;
mod sweep;
mod toward;

pub use crossing::{
    AVOIDED_GAP_EV, BATCH, Crossing, LevelModel, Meeting, MeetingKind, SMALLEST_EXCHANGE, meetings,
    resolution,
};
pub use error::{FillingError, ScanError};
pub use field::OrbitalField;
pub use filling::{Configuration, DEGENERACY_EV, Electrons, Filling};
pub use follow::{CLEAR_EXCHANGE, CLEAR_OVERLAP, Evidence, Followed};
pub use line::LineHead;
pub use naming::Name;
pub use orbitals::{Orbitals, Populations};
pub use plan::{Notice, SweepPlan};
pub use plane::{OrbitalPicture, Plane, PlaneValues};
pub use point_levels::PointLevels;
pub use request::{Numbering, Request, Route, symmetrized};
pub use special::SpecialPoint;
pub use stretch::Stretch;
pub use surface::{Mesh, OrbitalSurface, SURFACE_SHARES, SurfaceError, orbital_surface};
pub use sweep::{Level, Point, Sweep};
pub use toward::MappingChoice;
