//! Implicit QL on eight tridiagonal matrices at once (Dubrulle, Martin & Wilkinson, Numer. Math.
//! 12, 377 (1968)). Every lane has its own shift and its own window; a lane that has nothing to
//! do in a step gets the identity, so that no lane's result depends on the others.

use pulp::Simd;

use crate::wide::{Oct, Wide};
use crate::{LANES, Lanes};

/// An off-diagonal element this small relative to its two diagonal neighbours is zero.
pub(crate) const SMALL: f64 = 1.2e-16;
/// An off-diagonal element this small counts as zero at all events (elements are near 1).
pub(crate) const FLOOR: f64 = 1e-22;
/// Squares below this are not exact any more: the rotation is left out.
pub(crate) const TINY_SQUARE: f64 = 1e-280;
/// Sweeps for one eigenvalue after which a lane is given up; two or three are usual.
pub(crate) const MOST_SWEEPS: u32 = 60;

/// Rotations of several sweeps, kept to be applied together while a row is in the cache.
pub(super) struct Rotations<'a, S: Simd, const K: usize> {
    /// (cosine, sine) of each step, `n` steps per sweep.
    pairs: &'a mut [[Oct<S, K>; 2]],
    ranges: [(usize, usize); MOST_BUFFERED],
    count: usize,
    capacity: usize,
}

/// Most sweeps that are kept.
const MOST_BUFFERED: usize = 16;

/// Sweeps kept for size n: about 16 KiB of rotations.
pub(super) fn buffered_sweeps(n: usize) -> usize {
    (128 / n.max(1)).clamp(1, MOST_BUFFERED)
}

impl<'a, S: Simd, const K: usize> Rotations<'a, S, K> {
    #[inline(always)]
    pub(super) fn new(n: usize, octets: &'a mut [Oct<S, K>]) -> Self {
        let (pairs, _) = octets.as_chunks_mut::<2>();
        Rotations {
            pairs,
            ranges: [(0, 0); MOST_BUFFERED],
            count: 0,
            capacity: buffered_sweeps(n),
        }
    }

    /// Applies what is kept to the rows of `z` and forgets it.
    #[inline(always)]
    fn apply(&mut self, w: Wide<S, K>, n: usize, z: &mut [Oct<S, K>]) {
        let mut rows = z.chunks_exact_mut(2 * n);
        for two in &mut rows {
            let (r0, r1) = two.split_at_mut(n);
            for (sweep, (lo, hi)) in self.ranges[..self.count].iter().enumerate() {
                let steps = &self.pairs[sweep * n + lo..sweep * n + hi];
                let size = steps.len();
                let r0 = &mut r0[*lo..hi + 1];
                let r1 = &mut r1[*lo..hi + 1];
                let mut carry0 = r0[size];
                let mut carry1 = r1[size];
                for i in (0..size).rev() {
                    let [c, s] = steps[i];
                    let (z0, z1) = (r0[i], r1[i]);
                    r0[i + 1] = w.mul_add(w.mul(c, carry0), s, z0);
                    r1[i + 1] = w.mul_add(w.mul(c, carry1), s, z1);
                    carry0 = w.mul_sub(w.mul(c, z0), s, carry0);
                    carry1 = w.mul_sub(w.mul(c, z1), s, carry1);
                }
                r0[0] = carry0;
                r1[0] = carry1;
            }
        }
        let last = rows.into_remainder();
        if !last.is_empty() {
            for (sweep, (lo, hi)) in self.ranges[..self.count].iter().enumerate() {
                let steps = &self.pairs[sweep * n + lo..sweep * n + hi];
                let size = steps.len();
                let row = &mut last[*lo..hi + 1];
                let mut carry = row[size];
                for i in (0..size).rev() {
                    let [c, s] = steps[i];
                    let z = row[i];
                    row[i + 1] = w.mul_add(w.mul(c, carry), s, z);
                    carry = w.mul_sub(w.mul(c, z), s, carry);
                }
                row[0] = carry;
            }
        }
        self.count = 0;
    }
}

/// Diagonalises the matrices with diagonals `d` and off-diagonals `e`; `d` becomes the eigenvalues,
/// unsorted. `z` (rows × n), if given, is multiplied by the eigenvectors. Returns for each lane
/// whether it converged.
#[inline(always)]
pub(super) fn implicit_ql<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    d: &mut [Lanes],
    e: &mut [Lanes],
    mut vectors: Option<(Rotations<'_, S, K>, &mut [Oct<S, K>])>,
) -> [bool; LANES] {
    let zero = w.splat(0.0);
    let one = w.splat(1.0);
    let end = n - 1;
    let mut from = [0usize; LANES];
    let mut sweeps = [0u32; LANES];
    let mut converged = [true; LANES];
    loop {
        // Each lane's window starts at its first eigenvalue that is not found yet.
        let mut lo = end;
        for lane in 0..LANES {
            let mut l = from[lane];
            while l < end
                && e[l][lane].abs() <= SMALL * (d[l][lane].abs() + d[l + 1][lane].abs()) + FLOOR
            {
                l += 1;
                sweeps[lane] = 0;
            }
            if l < end {
                sweeps[lane] += 1;
                if sweeps[lane] > MOST_SWEEPS {
                    converged[lane] = false;
                    l = end;
                }
            }
            from[lane] = l;
            lo = lo.min(l);
        }
        if lo == end {
            break;
        }
        // It ends at the first negligible off-diagonal element.
        let from_oct = w.pack(&from.map(|l| l as f64));
        let to_oct = {
            let (d, e) = (w.view(d), w.view(e));
            let (small, floor) = (w.splat(SMALL), w.splat(FLOOR));
            let mut to = w.splat(end as f64);
            let mut index = to;
            let mut above = w.abs(d[end]);
            for i in (lo..end).rev() {
                index = w.sub(index, one);
                let here = w.abs(d[i]);
                let bound = w.mul_add(floor, small, w.add(here, above));
                let split = w.both(w.at_most(w.abs(e[i]), bound), w.at_most(from_oct, index));
                to = w.select(split, index, to);
                above = here;
            }
            to
        };
        let to = w.array(to_oct).map(|m| m as usize);
        let mut hi = lo;
        let (mut d0, mut d1, mut e0, mut dm) =
            ([0.0; LANES], [0.0; LANES], [1.0; LANES], [0.0; LANES]);
        for lane in 0..LANES {
            let (l, m) = (from[lane], to[lane]);
            if l < end {
                d0[lane] = d[l][lane];
                d1[lane] = d[l + 1][lane];
                e0[lane] = e[l][lane];
                dm[lane] = d[m][lane];
                hi = hi.max(m);
            }
        }
        // Wilkinson's shift from the upper left corner of the window.
        let (d0, d1) = (w.pack(&d0), w.pack(&d1));
        let (e0, dm) = (w.pack(&e0), w.pack(&dm));
        let ratio = w.div(w.sub(d1, d0), w.add(e0, e0));
        let root = w.sqrt(w.mul_add(one, ratio, ratio));
        let signed = w.select(w.less(ratio, zero), w.neg(root), root);
        let mut g = w.add(w.sub(dm, d0), w.div(e0, w.add(ratio, signed)));
        let (mut s, mut c, mut p) = (one, one, zero);
        {
            let d = &mut w.view_mut(d)[lo..=hi];
            let e = &mut w.view_mut(e)[lo..=hi];
            let mut keep = vectors.as_mut().map(|(rotations, _)| {
                let slot = rotations.count;
                rotations.ranges[slot] = (lo, hi);
                rotations.count += 1;
                &mut rotations.pairs[slot * n + lo..slot * n + hi]
            });
            let tiny = w.splat(TINY_SQUARE);
            let size = hi - lo;
            let mut index = w.splat(hi as f64);
            let mut above = d[size];
            for i in (0..size).rev() {
                index = w.sub(index, one);
                let active = w.both(w.less(index, to_oct), w.at_most(from_oct, index));
                let (di, ei) = (d[i], e[i]);
                let f = w.mul(s, ei);
                let b = w.mul(c, ei);
                let square = w.mul_add(w.mul(f, f), g, g);
                let skip = w.less(square, tiny);
                let r = w.sqrt(square);
                let inverse = w.div(one, r);
                let sine = w.select(skip, zero, w.mul(f, inverse));
                let cosine = w.select(skip, one, w.mul(g, inverse));
                let r = w.select(skip, g, r);
                let shifted = w.sub(above, p);
                let t = w.mul_add(w.mul(w.sub(di, shifted), sine), w.add(cosine, cosine), b);
                let step = w.mul(sine, t);
                e[i + 1] = w.select(active, r, e[i + 1]);
                d[i + 1] = w.select(active, w.add(shifted, step), above);
                if let Some(keep) = keep.as_deref_mut() {
                    keep[i] = [w.select(active, cosine, one), w.select(active, sine, zero)];
                }
                p = w.select(active, step, p);
                g = w.select(active, w.sub(w.mul(cosine, t), b), g);
                s = w.select(active, sine, s);
                c = w.select(active, cosine, c);
                above = di;
            }
        }
        let (p, g) = (w.array(p), w.array(g));
        for lane in 0..LANES {
            let (l, m) = (from[lane], to[lane]);
            if l < end {
                d[l][lane] -= p[lane];
                e[l][lane] = g[lane];
                e[m][lane] = 0.0;
            }
        }
        if let Some((rotations, z)) = vectors.as_mut()
            && rotations.count == rotations.capacity
        {
            rotations.apply(w, n, z);
        }
    }
    if let Some((rotations, z)) = vectors.as_mut() {
        rotations.apply(w, n, z);
    }
    converged
}
