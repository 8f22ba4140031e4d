//! The keys that every document has.

use schemars::JsonSchema;
use serde::{Deserialize, Serialize};

use super::number::Number;

/// The program that wrote the document.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Program {
    /// Name of the program.
    pub name: String,
    /// Its version, as in `--version`.
    pub version: String,
}

impl Program {
    /// This program at this version.
    #[must_use]
    pub fn this() -> Self {
        Self {
            name: "orbend".to_owned(),
            version: env!("CARGO_PKG_VERSION").to_owned(),
        }
    }
}

/// The units of every value in the document (exponents ζ are in bohr⁻¹ throughout).
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize, JsonSchema)]
pub struct Units {
    /// Unit of every energy: `eV`.
    pub energy: String,
    /// Unit of every length and position: `angstrom`.
    pub length: String,
    /// Unit of every angle: `degree`.
    pub angle: String,
}

impl Default for Units {
    fn default() -> Self {
        Self {
            energy: "eV".to_owned(),
            length: "angstrom".to_owned(),
            angle: "degree".to_owned(),
        }
    }
}

/// The molecule as it was understood.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct MoleculeRecord {
    /// Formula in Hill order.
    pub formula: String,
    /// Element symbols, in the order of the input.
    pub elements: Vec<String>,
    /// Total charge in units of the elementary charge.
    pub charge: i32,
    /// Number of unpaired electrons.
    pub unpaired: u32,
    /// Electrons in the valence levels.
    pub valence_electrons: u32,
    /// Core orbitals that are counted in `label` but are not in the basis.
    pub core_orbitals: u32,
    /// Title or comment line of the input; empty where there is none.
    #[serde(default)]
    pub title: String,
    /// The input geometry, atoms counted from 1.
    #[serde(default)]
    pub positions: Vec<AtomPosition>,
    /// How the input geometry came about.
    #[serde(default)]
    pub geometry: Geometry,
}

/// One atom of the input geometry.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct AtomPosition {
    /// Number of the atom, counted from 1 in the order of the input.
    pub atom: u32,
    /// Element symbol.
    pub element: String,
    /// Cartesian position in Å.
    pub at: [Number; 3],
}

/// How the input geometry came about.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Geometry {
    /// `file`, `standard input`, `formula` or `program`.
    pub origin: String,
    /// What was done, in words (file name, shape class, what the comment line was understood to say).
    #[serde(default)]
    pub notes: Vec<String>,
    /// Bond lengths that an ideal geometry was built with.
    #[serde(default)]
    pub bonds: Vec<BondLength>,
}

/// A bond length that an ideal geometry was built with.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct BondLength {
    /// The two atoms, counted from 1.
    pub atoms: [u32; 2],
    /// Their elements.
    pub elements: [String; 2],
    /// Length in Å.
    pub length: Number,
    /// Where the length comes from.
    pub source: String,
}

/// The method and every parameter value that was used.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Method {
    /// Name of the parameter set.
    pub parameter_set: String,
    /// SHA-256 over the canonical values of the set, `sha256:` and 64 hexadecimal digits.
    pub fingerprint: String,
    /// Wolfsberg–Helmholz form: `constant`, `weighted` or another published one by name.
    pub coupling: String,
    /// Wolfsberg–Helmholz constant K (no unit).
    pub k: Number,
    /// Whether hydrogen carries a 2p shell.
    #[serde(default)]
    pub polarised_hydrogen: bool,
    /// Which numbering the labels of text and figures show first: `core` or `valence`.
    #[serde(default = "core_numbering")]
    pub numbering: String,
    /// Further choices in words.
    #[serde(default)]
    pub notes: Vec<String>,
    /// Every value that was used.
    pub values: Vec<ShellValues>,
}

fn core_numbering() -> String {
    "core".to_owned()
}

/// The values of one shell of one element.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct ShellValues {
    /// Element symbol.
    pub element: String,
    /// Shell, as in `3s`.
    pub shell: String,
    /// Diagonal element Hᵢᵢ in eV.
    pub hii: Number,
    /// Slater exponents: pairs of exponent ζ in bohr⁻¹ and coefficient.
    pub zeta: Vec<[Number; 2]>,
    /// Publication the values are from.
    pub source: String,
    /// Whether the printed page was seen.
    pub checked: Checked,
}

/// How a published value was checked.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum Checked {
    /// The printed source was seen.
    Page,
    /// The value was recalled.
    Memory,
}

/// One function of the basis, in the order of `coefficients`.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct BasisFunction {
    /// Atom, counted from 1.
    pub atom: u32,
    /// Shell, as in `3p`.
    pub shell: String,
    /// Function within the shell, as in `z` or `x2-y2`; empty for s.
    pub function: String,
}

/// Something the reader ought to know.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize, JsonSchema)]
pub struct Warning {
    /// Stable word for scripts, as in `near-singular-overlap`.
    pub code: String,
    /// The same for a person.
    pub text: String,
}

/// Why a value is `null`.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize, JsonSchema)]
pub struct Missing {
    /// Where: a JSON pointer (RFC 6901) into the document.
    pub path: String,
    /// Why.
    pub reason: String,
}
