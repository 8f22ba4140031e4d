//! What will distort a geometry: degenerate levels that are partly filled, and filled and empty
//! levels that a vibration mixes.
//!
//! First order: a vibration whose irrep is in the symmetric square of the level's irrep, without
//! the totally symmetric one (Jahn & Teller, Proc. R. Soc. A 161, 220 (1937)); a linear molecule
//! bends in second order instead (Renner, Z. Phys. 92, 172 (1934)). Second order: a vibration whose
//! irrep is in the product of a filled and an empty level, by coupling²/gap (Bader, Can. J. Chem. 40,
//! 1164 (1962); Pearson, J. Am. Chem. Soc. 91, 4947 (1969)). Whether the sum falls is then tried.

use ndarray::Array2;

use orbend_eigen::Workspace as EigenWorkspace;
use orbend_hamiltonian::{Method, PairRepulsion};
use orbend_structure::Molecule;

use crate::error::ScanError;
use crate::filling::{DEGENERACY_EV, Filling};
use crate::naming::Name;
use crate::plan::{SweepPlan, nuclei};
use crate::request::{Request, Route};
use crate::solve::Workspace;

use super::directions::{Directions, Displacement, combined, directions, displaced, eigen};
use super::gradients::Gradients;

/// A fall of the sum smaller than this (eV) counts as none where a level splits by symmetry: kT at
/// 298 K is 0.026 eV.
pub const FALL_EV: f64 = 0.025;
/// The same where two levels mix: what a sum decides is not better than a tenth of an eV.
pub const MIXING_FALL_EV: f64 = 0.1;
/// Amplitudes of the trial, Å over all atoms.
const AMPLITUDES: [f64; 8] = [0.05, 0.1, 0.15, 0.2, 0.25, 0.3, 0.35, 0.4];
/// A direction that couples less than this (eV/Å) is not told.
const LEAST_COUPLING: f64 = 1e-3;
/// The bends stand for an irrep if they have this share of its first-order coupling.
const BENDS_SHARE: f64 = 0.3;
/// Step of the second differences, Å.
const STEP: f64 = 0.03;

/// How a level makes the geometry distort.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum HintOrder {
    /// A partly filled degenerate level splits in first order.
    First,
    /// A partly filled degenerate level of a linear molecule splits in second order.
    LinearSplitting,
    /// A filled and an empty level mix.
    Second,
}

/// A vibration that may lower the sum.
#[derive(Clone, Debug, PartialEq)]
pub struct Hint {
    /// How.
    pub order: HintOrder,
    /// Irrep of the vibration, plain.
    pub irrep: String,
    /// The same for documents and figures.
    pub irrep_display: String,
    /// The partly filled level, or the filled and the empty one.
    pub levels: Vec<Name>,
    /// Electrons in the first of them.
    pub electrons: f64,
    /// First order: largest slope of a level (eV/Å); second order: c†(∂H − ε ∂S)c of both (eV/Å),
    /// over all components of the sets; 0 for a linear splitting.
    pub coupling: f64,
    /// Distance of the two levels, eV.
    pub gap: Option<f64>,
    /// coupling²/gap, eV/Å².
    pub strength: Option<f64>,
    /// Whether the displacement keeps the bond lengths.
    pub keeps_lengths: bool,
    /// The displacement, length 1 over all atoms.
    pub displacement: Vec<[f64; 3]>,
    /// What was tried.
    pub trial: Trial,
}

/// A short sweep along a displacement.
#[derive(Clone, Debug, PartialEq)]
pub struct Trial {
    /// Which sum: `polarised-sum` where there is hydrogen, `sum` else; with `+ pair repulsion` where
    /// the displacement changes bond lengths.
    pub name: String,
    /// Amplitudes, Å over all atoms, 0 first.
    pub amplitudes: Vec<f64>,
    /// The sum relative to the undisplaced one, eV.
    pub changes: Vec<f64>,
    /// Whether it falls by more than [`FALL_EV`] or [`MIXING_FALL_EV`].
    pub falls: bool,
    /// Point group of the displaced geometry, plain.
    pub group: String,
}

/// Everything about the distortions of one geometry.
#[derive(Clone, Debug, PartialEq)]
pub struct Distortions {
    /// The geometry's own group, plain.
    pub group: String,
    /// Vibrations as chemists write them: `a1' + a2'' + 2e'`.
    pub vibrations: String,
    /// Hints, those whose sum falls first, then by order and strength.
    pub hints: Vec<Hint>,
}

/// One level or set at the geometry.
struct Set {
    lines: Vec<usize>,
    irrep: usize,
    energy: f64,
    electrons: f64,
    /// One electron of the same spin in every component: no orbital degeneracy is left.
    one_spin: bool,
}

/// The sum along a displacement, in the form that leads for shapes.
struct Trials {
    plan: SweepPlan,
    repulsion: PairRepulsion,
    name: &'static str,
}

impl Distortions {
    /// Of the request's molecule; its route and coordinates are passed over.
    ///
    /// # Errors
    /// A geometry that cannot be planned or solved.
    pub fn new(request: &Request) -> Result<Self, ScanError> {
        let mut request = request.clone();
        request.route = Route::Coordinates;
        request.coordinates = Vec::new();
        let plan = request.plan()?;
        let group = &plan.group;
        let counts = group.vibrations();
        let sets = sets(&plan)?;
        let gradients = Gradients::new(&plan.hamiltonian, &plan.molecule.positions);
        let coefficients = plan.orbitals(&[])?.coefficients;
        let all = directions(group, &plan.molecule)?;
        let trials = Trials::new(&request)?;
        let mut hints = Vec::new();
        for set in sets.iter().filter(|set| set.is_open()) {
            first_order(
                &plan,
                &gradients,
                &coefficients,
                set,
                &all,
                &trials,
                &mut hints,
            )?;
        }
        let told: Vec<String> = hints.iter().map(|hint: &Hint| hint.irrep.clone()).collect();
        for one in &all {
            let known = told.contains(&group.irreps[one.irrep].plain);
            if one.irrep != group.totally_symmetric() && !known {
                second_order(
                    &plan,
                    &gradients,
                    &coefficients,
                    &sets,
                    one,
                    &trials,
                    &mut hints,
                )?;
            }
        }
        hints.sort_by(|a, b| {
            let rank = |hint: &Hint| {
                let order = match hint.order {
                    HintOrder::First => 0,
                    HintOrder::LinearSplitting => 1,
                    HintOrder::Second => 2,
                };
                (u8::from(!hint.trial.falls), order)
            };
            rank(a)
                .cmp(&rank(b))
                .then(
                    b.strength
                        .unwrap_or(0.0)
                        .total_cmp(&a.strength.unwrap_or(0.0)),
                )
                .then(b.coupling.total_cmp(&a.coupling))
                .then(a.irrep.cmp(&b.irrep))
        });
        Ok(Self {
            group: group.name.clone(),
            vibrations: group.content(&counts),
            hints,
        })
    }
}

impl Set {
    /// Partly filled, more than one component, and not half filled with one spin.
    fn is_open(&self) -> bool {
        let size = self.lines.len() as f64;
        let partly = self.electrons > 1e-6 && self.electrons < 2.0 * size - 1e-6;
        size > 1.5 && partly && !self.one_spin
    }
}

fn sets(plan: &SweepPlan) -> Result<Vec<Set>, ScanError> {
    let slots = plan.slot_energies(&[], &mut Workspace::new(plan))?;
    let energies: Vec<f64> = plan.lines.iter().map(|line| slots[line.slot]).collect();
    let mut order: Vec<usize> = (0..energies.len()).collect();
    order.sort_by(|&a, &b| energies[a].total_cmp(&energies[b]).then(a.cmp(&b)));
    let mut filled = vec![0.0; energies.len()];
    plan.filling.fill(&order, &energies, &mut filled);
    let mut sets: Vec<Set> = Vec::new();
    for &line in &order {
        let head = &plan.lines[line];
        let known = sets.iter_mut().find(|set| {
            head.degeneracy > 1
                && set.irrep == head.irrep
                && plan.lines[set.lines[0]].name == head.name
        });
        match known {
            Some(set) => {
                set.lines.push(line);
                set.electrons += filled[line];
            }
            None => sets.push(Set {
                lines: vec![line],
                irrep: head.irrep,
                energy: energies[line],
                electrons: filled[line],
                one_spin: false,
            }),
        }
    }
    let unpaired = f64::from(plan.electrons().unpaired());
    for set in &mut sets {
        let size = set.lines.len() as f64;
        set.one_spin = (set.electrons - size).abs() < 1e-6 && unpaired >= size - 1e-6;
    }
    Ok(sets)
}

fn first_order(
    plan: &SweepPlan,
    gradients: &Gradients,
    coefficients: &Array2<f64>,
    set: &Set,
    all: &[Directions],
    trials: &Trials,
    hints: &mut Vec<Hint>,
) -> Result<(), ScanError> {
    let group = &plan.group;
    let square = group.symmetric_square(set.irrep);
    let vectors = rows(coefficients, &set.lines);
    for one in all {
        if one.irrep == group.totally_symmetric() {
            continue;
        }
        // A bend (π) of a linear molecule splits a π level by its own square, in second order.
        let own = group.symmetric_square(one.irrep);
        let by_square = (0..group.irreps.len())
            .any(|k| group.irreps[k].dimension > 1 && own[k] * square[k] > 0);
        if let Some(direction) = one.bends.first().filter(|_| group.linear && by_square) {
            hints.push(hint(
                plan,
                trials,
                HintOrder::LinearSplitting,
                one.irrep,
                &[set],
                0.0,
                direction,
                true,
            )?);
            continue;
        }
        if square[one.irrep] == 0 {
            continue;
        }
        let best = |list: &[Displacement]| steepest(gradients, &vectors, set.energy, list);
        let bends = best(&one.bends)?;
        let whole: Vec<Displacement> = one.bends.iter().chain(&one.stretches).cloned().collect();
        let (coupling, direction) = best(&whole)?;
        if coupling < LEAST_COUPLING {
            continue;
        }
        let (coupling, direction, keeps) = if bends.0 > BENDS_SHARE * coupling {
            (bends.0, bends.1, true)
        } else {
            (coupling, direction, one.stretches.is_empty())
        };
        hints.push(hint(
            plan,
            trials,
            HintOrder::First,
            one.irrep,
            &[set],
            coupling,
            &direction,
            keeps,
        )?);
    }
    Ok(())
}

/// The direction along which a set splits most, and the largest slope in it. All displacements of
/// one row of an irrep split the set in the same way (Wigner & Eckart), only the size differs.
fn steepest(
    gradients: &Gradients,
    vectors: &Array2<f64>,
    energy: f64,
    list: &[Displacement],
) -> Result<(f64, Displacement), ScanError> {
    let matrices: Vec<Array2<f64>> = list
        .iter()
        .map(|d| within(gradients, vectors, energy, d))
        .collect();
    let size = |m: &Array2<f64>| m.iter().map(|x| x * x).sum::<f64>();
    let Some(largest) = matrices
        .iter()
        .max_by(|a, b| size(a).total_cmp(&size(b)))
        .filter(|m| size(m) > 1e-18)
    else {
        return Ok((0.0, Vec::new()));
    };
    let shares: Vec<f64> = matrices
        .iter()
        .map(|m| m.iter().zip(largest).map(|(a, b)| a * b).sum::<f64>() / size(largest))
        .collect();
    let length = shares.iter().map(|x| x * x).sum::<f64>().sqrt();
    let factors: Vec<f64> = shares.iter().map(|x| x / length).collect();
    let direction = combined(list, &factors);
    let matrix = within(gradients, vectors, energy, &direction);
    let flat: Vec<f64> = matrix.iter().copied().collect();
    let (slopes, _) = eigen(matrix.nrows(), &flat)?;
    let slope = slopes.iter().fold(0.0_f64, |m, x| m.max(x.abs()));
    Ok((slope, direction))
}

/// c_a†(∂H − ε ∂S)c_b between the levels of a set.
fn within(
    gradients: &Gradients,
    vectors: &Array2<f64>,
    energy: f64,
    displacement: &Displacement,
) -> Array2<f64> {
    let (s, h) = gradients.along(displacement);
    vectors.dot(&(h - s * energy)).dot(&vectors.t())
}

fn second_order(
    plan: &SweepPlan,
    gradients: &Gradients,
    coefficients: &Array2<f64>,
    sets: &[Set],
    one: &Directions,
    trials: &Trials,
    hints: &mut Vec<Hint>,
) -> Result<(), ScanError> {
    if one.bends.is_empty() {
        // A sum without repulsion always gains by making one bond shorter and its like longer.
        return Ok(());
    }
    let group = &plan.group;
    let changes: Vec<(Array2<f64>, Array2<f64>)> =
        one.bends.iter().map(|d| gradients.along(d)).collect();
    let direction = trials.softest(&one.bends)?;
    let (ds, dh) = gradients.along(&direction);
    let mut best: Option<(f64, f64, usize, usize)> = None;
    for (a, lower) in sets.iter().enumerate() {
        for (b, upper) in sets.iter().enumerate() {
            let per = |set: &Set| set.electrons / set.lines.len() as f64;
            let gap = upper.energy - lower.energy;
            let moves = per(lower) - per(upper);
            if a == b || gap <= DEGENERACY_EV || moves < 1e-6 {
                continue;
            }
            if group.product(lower.irrep, upper.irrep)[one.irrep] == 0 {
                continue;
            }
            let coupling = |ds: &Array2<f64>, dh: &Array2<f64>| {
                let change = dh - &(ds * lower.energy);
                let left = rows(coefficients, &lower.lines).dot(&change);
                let both = left.dot(&rows(coefficients, &upper.lines).t());
                both.iter().map(|x| x * x).sum::<f64>()
            };
            // All bends of the irrep say whether the pair couples at all.
            let any: f64 = changes.iter().map(|(ds, dh)| coupling(ds, dh)).sum();
            let squared = coupling(&ds, &dh);
            if any.sqrt() < LEAST_COUPLING || squared.sqrt() < LEAST_COUPLING {
                continue;
            }
            let strength = squared / gap;
            if best.is_none_or(|(most, ..)| strength * moves > most) {
                best = Some((strength * moves, squared.sqrt(), a, b));
            }
        }
    }
    if let Some((_, coupling, a, b)) = best {
        hints.push(hint(
            plan,
            trials,
            HintOrder::Second,
            one.irrep,
            &[&sets[a], &sets[b]],
            coupling,
            &direction,
            true,
        )?);
    }
    Ok(())
}

fn rows(coefficients: &Array2<f64>, lines: &[usize]) -> Array2<f64> {
    Array2::from_shape_fn((lines.len(), coefficients.ncols()), |(row, function)| {
        coefficients[[lines[row], function]]
    })
}

#[allow(clippy::too_many_arguments, reason = "one place puts a hint together")]
fn hint(
    plan: &SweepPlan,
    trials: &Trials,
    order: HintOrder,
    irrep: usize,
    sets: &[&Set],
    coupling: f64,
    direction: &Displacement,
    keeps_lengths: bool,
) -> Result<Hint, ScanError> {
    let gap = match sets {
        [lower, upper] => Some(upper.energy - lower.energy),
        _ => None,
    };
    let irrep = &plan.group.irreps[irrep];
    Ok(Hint {
        order,
        irrep: irrep.plain.clone(),
        irrep_display: irrep.display.clone(),
        levels: sets
            .iter()
            .map(|set| plan.lines[set.lines[0]].name.clone())
            .collect(),
        electrons: sets.first().map_or(0.0, |set| set.electrons),
        coupling,
        gap,
        strength: gap.map(|gap| coupling * coupling / gap),
        keeps_lengths,
        displacement: direction.clone(),
        trial: trials.run(direction, keeps_lengths, order)?,
    })
}

impl Trials {
    fn new(request: &Request) -> Result<Self, ScanError> {
        let hydrogen = request
            .molecule
            .elements
            .iter()
            .any(|element| element.number() == 1);
        let mut request = request.clone();
        // Labels of a configuration need not exist in another basis, and not at all off symmetry.
        request.configuration = None;
        if hydrogen {
            request.method = Method {
                polarised_hydrogen: true,
                ..request.method
            };
        }
        let plan = request.plan()?;
        let repulsion = PairRepulsion::new(&plan.basis);
        Ok(Self {
            plan,
            repulsion,
            name: if hydrogen { "polarised-sum" } else { "sum" },
        })
    }

    fn molecule(&self) -> &Molecule {
        &self.plan.molecule
    }

    /// Σ nᵢεᵢ of any geometry, without symmetry, filled from below.
    fn sum(&self, positions: &[[f64; 3]]) -> Result<f64, ScanError> {
        let n = self.plan.basis.functions.len();
        let (mut s, mut h) = (vec![0.0; n * n], vec![0.0; n * n]);
        self.plan.hamiltonian.fill(positions, &mut s, &mut h);
        let mut room = EigenWorkspace::new(n);
        room.set_smallest_overlap(false);
        room.solve(&h, &s).map_err(|error| ScanError::Eigen {
            at: "a displaced geometry".to_owned(),
            cause: error.to_string(),
        })?;
        let energies = room.values();
        let order: Vec<usize> = (0..n).collect();
        let mut filled = vec![0.0; n];
        Filling::Aufbau(self.plan.electrons().clone()).fill(&order, energies, &mut filled);
        Ok(filled.iter().zip(energies).map(|(n, e)| n * e).sum())
    }

    fn energy(
        &self,
        direction: &Displacement,
        amplitude: f64,
        keep: bool,
    ) -> Result<f64, ScanError> {
        let positions = displaced(self.molecule(), direction, amplitude, keep);
        let sum = self.sum(&positions)?;
        Ok(if keep {
            sum
        } else {
            sum + self.repulsion.energy(&positions)
        })
    }

    /// The combination of bends along which the sum has its lowest curvature.
    fn softest(&self, bends: &[Displacement]) -> Result<Displacement, ScanError> {
        let m = bends.len();
        if m == 1 {
            return Ok(bends[0].clone());
        }
        let flat = self.energy(&bends[0], 0.0, true)?;
        let along = |factors: &[f64]| -> Result<f64, ScanError> {
            let d = combined(bends, factors);
            let (up, down) = (self.energy(&d, STEP, true)?, self.energy(&d, -STEP, true)?);
            Ok((up + down - 2.0 * flat) / (STEP * STEP))
        };
        let unit = |i: usize, j: usize| {
            let mut factors = vec![0.0; m];
            factors[i] += 1.0;
            factors[j] += if i == j { 0.0 } else { 1.0 };
            factors
        };
        let mut curvature = vec![0.0; m * m];
        for i in 0..m {
            curvature[i * m + i] = along(&unit(i, i))?;
        }
        for i in 0..m {
            for j in i + 1..m {
                let mixed = along(&unit(i, j))? - curvature[i * m + i] - curvature[j * m + j];
                curvature[i * m + j] = 0.5 * mixed;
                curvature[j * m + i] = 0.5 * mixed;
            }
        }
        let (_, vectors) = eigen(m, &curvature)?;
        Ok(combined(bends, &vectors[..m]))
    }

    /// Both senses of a direction are tried; the lower one counts.
    fn run(
        &self,
        direction: &Displacement,
        keep: bool,
        order: HintOrder,
    ) -> Result<Trial, ScanError> {
        let start = self.energy(direction, 0.0, keep)?;
        let mut best: Option<(f64, f64, Vec<f64>)> = None;
        for sense in [1.0, -1.0] {
            let changes = AMPLITUDES
                .iter()
                .map(|a| Ok(self.energy(direction, sense * a, keep)? - start))
                .collect::<Result<Vec<f64>, ScanError>>()?;
            let lowest = changes.iter().copied().fold(0.0, f64::min);
            if best
                .as_ref()
                .is_none_or(|(least, ..)| lowest < least - 1e-9)
            {
                best = Some((lowest, sense, changes));
            }
        }
        let (lowest, sense, changes) = best.unwrap_or((0.0, 1.0, Vec::new()));
        let there = displaced(self.molecule(), direction, sense * 0.3, keep);
        let tolerance = self.plan.request.tolerance.0;
        let group = orbend_symmetry::find(&nuclei(&self.molecule().elements, &there), tolerance)?;
        Ok(Trial {
            name: if keep {
                self.name.to_owned()
            } else {
                format!("{} + pair repulsion", self.name)
            },
            amplitudes: std::iter::once(0.0).chain(AMPLITUDES).collect(),
            changes: std::iter::once(0.0).chain(changes).collect(),
            falls: lowest
                < match order {
                    HintOrder::Second => -MIXING_FALL_EV,
                    _ => -FALL_EV,
                },
            group: group.group.name,
        })
    }
}
