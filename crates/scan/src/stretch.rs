//! Neighbouring points solved and handed on in order, so that a sweep of any
//! length runs in bounded memory.

use std::collections::BTreeMap;

use rayon::prelude::*;

use crate::error::ScanError;
use crate::plan::SweepPlan;
use crate::point_levels::PointLevels;
use crate::solve::{Rows, Workspace};
use crate::special::{SpecialPoint, label_in_own_group};

/// Points of a stretch. A multiple of the lanes: the same points share lanes
/// as in a sweep that is kept.
const STRETCH: usize = 1024;
/// Stretches that are solved before the first of them is handed on.
const ROUND: usize = 16;

/// Up to 1024 neighbouring points that have been solved.
#[derive(Debug)]
pub struct Stretch<'a> {
    plan: &'a SweepPlan,
    first: usize,
    /// `points × slots`, eV.
    energies: Vec<f64>,
    points: usize,
    special: BTreeMap<usize, SpecialPoint>,
}

impl<'a> Stretch<'a> {
    fn solve(
        plan: &'a SweepPlan,
        first: usize,
        workspace: &mut Workspace,
    ) -> Result<Self, ScanError> {
        let points = STRETCH.min(plan.points() - first);
        let mut energies = vec![0.0; points * plan.slots()];
        let mut smallest = vec![0.0; points];
        let mut flagged = vec![false; points];
        let mut rows = Rows {
            energies: &mut energies,
            smallest: &mut smallest,
            special: &mut flagged,
        };
        plan.solve_rows(first, &mut rows, workspace)?;
        let mut special = BTreeMap::new();
        for point in (0..points).filter(|&point| flagged[point]) {
            if let Some(found) = label_in_own_group(plan, first + point)? {
                special.insert(first + point, found);
            }
        }
        Ok(Self {
            plan,
            first,
            energies,
            points,
            special,
        })
    }

    /// The numbers of its points among those of the sweep.
    pub fn points(&self) -> std::ops::Range<usize> {
        self.first..self.first + self.points
    }

    /// The plan of the sweep.
    pub fn plan(&self) -> &'a SweepPlan {
        self.plan
    }

    /// The levels of one of its points, written to `out`.
    pub fn levels(&self, point: usize, out: &mut PointLevels) {
        let slots = self.plan.slots();
        let row = &self.energies[(point - self.first) * slots..][..slots];
        out.fill(self.plan, |slot| row[slot]);
    }

    /// What is special about a point, where its own group is larger than the
    /// path group.
    pub fn special(&self, point: usize) -> Option<&SpecialPoint> {
        self.special.get(&point)
    }
}

impl SweepPlan {
    /// Solves all points without keeping them: `make` is called for every
    /// stretch on the caller's rayon pool, `take` gets what it made in the
    /// order of the sweep, whatever the number of threads.
    ///
    /// # Errors
    /// A point that cannot be solved, or the first error of `make` or `take`;
    /// `take` has then seen everything before it.
    pub fn stream<T: Send, E: From<ScanError> + Send>(
        &self,
        make: impl Fn(&Stretch<'_>) -> Result<T, E> + Sync,
        mut take: impl FnMut(T) -> Result<(), E> + Send,
    ) -> Result<(), E> {
        let count = self.points().div_ceil(STRETCH);
        let mut made: Vec<Result<T, E>> = Vec::new();
        for from in (0..count).step_by(ROUND) {
            let round = from..count.min(from + ROUND);
            let ready = std::mem::take(&mut made);
            // One round is handed on while the next one is solved.
            let (next, taken) = rayon::join(
                || {
                    round
                        .into_par_iter()
                        .map_init(
                            || Workspace::new(self),
                            |workspace, number| {
                                make(&Stretch::solve(self, number * STRETCH, workspace)?)
                            },
                        )
                        .collect()
                },
                || ready.into_iter().try_for_each(|piece| take(piece?)),
            );
            taken?;
            made = next;
        }
        made.into_iter().try_for_each(|piece| take(piece?))
    }
}
