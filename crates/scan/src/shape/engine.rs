//! Sums of orbital energies for many geometries and several models at once: eight geometries in
//! the lanes, the matrices in the blocks of the path group.

use orbend_eigen::{LANES, LaneStatus, LaneWorkspace, Lanes};
use orbend_hamiltonian::HamiltonianPlan;

use crate::plan::SweepPlan;

use super::charge::{Response, step};

/// One way to get from S to a sum.
pub(crate) struct Model<'a> {
    /// Form and K; all models of one call share the exponents.
    pub(crate) hamiltonian: &'a HamiltonianPlan,
    /// Charge response, if any.
    pub(crate) response: Option<Response>,
}

/// A curve: one sum (eV) per geometry, NaN where there is none (S nearly singular, or charges that
/// do not come to rest), and whether all charges came to rest.
#[derive(Clone, Debug)]
pub(crate) struct Curve {
    pub(crate) sums: Vec<f64>,
    pub(crate) at_rest: bool,
}

impl Curve {
    /// The part before the first point that is missing.
    pub(crate) fn usable(&self) -> &[f64] {
        let end = self.sums.iter().position(|sum| !sum.is_finite());
        &self.sums[..end.unwrap_or(self.sums.len())]
    }
}

/// Buffers of one thread for one plan.
pub(crate) struct Engine<'a> {
    plan: &'a SweepPlan,
    lanes: Vec<[Lanes; 3]>,
    s: Vec<Lanes>,
    h: Vec<Lanes>,
    rooms: Vec<Room>,
    valence: Vec<f64>,
    atom_of: Vec<usize>,
    /// Line of each (slot, row), row by row.
    line_of: Vec<Vec<usize>>,
    energies: Vec<Lanes>,
    occupations: Vec<Lanes>,
    order: Vec<usize>,
}

struct Room {
    first_slot: usize,
    s: Vec<Lanes>,
    h: Vec<Lanes>,
    eigen: LaneWorkspace,
    expanded: Vec<Lanes>,
    /// Functions that each row of the irrep touches.
    support: Vec<Vec<usize>>,
}

impl<'a> Engine<'a> {
    pub(crate) fn new(plan: &'a SweepPlan) -> Self {
        let n = plan.basis.functions.len();
        let mut first_slot = 0;
        let rooms = plan
            .adapted
            .blocks
            .iter()
            .map(|block| {
                let m = block.size();
                let support = (0..block.row_count())
                    .map(|row| {
                        let mut list: Vec<usize> = block
                            .row(row)
                            .iter()
                            .flatten()
                            .map(|&(function, _)| function)
                            .collect();
                        list.sort_unstable();
                        list.dedup();
                        list
                    })
                    .collect();
                let room = Room {
                    first_slot,
                    s: vec![[0.0; LANES]; m * m],
                    h: vec![[0.0; LANES]; m * m],
                    eigen: LaneWorkspace::new(m),
                    expanded: vec![[0.0; LANES]; m * n],
                    support,
                };
                first_slot += m;
                room
            })
            .collect();
        let mut line_of = vec![Vec::new(); first_slot];
        for (index, line) in plan.lines.iter().enumerate() {
            let rows: &mut Vec<usize> = &mut line_of[line.slot];
            if rows.len() <= line.row {
                rows.resize(line.row + 1, index);
            }
            rows[line.row] = index;
        }
        Self {
            plan,
            lanes: vec![[[0.0; LANES]; 3]; plan.basis.atoms.len()],
            s: vec![[0.0; LANES]; n * n],
            h: vec![[0.0; LANES]; n * n],
            rooms,
            valence: plan
                .basis
                .atoms
                .iter()
                .map(|atom| f64::from(atom.valence_electrons))
                .collect(),
            atom_of: plan
                .basis
                .functions
                .iter()
                .map(|function| function.atom)
                .collect(),
            line_of,
            energies: vec![[0.0; LANES]; first_slot],
            occupations: vec![[0.0; LANES]; plan.lines.len()],
            order: (0..plan.lines.len()).collect(),
        }
    }

    /// One curve per model over the geometries; `geometries[point]` holds positions in Å.
    pub(crate) fn curves(
        &mut self,
        geometries: &[Vec<[f64; 3]>],
        models: &[Model<'_>],
    ) -> Vec<Curve> {
        let empty = Curve {
            sums: Vec::with_capacity(geometries.len()),
            at_rest: true,
        };
        let mut curves = vec![empty; models.len()];
        for chunk in geometries.chunks(LANES) {
            self.load(chunk);
            let Some(first) = models.first() else { break };
            first
                .hamiltonian
                .fill_lanes(&self.lanes, &mut self.s, &mut self.h);
            self.transform_overlap();
            for (model, curve) in models.iter().zip(&mut curves) {
                let (sums, rest) = self.sums(model);
                curve.sums.extend_from_slice(&sums[..chunk.len()]);
                curve.at_rest &= rest[..chunk.len()].iter().all(|&rest| rest);
            }
        }
        curves
    }

    /// Energies of every line (eV) at up to eight geometries.
    pub(crate) fn line_energies(&mut self, geometries: &[Vec<[f64; 3]>]) -> Vec<Vec<f64>> {
        let plan = self.plan;
        self.load(geometries);
        plan.hamiltonian
            .fill_lanes(&self.lanes, &mut self.s, &mut self.h);
        self.transform_overlap();
        self.solve(false);
        let count = geometries.len().min(LANES);
        plan.lines
            .iter()
            .map(|line| self.energies[line.slot][..count].to_vec())
            .collect()
    }

    fn load(&mut self, chunk: &[Vec<[f64; 3]>]) {
        for lane in 0..LANES {
            // Idle lanes repeat the last geometry.
            let geometry = &chunk[lane.min(chunk.len() - 1)];
            for (atom, position) in self.lanes.iter_mut().zip(geometry) {
                for (axis, value) in atom.iter_mut().zip(position) {
                    axis[lane] = *value;
                }
            }
        }
    }

    fn transform_overlap(&mut self) {
        let n = self.atom_of.len();
        for (block, room) in self.plan.adapted.blocks.iter().zip(&mut self.rooms) {
            block.transform_lanes(n, &self.s, &mut room.s);
        }
    }

    /// Eigenvalues (and vectors) of the H that is there; energies become NaN where that fails.
    fn solve(&mut self, vectors: bool) {
        let n = self.atom_of.len();
        for (block, room) in self.plan.adapted.blocks.iter().zip(&mut self.rooms) {
            block.transform_lanes(n, &self.h, &mut room.h);
            let status = room.eigen.solve(&room.h, &room.s, vectors);
            let energies = &mut self.energies[room.first_slot..][..block.size()];
            energies.copy_from_slice(room.eigen.values());
            for lane in 0..LANES {
                let failed = status
                    .as_ref()
                    .map_or(true, |status| matches!(status[lane], LaneStatus::Failed(_)));
                if failed {
                    energies
                        .iter_mut()
                        .for_each(|energy| energy[lane] = f64::NAN);
                }
            }
        }
    }

    fn sums(&mut self, model: &Model<'_>) -> (Lanes, [bool; LANES]) {
        let plan = self.plan;
        let diagonal = model.hamiltonian.diagonal_ev();
        let k = [model.hamiltonian.method().k; LANES];
        let mut shifted: Vec<Lanes> = diagonal.iter().map(|&value| [value; LANES]).collect();
        let Some(response) = model.response else {
            model
                .hamiltonian
                .couple_lanes(&self.lanes, &shifted, &k, &self.s, &mut self.h);
            self.solve(false);
            return (self.fill(), [true; LANES]);
        };
        let atoms = plan.basis.atoms.len();
        let mut charges = vec![[0.0; LANES]; atoms];
        let mut populations = vec![[0.0; LANES]; atoms];
        let mut sums = [f64::NAN; LANES];
        let mut left = [f64::INFINITY; LANES];
        for _ in 0..response.iterations {
            for (function, value) in shifted.iter_mut().enumerate() {
                for lane in 0..LANES {
                    let charge = charges[self.atom_of[function]][lane];
                    value[lane] = diagonal[function] - response.per_charge_ev * charge;
                }
            }
            model
                .hamiltonian
                .couple_lanes(&self.lanes, &shifted, &k, &self.s, &mut self.h);
            self.solve(true);
            sums = self.fill();
            self.populations(&mut populations);
            left = step(&mut charges, &self.valence, &populations);
            // A lane without a solution must not keep the others waiting.
            if (0..LANES).all(|lane| left[lane] < response.tolerance || !sums[lane].is_finite()) {
                break;
            }
        }
        (sums, left.map(|left| left < response.tolerance))
    }

    /// Hands out the electrons in every lane; Σ n ε.
    fn fill(&mut self) -> Lanes {
        let lines = &self.plan.lines;
        let mut energies = vec![0.0; lines.len()];
        let mut filled = vec![0.0; lines.len()];
        let mut sums = [0.0; LANES];
        for lane in 0..LANES {
            for (energy, line) in energies.iter_mut().zip(lines) {
                *energy = self.energies[line.slot][lane];
            }
            self.order
                .sort_by(|&a, &b| energies[a].total_cmp(&energies[b]).then(a.cmp(&b)));
            self.plan.filling.fill(&self.order, &energies, &mut filled);
            let mut sum = 0.0;
            for line in 0..lines.len() {
                self.occupations[line][lane] = filled[line];
                sum += filled[line] * energies[line];
            }
            sums[lane] = sum;
        }
        sums
    }

    /// Mulliken's gross populations of the atoms.
    fn populations(&mut self, out: &mut [Lanes]) {
        let n = self.atom_of.len();
        out.fill([0.0; LANES]);
        for (block, room) in self.plan.adapted.blocks.iter().zip(&mut self.rooms) {
            for row in 0..block.row_count() {
                block.expand_lanes(row, n, room.eigen.vectors(), &mut room.expanded);
                let support = &room.support[row];
                for place in 0..block.size() {
                    let line = self.line_of[room.first_slot + place][row];
                    let weight = &self.occupations[line];
                    if weight.iter().all(|&weight| weight.abs() < 1e-12) {
                        continue;
                    }
                    let vector = &room.expanded[place * n..][..n];
                    for &i in support {
                        let mut product = [0.0; LANES];
                        for &j in support {
                            let (s, c) = (&self.s[i * n + j], &vector[j]);
                            for lane in 0..LANES {
                                product[lane] += s[lane] * c[lane];
                            }
                        }
                        let total = &mut out[self.atom_of[i]];
                        for lane in 0..LANES {
                            total[lane] += weight[lane] * vector[i][lane] * product[lane];
                        }
                    }
                }
            }
        }
    }
}
