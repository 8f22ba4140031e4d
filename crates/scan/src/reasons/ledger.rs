//! The slope ledger: why a line rises or falls, term by term.

use ndarray::{Array2, ArrayView1};
use orbend_hamiltonian::Basis;
use orbend_structure::BondGraph;

use super::Gradients;
use super::turning::{turning, turns};
use crate::error::ScanError;
use crate::orbitals::Orbitals;
use crate::plan::SweepPlan;

/// One pair of shells on two atoms, and what it gives.
#[derive(Clone, Debug, PartialEq)]
pub struct ShellTerm {
    /// The two atoms, the first smaller, from 0.
    pub atoms: [usize; 2],
    /// The two shells, as indices into [`Basis::shells`].
    pub shells: [usize; 2],
    /// Its part of the slope (eV per unit) or of the change (eV).
    pub value_ev: f64,
    /// Mulliken overlap population of the pair for one electron in the line: before and, for a
    /// change, after the atoms moved under the orbital held as it was.
    pub overlap: [f64; 2],
}

/// dε/dq of a line at one geometry, split over pairs of shells: the terms add up to it.
///
/// dε/dq = Σ 2 cᵢcⱼ (∂Hᵢⱼ − ε ∂Sᵢⱼ) over functions i, j of two different atoms
/// ([`Gradients`]), for functions that turn with the bonds of their atoms: so a bond that swings
/// as a whole, or a group that turns, gives nothing. Of a degenerate set the mean of its members, which does not depend on the
/// choice of partners.
#[derive(Clone, Debug, PartialEq)]
pub struct Slope {
    /// Coordinate value.
    pub at: f64,
    /// dε/dq, eV per unit of the coordinate.
    pub value_ev: f64,
    /// Its parts, in the order of the pairs of atoms.
    pub terms: Vec<ShellTerm>,
}

/// The part of a change that mixing with one other line gives.
#[derive(Clone, Debug, PartialEq)]
pub struct Mixing {
    /// The other line (the first of a degenerate set).
    pub line: usize,
    /// Its part of the change, eV.
    pub value_ev: f64,
}

/// The change of a line's energy between two geometries, split so that the parts add up to it.
///
/// The orbitals of the first geometry are carried along: coefficients held, functions moving
/// with their atoms and turning with the bonds of their atoms (the rotation that lays the
/// directions of an atom's bonds onto the new ones: Kabsch, Acta Cryst. A 32, 922 (1976)). In them, with h = C†H₂C and s = C†S₂C, the orbital of the second geometry
/// is Σ uₖ and (h − εs)u = 0, whose row of the line itself reads
///
/// ε = hₐₐ/sₐₐ + Σₖ (hₐₖ − ε sₐₖ) uₖ / (sₐₐ uₐ).
///
/// The first part minus the old ε is the first-order term, the energy that the orbital held as it
/// was has taken up: Σ 2 cᵢcⱼ (ΔHᵢⱼ − ε₁ ΔSᵢⱼ)/sₐₐ, a sum over pairs of shells. The others are the
/// mixing with each other line of the irrep, to all orders (partitioning in intermediate
/// normalisation: Löwdin, J. Chem. Phys. 19, 1396 (1951)).
#[derive(Clone, Debug, PartialEq)]
pub struct Change {
    /// First and last coordinate value.
    pub between: [f64; 2],
    /// Energies there, eV.
    pub energies_ev: [f64; 2],
    /// The first-order term by pairs of shells.
    pub first_order: Vec<ShellTerm>,
    /// The mixing with each other line of the irrep, by rising energy at the first point.
    pub mixing: Vec<Mixing>,
    /// Squared overlap of the line at the second geometry with itself carried along, 0 to 1: where
    /// it is small the line has taken over another one's character.
    pub kept: f64,
}

impl Change {
    /// ε₂ − ε₁, eV.
    pub fn difference_ev(&self) -> f64 {
        self.energies_ev[1] - self.energies_ev[0]
    }

    /// The first-order term, eV.
    pub fn first_order_ev(&self) -> f64 {
        self.first_order.iter().map(|term| term.value_ev).sum()
    }
}

impl SweepPlan {
    /// The lines of the degenerate set that a line belongs to, itself among them.
    pub fn set_of(&self, line: usize) -> Vec<usize> {
        let head = &self.lines[line];
        let same = |other: &usize| {
            let other = &self.lines[*other];
            other.irrep == head.irrep && other.position == head.position
        };
        (0..self.lines.len()).filter(same).collect()
    }

    /// dε/dq of every line along coordinate `axis`, eV per unit, without its parts.
    ///
    /// # Errors
    /// As [`SweepPlan::slope`].
    pub fn slopes(&self, values: &[f64], axis: usize) -> Result<Vec<f64>, ScanError> {
        let speeds = self.speeds(values, axis)?;
        let orbitals = self.orbitals(values)?;
        let (s, h) = self.gradients(values)?.along(&speeds);
        let (s, h) = (orbitals.coefficients.dot(&s), orbitals.coefficients.dot(&h));
        let own: Vec<f64> = (0..self.lines.len())
            .map(|line| {
                let vector = orbitals.coefficients.row(line);
                vector.dot(&h.row(line)) - orbitals.energies[line] * vector.dot(&s.row(line))
            })
            .collect();
        Ok((0..self.lines.len())
            .map(|line| {
                let set = self.set_of(line);
                set.iter().map(|&member| own[member]).sum::<f64>() / set.len() as f64
            })
            .collect())
    }

    /// The slope of a line along coordinate `axis`, split over pairs of shells.
    ///
    /// # Errors
    /// Values outside the path, a geometry that cannot be solved, or one where the positions have
    /// no finite derivative.
    pub fn slope(&self, line: usize, values: &[f64], axis: usize) -> Result<Slope, ScanError> {
        let speeds = self.speeds(values, axis)?;
        let orbitals = self.orbitals(values)?;
        let (mut s, mut h) = self.gradients(values)?.along(&speeds);
        let turning = turning(
            &self.basis,
            &BondGraph::new(&self.molecule),
            &self.places(values)?,
            &speeds,
        );
        let turned = |matrix: &Array2<f64>| {
            let half = matrix.dot(&turning);
            &half + &half.t()
        };
        s += &turned(&orbitals.overlap);
        h += &turned(&self.hamiltonian(values)?);
        let set = self.set_of(line);
        let mut terms = pairs_of_shells(&self.basis);
        for &member in &set {
            let energy = orbitals.energies[member];
            let c = orbitals.coefficients.row(member);
            let share = 1.0 / set.len() as f64;
            add_terms(&self.basis, &mut terms, |i, j| {
                let product = 2.0 * share * c[i] * c[j];
                let overlap = product * orbitals.overlap[[i, j]];
                (product * (h[[i, j]] - energy * s[[i, j]]), [overlap; 2])
            });
        }
        Ok(Slope {
            at: values.get(axis).copied().unwrap_or_default(),
            value_ev: terms.iter().map(|term| term.value_ev).sum(),
            terms,
        })
    }

    /// The change of a line between two sets of coordinate values of a path along one coordinate.
    ///
    /// # Errors
    /// Values outside the path, a geometry that cannot be solved, a line that keeps nothing of
    /// what it was.
    pub fn change(&self, line: usize, from: f64, to: f64) -> Result<Change, ScanError> {
        let (first, mut last) = (self.orbitals(&[from])?, self.orbitals(&[to])?);
        let turns = turns(
            &self.basis,
            &BondGraph::new(&self.molecule),
            &self.places(&[from])?,
            &self.places(&[to])?,
        );
        let turned = |matrix: &Array2<f64>| turns.t().dot(matrix).dot(&turns);
        let (h1, h2) = (
            self.hamiltonian(&[from])?,
            turned(&self.hamiltonian(&[to])?),
        );
        last.overlap = turned(&last.overlap);
        last.coefficients = last.coefficients.dot(&turns);
        let (s1, s2) = (&first.overlap, &last.overlap);
        let set = self.set_of(line);
        let share = 1.0 / set.len() as f64;
        let energies = [&first, &last].map(|orbitals| {
            set.iter()
                .map(|&member| orbitals.energies[member])
                .sum::<f64>()
                * share
        });
        let mut first_order = pairs_of_shells(&self.basis);
        let mut mixed = vec![0.0; self.lines.len()];
        let mut kept = 0.0;
        for &member in &set {
            let c = first.coefficients.row(member);
            let (of_s, of_h) = (s2.dot(&c), h2.dot(&c));
            let norm = c.dot(&of_s);
            add_terms(&self.basis, &mut first_order, |i, j| {
                let product = 2.0 * share * c[i] * c[j];
                let change = h2[[i, j]] - h1[[i, j]] - energies[0] * (s2[[i, j]] - s1[[i, j]]);
                let overlap = [product * s1[[i, j]], product * s2[[i, j]] / norm];
                (product * change / norm, overlap)
            });
            let end = partner(&first, &last, &set, c);
            let amounts = first.coefficients.dot(&s1.dot(&end));
            if amounts[member].abs() < 1e-6 {
                return Err(ScanError::NothingKept {
                    label: self.label(line).to_owned(),
                    from: self.path.place(&[from]),
                    to: self.path.place(&[to]),
                });
            }
            for (other, amount) in amounts.iter().enumerate() {
                if other != member {
                    let vector = first.coefficients.row(other);
                    let coupling = vector.dot(&of_h) - energies[1] * vector.dot(&of_s);
                    mixed[other] += share * coupling * amount / (norm * amounts[member]);
                }
            }
            let overlap = end.dot(&of_s);
            kept += share * overlap * overlap / norm;
        }
        Ok(Change {
            between: [from, to],
            energies_ev: energies,
            first_order,
            mixing: self.mixing(line, &mixed),
            kept,
        })
    }

    /// One entry per other set of the line's irrep.
    fn mixing(&self, line: usize, mixed: &[f64]) -> Vec<Mixing> {
        let irrep = self.lines[line].irrep;
        (0..self.lines.len())
            .filter(|&other| self.lines[other].irrep == irrep)
            .filter_map(|other| {
                let set = self.set_of(other);
                let own = self.lines[other].position == self.lines[line].position;
                (set.first() == Some(&other) && !own).then(|| Mixing {
                    line: other,
                    value_ev: set.iter().map(|&member| mixed[member]).sum(),
                })
            })
            .collect()
    }

    /// Positions at coordinate values, Å.
    fn places(&self, values: &[f64]) -> Result<Vec<[f64; 3]>, ScanError> {
        let mut positions = vec![[0.0; 3]; self.molecule.positions.len()];
        self.path.positions(values, &mut positions)?;
        Ok(positions)
    }

    /// H at coordinate values, n × n, eV.
    pub(crate) fn hamiltonian(&self, values: &[f64]) -> Result<Array2<f64>, ScanError> {
        let n = self.basis.functions.len();
        let positions = self.places(values)?;
        let (mut s, mut h) = (vec![0.0; n * n], vec![0.0; n * n]);
        self.hamiltonian.fill(&positions, &mut s, &mut h);
        Ok(Array2::from_shape_fn((n, n), |(i, j)| h[i * n + j]))
    }

    /// A line's label in the numbering of the request.
    pub(crate) fn label(&self, line: usize) -> &str {
        let name = &self.lines[line].name;
        match self.request.numbering {
            crate::Numbering::Core => &name.plain,
            crate::Numbering::Valence => &name.valence_plain,
        }
    }
}

/// The member of the set at the second geometry that is most like `c` at the first, normalised.
fn partner(
    first: &Orbitals,
    last: &Orbitals,
    set: &[usize],
    c: ArrayView1<'_, f64>,
) -> ndarray::Array1<f64> {
    let of_c = first.overlap.dot(&c);
    let mut end = ndarray::Array1::zeros(c.len());
    let mut norm = 0.0;
    for &member in set {
        let vector = last.coefficients.row(member);
        let amount = vector.dot(&of_c);
        norm += amount * amount;
        end.scaled_add(amount, &vector);
    }
    if norm > 0.0 {
        end /= norm.sqrt();
    }
    end
}

/// All pairs of shells on two atoms, with nothing in them.
fn pairs_of_shells(basis: &Basis) -> Vec<ShellTerm> {
    let mut terms = Vec::new();
    for a in 0..basis.atoms.len() {
        for b in a + 1..basis.atoms.len() {
            for left in basis.atoms[a].shells.clone() {
                for right in basis.atoms[b].shells.clone() {
                    terms.push(ShellTerm {
                        atoms: [a, b],
                        shells: [left, right],
                        value_ev: 0.0,
                        overlap: [0.0; 2],
                    });
                }
            }
        }
    }
    terms
}

/// Adds the value and the overlap populations of every pair of functions to its pair of shells.
fn add_terms(basis: &Basis, terms: &mut [ShellTerm], of: impl Fn(usize, usize) -> (f64, [f64; 2])) {
    for term in terms {
        let [left, right] = term.shells.map(|shell| {
            let shell = &basis.shells[shell];
            shell.first..shell.first + 2 * usize::from(shell.l) + 1
        });
        for i in left {
            for j in right.clone() {
                let (value, overlap) = of(i, j);
                term.value_ev += value;
                term.overlap[0] += overlap[0];
                term.overlap[1] += overlap[1];
            }
        }
    }
}

impl Gradients {
    /// Slopes of all lines along a displacement from known orbitals, eV per unit; members of a
    /// degenerate set each by itself.
    pub fn slopes(&self, orbitals: &Orbitals, displacement: &[[f64; 3]]) -> Vec<f64> {
        let (s, h) = self.along(displacement);
        orbitals
            .coefficients
            .outer_iter()
            .zip(&orbitals.energies)
            .map(|(c, energy)| c.dot(&h.dot(&c)) - energy * c.dot(&s.dot(&c)))
            .collect()
    }
}
