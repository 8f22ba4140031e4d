//! Shells of Slater functions, their norm and their overlap on one centre.

use crate::OverlapError;

/// Largest principal quantum number of a Slater function.
pub const MAX_N: u8 = 7;
/// Largest angular momentum (3 = f).
pub const MAX_L: u8 = 3;

/// One exponent of a contracted radial function.
#[derive(Copy, Clone, Debug, PartialEq)]
pub struct Term {
    /// Slater exponent (bohr⁻¹).
    pub zeta: f64,
    /// Coefficient of the normalised Slater function with this exponent.
    pub coefficient: f64,
}

/// 2l+1 functions Σ_t c_t N_t r^(n−1) e^(−ζ_t r) Y_lm with one radial part.
#[derive(Clone, Debug, PartialEq)]
pub struct Shell {
    /// Principal quantum number, 1..=7.
    pub n: u8,
    /// Angular momentum, 0..=3 and below `n`.
    pub l: u8,
    /// The contraction; normalised for a [`crate::PairKernel`].
    pub terms: Vec<Term>,
}

impl Shell {
    /// A shell of one exponent (bohr⁻¹).
    pub fn single(n: u8, l: u8, zeta: f64) -> Self {
        let terms = vec![Term {
            zeta,
            coefficient: 1.0,
        }];
        Self { n, l, terms }
    }

    /// Number of functions, 2l+1.
    pub fn functions(&self) -> usize {
        2 * usize::from(self.l) + 1
    }

    /// ⟨χ|χ⟩ of the contraction.
    pub fn norm_squared(&self) -> f64 {
        contracted(self, self)
    }

    /// The same shell with its coefficients divided by the norm.
    ///
    /// # Errors
    /// Quantum numbers, exponents or coefficients out of range.
    pub fn normalised(mut self) -> Result<Self, OverlapError> {
        self.check()?;
        let norm_squared = self.norm_squared();
        if !(norm_squared > 0.0 && norm_squared.is_finite()) {
            return Err(OverlapError::Norm {
                n: self.n,
                l: self.l,
                norm_squared,
            });
        }
        let norm = norm_squared.sqrt();
        for term in &mut self.terms {
            term.coefficient /= norm;
        }
        Ok(self)
    }

    /// Quantum numbers, exponents and coefficients are usable (the norm is not looked at).
    pub(crate) fn check(&self) -> Result<(), OverlapError> {
        let &Self { n, l, .. } = self;
        check_quantum_numbers(n, l)?;
        for term in &self.terms {
            check_exponent(n, l, term.zeta)?;
        }
        if self.terms.is_empty() || self.terms.iter().any(|t| !t.coefficient.is_finite()) {
            return Err(OverlapError::Coefficients { n, l });
        }
        Ok(())
    }
}

pub(crate) fn check_quantum_numbers(n: u8, l: u8) -> Result<(), OverlapError> {
    if !(1..=MAX_N).contains(&n) || l > MAX_L || l >= n {
        return Err(OverlapError::QuantumNumbers { n, l });
    }
    Ok(())
}

pub(crate) fn check_exponent(n: u8, l: u8, zeta: f64) -> Result<(), OverlapError> {
    if !(zeta.is_finite() && zeta > 0.0) {
        return Err(OverlapError::Exponent { n, l, zeta });
    }
    Ok(())
}

/// Overlap of two functions of the same m on one centre; 0 when l differs, exactly 1 for two
/// identical shells.
///
/// ⟨nζ|n′ζ′⟩ = (2ζ)^(n+½) (2ζ′)^(n′+½) (n+n′)! / [√((2n)!(2n′)!) (ζ+ζ′)^(n+n′+1)] for normalised
/// Slater functions (the radial integral ∫ r^k e^(−αr) dr = k!/α^(k+1)).
pub fn one_centre_overlap(a: &Shell, b: &Shell) -> f64 {
    if a.l != b.l {
        0.0
    } else if a == b {
        1.0
    } else {
        contracted(a, b)
    }
}

fn contracted(a: &Shell, b: &Shell) -> f64 {
    let mut sum = 0.0;
    for s in &a.terms {
        for t in &b.terms {
            sum += s.coefficient * t.coefficient * radial(a.n, s.zeta, b.n, t.zeta);
        }
    }
    sum
}

/// ⟨nζ|n′ζ′⟩ of normalised Slater functions.
fn radial(n: u8, zeta: f64, n2: u8, zeta2: f64) -> f64 {
    let sum = zeta + zeta2;
    let (power, power2) = (2 * i32::from(n) + 1, 2 * i32::from(n2) + 1);
    let exponents =
        integer_power(2.0 * zeta / sum, power) * integer_power(2.0 * zeta2 / sum, power2);
    factorial(n + n2) * (exponents / (factorial(2 * n) * factorial(2 * n2))).sqrt()
}

/// k! (exact up to 22!).
pub(crate) fn factorial(k: u8) -> f64 {
    (2..=k).fold(1.0, |product, factor| product * f64::from(factor))
}

/// x^k by multiplication in a fixed order (the standard library leaves the rounding open).
pub(crate) fn integer_power(x: f64, k: i32) -> f64 {
    (0..k).fold(1.0, |product, _| product * x)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn one_centre_values() {
        // Equal n: [2√(ζζ′)/(ζ+ζ′)]^(2n+1).
        let (a, b) = (Shell::single(3, 2, 5.0), Shell::single(3, 2, 1.9));
        let expected = (2.0 * (5.0_f64 * 1.9).sqrt() / 6.9).powi(7);
        assert!((one_centre_overlap(&a, &b) - expected).abs() < 1e-15);
        assert_eq!(
            one_centre_overlap(&a, &Shell::single(3, 1, 5.0)).to_bits(),
            0
        );
        assert_eq!(one_centre_overlap(&a, &a).to_bits(), 1.0_f64.to_bits());
        // ⟨1s|2s⟩ of equal exponents is √3/2.
        let value = one_centre_overlap(&Shell::single(1, 0, 1.3), &Shell::single(2, 0, 1.3));
        assert!((value - 0.75_f64.sqrt()).abs() < 1e-15);
    }

    #[test]
    fn normalising() {
        let raw = Shell {
            n: 3,
            l: 2,
            terms: vec![
                Term {
                    zeta: 5.0,
                    coefficient: 0.6,
                },
                Term {
                    zeta: 2.0,
                    coefficient: 0.7,
                },
            ],
        };
        let shell = raw.normalised().unwrap();
        assert!((shell.norm_squared() - 1.0).abs() < 4e-16);
    }

    #[test]
    fn refusals() {
        assert!(Shell::single(3, 3, 1.0).normalised().is_err());
        assert!(Shell::single(8, 0, 1.0).normalised().is_err());
        assert!(Shell::single(2, 1, -1.0).normalised().is_err());
        assert!(
            Shell {
                n: 1,
                l: 0,
                terms: vec![]
            }
            .normalised()
            .is_err()
        );
    }
}
