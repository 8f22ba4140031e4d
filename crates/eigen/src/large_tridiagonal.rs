//! A large symmetric matrix to tridiagonal form by panels of reflections.
//!
//! Half of the work is one product of the matrix with a vector per column, which the memory bounds:
//! here the lower triangle is only read for it, and changed once per panel by a product of matrices
//! (Dongarra, Sorensen & Hammarling, J. Comput. Appl. Math. 27, 215 (1989)).

use faer::linalg::householder::{make_householder_in_place, upgrade_householder_factor};
use faer::linalg::matmul::triangular::{BlockStructure, matmul};
use faer::prelude::{Reborrow, ReborrowMut};
use faer::{Accum, ColMut, MatMut, MatRef, Par};

/// Columns of a panel.
const PANEL: usize = 32;
/// Numbers in an accumulator, the same on every machine.
const WIDE: usize = 8;
/// Columns that are read together.
const TOGETHER: usize = 4;

/// Room for one reduction.
#[derive(Clone, Debug)]
pub(crate) struct TridiagonalRoom {
    /// Diagonal and, in the first n − 1 places, what stands below it.
    pub(crate) diagonal: Vec<f64>,
    pub(crate) below: Vec<f64>,
    /// n × PANEL, column-major: the second vectors of the updates.
    seconds: Vec<f64>,
    vector: Vec<f64>,
    image: Vec<f64>,
}

impl TridiagonalRoom {
    pub(crate) fn new(n: usize) -> Self {
        Self {
            diagonal: vec![0.0; n],
            below: vec![0.0; n],
            seconds: vec![0.0; n * PANEL],
            vector: vec![0.0; n],
            image: vec![0.0; n],
        }
    }

    /// Reduces the lower triangle of the column-major `a`. Reflection k is 1 − v vᵀ/τ with v in
    /// column k below the diagonal; the blocked factors of all of them go to `factors`
    /// (block × (n − 1)).
    pub(crate) fn reduce(&mut self, n: usize, a: &mut [f64], mut factors: MatMut<'_, f64>) {
        for first in (0..n.saturating_sub(1)).step_by(PANEL) {
            let width = PANEL.min(n - 1 - first);
            for place in 0..width {
                self.column(n, a, (first, place), &mut factors);
            }
            update(n, a, &self.seconds, (first, width));
        }
        if let Some(last) = n.checked_sub(1) {
            self.diagonal[last] = a[last * n + last];
            self.below[last] = 0.0;
        }
        blocked_factors(n, a, factors);
    }

    /// One reflection: column `first + place` is brought up to date, reflected, and the second
    /// vector of its update is made from the matrix as it was at the start of the panel.
    fn column(
        &mut self,
        n: usize,
        a: &mut [f64],
        (first, place): (usize, usize),
        factors: &mut MatMut<'_, f64>,
    ) {
        let c = first + place;
        let (before, rest) = a.split_at_mut(c * n);
        let known = |k: usize| &before[(first + k) * n..(first + k + 1) * n];
        let second = |k: usize| &self.seconds[k * n..(k + 1) * n];
        let (column, after) = rest.split_at_mut(n);
        let column = &mut column[c..];
        for k in 0..place {
            let (v, w) = (&known(k)[c..], &second(k)[c..]);
            subtract_two(column, (v, w[0]), (w, v[0]));
        }
        self.diagonal[c] = column[0];
        let (head, tail) = column[1..].split_at_mut(1);
        let made = make_householder_in_place(&mut head[0], ColMut::from_slice_mut(tail));
        self.below[c] = head[0];
        head[0] = 1.0;
        factors[(0, c)] = made.tau;
        let scale = made.tau.recip();

        let rows = n - c - 1;
        let v = &mut self.vector[..rows];
        v.copy_from_slice(&column[1..]);
        let y = &mut self.image[..rows];
        symmetric_product(n, after, c + 1, v, y);
        for k in 0..place {
            let (p, q) = (&known(k)[c + 1..], &second(k)[c + 1..]);
            let (along_p, along_q) = two_products(p, q, v);
            subtract_two(y, (p, along_q), (q, along_p));
        }
        y.iter_mut().for_each(|y| *y *= scale);
        let (along, _) = two_products(y, y, v);
        let half = 0.5 * scale * along;
        y.iter_mut().zip(&*v).for_each(|(y, v)| *y -= half * v);
        self.seconds[place * n + c + 1..(place + 1) * n].copy_from_slice(y);
    }
}

/// The rest of the matrix after a panel: A − V Wᵀ − W Vᵀ, lower triangle.
fn update(n: usize, a: &mut [f64], seconds: &[f64], (first, width): (usize, usize)) {
    let from = first + width;
    let rows = n - from;
    let all = MatMut::from_column_major_slice_mut(a, n, n);
    let (left, right) = all.split_at_col_mut(from);
    let v = left.rb().submatrix(from, first, rows, width);
    let w = MatRef::from_column_major_slice(&seconds[..n * width], n, width);
    let w = w.subrows(from, rows);
    let mut rest = right.subrows_mut(from, rows);
    for (x, y) in [(v, w), (w, v)] {
        matmul(
            rest.rb_mut(),
            BlockStructure::TriangularLower,
            Accum::Add,
            x,
            BlockStructure::Rectangular,
            y.transpose(),
            BlockStructure::Rectangular,
            -1.0,
            Par::Seq,
        );
    }
}

/// From the τ in the first row to factors of blocks of reflections.
fn blocked_factors(n: usize, a: &[f64], mut factors: MatMut<'_, f64>) {
    let reflections = n.saturating_sub(1);
    let block = factors.nrows();
    let basis = MatRef::from_column_major_slice(a, n, n).submatrix(1, 0, reflections, reflections);
    for j in (0..reflections).step_by(block.max(1)) {
        let width = block.min(reflections - j);
        let mut corner = factors.rb_mut().submatrix_mut(0, j, width, width);
        for k in 0..width {
            corner[(k, k)] = corner[(0, k)];
        }
        let essentials = basis.submatrix(j, j, reflections - j, width);
        upgrade_householder_factor(corner, essentials, width, 1, Par::Seq);
    }
}

/// y = A v for the symmetric matrix of which the columns in `a` (n apart; the first begins at row
/// `from`, with `v.len()` rows) have the lower triangle.
fn symmetric_product(n: usize, a: &[f64], from: usize, v: &[f64], y: &mut [f64]) {
    pulp::Arch::new().dispatch(
        #[inline(always)]
        || {
            let rows = v.len();
            y.fill(0.0);
            let whole = rows - rows % TOGETHER;
            for j in (0..whole).step_by(TOGETHER) {
                let columns: [&[f64]; TOGETHER] =
                    core::array::from_fn(|k| &a[(j + k) * n + from..(j + k) * n + n]);
                // The corner on the diagonal, then what is below it.
                for k in 0..TOGETHER {
                    y[j + k] += columns[k][j + k] * v[j + k];
                    for i in k + 1..TOGETHER {
                        y[j + i] += columns[k][j + i] * v[j + k];
                        y[j + k] += columns[k][j + i] * v[j + i];
                    }
                }
                let below = j + TOGETHER;
                let factors: [f64; TOGETHER] = core::array::from_fn(|k| v[j + k]);
                let sums = both_ways(
                    columns.map(|column| &column[below..]),
                    factors,
                    &v[below..],
                    &mut y[below..],
                );
                for k in 0..TOGETHER {
                    y[j + k] += sums[k];
                }
            }
            for j in whole..rows {
                let column = &a[j * n + from..j * n + n];
                y[j] += column[j] * v[j];
                for i in j + 1..rows {
                    y[i] += column[i] * v[j];
                    y[j] += column[i] * v[i];
                }
            }
        },
    );
}

/// y += Σ factor × column, and the product of each column with v.
#[inline(always)]
fn both_ways(
    columns: [&[f64]; TOGETHER],
    factors: [f64; TOGETHER],
    v: &[f64],
    y: &mut [f64],
) -> [f64; TOGETHER] {
    let (y, y_rest) = y.as_chunks_mut::<WIDE>();
    let (v, v_rest) = v.as_chunks::<WIDE>();
    let parts = columns.map(|column| column.as_chunks::<WIDE>());
    let [c0, c1, c2, c3] = parts.map(|part| part.0);
    let mut sums = [[0.0; WIDE]; TOGETHER];
    let eights = y.iter_mut().zip(v).zip(c0).zip(c1).zip(c2).zip(c3);
    for (((((y, v), c0), c1), c2), c3) in eights {
        for l in 0..WIDE {
            sums[0][l] += c0[l] * v[l];
            sums[1][l] += c1[l] * v[l];
            sums[2][l] += c2[l] * v[l];
            sums[3][l] += c3[l] * v[l];
            y[l] += (c0[l] * factors[0] + c1[l] * factors[1])
                + (c2[l] * factors[2] + c3[l] * factors[3]);
        }
    }
    let mut out = sums.map(total);
    for (i, (y, v)) in y_rest.iter_mut().zip(v_rest).enumerate() {
        for k in 0..TOGETHER {
            let x = parts[k].1[i];
            out[k] += x * v;
            *y += x * factors[k];
        }
    }
    out
}

fn total(x: [f64; WIDE]) -> f64 {
    ((x[0] + x[4]) + (x[2] + x[6])) + ((x[1] + x[5]) + (x[3] + x[7]))
}

/// y − a·p − b·q.
fn subtract_two(y: &mut [f64], (p, a): (&[f64], f64), (q, b): (&[f64], f64)) {
    pulp::Arch::new().dispatch(
        #[inline(always)]
        || {
            for ((y, p), q) in y.iter_mut().zip(p).zip(q) {
                *y -= a * p + b * q;
            }
        },
    );
}

/// p·v and q·v.
fn two_products(p: &[f64], q: &[f64], v: &[f64]) -> (f64, f64) {
    pulp::Arch::new().dispatch(
        #[inline(always)]
        || {
            let (p, p_rest) = p.as_chunks::<WIDE>();
            let (q, q_rest) = q.as_chunks::<WIDE>();
            let (v, v_rest) = v.as_chunks::<WIDE>();
            let mut sums = [[0.0; WIDE]; 2];
            for ((p, q), v) in p.iter().zip(q).zip(v) {
                for l in 0..WIDE {
                    sums[0][l] += p[l] * v[l];
                    sums[1][l] += q[l] * v[l];
                }
            }
            let [mut a, mut b] = sums.map(total);
            for ((p, q), v) in p_rest.iter().zip(q_rest).zip(v_rest) {
                a += p * v;
                b += q * v;
            }
            (a, b)
        },
    )
}
