//! What is checked before a path runs: values reached, nothing undefined, no
//! two atoms meeting, also between the points.

use super::error::PathError;
use super::{PathPlan, Shape};
use crate::molecule::SMALLEST_DISTANCE;
use crate::vector::distance;

/// Grids up to this many points are checked point by point, larger ones at an
/// even selection with all corners.
const CHECKED_POINTS: usize = 50_000;

pub(crate) fn check(plan: &mut PathPlan) -> Result<(), PathError> {
    if check_points(plan).is_err() {
        if let Shape::Internal(sequence) = &mut plan.shape {
            sequence.let_them_settle();
        }
        check_points(plan)?;
    }
    let mut values = vec![0.0; plan.axes.len()];
    let mut positions = plan.start.positions.clone();
    walk(plan, 0, &mut values, &mut positions)?;
    Ok(())
}

/// Every point is defined and has its values; where coordinates disturb one
/// another the plan is told to let them settle.
fn check_points(plan: &PathPlan) -> Result<(), PathError> {
    let Shape::Internal(sequence) = &plan.shape else {
        return Ok(());
    };
    let points = plan.points();
    let stride = points.div_ceil(CHECKED_POINTS);
    let mut positions = plan.start.positions.clone();
    let mut point = 0;
    loop {
        let values = plan.values(point);
        plan.positions(&values, &mut positions)?;
        if let Some(stop) = sequence.check_reached(&plan.axes, &values, &positions) {
            return Err(plan.name_stop(&stop, &values));
        }
        if point + 1 == points {
            return Ok(());
        }
        point = (point + stride).min(points - 1);
    }
}

/// Walks along axis `depth` (and, inside, along the faster ones) in steps so
/// short that no pair of atoms can meet between two of them, and returns the
/// smallest distance above 0.2 Å that was seen.
fn walk(
    plan: &PathPlan,
    depth: usize,
    values: &mut [f64],
    positions: &mut [[f64; 3]],
) -> Result<f64, PathError> {
    let Some(axis) = plan.axes.get(depth) else {
        plan.positions(values, positions)?;
        return gap(plan, values, positions);
    };
    // Shortest step: the span over 2000 along one axis, 60 along each of two.
    let parts = [2000.0, 60.0, 16.0][(plan.axes.len() - 1).min(2)];
    let mut smallest = f64::INFINITY;
    let (from, to) = (axis.values[0], axis.values[axis.values.len() - 1]);
    let span = (to - from).abs();
    let mut done = 0.0;
    loop {
        values[depth] = if done >= span {
            to
        } else {
            from + (to - from).signum() * done
        };
        let gap = walk(plan, depth + 1, values, positions)?;
        smallest = smallest.min(gap);
        if done >= span {
            return Ok(smallest);
        }
        // Two atoms approach one another by at most twice the speed of one.
        let speed = speed(plan, depth, positions);
        done += (0.4 * gap / speed).max(span / parts);
    }
}

fn speed(plan: &PathPlan, depth: usize, positions: &[[f64; 3]]) -> f64 {
    match &plan.shape {
        Shape::Internal(sequence) if plan.axes.len() == sequence.len() => {
            sequence.speed(depth, positions).max(1e-6)
        }
        // Coordinates in step, or frames: only the shortest step is safe.
        _ => f64::INFINITY,
    }
}

fn gap(plan: &PathPlan, values: &[f64], positions: &[[f64; 3]]) -> Result<f64, PathError> {
    let mut gap = f64::INFINITY;
    for (second, &place) in positions.iter().enumerate() {
        for (first, &other) in positions[..second].iter().enumerate() {
            let apart = distance(place, other);
            if apart < SMALLEST_DISTANCE {
                return Err(PathError::Clash {
                    first: plan.start.atom_name(first),
                    second: plan.start.atom_name(second),
                    distance: apart,
                    at: plan.place(values),
                });
            }
            gap = gap.min(apart - SMALLEST_DISTANCE);
        }
    }
    Ok(gap)
}
