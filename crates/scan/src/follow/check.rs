//! Orbitals of neighbouring nodes compared, where little symmetry tells lines apart.

use orbend_structure::Axis;
use pathfinding::matrix::Matrix;
use pathfinding::prelude::kuhn_munkres;
use rayon::prelude::*;

use super::{CLEAR_OVERLAP, Event, Evidence};
use crate::character::{Character, share};
use crate::crossing::{nodes, resolution};
use crate::error::ScanError;
use crate::plan::SweepPlan;

/// Times that an interval is halved before it is declared ambiguous.
const HALVINGS: u32 = 6;
/// Intervals per task: each solves one node more than it has intervals.
const CHUNK: usize = 16;
/// Groups up to this order leave most lines in one irrep.
const LITTLE: usize = 2;

/// What happens to every line over one interval.
#[derive(Clone, Debug)]
pub(super) struct Check {
    pub(super) to: f64,
    pub(super) overlap: Vec<f64>,
    pub(super) ambiguous: Vec<Vec<Evidence>>,
}

/// Every interval between nodes from the first to the last of `values` that are at most the resolution of the
/// crossing search apart; none where the path group tells lines apart.
pub(super) fn checks(
    plan: &SweepPlan,
    axis: &Axis,
    values: &[f64],
    events: &[Event],
) -> Result<Vec<Check>, ScanError> {
    if plan.group.linear || plan.group.order() > LITTLE {
        return Ok(Vec::new());
    }
    let (low, high) = axis.limits();
    let nodes = nodes(values, resolution(&axis.unit, high - low));
    let intervals = nodes.len().saturating_sub(1);
    let starts: Vec<usize> = (0..intervals).step_by(CHUNK).collect();
    let done: Vec<Result<Vec<Check>, ScanError>> = starts
        .par_iter()
        .map(|&start| {
            let end = (start + CHUNK).min(intervals);
            let mut before = Character::new(plan, &nodes[start..=start])?;
            let mut found = Vec::with_capacity(end - start);
            for k in start + 1..=end {
                let after = Character::new(plan, &nodes[k..=k])?;
                let ends = ((nodes[k - 1], &before), (nodes[k], &after));
                found.push(check(plan, events, ends, HALVINGS)?);
                before = after;
            }
            Ok(found)
        })
        .collect();
    let mut checks = Vec::with_capacity(intervals);
    for chunk in done {
        checks.extend(chunk?);
    }
    Ok(checks)
}

/// A node of the path and its orbitals.
type Node<'a> = (f64, &'a Character);

fn check(
    plan: &SweepPlan,
    events: &[Event],
    (before, after): (Node<'_>, Node<'_>),
    halvings: u32,
) -> Result<Check, ScanError> {
    let (from, to) = (before.0, after.0);
    let (low, high) = (from.min(to), from.max(to));
    let count = plan.lines.len();
    let (next, overlap) = assign(plan, before.1, after.1);
    let here: Vec<&Event> = events
        .iter()
        .filter(|event| event.passes && (low..=high).contains(&event.at))
        .collect();
    let passed = |line: usize| {
        here.iter()
            .fold(line, |now, event| event.partner(plan, now).unwrap_or(now))
    };
    let clear = overlap.iter().all(|overlap| *overlap >= CLEAR_OVERLAP);
    let kept = (0..count).all(|line| next[line] == line);
    if clear && (kept || (0..count).all(|line| next[line] == passed(line))) {
        return Ok(Check {
            to,
            overlap,
            ambiguous: vec![Vec::new(); count],
        });
    }
    if halvings == 0 {
        // Inside a known exchange that is narrower than this the orbitals are
        // mixtures of both; its own share says what happens.
        let width = high - low;
        let known = |line: usize| {
            events.iter().any(|event| {
                event.passes
                    && (low - width..=high + width).contains(&event.at)
                    && event.partner(plan, line).is_some()
            })
        };
        let unclear =
            |line: usize| !known(line) && (overlap[line] < CLEAR_OVERLAP || next[line] != line);
        let ambiguous = (0..count)
            .map(|line| {
                let stretch = Evidence {
                    from,
                    to,
                    overlap: overlap[line],
                };
                if unclear(line) {
                    vec![stretch]
                } else {
                    Vec::new()
                }
            })
            .collect();
        let overlap = (0..count)
            .map(|line| if known(line) { 1.0 } else { overlap[line] })
            .collect();
        return Ok(Check {
            to,
            overlap,
            ambiguous,
        });
    }
    let middle = 0.5 * (from + to);
    let between = Character::new(plan, &[middle])?;
    let first = check(plan, events, (before, (middle, &between)), halvings - 1)?;
    let second = check(plan, events, ((middle, &between), after), halvings - 1)?;
    let inside = |at: f64| (from.min(middle)..=from.max(middle)).contains(&at);
    let image = |line: usize| {
        here.iter()
            .filter(|event| inside(event.at))
            .fold(line, |now, event| event.partner(plan, now).unwrap_or(now))
    };
    Ok(Check {
        to,
        overlap: (0..count)
            .map(|line| first.overlap[line].min(second.overlap[image(line)]))
            .collect(),
        ambiguous: (0..count)
            .map(|line| {
                let later = &second.ambiguous[image(line)];
                first.ambiguous[line].iter().chain(later).copied().collect()
            })
            .collect(),
    })
}

/// The best assignment of all lines and its squared overlaps.
fn assign(plan: &SweepPlan, before: &Character, after: &Character) -> (Vec<usize>, Vec<f64>) {
    let count = plan.lines.len();
    let mut next: Vec<usize> = (0..count).collect();
    let mut overlaps = vec![1.0; count];
    for (index, block) in plan.adapted.blocks.iter().enumerate() {
        // One row stands for all; levels of a paired block are taken as sets.
        let size = block.levels_per_set();
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
            for line in 0..count {
                let head = &plan.lines[line];
                if head.block != index || head.place / size != from {
                    continue;
                }
                let place = to * size + head.place % size;
                overlaps[line] = overlap;
                if let Some(image) = plan.lines.iter().position(|other| {
                    other.block == index && other.row == head.row && other.place == place
                }) {
                    next[line] = image;
                }
            }
        }
    }
    (next, overlaps)
}
