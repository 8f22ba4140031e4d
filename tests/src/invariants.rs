//! What holds at every point of every sweep, checked with matrices built anew.

#![allow(
    clippy::expect_used,
    reason = "a failed expectation in a check is its message"
)]

use nalgebra::DMatrix;
use orbend_hamiltonian::HamiltonianPlan;
use orbend_scan::Sweep;

/// The largest departures found.
#[derive(Clone, Copy, Debug, Default)]
pub struct Residuals {
    /// |C†SC − 1|.
    pub orthonormality: f64,
    /// |HC − SCε|, eV.
    pub residual_ev: f64,
    /// |Σ charges − charge| and |Σ shares of a level − 1|.
    pub populations: f64,
    /// |trace(S⁻¹H) − Σε|, eV.
    pub trace_ev: f64,
}

impl Residuals {
    /// The larger of each.
    #[must_use]
    pub fn max(self, other: Self) -> Self {
        Self {
            orthonormality: self.orthonormality.max(other.orthonormality),
            residual_ev: self.residual_ev.max(other.residual_ev),
            populations: self.populations.max(other.populations),
            trace_ev: self.trace_ev.max(other.trace_ev),
        }
    }
}

/// Checks one point: C†SC = 1, HC = SCε, populations add up, |S| ≤ 1, S positive definite, the
/// trace, electrons, and levels by rising energy.
///
/// # Panics
/// Any of these does not hold.
pub fn check_point(sweep: &Sweep, index: usize) -> Residuals {
    let plan = sweep.plan();
    let point = sweep.point(index).expect("a point");
    let orbitals = sweep.orbitals(index).expect("orbitals");
    let n = plan.basis().functions.len();
    let mut out = Residuals::default();

    let (mut s, mut h) = (vec![0.0; n * n], vec![0.0; n * n]);
    HamiltonianPlan::new(plan.basis(), &plan.request().method)
        .expect("a plan")
        .fill(&point.positions, &mut s, &mut h);
    let s = DMatrix::from_row_slice(n, n, &s);
    let h = DMatrix::from_row_slice(n, n, &h);
    let c = DMatrix::from_fn(n, n, |function, line| {
        orbitals.coefficients[[line, function]]
    });
    let line_energies: Vec<f64> = (0..n).map(|line| sweep.energy(line, index)).collect();
    let e = DMatrix::from_fn(n, n, |i, j| if i == j { line_energies[i] } else { 0.0 });

    assert!(s.iter().all(|value| value.abs() <= 1.0 + 1e-12), "|S| ≤ 1");
    let decomposed = s.clone().cholesky().expect("S is positive definite");
    assert!(point.smallest_overlap_eigenvalue > 0.0);
    out.trace_ev = (decomposed.solve(&h).trace() - line_energies.iter().sum::<f64>()).abs();
    out.orthonormality = (c.transpose() * &s * &c - DMatrix::identity(n, n)).amax();
    out.residual_ev = (&h * &c - &s * &c * e).amax();

    let mut occupations = vec![0.0; n];
    for level in &point.levels {
        occupations[level.line] = level.occupation;
    }
    let electrons: f64 = occupations.iter().sum();
    assert!(
        (electrons - f64::from(plan.electrons().total())).abs() < 1e-9,
        "electrons"
    );
    let populations = orbitals.populations(plan.basis(), &occupations);
    let charge: f64 = populations.charges.iter().sum();
    out.populations = (charge - f64::from(plan.molecule().charge)).abs();
    for row in populations.shares.rows() {
        out.populations = out.populations.max((row.sum() - 1.0).abs());
    }
    assert!(
        point.levels.is_sorted_by(|a, b| a.energy <= b.energy),
        "levels by rising energy"
    );
    assert_eq!(point.levels.len(), n);

    assert!(
        out.orthonormality < 1e-10,
        "C†SC = 1 within {:e}",
        out.orthonormality
    );
    assert!(
        out.residual_ev < 1e-8,
        "HC = SCε within {:e} eV",
        out.residual_ev
    );
    assert!(
        out.populations < 1e-9,
        "populations within {:e}",
        out.populations
    );
    assert!(out.trace_ev < 1e-7, "trace within {:e} eV", out.trace_ev);
    out
}
