//! What a scan is asked to do: typed, checked, units attached.

use orbend_hamiltonian::{Method, ParameterSet};
use orbend_structure::{Angstrom, Coordinate, FrameValues, Molecule, PathPlan, Range};

use crate::error::ScanError;
use crate::filling::Configuration;
use crate::plan::{SweepPlan, nuclei};
use crate::sweep::Sweep;
use crate::toward::{MappingChoice, toward};

/// Which numbering a user's labels follow.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Numbering {
    /// Core orbitals counted, as in correlated work: 2a₁ 1b₂ 3a₁ 1b₁ in bent water.
    #[default]
    Core,
    /// Valence levels only: 1a₁ 1b₂ 2a₁ 1b₁ in bent water.
    Valence,
}

/// How the geometry moves.
#[derive(Clone, Debug, Default, PartialEq)]
pub enum Route {
    /// Along the coordinates of the request: none for a single geometry, one
    /// for a line, two for a grid.
    #[default]
    Coordinates,
    /// All coordinates of the request in step with the first one.
    Together,
    /// Through a table of values, one row per point, one column per coordinate.
    Table {
        /// The rows, degrees and Å.
        rows: Vec<Vec<f64>>,
    },
    /// Through given geometries; the request's molecule is the first.
    Frames {
        /// All of them.
        frames: Vec<Molecule>,
        /// What tells them apart.
        values: FrameValues,
    },
    /// From the request's molecule to another geometry.
    Toward {
        /// The end.
        other: Box<Molecule>,
        /// Points, both ends included.
        points: usize,
        /// Which atom becomes which, where the user says more than the files.
        choice: MappingChoice,
    },
    /// Along a displacement vector per atom (Å).
    AlongMode {
        /// One vector per atom.
        displacement: Vec<[f64; 3]>,
        /// Amplitudes that multiply it.
        range: Range,
    },
}

impl Route {
    /// The path of a molecule that has the atom permutations `equivalences`.
    pub(crate) fn path(
        &self,
        molecule: &Molecule,
        coordinates: &[Coordinate],
        equivalences: &[Vec<usize>],
        tolerance: f64,
    ) -> Result<PathPlan, ScanError> {
        Ok(match self {
            Self::Coordinates if coordinates.is_empty() => PathPlan::fixed(molecule)?,
            Self::Coordinates => PathPlan::new(molecule, coordinates, equivalences)?,
            Self::Together => PathPlan::together(molecule, coordinates, equivalences)?,
            Self::Table { rows } => PathPlan::following(molecule, coordinates, rows, equivalences)?,
            Self::Frames { frames, values } => PathPlan::frames(frames, values)?,
            Self::Toward {
                other,
                points,
                choice,
            } => {
                let (other, ..) = symmetrized(other, Angstrom(tolerance))?;
                toward(molecule, &other, *points, choice, tolerance)?
            }
            Self::AlongMode {
                displacement,
                range,
            } => PathPlan::along(molecule, displacement, *range)?,
        })
    }
}

/// A molecule moved onto the group that it has within a tolerance; the group's
/// plain name and the largest distance (Å) that an atom was moved.
///
/// # Errors
/// A tolerance outside 1e-8 to 0.5 Å or a geometry that is not usable.
pub fn symmetrized(
    molecule: &Molecule,
    tolerance: Angstrom,
) -> Result<(Molecule, String, f64), ScanError> {
    let places = nuclei(&molecule.elements, &molecule.positions);
    let group = orbend_symmetry::find(&places, tolerance.0)?.group;
    let (places, moved) = orbend_symmetry::symmetrize(&places, &group);
    let mut molecule = molecule.clone();
    molecule.positions = places.iter().map(|nucleus| nucleus.position).collect();
    Ok((molecule, group.name, moved))
}

/// A molecule, what moves, and the model.
#[derive(Clone, Debug)]
pub struct Request {
    /// The start geometry with its charge and unpaired electrons.
    pub molecule: Molecule,
    /// What moves; none for a single geometry.
    pub coordinates: Vec<Coordinate>,
    /// How they move, or another kind of path.
    pub route: Route,
    /// Values of Hᵢᵢ and ζ.
    pub parameters: ParameterSet,
    /// The Wolfsberg–Helmholz form, K and the basis.
    pub method: Method,
    /// An explicit configuration; aufbau without it.
    pub configuration: Option<Configuration>,
    /// The numbering of the labels in `configuration`.
    pub numbering: Numbering,
    /// How far atoms may be from a symmetry operation.
    pub tolerance: Angstrom,
}

impl Request {
    /// A single geometry with the default set, the constant-K form, aufbau and
    /// a tolerance of 0.001 Å.
    pub fn new(molecule: Molecule) -> Self {
        Self {
            molecule,
            coordinates: Vec::new(),
            route: Route::Coordinates,
            parameters: ParameterSet::default(),
            method: Method::default(),
            configuration: None,
            numbering: Numbering::Core,
            tolerance: Angstrom(0.001),
        }
    }

    /// Adds a coordinate; a second one makes a grid.
    #[must_use]
    pub fn coordinate(mut self, coordinate: Coordinate) -> Self {
        self.coordinates.push(coordinate);
        self
    }

    /// Everything that does not change along the path, computed once.
    ///
    /// # Errors
    /// Whatever is wrong with the request; nothing has run then.
    pub fn plan(&self) -> Result<SweepPlan, ScanError> {
        SweepPlan::new(self)
    }

    /// Plans and runs on the caller's rayon pool.
    ///
    /// # Errors
    /// As [`Request::plan`], or a point that cannot be solved.
    pub fn run(&self) -> Result<Sweep, ScanError> {
        Sweep::run(self.plan()?)
    }
}
