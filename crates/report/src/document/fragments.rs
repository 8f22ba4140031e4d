//! A molecule as fragments, as part of a document.

use schemars::JsonSchema;
use serde::{Deserialize, Serialize};

use super::number::Number;

/// A molecule as fragments at one geometry.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct FragmentsRecord {
    /// The fragments.
    pub fragments: Vec<FragmentRecord>,
    /// Their orbitals, fragment by fragment, by rising energy; sets once.
    pub orbitals: Vec<FragmentOrbitalRecord>,
    /// The molecule's levels, by rising energy; sets once.
    pub levels: Vec<FragmentLevelRecord>,
    /// Pairs of orbitals of two fragments, the one that gains most first.
    pub pairs: Vec<FragmentPairRecord>,
}

/// One fragment.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize, JsonSchema)]
pub struct FragmentRecord {
    /// Its letter in text and figures: `A`, `B` …
    pub name: String,
    /// Its atoms, counted from 1.
    pub atoms: Vec<u32>,
    /// Its charge, for the electrons of its own orbitals.
    pub charge: i32,
    /// Formula in Hill order.
    pub formula: String,
    /// Its own point group, plain.
    pub point_group: String,
}

/// A level of a fragment alone.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct FragmentOrbitalRecord {
    /// Index of the fragment, from 0.
    pub fragment: u32,
    /// Plain label in the fragment's own group, core orbitals counted.
    pub label: String,
    /// The same without core orbitals.
    pub valence_label: String,
    /// Orbitals of the set.
    pub degeneracy: u32,
    /// Energy in the fragment alone, eV.
    pub energy: Number,
    /// Electrons of the set in the fragment alone.
    pub electrons: Number,
    /// Electrons of the set in the molecule (Mulliken, in the basis of fragment orbitals).
    pub population: Number,
}

/// A level of the molecule in fragment orbitals.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct FragmentLevelRecord {
    /// Plain label in the path group, core orbitals counted.
    pub label: String,
    /// The same without core orbitals.
    pub valence_label: String,
    /// Orbitals of the set.
    pub degeneracy: u32,
    /// Energy, eV.
    pub energy: Number,
    /// Electrons of the set.
    pub electrons: Number,
    /// Share of every fragment orbital for one electron, in the order of `orbitals`; they add up to 1.
    pub shares: Vec<Number>,
}

/// Two orbitals of two fragments.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct FragmentPairRecord {
    /// Indices in `orbitals`, from 0.
    pub orbitals: [u32; 2],
    /// Overlap (no unit; root mean square over partners of sets).
    pub overlap: Number,
    /// Coupling in eV, with the sign that belongs to a positive overlap.
    pub coupling: Number,
    /// What the two alone would gain (negative) or lose, eV.
    pub energy: Number,
    /// Overlap population between them in the molecule, electrons.
    pub population: Number,
}
