//! The smallest eigenvalue of eight positive-definite tridiagonal matrices, without the others.

use pulp::Simd;

use crate::wide::{Oct, Wide};

/// As [`crate::single::smallest::smallest_eigenvalue`], from 0, eight at a time. Returns the
/// eigenvalues and bounds of the largest ones (Gershgorin).
#[inline(always)]
pub(super) fn smallest_eigenvalues<S: Simd, const K: usize>(
    w: Wide<S, K>,
    d: &[Oct<S, K>],
    e: &[Oct<S, K>],
) -> (Oct<S, K>, Oct<S, K>) {
    let zero = w.splat(0.0);
    let one = w.splat(1.0);
    let count = w.splat(d.len() as f64);
    let fewer = w.splat(d.len() as f64 - 1.0);
    let two = w.splat(2.0);
    let mut size = zero;
    let mut before = zero;
    for (di, ei) in d.iter().zip(e) {
        let ei = w.abs(*ei);
        size = w.larger(w.add(w.add(w.abs(*di), ei), before), size);
        before = ei;
    }
    let enough = w.mul(size, w.splat(4e-16));
    let mut x = zero;
    let mut open = one; // 1 in lanes that still move
    for _ in 0..100 {
        let (mut u, mut v, mut first, mut second) = (zero, zero, zero, zero);
        let (mut reciprocal, mut below) = (zero, zero);
        let mut lowest = size;
        for (di, ei) in d.iter().zip(e) {
            let r = w.mul(below, reciprocal);
            let pivot = w.sub(w.sub(*di, x), r);
            lowest = w.select(w.less(pivot, lowest), pivot, lowest);
            reciprocal = w.div(one, pivot);
            let du = w.sub(w.mul(r, u), one);
            let dv = w.mul(r, w.sub(v, w.mul(two, w.mul(u, u))));
            u = w.mul(du, reciprocal);
            v = w.mul(dv, reciprocal);
            first = w.sub(first, u);
            second = w.add(second, w.sub(w.mul(u, u), v));
            below = w.mul(*ei, *ei);
        }
        let spread = w.mul(fewer, w.sub(w.mul(count, second), w.mul(first, first)));
        let spread = w.sqrt(w.larger(spread, zero));
        let step = w.div(count, w.add(first, spread));
        let moves = w.both(w.less(enough, step), w.less(zero, lowest));
        let moves = w.both(moves, w.less(zero, open));
        open = w.select(moves, one, zero);
        x = w.select(moves, w.add(x, step), x);
        if w.array(open).iter().all(|o| *o < 0.5) {
            break;
        }
    }
    (x, size)
}
