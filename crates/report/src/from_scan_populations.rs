//! Coefficients, shares, charges and overlap populations of one point.

use orbend_scan::{Orbitals, Populations, SweepPlan};

use crate::document::{
    AtomCharge, BasisFunction, NotFinite, Number, OverlapPopulation, Point, ShellPopulation,
};

/// Coefficients and shell populations of every level of a point that has lines.
pub(crate) fn describe_orbitals(
    plan: &SweepPlan,
    orbitals: &Orbitals,
    point: &mut Point,
) -> Result<Populations, NotFinite> {
    let mut occupations = vec![0.0; plan.lines().len()];
    for level in &point.levels {
        let Some(line) = level.line else { continue };
        occupations[line as usize] = level.occupation.get();
    }
    let populations = orbitals.populations(plan.basis(), &occupations);
    for level in &mut point.levels {
        let Some(line) = level.line else { continue };
        let row = orbitals.coefficients.row(line as usize);
        level.coefficients = Some(
            row.iter()
                .map(|&c| Number::new(c))
                .collect::<Result<_, _>>()?,
        );
        level.populations = Some(shell_populations(plan, &populations, line as usize)?);
    }
    Ok(populations)
}

/// The functions of the basis, in the order of the coefficients.
pub(crate) fn basis_functions(plan: &SweepPlan) -> Vec<BasisFunction> {
    let basis = plan.basis();
    basis
        .functions
        .iter()
        .map(|function| BasisFunction {
            atom: function.atom as u32 + 1,
            shell: shell_name(function.n, function.l),
            function: orbend_overlap::harmonics::function_name(function.l, function.index)
                .to_owned(),
        })
        .collect()
}

fn shell_name(n: u8, l: u8) -> String {
    orbend_hamiltonian::ShellName { n, l }.to_string()
}

fn shell_populations(
    plan: &SweepPlan,
    populations: &Populations,
    line: usize,
) -> Result<Vec<ShellPopulation>, NotFinite> {
    let elements = &plan.molecule().elements;
    plan.basis()
        .shells
        .iter()
        .zip(populations.shares.row(line))
        .map(|(shell, &share)| {
            Ok(ShellPopulation {
                atom: shell.atom as u32 + 1,
                element: elements[shell.atom].symbol().to_owned(),
                shell: shell_name(shell.n, shell.l),
                share: Number::new(share)?,
                lowdin: None,
            })
        })
        .collect()
}

pub(crate) fn charges(
    plan: &SweepPlan,
    populations: &Populations,
) -> Result<Vec<AtomCharge>, NotFinite> {
    plan.molecule()
        .elements
        .iter()
        .zip(&populations.charges)
        .zip(1..)
        .map(|((element, &charge), atom)| {
            Ok(AtomCharge {
                atom,
                element: element.symbol().to_owned(),
                charge: Number::new(charge)?,
                lowdin: None,
            })
        })
        .collect()
}

pub(crate) fn overlap_populations(
    populations: &Populations,
) -> Result<Vec<OverlapPopulation>, NotFinite> {
    let atoms = populations.pairs.nrows();
    let mut records = Vec::new();
    for first in 0..atoms {
        for second in first + 1..atoms {
            records.push(OverlapPopulation {
                atoms: [first as u32 + 1, second as u32 + 1],
                population: Number::new(populations.pairs[[first, second]])?,
            });
        }
    }
    Ok(records)
}
