//! The lines of a sweep set by set, with their electrons at every point.

use orbend_symmetry::{Nucleus, PointGroup, find};

use crate::error::ScanError;
use crate::naming::Name;
use crate::plan::nuclei;
use crate::sweep::Sweep;

/// One level, or all levels of a degenerate set, along a path.
#[derive(Clone, Debug)]
pub(crate) struct LineSet {
    /// Its lines.
    pub(crate) lines: Vec<usize>,
    /// Index of the irrep in the path group.
    pub(crate) irrep: usize,
    /// Name in the path group.
    pub(crate) name: Name,
    /// Energy at every point, eV.
    pub(crate) energies: Vec<f64>,
    /// Electrons of the whole set at every point.
    pub(crate) electrons: Vec<f64>,
    /// Sets with the same number become one set at a point of higher symmetry.
    pub(crate) family: usize,
}

impl LineSet {
    /// Electrons that the set takes.
    pub(crate) fn capacity(&self) -> f64 {
        2.0 * self.lines.len() as f64
    }

    /// Whether it holds electrons at any point.
    pub(crate) fn ever_occupied(&self) -> bool {
        self.electrons.iter().any(|&e| e > 1e-6)
    }

    /// Whether it is filled at every point.
    pub(crate) fn always_full(&self) -> bool {
        self.electrons.iter().all(|&e| e > self.capacity() - 1e-6)
    }

    /// Mean energy along the path, eV.
    pub(crate) fn mean(&self) -> f64 {
        self.energies.iter().sum::<f64>() / self.energies.len().max(1) as f64
    }
}

/// All sets, by rising energy at the first point.
pub(crate) fn line_sets(sweep: &Sweep) -> Result<Vec<LineSet>, ScanError> {
    let plan = sweep.plan();
    let mut sets: Vec<LineSet> = Vec::new();
    let mut set_of = vec![0; plan.lines.len()];
    for (line, head) in plan.lines.iter().enumerate() {
        let found = sets.iter().position(|set| {
            set.irrep == head.irrep && set.name == head.name && head.degeneracy > 1
        });
        set_of[line] = found.unwrap_or(sets.len());
        match found {
            Some(set) => sets[set].lines.push(line),
            None => sets.push(LineSet {
                lines: vec![line],
                irrep: head.irrep,
                name: head.name.clone(),
                energies: sweep.line_energies(line),
                electrons: vec![0.0; sweep.points()],
                family: sets.len(),
            }),
        }
    }
    for point in 0..sweep.points() {
        for level in sweep.point(point)?.levels {
            sets[set_of[level.line]].electrons[point] += level.occupation;
        }
    }
    for (_, special) in sweep.special_points() {
        for first in 0..plan.lines.len() {
            for second in first + 1..plan.lines.len() {
                if special.names[first].0 == special.names[second].0 {
                    let (keep, drop) = (sets[set_of[first]].family, sets[set_of[second]].family);
                    for set in &mut sets {
                        if set.family == drop {
                            set.family = keep;
                        }
                    }
                }
            }
        }
    }
    Ok(sets)
}

/// The own group of a point of a sweep, and its positions (Å).
pub(crate) fn own_group(
    sweep: &Sweep,
    point: usize,
) -> Result<(PointGroup, Vec<[f64; 3]>), ScanError> {
    let plan = sweep.plan();
    let molecule = plan.path.molecule(&plan.path.values(point))?;
    let places: Vec<Nucleus> = nuclei(&molecule.elements, &molecule.positions);
    let group = find(&places, plan.request.tolerance.0)?.group;
    Ok((group, molecule.positions))
}
