//! Distortions of one geometry, as part of a document.

use schemars::JsonSchema;
use serde::{Deserialize, Serialize};

use super::number::Number;

/// Which vibrations a geometry gives in to.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct DistortionsRecord {
    /// Index of the start geometry of a plan, from 0; left out for a single geometry.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub start: Option<u32>,
    /// The geometry's own group, plain.
    pub group: String,
    /// All vibrations by irrep, as in `a1' + a2'' + 2e'`.
    pub vibrations: String,
    /// Vibrations that were tried, those along which the sum falls first; empty where neither a partly
    /// filled degenerate level nor a pair of levels couples to one.
    pub hints: Vec<HintRecord>,
}

/// A vibration that may lower the sum.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct HintRecord {
    /// `first` (a partly filled degenerate level splits), `linear-splitting` (one of a linear molecule,
    /// in second order) or `second` (a filled and an empty level mix).
    pub order: String,
    /// Irrep of the vibration, plain.
    pub irrep: String,
    /// The same in Unicode.
    pub display: String,
    /// Plain labels of the partly filled level, or of the filled and the empty one.
    pub labels: Vec<String>,
    /// Electrons in the first of them.
    pub electrons: Number,
    /// Largest slope, or coupling, in eV/Å.
    pub coupling: Number,
    /// Distance of the two levels in eV.
    pub gap: Option<Number>,
    /// coupling²/gap in eV/Å².
    pub strength: Option<Number>,
    /// Whether the displacement keeps the bond lengths.
    pub keeps_lengths: bool,
    /// The displacement: a vector per atom, of length 1 over all atoms (no unit).
    pub displacement: Vec<[Number; 3]>,
    /// A short sweep along it.
    pub trial: TrialRecord,
}

/// A short sweep along a displacement.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct TrialRecord {
    /// `sum`, `polarised-sum` (hydrogen with a 2p shell), or one of them `+ pair repulsion`.
    pub name: String,
    /// Amplitudes in Å over all atoms.
    pub amplitudes: Vec<Number>,
    /// The sum relative to the undisplaced geometry, eV.
    pub changes: Vec<Number>,
    /// Whether it falls by more than 0.025 eV where a level splits, 0.1 eV where two levels mix.
    pub falls: bool,
    /// Point group of the displaced geometry, plain.
    pub group: String,
}
