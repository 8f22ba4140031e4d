//! Large problems, by the blocked kernels of the faer crate on one thread, so that the bytes do not
//! depend on the number of threads.

use core::mem::MaybeUninit;

use faer::diag::{Diag, DiagRef};
use faer::dyn_stack::{MemBuffer, MemStack, StackReq};
use faer::linalg::cholesky::llt::factor::{
    LltRegularization, cholesky_in_place, cholesky_in_place_scratch,
};
use faer::linalg::evd::{
    ComputeEigenvectors, self_adjoint_evd, self_adjoint_evd_scratch, tridiagonal_self_adjoint_evd,
};
use faer::linalg::householder::apply_block_householder_sequence_on_the_left_in_place_with_conj as reflect;
use faer::linalg::matmul::matmul;
use faer::linalg::qr::no_pivoting::factor::recommended_block_size;
use faer::linalg::triangular_solve::{
    solve_lower_triangular_in_place, solve_upper_triangular_in_place,
};
use faer::prelude::{Reborrow, ReborrowMut};
use faer::{Accum, Conj, Mat, MatMut, MatRef, Par};

use crate::SINGULAR_RATIO;
use crate::error::EigenError;
use crate::large_tridiagonal::TridiagonalRoom;
use crate::single::Quality;

/// Room for one large problem. Matrices are column-major; of symmetric ones the lower triangle counts.
#[derive(Clone, Debug)]
pub(crate) struct LargeRoom {
    n: usize,
    l: Vec<f64>,
    a: Vec<f64>,
    values: Diag<f64>,
    tridiagonal: TridiagonalRoom,
    /// Factors of blocks of reflections, block × (n − 1), column-major.
    factors: Vec<f64>,
    scratch: Vec<MaybeUninit<u8>>,
}

/// Why there is none.
pub(crate) enum LargeFailure {
    Singular,
    NotConverged,
}

/// Columns worked on together.
const BLOCK: usize = 64;

/// Copies the scaled lower triangle of the row-major `m`, block by block for the sake of the cache;
/// blocks on the diagonal become full.
fn load_lower(n: usize, m: &[f64], scale: f64, to: &mut [f64]) {
    for j0 in (0..n).step_by(BLOCK) {
        let j1 = (j0 + BLOCK).min(n);
        for i0 in (j0..n).step_by(BLOCK) {
            for i in i0..(i0 + BLOCK).min(n) {
                for j in j0..j1.min(i + 1) {
                    to[j * n + i] = scale * m[i * n + j];
                }
            }
        }
        for j in j0..j1 {
            for i in j0..j {
                to[j * n + i] = to[i * n + j];
            }
        }
    }
}

/// The symmetric matrix of which `m` has the lower triangle.
fn full(n: usize, m: &[f64]) -> Mat<f64> {
    Mat::from_fn(
        n,
        n,
        |i, j| if i >= j { m[i * n + j] } else { m[j * n + i] },
    )
}

/// A = L⁻¹ H L⁻ᵀ in place, lower triangle, by blocks of columns: first Y = H L⁻ᵀ, then L A = Y,
/// where A above the diagonal is the transpose of what is known.
fn reduce(n: usize, l: MatRef<'_, f64>, mut a: MatMut<'_, f64>) {
    let par = Par::Seq;
    for j0 in (0..n).step_by(BLOCK) {
        let width = BLOCK.min(n - j0);
        let (done, rest) = a.rb_mut().split_at_col_mut(j0);
        let done = done.rb().subrows(j0, n - j0);
        let mut panel = rest.submatrix_mut(j0, 0, n - j0, width);
        if j0 > 0 {
            let known = l.submatrix(j0, 0, width, j0).transpose();
            matmul(panel.rb_mut(), Accum::Add, done, known, -1.0, par);
        }
        let corner = l.submatrix(j0, j0, width, width);
        solve_lower_triangular_in_place(corner, panel.transpose_mut(), par);
    }
    for j0 in (0..n).step_by(BLOCK) {
        let width = BLOCK.min(n - j0);
        let (done, rest) = a.rb_mut().split_at_col_mut(j0);
        let mut panel = rest.submatrix_mut(j0, 0, n - j0, width);
        if j0 > 0 {
            let above = done.rb().subrows(j0, width).transpose();
            let left = l.submatrix(j0, 0, n - j0, j0);
            matmul(panel.rb_mut(), Accum::Add, left, above, -1.0, par);
        }
        let corner = l.submatrix(j0, j0, n - j0, n - j0);
        solve_lower_triangular_in_place(corner, panel, par);
    }
}

impl LargeRoom {
    pub(crate) fn new(n: usize) -> Self {
        let par = Par::Seq;
        let bytes = StackReq::any_of(&[
            cholesky_in_place_scratch::<f64>(n, par, Default::default()),
            self_adjoint_evd_scratch::<f64>(n, ComputeEigenvectors::Yes, par, Default::default()),
        ])
        .unaligned_bytes_required();
        LargeRoom {
            n,
            l: vec![0.0; n * n],
            a: vec![0.0; n * n],
            values: Diag::zeros(n),
            tridiagonal: TridiagonalRoom::new(n),
            factors: vec![0.0; recommended_block_size::<f64>(n, n) * n.saturating_sub(1)],
            scratch: vec![MaybeUninit::uninit(); bytes],
        }
    }

    /// Eigenvalues of the scaled problem in the last solve, ascending.
    pub(crate) fn values(&self) -> impl Iterator<Item = f64> + '_ {
        self.values.column_vector().iter().copied()
    }

    /// Cholesky, reduction, divide and conquer, back-substitution. Level k of the scaled problem
    /// goes to row k of `vectors`; returns the smallest eigenvalue of the scaled S if asked for.
    pub(crate) fn solve(
        &mut self,
        (h, h_scale): (&[f64], f64),
        (s, s_scale): (&[f64], f64),
        want_smallest: bool,
        vectors: &mut [f64],
    ) -> Result<Option<f64>, LargeFailure> {
        let n = self.n;
        let par = Par::Seq;
        load_lower(n, s, s_scale, &mut self.l);
        let trace = (0..n).map(|i| self.l[i * n + i]).sum::<f64>();
        let diagonal: Vec<f64> = (0..n).map(|i| self.l[i * n + i]).collect();
        cholesky_in_place(
            MatMut::from_column_major_slice_mut(&mut self.l, n, n),
            LltRegularization::default(),
            par,
            MemStack::new(&mut self.scratch),
            Default::default(),
        )
        .map_err(|_| LargeFailure::Singular)?;
        let pivot = |i: usize| self.l[i * n + i] * self.l[i * n + i];
        if (0..n).any(|i| !(pivot(i) > SINGULAR_RATIO * diagonal[i])) {
            return Err(LargeFailure::Singular);
        }
        let l = MatRef::from_column_major_slice(&self.l, n, n);
        let smallest = if want_smallest {
            let smallest = smallest_by_lanczos(l)?;
            // The largest eigenvalue lies between the mean and the sum of all.
            if smallest <= SINGULAR_RATIO * trace / n as f64 {
                return Err(LargeFailure::Singular);
            }
            Some(smallest)
        } else {
            None
        };
        load_lower(n, h, h_scale, &mut self.a);
        reduce(n, l, MatMut::from_column_major_slice_mut(&mut self.a, n, n));
        let mut vectors = MatMut::from_column_major_slice_mut(vectors, n, n);
        let reflections = n.saturating_sub(1);
        let block = recommended_block_size::<f64>(n, n);
        let factors = MatMut::from_column_major_slice_mut(&mut self.factors, block, reflections);
        self.tridiagonal.reduce(n, &mut self.a, factors);
        tridiagonal_self_adjoint_evd(
            DiagRef::from_slice(&self.tridiagonal.diagonal),
            DiagRef::from_slice(&self.tridiagonal.below),
            self.values.as_mut(),
            Some(vectors.rb_mut()),
            par,
            MemStack::new(&mut self.scratch),
            Default::default(),
        )
        .map_err(|_| LargeFailure::NotConverged)?;
        reflect(
            MatRef::from_column_major_slice(&self.a, n, n).submatrix(
                1,
                0,
                reflections,
                reflections,
            ),
            MatRef::from_column_major_slice(&self.factors, block, reflections),
            Conj::No,
            vectors.rb_mut().subrows_mut(1, reflections),
            par,
            MemStack::new(&mut self.scratch),
        );
        solve_upper_triangular_in_place(l.transpose(), vectors, par);
        Ok(smallest)
    }
}

/// Eigenvalues, ascending, and eigenvectors of a symmetric matrix.
fn decompose(a: MatRef<'_, f64>) -> Result<(Vec<f64>, Mat<f64>), LargeFailure> {
    let n = a.nrows();
    let par = Par::Seq;
    let mut values = Diag::<f64>::zeros(n);
    let mut vectors = Mat::<f64>::zeros(n, n);
    let mut room = MemBuffer::new(self_adjoint_evd_scratch::<f64>(
        n,
        ComputeEigenvectors::Yes,
        par,
        Default::default(),
    ));
    self_adjoint_evd(
        a,
        values.as_mut(),
        Some(vectors.as_mut()),
        par,
        MemStack::new(&mut room),
        Default::default(),
    )
    .map_err(|_| LargeFailure::NotConverged)?;
    Ok((values.column_vector().iter().copied().collect(), vectors))
}

/// The lowest eigenvalue of S and its eigenvector.
fn lowest_of(n: usize, s: &[f64]) -> Result<(f64, Vec<f64>), LargeFailure> {
    let (values, vectors) = decompose(full(n, s).as_ref())?;
    Ok((values[0], vectors.col(0).iter().copied().collect()))
}

/// Steps after which the Lanczos iteration is looked at.
const LANCZOS_STEPS: usize = 12;
/// Most steps.
const MOST_LANCZOS_STEPS: usize = 120;

/// The smallest eigenvalue of S = L Lᵀ as the inverse of the largest of S⁻¹ (Lanczos with full
/// orthogonalisation, from a fixed start; Ericsson & Ruhe, Math. Comput. 35, 1251 (1980)). Relative
/// accuracy 1e-10 or better.
fn smallest_by_lanczos(l: MatRef<'_, f64>) -> Result<f64, LargeFailure> {
    let n = l.nrows();
    let dot = |a: &[f64], b: &[f64]| a.iter().zip(b).map(|(x, y)| x * y).sum::<f64>();
    let mut state = 1u64;
    let mut next: Vec<f64> = (0..n)
        .map(|_| {
            // Knuth's MMIX congruence: a start without any symmetry.
            state = state
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1_442_695_040_888_963_407);
            (state >> 11) as f64 / (1u64 << 53) as f64 - 0.5
        })
        .collect();
    let mut basis: Vec<Vec<f64>> = Vec::new();
    let (mut alpha, mut beta) = (Vec::new(), Vec::new());
    let mut estimate = 0.0;
    for step in 0..MOST_LANCZOS_STEPS.min(n) {
        let norm = dot(&next, &next).sqrt();
        next.iter_mut().for_each(|x| *x /= norm);
        let mut image = Mat::from_fn(n, 1, |i, _| next[i]);
        solve_lower_triangular_in_place(l, image.as_mut(), Par::Seq);
        solve_upper_triangular_in_place(l.transpose(), image.as_mut(), Par::Seq);
        let mut image: Vec<f64> = image.col(0).iter().copied().collect();
        alpha.push(dot(&next, &image));
        basis.push(core::mem::take(&mut next));
        for _ in 0..2 {
            for old in &basis {
                let part = dot(old, &image);
                image.iter_mut().zip(old).for_each(|(x, y)| *x -= part * y);
            }
        }
        let rest = dot(&image, &image).sqrt();
        beta.push(rest);
        next = image;
        let k = alpha.len();
        let last = step + 1 == MOST_LANCZOS_STEPS.min(n) || rest <= 1e-14 * estimate;
        if k.is_multiple_of(LANCZOS_STEPS) || last {
            let small = Mat::from_fn(k, k, |i, j| match i.abs_diff(j) {
                0 => alpha[i],
                1 => beta[i.min(j)],
                _ => 0.0,
            });
            let (values, vectors) = decompose(small.as_ref())?;
            estimate = values[k - 1];
            if last || rest * vectors[(k - 1, k - 1)].abs() <= 1e-8 * estimate {
                break;
            }
        }
    }
    Ok(1.0 / estimate)
}

/// Largest |HC − SCε| and |C†SC − 1|; `vectors` has level k in row k.
pub(crate) fn measure_large(
    n: usize,
    h: &[f64],
    s: &[f64],
    values: &[f64],
    vectors: &[f64],
) -> Quality {
    let c = MatRef::from_row_major_slice(vectors, n, n).transpose();
    let (h, s) = (full(n, h), full(n, s));
    let mut hc = Mat::<f64>::zeros(n, n);
    let mut sc = Mat::<f64>::zeros(n, n);
    matmul(hc.as_mut(), Accum::Replace, h.as_ref(), c, 1.0, Par::Seq);
    matmul(sc.as_mut(), Accum::Replace, s.as_ref(), c, 1.0, Par::Seq);
    let mut quality = Quality::default();
    for k in 0..n {
        for i in 0..n {
            quality.residual = quality
                .residual
                .max((hc[(i, k)] - sc[(i, k)] * values[k]).abs());
        }
    }
    matmul(
        hc.as_mut(),
        Accum::Replace,
        c.transpose(),
        sc.as_ref(),
        1.0,
        Par::Seq,
    );
    for k in 0..n {
        for i in 0..n {
            let expected = if i == k { 1.0 } else { 0.0 };
            quality.orthonormality = quality.orthonormality.max((hc[(i, k)] - expected).abs());
        }
    }
    quality
}

impl LargeFailure {
    /// The error for the caller, with what makes S singular.
    #[cold]
    pub(crate) fn explain(self, n: usize, s: &[f64]) -> EigenError {
        match self {
            LargeFailure::NotConverged => EigenError::NotConverged,
            LargeFailure::Singular => match lowest_of(n, s) {
                Ok((eigenvalue, vector)) => EigenError::Singular {
                    eigenvalue,
                    weights: vector.iter().map(|x| x * x).collect(),
                },
                Err(_) => EigenError::NotConverged,
            },
        }
    }
}
