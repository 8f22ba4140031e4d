//! The document of a sweep.

use schemars::JsonSchema;
use serde::{Deserialize, Serialize};

use super::common::{BasisFunction, Method, Missing, MoleculeRecord, Program, Units, Warning};
use super::fragments::FragmentsRecord;
use super::levels::{Point, SymmetryRecord};
use super::number::Number;
use super::schema::SweepSchema;
use super::why::WhyRecord;

/// The correlation diagram along one coordinate, or the points of a grid over two: `orbend/sweep/1`.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct SweepDocument {
    /// Name and version of this form.
    pub schema: SweepSchema,
    /// The program that wrote the document.
    pub program: Program,
    /// Units of every value.
    pub units: Units,
    /// The molecule.
    pub molecule: MoleculeRecord,
    /// The method and the values used.
    pub method: Method,
    /// The coordinates: one, or two for a grid.
    pub coordinates: Vec<CoordinateRecord>,
    /// Path group and conventions.
    pub symmetry: SymmetryRecord,
    /// Basis functions, in the order of `coefficients`; left out without coefficients.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub basis: Option<Vec<BasisFunction>>,
    /// Points in order; on a grid the first coordinate is the slowest.
    pub points: Vec<Point>,
    /// Orbitals followed from point to point; left out on a grid.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub lines: Option<Vec<LineRecord>>,
    /// The same orbitals followed by character instead of energy order: within an irrep a
    /// character passes to the other line where an avoided crossing exchanges most of it; left out
    /// on a grid.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub followed: Option<Vec<FollowedRecord>>,
    /// Crossings and avoided crossings; left out on a grid.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub crossings: Option<Vec<CrossingRecord>>,
    /// How crossings were looked for; left out where they were not.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub crossing_search: Option<CrossingSearch>,
    /// The lowest sum, found by the calculation itself; left out where it was not asked for.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub minimum: Option<SumMinimum>,
    /// The molecule as fragments at every point; left out unless asked for.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub fragments: Option<Vec<FragmentsRecord>>,
    /// Why lines move, for the lines that were asked about.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub why: Option<Vec<WhyRecord>>,
    /// What the reader ought to know.
    pub warnings: Vec<Warning>,
    /// Why a value is `null`.
    #[serde(default)]
    pub missing: Vec<Missing>,
}

/// One coordinate.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct CoordinateRecord {
    /// What moves.
    pub kind: MotionKind,
    /// The atoms that name it, counted from 1; empty for a path to another geometry.
    pub atoms: Vec<u32>,
    /// Unit of its values.
    pub unit: CoordinateUnit,
    /// Partners that move along by symmetry: the atoms of each, counted from 1.
    pub moved_along: Vec<Vec<u32>>,
    /// First value, in `unit`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub from: Option<Number>,
    /// Last value, in `unit`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub to: Option<Number>,
    /// Step, in `unit`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub step: Option<Number>,
    /// What moves and what stays, in words.
    #[serde(default)]
    pub text: String,
}

/// Kind of a coordinate.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum MotionKind {
    /// Angle at the middle atom.
    Bend,
    /// Distance of two atoms.
    Stretch,
    /// Torsion about the middle pair.
    Twist,
    /// Common ligand–centre–ligand angle at a three-coordinate atom.
    Pyramid,
    /// Path to another geometry.
    Toward,
    /// Given geometries.
    Frames,
    /// A displacement vector times an amplitude.
    Mode,
    /// The rows of a table of coordinate values.
    Table,
}

/// Unit of a coordinate's values.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum CoordinateUnit {
    /// Degrees.
    Degree,
    /// Ångström.
    Angstrom,
    /// Share of the path, 0 to 1.
    Share,
    /// A bare number.
    Number,
}

/// One orbital followed from point to point.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct LineRecord {
    /// Number of the line; `levels` refer to it.
    pub id: u32,
    /// Irrep of the path group, plain.
    pub irrep: String,
    /// Dimension of the set in the path group; each orbital of a set has its own line.
    #[serde(default = "one")]
    pub degeneracy: u32,
    /// Plain label in the path group, core orbitals counted.
    pub label: String,
    /// Plain label in the path group, valence levels counted only.
    pub valence_label: String,
    /// `label` in Unicode.
    pub display: String,
    /// All the names of the line.
    pub passport: Passport,
    /// Energies in eV, one per point; null where the line has no level.
    pub energies: Vec<Option<Number>>,
    /// What the line's identity rests on.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub certificate: Option<Certificate>,
}

fn one() -> u32 {
    1
}

/// All the names of one line.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Passport {
    /// Plain label in the first point's own group.
    pub start: String,
    /// Plain label in the last point's own group.
    pub end: String,
    /// Plain label in the path group under the other axis convention.
    pub other_axes: String,
    /// `start` in Unicode.
    #[serde(default)]
    pub start_display: String,
    /// `end` in Unicode.
    #[serde(default)]
    pub end_display: String,
    /// `start`, valence levels counted only.
    #[serde(default)]
    pub start_valence: String,
    /// `end`, valence levels counted only.
    #[serde(default)]
    pub end_valence: String,
    /// `other_axes`, valence levels counted only.
    #[serde(default)]
    pub other_axes_valence: String,
    /// Labels at points of the sweep that have a higher group than the path.
    #[serde(default)]
    pub special: Vec<SpecialLabel>,
}

/// Label of a line at a point of higher symmetry.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct SpecialLabel {
    /// Coordinate of the point, in the coordinate's unit.
    pub at: Number,
    /// The point's own group, plain.
    pub point_group: String,
    /// Plain label there, core orbitals counted.
    pub label: String,
    /// Plain label there, valence levels counted only.
    #[serde(default)]
    pub valence_label: String,
    /// `label` in Unicode.
    #[serde(default)]
    pub display: String,
}

/// What a line's identity rests on.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Certificate {
    /// The weakest kind along the line.
    pub kind: CertificateKind,
    /// Stretches that rest on something else than symmetry.
    #[serde(default)]
    pub intervals: Vec<CertificateInterval>,
}

/// Kinds of evidence, strongest first.
#[derive(
    Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize, JsonSchema,
)]
#[serde(rename_all = "lowercase")]
pub enum CertificateKind {
    /// Energy order within an irrep of the path group (von Neumann and Wigner 1929).
    Symmetry,
    /// Overlap of the orbitals at neighbouring points.
    Overlap,
    /// More than one continuation is possible.
    Ambiguous,
}

/// Part of a line with its evidence.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct CertificateInterval {
    /// First coordinate, in the coordinate's unit.
    pub from: Number,
    /// Last coordinate, in the coordinate's unit.
    pub to: Number,
    /// The evidence there.
    pub kind: CertificateKind,
    /// Smallest squared overlap of neighbouring orbitals, 0 to 1.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub overlap: Option<Number>,
}

/// Two lines that meet or repel.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct CrossingRecord {
    /// Crossing or avoided crossing.
    pub kind: CrossingKind,
    /// The `id`s of the two lines.
    pub lines: [u32; 2],
    /// Their plain labels.
    pub labels: [String; 2],
    /// Where, in the coordinate's unit.
    pub at: Number,
    /// Energy in eV at which they cross.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub energy: Option<Number>,
    /// Smallest distance in eV of two lines that avoid each other.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub gap: Option<Number>,
    /// Share of character that lines of an avoided crossing exchange, 0 to 1.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub exchange: Option<Number>,
    /// Whether the ground configuration is another one behind it: the highest
    /// occupied and the lowest empty line cross.
    #[serde(default)]
    pub changes_configuration: bool,
}

/// One orbital character followed from point to point: the other view of the lines.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct FollowedRecord {
    /// The line that has it at the first point.
    pub id: u32,
    /// The line (energy order within its irrep) that has it, one per point.
    pub lines: Vec<u32>,
    /// What this rests on.
    pub certificate: Certificate,
}

/// How crossings were looked for.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct CrossingSearch {
    /// Spacing in the coordinate's unit: crossings of one pair of lines that
    /// are farther apart are all found, whatever the step of the sweep.
    pub spacing: Number,
    /// Avoided crossings are listed up to this gap, in eV.
    pub largest_gap: Number,
    /// Avoided crossings are listed from this exchange of character on.
    pub smallest_exchange: Number,
}

/// Kind of a meeting.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum CrossingKind {
    /// Lines of different irreps meet.
    Crossing,
    /// Lines of the same irrep repel.
    Avoided,
    /// Lines become one degenerate set at a point of higher symmetry.
    Touching,
}

/// Where the sum is lowest.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct SumMinimum {
    /// Where, in the coordinate's unit.
    pub at: Number,
    /// The sum there, in eV.
    pub sum: Number,
    /// Whether it lies inside the range rather than at one of its ends.
    pub inside: bool,
}
