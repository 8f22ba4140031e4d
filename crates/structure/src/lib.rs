//! Elements, units, atoms; reading and writing geometries; internal
//! coordinates and paths; ideal geometries from a formula.
//!
//! What it is not for: anything that needs orbitals or energies. Lengths are in
//! Å and angles in degrees throughout; conversions stand in one file.

mod bonds;
mod coordinate;
mod element;
mod element_table;
mod formula;
mod ideal;
mod measure;
mod molecule;
mod neighbours;
mod path;
mod range;
#[cfg(test)]
mod test_molecules;
mod units;
mod vector;
mod xyz;

pub use bonds::BondGraph;
pub use coordinate::{Coordinate, CoordinateError, CoordinateKind};
pub use element::{BondOrder, Element, OccupiedShell};
pub use formula::{Formula, FormulaError, FormulaPart};
pub use ideal::{
    BondLengthUsed, BondOverride, BondOverrideError, IdealGeometry, ShapeClass, ideal_geometry,
};
pub use measure::measure;
pub use molecule::{LARGEST_COORDINATE, Molecule, MoleculeError, SMALLEST_DISTANCE};
pub use path::{
    Alignment, Axis, FrameValues, PathError, PathPlan, TowardReport, align, rotation_of_form,
};
pub use range::{LARGEST_POINT_COUNT, Range, RangeError};
pub use units::{
    Angstrom, BOHR_IN_ANGSTROM, Bohr, DEGREE_IN_RADIANS, Degrees, ElectronVolt, HARTREE_IN_EV,
    Hartree, Radians,
};
pub use xyz::{Frame, LengthUnit, XyzError, XyzOptions, read_xyz, read_xyz_bytes, write_xyz};
