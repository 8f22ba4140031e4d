//! The levels of one point: their order, electrons and sum.

use crate::plan::SweepPlan;

/// The levels of one point, indexed by line; reused from point to point.
#[derive(Clone, Debug)]
pub struct PointLevels {
    /// Lines by rising energy; equal energies in the order of the lines.
    pub order: Vec<usize>,
    /// Energy of each line, eV.
    pub energies: Vec<f64>,
    /// Electrons of each line, 0 to 2.
    pub occupations: Vec<f64>,
    /// Σ nᵢεᵢ, eV.
    pub sum: f64,
}

impl PointLevels {
    /// Room for the lines of a plan.
    pub fn new(plan: &SweepPlan) -> Self {
        let lines = plan.lines.len();
        Self {
            order: (0..lines).collect(),
            energies: vec![0.0; lines],
            occupations: vec![0.0; lines],
            sum: 0.0,
        }
    }

    /// Orders and fills the levels whose energies (eV) stand in the slots of the plan.
    pub(crate) fn fill(&mut self, plan: &SweepPlan, energy: impl Fn(usize) -> f64) {
        for (target, head) in self.energies.iter_mut().zip(&plan.lines) {
            *target = energy(head.slot);
        }
        let energies = &self.energies;
        // The order of the point before is nearly right already.
        self.order
            .sort_by(|&a, &b| energies[a].total_cmp(&energies[b]).then(a.cmp(&b)));
        plan.filling
            .fill(&self.order, energies, &mut self.occupations);
        self.sum = self
            .order
            .iter()
            .map(|&line| self.occupations[line] * self.energies[line])
            .sum();
    }
}
