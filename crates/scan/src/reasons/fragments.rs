//! A molecule as fragments: their orbitals, how each line is made of them, and which pair drives the
//! interaction.

use std::ops::Range;

use ndarray::Array2;
use orbend_structure::Molecule;
use thiserror::Error;

use crate::error::ScanError;
use crate::naming::Name;
use crate::plan::SweepPlan;
use crate::request::{Request, Route};
use crate::solve::Workspace;
use crate::sweep::Sweep;

/// The atoms of one fragment and its charge.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Fragment {
    /// Atoms, from 0.
    pub atoms: Vec<usize>,
    /// Its charge, for the electrons of its own orbitals.
    pub charge: i32,
}

/// Fragments that cannot be meant.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
pub enum FragmentError {
    /// A word that is no atom, no range of atoms and no charge.
    #[error(
        "`{word}` is no atom, range of atoms or charge; write for example \"1-3 (+1) | 4,5 (-1)\""
    )]
    Word {
        /// The word.
        word: String,
    },
    /// An atom that the molecule does not have.
    #[error("there is no atom {atom}, the molecule has {atoms}; atoms are counted from 1")]
    NoAtom {
        /// The atom as written.
        atom: usize,
        /// Atoms of the molecule.
        atoms: usize,
    },
    /// An atom in two fragments.
    #[error("atom {atom} is named twice; put each atom into one fragment")]
    Twice {
        /// The atom, from 1.
        atom: usize,
    },
    /// Atoms in no fragment.
    #[error("atom {atom} is in no fragment; put each atom into one")]
    Left {
        /// The first of them, from 1.
        atom: usize,
    },
    /// One fragment only.
    #[error("one fragment is the molecule itself; separate two or more by `|`")]
    One,
}

impl Fragment {
    /// Reads `1,2,3 | 4-9 (+1)`: atoms counted from 1, a charge in brackets.
    ///
    /// # Errors
    /// Words that are neither, atoms that do not exist, are named twice or are left out.
    pub fn parse(text: &str, atoms: usize) -> Result<Vec<Self>, FragmentError> {
        let mut owner = vec![false; atoms];
        let mut fragments = Vec::new();
        for part in text.split('|') {
            let mut fragment = Self {
                atoms: Vec::new(),
                charge: 0,
            };
            for word in part.split([',', ' ']).filter(|word| !word.is_empty()) {
                let bad = || FragmentError::Word {
                    word: word.to_owned(),
                };
                if let Some(charge) = word.strip_prefix('(').and_then(|w| w.strip_suffix(')')) {
                    fragment.charge = charge.parse().map_err(|_| bad())?;
                    continue;
                }
                let (from, to) = word.split_once('-').unwrap_or((word, word));
                let from: usize = from.parse().map_err(|_| bad())?;
                let to: usize = to.parse().map_err(|_| bad())?;
                if from > to {
                    return Err(bad());
                }
                for atom in from..=to {
                    if atom == 0 || atom > atoms {
                        return Err(FragmentError::NoAtom { atom, atoms });
                    }
                    if owner[atom - 1] {
                        return Err(FragmentError::Twice { atom });
                    }
                    owner[atom - 1] = true;
                    fragment.atoms.push(atom - 1);
                }
            }
            if fragment.atoms.is_empty() {
                return Err(FragmentError::Word {
                    word: part.trim().to_owned(),
                });
            }
            fragment.atoms.sort_unstable();
            fragments.push(fragment);
        }
        if let Some(left) = owner.iter().position(|taken| !taken) {
            return Err(FragmentError::Left { atom: left + 1 });
        }
        if fragments.len() < 2 {
            return Err(FragmentError::One);
        }
        Ok(fragments)
    }
}

/// A fragment as it was solved.
#[derive(Clone, Debug, PartialEq)]
pub struct FragmentHead {
    /// Its atoms and charge.
    pub fragment: Fragment,
    /// Formula in Hill order.
    pub formula: String,
    /// Its own point group, plain.
    pub group: String,
}

/// A level, or a degenerate set, of a fragment.
#[derive(Clone, Debug, PartialEq)]
pub struct FragmentOrbital {
    /// Index of the fragment.
    pub fragment: usize,
    /// Name in the fragment's own group.
    pub name: Name,
    /// Orbitals of the set.
    pub degeneracy: usize,
    /// Energy in the fragment alone, eV.
    pub energy: f64,
    /// Electrons of the set in the fragment alone.
    pub electrons: f64,
    /// Electrons of the set in the molecule (Mulliken's gross population in the fragment orbitals).
    pub population: f64,
}

/// A level, or a degenerate set, of the molecule.
#[derive(Clone, Debug, PartialEq)]
pub struct FragmentLine {
    /// Its lines.
    pub lines: Vec<usize>,
    /// Energy, eV.
    pub energy: f64,
    /// Electrons of the set.
    pub electrons: f64,
    /// Share of every fragment orbital (set) for one electron; they add up to 1.
    pub shares: Vec<f64>,
}

/// A pair of orbitals of two fragments.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FragmentPair {
    /// Indices of the two.
    pub orbitals: (usize, usize),
    /// Overlap (root mean square over the partners of sets).
    pub overlap: f64,
    /// Coupling H, eV, with the sign that belongs to a positive overlap.
    pub coupling: f64,
    /// What the two alone would gain (negative) or lose, eV.
    pub energy: f64,
    /// Overlap population between them in the molecule.
    pub population: f64,
}

/// A molecule as fragments at one geometry.
///
/// Every fragment is solved in the molecule's own basis and method; a line c is written in the
/// fragment orbitals, c = T d, and its Mulliken share of orbital i is dᵢ (T†ST d)ᵢ (Hoffmann, Fujimoto,
/// Swenson & Wan, J. Am. Chem. Soc. 95, 7644 (1973); Fujimoto & Hoffmann, J. Phys. Chem. 78, 1167
/// (1974); from memory).
#[derive(Clone, Debug, PartialEq)]
pub struct FragmentAnalysis {
    /// The fragments.
    pub fragments: Vec<FragmentHead>,
    /// Their orbitals, fragment by fragment, by rising energy.
    pub orbitals: Vec<FragmentOrbital>,
    /// The molecule's levels, by rising energy.
    pub lines: Vec<FragmentLine>,
    /// Pairs between fragments, the one that gains most first.
    pub pairs: Vec<FragmentPair>,
}

/// Pairs that overlap less than this are not listed.
const LEAST_OVERLAP: f64 = 1e-4;

/// One fragment's own levels.
struct Solved {
    head: FragmentHead,
    /// Name, energy, electrons and the rows of `vectors` of every set.
    sets: Vec<(Name, f64, f64, Vec<usize>)>,
    /// `levels × own functions`.
    vectors: Array2<f64>,
    /// Own overlap.
    overlap: Array2<f64>,
    /// The molecule's functions, in the order of the fragment's.
    functions: Vec<usize>,
}

impl FragmentAnalysis {
    /// At one point of a sweep.
    ///
    /// # Errors
    /// A fragment whose electrons do not fit, or that cannot be solved.
    pub fn new(sweep: &Sweep, point: usize, fragments: &[Fragment]) -> Result<Self, ScanError> {
        let plan = sweep.plan();
        let molecule = plan.path.molecule(&plan.path.values(point))?;
        let solved = fragments
            .iter()
            .map(|fragment| solve(plan, &molecule, fragment))
            .collect::<Result<Vec<_>, _>>()?;
        let n = plan.basis.functions.len();
        let orbitals = sweep.orbitals(point)?;
        let (mut s_flat, mut h_flat) = (vec![0.0; n * n], vec![0.0; n * n]);
        plan.hamiltonian
            .fill(&molecule.positions, &mut s_flat, &mut h_flat);
        let full = |flat: &[f64]| Array2::from_shape_fn((n, n), |(i, j)| flat[i * n + j]);
        let (overlap, hamiltonian) = (full(&s_flat), full(&h_flat));
        // Rows of T: every fragment orbital in the molecule's functions; back = T⁻¹.
        let mut t = Array2::zeros((n, n));
        let mut back = Array2::zeros((n, n));
        let mut list: Vec<FragmentOrbital> = Vec::new();
        let mut members: Vec<Range<usize>> = Vec::new();
        let mut row = 0;
        for (index, one) in solved.iter().enumerate() {
            let inverse = one.vectors.dot(&one.overlap);
            for (name, energy, electrons, rows) in &one.sets {
                members.push(row..row + rows.len());
                for &own in rows {
                    for (k, &function) in one.functions.iter().enumerate() {
                        t[[row, function]] = one.vectors[[own, k]];
                        back[[row, function]] = inverse[[own, k]];
                    }
                    row += 1;
                }
                list.push(FragmentOrbital {
                    fragment: index,
                    name: name.clone(),
                    degeneracy: rows.len(),
                    energy: *energy,
                    electrons: *electrons,
                    population: 0.0,
                });
            }
        }
        let s_orbitals = t.dot(&overlap).dot(&t.t());
        let h_orbitals = t.dot(&hamiltonian).dot(&t.t());
        // d of every line, and its shares.
        let d = orbitals.coefficients.dot(&back.t());
        let products = &d * &d.dot(&s_orbitals);
        let here = sweep.point(point)?;
        let lines = molecule_lines(plan, &here.levels, &products, &members);
        for line in &lines {
            for (orbital, share) in list.iter_mut().zip(&line.shares) {
                orbital.population += line.electrons * share;
            }
        }
        let mut occupations = vec![0.0; plan.lines.len()];
        for level in &here.levels {
            occupations[level.line] = level.occupation;
        }
        let density = {
            let mut weighted = d.clone();
            for (mut row, n) in weighted.outer_iter_mut().zip(&occupations) {
                row *= *n;
            }
            d.t().dot(&weighted)
        };
        let pairs = pairs(&list, &members, &s_orbitals, &h_orbitals, &density);
        Ok(Self {
            fragments: solved.into_iter().map(|one| one.head).collect(),
            orbitals: list,
            lines,
            pairs,
        })
    }
}

fn solve(plan: &SweepPlan, molecule: &Molecule, fragment: &Fragment) -> Result<Solved, ScanError> {
    let part = Molecule {
        elements: fragment
            .atoms
            .iter()
            .map(|&a| molecule.elements[a])
            .collect(),
        positions: fragment
            .atoms
            .iter()
            .map(|&a| molecule.positions[a])
            .collect(),
        charge: fragment.charge,
        unpaired: None,
        title: String::new(),
    };
    let request = Request {
        molecule: part.clone(),
        coordinates: Vec::new(),
        route: Route::Coordinates,
        configuration: None,
        ..plan.request.clone()
    };
    let own = request.plan()?;
    let slots = own.slot_energies(&[], &mut Workspace::new(&own))?;
    let energies: Vec<f64> = own.lines.iter().map(|line| slots[line.slot]).collect();
    let mut order: Vec<usize> = (0..energies.len()).collect();
    order.sort_by(|&a, &b| energies[a].total_cmp(&energies[b]).then(a.cmp(&b)));
    let mut filled = vec![0.0; energies.len()];
    own.filling.fill(&order, &energies, &mut filled);
    let mut sets: Vec<(Name, f64, f64, Vec<usize>)> = Vec::new();
    for &line in &order {
        let head = &own.lines[line];
        let same = sets
            .iter_mut()
            .find(|set| head.degeneracy > 1 && set.0 == head.name);
        match same {
            Some(set) => {
                set.2 += filled[line];
                set.3.push(line);
            }
            None => sets.push((head.name.clone(), energies[line], filled[line], vec![line])),
        }
    }
    let solution = own.orbitals(&[])?;
    Ok(Solved {
        head: FragmentHead {
            fragment: fragment.clone(),
            formula: part.formula(),
            group: own.group.name.clone(),
        },
        sets,
        vectors: solution.coefficients,
        overlap: solution.overlap,
        functions: fragment
            .atoms
            .iter()
            .flat_map(|&atom| plan.basis.atoms[atom].functions.clone())
            .collect(),
    })
}

fn molecule_lines(
    plan: &SweepPlan,
    levels: &[crate::sweep::Level],
    products: &Array2<f64>,
    members: &[Range<usize>],
) -> Vec<FragmentLine> {
    let mut lines: Vec<FragmentLine> = Vec::new();
    for level in levels {
        let head = &plan.lines[level.line];
        let row = products.row(level.line);
        let shares: Vec<f64> = members
            .iter()
            .map(|set| set.clone().map(|k| row[k]).sum())
            .collect();
        let same = lines
            .iter_mut()
            .find(|line| head.degeneracy > 1 && plan.lines[line.lines[0]].name == head.name);
        match same {
            Some(line) => {
                let count = line.lines.len() as f64;
                for (mean, share) in line.shares.iter_mut().zip(shares) {
                    *mean = (*mean * count + share) / (count + 1.0);
                }
                line.lines.push(level.line);
                line.electrons += level.occupation;
            }
            None => lines.push(FragmentLine {
                lines: vec![level.line],
                energy: level.energy,
                electrons: level.occupation,
                shares,
            }),
        }
    }
    lines
}

fn pairs(
    orbitals: &[FragmentOrbital],
    members: &[Range<usize>],
    s_matrix: &Array2<f64>,
    h_matrix: &Array2<f64>,
    density: &Array2<f64>,
) -> Vec<FragmentPair> {
    let mut pairs = Vec::new();
    for (a, first) in orbitals.iter().enumerate() {
        for (b, second) in orbitals.iter().enumerate().skip(a + 1) {
            if first.fragment == second.fragment {
                continue;
            }
            let (mut squares, mut mixed, mut population) = (0.0, 0.0, 0.0);
            for i in members[a].clone() {
                for j in members[b].clone() {
                    squares += s_matrix[[i, j]] * s_matrix[[i, j]];
                    mixed += s_matrix[[i, j]] * h_matrix[[i, j]];
                    population += 2.0 * density[[i, j]] * s_matrix[[i, j]];
                }
            }
            let partners = first.degeneracy.min(second.degeneracy) as f64;
            let overlap = (squares / partners).sqrt();
            if overlap < LEAST_OVERLAP {
                continue;
            }
            let coupling = mixed / squares * overlap;
            let per = |orbital: &FragmentOrbital| orbital.electrons / orbital.degeneracy as f64;
            pairs.push(FragmentPair {
                orbitals: (a, b),
                overlap,
                coupling,
                energy: partners
                    * two_orbital_energy(
                        (first.energy, per(first)),
                        (second.energy, per(second)),
                        coupling,
                        overlap,
                    ),
                population,
            });
        }
    }
    pairs.sort_by(|x, y| {
        x.energy
            .total_cmp(&y.energy)
            .then(x.orbitals.cmp(&y.orbitals))
    });
    pairs
}

/// What two orbitals gain when they interact alone: the electrons go into the roots of
/// (ε₁−E)(ε₂−E) = (H−ES)² from below (Albright, Burdett & Whangbo, *Orbital Interactions in
/// Chemistry*, chapter 2). Each is (energy, electrons); the result is in eV, negative for a gain.
pub fn two_orbital_energy(
    (first, n1): (f64, f64),
    (second, n2): (f64, f64),
    coupling: f64,
    overlap: f64,
) -> f64 {
    // (1−S²)E² − (ε₁+ε₂−2HS)E + ε₁ε₂−H² = 0
    let a = 1.0 - overlap * overlap;
    let b = first + second - 2.0 * coupling * overlap;
    let c = first * second - coupling * coupling;
    let root = (b * b - 4.0 * a * c).max(0.0).sqrt();
    let (low, high) = ((b - root) / (2.0 * a), (b + root) / (2.0 * a));
    let lower = (n1 + n2).min(2.0);
    lower * low + (n1 + n2 - lower) * high - n1 * first - n2 * second
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn fragments_as_written() {
        let found = Fragment::parse("1, 3 (+1) | 2,4-5", 5).unwrap();
        assert_eq!(found[0].atoms, [0, 2]);
        assert_eq!(found[0].charge, 1);
        assert_eq!(found[1].atoms, [1, 3, 4]);
        assert_eq!(Fragment::parse("1-2", 2), Err(FragmentError::One));
        assert_eq!(
            Fragment::parse("1 | 2,1", 2),
            Err(FragmentError::Twice { atom: 1 })
        );
        assert_eq!(
            Fragment::parse("1 | 3", 3),
            Err(FragmentError::Left { atom: 2 })
        );
        assert!(matches!(
            Fragment::parse("1 | x", 2),
            Err(FragmentError::Word { .. })
        ));
        assert!(matches!(
            Fragment::parse("1 | 9", 2),
            Err(FragmentError::NoAtom { atom: 9, .. })
        ));
    }

    #[test]
    fn two_electrons_gain_and_four_lose() {
        // Two equal orbitals: E± = (ε ± H)/(1 ± S).
        let (e, h, s) = (-13.6, -8.0, 0.35);
        let gain = two_orbital_energy((e, 1.0), (e, 1.0), h, s);
        assert!((gain - 2.0 * ((e + h) / (1.0 + s) - e)).abs() < 1e-9);
        let loss = two_orbital_energy((e, 2.0), (e, 2.0), h, s);
        assert!((loss - 4.0 * (e * s * s - h * s) / (1.0 - s * s)).abs() < 1e-9);
        assert!(gain < 0.0 && loss > 0.0);
    }
}
