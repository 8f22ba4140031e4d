//! Why a line moves: the slope ledger of a sweep's document.

use schemars::JsonSchema;
use serde::{Deserialize, Serialize};

use super::number::Number;

/// Why one line rises or falls: its slope split over pairs of shells, and its change between two
/// points split into first-order terms and mixing. The parts add up.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct WhyRecord {
    /// The `id` of the line (the first of a degenerate set).
    pub line: u32,
    /// Its plain label in the path group, core orbitals counted.
    pub label: String,
    /// The same, valence levels counted only.
    pub valence_label: String,
    /// First coordinate value of the change.
    pub from: Number,
    /// Last coordinate value of the change.
    pub to: Number,
    /// Energies there in eV.
    pub energies: [Number; 2],
    /// The second energy minus the first, in eV.
    pub change: Number,
    /// What the orbital would change by if it were held as it is at `from`, in eV: the sum of
    /// 2 cᵢcⱼ (ΔHᵢⱼ − ε ΔSᵢⱼ)/c†S′c over functions i, j of two atoms that move with their atoms and
    /// turn with the bonds of their atoms.
    pub first_order_sum: Number,
    /// Its parts by pairs of shells, the largest first.
    pub first_order: Vec<PairTerm>,
    /// What mixing with each other line of the irrep gives, to all orders.
    pub mixing: Vec<MixingTerm>,
    /// Squared overlap of the line at `to` with itself carried along from `from`, 0 to 1.
    pub kept: Number,
    /// dε/dq in eV per unit of the coordinate at every point of the sweep; null where the
    /// positions have no finite derivative.
    pub slopes: Vec<Option<Number>>,
    /// The slope at `from` and at `to`, split; left out where there is none.
    pub slope_terms: Vec<SlopeRecord>,
    /// The change in words.
    pub text: String,
}

/// dε/dq of a line at one value, split over pairs of shells.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct SlopeRecord {
    /// The coordinate value.
    pub at: Number,
    /// dε/dq in eV per unit of the coordinate.
    pub slope: Number,
    /// Its parts, 2 cᵢcⱼ (∂Hᵢⱼ − ε ∂Sᵢⱼ) summed over the functions of two shells, the largest first.
    pub terms: Vec<PairTerm>,
}

/// The part of pairs of shells that symmetry makes equivalent.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct PairTerm {
    /// The pairs of atoms, counted from 1.
    pub atoms: Vec<[u32; 2]>,
    /// The two shells on the atoms of the first pair, as in `3p`.
    pub shells: [String; 2],
    /// Elements and shells, as in `S 3p–H 1s`.
    pub name: String,
    /// Their part, in eV (of a change) or eV per unit (of a slope).
    pub value: Number,
    /// Overlap population for one electron in the orbital as it is at the start.
    pub overlap_before: Number,
    /// The same with the coefficients held and the atoms moved; that of the start for a slope.
    pub overlap_after: Number,
}

/// The part of a change that mixing with one other line gives.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct MixingTerm {
    /// The `id` of the other line (the first of a degenerate set).
    pub line: u32,
    /// Its plain label, core orbitals counted.
    pub label: String,
    /// The same, valence levels counted only.
    pub valence_label: String,
    /// The element and shell it is mostly made of at `from`, as in `S 3s`.
    pub mostly: String,
    /// Its part in eV.
    pub value: Number,
}
