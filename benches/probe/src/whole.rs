//! The same points without symmetry: what blocks are measured against.

use std::error::Error;
use std::io::Write;

use orbend_eigen::{LANES, LaneStatus, LaneWorkspace, Lanes};
use orbend_hamiltonian::HamiltonianPlan;
use orbend_scan::SweepPlan;

/// Eigenvalues of the whole matrices at every point, eight points at a time, on one thread; their sum.
pub(crate) fn solve(plan: &SweepPlan) -> Result<f64, Box<dyn Error>> {
    let hamiltonian = HamiltonianPlan::new(plan.basis(), &plan.request().method)?;
    let n = hamiltonian.len();
    let mut positions = plan.molecule().positions.clone();
    let mut lanes: Vec<[Lanes; 3]> = vec![[[0.0; LANES]; 3]; positions.len()];
    let (mut s, mut h) = (vec![[0.0; LANES]; n * n], vec![[0.0; LANES]; n * n]);
    let mut room = LaneWorkspace::new(n);
    room.set_smallest_overlap(true);
    let mut total = 0.0;
    for first in (0..plan.points()).step_by(LANES) {
        let used = LANES.min(plan.points() - first);
        for lane in 0..LANES {
            let point = first + lane.min(used - 1);
            plan.path().positions(&plan.values(point), &mut positions)?;
            for (atom, position) in lanes.iter_mut().zip(&positions) {
                for (axis, value) in atom.iter_mut().zip(position) {
                    axis[lane] = *value;
                }
            }
        }
        hamiltonian.fill_lanes(&lanes, &mut s, &mut h);
        let status = room.solve(&h, &s, false)?;
        if status
            .iter()
            .any(|lane| matches!(lane, LaneStatus::Failed(_)))
        {
            return Err("a point could not be solved".into());
        }
        total += room.values().iter().flatten().sum::<f64>();
    }
    Ok(total)
}

/// H and S of `count` geometries evenly along the path.
pub(crate) fn write_matrices(
    case: &crate::cases::Case,
    count: usize,
    file: &str,
) -> Result<(), Box<dyn Error>> {
    let plan = case.plan()?;
    let hamiltonian = HamiltonianPlan::new(plan.basis(), &plan.request().method)?;
    let n = hamiltonian.len();
    let mut positions = plan.molecule().positions.clone();
    let (mut s, mut h) = (vec![0.0; n * n], vec![0.0; n * n]);
    let mut out = std::io::BufWriter::new(std::fs::File::create(file)?);
    for number in [n as u64, count as u64] {
        out.write_all(&number.to_le_bytes())?;
    }
    for index in 0..count {
        let point = index * (plan.points() - 1) / count.max(2).saturating_sub(1);
        plan.path().positions(&plan.values(point), &mut positions)?;
        hamiltonian.fill(&positions, &mut s, &mut h);
        for number in h.iter().chain(&s) {
            out.write_all(&number.to_le_bytes())?;
        }
    }
    Ok(out.flush()?)
}
