//! Loading the eight problems and writing their sorted solutions.

use pulp::Simd;

use crate::wide::{Mask, Oct, Wide};
use crate::{LANES, Lanes};

/// Powers of two that bring a matrix's largest element near 1, per lane, and whether all its
/// elements are finite.
pub(super) struct Scales {
    pub(super) factor: Lanes,
    pub(super) finite: [bool; LANES],
}

/// 2^−x for the exponent x of `size`; 1 for zero and for what is not finite. `even` makes x even,
/// so that the square root is exact too.
pub(crate) fn power_of_two_scale(size: f64, even: bool) -> f64 {
    if !(size > 0.0 && size.is_finite()) {
        return 1.0;
    }
    let biased = ((size.to_bits() >> 52) & 0x7ff) as i64;
    let mut exponent = (biased - 1023).clamp(-1000, 1000);
    if even {
        exponent &= !1;
    }
    f64::from_bits(((1023 - exponent) as u64) << 52)
}

/// Looks through the lower triangle of `m`.
#[inline(always)]
pub(super) fn scales<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    m: &[Oct<S, K>],
    even: bool,
) -> Scales {
    let zero = w.splat(0.0);
    let (mut size, mut poison) = (zero, zero);
    for (i, row) in m.chunks_exact(n).enumerate() {
        for x in &row[..i + 1] {
            size = w.larger(w.abs(*x), size);
            poison = w.mul_add(poison, *x, zero);
        }
    }
    let (size, poison) = (w.array(size), w.array(poison));
    Scales {
        factor: size.map(|x| power_of_two_scale(x, even)),
        finite: poison.map(f64::is_finite),
    }
}

/// Copies the scaled lower triangle; where `use_lane` does not hold the diagonal becomes
/// `diagonal` and the rest zero.
#[inline(always)]
pub(super) fn load<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    from: &[Oct<S, K>],
    to: &mut [Oct<S, K>],
    factor: &Lanes,
    use_lane: Mask<S, K>,
    diagonal: f64,
) {
    let factor = w.pack(factor);
    let zero = w.splat(0.0);
    for (i, (source, target)) in from.chunks_exact(n).zip(to.chunks_exact_mut(n)).enumerate() {
        for (x, y) in source[..i + 1].iter().zip(&mut target[..i + 1]) {
            *y = w.select(use_lane, w.mul(*x, factor), zero);
        }
        target[i] = w.select(use_lane, target[i], w.splat(diagonal));
    }
}

/// The order of the eigenvalues of each lane, ascending; equal ones keep their order.
#[inline(always)]
pub(super) fn sort(n: usize, d: &[Lanes], order: &mut [[u32; LANES]]) {
    for lane in 0..LANES {
        for k in 0..n {
            let value = d[k][lane];
            let mut at = k;
            while at > 0 && d[order[at - 1][lane] as usize][lane] > value {
                order[at][lane] = order[at - 1][lane];
                at -= 1;
            }
            order[at][lane] = k as u32;
        }
    }
}

/// Sign of each column of `z` by the rule that the first of its largest elements is positive.
#[inline(always)]
pub(super) fn signs<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    z: &[Oct<S, K>],
    signs: &mut [Oct<S, K>],
) {
    let zero = w.splat(0.0);
    let shrink = w.splat(1.0 - crate::canonical::EQUAL);
    let signs = &mut signs[..n];
    for (k, sign) in signs.iter_mut().enumerate() {
        let mut largest = zero;
        for row in z.chunks_exact(n) {
            largest = w.larger(w.abs(row[k]), largest);
        }
        let limit = w.mul(largest, shrink);
        let mut first = zero;
        for row in z.chunks_exact(n).rev() {
            first = w.select(w.at_most(limit, w.abs(row[k])), row[k], first);
        }
        *sign = w.select(w.less(first, zero), w.splat(-1.0), w.splat(1.0));
    }
}
