//! What a scan is asked to do: typed, checked, units attached.

use orbend_hamiltonian::{Method, ParameterSet};
use orbend_structure::{Angstrom, Coordinate, Molecule};

use crate::error::ScanError;
use crate::filling::Configuration;
use crate::plan::SweepPlan;
use crate::sweep::Sweep;

/// Which numbering a user's labels follow.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Numbering {
    /// Core orbitals counted, as in correlated work: 2a₁ 1b₂ 3a₁ 1b₁ in bent water.
    #[default]
    Core,
    /// Valence levels only: 1a₁ 1b₂ 2a₁ 1b₁ in bent water.
    Valence,
}

/// A molecule, what moves, and the model.
#[derive(Clone, Debug)]
pub struct Request {
    /// The start geometry with its charge and unpaired electrons.
    pub molecule: Molecule,
    /// What moves; none for a single geometry.
    pub coordinates: Vec<Coordinate>,
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
