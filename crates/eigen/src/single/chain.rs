//! Implicit QL on one tridiagonal matrix (Dubrulle, Martin & Wilkinson, Numer. Math. 12, 377
//! (1968)); the rotations are kept and applied to the vectors several sweeps at a time.

use pulp::Simd;

use crate::Lanes;
use crate::lanes::chain::{FLOOR, MOST_SWEEPS, SMALL, TINY_SQUARE};
use crate::wide::{Oct, Wide};

/// Most sweeps that are kept before they are applied.
const BUFFERED: usize = 16;

/// Numbers that the rotations of size n need.
pub(super) fn rotation_room(n: usize) -> usize {
    n * BUFFERED
}

/// Diagonalises; `d` becomes the eigenvalues, unsorted. `z` holds Zᵀ in panels of eight columns,
/// `z[o·n + row]`; its rows are combined. False when the iteration does not end.
#[inline(always)]
pub(super) fn implicit_ql<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    d: &mut [f64],
    e: &mut [f64],
    rotations: &mut [[f64; 2]],
    z: Option<&mut [Lanes]>,
) -> bool {
    let mut z = z;
    let end = n - 1;
    let mut ranges = [(0usize, 0usize); BUFFERED];
    let mut count = 0;
    for l in 0..n {
        let mut sweeps = 0;
        loop {
            let mut m = l;
            while m < end && e[m].abs() > SMALL * (d[m].abs() + d[m + 1].abs()) + FLOOR {
                m += 1;
            }
            if m == l {
                break;
            }
            sweeps += 1;
            if sweeps > MOST_SWEEPS {
                return false;
            }
            ranges[count] = (l, m);
            let keep = &mut rotations[count * n + l..count * n + m];
            sweep(&mut d[l..=m], &mut e[l..=m], keep);
            count += 1;
            if count == BUFFERED {
                if let Some(z) = z.as_deref_mut() {
                    apply(w, n, rotations, &ranges[..count], z);
                }
                count = 0;
            }
        }
    }
    if let Some(z) = z {
        apply(w, n, rotations, &ranges[..count], z);
    }
    true
}

/// One QL sweep over a window.
#[inline(always)]
fn sweep(d: &mut [f64], e: &mut [f64], keep: &mut [[f64; 2]]) {
    let size = keep.len();
    let (d, e) = (&mut d[..size + 1], &mut e[..size + 1]);
    let ratio = (d[1] - d[0]) / (2.0 * e[0]);
    let root = (1.0 + ratio * ratio).sqrt();
    let mut g = d[size] - d[0] + e[0] / (ratio + if ratio < 0.0 { -root } else { root });
    let (mut s, mut c, mut p) = (1.0_f64, 1.0_f64, 0.0_f64);
    for i in (0..size).rev() {
        let f = s * e[i];
        let b = c * e[i];
        let square = f * f + g * g;
        let r;
        if square < TINY_SQUARE {
            r = g;
            s = 0.0;
            c = 1.0;
        } else {
            r = square.sqrt();
            let inverse = 1.0 / r;
            s = f * inverse;
            c = g * inverse;
        }
        e[i + 1] = r;
        let shifted = d[i + 1] - p;
        let t = (d[i] - shifted) * s + (c + c) * b;
        p = s * t;
        d[i + 1] = shifted + p;
        g = c * t - b;
        keep[i] = [c, s];
    }
    d[0] -= p;
    e[0] = g;
    e[size] = 0.0;
}

/// Applies kept sweeps to Zᵀ, two panels at a time.
#[inline(always)]
fn apply<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    rotations: &[[f64; 2]],
    ranges: &[(usize, usize)],
    z: &mut [Lanes],
) {
    let mut panels = w.view_mut(z).chunks_exact_mut(2 * n);
    for two in &mut panels {
        let (z0, z1) = two.split_at_mut(n);
        for (sweep, (lo, hi)) in ranges.iter().enumerate() {
            let steps = &rotations[sweep * n + lo..sweep * n + hi];
            let size = steps.len();
            let (z0, z1) = (&mut z0[*lo..*lo + size + 1], &mut z1[*lo..*lo + size + 1]);
            let (mut carry0, mut carry1) = (z0[size], z1[size]);
            for i in (0..size).rev() {
                let (c, s) = (w.splat(steps[i][0]), w.splat(steps[i][1]));
                let (x0, x1) = (z0[i], z1[i]);
                z0[i + 1] = w.mul_add(w.mul(c, carry0), s, x0);
                z1[i + 1] = w.mul_add(w.mul(c, carry1), s, x1);
                carry0 = w.mul_sub(w.mul(c, x0), s, carry0);
                carry1 = w.mul_sub(w.mul(c, x1), s, carry1);
            }
            z0[0] = carry0;
            z1[0] = carry1;
        }
    }
    let last: &mut [Oct<S, K>] = panels.into_remainder();
    if !last.is_empty() {
        for (sweep, (lo, hi)) in ranges.iter().enumerate() {
            let steps = &rotations[sweep * n + lo..sweep * n + hi];
            let size = steps.len();
            let z = &mut last[*lo..*lo + size + 1];
            let mut carry = z[size];
            for i in (0..size).rev() {
                let (c, s) = (w.splat(steps[i][0]), w.splat(steps[i][1]));
                let x = z[i];
                z[i + 1] = w.mul_add(w.mul(c, carry), s, x);
                carry = w.mul_sub(w.mul(c, x), s, carry);
            }
            z[0] = carry;
        }
    }
}
