//! The document of a hand-off.

use schemars::JsonSchema;
use serde::{Deserialize, Serialize};

use super::common::{Method, Missing, MoleculeRecord, Program, Units, Warning};
use super::distortion::DistortionsRecord;
use super::levels::SymmetryRecord;
use super::number::Number;
use super::schema::PlanSchema;
use super::sweep::CoordinateRecord;

/// What to compute next, and why: `orbend/plan/1`.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct PlanDocument {
    /// Name and version of this form.
    pub schema: PlanSchema,
    /// The program that wrote the document.
    pub program: Program,
    /// Units of every value.
    pub units: Units,
    /// The molecule.
    pub molecule: MoleculeRecord,
    /// The method and the values used.
    pub method: Method,
    /// The path; empty for a single geometry.
    pub coordinates: Vec<CoordinateRecord>,
    /// The group of the path and the conventions behind the labels.
    pub symmetry: SymmetryRecord,
    /// Geometries to start from, the one to begin with first.
    pub starts: Vec<StartGeometry>,
    /// Charges, spins and configurations worth computing.
    pub states: Vec<StateRecord>,
    /// Further charges of the same atoms.
    pub charges: Vec<ChargeRecord>,
    /// Where the order of states changes along the path, in its order.
    pub root_flips: Vec<RootFlip>,
    /// Active spaces: the same orbitals along the whole path.
    pub active_spaces: Vec<ActiveSpace>,
    /// Distortions of the first start geometry and of those of higher symmetry.
    pub distortions: Vec<DistortionsRecord>,
    /// What the reader ought to know.
    pub warnings: Vec<Warning>,
    /// Why a value is `null`.
    #[serde(default)]
    pub missing: Vec<Missing>,
}

/// A geometry to start from.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct StartGeometry {
    /// `verdict`, `lowest-sum`, `given`, `higher-symmetry` or `flip`.
    pub kind: String,
    /// Coordinate value; empty for a single geometry.
    pub at: Vec<Number>,
    /// The geometry's own group, plain.
    pub point_group: String,
    /// Total charge in units of the elementary charge.
    pub charge: i32,
    /// Unpaired electrons.
    pub unpaired: u32,
    /// Positions in Å, in the order of the atoms.
    pub positions: Vec<[Number; 3]>,
    /// Why.
    pub reason: String,
}

/// A spin and configuration worth computing.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct StateRecord {
    /// Total charge in units of the elementary charge.
    pub charge: i32,
    /// Unpaired electrons.
    pub unpaired: u32,
    /// Open and highest filled levels, as `--occupy` takes them; lower ones are filled.
    pub configuration: String,
    /// Terms in the path group, plain (`2B1`); empty where they do not follow from one product.
    pub terms: Vec<String>,
    /// The same in Unicode (`²B₁`).
    pub display_terms: Vec<String>,
    /// Terms in the start geometry's own group, where that is a higher one, plain.
    pub own_terms: Vec<String>,
    /// The same in Unicode.
    pub display_own_terms: Vec<String>,
    /// Index of the start geometry in `starts`, from 0.
    pub start: u32,
    /// Why it is worth computing.
    pub reason: String,
}

/// Another charge and its shape.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct ChargeRecord {
    /// Total charge in units of the elementary charge.
    pub charge: i32,
    /// Unpaired electrons.
    pub unpaired: u32,
    /// `bent`, `linear`, `planar`, `pyramidal` or `undecided`.
    pub verdict: String,
    /// Angle in degrees.
    pub angle: Option<Number>,
    /// Share of perturbed calculations that agree, 0 to 1.
    pub support: Number,
    /// Whether the shape is another one than that of the molecule asked for.
    pub differs: bool,
    /// Why it is worth computing, or why not.
    pub reason: String,
}

/// A change of the order of states.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct RootFlip {
    /// `ground`, `ionised`, `attached` or `mixed`.
    pub kind: String,
    /// Coordinate value.
    pub at: Number,
    /// Energy of the meeting of the lines in eV.
    pub energy: Number,
    /// Plain labels of the two lines, the lower one before the meeting first.
    pub labels: [String; 2],
    /// Smallest distance in eV, for `mixed`.
    pub gap: Option<Number>,
    /// What changes, in words.
    pub text: String,
}

/// A set of orbitals with electrons.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct ActiveSpace {
    /// `least`, `proposed` or `full-valence`.
    pub kind: String,
    /// Electrons in it.
    pub electrons: u32,
    /// Orbitals in it.
    pub orbitals: u32,
    /// Configuration state functions for the molecule's unpaired electrons.
    pub state_functions: Number,
    /// Its orbitals, by rising energy at the first point.
    pub lines: Vec<ActiveLine>,
    /// Doubly occupied orbitals of each irrep of the path group outside it, core included.
    pub inactive_counts: Vec<IrrepCount>,
    /// Active orbitals of each irrep of the path group.
    pub active_counts: Vec<IrrepCount>,
    /// Smallest distance in eV between inactive and active levels along the path.
    pub separation: Option<Number>,
    /// Values between which an inactive level lies above an active one: choose by irrep there.
    pub order_changes: Option<[Number; 2]>,
    /// Smallest squared overlap of the spaces at both ends, 0 to 1.
    pub kept: Number,
    /// Where it stops being the same set of orbitals; empty where it holds along the whole path.
    pub stops: Vec<SpaceStop>,
}

/// One orbital of an active space.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct ActiveLine {
    /// Plain label in the path group, core orbitals counted.
    pub label: String,
    /// The same without core orbitals.
    pub valence_label: String,
    /// Plain labels in the own groups of the first and of the last point.
    pub end_labels: [String; 2],
    /// Irrep of the path group, plain.
    pub irrep: String,
    /// Size of its set in the path group.
    pub degeneracy: u32,
    /// Electrons at the first and at the last point, 0 to 2.
    pub electrons: [Number; 2],
    /// What it is made of at the first and at the last point, in words.
    pub character: [String; 2],
}

/// Orbitals of one irrep.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize, JsonSchema)]
pub struct IrrepCount {
    /// Irrep, plain.
    pub irrep: String,
    /// Orbitals.
    pub orbitals: u32,
}

/// Where an active orbital exchanges character with one outside.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct SpaceStop {
    /// Coordinate value.
    pub at: Number,
    /// Plain label of the active line.
    pub active: String,
    /// Plain label of the line outside.
    pub outside: String,
    /// Their smallest distance in eV.
    pub gap: Number,
    /// Share of character exchanged, 0 to 1.
    pub exchange: Number,
}
