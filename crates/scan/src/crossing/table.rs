//! Energies at nodes that are halved where two levels come close.

use rayon::prelude::*;

use super::model::{BATCH, LevelModel};

/// Times that an interval may be halved.
const HALVINGS: usize = 6;
/// A slope between nodes may exceed the neighbouring secants by this factor.
const SAFETY: f64 = 2.0;
/// Gaps (eV) up to this are looked at for avoided crossings.
pub const AVOIDED_GAP_EV: f64 = 1.0;
/// Gaps (eV) below this count as none: some thousand times the rounding.
pub(crate) const ZERO_EV: f64 = 1e-9;

/// Nodes along the path, in path order, and the energies there.
pub(super) struct Table {
    pub(super) at: Vec<f64>,
    /// One row per node.
    pub(super) energies: Vec<Vec<f64>>,
}

impl Table {
    /// Solves the nodes and halves intervals until every pair of levels is
    /// settled or the halvings are used up.
    pub(super) fn new<M: LevelModel>(model: &M, nodes: &[f64]) -> Result<Self, M::Error> {
        let mut table = Self { at: nodes.to_vec(), energies: solve(model, nodes)? };
        let mut open: Vec<bool> = vec![true; nodes.len().saturating_sub(1)];
        for _ in 0..HALVINGS {
            let halved: Vec<bool> = (0..open.len())
                .into_par_iter()
                .map(|k| open[k] && table.unsettled(model.classes(), k))
                .collect();
            let middles: Vec<f64> = (0..halved.len())
                .filter(|&k| halved[k])
                .map(|k| 0.5 * (table.at[k] + table.at[k + 1]))
                .collect();
            if middles.is_empty() {
                break;
            }
            let mut made = middles.iter().copied().zip(solve(model, &middles)?);
            let (mut at, mut energies, mut next) = (Vec::new(), Vec::new(), Vec::new());
            for (k, row) in table.energies.drain(..).enumerate() {
                at.push(table.at[k]);
                energies.push(row);
                let Some(&halve) = halved.get(k) else { continue };
                next.push(halve);
                if halve && let Some((middle, row)) = made.next() {
                    at.push(middle);
                    energies.push(row);
                    next.push(true);
                }
            }
            table = Self { at, energies };
            open = next;
        }
        Ok(table)
    }

    /// Gap of two columns at a node.
    pub(super) fn gap(&self, node: usize, pair: (usize, usize)) -> f64 {
        self.energies[node][pair.1] - self.energies[node][pair.0]
    }

    /// Whether some pair could do more between the nodes `k` and `k + 1` than
    /// its values there show.
    fn unsettled(&self, classes: &[usize], k: usize) -> bool {
        let columns = classes.len();
        let first = k.saturating_sub(1);
        let last = (k + 1).min(self.at.len() - 2);
        for i in 0..columns {
            for j in i + 1..columns {
                if classes[i] == classes[j] && j > i + 1 {
                    continue;
                }
                let pair = (i, j);
                let (a, b) = (self.gap(k, pair), self.gap(k + 1, pair));
                if a.abs() < ZERO_EV && b.abs() < ZERO_EV {
                    continue;
                }
                let width = (self.at[k + 1] - self.at[k]).abs();
                let (mut least, mut most) = (f64::INFINITY, f64::NEG_INFINITY);
                for piece in first..=last {
                    let run = (self.at[piece + 1] - self.at[piece]).abs();
                    let slope = (self.gap(piece + 1, pair) - self.gap(piece, pair)) / run;
                    least = least.min(slope);
                    most = most.max(slope);
                }
                let steepest = SAFETY * least.abs().max(most.abs());
                if a.abs() + b.abs() > steepest * width {
                    continue;
                }
                let crosses = (a < 0.0) != (b < 0.0);
                let steady = least * most > 0.0
                    && least.abs().min(most.abs()) > 0.25 * least.abs().max(most.abs());
                if !(crosses && steady) {
                    return true;
                }
            }
        }
        false
    }
}

/// Energies at all arguments, batch by batch; the batches do not depend on the
/// number of threads.
fn solve<M: LevelModel>(model: &M, at: &[f64]) -> Result<Vec<Vec<f64>>, M::Error> {
    let columns = model.classes().len();
    let batches: Vec<Result<Vec<Vec<f64>>, M::Error>> = at
        .par_chunks(BATCH)
        .map_init(
            || model.room(),
            |room, batch| {
                let mut out = vec![0.0; batch.len() * columns];
                model.energies(room, batch, &mut out)?;
                Ok(out.chunks_exact(columns.max(1)).map(<[f64]>::to_vec).collect())
            },
        )
        .collect();
    let mut rows = Vec::with_capacity(at.len());
    for batch in batches {
        rows.extend(batch?);
    }
    Ok(rows)
}
