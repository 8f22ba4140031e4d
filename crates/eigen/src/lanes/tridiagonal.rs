//! Householder reduction to tridiagonal form, eight matrices at a time (Martin, Reinsch &
//! Wilkinson, Numer. Math. 11, 181 (1968); lower triangle, columns from the left).

use pulp::Simd;

use super::reduce::symmetric_times;
use crate::wide::{Oct, Wide};

/// A column whose squared norm below the first element is less than this (elements of the matrix
/// are near 1) counts as zero: its squares would be too small to be exact.
const NOTHING: f64 = 1e-280;

/// Reduces the lower triangle of `a`; reflector k stays in column k below the first subdiagonal,
/// its factor in `factors[k]`. `d` gets the diagonal, `e[k]` the element (k+1, k); `e[n−1]` = 0.
#[inline(always)]
pub(super) fn tridiagonalise<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    a: &mut [Oct<S, K>],
    d: &mut [Oct<S, K>],
    e: &mut [Oct<S, K>],
    factors: &mut [Oct<S, K>],
    scratch: &mut [Oct<S, K>],
) {
    let zero = w.splat(0.0);
    let one = w.splat(1.0);
    let (v, p) = scratch.split_at_mut(n);
    for k in 0..n.saturating_sub(2) {
        let size = n - k - 1;
        let v = &mut v[..size];
        let p = &mut p[..size];
        let alpha = a[(k + 1) * n + k];
        let mut square = zero;
        for (r, x) in v.iter_mut().enumerate().skip(1) {
            *x = a[(k + 1 + r) * n + k];
            square = w.mul_add(square, *x, *x);
        }
        let nothing = w.less(square, w.splat(NOTHING));
        let norm = w.sqrt(w.mul_add(square, alpha, alpha));
        // β has the sign opposite to α, so that α − β does not cancel.
        let beta = w.select(w.less(alpha, zero), norm, w.neg(norm));
        let beta = w.select(nothing, alpha, beta);
        let safe_beta = w.select(nothing, one, beta);
        let tau = w.select(nothing, zero, w.div(w.sub(beta, alpha), safe_beta));
        let scale = w.select(
            nothing,
            zero,
            w.div(one, w.select(nothing, one, w.sub(alpha, beta))),
        );
        v[0] = one;
        for (r, x) in v.iter_mut().enumerate().skip(1) {
            *x = w.mul(*x, scale);
            a[(k + 1 + r) * n + k] = *x;
        }
        d[k] = a[k * n + k];
        e[k] = beta;
        factors[k] = tau;
        symmetric_times(w, a, n, k + 1, v, p);
        let mut dot = zero;
        for (x, y) in v.iter().zip(p.iter_mut()) {
            *y = w.mul(*y, tau);
            dot = w.mul_add(dot, *x, *y);
        }
        let half = w.mul(w.mul(tau, dot), w.splat(0.5));
        for (x, y) in v.iter().zip(p.iter_mut()) {
            *y = w.mul_sub(*y, half, *x);
        }
        for r in 0..size {
            let start = (k + 1 + r) * n + k + 1;
            let (vr, pr) = (v[r], p[r]);
            for ((m, x), y) in a[start..start + r + 1]
                .iter_mut()
                .zip(&v[..r + 1])
                .zip(&p[..r + 1])
            {
                *m = w.sub(*m, w.mul_add(w.mul(vr, *y), pr, *x));
            }
        }
    }
    if n >= 2 {
        d[n - 2] = a[(n - 2) * n + n - 2];
        e[n - 2] = a[(n - 1) * n + n - 2];
    }
    d[n - 1] = a[n * n - 1];
    e[n - 1] = zero;
}

/// The orthogonal matrix of the reduction, Q with A = Q T Qᵀ, row-major into `q`.
#[inline(always)]
pub(super) fn form_q<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    a: &[Oct<S, K>],
    factors: &[Oct<S, K>],
    q: &mut [Oct<S, K>],
    scratch: &mut [Oct<S, K>],
) {
    let zero = w.splat(0.0);
    let one = w.splat(1.0);
    q.fill(zero);
    for i in 0..n {
        q[i * n + i] = one;
    }
    for k in (0..n.saturating_sub(2)).rev() {
        let tau = factors[k];
        let top = k + 1;
        let v = &mut scratch[..n - top];
        for (r, x) in v.iter_mut().enumerate().skip(1) {
            *x = a[(top + r) * n + k];
        }
        q[top * n + top] = w.sub(one, tau);
        for (x, row) in v.iter().zip(q[top * n..].chunks_exact_mut(n)).skip(1) {
            row[top] = w.neg(w.mul(*x, tau));
        }
        let v = &v[1..];
        let (head, body) = q.split_at_mut((top + 1) * n);
        let top_row = &mut head[top * n..];
        let mut c = top + 1;
        while c + 4 <= n {
            let mut dot = [zero; 4];
            for (x, row) in v.iter().zip(body.chunks_exact(n)) {
                let row = &row[c..c + 4];
                for t in 0..4 {
                    dot[t] = w.mul_add(dot[t], *x, row[t]);
                }
            }
            for t in 0..4 {
                dot[t] = w.mul(dot[t], tau);
                top_row[c + t] = w.neg(dot[t]);
            }
            for (x, row) in v.iter().zip(body.chunks_exact_mut(n)) {
                let row = &mut row[c..c + 4];
                for t in 0..4 {
                    row[t] = w.mul_sub(row[t], *x, dot[t]);
                }
            }
            c += 4;
        }
        while c < n {
            let mut dot = zero;
            for (x, row) in v.iter().zip(body.chunks_exact(n)) {
                dot = w.mul_add(dot, *x, row[c]);
            }
            dot = w.mul(dot, tau);
            top_row[c] = w.neg(dot);
            for (x, row) in v.iter().zip(body.chunks_exact_mut(n)) {
                row[c] = w.mul_sub(row[c], *x, dot);
            }
            c += 1;
        }
    }
}
