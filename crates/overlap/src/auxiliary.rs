//! The one-dimensional integrals that a diatomic overlap is made of, on N geometries at once.

/// Number of orders kept: n + n′ ≤ 14, one more for derivatives.
pub(crate) const ORDERS: usize = 16;

/// |β| up to which the power series of B is used.
pub(crate) const SWITCH: f64 = 4.7;

/// Upper ends of the ranges of |β| and the number of series terms that leave a remainder below
/// 1e-18 of the sum.
const RANGES: [(f64, usize); 5] = [(0.0, 1), (0.3, 7), (1.0, 10), (2.0, 13), (SWITCH, 20)];
const SERIES: usize = RANGES[RANGES.len() - 1].1;

/// `B_COEFFICIENTS[k][t]`: coefficients of β^2t in B_2k and in B_(2k+1)/β.
const B_COEFFICIENTS: [[[f64; 2]; SERIES]; ORDERS / 2] = b_coefficients();

const fn b_coefficients() -> [[[f64; 2]; SERIES]; ORDERS / 2] {
    let mut out = [[[0.0; 2]; SERIES]; ORDERS / 2];
    let mut k = 0;
    while k < ORDERS / 2 {
        // (2t)! as a double, which is exact where it matters.
        let mut factorial = 1.0;
        let mut t = 0;
        while t < SERIES {
            let power = 2 * t;
            if t > 0 {
                factorial *= (power * (power - 1)) as f64;
            }
            out[k][t][0] = 2.0 / (factorial * (2 * k + power + 1) as f64);
            out[k][t][1] = -2.0 / (factorial * ((power + 1) * (2 * k + power + 3)) as f64);
            t += 1;
        }
        k += 1;
    }
    out
}

/// a_i(p) = p^(i+1) e^p ∫₁^∞ ξ^i e^(−pξ) dξ = p^i + i a_(i−1), all terms positive, for i ≤ `top`,
/// and the powers of p up to p^`top`.
#[inline(always)]
pub(crate) fn a_integrals<const N: usize, const K: usize>(
    p: &[f64; N],
    top: usize,
    a: &mut [[f64; N]; K],
    powers: &mut [[f64; N]; K],
) {
    a[0] = [1.0; N];
    powers[0] = [1.0; N];
    for i in 1..=top.min(K - 1) {
        let factor = i as f64;
        for lane in 0..N {
            let power = powers[i - 1][lane] * p[lane];
            powers[i][lane] = power;
            a[i][lane] = power + factor * a[i - 1][lane];
        }
    }
}

/// B_k(β) = ∫₋₁¹ η^k e^(−βη) dη for k ≤ `top` and |β| ≤ [`SWITCH`] (larger values are cut off:
/// those lanes take the other branch).
///
/// Power series in β² by Horner's scheme; its terms have one sign. The length of the series
/// depends on the lane's own β alone, whatever the neighbours need.
#[inline(always)]
pub(crate) fn b_integrals<const N: usize, const K: usize>(
    beta: &[f64; N],
    top: usize,
    out: &mut [[f64; N]; K],
) {
    let mut square = [0.0; N];
    let mut range = [0_usize; N];
    let (mut lowest, mut highest) = (RANGES.len(), 0);
    for lane in 0..N {
        let size = beta[lane].abs();
        let size = if size > SWITCH { SWITCH } else { size };
        square[lane] = size * size;
        for (end, _) in &RANGES[..RANGES.len() - 1] {
            range[lane] += usize::from(size > *end);
        }
        lowest = lowest.min(range[lane]);
        highest = highest.max(range[lane]);
    }
    let pairs = (top / 2 + 1).min(K / 2);
    if lowest == highest {
        for k in 0..pairs {
            let [even, odd] = b_pair(beta, &square, k, RANGES[lowest % RANGES.len()].1);
            out[2 * k] = even;
            out[2 * k + 1] = odd;
        }
        return;
    }
    for (which, &(_, length)) in RANGES.iter().enumerate().take(highest + 1).skip(lowest) {
        for k in 0..pairs {
            let [even, odd] = b_pair(beta, &square, k, length);
            for lane in 0..N {
                if range[lane] == which {
                    out[2 * k][lane] = even[lane];
                    out[2 * k + 1][lane] = odd[lane];
                }
            }
        }
    }
}

/// B_2k and B_(2k+1) from `length` terms of the series in β².
#[inline(always)]
fn b_pair<const N: usize>(
    beta: &[f64; N],
    square: &[f64; N],
    k: usize,
    length: usize,
) -> [[f64; N]; 2] {
    let coefficients = &B_COEFFICIENTS[k % (ORDERS / 2)];
    let (mut even, mut odd) = ([0.0; N], [0.0; N]);
    for &[c, d] in coefficients[..length].iter().rev() {
        for lane in 0..N {
            even[lane] = c + square[lane] * even[lane];
            odd[lane] = d + square[lane] * odd[lane];
        }
    }
    for lane in 0..N {
        odd[lane] *= beta[lane];
    }
    [even, odd]
}

/// V_j(b) = ∫₀² v^j e^(−bv) dv for j ≤ `top` and b ≥ [`SWITCH`] (smaller values are raised to it),
/// given e^(−2b); upward recursion in j.
#[inline(always)]
pub(crate) fn v_integrals<const N: usize, const K: usize>(
    b: &[f64; N],
    exponential: &[f64; N],
    top: usize,
    out: &mut [[f64; N]; K],
) {
    let mut inverse = [0.0; N];
    let mut edge = *exponential;
    for lane in 0..N {
        inverse[lane] = 1.0 / if b[lane] > SWITCH { b[lane] } else { SWITCH };
        out[0][lane] = (1.0 - edge[lane]) * inverse[lane];
    }
    for j in 1..=top.min(K - 1) {
        let factor = j as f64;
        for lane in 0..N {
            edge[lane] *= 2.0;
            out[j][lane] = (factor * out[j - 1][lane] - edge[lane]) * inverse[lane];
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// ∫ f over [from, to] by Simpson's rule.
    fn simpson(from: f64, to: f64, f: impl Fn(f64) -> f64) -> f64 {
        let n = 4000;
        let h = (to - from) / f64::from(n);
        let inner: f64 = (1..n)
            .map(|k| f(from + h * f64::from(k)) * if k % 2 == 1 { 4.0 } else { 2.0 })
            .sum();
        (f(from) + inner + f(to)) * h / 3.0
    }

    #[test]
    fn b_agrees_with_quadrature_in_every_range() {
        let beta = [0.0, 1e-14, 0.25, -0.9, 1.7, -3.9, 4.0, -0.3];
        let mut out = [[0.0; 8]; ORDERS];
        b_integrals(&beta, 15, &mut out);
        for (lane, &b) in beta.iter().enumerate() {
            for (k, row) in out.iter().enumerate() {
                let expected = simpson(-1.0, 1.0, |x| x.powi(k as i32) * (-b * x).exp());
                assert!((row[lane] - expected).abs() < 1e-9, "k {k} beta {b}");
                let mut alone = [[0.0; 1]; ORDERS];
                b_integrals(&[b], 15, &mut alone);
                assert_eq!(alone[k][0].to_bits(), row[lane].to_bits());
            }
        }
    }

    #[test]
    fn v_agrees_with_quadrature() {
        for b in [SWITCH, 5.5, 40.0] {
            let mut out = [[0.0; 1]; ORDERS];
            v_integrals(&[b], &[(-2.0 * b).exp()], 15, &mut out);
            for (j, row) in out.iter().enumerate() {
                let expected = simpson(0.0, 2.0, |x| x.powi(j as i32) * (-b * x).exp());
                assert!(
                    (row[0] - expected).abs() < 1e-8 * (1.0 + expected),
                    "j {j} b {b}"
                );
            }
        }
    }

    #[test]
    fn a_is_the_truncated_exponential() {
        let (mut a, mut powers) = ([[0.0; 1]; ORDERS], [[0.0; 1]; ORDERS]);
        a_integrals(&[2.0], 4, &mut a, &mut powers);
        assert!((a[3][0] - (6.0 + 12.0 + 12.0 + 8.0)).abs() < 1e-13);
        assert!((powers[4][0] - 16.0).abs() < 1e-13);
    }
}
