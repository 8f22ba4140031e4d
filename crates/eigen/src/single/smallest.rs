//! The smallest eigenvalue of a positive-definite tridiagonal matrix, without the others.

/// Laguerre's method from below (Parlett, *The Symmetric Eigenvalue Problem*, 1980): for a
/// polynomial with real roots it goes up monotonically, with third order at the end. The pivots of
/// the triangular factorisation give the logarithmic derivatives of the characteristic polynomial.
/// Accurate to a few units of rounding of the largest eigenvalue; `start` must lie below.
pub(crate) fn smallest_eigenvalue(d: &[f64], e: &[f64], start: f64, size: f64) -> f64 {
    let n = d.len() as f64;
    let mut x = start;
    for _ in 0..100 {
        let (mut u, mut v) = (0.0_f64, 0.0_f64);
        let (mut first, mut second) = (0.0_f64, 0.0_f64);
        let mut reciprocal = 0.0_f64;
        let mut below = 0.0_f64;
        for (di, ei) in d.iter().zip(e) {
            let r = below * reciprocal;
            let pivot = di - x - r;
            if pivot <= 0.0 {
                return x;
            }
            reciprocal = 1.0 / pivot;
            let du = r * u - 1.0;
            let dv = r * (v - 2.0 * u * u);
            u = du * reciprocal;
            v = dv * reciprocal;
            first -= u;
            second += u * u - v;
            below = ei * ei;
        }
        let spread = ((n - 1.0) * (n * second - first * first)).max(0.0).sqrt();
        let step = n / (first + spread);
        if !(step > 4e-16 * size) {
            return x;
        }
        x += step;
    }
    x
}
