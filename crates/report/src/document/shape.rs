//! The document of shape verdicts.

use schemars::JsonSchema;
use serde::{Deserialize, Serialize};

use super::common::{Method, Missing, MoleculeRecord, Program, Units, Warning};
use super::number::Number;
use super::schema::ShapeSchema;
use super::sweep::CoordinateRecord;

/// Shape verdicts, one per electron count or configuration asked for: `orbend/shape/1`.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct ShapeDocument {
    /// Name and version of this form.
    pub schema: ShapeSchema,
    /// The program that wrote the document.
    pub program: Program,
    /// Units of every value.
    pub units: Units,
    /// The molecule (the first one of a series over different atoms).
    pub molecule: MoleculeRecord,
    /// The method and the values used.
    pub method: Method,
    /// The coordinate of the verdicts; a case over other atoms carries its own.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub coordinate: Option<CoordinateRecord>,
    /// The perturbed calculations behind `support`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub ensemble: Option<Ensemble>,
    /// The verdicts.
    pub cases: Vec<Case>,
    /// Electron counts whose curves cannot differ for these atoms.
    pub ties: Vec<Vec<u32>>,
    /// What the reader ought to know.
    pub warnings: Vec<Warning>,
    /// Why a value is `null`.
    #[serde(default)]
    pub missing: Vec<Missing>,
}

/// One verdict.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Case {
    /// Formula, where the case has other atoms than `molecule`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub formula: Option<String>,
    /// The coordinate, where it differs from the document's.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub coordinate: Option<CoordinateRecord>,
    /// Total charge in units of the elementary charge.
    pub charge: i32,
    /// Valence electrons.
    pub electrons: u32,
    /// Unpaired electrons.
    pub unpaired: u32,
    /// Occupied valence levels, as in `4a1:2 2b2:2`.
    pub configuration: String,
    /// `linear`, `bent`, `planar`, `pyramidal`, `square-planar`, `tetrahedral`, `flattened-tetrahedral`,
    /// `trans-bent`; of a torsion `cis`, `trans`, `planar`, `perpendicular`, `eclipsed`, `staggered` or
    /// `skew`; along a range of the user's `start`, `inside` or `end`; or `undecided`.
    pub verdict: String,
    /// Whether the rule calls the verdict safe.
    pub confident: bool,
    /// Angle of the lowest point in degrees.
    pub angle: Option<Number>,
    /// 10 to 90 % range of the angle in degrees over the ensemble.
    pub angle_range: Option<[Number; 2]>,
    /// How far in eV the lowest point lies below the high-symmetry geometry; of a torsion, below the
    /// next form.
    pub depth: Option<Number>,
    /// Share of the perturbed calculations that agree, 0 to 1.
    pub support: Option<Number>,
    /// The arguments that were weighed.
    pub arguments: Vec<Argument>,
    /// What decides, in words.
    pub because: Vec<String>,
    /// What could be wrong, in words.
    pub could_be_wrong_because: Vec<String>,
    /// The smallest single changes that turn the leading sum round.
    #[serde(default)]
    pub would_flip: Vec<Flip>,
    /// Curves behind the arguments; left out unless asked for.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub curves: Vec<Curve>,
}

/// One argument for a shape.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Argument {
    /// `polarised-sum`, `sum`, `frontier`, or a further name.
    pub name: String,
    /// The shape that it favours.
    pub favours: String,
    /// Angle of its lowest point in degrees.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub angle: Option<Number>,
    /// Depth in eV below the high-symmetry geometry.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub depth: Option<Number>,
    /// Plain label of the line it rests on.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub line: Option<String>,
    /// Change of that line in eV from the high-symmetry geometry.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub change: Option<Number>,
    /// A remark in words.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub note: Option<String>,
}

/// A single change that would reverse the verdict.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Flip {
    /// What changes, as in `hii Si 3p`, `zeta F 2p`, `k`, `coupling`, `length Si-F`.
    pub what: String,
    /// By how much, in `unit`; null for a change of form.
    pub change: Option<Number>,
    /// `eV`, `percent`, or empty.
    pub unit: String,
    /// Spread of the published values in the same unit.
    pub published_spread: Option<Number>,
    /// The shape it would become.
    pub to: String,
}

/// The perturbed calculations behind a support.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Ensemble {
    /// Seed of the random numbers.
    pub seed: u64,
    /// Number of perturbed calculations.
    pub members: u32,
    /// What is varied and by how much, in words.
    pub spreads: Vec<String>,
}

/// One curve behind an argument.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Curve {
    /// Name of the argument.
    pub name: String,
    /// Coordinate values in the coordinate's unit.
    pub at: Vec<Number>,
    /// Energies in eV, one per value.
    pub energy: Vec<Option<Number>>,
}
