//! The factor between Sᵢⱼ and Hᵢⱼ in its published forms.
//!
//! Every form but Cusachs's is Hᵢⱼ = Sᵢⱼ (aᵢⱼ + bᵢⱼ e^(−δR)), with a and b fixed by the diagonal
//! elements: so a geometry costs at most one exponential per pair of atoms.

use crate::method::{Coupling, Method};

/// Anderson, J. Chem. Phys. 62, 1187 (1975): Hᵢⱼ = 1.125 (Hᵢᵢ+Hⱼⱼ) Sᵢⱼ e^(−0.13 R/Å).
const ANDERSON_FACTOR: f64 = 1.125;
const ANDERSON_DECAY_PER_ANGSTROM: f64 = 0.13;

/// K′ = K + Δ² + Δ⁴(1−K), Δ = (hᵢ−hⱼ)/(hᵢ+hⱼ), for diagonal elements in one common unit.
///
/// Ammeter, Bürgi, Thibeault & Hoffmann, J. Am. Chem. Soc. 100, 3686 (1978).
pub fn weighted_k(k: f64, h_i: f64, h_j: f64) -> f64 {
    let squared = asymmetry_squared(h_i, h_j);
    k + squared + squared * squared * (1.0 - k)
}

/// K = 1 + (κ + Δ² − Δ⁴κ) e^(−δ(R−d₀)), κ = K₀ − 1 (without the Δ terms if not `weighted`).
/// R and d₀ in Å, δ in Å⁻¹. It equals K₀ (or the weighted K′) at R = d₀ and falls to 1 far out.
///
/// Calzaferri, Forss & Kamber, J. Phys. Chem. 93, 5366 (1989).
pub fn distance_dependent_k(
    k: f64,
    h_i: f64,
    h_j: f64,
    weighted: bool,
    delta_per_angstrom: f64,
    distance_angstrom: f64,
    d0_angstrom: f64,
) -> f64 {
    1.0 + strength(k, h_i, h_j, weighted)
        * libm::exp(-delta_per_angstrom * (distance_angstrom - d0_angstrom))
}

/// κ, or κ + Δ² − Δ⁴κ.
fn strength(k: f64, h_i: f64, h_j: f64, weighted: bool) -> f64 {
    let kappa = k - 1.0;
    if weighted {
        let squared = asymmetry_squared(h_i, h_j);
        kappa + squared - squared * squared * kappa
    } else {
        kappa
    }
}

fn asymmetry_squared(h_i: f64, h_j: f64) -> f64 {
    let delta = (h_i - h_j) / (h_i + h_j);
    delta * delta
}

/// δ in Å⁻¹ of the forms whose factor depends on the distance.
pub(crate) fn decay(method: &Method) -> Option<f64> {
    match method.coupling {
        Coupling::Anderson => Some(ANDERSON_DECAY_PER_ANGSTROM),
        Coupling::DistanceDependent {
            delta_per_angstrom, ..
        } => Some(delta_per_angstrom),
        _ => None,
    }
}

/// (a, b) of one pair of functions; radii in Å. For Cusachs a is the mean, b nothing.
pub(crate) fn factors(method: &Method, h_i: f64, h_j: f64, r_i: f64, r_j: f64) -> (f64, f64) {
    let sum = h_i + h_j;
    match method.coupling {
        Coupling::Constant => (0.5 * method.k * sum, 0.0),
        Coupling::Weighted => (0.5 * weighted_k(method.k, h_i, h_j) * sum, 0.0),
        Coupling::GeometricMean => (-method.k * (h_i * h_j).sqrt(), 0.0),
        Coupling::Cusachs => (0.5 * sum, 0.0),
        Coupling::Anderson => (0.0, ANDERSON_FACTOR * sum),
        Coupling::DistanceDependent {
            delta_per_angstrom,
            weighted,
        } => {
            let at_contact = libm::exp(delta_per_angstrom * (r_i + r_j));
            (
                0.5 * sum,
                0.5 * sum * strength(method.k, h_i, h_j, weighted) * at_contact,
            )
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_abs_diff_eq;

    #[test]
    fn limits_of_the_weighted_constant() {
        for k in [1.5, 1.75, 2.0] {
            assert_abs_diff_eq!(weighted_k(k, -10.0, -10.0), k, epsilon = 1e-15);
            assert_abs_diff_eq!(weighted_k(k, -10.0, 0.0), 2.0, epsilon = 1e-15);
        }
    }

    #[test]
    fn limits_of_the_distance_dependent_constant() {
        let k =
            |weighted, delta, r| distance_dependent_k(1.75, -32.3, -14.8, weighted, delta, r, 1.2);
        assert_abs_diff_eq!(
            k(true, 0.35, 1.2),
            weighted_k(1.75, -32.3, -14.8),
            epsilon = 1e-14
        );
        assert_abs_diff_eq!(k(false, 0.35, 1.2), 1.75, epsilon = 1e-15);
        assert_abs_diff_eq!(k(true, 0.35, 500.0), 1.0, epsilon = 1e-15);
        assert_abs_diff_eq!(
            k(true, 0.0, 7.0),
            weighted_k(1.75, -32.3, -14.8),
            epsilon = 1e-14
        );
    }

    #[test]
    fn anderson_meets_the_usual_constant_at_its_distance() {
        // K = 1.75 at R = 1.933 Å (Anderson 1975, from memory).
        let method = Method {
            coupling: Coupling::Anderson,
            ..Method::default()
        };
        let (a, b) = factors(&method, -10.0, -14.0, 0.0, 0.0);
        let k = (a + b * libm::exp(-0.13 * 1.933)) / -12.0;
        assert_abs_diff_eq!(k, 1.75, epsilon = 1e-4);
    }
}
