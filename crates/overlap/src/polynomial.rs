//! The integer polynomials of a diatomic overlap in the two coordinate systems.
//!
//! With both z axes along A→B and h = R/2:
//! r_a = h(ξ+η), z_a = h(1+ξη), r_b = h(ξ−η), z_b = h(ξη−1), r sinθ = h√((ξ²−1)(1−η²)),
//! dV = h³(ξ²−η²) dξ dη dφ (Mulliken, Rieke, Orloff & Orloff 1949). About centre A, with u = ξ−1
//! and v = η+1, the same quantities are polynomials in u ≥ 0 and 0 ≤ v ≤ 2 that stay small where
//! the density of a tight A function is.

/// Highest power of either variable plus one: n + n′ = 14.
const SIDE: usize = 15;

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
    /// Powers below `width` occur.
    width: usize,
    coefficients: [i64; SIDE * SIDE],
}

impl Polynomial {
    fn constant(value: i64) -> Self {
        let mut coefficients = [0; SIDE * SIDE];
        coefficients[0] = value;
        Self {
            width: 1,
            coefficients,
        }
    }

    fn multiply(&mut self, factor: &Factor) {
        let grown = factor.iter().map(|f| f.0.max(f.1)).max().unwrap_or(0);
        let mut product = [0; SIDE * SIDE];
        for i in 0..self.width {
            for j in 0..self.width {
                let value = self.coefficients[i * SIDE + j];
                if value != 0 {
                    for &(di, dj, c) in factor {
                        product[(i + di) * SIDE + j + dj] += c * value;
                    }
                }
            }
        }
        self.coefficients = product;
        self.width = (self.width + grown).min(SIDE);
    }

    fn multiply_power(&mut self, factor: &Factor, power: usize) {
        for _ in 0..power {
            self.multiply(factor);
        }
    }

    fn add(&mut self, other: &Self) {
        self.width = self.width.max(other.width);
        for (sum, value) in self.coefficients.iter_mut().zip(&other.coefficients) {
            *sum += value;
        }
    }
}

/// One term of the integrand's polynomial.
pub(crate) struct Monomial {
    pub(crate) first: usize,
    pub(crate) second: usize,
    pub(crate) coefficient: i64,
}

/// Polynomial in ξ (first) and η (second), without normalisation; Legendre functions enter times
/// 2^l.
pub(crate) fn spheroidal(q: Quantum) -> Vec<Monomial> {
    integrand(q, &SPHEROIDAL)
}

/// Polynomial in u (first) and v (second) about the first centre.
pub(crate) fn shifted(q: Quantum) -> Vec<Monomial> {
    integrand(q, &SHIFTED)
}

fn integrand(q: Quantum, c: &Coordinates) -> Vec<Monomial> {
    let (n_a, l_a) = (usize::from(q.n_a), usize::from(q.l_a));
    let (n_b, l_b) = (usize::from(q.n_b), usize::from(q.l_b));
    let m = usize::from(q.m);
    // r^(n−1) times the volume element leaves r^(n−l) beside the solid harmonic.
    let mut common = Polynomial::constant(1);
    common.multiply_power(c.r_a, n_a - l_a);
    common.multiply_power(c.r_b, n_b - l_b);
    common.multiply_power(c.across[0], m);
    common.multiply_power(c.across[1], m);
    let mut sum = Polynomial::constant(0);
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
            term.coefficients
                .iter_mut()
                .for_each(|x| *x *= value * value2);
            sum.add(&term);
        }
    }
    let mut out = Vec::new();
    for first in 0..sum.width {
        for second in 0..sum.width {
            let coefficient = sum.coefficients[first * SIDE + second];
            if coefficient != 0 {
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
        let value = |terms: Vec<Monomial>, x: f64, y: f64| {
            terms.iter().fold(0.0, |sum, t| {
                sum + t.coefficient as f64 * x.powi(t.first as i32) * y.powi(t.second as i32)
            })
        };
        let (left, right) = (
            value(spheroidal(q), 1.75, -0.25),
            value(shifted(q), 0.75, 0.75),
        );
        assert!((left / right - 1.0).abs() < 1e-12);
    }
}
