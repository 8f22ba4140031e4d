//! How good a solution is.

use pulp::Simd;

use super::dense::{Shape, product, transpose};
use crate::Lanes;
use crate::wide::Wide;

/// Largest |HC − SCε| and largest |C†SC − 1|, each taken over all elements.
#[derive(Copy, Clone, Debug, PartialEq, Default)]
pub struct Quality {
    /// Largest |HC − SCε|, in the unit of H.
    pub residual: f64,
    /// Largest |C†SC − 1|.
    pub orthonormality: f64,
}

/// Measures Cᵀ (rows are levels, padded to octets) against H (lost) and S, full and
/// padded.
#[inline(always)]
pub(super) fn measure<S: Simd, const K: usize>(
    w: Wide<S, K>,
    n: usize,
    q: usize,
    h: &mut [Lanes],
    [s, c]: [&[Lanes]; 2],
    values: &[f64],
    [hc, sc]: [&mut [Lanes]; 2],
) -> Quality {
    // Rows of Cᵀ H and Cᵀ S are (HC)ᵀ and (SC)ᵀ, as H and S are symmetric.
    product(w, n, q, c, h, Shape::Full, hc, q, 1);
    product(w, n, q, c, s, Shape::Full, sc, q, 1);
    let stride = 8 * q;
    let mut largest = w.splat(0.0);
    for (k, value) in values.iter().enumerate() {
        let value = w.splat(*value);
        for (x, y) in w
            .view(&hc[k * q..(k + 1) * q])
            .iter()
            .zip(w.view(&sc[k * q..]))
        {
            largest = w.larger(w.abs(w.mul_sub(*x, *y, value)), largest);
        }
    }
    let residual = w.array(largest).iter().fold(0.0, |a: f64, b| a.max(*b));
    // H is not needed any more: C takes its place.
    transpose(n, q, c, h);
    product(w, n, q, sc, h, Shape::LowerResult, hc, q, 1);
    let mut orthonormality = 0.0_f64;
    let flat = hc.as_flattened();
    for i in 0..n {
        let row = &flat[i * stride..i * stride + i + 1];
        for x in &row[..i] {
            orthonormality = orthonormality.max(x.abs());
        }
        orthonormality = orthonormality.max((row[i] - 1.0).abs());
    }
    Quality {
        residual,
        orthonormality,
    }
}
