//! The integer polynomials of a diatomic overlap in the two coordinate systems.
//!
//! With both z axes along A→B and h = R/2:
//! r_a = h(ξ+η), z_a = h(1+ξη), r_b = h(ξ−η), z_b = h(ξη−1), r sinθ = h√((ξ²−1)(1−η²)),
//! dV = h³(ξ²−η²) dξ dη dφ (Mulliken, Rieke, Orloff & Orloff 1949). About centre A, with u = ξ−1
//! and v = η+1, the same quantities are polynomials in u ≥ 0 and 0 ≤ v ≤ 2 that stay small where
//! the density of a tight A function is.

use std::sync::OnceLock;

/// Quantum numbers of one diatomic integral.
#[derive(Copy, Clone, Debug, PartialEq)]
pub(crate) struct Quantum {
    pub(crate) n_a: u8,
    pub(crate) l_a: u8,
    pub(crate) n_b: u8,
    pub(crate) l_b: u8,
    pub(crate) m: u8,
}

impl Quantum {
    /// Highest power of either variable, n + n′.
    pub(crate) fn degree(self) -> usize {
        usize::from(self.n_a + self.n_b)
    }

    /// A number of its own for each set of quantum numbers in range.
    fn number(self) -> usize {
        [
            (self.n_a - 1, 7),
            (self.l_a, 4),
            (self.n_b - 1, 7),
            (self.l_b, 4),
            (self.m, 4),
        ]
        .into_iter()
        .fold(0, |sum, (value, count)| sum * count + usize::from(value))
    }

    pub(crate) fn swapped(self) -> Self {
        Self {
            n_a: self.n_b,
            l_a: self.l_b,
            n_b: self.n_a,
            l_b: self.l_a,
            m: self.m,
        }
    }
}

/// Sets of quantum numbers with n ≤ 7, l ≤ 3 (impossible ones counted).
const KINDS: usize = 7 * 4 * 7 * 4 * 4;

/// A factor with few terms: (power of the first variable, of the second, coefficient).
type Factor = [(usize, usize, i64)];

/// The geometric quantities of the two centres as polynomials, in units of h.
struct Coordinates {
    r_a: &'static Factor,
    r_b: &'static Factor,
    z_a: &'static Factor,
    z_b: &'static Factor,
    /// (r sinθ)².
    across: [&'static Factor; 2],
}

const SPHEROIDAL: Coordinates = Coordinates {
    r_a: &[(1, 0, 1), (0, 1, 1)],
    r_b: &[(1, 0, 1), (0, 1, -1)],
    z_a: &[(0, 0, 1), (1, 1, 1)],
    z_b: &[(0, 0, -1), (1, 1, 1)],
    across: [&[(2, 0, 1), (0, 0, -1)], &[(0, 0, 1), (0, 2, -1)]],
};

const SHIFTED: Coordinates = Coordinates {
    r_a: &[(1, 0, 1), (0, 1, 1)],
    r_b: &[(0, 0, 2), (1, 0, 1), (0, 1, -1)],
    z_a: &[(0, 1, 1), (1, 0, -1), (1, 1, 1)],
    z_b: &[(0, 0, -2), (0, 1, 1), (1, 0, -1), (1, 1, 1)],
    across: [&[(2, 0, 1), (1, 0, 2)], &[(0, 1, 2), (0, 2, -1)]],
};

/// Dense polynomial in two variables with exact integer coefficients.
#[derive(Clone)]
struct Polynomial {
    /// Powers below this have room, in each variable.
    side: usize,
    /// Powers below this occur.
    width: usize,
    coefficients: Vec<i64>,
}

impl Polynomial {
    fn constant(value: i64, side: usize) -> Self {
        let mut coefficients = vec![0; side * side];
        coefficients[0] = value;
        Self {
            side,
            width: 1,
            coefficients,
        }
    }

    fn multiply(&mut self, factor: &Factor) {
        let grown = factor.iter().map(|f| f.0.max(f.1)).max().unwrap_or(0);
        let mut product = vec![0; self.side * self.side];
        for i in 0..self.width {
            for j in 0..self.width {
                let value = self.coefficients[i * self.side + j];
                if value != 0 {
                    for &(di, dj, c) in factor {
                        product[(i + di) * self.side + j + dj] += c * value;
                    }
                }
            }
        }
        self.coefficients = product;
        self.width = (self.width + grown).min(self.side);
    }

    fn multiply_power(&mut self, factor: &Factor, power: usize) {
        for _ in 0..power {
            self.multiply(factor);
        }
    }

    fn add_multiple(&mut self, multiple: i64, other: &Self) {
        self.width = self.width.max(other.width);
        for (sum, value) in self.coefficients.iter_mut().zip(&other.coefficients) {
            *sum += multiple * value;
        }
    }
}

/// One term of the integrand's polynomial.
#[derive(Copy, Clone, Debug, PartialEq)]
pub(crate) struct Monomial {
    pub(crate) first: u8,
    pub(crate) second: u8,
    pub(crate) coefficient: i64,
}

/// Polynomial in ξ (first) and η (second), without normalisation, in rising powers of ξ; Legendre
/// functions enter times 2^l.
pub(crate) fn spheroidal(q: Quantum) -> &'static [Monomial] {
    static TABLE: [OnceLock<Vec<Monomial>>; KINDS] = [const { OnceLock::new() }; KINDS];
    TABLE[q.number()].get_or_init(|| integrand(q, &SPHEROIDAL))
}

/// Polynomial in u (first) and v (second) about the first centre, in rising powers of u.
pub(crate) fn shifted(q: Quantum) -> &'static [Monomial] {
    static TABLE: [OnceLock<Vec<Monomial>>; KINDS] = [const { OnceLock::new() }; KINDS];
    TABLE[q.number()].get_or_init(|| integrand(q, &SHIFTED))
}

fn integrand(q: Quantum, c: &Coordinates) -> Vec<Monomial> {
    let (n_a, l_a) = (usize::from(q.n_a), usize::from(q.l_a));
    let (n_b, l_b) = (usize::from(q.n_b), usize::from(q.l_b));
    let m = usize::from(q.m);
    let side = q.degree() + 1;
    // r^(n−1) times the volume element leaves r^(n−l) beside the solid harmonic.
    let mut common = Polynomial::constant(1, side);
    common.multiply_power(c.r_a, n_a - l_a);
    common.multiply_power(c.r_b, n_b - l_b);
    common.multiply_power(c.across[0], m);
    common.multiply_power(c.across[1], m);
    let mut sum = Polynomial::constant(0, side);
    for (k, value) in legendre(l_a, m).into_iter().enumerate() {
        for (k2, value2) in legendre(l_b, m).into_iter().enumerate() {
            if value * value2 == 0 {
                continue;
            }
            let mut term = common.clone();
            term.multiply_power(c.z_a, l_a - m - 2 * k);
            term.multiply_power(c.r_a, 2 * k);
            term.multiply_power(c.z_b, l_b - m - 2 * k2);
            term.multiply_power(c.r_b, 2 * k2);
            sum.add_multiple(value * value2, &term);
        }
    }
    let mut out = Vec::new();
    for first in 0..side {
        for second in 0..side {
            let coefficient = sum.coefficients[first * side + second];
            if coefficient != 0 {
                let (first, second) = (first as u8, second as u8);
                out.push(Monomial {
                    first,
                    second,
                    coefficient,
                });
            }
        }
    }
    out
}

/// 2^l d^m P_l/dx^m = Σ_k c_k x^(l−m−2k): the c_k (Rodrigues), for l ≤ 3.
fn legendre(l: usize, m: usize) -> [i64; 2] {
    let factorial = |k: usize| (2..=k as i64).product::<i64>();
    let mut out = [0; 2];
    for (k, value) in out.iter_mut().enumerate() {
        if l >= m + 2 * k {
            let sign = if k % 2 == 0 { 1 } else { -1 };
            *value = sign * factorial(2 * l - 2 * k)
                / (factorial(k) * factorial(l - k) * factorial(l - m - 2 * k));
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn legendre_coefficients() {
        assert_eq!(legendre(0, 0), [1, 0]);
        assert_eq!(legendre(2, 0), [6, -2]); // 4 P₂ = 6x² − 2
        assert_eq!(legendre(3, 3), [120, 0]);
    }

    #[test]
    fn simplest_polynomials() {
        // 1s1s: (ξ+η)(ξ−η).
        let q = Quantum {
            n_a: 1,
            l_a: 0,
            n_b: 1,
            l_b: 0,
            m: 0,
        };
        let terms: Vec<_> = spheroidal(q)
            .iter()
            .map(|t| (t.first, t.second, t.coefficient))
            .collect();
        assert_eq!(terms, [(0, 2, -1), (2, 0, 1)]);
        // The same integrand in both systems at ξ = 1 + u, η = v − 1.
        let q = Quantum {
            n_a: 4,
            l_a: 3,
            n_b: 5,
            l_b: 2,
            m: 1,
        };
        let value = |terms: &[Monomial], x: f64, y: f64| {
            terms.iter().fold(0.0, |sum, t| {
                sum + t.coefficient as f64 * x.powi(t.first.into()) * y.powi(t.second.into())
            })
        };
        let (left, right) = (
            value(spheroidal(q), 1.75, -0.25),
            value(shifted(q), 0.75, 0.75),
        );
        assert!((left / right - 1.0).abs() < 1e-12);
    }
}
