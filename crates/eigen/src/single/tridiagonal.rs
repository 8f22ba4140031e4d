//! Householder reduction of one symmetric matrix, rows from the last (Martin, Reinsch & Wilkinson,
//! Numer. Math. 11, 181 (1968)): the active block always starts at element (0, 0).

use pulp::Simd;

use crate::Lanes;
use crate::wide::{Oct, Wide};

/// As in the lane kernel: a squared norm below this counts as zero.
const NOTHING: f64 = 1e-280;

/// Reduces the full symmetric `a`; reflector i stays in row i, its factor in `factors[i]`.
/// `e[i]` is element (i+1, i); `e[n−1]` = 0. `room` has 3q octets.
#[inline(always)]
pub(super) fn tridiagonalise<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    q: usize,
    a: &mut [Lanes],
    d: &mut [f64],
    e: &mut [f64],
    factors: &mut [f64],
    room: &mut [Lanes],
) {
    let stride = 8 * q;
    let (p, rest) = room.split_at_mut(q);
    let (v_old, w_old) = rest.split_at_mut(q);
    let w_old = &mut w_old[..q];
    v_old.fill([0.0; 8]);
    w_old.fill([0.0; 8]);
    e[n - 1] = 0.0;
    for i in (2..n).rev() {
        // The last step's update has still to be done: first on this row, which gives the reflector.
        let octets = i.div_ceil(8);
        let (block, tail) = a.split_at_mut(i * q);
        let row = &mut tail[..q];
        {
            let (vi, wi) = (v_old.as_flattened()[i], w_old.as_flattened()[i]);
            let (vi, wi) = (w.splat(vi), w.splat(wi));
            let used = (i + 1).div_ceil(8);
            for ((x, v), u) in w.view_mut(row)[..used]
                .iter_mut()
                .zip(w.view(v_old))
                .zip(w.view(w_old))
            {
                *x = w.sub(*x, w.mul_add(w.mul(vi, *u), wi, *v));
            }
        }
        let flat = row.as_flattened_mut();
        d[i] = flat[i];
        let alpha = flat[i - 1];
        for x in &mut flat[i - 1..] {
            *x = 0.0;
        }
        let mut square = w.splat(0.0);
        for x in &w.view(row)[..octets] {
            square = w.mul_add(square, *x, *x);
        }
        let square = w.sum(square);
        let (tau, beta, scale) = if square < NOTHING {
            (0.0, alpha, 0.0)
        } else {
            let norm = (square + alpha * alpha).sqrt();
            let beta = if alpha < 0.0 { norm } else { -norm };
            ((beta - alpha) / beta, beta, 1.0 / (alpha - beta))
        };
        e[i - 1] = beta;
        factors[i] = tau;
        let scale = w.splat(scale);
        for x in &mut w.view_mut(row)[..octets] {
            *x = w.mul(*x, scale);
        }
        row.as_flattened_mut()[i - 1] = 1.0;
        // The update of the rows above, and the product with the new reflector on the way.
        p[..octets].fill([0.0; 8]);
        update_and_multiply(w, i, q, octets, block, v_old, w_old, row, p);
        let flat = p.as_flattened_mut();
        for x in &mut flat[i..8 * octets] {
            *x = 0.0;
        }
        let scale = w.splat(tau);
        let mut dot = w.splat(0.0);
        for (y, v) in w.view_mut(p)[..octets].iter_mut().zip(w.view(row)) {
            *y = w.mul(*y, scale);
            dot = w.mul_add(dot, *y, *v);
        }
        let half = w.splat(0.5 * tau * w.sum(dot));
        for (((y, v), to), keep) in w.view(p)[..octets]
            .iter()
            .zip(w.view(row))
            .zip(w.view_mut(w_old).iter_mut())
            .zip(w.view_mut(v_old).iter_mut())
        {
            *to = w.mul_sub(*y, half, *v);
            *keep = *v;
        }
    }
    // The two first rows.
    let (v, u) = (v_old.as_flattened(), w_old.as_flattened());
    let a = a.as_flattened_mut();
    if n >= 2 {
        d[1] = a[stride + 1] - 2.0 * (v[1] * u[1]);
        e[0] = a[stride] - v[1] * u[0] - u[1] * v[0];
    }
    d[0] = a[0] - 2.0 * (v[0] * u[0]);
}

/// Rows 0..rows of `a`: a −= v wᵀ + w vᵀ, then p += a·x for the new a (symmetric).
#[inline(always)]
fn update_and_multiply<S: Simd, const K: usize>(
    w: Wide<S, K>,
    rows: usize,
    q: usize,
    octets: usize,
    a: &mut [Lanes],
    v: &[Lanes],
    u: &[Lanes],
    x: &[Lanes],
    p: &mut [Lanes],
) {
    let (vf, uf, xf) = (v.as_flattened(), u.as_flattened(), x.as_flattened());
    let (v, u) = (&w.view(v)[..octets], &w.view(u)[..octets]);
    let p = &mut w.view_mut(p)[..octets];
    let a = w.view_mut(a);
    let mut r = 0;
    while r + 4 <= rows {
        let four = &mut a[r * q..(r + 4) * q];
        let (a0, rest) = four.split_at_mut(q);
        let (a1, rest) = rest.split_at_mut(q);
        let (a2, a3) = rest.split_at_mut(q);
        let (a0, a1, a2, a3) = (
            &mut a0[..octets],
            &mut a1[..octets],
            &mut a2[..octets],
            &mut a3[..octets],
        );
        let vr: [Oct<S, K>; 4] = [
            w.splat(vf[r]),
            w.splat(vf[r + 1]),
            w.splat(vf[r + 2]),
            w.splat(vf[r + 3]),
        ];
        let ur: [Oct<S, K>; 4] = [
            w.splat(uf[r]),
            w.splat(uf[r + 1]),
            w.splat(uf[r + 2]),
            w.splat(uf[r + 3]),
        ];
        let xr: [Oct<S, K>; 4] = [
            w.splat(xf[r]),
            w.splat(xf[r + 1]),
            w.splat(xf[r + 2]),
            w.splat(xf[r + 3]),
        ];
        for o in 0..octets {
            let (vo, uo) = (v[o], u[o]);
            let n0 = w.sub(a0[o], w.mul_add(w.mul(vr[0], uo), ur[0], vo));
            let n1 = w.sub(a1[o], w.mul_add(w.mul(vr[1], uo), ur[1], vo));
            let n2 = w.sub(a2[o], w.mul_add(w.mul(vr[2], uo), ur[2], vo));
            let n3 = w.sub(a3[o], w.mul_add(w.mul(vr[3], uo), ur[3], vo));
            a0[o] = n0;
            a1[o] = n1;
            a2[o] = n2;
            a3[o] = n3;
            let first = w.mul_add(w.mul(n0, xr[0]), n1, xr[1]);
            let second = w.mul_add(w.mul(n2, xr[2]), n3, xr[3]);
            p[o] = w.add(p[o], w.add(first, second));
        }
        r += 4;
    }
    while r < rows {
        let row = &mut a[r * q..r * q + octets];
        let (vr, ur, xr) = (w.splat(vf[r]), w.splat(uf[r]), w.splat(xf[r]));
        for (((m, vo), uo), po) in row.iter_mut().zip(v).zip(u).zip(p.iter_mut()) {
            *m = w.sub(*m, w.mul_add(w.mul(vr, *uo), ur, *vo));
            *po = w.mul_add(*po, *m, xr);
        }
        r += 1;
    }
}

/// Qᵀ with A = Q T Qᵀ.
#[inline(always)]
pub(super) fn form_q_transposed<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    q: usize,
    a: &[Lanes],
    factors: &[f64],
    out: &mut [Lanes],
) {
    let stride = 8 * q;
    out.fill([0.0; 8]);
    for i in 0..n {
        out.as_flattened_mut()[i * stride + i] = 1.0;
    }
    let out = w.view_mut(out);
    for i in 2..n {
        let octets = i.div_ceil(8);
        let v = &w.view(&a[i * q..])[..octets];
        let tau = factors[i];
        let mut r = 0;
        while r + 4 <= i {
            let four = &mut out[r * q..(r + 4) * q];
            let (a0, rest) = four.split_at_mut(q);
            let (a1, rest) = rest.split_at_mut(q);
            let (a2, a3) = rest.split_at_mut(q);
            let (a0, a1, a2, a3) = (
                &mut a0[..octets],
                &mut a1[..octets],
                &mut a2[..octets],
                &mut a3[..octets],
            );
            let mut dot = [w.splat(0.0); 4];
            for o in 0..octets {
                dot[0] = w.mul_add(dot[0], a0[o], v[o]);
                dot[1] = w.mul_add(dot[1], a1[o], v[o]);
                dot[2] = w.mul_add(dot[2], a2[o], v[o]);
                dot[3] = w.mul_add(dot[3], a3[o], v[o]);
            }
            let factor = dot.map(|x| w.splat(tau * w.sum(x)));
            for o in 0..octets {
                a0[o] = w.mul_sub(a0[o], factor[0], v[o]);
                a1[o] = w.mul_sub(a1[o], factor[1], v[o]);
                a2[o] = w.mul_sub(a2[o], factor[2], v[o]);
                a3[o] = w.mul_sub(a3[o], factor[3], v[o]);
            }
            r += 4;
        }
        while r < i {
            let row = &mut out[r * q..r * q + octets];
            let mut dot = w.splat(0.0);
            for (x, y) in row.iter().zip(v) {
                dot = w.mul_add(dot, *x, *y);
            }
            let factor = w.splat(tau * w.sum(dot));
            for (x, y) in row.iter_mut().zip(v) {
                *x = w.mul_sub(*x, factor, *y);
            }
            r += 1;
        }
    }
}
