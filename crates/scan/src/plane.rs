//! Orbitals on a plane: which plane shows most of one, and its values there.

use orbend_hamiltonian::Basis;
use orbend_overlap::harmonics;
use orbend_structure::{Angstrom, Bohr};

/// A plane through the molecule, in Å. The three directions are orthonormal and right-handed.
#[derive(Clone, Debug, PartialEq)]
pub struct Plane {
    /// The point in the middle of the picture.
    pub origin: [f64; 3],
    /// To the right.
    pub right: [f64; 3],
    /// Upwards.
    pub up: [f64; 3],
    /// What the plane is, in words.
    pub words: &'static str,
}

/// Values of an orbital on a square lattice of a plane.
#[derive(Clone, Debug)]
pub struct PlaneValues {
    /// Points along an edge.
    pub points: usize,
    /// Half the edge, Å.
    pub half: f64,
    /// ψ in bohr^(−3/2), row by row from the top, each from the left.
    pub values: Vec<f64>,
}

/// The value of Σ cᵢχᵢ (bohr^(−3/2)) at a point in Å, for Slater functions
/// χ = Σ_t c_t (2ζ_t)^(n+½) (2n)!^(−½) r^(n−1) e^(−ζ_t r) Y (J. C. Slater, Phys. Rev. 36, 57 (1930)).
pub fn orbital_value(basis: &Basis, coefficients: &[f64], positions: &[[f64; 3]], at: [f64; 3]) -> f64 {
    let mut sum = 0.0;
    for shell in &basis.shells {
        let centre = positions[shell.atom];
        let away: [f64; 3] = core::array::from_fn(|k| Bohr::from(Angstrom(at[k] - centre[k])).0);
        let r = away.iter().map(|c| c * c).sum::<f64>().sqrt();
        let n = i32::from(shell.n);
        let mut radial = 0.0;
        for &(zeta, coefficient) in &shell.terms {
            let norm = power(2.0 * zeta, n) * (2.0 * zeta / factorial(2 * n)).sqrt();
            radial += coefficient * norm * libm::exp(-zeta * r);
        }
        radial *= power(r, n - 1);
        let angular = harmonics::evaluate(shell.l, away);
        let size = 2 * usize::from(shell.l) + 1;
        let own = &coefficients[shell.first..shell.first + size];
        // The direction at the nucleus is arbitrary: only s is not zero there.
        if r > 0.0 || shell.l == 0 {
            sum += radial * own.iter().zip(&angular).map(|(c, y)| c * y).sum::<f64>();
        }
    }
    sum
}

/// Values on a lattice of a plane reaching `half` Å to all sides of its origin.
pub fn plane_values(
    basis: &Basis,
    coefficients: &[f64],
    positions: &[[f64; 3]],
    plane: &Plane,
    (half, points): (f64, usize),
) -> PlaneValues {
    let step = 2.0 * half / (points.max(2) - 1) as f64;
    let mut values = Vec::with_capacity(points * points);
    for row in 0..points {
        for column in 0..points {
            let (across, upward) = (column as f64 * step - half, half - row as f64 * step);
            let at = core::array::from_fn(|k| {
                plane.origin[k] + across * plane.right[k] + upward * plane.up[k]
            });
            values.push(orbital_value(basis, coefficients, positions, at));
        }
    }
    PlaneValues { points, half, values }
}

fn factorial(k: i32) -> f64 {
    (2..=k).fold(1.0, |product, factor| product * f64::from(factor))
}

fn power(x: f64, k: i32) -> f64 {
    (0..k).fold(1.0, |product, _| product * x)
}
