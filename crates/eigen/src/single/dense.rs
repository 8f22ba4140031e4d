//! Dense steps of the single kernel. Matrices are row-major in octets: a row of n numbers is
//! `q` = ⌈n/8⌉ octets, padded with zeros.

use pulp::Simd;

use crate::Lanes;
use crate::wide::{Oct, Wide};

/// Copies the lower triangle of `from`, scaled, to both triangles of `to`.
pub(super) fn load(n: usize, q: usize, from: &[f64], factor: f64, to: &mut [Lanes]) {
    let stride = 8 * q;
    let to = to.as_flattened_mut();
    to[..n * stride].fill(0.0);
    for i in 0..n {
        for j in 0..i + 1 {
            let x = from[i * n + j] * factor;
            to[i * stride + j] = x;
            to[j * stride + i] = x;
        }
    }
}

/// S = Uᵀ U in place (upper triangle; what is below the diagonal stays as it was). `inverse`
/// gets the reciprocals of the diagonal. False when a pivot is not above `threshold` times the
/// diagonal element it came from.
#[inline(always)]
pub(super) fn cholesky<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    q: usize,
    s: &mut [Lanes],
    inverse: &mut [f64],
    threshold: f64,
) -> bool {
    let stride = 8 * q;
    for k in 0..n {
        inverse[k] = s.as_flattened()[k * stride + k];
    }
    for k in 0..n {
        let first = k / 8;
        let pivot = s.as_flattened()[k * stride + k];
        if !(pivot > threshold * inverse[k]) {
            return false;
        }
        let reciprocal = 1.0 / pivot.sqrt();
        inverse[k] = reciprocal;
        let (head, tail) = s.split_at_mut((k + 1) * q);
        let row = &mut head[k * q..];
        let scale = w.splat(reciprocal);
        for x in &mut w.view_mut(row)[first..] {
            *x = w.mul(*x, scale);
        }
        let row = &*row;
        let factors = row.as_flattened();
        for (below, j) in tail.chunks_exact_mut(q).zip(k + 1..) {
            let o = j / 8;
            let factor = w.splat(factors[j]);
            for (x, u) in w
                .view_mut(&mut below[o..])
                .iter_mut()
                .zip(w.view(&row[o..]))
            {
                *x = w.mul_sub(*x, factor, *u);
            }
        }
    }
    true
}

/// W = L⁻¹ for L = Uᵀ, lower triangle, zeros above.
#[inline(always)]
pub(super) fn invert<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    q: usize,
    u: &[Lanes],
    inverse: &[f64],
    out: &mut [Lanes],
) {
    let u = u.as_flattened();
    let stride = 8 * q;
    out.fill([0.0; 8]);
    for i in 0..n {
        out.as_flattened_mut()[i * stride + i] = 1.0;
        let (done, rest) = out.split_at_mut(i * q);
        let (done, row) = (w.view(done), w.view_mut(&mut rest[..q]));
        let scale = w.splat(inverse[i]);
        for o in 0..i / 8 + 1 {
            let mut acc = row[o];
            for k in 8 * o..i {
                acc = w.mul_sub(acc, w.splat(u[k * stride + i]), done[k * q + o]);
            }
            row[o] = w.mul(acc, scale);
        }
    }
}

/// Rows `r..r+R`, octet `o` of the product: Σ over `from..to` of a[r][k] b[k][o].
#[inline(always)]
fn block<S: Simd, const K: usize, const R: usize>(
    w: Wide<S, K>,
    q: usize,
    a: &[f64],
    r: usize,
    b: &[Oct<S, K>],
    o: usize,
    from: usize,
    to: usize,
) -> [Oct<S, K>; R] {
    let stride = 8 * q;
    let mut acc = [w.splat(0.0); R];
    let rows: [&[f64]; R] =
        core::array::from_fn(|t| &a[(r + t) * stride + from..(r + t) * stride + to]);
    let column = b[from * q..to * q].chunks_exact(q);
    for (k, b_row) in column.enumerate() {
        let x = b_row[o];
        for t in 0..R {
            acc[t] = w.mul_add(acc[t], w.splat(rows[t][k]), x);
        }
    }
    acc
}

/// Which terms and elements of a product are needed.
#[derive(Copy, Clone, PartialEq)]
pub(super) enum Shape {
    /// The left factor is lower triangular.
    LowerLeft,
    /// The left factor is lower triangular, and of the result only the lower triangle is needed.
    LowerLeftLowerResult,
    /// The right factor is lower triangular.
    LowerRight,
    /// Nothing is known.
    Full,
    /// Of the result only the lower triangle is needed.
    LowerResult,
}

/// out = a·b. The result's octet (row, o) goes to `out[place(row, o)]`.
#[inline(always)]
pub(super) fn product<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    q: usize,
    a: &[Lanes],
    b: &[Lanes],
    shape: Shape,
    out: &mut [Lanes],
    row_step: usize,
    octet_step: usize,
) {
    let (a, b, out) = (a.as_flattened(), w.view(b), w.view_mut(out));
    let mut r = 0;
    while r < n {
        let height = if n - r >= 4 {
            4
        } else if n - r >= 2 {
            2
        } else {
            1
        };
        let last_row = r + height - 1;
        let octets = match shape {
            Shape::LowerLeftLowerResult | Shape::LowerResult => last_row / 8 + 1,
            _ => q,
        };
        for o in 0..octets {
            let (from, to) = match shape {
                Shape::LowerRight => (8 * o, n),
                Shape::Full | Shape::LowerResult => (0, n),
                _ => (0, last_row + 1),
            };
            let at = r * row_step + o * octet_step;
            match height {
                4 => {
                    let x = block::<S, K, 4>(w, q, a, r, b, o, from, to);
                    for (t, x) in x.into_iter().enumerate() {
                        out[at + t * row_step] = x;
                    }
                }
                2 => {
                    let x = block::<S, K, 2>(w, q, a, r, b, o, from, to);
                    for (t, x) in x.into_iter().enumerate() {
                        out[at + t * row_step] = x;
                    }
                }
                _ => {
                    let [x] = block::<S, K, 1>(w, q, a, r, b, o, from, to);
                    out[at] = x;
                }
            }
        }
        r += height;
    }
}

/// The transpose.
pub(super) fn transpose(n: usize, q: usize, from: &[Lanes], to: &mut [Lanes]) {
    let stride = 8 * q;
    let (from, to) = (from.as_flattened(), to.as_flattened_mut());
    for i in 0..n {
        for j in 0..n {
            to[j * stride + i] = from[i * stride + j];
        }
    }
}

/// Copies the lower triangle to the upper one.
pub(super) fn mirror(n: usize, q: usize, m: &mut [Lanes]) {
    let stride = 8 * q;
    let m = m.as_flattened_mut();
    for i in 0..n {
        for j in 0..i {
            m[j * stride + i] = m[i * stride + j];
        }
        for x in &mut m[i * stride + n..(i + 1) * stride] {
            *x = 0.0;
        }
    }
}
