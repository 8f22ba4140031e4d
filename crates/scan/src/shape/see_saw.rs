//! Four ligands have a third form that the path between tetrahedral and square-planar misses.

use crate::plan::SweepPlan;
use crate::request::{Request, Route};

use super::arguments::geometries;
use super::centre::{Centre, ShapeError};
use super::engine::{Engine, Model};
use super::motion::Motion;

/// By how much (eV) the lowest see-saw geometry, one pair straight and the other one bent between
/// 180° and 70°, lies below `lowest`, the lowest value of the same sum on the path of the verdict;
/// the better of the two choices of the bent pair. `None` where it is not lower, or more than four
/// single atoms hang on the centre.
///
/// # Errors
/// Electrons or parameters that do not fit.
pub(crate) fn see_saw(
    request: &Request,
    centre: &Centre,
    motion: Motion,
    lowest: f64,
) -> Result<Option<f64>, ShapeError> {
    let mut best: Option<f64> = None;
    for bent in 0..2 {
        let mut centre = centre.clone();
        centre.ligands.rotate_left(2 * bent);
        let Some(start) = centre.see_saw_start(&request.molecule) else {
            return Ok(None);
        };
        let mut request = request.clone();
        request.molecule.positions = start;
        request.route = Route::Coordinates;
        request.coordinates = motion.coordinates(&centre)?;
        request.coordinates.truncate(1);
        // A start that cannot open (ligands that touch) has no such path.
        let Ok(plan) = request.plan() else { continue };
        if let Some(sum) = lowest_sum(&plan, &centre, motion)? {
            best = Some(best.map_or(sum, |best| best.min(sum)));
        }
    }
    Ok(best.map(|best| lowest - best).filter(|&below| below > 0.0))
}

fn lowest_sum(
    plan: &SweepPlan,
    centre: &Centre,
    motion: Motion,
) -> Result<Option<f64>, ShapeError> {
    let positions = geometries(plan, centre, motion, true)?;
    let model = Model {
        hamiltonian: &plan.hamiltonian,
        response: None,
    };
    let curves = Engine::new(plan).curves(&positions, &[model]);
    Ok(curves
        .first()
        .and_then(|curve| curve.usable().iter().copied().min_by(f64::total_cmp)))
}
