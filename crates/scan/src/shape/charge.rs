//! Charge response: Hᵢᵢ moves by −A q with the atom's own net charge q, until both agree.

use orbend_eigen::{LANES, Lanes};

/// The response of Hᵢᵢ to the net charge of its atom.
///
/// Hᵢᵢ(q) = Hᵢᵢ(0) − A q, the linear form of charge-iterated extended Hückel calculations (Rein,
/// Fukuda, Win, Clarke & Harris, J. Chem. Phys. 45, 4743 (1966); from memory, as are values of A
/// between 1 and 2 eV in use), with Mulliken's net charges (J. Chem. Phys. 23, 1833 (1955)).
/// The sum stays Σ n ε of the last matrix.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Response {
    /// A, eV per elementary charge.
    pub(crate) per_charge_ev: f64,
    /// Most iterations.
    pub(crate) iterations: usize,
    /// Largest change of a charge that counts as agreement.
    pub(crate) tolerance: f64,
}

impl Response {
    /// The nominal curves: up to 60 iterations, a point that has not come to rest is cut off.
    pub(crate) const NOMINAL: Self = Self {
        per_charge_ev: 1.0,
        iterations: 60,
        tolerance: 1e-4,
    };
    /// The ensemble: looser charges are enough for a vote; curves that do not come to rest within
    /// 30 iterations keep their last sums and are counted.
    pub(crate) const ENSEMBLE: Self = Self {
        per_charge_ev: 1.0,
        iterations: 30,
        tolerance: 2e-3,
    };
}

/// Share of each step that is taken.
pub(crate) const DAMPING: f64 = 0.4;

/// One damped step of the charges; returns the largest change still wanted in each lane.
pub(crate) fn step(charges: &mut [Lanes], valence: &[f64], populations: &[Lanes]) -> Lanes {
    let mut left = [0.0; LANES];
    for ((charge, valence), population) in charges.iter_mut().zip(valence).zip(populations) {
        for lane in 0..LANES {
            let wanted = (valence - population[lane]) - charge[lane];
            left[lane] = f64::max(left[lane], wanted.abs());
            charge[lane] += DAMPING * wanted;
        }
    }
    left
}
