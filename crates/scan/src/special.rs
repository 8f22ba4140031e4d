//! Points whose own group is larger than the path group, and the names that
//! the lines have there.

use orbend_eigen::Workspace as EigenWorkspace;
use orbend_symmetry::{AdaptedBasis, Descent, PointGroup, find, symmetrize};

use crate::error::ScanError;
use crate::naming::Name;
use crate::plan::{SweepPlan, nuclei};

/// The own group of a point and each line's name in it.
#[derive(Clone, Debug, PartialEq)]
pub struct SpecialPoint {
    /// Schoenflies symbol, plain.
    pub group: String,
    /// Per line: its name in that group and the size of its degenerate set.
    pub names: Vec<(Name, usize)>,
}

/// A level of the point's own group.
struct OwnLevel {
    energy: f64,
    irrep: usize,
    name: Name,
}

/// Names of all lines in the own group of a point; `None` where that group is
/// the path group after all.
///
/// Both groups order their levels by energy within an irrep, so the descent
/// from the one to the other says which level is which line: the k-th line of
/// an irrep of the path group is the k-th level that contains this irrep.
pub(crate) fn label_in_own_group(
    plan: &SweepPlan,
    point: usize,
) -> Result<Option<SpecialPoint>, ScanError> {
    let values = plan.values(point);
    let mut positions = vec![[0.0; 3]; plan.molecule.positions.len()];
    plan.path.positions(&values, &mut positions)?;
    let places = nuclei(&plan.molecule.elements, &positions);
    let own = find(&places, plan.request.tolerance.0)?.group;
    if own.name == plan.group.name {
        return Ok(None);
    }
    let (places, _) = symmetrize(&places, &own);
    let positions: Vec<[f64; 3]> = places.iter().map(|nucleus| nucleus.position).collect();
    let levels = own_levels(plan, &own, &positions, &values)?;
    let descent = Descent::between(&own, &plan.group)?;
    let mut by_irrep: Vec<Vec<usize>> = vec![Vec::new(); plan.group.irreps.len()];
    for (index, level) in levels.iter().enumerate() {
        for &(irrep, times) in &descent.content[level.irrep] {
            by_irrep[irrep].extend(std::iter::repeat_n(index, times));
        }
    }
    let names = plan
        .lines
        .iter()
        .map(|line| {
            let level = by_irrep[line.irrep]
                .get(line.position)
                .map(|&index| &levels[index]);
            match level {
                Some(level) => Ok((level.name.clone(), own.irreps[level.irrep].dimension)),
                None => Err(ScanError::Eigen {
                    at: plan.path.place(&values),
                    cause: format!("{} does not follow from {}", line.name.plain, own.name),
                }),
            }
        })
        .collect::<Result<_, _>>()?;
    Ok(Some(SpecialPoint {
        group: own.name,
        names,
    }))
}

/// Levels of the own group by rising energy, sets once.
fn own_levels(
    plan: &SweepPlan,
    own: &PointGroup,
    positions: &[[f64; 3]],
    values: &[f64],
) -> Result<Vec<OwnLevel>, ScanError> {
    let n = plan.basis.functions.len();
    let mut overlap = vec![0.0; n * n];
    let mut hamiltonian = vec![0.0; n * n];
    plan.hamiltonian
        .fill(positions, &mut overlap, &mut hamiltonian);
    let core = own.count(&plan.core_shells)?;
    let adapted: AdaptedBasis = own.adapt(&plan.shells)?;
    let mut levels = Vec::new();
    for (index, block) in adapted.blocks.iter().enumerate() {
        let m = block.size();
        let mut s = vec![0.0; m * m];
        let mut h = vec![0.0; m * m];
        block.transform(n, &overlap, &mut s);
        block.transform(n, &hamiltonian, &mut h);
        let mut room = EigenWorkspace::new(m);
        room.solve(&h, &s)
            .map_err(|error| plan.explain(&adapted, index, error, values))?;
        let irrep = &own.irreps[block.irrep];
        let step = if block.paired { irrep.dimension } else { 1 };
        for (position, &energy) in room.values().iter().step_by(step).enumerate() {
            levels.push(OwnLevel {
                energy,
                irrep: block.irrep,
                name: Name::new(irrep, position, core[block.irrep]),
            });
        }
    }
    levels.sort_by(|a, b| a.energy.total_cmp(&b.energy).then(a.irrep.cmp(&b.irrep)));
    Ok(levels)
}
