//! Which atoms are bonded, which bonds lie in rings, what hangs on one side of a bond.

use crate::molecule::Molecule;
use crate::neighbours::CellGrid;

/// Two atoms are bonded when their distance is below this multiple of the sum
/// of their single-bond radii …
const BOND_FACTOR: f64 = 1.3;
/// … unless the sum is exceeded and an atom stands between them: one that is
/// nearer to both, by more than this in units of the respective sums of radii
/// (Li···Li in linear Li₂O is 1.2 sums long, Li–O 0.8).
const BETWEEN_MARGIN: f64 = 0.15;

/// The bonds of a molecule, found from its geometry: distance below 1.3 times
/// the sum of the single-bond radii of Pyykkö & Atsumi (2009), without
/// contacts across a shorter bridge of bonds.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct BondGraph {
    neighbours: Vec<Vec<usize>>,
    components: Vec<usize>,
}

impl BondGraph {
    /// Finds the bonds of `molecule`.
    pub fn new(molecule: &Molecule) -> Self {
        let radius = |atom: usize| molecule.elements[atom].single_radius();
        let largest = (0..molecule.len()).map(radius).fold(0.0, f64::max);
        let reach = 2.0 * BOND_FACTOR * largest;
        let mut grid = CellGrid::new(&molecule.positions, reach);
        let mut contacts: Vec<Vec<(usize, f64)>> = vec![Vec::new(); molecule.len()];
        for atom in 0..molecule.len() {
            grid.near(molecule.positions[atom], reach, |other, distance| {
                let ratio = distance / (radius(atom) + radius(other));
                if ratio < BOND_FACTOR {
                    contacts[atom].push((other, ratio));
                    contacts[other].push((atom, ratio));
                }
            });
            grid.insert(atom);
        }
        for list in &mut contacts {
            list.sort_unstable_by_key(|&(other, _)| other);
        }
        let bridged = |atom: usize, other: usize, ratio: f64| {
            ratio > 1.0
                && contacts[atom].iter().any(|&(between, first)| {
                    let second = contacts[other].iter().find(|&&(k, _)| k == between);
                    second.is_some_and(|&(_, second)| first.max(second) + BETWEEN_MARGIN < ratio)
                })
        };
        let neighbours: Vec<Vec<usize>> = contacts
            .iter()
            .enumerate()
            .map(|(atom, list)| {
                let kept = list
                    .iter()
                    .filter(|&&(other, ratio)| !bridged(atom, other, ratio));
                kept.map(|&(other, _)| other).collect()
            })
            .collect();
        let components = components(&neighbours);
        Self {
            neighbours,
            components,
        }
    }

    /// The atoms bonded to `atom` (0-based), by rising number.
    pub fn neighbours(&self, atom: usize) -> &[usize] {
        self.neighbours.get(atom).map_or(&[], Vec::as_slice)
    }

    /// Whether the two atoms are bonded.
    pub fn is_bonded(&self, first: usize, second: usize) -> bool {
        self.neighbours(first).contains(&second)
    }

    /// All bonds, as pairs with the smaller atom number first.
    pub fn bonds(&self) -> Vec<(usize, usize)> {
        let pairs = self.neighbours.iter().enumerate();
        pairs
            .flat_map(|(atom, list)| list.iter().map(move |&other| (atom, other)))
            .filter(|(atom, other)| atom < other)
            .collect()
    }

    /// Whether the two atoms belong to one connected piece.
    pub fn is_connected(&self, first: usize, second: usize) -> bool {
        self.components[first] == self.components[second]
    }

    /// All atoms of the connected piece that holds `atom`, by rising number.
    pub fn piece(&self, atom: usize) -> Vec<usize> {
        let own = self.components[atom];
        let atoms = 0..self.components.len();
        atoms
            .filter(|&other| self.components[other] == own)
            .collect()
    }

    /// Whether the bond between two bonded atoms lies in a ring: its ends stay
    /// connected without it. `false` for atoms that are not bonded.
    pub fn is_ring_bond(&self, first: usize, second: usize) -> bool {
        self.is_bonded(first, second) && self.fragment(first, second).is_none()
    }

    /// The atoms on `end`'s side of the bond `root`–`end` (with `end`, without
    /// `root`), by rising number; `None` when a ring joins the two sides.
    /// For atoms that are not bonded: the side of `end` in its piece without
    /// `root`; `None` when `root` is reached.
    pub fn fragment(&self, root: usize, end: usize) -> Option<Vec<usize>> {
        let mut seen = vec![false; self.neighbours.len()];
        let mut found = vec![end];
        seen[end] = true;
        let mut next = 0;
        while let Some(&atom) = found.get(next) {
            next += 1;
            for &other in &self.neighbours[atom] {
                if other == root {
                    if atom == end {
                        continue;
                    }
                    return None;
                }
                if !seen[other] {
                    seen[other] = true;
                    found.push(other);
                }
            }
        }
        found.sort_unstable();
        Some(found)
    }

    /// A shortest chain of bonds from one atom to another, both included;
    /// `None` when they are not connected.
    pub fn shortest_chain(&self, from: usize, to: usize) -> Option<Vec<usize>> {
        let mut before = vec![usize::MAX; self.neighbours.len()];
        before[from] = from;
        let mut queue = vec![from];
        let mut next = 0;
        while let Some(&atom) = queue.get(next) {
            next += 1;
            if atom == to {
                let mut chain = vec![to];
                let mut last = to;
                while last != from {
                    last = before[last];
                    chain.push(last);
                }
                chain.reverse();
                return Some(chain);
            }
            for &other in &self.neighbours[atom] {
                if before[other] == usize::MAX {
                    before[other] = atom;
                    queue.push(other);
                }
            }
        }
        None
    }
}

fn components(neighbours: &[Vec<usize>]) -> Vec<usize> {
    let mut components = vec![usize::MAX; neighbours.len()];
    for start in 0..neighbours.len() {
        if components[start] != usize::MAX {
            continue;
        }
        components[start] = start;
        let mut open = vec![start];
        while let Some(atom) = open.pop() {
            for &other in &neighbours[atom] {
                if components[other] == usize::MAX {
                    components[other] = start;
                    open.push(other);
                }
            }
        }
    }
    components
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::test_molecules::{build, cyclopropane, ethylene};

    #[test]
    fn ethylene_has_five_bonds_and_no_ring() {
        let graph = BondGraph::new(&ethylene());
        assert_eq!(graph.bonds(), [(0, 1), (0, 2), (0, 3), (1, 4), (1, 5)]);
        assert_eq!(graph.fragment(0, 1), Some(vec![1, 4, 5]));
        assert!(!graph.is_ring_bond(0, 1));
        assert_eq!(graph.shortest_chain(2, 5), Some(vec![2, 0, 1, 5]));
    }

    #[test]
    fn ring_bonds_are_found() {
        let graph = BondGraph::new(&cyclopropane());
        assert_eq!(graph.bonds().len(), 9);
        assert!(graph.is_ring_bond(0, 1));
        assert!(!graph.is_ring_bond(0, 3));
        assert_eq!(graph.fragment(0, 3), Some(vec![3]));
    }

    #[test]
    fn lithium_atoms_of_li2o_are_not_bonded() {
        let r = 1.606; // Bellert & Breckenridge, J. Chem. Phys. 114, 2871 (2001)
        let molecule = build("O 0 0 0; Li 0 0 1.606; Li 0 0 -1.606");
        assert!(2.0 * r < BOND_FACTOR * 2.66);
        assert_eq!(BondGraph::new(&molecule).bonds(), [(0, 1), (0, 2)]);
    }

    #[test]
    fn separate_pieces() {
        let graph = BondGraph::new(&build("H 0 0 0; H 0 0 0.74; Ar 5 0 0"));
        assert!(!graph.is_connected(0, 2));
        assert_eq!(graph.piece(1), [0, 1]);
        assert_eq!(graph.shortest_chain(0, 2), None);
    }
}
