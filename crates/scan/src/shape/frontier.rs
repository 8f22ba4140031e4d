//! The frontier argument: what the highest occupied line that responds to the motion does.

use orbend_structure::Molecule;

use crate::error::ScanError;
use crate::plan::SweepPlan;

use super::arguments::{Favour, at_distortion};
use super::centre::Centre;
use super::engine::Engine;
use super::motion::{Beyond, Motion};
use super::rule::RESPONSE_EV;

/// The frontier line and its change. A line within [`RESPONSE_EV`] of its energy in the symmetric
/// form at the reference distortion does not respond and is passed over: a flat lone pair
/// perpendicular to the plane says nothing about the bending.
#[derive(Clone, Debug, PartialEq)]
pub struct FrontierArgument {
    /// What it speaks for: distorted where the line falls.
    pub favours: Favour,
    /// Index of the line in the plan's lines.
    pub line: Option<usize>,
    /// Plain label, core orbitals counted.
    pub label: String,
    /// Electrons in the line's set.
    pub electrons: f64,
    /// Change of one orbital's energy from the symmetric form to the reference distortion, eV.
    pub change: f64,
    /// All occupied sets by falling energy: label, electrons, change (eV).
    pub lines: Vec<(String, f64, f64)>,
}

/// Works it out from the polarised sum's lines, occupied as at the first distorted point.
pub(crate) fn frontier(
    plan: &SweepPlan,
    centre: &Centre,
    motion: Motion,
) -> Result<FrontierArgument, ScanError> {
    let first = motion.grid(true)[1];
    let positions = [0.0, first, motion.reference()]
        .into_iter()
        .map(|distortion| at_distortion(plan, centre, motion, distortion))
        .collect::<Result<Vec<_>, _>>()?;
    let energies = Engine::new(plan).line_energies(&positions);
    let at_first: Vec<f64> = energies.iter().map(|line| line[1]).collect();
    let mut order: Vec<usize> = (0..energies.len()).collect();
    order.sort_by(|&a, &b| {
        at_first[a]
            .total_cmp(&at_first[b])
            .then(energies[a][2].total_cmp(&energies[b][2]))
            .then(a.cmp(&b))
    });
    let mut filled = vec![0.0; energies.len()];
    plan.filling.fill(&order, &at_first, &mut filled);
    let mut lines: Vec<(usize, String, f64, f64)> = Vec::new();
    for &line in order.iter().rev() {
        if filled[line] < 1e-9 {
            continue;
        }
        let head = &plan.lines[line];
        if let Some(set) = lines
            .iter_mut()
            .find(|set| plan.lines[set.0].slot == head.slot)
        {
            set.2 += filled[line];
        } else {
            lines.push((
                line,
                head.name.plain.clone(),
                filled[line],
                energies[line][2] - energies[line][0],
            ));
        }
    }
    let found = lines.iter().find(|set| set.3.abs() > RESPONSE_EV).cloned();
    let (favours, line, label, electrons, change) = match found {
        None => (Favour::Silent, None, String::new(), 0.0, 0.0),
        Some((line, label, electrons, change)) => {
            let favours = match (change < 0.0, motion.beyond()) {
                (true, Beyond::Start) => Favour::Distorted,
                (true, _) => Favour::Opposite,
                (false, _) => Favour::Symmetric,
            };
            (favours, Some(line), label, electrons, change)
        }
    };
    let lines = lines
        .into_iter()
        .map(|(_, label, electrons, change)| (label, electrons, change))
        .collect();
    Ok(FrontierArgument {
        favours,
        line,
        label,
        electrons,
        change,
        lines,
    })
}

/// Whether every ligand is a hydrogen.
pub(crate) fn all_hydrogen(molecule: &Molecule, centre: &Centre) -> bool {
    centre
        .ligands
        .iter()
        .all(|&ligand| molecule.elements[ligand].number() == 1)
}
