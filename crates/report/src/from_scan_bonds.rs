//! Bonds, tags and charges of a point, as records.

use orbend_scan::{Orbitals, Populations, Sweep, SweepPlan};

use crate::document::{Number, OverlapPopulation, Point, SweepDocument};
use crate::from_scan::FromScanError;
use crate::from_scan_populations::{charges, describe_orbitals, overlap_populations};

/// Overlap populations of a level smaller than this are left out.
const SMALLEST: f64 = 1e-3;

/// Charges and overlap populations of a point that has lines, and bonds and tags of its levels.
pub(crate) fn describe_bonds(
    plan: &SweepPlan,
    orbitals: &Orbitals,
    populations: &Populations,
    point: &mut Point,
) -> Result<(), FromScanError> {
    let mut occupations = vec![0.0; plan.lines().len()];
    for level in &point.levels {
        if let Some(line) = level.line {
            occupations[line as usize] = level.occupation.get();
        }
    }
    let at: Vec<f64> = point.at.iter().map(|value| value.get()).collect();
    let characters = plan.characters(&at, orbitals, &occupations)?;
    let mut records = charges(plan, populations)?;
    for (record, &charge) in records.iter_mut().zip(&characters.lowdin_charges) {
        record.lowdin = Some(Number::new(charge)?);
    }
    point.charges = Some(records);
    point.overlap_populations = Some(overlap_populations(populations)?);
    for level in &mut point.levels {
        let Some(line) = level.line else { continue };
        let shares = characters.lowdin_shares.row(line as usize);
        for (population, &share) in level.populations.iter_mut().flatten().zip(shares) {
            population.lowdin = Some(Number::new(share)?);
        }
        let character = &characters.lines[line as usize];
        level.tags = Some(character.tags.clone());
        let bonds = character
            .bonds
            .iter()
            .filter(|bond| bond.population.abs() >= SMALLEST)
            .map(|bond| {
                Ok(OverlapPopulation {
                    atoms: bond.atoms.map(|atom| atom as u32 + 1),
                    population: Number::new(bond.population)?,
                })
            })
            .collect::<Result<_, FromScanError>>()?;
        level.bonds = Some(bonds);
    }
    Ok(())
}

/// Adds charges, overlap populations, shares, bonds and tags to every point of a sweep along one
/// coordinate.
///
/// # Errors
/// A point that cannot be read back.
pub fn add_populations(sweep: &Sweep, document: &mut SweepDocument) -> Result<(), FromScanError> {
    let plan = sweep.plan();
    for (index, point) in document.points.iter_mut().enumerate() {
        let orbitals = sweep.orbitals(index)?;
        let populations = describe_orbitals(plan, &orbitals, point)?;
        describe_bonds(plan, &orbitals, &populations, point)?;
        for level in &mut point.levels {
            level.coefficients = None;
        }
    }
    Ok(())
}
