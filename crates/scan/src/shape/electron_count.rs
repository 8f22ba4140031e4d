//! The electron-count rule, as a named reference.

use super::arguments::Favour;

/// What the number of valence electrons says (Walsh, J. Chem. Soc. 1953, 2260, 2266, 2288, 2296,
/// 2301): AH2 up to 4 linear, 5 to 8 bent; HAB up to 10 linear, 11 to 14 bent, 16 linear; AB2 up to
/// 16 linear, 17 to 20 bent, 22 linear; AH3 up to 6 planar, 7 and 8 pyramidal (7 near planar); AB3
/// up to 24 planar, 25 and 26 pyramidal. Silent elsewhere. It is shown, and never decides.
pub fn electron_count_rule(ligands: usize, hydrogens: usize, electrons: u32) -> Favour {
    let (symmetric, distorted): (&[std::ops::RangeInclusive<u32>], _) = match (ligands, hydrogens) {
        (2, 2) => (&[0..=4], 5..=8),
        (2, 1) => (&[0..=10, 16..=16], 11..=14),
        (2, 0) => (&[0..=16, 22..=22], 17..=20),
        (3, 3) => (&[0..=6], 7..=8),
        (3, 0) => (&[0..=24], 25..=26),
        _ => return Favour::Silent,
    };
    if distorted.contains(&electrons) {
        Favour::Distorted
    } else if symmetric.iter().any(|range| range.contains(&electrons)) {
        Favour::Symmetric
    } else {
        Favour::Silent
    }
}
