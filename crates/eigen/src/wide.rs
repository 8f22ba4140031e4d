//! Eight numbers at a time, whatever the width of the machine's registers.
//!
//! An [`Oct`] is always eight numbers: one register of eight, two of four, four of two or eight
//! scalars. Every operation acts on each of the eight alone and in the same order, so results do
//! not depend on the width. Multiply and add stay two operations: a fused one would change bits.

use pulp::Simd;

/// Eight numbers, held in `K` registers.
pub(crate) type Oct<S, const K: usize> = [<S as Simd>::f64s; K];
/// Eight truth values.
pub(crate) type Mask<S, const K: usize> = [<S as Simd>::m64s; K];

/// The operations on octets.
#[derive(Copy, Clone)]
pub(crate) struct Wide<S: Simd, const K: usize>(pub(crate) S);

macro_rules! binary {
    ($($name:ident => $simd:ident),*) => {$(
        #[inline(always)]
        pub(crate) fn $name(self, a: Oct<S, K>, b: Oct<S, K>) -> Oct<S, K> {
            let mut out = a;
            for k in 0..K {
                out[k] = self.0.$simd(a[k], b[k]);
            }
            out
        }
    )*};
}

impl<S: Simd, const K: usize> Wide<S, K> {
    binary!(add => add_f64s, sub => sub_f64s, mul => mul_f64s, div => div_f64s);

    /// The same number eight times.
    #[inline(always)]
    pub(crate) fn splat(self, x: f64) -> Oct<S, K> {
        [self.0.splat_f64s(x); K]
    }

    /// acc + a·b, rounded twice.
    #[inline(always)]
    pub(crate) fn mul_add(self, acc: Oct<S, K>, a: Oct<S, K>, b: Oct<S, K>) -> Oct<S, K> {
        self.add(acc, self.mul(a, b))
    }

    /// acc − a·b, rounded twice.
    #[inline(always)]
    pub(crate) fn mul_sub(self, acc: Oct<S, K>, a: Oct<S, K>, b: Oct<S, K>) -> Oct<S, K> {
        self.sub(acc, self.mul(a, b))
    }

    #[inline(always)]
    pub(crate) fn sqrt(self, a: Oct<S, K>) -> Oct<S, K> {
        let mut out = a;
        for k in 0..K {
            out[k] = self.0.sqrt_f64s(a[k]);
        }
        out
    }

    #[inline(always)]
    pub(crate) fn abs(self, a: Oct<S, K>) -> Oct<S, K> {
        let mut out = a;
        for k in 0..K {
            out[k] = self.0.abs_f64s(a[k]);
        }
        out
    }

    #[inline(always)]
    pub(crate) fn neg(self, a: Oct<S, K>) -> Oct<S, K> {
        let mut out = a;
        for k in 0..K {
            out[k] = self.0.neg_f64s(a[k]);
        }
        out
    }

    /// a < b.
    #[inline(always)]
    pub(crate) fn less(self, a: Oct<S, K>, b: Oct<S, K>) -> Mask<S, K> {
        let mut out = [self.0.less_than_f64s(a[0], b[0]); K];
        for k in 1..K {
            out[k] = self.0.less_than_f64s(a[k], b[k]);
        }
        out
    }

    /// a ≤ b.
    #[inline(always)]
    pub(crate) fn at_most(self, a: Oct<S, K>, b: Oct<S, K>) -> Mask<S, K> {
        let mut out = [self.0.less_than_or_equal_f64s(a[0], b[0]); K];
        for k in 1..K {
            out[k] = self.0.less_than_or_equal_f64s(a[k], b[k]);
        }
        out
    }

    #[inline(always)]
    pub(crate) fn both(self, a: Mask<S, K>, b: Mask<S, K>) -> Mask<S, K> {
        let mut out = a;
        for k in 0..K {
            out[k] = self.0.and_m64s(a[k], b[k]);
        }
        out
    }

    /// `yes` where the mask holds, `no` elsewhere.
    #[inline(always)]
    pub(crate) fn select(self, mask: Mask<S, K>, yes: Oct<S, K>, no: Oct<S, K>) -> Oct<S, K> {
        let mut out = yes;
        for k in 0..K {
            out[k] = self.0.select_f64s(mask[k], yes[k], no[k]);
        }
        out
    }

    /// The larger; `b` where the comparison fails.
    #[inline(always)]
    pub(crate) fn larger(self, a: Oct<S, K>, b: Oct<S, K>) -> Oct<S, K> {
        self.select(self.less(b, a), a, b)
    }

    /// Sum of the eight, always in the same tree order.
    #[inline(always)]
    pub(crate) fn sum(self, a: Oct<S, K>) -> f64 {
        let x: [f64; 8] = self.array(a);
        ((x[0] + x[4]) + (x[2] + x[6])) + ((x[1] + x[5]) + (x[3] + x[7]))
    }

    /// The eight numbers.
    #[inline(always)]
    pub(crate) fn array(self, a: Oct<S, K>) -> [f64; 8] {
        let mut out = [0.0; 8];
        self.view_mut(core::slice::from_mut(&mut out))[0] = a;
        out
    }

    /// An array as an octet.
    #[inline(always)]
    pub(crate) fn pack(self, a: &[f64; 8]) -> Oct<S, K> {
        self.view(core::slice::from_ref(a))[0]
    }

    /// Arrays seen as octets.
    #[inline(always)]
    pub(crate) fn view(self, a: &[[f64; 8]]) -> &[Oct<S, K>] {
        S::as_simd_f64s(a.as_flattened()).0.as_chunks::<K>().0
    }

    /// Arrays seen as octets, to write.
    #[inline(always)]
    pub(crate) fn view_mut(self, a: &mut [[f64; 8]]) -> &mut [Oct<S, K>] {
        S::as_mut_simd_f64s(a.as_flattened_mut())
            .0
            .as_chunks_mut::<K>()
            .0
    }
}

/// A piece of work on octets; [`run`] gives it the machine's registers.
pub(crate) trait OctWork {
    /// What it returns.
    type Output;
    /// Does the work. Must be `#[inline(always)]`.
    fn work<S: Simd, const K: usize>(self, wide: Wide<S, K>) -> Self::Output;
}

struct Run<W>(W);

impl<W: OctWork> pulp::WithSimd for Run<W> {
    type Output = W::Output;

    #[inline(always)]
    fn with_simd<S: Simd>(self, simd: S) -> W::Output {
        match S::F64_LANES {
            8 => self.0.work(Wide::<S, 1>(simd)),
            4 => self.0.work(Wide::<S, 2>(simd)),
            2 => self.0.work(Wide::<S, 4>(simd)),
            _ => self.0.work(Wide::<S, 8>(simd)),
        }
    }
}

/// Runs `work` with the widest registers that the machine has.
#[inline]
pub(crate) fn run<W: OctWork>(arch: pulp::Arch, work: W) -> W::Output {
    arch.dispatch(Run(work))
}
