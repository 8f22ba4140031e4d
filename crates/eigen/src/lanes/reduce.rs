//! From (H, S) to one symmetric matrix, eight problems at a time.
//!
//! S = L Lᵀ (Cholesky) and A = L⁻¹ H L⁻ᵀ (Martin & Wilkinson, Numer. Math. 11, 99 (1968)), row by
//! row, lower triangles only.

use pulp::Simd;

use crate::wide::{Mask, Oct, Wide};

/// y = M x for the symmetric M whose lower triangle starts at element (first, first) of `m`.
/// `x` and `y` have one octet per row of the block.
#[inline(always)]
pub(super) fn symmetric_times<S: Simd, const K: usize>(
    w: Wide<S, K>,
    m: &[Oct<S, K>],
    n: usize,
    first: usize,
    x: &[Oct<S, K>],
    y: &mut [Oct<S, K>],
) {
    let size = x.len();
    let y = &mut y[..size];
    let mut r = 0;
    while r + 1 < size {
        let start0 = (first + r) * n + first;
        let row0 = &m[start0..start0 + r + 1];
        let row1 = &m[start0 + n..start0 + n + r + 2];
        let (x0, x1) = (x[r], x[r + 1]);
        let mut dot0 = w.mul(row0[r], x0);
        let mut dot1 = w.mul(row1[r + 1], x1);
        let cross = row1[r];
        dot0 = w.mul_add(dot0, cross, x1);
        dot1 = w.mul_add(dot1, cross, x0);
        for (((a0, a1), xj), yj) in row0[..r]
            .iter()
            .zip(&row1[..r])
            .zip(&x[..r])
            .zip(&mut y[..r])
        {
            dot0 = w.mul_add(dot0, *a0, *xj);
            dot1 = w.mul_add(dot1, *a1, *xj);
            *yj = w.mul_add(w.mul_add(*yj, *a0, x0), *a1, x1);
        }
        y[r] = dot0;
        y[r + 1] = dot1;
        r += 2;
    }
    if r < size {
        let start = (first + r) * n + first;
        let row = &m[start..start + r + 1];
        let x0 = x[r];
        let mut dot = w.mul(row[r], x0);
        for ((a, xj), yj) in row[..r].iter().zip(&x[..r]).zip(&mut y[..r]) {
            dot = w.mul_add(dot, *a, *xj);
            *yj = w.mul_add(*yj, *a, x0);
        }
        y[r] = dot;
    }
}

/// Factors S in place and turns H into A in place. Diagonal elements of the factor are kept in
/// `inverse_diagonal` as reciprocals. Returns the mask of the lanes whose pivots all stayed above
/// `threshold` times the diagonal element they came from; other lanes hold rubbish.
#[inline(always)]
pub(super) fn factor_and_reduce<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    h: &mut [Oct<S, K>],
    s: &mut [Oct<S, K>],
    inverse_diagonal: &mut [Oct<S, K>],
    scratch: &mut [Oct<S, K>],
    threshold: f64,
) -> Mask<S, K> {
    let one = w.splat(1.0);
    let threshold = w.splat(threshold);
    let mut good = w.less(w.splat(0.0), one);
    for i in 0..n {
        let (s_done, s_rest) = s.split_at_mut(i * n);
        let (h_done, h_rest) = h.split_at_mut(i * n);
        let li = &mut s_rest[..i + 1];
        let hi = &mut h_rest[..i + 1];
        let rd = &inverse_diagonal[..i];
        // Row i of L and of Y = H L⁻ᵀ, two columns at a time.
        let mut j = 0;
        while j + 1 < i {
            let l0 = &s_done[j * n..j * n + j];
            let l1 = &s_done[(j + 1) * n..(j + 1) * n + j + 1];
            let (mut a0, mut b0, mut a1, mut b1) = (li[j], hi[j], li[j + 1], hi[j + 1]);
            for (((p, q), x), y) in l0.iter().zip(&l1[..j]).zip(&li[..j]).zip(&hi[..j]) {
                a0 = w.mul_sub(a0, *p, *x);
                b0 = w.mul_sub(b0, *p, *y);
                a1 = w.mul_sub(a1, *q, *x);
                b1 = w.mul_sub(b1, *q, *y);
            }
            a0 = w.mul(a0, rd[j]);
            b0 = w.mul(b0, rd[j]);
            a1 = w.mul(w.mul_sub(a1, l1[j], a0), rd[j + 1]);
            b1 = w.mul(w.mul_sub(b1, l1[j], b0), rd[j + 1]);
            li[j] = a0;
            hi[j] = b0;
            li[j + 1] = a1;
            hi[j + 1] = b1;
            j += 2;
        }
        if j < i {
            let l0 = &s_done[j * n..j * n + j];
            let (mut a0, mut b0) = (li[j], hi[j]);
            for ((p, x), y) in l0.iter().zip(&li[..j]).zip(&hi[..j]) {
                a0 = w.mul_sub(a0, *p, *x);
                b0 = w.mul_sub(b0, *p, *y);
            }
            li[j] = w.mul(a0, rd[j]);
            hi[j] = w.mul(b0, rd[j]);
        }
        // The pivot and Y_ii.
        let diagonal = li[i];
        let (mut pivot, mut y) = (diagonal, hi[i]);
        for (l, h) in li[..i].iter().zip(&hi[..i]) {
            pivot = w.mul_sub(pivot, *l, *l);
            y = w.mul_sub(y, *l, *h);
        }
        let fine = w.less(w.mul(threshold, diagonal), pivot);
        good = w.both(good, fine);
        let root = w.sqrt(w.select(fine, pivot, one));
        let inverse = w.div(one, root);
        li[i] = root;
        inverse_diagonal[i] = inverse;
        y = w.mul(y, inverse);
        // Row i of A: L A = Y, where A above the diagonal is the transpose of what is known.
        let product = &mut scratch[..i];
        symmetric_times(w, h_done, n, 0, &li[..i], product);
        for ((h, p), l) in hi[..i].iter_mut().zip(product.iter()).zip(&li[..i]) {
            *h = w.mul(w.sub(*h, *p), inverse);
            y = w.mul_sub(y, *h, *l);
        }
        hi[i] = w.mul(y, inverse);
    }
    good
}

/// C = L⁻ᵀ Z in place, Z row-major, four columns at a time.
#[inline(always)]
pub(super) fn back_substitute<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    l: &[Oct<S, K>],
    inverse_diagonal: &[Oct<S, K>],
    z: &mut [Oct<S, K>],
) {
    for i in (0..n).rev() {
        let (head, tail) = z.split_at_mut((i + 1) * n);
        let row = &mut head[i * n..];
        let inverse = inverse_diagonal[i];
        let mut c = 0;
        while c < n {
            let width = (n - c).min(4);
            if width == 4 {
                let mut acc: [Oct<S, K>; 4] = [row[c], row[c + 1], row[c + 2], row[c + 3]];
                for (below, lrow) in tail.chunks_exact(n).zip(l[(i + 1) * n..].chunks_exact(n)) {
                    let factor = lrow[i];
                    let b = &below[c..c + 4];
                    for q in 0..4 {
                        acc[q] = w.mul_sub(acc[q], factor, b[q]);
                    }
                }
                for q in 0..4 {
                    row[c + q] = w.mul(acc[q], inverse);
                }
            } else {
                for q in c..n {
                    let mut acc = row[q];
                    for (below, lrow) in tail.chunks_exact(n).zip(l[(i + 1) * n..].chunks_exact(n))
                    {
                        acc = w.mul_sub(acc, lrow[i], below[q]);
                    }
                    row[q] = w.mul(acc, inverse);
                }
            }
            c += width;
        }
    }
}
