//! What each line is made of and which bonds it makes: populations per line, and tags from them.

use ndarray::{Array2, ArrayView1};
use orbend_eigen::Workspace;
use orbend_overlap::harmonics;

use crate::error::ScanError;
use crate::orbitals::Orbitals;
use crate::plan::SweepPlan;

/// Overlap population of equivalent pairs (electrons, for one electron in the line) from which a
/// line counts as bonding or antibonding between them.
pub const BONDING: f64 = 0.05;
/// Share of an overlap population that has to be of one kind for σ, π or δ to be said.
pub const ONE_KIND: f64 = 0.8;
/// Share of equivalent atoms in a line that bonds nothing from which it is a lone pair on them.
pub const LONE_PAIR: f64 = 0.8;
/// Share of the d shells of transition metals from which it is said.
pub const METAL_D: f64 = 0.1;
/// Overlap population from which mixing against intuition is flagged.
pub const AGAINST: f64 = 0.002;

/// Overlap population of one pair of atoms in one line.
#[derive(Clone, Debug, PartialEq)]
pub struct Bond {
    /// The atoms, from 0.
    pub atoms: [usize; 2],
    /// Electrons between them for one electron in the line (Mulliken, J. Chem. Phys. 23, 1833
    /// (1955)): Σ 2 cᵢcⱼSᵢⱼ.
    pub population: f64,
    /// Its parts by |m| along the line of the two atoms: σ, π, δ, φ.
    pub kinds: [f64; 4],
}

/// What one line is, in numbers and in words.
#[derive(Clone, Debug, PartialEq)]
pub struct LineCharacter {
    /// One entry per pair of atoms; of a degenerate set the mean.
    pub bonds: Vec<Bond>,
    /// Words that follow from the numbers by the thresholds of this module.
    pub tags: Vec<String>,
}

/// Populations of one geometry beyond Mulliken's gross ones.
#[derive(Clone, Debug)]
pub struct Characters {
    /// Net charges of the atoms from populations in the functions S^−½ χ (Löwdin, J. Chem. Phys.
    /// 18, 365 (1950)).
    pub lowdin_charges: Vec<f64>,
    /// `lines × shells`: their shares in each line; each row adds up to 1.
    pub lowdin_shares: Array2<f64>,
    /// One entry per line.
    pub lines: Vec<LineCharacter>,
}

impl SweepPlan {
    /// Populations, bonds and tags of every line at coordinate values, for occupations by line.
    ///
    /// # Errors
    /// Values outside the path, or a geometry that cannot be solved.
    pub fn characters(
        &self,
        values: &[f64],
        orbitals: &Orbitals,
        occupations: &[f64],
    ) -> Result<Characters, ScanError> {
        let mut positions = vec![[0.0; 3]; self.molecule.positions.len()];
        self.path.positions(values, &mut positions)?;
        let hamiltonian = self.hamiltonian(values)?;
        let orthogonal = self.orthogonalised(values, orbitals)?;
        let shells = self.basis.shells.len();
        let mut lowdin_shares = Array2::zeros((self.lines.len(), shells));
        let mut lowdin_charges: Vec<f64> = self
            .basis
            .atoms
            .iter()
            .map(|atom| f64::from(atom.valence_electrons))
            .collect();
        for line in 0..self.lines.len() {
            for (index, function) in self.basis.functions.iter().enumerate() {
                let share = orthogonal[[line, index]] * orthogonal[[line, index]];
                lowdin_shares[[line, function.shell]] += share;
                lowdin_charges[function.atom] -= occupations[line] * share;
            }
        }
        let mulliken = orbitals.populations(&self.basis, occupations).shares;
        let all: Vec<Vec<Bond>> = (0..self.lines.len())
            .map(|line| {
                self.bonds(
                    &positions,
                    &orbitals.overlap,
                    orbitals.coefficients.row(line),
                )
            })
            .collect();
        let lines = (0..self.lines.len())
            .map(|line| {
                let set = self.set_of(line);
                let bonds = mean_bonds(&set, &all);
                let mut shares = vec![0.0; shells];
                for &member in &set {
                    for (sum, share) in shares.iter_mut().zip(mulliken.row(member)) {
                        *sum += share / set.len() as f64;
                    }
                }
                let mut tags = self.bond_tags(&bonds);
                tags.extend(self.share_tags(&shares, tags.is_empty(), occupations[line] > 1e-6));
                tags.extend(self.against_intuition(&set, orbitals, &hamiltonian));
                LineCharacter { bonds, tags }
            })
            .collect();
        Ok(Characters {
            lowdin_charges,
            lowdin_shares,
            lines,
        })
    }

    /// S^½ C: rows are lines.
    fn orthogonalised(
        &self,
        values: &[f64],
        orbitals: &Orbitals,
    ) -> Result<Array2<f64>, ScanError> {
        let n = self.basis.functions.len();
        let overlap: Vec<f64> = orbitals.overlap.iter().copied().collect();
        let unit: Vec<f64> = (0..n * n)
            .map(|k| f64::from(u8::from(k % (n + 1) == 0)))
            .collect();
        let mut room = Workspace::new(n);
        room.solve(&overlap, &unit)
            .map_err(|error| ScanError::Eigen {
                at: self.path.place(values),
                cause: error.to_string(),
            })?;
        let vectors = Array2::from_shape_fn((n, n), |(k, i)| room.vectors()[k * n + i]);
        let mut amounts = orbitals.coefficients.dot(&vectors.t());
        for (mut column, root) in amounts.columns_mut().into_iter().zip(room.values()) {
            column *= root.max(0.0).sqrt();
        }
        Ok(amounts.dot(&vectors))
    }

    /// The overlap populations of all pairs in one orbital.
    fn bonds(
        &self,
        positions: &[[f64; 3]],
        overlap: &Array2<f64>,
        c: ArrayView1<'_, f64>,
    ) -> Vec<Bond> {
        let mut bonds = Vec::new();
        for a in 0..positions.len() {
            for b in a + 1..positions.len() {
                let frame = frame(positions[a], positions[b]);
                let mut kinds = [0.0; 4];
                for left in self.basis.atoms[a].shells.clone() {
                    for right in self.basis.atoms[b].shells.clone() {
                        self.by_kind([left, right], &frame, overlap, c, &mut kinds);
                    }
                }
                bonds.push(Bond {
                    atoms: [a, b],
                    population: kinds.iter().sum(),
                    kinds,
                });
            }
        }
        bonds
    }

    /// The overlap population of two shells by |m| along the bond: in functions turned to it, S
    /// has elements between equal m only.
    fn by_kind(
        &self,
        shells: [usize; 2],
        frame: &[[f64; 3]; 3],
        overlap: &Array2<f64>,
        c: ArrayView1<'_, f64>,
        kinds: &mut [f64; 4],
    ) {
        let [(first, la), (second, lb)] = shells.map(|shell| {
            let shell = &self.basis.shells[shell];
            (shell.first, shell.l)
        });
        let (da, db) = (
            harmonics::rotation(la, frame),
            harmonics::rotation(lb, frame),
        );
        let (na, nb) = (2 * usize::from(la) + 1, 2 * usize::from(lb) + 1);
        let column = |d: &[[f64; 7]; 7], length: usize, index: usize| -> Vec<f64> {
            d[..length].iter().map(|row| row[index]).collect()
        };
        for (i, j) in (0..na).flat_map(|i| (0..nb).map(move |j| (i, j))) {
            let m = harmonics::order(i);
            if m != harmonics::order(j) {
                continue;
            }
            let (of_a, of_b) = (column(&da, na, i), column(&db, nb, j));
            let (mut left, mut right, mut s) = (0.0, 0.0, 0.0);
            for (p, a) in of_a.iter().enumerate() {
                left += a * c[first + p];
                for (q, b) in of_b.iter().enumerate() {
                    s += a * overlap[[first + p, second + q]] * b;
                }
            }
            for (q, b) in of_b.iter().enumerate() {
                right += b * c[second + q];
            }
            kinds[m.unsigned_abs() as usize] += 2.0 * left * s * right;
        }
    }

    /// `Si–F σ bonding`, for every kind of pair with a large enough population.
    fn bond_tags(&self, bonds: &[Bond]) -> Vec<String> {
        let mut keys: Vec<[usize; 2]> = Vec::new();
        let mut groups: Vec<(Bond, String)> = Vec::new();
        for bond in bonds {
            let key = self.pair_key(bond.atoms);
            match keys.iter().position(|other| *other == key) {
                Some(at) => {
                    let sum = &mut groups[at].0;
                    sum.population += bond.population;
                    for (sum, kind) in sum.kinds.iter_mut().zip(bond.kinds) {
                        *sum += kind;
                    }
                }
                None => {
                    keys.push(key);
                    groups.push((bond.clone(), self.atoms_name(bond.atoms)));
                }
            }
        }
        groups.retain(|(bond, _)| bond.population.abs() >= BONDING);
        groups.sort_by(|a, b| b.0.population.abs().total_cmp(&a.0.population.abs()));
        groups
            .iter()
            .map(|(bond, name)| {
                let kind = ["σ ", "π ", "δ ", "φ "]
                    .iter()
                    .zip(bond.kinds)
                    .find(|(_, part)| part / bond.population >= ONE_KIND)
                    .map_or("", |(letter, _)| letter);
                let word = if bond.population > 0.0 {
                    "bonding"
                } else {
                    "antibonding"
                };
                format!("{name} {kind}{word}")
            })
            .collect()
    }

    /// Lone pairs, non-bonding lines, the d share of metals.
    fn share_tags(&self, shares: &[f64], bonds_nothing: bool, occupied: bool) -> Vec<String> {
        let mut tags = Vec::new();
        if bonds_nothing {
            tags.push("non-bonding".to_owned());
            let mut kinds: Vec<(usize, f64)> = Vec::new();
            for (shell, share) in self.basis.shells.iter().zip(shares) {
                let kind = self.atom_key(shell.atom);
                match kinds.iter_mut().find(|(other, _)| *other == kind) {
                    Some((_, sum)) => *sum += share,
                    None => kinds.push((kind, *share)),
                }
            }
            for (atom, share) in kinds {
                let element = self.basis.atoms[atom].element.symbol();
                if occupied && share >= LONE_PAIR {
                    tags.push(format!("lone pair on {element}"));
                }
            }
        }
        let metal: f64 = self
            .basis
            .shells
            .iter()
            .zip(shares)
            .filter(|(shell, _)| {
                let number = self.basis.atoms[shell.atom].element.number();
                shell.l == 2 && matches!(number, 21..=30 | 39..=48 | 57 | 72..=80)
            })
            .map(|(_, share)| share)
            .sum();
        if metal >= METAL_D {
            tags.push(format!("metal d {:.0} %", 100.0 * metal));
        }
        tags
    }

    /// Pairs of shells that mix against intuition: the line lies below both diagonal elements and
    /// yet holds the two out of phase, because −(Hᵢⱼ − εSᵢⱼ) has the sign opposite to Sᵢⱼ there
    /// (Whangbo & Hoffmann, J. Chem. Phys. 68, 5498 (1978); Ammeter, Bürgi, Thibeault & Hoffmann,
    /// J. Am. Chem. Soc. 100, 3686 (1978)).
    fn against_intuition(
        &self,
        set: &[usize],
        orbitals: &Orbitals,
        hamiltonian: &Array2<f64>,
    ) -> Vec<String> {
        let mut tags: Vec<String> = Vec::new();
        let share = 1.0 / set.len() as f64;
        for (right, of_right) in self.basis.shells.iter().enumerate() {
            for (left, of_left) in self.basis.shells[..right].iter().enumerate() {
                if of_left.atom == of_right.atom {
                    continue;
                }
                let (mut population, mut interaction, mut below) = (0.0, 0.0, true);
                for &member in set {
                    let (c, energy) =
                        (orbitals.coefficients.row(member), orbitals.energies[member]);
                    below &= energy < of_left.hii_ev.min(of_right.hii_ev);
                    for i in of_left.first..=of_left.first + 2 * usize::from(of_left.l) {
                        for j in of_right.first..=of_right.first + 2 * usize::from(of_right.l) {
                            let product = 2.0 * share * c[i] * c[j];
                            let s = orbitals.overlap[[i, j]];
                            population += product * s;
                            interaction += product * (hamiltonian[[i, j]] - energy * s);
                        }
                    }
                }
                if below && population < -AGAINST && interaction < 0.0 {
                    let mut names = [left, right].map(|shell| {
                        let atom = self.basis.shells[shell].atom;
                        (
                            self.basis.atoms[atom].element.number(),
                            self.shell_name(shell),
                        )
                    });
                    names.sort_by_key(|name| std::cmp::Reverse(name.0));
                    let tag = format!("counter-intuitive {}–{}", names[0].1, names[1].1);
                    if !tags.contains(&tag) {
                        tags.push(tag);
                    }
                }
            }
        }
        tags
    }

    /// The first atom that the path group carries an atom to.
    fn atom_key(&self, atom: usize) -> usize {
        let images = self.group.operations.iter().map(|op| op.permutation[atom]);
        images.fold(atom, usize::min)
    }

    /// The smallest image of a pair of atoms under the path group.
    fn pair_key(&self, atoms: [usize; 2]) -> [usize; 2] {
        let images = self.group.operations.iter().map(|operation| {
            let [a, b] = atoms.map(|atom| operation.permutation[atom]);
            [a.min(b), a.max(b)]
        });
        images.fold(atoms, std::cmp::Ord::min)
    }

    /// `Si–F`, the heavier element first.
    fn atoms_name(&self, atoms: [usize; 2]) -> String {
        let mut elements = atoms.map(|atom| self.basis.atoms[atom].element);
        elements.sort_by_key(|element| std::cmp::Reverse(element.number()));
        format!("{}–{}", elements[0].symbol(), elements[1].symbol())
    }
}

fn mean_bonds(set: &[usize], all: &[Vec<Bond>]) -> Vec<Bond> {
    let share = 1.0 / set.len() as f64;
    let mut mean: Vec<Bond> = set
        .first()
        .map_or_else(Vec::new, |&first| all[first].clone());
    for (at, bond) in mean.iter_mut().enumerate() {
        let sum = |of: &dyn Fn(&Bond) -> f64| -> f64 {
            set.iter().map(|&member| of(&all[member][at])).sum::<f64>() * share
        };
        bond.population = sum(&|bond| bond.population);
        for kind in 0..4 {
            bond.kinds[kind] = sum(&|bond| bond.kinds[kind]);
        }
    }
    mean
}

/// A rotation whose third column points from one place to another.
fn frame(from: [f64; 3], to: [f64; 3]) -> [[f64; 3]; 3] {
    let along = [to[0] - from[0], to[1] - from[1], to[2] - from[2]];
    let length = |v: [f64; 3]| (v[0] * v[0] + v[1] * v[1] + v[2] * v[2]).sqrt();
    let u = along.map(|x| x / length(along));
    let least = (0..3).fold(0, |best, axis| {
        if u[axis].abs() < u[best].abs() {
            axis
        } else {
            best
        }
    });
    let mut v = u.map(|x| -u[least] * x);
    v[least] += 1.0;
    let v = v.map(|x| x / length(v));
    let w = [
        u[1] * v[2] - u[2] * v[1],
        u[2] * v[0] - u[0] * v[2],
        u[0] * v[1] - u[1] * v[0],
    ];
    [[v[0], w[0], u[0]], [v[1], w[1], u[1]], [v[2], w[2], u[2]]]
}
