//! Lines followed by their character instead of their energy order.

use pathfinding::matrix::Matrix;
use pathfinding::prelude::kuhn_munkres;
use rayon::prelude::*;

use crate::character::{Character, share};
use crate::error::ScanError;
use crate::plan::SweepPlan;
use crate::sweep::Sweep;

/// An assignment whose squared overlaps all exceed this is the only one that
/// does: the squares of a row or column sum to one at most.
pub const CLEAR_OVERLAP: f64 = 0.5;
/// Times that an interval is halved before it is declared ambiguous.
const HALVINGS: u32 = 6;

/// A stretch between two points where no assignment is clear.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ambiguity {
    /// First value of the path.
    pub from: f64,
    /// Last value of the path.
    pub to: f64,
    /// Squared overlap of the best assignment there, 0 to 1.
    pub overlap: f64,
}

/// One orbital character from the first point to the last.
#[derive(Clone, Debug, PartialEq)]
pub struct Followed {
    /// The line (energy order within its irrep) that has it at each point; at
    /// the first point the line of the same number.
    pub lines: Vec<usize>,
    /// Smallest squared overlap of neighbours that were assigned, 0 to 1.
    pub overlap: f64,
    /// Stretches where it is not clear; the energy order is kept there.
    pub ambiguous: Vec<Ambiguity>,
}

/// What happens to every line over one interval.
struct Step {
    /// The line after it that continues each line before it.
    next: Vec<usize>,
    overlap: Vec<f64>,
    ambiguous: Vec<Vec<Ambiguity>>,
}

impl Sweep {
    /// Follows every line by the overlap of the orbitals of neighbouring
    /// points (orthogonalised functions, see Löwdin 1950), assigned within each
    /// irrep by the method of Kuhn and Munkres (J. SIAM 5, 32 (1957)). Where no
    /// assignment is clear the interval is halved, up to six times, and then
    /// declared ambiguous. Degenerate sets are followed as sets. Empty for a
    /// grid or a single geometry.
    ///
    /// # Errors
    /// A geometry that cannot be solved.
    pub fn followed(&self) -> Result<Vec<Followed>, ScanError> {
        let plan = self.plan();
        let [axis] = plan.path.axes() else {
            return Ok(Vec::new());
        };
        let steps = plan
            .parameters(&axis.values)
            .par_windows(2)
            .map(|pair| {
                let before = Character::new(plan, &pair[..1])?;
                let after = Character::new(plan, &pair[1..])?;
                step(plan, (pair[0], &before), (pair[1], &after), HALVINGS)
            })
            .collect::<Vec<Result<Step, ScanError>>>()
            .into_iter()
            .collect::<Result<Vec<Step>, ScanError>>()?;
        Ok((0..plan.lines.len())
            .map(|line| {
                let mut followed = Followed {
                    lines: vec![line],
                    overlap: 1.0,
                    ambiguous: Vec::new(),
                };
                let mut now = line;
                for step in &steps {
                    followed.overlap = followed.overlap.min(step.overlap[now]);
                    followed.ambiguous.extend(&step.ambiguous[now]);
                    now = step.next[now];
                    followed.lines.push(now);
                }
                followed
            })
            .collect())
    }
}

fn step(
    plan: &SweepPlan,
    (from, before): (f64, &Character),
    (to, after): (f64, &Character),
    halvings: u32,
) -> Result<Step, ScanError> {
    let (mut direct, clear) = assign(plan, before, after);
    if clear {
        return Ok(direct);
    }
    if halvings == 0 {
        for (line, overlap) in direct.overlap.iter_mut().enumerate() {
            if *overlap < CLEAR_OVERLAP {
                direct.ambiguous[line].push(Ambiguity {
                    from,
                    to,
                    overlap: *overlap,
                });
            }
        }
        // The energy order is kept in every irrep with an unclear line.
        let unclear: Vec<usize> = plan
            .lines
            .iter()
            .zip(&direct.overlap)
            .filter(|(_, overlap)| **overlap < CLEAR_OVERLAP)
            .map(|(line, _)| line.block)
            .collect();
        for (line, head) in plan.lines.iter().enumerate() {
            if unclear.contains(&head.block) {
                direct.next[line] = line;
            }
        }
        return Ok(direct);
    }
    let middle = 0.5 * (from + to);
    let between = Character::new(plan, &[middle])?;
    let first = step(plan, (from, before), (middle, &between), halvings - 1)?;
    let second = step(plan, (middle, &between), (to, after), halvings - 1)?;
    let through = |line: usize| first.next[line];
    let count = plan.lines.len();
    Ok(Step {
        next: (0..count).map(|line| second.next[through(line)]).collect(),
        overlap: (0..count)
            .map(|line| first.overlap[line].min(second.overlap[through(line)]))
            .collect(),
        ambiguous: (0..count)
            .map(|line| {
                let later = &second.ambiguous[through(line)];
                first.ambiguous[line].iter().chain(later).copied().collect()
            })
            .collect(),
    })
}

/// The best assignment of all lines and whether it is clear.
fn assign(plan: &SweepPlan, before: &Character, after: &Character) -> (Step, bool) {
    let count = plan.lines.len();
    let mut step = Step {
        next: (0..count).collect(),
        overlap: vec![1.0; count],
        ambiguous: vec![Vec::new(); count],
    };
    let mut clear = true;
    for (index, block) in plan.adapted.blocks.iter().enumerate() {
        // One row stands for all; levels of a paired block are taken as sets.
        let size = if block.paired {
            block.dimension.max(1)
        } else {
            1
        };
        let mut members: Vec<usize> = (0..count)
            .filter(|&line| plan.lines[line].block == index && plan.lines[line].row == 0)
            .collect();
        members.sort_by_key(|&line| plan.lines[line].place);
        let sets: Vec<&[usize]> = members.chunks(size).collect();
        let common = |a: &[usize], b: &[usize]| -> f64 {
            let all: f64 = a
                .iter()
                .flat_map(|&i| b.iter().map(move |&j| (i, j)))
                .map(|(i, j)| share(before.of(i), after.of(j)))
                .sum();
            all / size as f64
        };
        let shares: Vec<Vec<f64>> = sets
            .iter()
            .map(|a| sets.iter().map(|b| common(a, b)).collect())
            .collect();
        let weights = shares.iter().map(|row| {
            row.iter()
                .map(|x| (x * 1e9).round() as i64)
                .collect::<Vec<i64>>()
        });
        let Ok(weights) = Matrix::from_rows(weights) else {
            continue;
        };
        if weights.rows == 0 {
            continue;
        }
        let (_, chosen) = kuhn_munkres(&weights);
        for (from, &to) in chosen.iter().enumerate() {
            let overlap = shares[from][to];
            clear &= overlap >= CLEAR_OVERLAP;
            for line in 0..count {
                let head = &plan.lines[line];
                if head.block != index || head.place / size != from {
                    continue;
                }
                let place = to * size + head.place % size;
                step.overlap[line] = overlap;
                if let Some(next) = plan.lines.iter().position(|other| {
                    other.block == index && other.row == head.row && other.place == place
                }) {
                    step.next[line] = next;
                }
            }
        }
    }
    (step, clear)
}
