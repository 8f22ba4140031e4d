//! The hot loop: eight geometries at once, block by block.

use orbend_eigen::{EigenError, LANES, LaneStatus, LaneWorkspace, Lanes};
use orbend_symmetry::AdaptedBasis;

use crate::error::ScanError;
use crate::plan::SweepPlan;

/// Buffers of one thread: nothing is allocated per point.
#[derive(Debug)]
pub(crate) struct Workspace {
    positions: Vec<[f64; 3]>,
    lanes: Vec<[Lanes; 3]>,
    overlap: Vec<Lanes>,
    hamiltonian: Vec<Lanes>,
    blocks: Vec<BlockWorkspace>,
}

#[derive(Debug)]
struct BlockWorkspace {
    overlap: Vec<Lanes>,
    hamiltonian: Vec<Lanes>,
    eigen: LaneWorkspace,
}

impl Workspace {
    pub(crate) fn new(plan: &SweepPlan) -> Self {
        let atoms = plan.molecule.positions.len();
        let n = plan.basis.functions.len();
        let blocks = plan
            .adapted
            .blocks
            .iter()
            .map(|block| {
                let m = block.size();
                let mut eigen = LaneWorkspace::new(m);
                eigen.set_smallest_overlap(true);
                BlockWorkspace {
                    overlap: vec![[0.0; LANES]; m * m],
                    hamiltonian: vec![[0.0; LANES]; m * m],
                    eigen,
                }
            })
            .collect();
        let mut workspace = Self {
            positions: plan.reference.clone(),
            lanes: vec![[[0.0; LANES]; 3]; atoms],
            overlap: vec![[0.0; LANES]; n * n],
            hamiltonian: vec![[0.0; LANES]; n * n],
            blocks,
        };
        for lane in 0..LANES {
            workspace.load(lane);
        }
        plan.hamiltonian.fill_lanes(
            &workspace.lanes,
            &mut workspace.overlap,
            &mut workspace.hamiltonian,
        );
        workspace
    }
}

/// The rows of the result tables that one chunk of points fills.
pub(crate) struct Rows<'a> {
    /// `points × slots`, eV.
    pub(crate) energies: &'a mut [f64],
    /// Smallest eigenvalue of S, per point.
    pub(crate) smallest: &'a mut [f64],
    /// Whether the point's own group may be larger than the path group.
    pub(crate) special: &'a mut [bool],
}

impl SweepPlan {
    /// Columns of the energy table: one per level, degenerate partners shared.
    pub(crate) fn slots(&self) -> usize {
        self.adapted.blocks.iter().map(|block| block.size()).sum()
    }

    /// Energies by slot (eV) at one set of coordinate values.
    pub(crate) fn slot_energies(
        &self,
        values: &[f64],
        workspace: &mut Workspace,
    ) -> Result<Vec<f64>, ScanError> {
        let slots = self.slots();
        let mut energies = vec![0.0; slots];
        self.path.positions(values, &mut workspace.positions)?;
        for lane in 0..LANES {
            workspace.load(lane);
        }
        let mut smallest = [0.0; LANES];
        self.solve_loaded(workspace, 1, &mut smallest, |slot, lanes| {
            energies[slot] = lanes[0];
        })
        .map_err(|failure| self.explain(&self.adapted, failure.block, failure.error, values))?;
        Ok(energies)
    }

    /// Energies by slot at up to eight values of a path with one parameter,
    /// `at.len() × slots`.
    pub(crate) fn batch_energies(
        &self,
        at: &[f64],
        workspace: &mut Workspace,
        out: &mut [f64],
    ) -> Result<(), ScanError> {
        let slots = self.slots();
        let used = at.len().min(LANES);
        for lane in 0..LANES {
            if lane < used {
                self.path
                    .positions(&at[lane..=lane], &mut workspace.positions)?;
            }
            workspace.load(lane);
        }
        let mut smallest = [0.0; LANES];
        self.solve_loaded(workspace, used, &mut smallest, |slot, lanes| {
            for lane in 0..used {
                out[lane * slots + slot] = lanes[lane];
            }
        })
        .map_err(|failure| {
            let values = [at[failure.lane.min(used - 1)]];
            self.explain(&self.adapted, failure.block, failure.error, &values)
        })
    }

    /// Solves the points `first .. first + rows.smallest.len()`.
    pub(crate) fn solve_rows(
        &self,
        first: usize,
        rows: &mut Rows<'_>,
        workspace: &mut Workspace,
    ) -> Result<(), ScanError> {
        let slots = self.slots();
        let count = rows.smallest.len();
        let mut values = [0.0; 8];
        let mut start = 0;
        while start < count {
            let used = LANES.min(count - start);
            for lane in 0..LANES {
                // Idle lanes repeat the last geometry: their results are dropped.
                let point = first + start + lane.min(used - 1);
                if lane < used {
                    let values = self.values_of(point, &mut values);
                    self.path.positions(values, &mut workspace.positions)?;
                    rows.special[start + lane] = !self.screen.unchanged(&workspace.positions);
                }
                workspace.load(lane);
            }
            let mut smallest = [0.0; LANES];
            let energies = &mut rows.energies[start * slots..(start + used) * slots];
            self.solve_loaded(workspace, used, &mut smallest, |slot, lanes| {
                for lane in 0..used {
                    energies[lane * slots + slot] = lanes[lane];
                }
            })
            .map_err(|failure| {
                let values = self.values(first + start + failure.lane);
                self.explain(&self.adapted, failure.block, failure.error, &values)
            })?;
            rows.smallest[start..start + used].copy_from_slice(&smallest[..used]);
            start += used;
        }
        Ok(())
    }
}

impl Workspace {
    /// Copies the current positions into one lane.
    fn load(&mut self, lane: usize) {
        for (atom, position) in self.lanes.iter_mut().zip(&self.positions) {
            for (axis, value) in atom.iter_mut().zip(position) {
                axis[lane] = *value;
            }
        }
    }
}

/// What went wrong in which lane.
pub(crate) struct LaneFailure {
    lane: usize,
    error: EigenError,
    block: usize,
}

impl SweepPlan {
    /// Overlap, Hamiltonian, blocks and eigenvalues of the loaded geometries;
    /// `store` takes the energies slot by slot.
    fn solve_loaded(
        &self,
        workspace: &mut Workspace,
        used: usize,
        smallest: &mut Lanes,
        mut store: impl FnMut(usize, &Lanes),
    ) -> Result<(), LaneFailure> {
        self.hamiltonian.refill_lanes(
            &workspace.lanes,
            &self.moving,
            &self.read,
            &mut workspace.overlap,
            &mut workspace.hamiltonian,
        );
        let functions = self.basis.functions.len();
        *smallest = [f64::INFINITY; LANES];
        let mut slot = 0;
        for (index, (block, room)) in self
            .adapted
            .blocks
            .iter()
            .zip(&mut workspace.blocks)
            .enumerate()
        {
            block.transform_lanes(functions, &workspace.overlap, &mut room.overlap);
            block.transform_lanes(functions, &workspace.hamiltonian, &mut room.hamiltonian);
            let status = room
                .eigen
                .solve(&room.hamiltonian, &room.overlap, false)
                .map_err(|error| LaneFailure {
                    lane: 0,
                    error,
                    block: index,
                })?;
            for (lane, status) in status.into_iter().enumerate().take(used) {
                if let LaneStatus::Failed(error) = status {
                    return Err(LaneFailure {
                        lane,
                        error,
                        block: index,
                    });
                }
            }
            for values in room.eigen.values() {
                store(slot, values);
                slot += 1;
            }
            for (least, value) in smallest
                .iter_mut()
                .zip(room.eigen.smallest_overlap_eigenvalues())
            {
                *least = least.min(*value);
            }
        }
        Ok(())
    }
}

impl SweepPlan {
    /// A solver's error in the words of the molecule: a singular S names the
    /// two atoms whose functions say the same.
    pub(crate) fn explain(
        &self,
        adapted: &AdaptedBasis,
        block: usize,
        error: EigenError,
        values: &[f64],
    ) -> ScanError {
        let at = match values {
            [] => "this geometry".to_owned(),
            values => self.path.place(values),
        };
        let EigenError::Singular {
            eigenvalue,
            weights,
        } = error
        else {
            return ScanError::Eigen {
                at,
                cause: error.to_string(),
            };
        };
        let mut shares = vec![0.0; self.basis.atoms.len()];
        for (column, weight) in adapted.blocks[block].first.iter().zip(weights) {
            for &(function, coefficient) in column {
                shares[self.basis.functions[function].atom] += weight * coefficient * coefficient;
            }
        }
        let mut order: Vec<usize> = (0..shares.len()).collect();
        order.sort_by(|&a, &b| shares[b].total_cmp(&shares[a]).then(a.cmp(&b)));
        let name = |place: usize| {
            order
                .get(place)
                .map_or_else(String::new, |&atom| self.molecule.atom_name(atom))
        };
        ScanError::Singular {
            at,
            eigenvalue,
            first: name(0),
            second: name(1),
        }
    }
}
