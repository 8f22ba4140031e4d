//! Arithmetic on N geometries side by side, and an exponential with the same bits everywhere.
//!
//! Plain loops over arrays: the compiler turns them into SIMD inside a dispatched closure. No
//! fused multiply–add and a fixed operation order, so a lane's bits depend on nothing else.

/// Geometries handled at once by the lane kernels, on every machine.
pub const LANES: usize = 8;

/// One number for each of [`LANES`] geometries.
pub type Lanes = [f64; LANES];

/// `a · b`.
#[inline(always)]
pub(crate) fn mul<const N: usize>(a: &[f64; N], b: &[f64; N]) -> [f64; N] {
    let mut out = [0.0; N];
    for lane in 0..N {
        out[lane] = a[lane] * b[lane];
    }
    out
}

/// `factor · a`.
#[inline(always)]
pub(crate) fn scale<const N: usize>(factor: f64, a: &[f64; N]) -> [f64; N] {
    let mut out = [0.0; N];
    for lane in 0..N {
        out[lane] = factor * a[lane];
    }
    out
}

/// `sum += factor · a`.
#[inline(always)]
pub(crate) fn accumulate<const N: usize>(sum: &mut [f64; N], factor: f64, a: &[f64; N]) {
    for lane in 0..N {
        sum[lane] += factor * a[lane];
    }
}

/// The next `count` items of a list that is read front to back.
#[inline(always)]
pub(crate) fn next<'a, T>(rest: &mut &'a [T], count: u8) -> &'a [T] {
    let (now, later) = rest.split_at(usize::from(count).min(rest.len()));
    *rest = later;
    now
}

/// Taylor coefficients 1/k!, k = 2..=13.
const INVERSE_FACTORIALS: [f64; 12] = [
    1.0 / 2.0,
    1.0 / 6.0,
    1.0 / 24.0,
    1.0 / 120.0,
    1.0 / 720.0,
    1.0 / 5040.0,
    1.0 / 40_320.0,
    1.0 / 362_880.0,
    1.0 / 3_628_800.0,
    1.0 / 39_916_800.0,
    1.0 / 479_001_600.0,
    1.0 / 6_227_020_800.0,
];

/// e^x for x ≤ 0, relative error below 1.2e-16; 0 below −708.
///
/// Reduction to |r| ≤ ln 2 / 2 in two parts (Cody & Waite 1980), then the Taylor polynomial of
/// degree 13, whose remainder is 4e-18.
#[inline(always)]
pub(crate) fn exp_negative<const N: usize>(x: &[f64; N]) -> [f64; N] {
    const SHIFT: f64 = 6_755_399_441_055_744.0; // 1.5 · 2^52: the sum holds the nearest integer
    const LN2_HIGH: f64 = 6.931_471_803_691_238e-1;
    const LN2_LOW: f64 = 1.908_214_929_270_587_7e-10;
    let c = &INVERSE_FACTORIALS;
    let mut out = [0.0; N];
    for lane in 0..N {
        let argument = if x[lane] < -708.0 { -708.0 } else { x[lane] };
        let shifted = argument * core::f64::consts::LOG2_E + SHIFT;
        let power = shifted - SHIFT;
        let r = (argument - power * LN2_HIGH) - power * LN2_LOW;
        // Pairs of terms first (Estrin): a short chain of dependent operations.
        let r2 = r * r;
        let r4 = r2 * r2;
        let low = (c[0] + c[1] * r) + (c[2] + c[3] * r) * r2;
        let middle = (c[4] + c[5] * r) + (c[6] + c[7] * r) * r2;
        let high = (c[8] + c[9] * r) + (c[10] + c[11] * r) * r2;
        let tail = low + (middle + high * r4) * r4;
        let value = 1.0 + (r + r2 * tail);
        let two_to_power = f64::from_bits(shifted.to_bits().wrapping_add(1023) << 52);
        let result = value * two_to_power;
        out[lane] = if x[lane] < -708.0 { 0.0 } else { result };
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn exponential_agrees_with_libm_to_the_last_place() {
        let mut worst = 0.0_f64;
        for step in 0..200_000 {
            let x = -700.0 * f64::from(step) / 200_000.0;
            let reference = libm::exp(x);
            worst = worst.max((exp_negative(&[x])[0] / reference - 1.0).abs());
        }
        assert!(worst < 3.4e-16, "worst relative difference {worst:e}");
    }

    #[test]
    fn exponential_ends() {
        let y = exp_negative(&[0.0, -0.0, -709.0, -1e9]);
        assert_eq!(
            y.map(f64::to_bits),
            [1.0_f64, 1.0, 0.0, 0.0].map(f64::to_bits)
        );
    }

    #[test]
    fn lanes_do_not_see_each_other() {
        let x: Lanes = [-0.1, -20.0, -1000.0, 0.0, -3.3, -1e-9, -699.0, -7.0];
        let together = exp_negative(&x);
        for lane in 0..LANES {
            assert_eq!(
                together[lane].to_bits(),
                exp_negative(&[x[lane]])[0].to_bits()
            );
        }
    }
}
