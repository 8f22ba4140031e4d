//! The document of one geometry, and the points that it shares with a sweep.

use schemars::JsonSchema;
use serde::{Deserialize, Serialize};

use super::common::{BasisFunction, Method, Missing, MoleculeRecord, Program, Units, Warning};
use super::distortion::DistortionsRecord;
use super::fragments::FragmentsRecord;
use super::number::Number;
use super::schema::LevelsSchema;

/// The levels of one geometry: `orbend/levels/1`.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct LevelsDocument {
    /// Name and version of this form.
    pub schema: LevelsSchema,
    /// The program that wrote the document.
    pub program: Program,
    /// Units of every value.
    pub units: Units,
    /// The molecule.
    pub molecule: MoleculeRecord,
    /// The method and the values used.
    pub method: Method,
    /// Point group and conventions.
    pub symmetry: SymmetryRecord,
    /// Basis functions, in the order of `coefficients`; left out without coefficients.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub basis: Option<Vec<BasisFunction>>,
    /// Exactly one point; its `at` is empty.
    pub points: Vec<Point>,
    /// Which vibrations the geometry gives in to; left out unless asked for.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub distortions: Option<DistortionsRecord>,
    /// The molecule as fragments; left out unless asked for.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub fragments: Option<FragmentsRecord>,
    /// What the reader ought to know.
    pub warnings: Vec<Warning>,
    /// Why a value is `null`.
    #[serde(default)]
    pub missing: Vec<Missing>,
}

/// Symmetry: the group of the labels and the conventions behind them.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct SymmetryRecord {
    /// The point group that every point keeps, in plain form (`C2v`, `Dinfh`).
    pub path_group: String,
    /// The axis convention in words.
    pub axes: String,
    /// Largest displacement in Å that still counts as symmetric.
    pub tolerance_angstrom: Number,
    /// Higher groups that are missed narrowly.
    #[serde(default)]
    pub near_misses: Vec<NearMiss>,
}

/// A higher group that the geometry misses narrowly.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct NearMiss {
    /// The group, in plain form.
    pub group: String,
    /// The tolerance in Å at which it would be found.
    pub tolerance_angstrom: Number,
    /// Coordinates of the point that misses it; empty for a single geometry.
    #[serde(default)]
    pub at: Vec<Number>,
}

/// One geometry with all its levels.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Point {
    /// Coordinates, one number per coordinate in its unit (degree, Å, or share of the path).
    pub at: Vec<Number>,
    /// Cartesian positions in Å, in the order of the atoms.
    pub positions: Vec<[Number; 3]>,
    /// The point's own full group, in plain form.
    pub point_group: String,
    /// Σ nᵢεᵢ in eV.
    pub sum: Option<Number>,
    /// Smallest eigenvalue of the overlap matrix (no unit).
    pub smallest_overlap_eigenvalue: Option<Number>,
    /// Levels in order of energy, one entry per orbital.
    pub levels: Vec<LevelRecord>,
    /// Mulliken net charges of the atoms in units of the elementary charge.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub charges: Option<Vec<AtomCharge>>,
    /// Mulliken overlap populations of pairs of atoms.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub overlap_populations: Option<Vec<OverlapPopulation>>,
}

/// One orbital at one geometry.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct LevelRecord {
    /// Energy in eV.
    pub energy: Number,
    /// Electrons in this orbital, 0 to 2.
    pub occupation: Number,
    /// The `id` of the line it belongs to; null without lines.
    pub line: Option<u32>,
    /// Irrep of the path group, plain (`a1`, `sigma_g+`).
    pub irrep: String,
    /// Dimension of the set in the path group: 2 for each of a doubly degenerate pair.
    pub degeneracy: u32,
    /// Plain label in the path group, core orbitals counted.
    pub label: String,
    /// Plain label in the path group, valence levels counted only.
    pub valence_label: String,
    /// `label` in Unicode.
    pub display: String,
    /// Plain label in the point's own full group, core orbitals counted.
    pub full_label: String,
    /// `full_label` in Unicode.
    pub full_display: String,
    /// Plain label in the point's own full group, valence levels counted only.
    #[serde(default)]
    pub full_valence_label: String,
    /// Coefficients of the basis functions (no unit; C†SC = 1), in the order of `basis`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub coefficients: Option<Vec<Number>>,
    /// Mulliken populations of the shells for one electron in this orbital; they add up to 1.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub populations: Option<Vec<ShellPopulation>>,
    /// Mulliken overlap populations of pairs of atoms for one electron in this orbital (of a
    /// degenerate set the mean), where they are 0.001 or more.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub bonds: Option<Vec<OverlapPopulation>>,
    /// What the orbital is, in words that follow from its populations: `Si–F σ bonding`,
    /// `lone pair on F`, `non-bonding`, `metal d 85 %`, `counter-intuitive Fe 4s–O 2s`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub tags: Option<Vec<String>>,
}

/// Share of one shell in an orbital.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct ShellPopulation {
    /// Atom, counted from 1.
    pub atom: u32,
    /// Element symbol.
    pub element: String,
    /// Shell, as in `3p`.
    pub shell: String,
    /// Mulliken gross population for one electron in the orbital.
    pub share: Number,
    /// Löwdin population for one electron in the orbital.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub lowdin: Option<Number>,
}

/// Net charge of one atom.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct AtomCharge {
    /// Atom, counted from 1.
    pub atom: u32,
    /// Element symbol.
    pub element: String,
    /// Valence electrons of the neutral atom minus its Mulliken gross population.
    pub charge: Number,
    /// Valence electrons of the neutral atom minus its Löwdin population.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub lowdin: Option<Number>,
}

/// Overlap population of one pair of atoms.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct OverlapPopulation {
    /// The two atoms, counted from 1.
    pub atoms: [u32; 2],
    /// Mulliken overlap population in electrons.
    pub population: Number,
}
