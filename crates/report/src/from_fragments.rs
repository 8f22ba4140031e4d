//! From a fragment analysis to its record.

use orbend_scan::SweepPlan;
use orbend_scan::reasons::FragmentAnalysis;

use crate::document::{
    FragmentLevelRecord, FragmentOrbitalRecord, FragmentPairRecord, FragmentRecord,
    FragmentsRecord, NotFinite, Number,
};

/// The record of one geometry.
///
/// # Errors
/// A value that is not finite.
pub fn fragments_record(
    plan: &SweepPlan,
    analysis: &FragmentAnalysis,
) -> Result<FragmentsRecord, NotFinite> {
    let fragments = analysis
        .fragments
        .iter()
        .zip('A'..)
        .map(|(one, letter)| FragmentRecord {
            name: letter.to_string(),
            atoms: one.fragment.atoms.iter().map(|&a| a as u32 + 1).collect(),
            charge: one.fragment.charge,
            formula: one.formula.clone(),
            point_group: one.group.clone(),
        })
        .collect();
    let orbitals = analysis
        .orbitals
        .iter()
        .map(|one| {
            Ok(FragmentOrbitalRecord {
                fragment: one.fragment as u32,
                label: one.name.plain.clone(),
                valence_label: one.name.valence_plain.clone(),
                degeneracy: one.degeneracy as u32,
                energy: Number::new(one.energy)?,
                electrons: Number::new(one.electrons)?,
                population: Number::new(one.population)?,
            })
        })
        .collect::<Result<_, NotFinite>>()?;
    let levels = analysis
        .lines
        .iter()
        .map(|one| {
            let name = &plan.lines()[one.lines[0]].name;
            Ok(FragmentLevelRecord {
                label: name.plain.clone(),
                valence_label: name.valence_plain.clone(),
                degeneracy: one.lines.len() as u32,
                energy: Number::new(one.energy)?,
                electrons: Number::new(one.electrons)?,
                shares: one
                    .shares
                    .iter()
                    .map(|&share| Number::new(share))
                    .collect::<Result<_, _>>()?,
            })
        })
        .collect::<Result<_, NotFinite>>()?;
    let pairs = analysis
        .pairs
        .iter()
        .map(|one| {
            Ok(FragmentPairRecord {
                orbitals: [one.orbitals.0 as u32, one.orbitals.1 as u32],
                overlap: Number::new(one.overlap)?,
                coupling: Number::new(one.coupling)?,
                energy: Number::new(one.energy)?,
                population: Number::new(one.population)?,
            })
        })
        .collect::<Result<_, NotFinite>>()?;
    Ok(FragmentsRecord {
        fragments,
        orbitals,
        levels,
        pairs,
    })
}
