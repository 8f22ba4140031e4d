//! One orbital as a function of place: its value and its gradient.

use orbend_hamiltonian::Basis;
use orbend_overlap::harmonics;
use orbend_structure::{Angstrom, Bohr};

/// Farther than this in ζr a function is below 10⁻¹⁰ of its largest value (n ≤ 7) and left out.
const FAR: f64 = 60.0;

/// ψ = Σ cᵢχᵢ for Slater functions χ = Σ_t c_t (2ζ_t)^(n+½) (2n)!^(−½) r^(n−1) e^(−ζ_t r) Y
/// (J. C. Slater, Phys. Rev. 36, 57 (1930)), ready to be evaluated at many places.
#[derive(Clone, Debug)]
pub struct OrbitalField {
    shells: Vec<FieldShell>,
}

/// The part of one shell.
#[derive(Clone, Debug)]
struct FieldShell {
    /// Its nucleus, bohr.
    centre: [f64; 3],
    n: i32,
    l: u8,
    /// Exponent (1/bohr) and coefficient times norm.
    terms: Vec<(f64, f64)>,
    smallest_zeta: f64,
    own: Vec<f64>,
}

impl OrbitalField {
    /// The orbital with these coefficients (one per function of the basis, nuclei in Å). Shells of
    /// which it holds nothing are left out.
    pub fn new(basis: &Basis, coefficients: &[f64], positions: &[[f64; 3]]) -> Self {
        let shells = basis
            .shells
            .iter()
            .filter_map(|shell| {
                let size = 2 * usize::from(shell.l) + 1;
                let own = coefficients[shell.first..shell.first + size].to_vec();
                if own.iter().all(|c| c.abs() < 1e-14) {
                    return None;
                }
                let n = i32::from(shell.n);
                let terms: Vec<(f64, f64)> = shell
                    .terms
                    .iter()
                    .map(|&(zeta, coefficient)| {
                        let norm = power(2.0 * zeta, n) * (2.0 * zeta / factorial(2 * n)).sqrt();
                        (zeta, coefficient * norm)
                    })
                    .collect();
                Some(FieldShell {
                    centre: positions[shell.atom].map(|c| Bohr::from(Angstrom(c)).0),
                    n,
                    l: shell.l,
                    smallest_zeta: terms
                        .iter()
                        .map(|term| term.0)
                        .fold(f64::INFINITY, f64::min),
                    terms,
                    own,
                })
            })
            .collect();
        Self { shells }
    }

    /// ψ in bohr^(−3/2) at a place in Å.
    pub fn value(&self, at: [f64; 3]) -> f64 {
        let at = at.map(|c| Bohr::from(Angstrom(c)).0);
        self.shells.iter().map(|shell| shell.value(at)).sum()
    }

    /// ψ in bohr^(−3/2) and ∇ψ in bohr^(−5/2) at a place in Å. At a nucleus, where an s function has
    /// a cusp, its gradient counts as zero.
    pub fn value_and_gradient(&self, at: [f64; 3]) -> (f64, [f64; 3]) {
        let at = at.map(|c| Bohr::from(Angstrom(c)).0);
        let mut value = 0.0;
        let mut gradient = [0.0; 3];
        for shell in &self.shells {
            let (own, slope) = shell.value_and_gradient(at);
            value += own;
            for (sum, part) in gradient.iter_mut().zip(slope) {
                *sum += part;
            }
        }
        (value, gradient)
    }

    /// The box (lowest and highest corner, Å) outside which each function of the orbital keeps no more
    /// than the share `tail` of its density.
    pub(crate) fn reach(&self, tail: f64) -> ([f64; 3], [f64; 3]) {
        let (mut low, mut high) = ([f64::INFINITY; 3], [f64::NEG_INFINITY; 3]);
        for shell in &self.shells {
            let radius = tail_radius(shell.n, shell.smallest_zeta, tail);
            for axis in 0..3 {
                let out = |at: f64| Angstrom::from(Bohr(at)).0;
                low[axis] = low[axis].min(out(shell.centre[axis] - radius));
                high[axis] = high[axis].max(out(shell.centre[axis] + radius));
            }
        }
        (low, high)
    }
}

impl FieldShell {
    fn away(&self, at: [f64; 3]) -> ([f64; 3], f64) {
        let away: [f64; 3] = core::array::from_fn(|k| at[k] - self.centre[k]);
        (away, away.iter().map(|c| c * c).sum::<f64>().sqrt())
    }

    fn value(&self, at: [f64; 3]) -> f64 {
        let (away, r) = self.away(at);
        // The direction at the nucleus is arbitrary: only s is not zero there.
        if self.smallest_zeta * r > FAR || (r <= 0.0 && self.l > 0) {
            return 0.0;
        }
        let mut radial = 0.0;
        for &(zeta, coefficient) in &self.terms {
            radial += coefficient * libm::exp(-zeta * r);
        }
        radial *= power(r, self.n - 1);
        let angular = harmonics::evaluate(self.l, away);
        radial * self.along(&angular)
    }

    /// ∇(R Y) = R′ Y r̂ + (R/r) (r∇Y).
    fn value_and_gradient(&self, at: [f64; 3]) -> (f64, [f64; 3]) {
        let (away, r) = self.away(at);
        if self.smallest_zeta * r > FAR || r <= 0.0 {
            return (self.value(at), [0.0; 3]);
        }
        let (mut plain, mut steep) = (0.0, 0.0);
        for &(zeta, coefficient) in &self.terms {
            let term = coefficient * libm::exp(-zeta * r);
            plain += term;
            steep += zeta * term;
        }
        // R/r, and R′ = (n−1) R/r − Σ ζ c r^(n−1) e^(−ζr).
        let high = power(r, self.n - 1);
        let over = plain * high / r;
        let slope = f64::from(self.n - 1) * over - steep * high;
        let angular = self.along(&harmonics::evaluate(self.l, away));
        let turning = harmonics::evaluate_tangential(self.l, away);
        let gradient = core::array::from_fn(|k| {
            let tangential: f64 = self.own.iter().zip(&turning).map(|(c, t)| c * t[k]).sum();
            slope * angular * away[k] / r + over * tangential
        });
        (plain * high * angular, gradient)
    }

    fn along(&self, angular: &[f64; 7]) -> f64 {
        self.own.iter().zip(angular).map(|(c, y)| c * y).sum()
    }
}

/// The radius (bohr) outside which r^(n−1) e^(−ζr) keeps the share `tail` of its density:
/// e^(−x) Σ_{k ≤ 2n} x^k/k! = tail at x = 2ζr (the incomplete gamma function of whole order,
/// Abramowitz & Stegun 6.5.13), by bisection.
fn tail_radius(n: i32, zeta: f64, tail: f64) -> f64 {
    let left = |x: f64| {
        let (mut term, mut sum) = (1.0, 1.0);
        for k in 1..=2 * n {
            term *= x / f64::from(k);
            sum += term;
        }
        sum * libm::exp(-x)
    };
    let (mut low, mut high) = (0.0, 200.0);
    for _ in 0..40 {
        let middle = 0.5 * (low + high);
        if left(middle) > tail {
            low = middle;
        } else {
            high = middle;
        }
    }
    high / (2.0 * zeta)
}

fn factorial(k: i32) -> f64 {
    (2..=k).fold(1.0, |product, factor| product * f64::from(factor))
}

fn power(x: f64, k: i32) -> f64 {
    (0..k).fold(1.0, |product, _| product * x)
}

#[cfg(test)]
mod tests {
    use orbend_hamiltonian::{Method, ParameterSet};
    use orbend_structure::Element;

    use super::*;

    fn basis(symbols: &[&str]) -> Basis {
        let elements: Vec<Element> = symbols
            .iter()
            .map(|symbol| Element::from_symbol(symbol).unwrap())
            .collect();
        Basis::new(&elements, &ParameterSet::default(), &Method::default()).unwrap()
    }

    #[test]
    fn a_2p_orbital_has_its_closed_form() {
        // (ζ⁵/π)^½ z e^(−ζr), the normalised 2p function (Slater 1930).
        let basis = basis(&["F"]);
        let shell = basis.shells.iter().find(|shell| shell.l == 1).unwrap();
        let zeta = shell.terms[0].0;
        let mut coefficients = vec![0.0; basis.functions.len()];
        coefficients[shell.first] = 1.0;
        let field = OrbitalField::new(&basis, &coefficients, &[[0.0; 3]]);
        for at in [
            [0.0, 0.0, 0.4],
            [0.3, -0.2, -0.7],
            [0.0, 0.0, 0.0],
            [1.0, 0.0, 0.0],
        ] {
            let place = at.map(|c| Bohr::from(Angstrom(c)).0);
            let r = place.iter().map(|c| c * c).sum::<f64>().sqrt();
            let expected =
                (zeta.powi(5) / core::f64::consts::PI).sqrt() * place[2] * (-zeta * r).exp();
            let value = field.value(at);
            assert!(
                (value - expected).abs() < 1e-13,
                "{at:?}: {value} {expected}"
            );
        }
    }

    #[test]
    fn the_gradient_is_the_limit_of_differences() {
        // Every function of iron (4s, 4p, 3d with two exponents) and of fluorine at once.
        let basis = basis(&["Fe", "F"]);
        let coefficients: Vec<f64> = (0..basis.functions.len())
            .map(|k| 0.3 - 0.17 * k as f64 + 0.02 * (k * k) as f64)
            .collect();
        let field = OrbitalField::new(&basis, &coefficients, &[[0.0; 3], [0.0, 0.5, 1.5]]);
        let step = 1e-5;
        for at in [[0.3, -0.2, 0.5], [0.0, 0.4, 1.2], [-1.0, 0.7, 0.1]] {
            let (value, gradient) = field.value_and_gradient(at);
            assert!((value - field.value(at)).abs() < 1e-13);
            for axis in 0..3 {
                let beside = |by: f64| {
                    let mut place = at;
                    place[axis] += by;
                    field.value(place)
                };
                let length = Bohr::from(Angstrom(2.0 * step)).0;
                let difference = (beside(step) - beside(-step)) / length;
                assert!(
                    (difference - gradient[axis]).abs() < 1e-7,
                    "{at:?} {axis}: {difference} {}",
                    gradient[axis]
                );
            }
        }
    }

    #[test]
    fn the_tail_of_an_exponential() {
        // n = 1, x = 2ζr: (1 + x + x²/2) e^(−x).
        let radius = tail_radius(1, 1.3, 0.01);
        let x = 2.6 * radius;
        assert!(((1.0 + x + x * x / 2.0) * (-x).exp() - 0.01).abs() < 1e-9);
    }
}
