//! Proposals for an active space that is the same set of orbitals along the whole path.

use orbend_eigen::Workspace;

use crate::character::Character;
use crate::crossing::{Crossing, MeetingKind};
use crate::error::ScanError;
use crate::sweep::Sweep;

use super::sets::LineSet;

/// Spaces with more configuration state functions than this are not proposed: beyond it a
/// complete-active-space calculation is no longer routine.
pub const MOST_FUNCTIONS: f64 = 1.0e6;

/// Which of the spaces it is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SpaceKind {
    /// What cannot be left out: partly filled sets, the frontier at every point, whatever crosses
    /// from filled to empty.
    Least,
    /// All levels above the widest gap among the occupied ones.
    Proposed,
    /// All valence levels.
    FullValence,
}

/// Where a space stops being the same set of orbitals.
#[derive(Clone, Debug, PartialEq)]
pub struct SpaceStop {
    /// Coordinate value.
    pub at: f64,
    /// The active line.
    pub active: usize,
    /// The line outside the space that it exchanges character with.
    pub outside: usize,
    /// Smallest distance of the two, eV.
    pub gap: f64,
    /// Share of character exchanged, 0 to 1.
    pub exchange: f64,
}

/// A set of orbitals with electrons.
#[derive(Clone, Debug, PartialEq)]
pub struct ActiveSpace {
    /// Which one.
    pub kind: SpaceKind,
    /// Electrons in it.
    pub electrons: u32,
    /// Its lines, by rising energy at the first point.
    pub lines: Vec<usize>,
    /// Doubly occupied valence lines below it.
    pub inactive: Vec<usize>,
    /// Configuration state functions for the molecule's unpaired electrons.
    pub functions: f64,
    /// Orbitals of each irrep of the path group that stay doubly occupied, core included.
    pub inactive_counts: Vec<usize>,
    /// Active orbitals of each irrep of the path group.
    pub active_counts: Vec<usize>,
    /// Smallest distance (eV) between the inactive levels and the active ones along the path;
    /// negative where the order changes, none without inactive levels.
    pub separation: Option<f64>,
    /// Values between which an inactive level lies above an active one, if any.
    pub order_changes: Option<(f64, f64)>,
    /// Smallest squared overlap, over all directions in the space, of the spaces at the first and
    /// at the last point: 1 where they are the same.
    pub kept: f64,
    /// Where it stops being the same set of orbitals.
    pub stops: Vec<SpaceStop>,
}

/// Number of configuration state functions of N electrons with total spin S in n orbitals:
/// (2S+1)/(n+1) · C(n+1, N/2−S) · C(n+1, n−N/2−S) (Weyl's dimension formula; Paldus, J. Chem.
/// Phys. 61, 5321 (1974)).
pub fn state_functions(orbitals: u32, electrons: u32, unpaired: u32) -> f64 {
    if unpaired > electrons || electrons + unpaired > 2 * orbitals {
        return 0.0;
    }
    let (n, s) = (orbitals + 1, unpaired);
    let pairs = (electrons - s) / 2;
    let holes = orbitals - (electrons + s) / 2;
    f64::from(s + 1) / f64::from(n) * binomial(n, pairs) * binomial(n, holes)
}

fn binomial(n: u32, k: u32) -> f64 {
    (0..k).fold(1.0, |product, i| {
        product * f64::from(n - i) / f64::from(i + 1)
    })
}

/// The three spaces; a space that is the same as a larger one is left out.
pub(crate) fn spaces(
    sweep: &Sweep,
    sets: &[LineSet],
    crossings: &[Crossing],
) -> Result<Vec<ActiveSpace>, ScanError> {
    let least = least(sweep, sets, crossings);
    let all = vec![true; sets.len()];
    let proposed = proposed(sweep, sets, &least).unwrap_or_else(|| all.clone());
    let mut chosen: Vec<(SpaceKind, Vec<bool>)> = vec![(SpaceKind::Proposed, proposed)];
    if chosen[0].1 != least {
        chosen.insert(0, (SpaceKind::Least, least));
    }
    if chosen.iter().all(|(_, space)| *space != all) {
        chosen.push((SpaceKind::FullValence, all));
    }
    let ends = [
        Character::new(sweep.plan(), &sweep.plan().path.values(0))?,
        Character::new(
            sweep.plan(),
            &sweep.plan().path.values(sweep.points().saturating_sub(1)),
        )?,
    ];
    chosen
        .into_iter()
        .map(|(kind, active)| space(sweep, sets, crossings, kind, &active, &ends))
        .collect()
}

fn least(sweep: &Sweep, sets: &[LineSet], crossings: &[Crossing]) -> Vec<bool> {
    let mut active: Vec<bool> = sets
        .iter()
        .map(|set| set.ever_occupied() && !set.always_full())
        .collect();
    for point in 0..sweep.points() {
        let by_energy = |a: &usize, b: &usize| {
            sets[*a].energies[point]
                .total_cmp(&sets[*b].energies[point])
                .then(a.cmp(b))
        };
        let filled = |set: &usize| sets[*set].electrons[point] > 1e-6;
        let highest = (0..sets.len()).filter(filled).max_by(by_energy);
        let lowest = (0..sets.len()).filter(|set| !filled(set)).min_by(by_energy);
        for set in highest.into_iter().chain(lowest) {
            active[set] = true;
        }
    }
    for crossing in crossings.iter().filter(|c| c.changes_configuration) {
        for (set, active) in sets.iter().zip(&mut active) {
            *active |=
                set.lines.contains(&crossing.lines.0) || set.lines.contains(&crossing.lines.1);
        }
    }
    close(sets, &mut active);
    active
}

/// Sets that are one set at a point of higher symmetry stand together.
fn close(sets: &[LineSet], active: &mut [bool]) {
    for a in 0..sets.len() {
        for b in 0..sets.len() {
            if active[a] && sets[b].family == sets[a].family {
                active[b] = true;
            }
        }
    }
}

/// The space above the widest gap among the occupied levels; empty levels are left out from the
/// top only where it is too large otherwise.
fn proposed(sweep: &Sweep, sets: &[LineSet], least: &[bool]) -> Option<Vec<bool>> {
    let electrons = sweep.plan().electrons();
    let mut order: Vec<usize> = (0..sets.len()).collect();
    order.sort_by(|&a, &b| sets[a].mean().total_cmp(&sets[b].mean()).then(a.cmp(&b)));
    let occupied = order
        .iter()
        .filter(|&&set| sets[set].ever_occupied())
        .count();
    for top in (occupied..=order.len()).rev() {
        let mut best: Option<(f64, Vec<bool>)> = None;
        for bottom in 1..occupied {
            let mut active = vec![false; sets.len()];
            for &set in &order[bottom..top] {
                active[set] = true;
            }
            let whole = {
                let mut closed = active.clone();
                close(sets, &mut closed);
                closed == active
            };
            let contains = least.iter().zip(&active).all(|(l, a)| !l || *a);
            let full = order[..bottom].iter().all(|&set| sets[set].always_full());
            if !(whole && contains && full) {
                continue;
            }
            let lines =
                |wanted: &[usize]| wanted.iter().map(|&s| sets[s].lines.len()).sum::<usize>();
            let inside = electrons.total() - 2 * lines(&order[..bottom]) as u32;
            let orbitals = lines(&order[bottom..top]) as u32;
            if state_functions(orbitals, inside, electrons.unpaired()) > MOST_FUNCTIONS {
                continue;
            }
            let gap = separation(sets, &active, sweep.points()).unwrap_or(0.0);
            if best.as_ref().is_none_or(|(widest, _)| gap > *widest) {
                best = Some((gap, active));
            }
        }
        if let Some((_, active)) = best {
            return Some(active);
        }
        let fits = state_functions(
            sets.iter().map(|set| set.lines.len()).sum::<usize>() as u32,
            electrons.total(),
            electrons.unpaired(),
        ) <= MOST_FUNCTIONS;
        if fits {
            return None;
        }
    }
    Some(least.to_vec())
}

fn separation(sets: &[LineSet], active: &[bool], points: usize) -> Option<f64> {
    (0..points)
        .filter_map(|point| gap_at(sets, active, point))
        .min_by(f64::total_cmp)
}

/// Lowest active level minus highest inactive one.
fn gap_at(sets: &[LineSet], active: &[bool], point: usize) -> Option<f64> {
    let energies = |wanted: bool| {
        sets.iter()
            .zip(active)
            .filter(move |(set, active)| {
                **active == wanted && (wanted || set.electrons[point] > 1e-6)
            })
            .map(move |(set, _)| set.energies[point])
    };
    let below = energies(false).max_by(f64::total_cmp)?;
    let above = energies(true).min_by(f64::total_cmp)?;
    Some(above - below)
}

fn space(
    sweep: &Sweep,
    sets: &[LineSet],
    crossings: &[Crossing],
    kind: SpaceKind,
    active: &[bool],
    ends: &[Character; 2],
) -> Result<ActiveSpace, ScanError> {
    let plan = sweep.plan();
    let lines_of = |wanted: &dyn Fn(usize) -> bool| -> Vec<usize> {
        let mut lines: Vec<usize> = (0..sets.len())
            .filter(|&set| wanted(set))
            .flat_map(|set| sets[set].lines.clone())
            .collect();
        lines.sort_unstable();
        lines
    };
    let lines = lines_of(&|set| active[set]);
    let inactive = lines_of(&|set| !active[set] && sets[set].ever_occupied());
    let irreps = plan.group.irreps.len();
    let count = |wanted: &[usize]| {
        let mut counts = vec![0; irreps];
        for &line in wanted {
            counts[plan.lines[line].irrep] += 1;
        }
        counts
    };
    let mut inactive_counts = count(&inactive);
    for ((sum, core), irrep) in inactive_counts
        .iter_mut()
        .zip(&plan.core_counts)
        .zip(&plan.group.irreps)
    {
        *sum += core * irrep.dimension;
    }
    let electrons = plan
        .electrons()
        .total()
        .saturating_sub(2 * inactive.len() as u32);
    let mixed: Vec<f64> = (0..sweep.points())
        .filter(|&point| gap_at(sets, active, point).is_some_and(|gap| gap < 0.0))
        .filter_map(|point| plan.path.values(point).first().copied())
        .collect();
    let stops = crossings
        .iter()
        .filter(|crossing| crossing.kind == MeetingKind::Avoided)
        .filter_map(|crossing| {
            let (a, b) = crossing.lines;
            let (active, outside) = match (lines.contains(&a), lines.contains(&b)) {
                (true, false) => (a, b),
                (false, true) => (b, a),
                _ => return None,
            };
            Some(SpaceStop {
                at: crossing.at,
                active,
                outside,
                gap: crossing.gap?,
                exchange: crossing.exchange?,
            })
        })
        .collect();
    Ok(ActiveSpace {
        kind,
        electrons,
        functions: state_functions(lines.len() as u32, electrons, plan.electrons().unpaired()),
        active_counts: count(&lines),
        inactive_counts,
        separation: separation(sets, active, sweep.points()),
        order_changes: mixed.first().copied().zip(mixed.last().copied()),
        kept: common(ends, &lines)?,
        lines,
        inactive,
        stops,
    })
}

/// Smallest eigenvalue of OᵀO, O the overlaps of the two spaces.
fn common(ends: &[Character; 2], lines: &[usize]) -> Result<f64, ScanError> {
    let k = lines.len();
    let overlaps: Vec<f64> = lines
        .iter()
        .flat_map(|&a| {
            lines.iter().map(move |&b| {
                ends[0]
                    .of(a)
                    .iter()
                    .zip(ends[1].of(b))
                    .map(|(x, y)| x * y)
                    .sum::<f64>()
            })
        })
        .collect();
    let mut square = vec![0.0; k * k];
    let mut unit = vec![0.0; k * k];
    for i in 0..k {
        unit[i * k + i] = 1.0;
        for j in 0..k {
            square[i * k + j] = (0..k)
                .map(|l| overlaps[l * k + i] * overlaps[l * k + j])
                .sum();
        }
    }
    let mut room = Workspace::new(k);
    room.solve(&square, &unit)
        .map_err(|error| ScanError::Eigen {
            at: "the active space".to_owned(),
            cause: error.to_string(),
        })?;
    Ok(room
        .values()
        .first()
        .copied()
        .unwrap_or(1.0)
        .clamp(0.0, 1.0))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_of_state_functions() {
        // Helgaker, Jørgensen & Olsen, Molecular Electronic-Structure Theory (2000), section 2.6
        // (from memory): two electrons in two orbitals, and benzene's π space (175 singlets).
        assert!((state_functions(2, 2, 0) - 3.0).abs() < 1e-9);
        assert!((state_functions(2, 2, 2) - 1.0).abs() < 1e-9);
        assert!((state_functions(6, 6, 0) - 175.0).abs() < 1e-9);
        assert!((state_functions(6, 6, 2) - 189.0).abs() < 1e-9);
    }
}
