//! Single diatomic integrals of primitive Slater functions.

use crate::OverlapError;
use crate::polynomial::Quantum;
use crate::radial::RadialKernel;
use crate::shell::{check_exponent, check_quantum_numbers};

/// A normalised Slater function without its orientation.
#[derive(Copy, Clone, Debug, PartialEq)]
pub struct Primitive {
    /// Principal quantum number, 1..=7.
    pub n: u8,
    /// Angular momentum, 0..=3 and below `n`.
    pub l: u8,
    /// Slater exponent (bohr⁻¹).
    pub zeta: f64,
}

/// ⟨n l m ζ | n′ l′ m ζ′⟩ at a distance in bohr, both local z axes along A→B.
///
/// Positive where the functions are positive on the same sides, so ⟨2pσ|2pσ⟩ is +1 at R = 0 and
/// negative far away. In the convention of Mulliken, Rieke, Orloff & Orloff, J. Chem. Phys. 17,
/// 1248 (1949), where the axes face each other, the value has the extra factor (−1)^(l′+m).
///
/// The tables are made anew for each call: use a [`crate::PairKernel`] where speed matters.
///
/// # Errors
/// Quantum numbers, exponents or the distance out of range, or m above l or l′.
pub fn slater_overlap(
    a: Primitive,
    b: Primitive,
    m: u8,
    distance_bohr: f64,
) -> Result<f64, OverlapError> {
    evaluate(a, b, m, distance_bohr).map(|(value, _)| value)
}

/// d/dR of [`slater_overlap`] (bohr⁻¹), in closed form.
///
/// # Errors
/// As [`slater_overlap`].
pub fn slater_overlap_derivative(
    a: Primitive,
    b: Primitive,
    m: u8,
    distance_bohr: f64,
) -> Result<f64, OverlapError> {
    evaluate(a, b, m, distance_bohr).map(|(_, slope)| slope)
}

fn evaluate(a: Primitive, b: Primitive, m: u8, distance: f64) -> Result<(f64, f64), OverlapError> {
    for function in [a, b] {
        check_quantum_numbers(function.n, function.l)?;
        check_exponent(function.n, function.l, function.zeta)?;
    }
    if m > a.l.min(b.l) {
        return Err(OverlapError::Order {
            m,
            l_a: a.l,
            l_b: b.l,
        });
    }
    if !(distance.is_finite() && distance >= 0.0) {
        return Err(OverlapError::Distance(distance));
    }
    let mut kernel = RadialKernel::default();
    let quantum = Quantum {
        n_a: a.n,
        l_a: a.l,
        n_b: b.n,
        l_b: b.l,
        m,
    };
    kernel.push(quantum, a.zeta, b.zeta, 1.0, 0);
    let (mut value, mut slope) = ([[0.0]; 1], [[0.0]; 1]);
    kernel.evaluate::<1, 16, 1, true>(&[distance], &mut value, &mut slope);
    Ok((value[0][0], slope[0][0]))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn hydrogen_like_pair() {
        // 1s1s of equal exponents: e^(−p)(1 + p + p²/3).
        let s = Primitive {
            n: 1,
            l: 0,
            zeta: 1.2,
        };
        let p = 1.2 * 1.7_f64;
        let expected = (-p).exp() * (1.0 + p + p * p / 3.0);
        assert!((slater_overlap(s, s, 0, 1.7).unwrap() - expected).abs() < 1e-15);
        let slope = -1.2 * (-p).exp() * (p + p * p) / 3.0;
        assert!((slater_overlap_derivative(s, s, 0, 1.7).unwrap() - slope).abs() < 1e-15);
    }

    #[test]
    fn touching_and_far() {
        let (a, b) = (
            Primitive {
                n: 5,
                l: 2,
                zeta: 9.0,
            },
            Primitive {
                n: 5,
                l: 2,
                zeta: 9.0,
            },
        );
        assert!((slater_overlap(a, b, 2, 0.0).unwrap() - 1.0).abs() < 2e-15);
        for far in [1e3, 1e9, 1e300] {
            assert!(slater_overlap(a, b, 1, far).unwrap().abs() < 1e-300);
        }
    }

    #[test]
    fn refusals() {
        let a = Primitive {
            n: 2,
            l: 1,
            zeta: 1.0,
        };
        assert!(slater_overlap(a, a, 2, 1.0).is_err());
        assert!(slater_overlap(a, a, 1, f64::NAN).is_err());
        assert!(
            slater_overlap(
                a,
                Primitive {
                    n: 2,
                    l: 2,
                    zeta: 1.0
                },
                0,
                1.0
            )
            .is_err()
        );
        assert!(
            slater_overlap(
                a,
                Primitive {
                    n: 2,
                    l: 1,
                    zeta: 0.0
                },
                0,
                1.0
            )
            .is_err()
        );
    }
}
