//! Which atom of one geometry is which atom of another.

use super::align::align;
use crate::bonds::BondGraph;
use crate::molecule::Molecule;
use crate::vector::{Vector, distance};

/// Bond-keeping mappings that are compared at most.
const MOST_MAPPINGS: usize = 2000;
/// Search steps after which the comparison of bond graphs is given up.
const MOST_STEPS: usize = 200_000;

/// A matching of atoms.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Matching {
    /// `mapping[i]` is the atom of the second geometry that is atom i.
    pub(crate) mapping: Vec<usize>,
    /// Bonds made or broken on the way.
    pub(crate) changed_bonds: usize,
}

/// Matches atoms by element and bonded environment. The order of the files is
/// kept where it fits the elements and changes no more bonds than the best
/// other mapping; among the others the one with the fewest changed bonds wins,
/// then the one with the smallest change of (weighted) distances, then the
/// one that lies closest after alignment. `None` when the elements differ.
pub(crate) fn match_atoms(from: &Molecule, to: &Molecule) -> Option<Matching> {
    let count = from.len();
    let mut first = from.elements.clone();
    let mut second = to.elements.clone();
    first.sort_unstable();
    second.sort_unstable();
    if first != second {
        return None;
    }
    let search = Search {
        from,
        to,
        bonds_from: BondGraph::new(from),
        bonds_to: BondGraph::new(to),
    };
    let same: Vec<usize> = (0..count).collect();
    let in_order = (from.elements == to.elements).then(|| search.rate(same));
    if let Some(kept) = &in_order
        && kept.0 == 0
    {
        return Some(kept.clone().into());
    }
    let mut best: Option<Rated> = None;
    let mut candidates = search.bond_keeping();
    if candidates.is_empty() {
        candidates.push(search.improved(search.by_surroundings()));
        if in_order.is_some() {
            candidates.push(search.improved((0..count).collect()));
        }
    }
    for candidate in candidates {
        let rated = search.rate(candidate);
        if best.as_ref().is_none_or(|best| rated.better_than(best)) {
            best = Some(rated);
        }
    }
    match (in_order, best) {
        (Some(kept), Some(best)) if kept.0 <= best.0 => Some(kept.into()),
        (_, Some(best)) => Some(best.into()),
        (kept, None) => kept.map(Into::into),
    }
}

/// Other mappings that change as many bonds as `mapping`: those that follow from
/// it by an exchange of atoms that keeps all bonds of the second geometry, the
/// one with the smallest change of distances first.
pub(crate) fn alternatives(from: &Molecule, to: &Molecule, mapping: &[usize]) -> Vec<Matching> {
    let search = Search {
        from: to,
        to,
        bonds_from: BondGraph::new(to),
        bonds_to: BondGraph::new(to),
    };
    let exchanges = search.bond_keeping();
    let search = Search {
        from,
        to,
        bonds_from: BondGraph::new(from),
        bonds_to: search.bonds_to,
    };
    let mut rated: Vec<Rated> = exchanges
        .iter()
        .map(|exchange| search.rate(mapping.iter().map(|&atom| exchange[atom]).collect()))
        .collect();
    rated.sort_by(|a, b| {
        let rank = |x: f64| (x * 1e9).round();
        a.0.cmp(&b.0)
            .then(rank(a.1).total_cmp(&rank(b.1)))
            .then(rank(a.2).total_cmp(&rank(b.2)))
            .then(a.3.cmp(&b.3))
    });
    rated.into_iter().map(Into::into).collect()
}

/// Changed bonds, weighted change of distances, root mean square distance.
#[derive(Clone, Debug)]
struct Rated(usize, f64, f64, Vec<usize>);

impl Rated {
    fn better_than(&self, other: &Self) -> bool {
        if self.0 != other.0 {
            return self.0 < other.0;
        }
        if (self.1 - other.1).abs() > 1e-9 {
            return self.1 < other.1;
        }
        self.2 < other.2 - 1e-9
    }
}

impl From<Rated> for Matching {
    fn from(rated: Rated) -> Self {
        Self {
            mapping: rated.3,
            changed_bonds: rated.0,
        }
    }
}

struct Search<'a> {
    from: &'a Molecule,
    to: &'a Molecule,
    bonds_from: BondGraph,
    bonds_to: BondGraph,
}

impl Search<'_> {
    fn rate(&self, mapping: Vec<usize>) -> Rated {
        let kept = self.bonds_from.bonds();
        let common = kept
            .iter()
            .filter(|&&(i, j)| self.bonds_to.is_bonded(mapping[i], mapping[j]))
            .count();
        let changed = kept.len() + self.bonds_to.bonds().len() - 2 * common;
        let cost = (0..mapping.len())
            .map(|atom| self.strain(&mapping, atom))
            .sum::<f64>();
        let placed: Vec<Vector> = mapping.iter().map(|&k| self.to.positions[k]).collect();
        let deviation = align(&placed, &self.from.positions).map_or(f64::INFINITY, |a| a.deviation);
        Rated(changed, cost, deviation, mapping)
    }

    /// Weighted change of the distances to one atom; a changed bond weighs most.
    fn strain(&self, mapping: &[usize], atom: usize) -> f64 {
        let mut sum = 0.0;
        for other in 0..mapping.len() {
            if other == atom {
                continue;
            }
            let before = distance(self.from.positions[atom], self.from.positions[other]);
            let (a, b) = (mapping[atom], mapping[other]);
            let after = distance(self.to.positions[a], self.to.positions[b]);
            let change = (before - after) / (before * after);
            sum += change * change;
            if self.bonds_from.is_bonded(atom, other) != self.bonds_to.is_bonded(a, b) {
                sum += 100.0;
            }
        }
        sum
    }

    /// All mappings (up to a limit) that keep every bond.
    fn bond_keeping(&self) -> Vec<Vec<usize>> {
        let count = self.from.len();
        if self.bonds_from.bonds().len() != self.bonds_to.bonds().len() {
            return Vec::new();
        }
        let colours = self.colours();
        // Neighbours of placed atoms first, so that bonds prune early.
        let mut order: Vec<usize> = Vec::new();
        let mut listed = vec![false; count];
        for start in 0..count {
            if listed[start] {
                continue;
            }
            listed[start] = true;
            let mut next = order.len();
            order.push(start);
            while let Some(&atom) = order.get(next) {
                next += 1;
                for &other in self.bonds_from.neighbours(atom) {
                    if !listed[other] {
                        listed[other] = true;
                        order.push(other);
                    }
                }
            }
        }
        let mut state = State {
            mapping: vec![usize::MAX; count],
            taken: vec![false; count],
            found: Vec::new(),
            steps: 0,
        };
        self.extend(&order, &colours, 0, &mut state);
        state.found
    }

    fn extend(
        &self,
        order: &[usize],
        colours: &(Vec<usize>, Vec<usize>),
        depth: usize,
        state: &mut State,
    ) {
        let Some(&atom) = order.get(depth) else {
            state.found.push(state.mapping.clone());
            return;
        };
        for image in 0..order.len() {
            if state.found.len() >= MOST_MAPPINGS || state.steps >= MOST_STEPS {
                return;
            }
            if state.taken[image] || colours.0[atom] != colours.1[image] {
                continue;
            }
            state.steps += 1;
            let fits = order[..depth].iter().all(|&placed| {
                self.bonds_from.is_bonded(atom, placed)
                    == self.bonds_to.is_bonded(image, state.mapping[placed])
            });
            if fits {
                state.mapping[atom] = image;
                state.taken[image] = true;
                self.extend(order, colours, depth + 1, state);
                state.taken[image] = false;
            }
        }
    }

    /// Colours of all atoms of both geometries from the element and, round by
    /// round, the colours of the neighbours (Morgan, J. Chem. Doc. 5, 107 (1965)).
    fn colours(&self) -> (Vec<usize>, Vec<usize>) {
        let start = |m: &Molecule| -> Vec<usize> {
            m.elements.iter().map(|e| usize::from(e.number())).collect()
        };
        let mut colours = (start(self.from), start(self.to));
        for _ in 0..self.from.len().min(32) {
            let keys = |graph: &BondGraph, colours: &[usize]| -> Vec<Vec<usize>> {
                (0..colours.len())
                    .map(|atom| {
                        let near = graph.neighbours(atom);
                        let mut key: Vec<usize> = near.iter().map(|&k| colours[k]).collect();
                        key.sort_unstable();
                        key.insert(0, colours[atom]);
                        key
                    })
                    .collect()
            };
            let first = keys(&self.bonds_from, &colours.0);
            let second = keys(&self.bonds_to, &colours.1);
            let mut all: Vec<&Vec<usize>> = first.iter().chain(&second).collect();
            all.sort_unstable();
            all.dedup();
            let number = |key: &Vec<usize>| all.binary_search(&key).unwrap_or(0);
            colours = (
                first.iter().map(number).collect(),
                second.iter().map(number).collect(),
            );
        }
        colours
    }

    /// Every atom to the most similar free one of its element, by the sorted
    /// inverse distances to the other atoms; the most similar pairs first.
    fn by_surroundings(&self) -> Vec<usize> {
        let surroundings = |m: &Molecule| -> Vec<Vec<f64>> {
            (0..m.len())
                .map(|atom| {
                    let others = (0..m.len()).filter(|&other| other != atom);
                    let mut list: Vec<f64> = others
                        .map(|other| {
                            let weight = f64::from(m.elements[other].number());
                            weight / distance(m.positions[atom], m.positions[other])
                        })
                        .collect();
                    list.sort_by(|a, b| b.total_cmp(a));
                    list
                })
                .collect()
        };
        let (first, second) = (surroundings(self.from), surroundings(self.to));
        let mut pairs = Vec::new();
        for (i, a) in first.iter().enumerate() {
            for (j, b) in second.iter().enumerate() {
                if self.from.elements[i] == self.to.elements[j] {
                    let off: f64 = a.iter().zip(b).map(|(x, y)| (x - y) * (x - y)).sum();
                    pairs.push((off, i, j));
                }
            }
        }
        pairs.sort_by(|a, b| a.0.total_cmp(&b.0).then((a.1, a.2).cmp(&(b.1, b.2))));
        let mut mapping = vec![usize::MAX; first.len()];
        let mut taken = vec![false; first.len()];
        for (_, i, j) in pairs {
            if mapping[i] == usize::MAX && !taken[j] {
                mapping[i] = j;
                taken[j] = true;
            }
        }
        mapping
    }

    /// Exchanges pairs of equal atoms as long as that lowers the strain.
    fn improved(&self, mut mapping: Vec<usize>) -> Vec<usize> {
        for _ in 0..50 {
            let mut changed = false;
            for i in 0..mapping.len() {
                for j in 0..i {
                    if self.from.elements[i] != self.from.elements[j] {
                        continue;
                    }
                    let strain = |m: &[usize]| self.strain(m, i) + self.strain(m, j);
                    let before = strain(&mapping);
                    mapping.swap(i, j);
                    if strain(&mapping) < before - 1e-9 {
                        changed = true;
                    } else {
                        mapping.swap(i, j);
                    }
                }
            }
            if !changed {
                break;
            }
        }
        mapping
    }
}

struct State {
    mapping: Vec<usize>,
    taken: Vec<bool>,
    found: Vec<Vec<usize>>,
    steps: usize,
}
