//! What a line is made of, at one geometry.

use orbend_structure::BondGraph;

use crate::error::ScanError;
use crate::sweep::Sweep;

/// An overlap population (for one electron in the line, over all bonds) beyond this makes a line
/// bonding or antibonding.
pub(crate) const BONDING: f64 = 0.05;

/// Shares of the shells, and whether the line holds the bonds.
#[derive(Clone, Debug, PartialEq)]
pub struct Makeup {
    /// Mulliken's gross population of the shells of like atoms for one electron, largest first:
    /// (`N 2p`, 0.56).
    pub shares: Vec<(String, f64)>,
    /// Mulliken's overlap population over all bonds for one electron in the line.
    pub bonding: f64,
}

impl Makeup {
    /// `bonding`, `antibonding` or `non-bonding`.
    pub fn word(&self) -> &'static str {
        if self.bonding > BONDING {
            "bonding"
        } else if self.bonding < -BONDING {
            "antibonding"
        } else {
            "non-bonding"
        }
    }
}

/// Of every line at a point of a sweep; partners of a degenerate set are averaged.
pub(crate) fn makeups(sweep: &Sweep, point: usize) -> Result<Vec<Makeup>, ScanError> {
    let plan = sweep.plan();
    let basis = &plan.basis;
    let orbitals = sweep.orbitals(point)?;
    let positions = plan.path.molecule(&plan.path.values(point))?;
    let bonds = BondGraph::new(&positions).bonds();
    let weighted = orbitals.coefficients.dot(&orbitals.overlap);
    let names: Vec<String> = basis
        .functions
        .iter()
        .map(|function| {
            let element = basis.atoms[function.atom].element.symbol();
            let letter = ["s", "p", "d", "f"][usize::from(function.l.min(3))];
            format!("{element} {}{letter}", function.n)
        })
        .collect();
    let one = |line: usize| -> (Vec<(String, f64)>, f64) {
        let mut shares: Vec<(String, f64)> = Vec::new();
        for (index, name) in names.iter().enumerate() {
            let share = orbitals.coefficients[[line, index]] * weighted[[line, index]];
            match shares.iter_mut().find(|(known, _)| known == name) {
                Some((_, sum)) => *sum += share,
                None => shares.push((name.clone(), share)),
            }
        }
        let mut bonding = 0.0;
        for &(a, b) in &bonds {
            for i in basis.atoms[a].functions.clone() {
                for j in basis.atoms[b].functions.clone() {
                    bonding += 2.0
                        * orbitals.coefficients[[line, i]]
                        * orbitals.coefficients[[line, j]]
                        * orbitals.overlap[[i, j]];
                }
            }
        }
        (shares, bonding)
    };
    let all: Vec<(Vec<(String, f64)>, f64)> = (0..plan.lines.len()).map(one).collect();
    Ok(plan
        .lines
        .iter()
        .map(|head| {
            let partners: Vec<usize> = (0..plan.lines.len())
                .filter(|&other| plan.lines[other].name == head.name)
                .collect();
            let size = partners.len() as f64;
            let mut shares = all[partners[0]].0.clone();
            for (index, share) in shares.iter_mut().enumerate() {
                share.1 = partners.iter().map(|&p| all[p].0[index].1).sum::<f64>() / size;
            }
            shares.sort_by(|a, b| b.1.total_cmp(&a.1));
            Makeup {
                shares,
                bonding: partners.iter().map(|&p| all[p].1).sum::<f64>() / size,
            }
        })
        .collect())
}
