//! The room in which one problem is solved.

use pulp::Simd;

use super::chain::{implicit_ql, rotation_room};
use super::check::{Quality, measure};
use super::dense::{Shape, cholesky, invert, load, mirror, product, transpose};
use super::smallest::smallest_eigenvalue;
use super::tridiagonal::{form_q_transposed, tridiagonalise};
use crate::canonical::fix_sign;
use crate::error::EigenError;
use crate::lanes::assemble::power_of_two_scale;
use crate::large::{LargeRoom, measure_large};
use crate::wide::{OctWork, Wide, run};
use crate::{LARGE, Lanes, SINGULAR_RATIO};

/// Levels of one problem.
#[derive(Clone, Debug, PartialEq)]
pub struct Solution {
    /// Eigenvalues, ascending, in the unit of H.
    pub values: Vec<f64>,
    /// Element k·n + i is the coefficient of function i in level k; C†SC = 1.
    pub vectors: Vec<f64>,
    /// Smallest eigenvalue of S.
    pub smallest_overlap_eigenvalue: f64,
    /// Largest |HC − SCε|, in the unit of H.
    pub residual: f64,
    /// Largest |C†SC − 1|.
    pub orthonormality: f64,
}

/// Solves H C = S C ε for symmetric `h` and positive-definite `s` (n × n, row-major; only
/// elements with row ≥ column are read) and checks the solution.
///
/// Signs follow [`fix_sign`]. The result does not depend on the machine's register width for
/// n below [`LARGE`](crate::LARGE), nor on the number of threads for any n.
///
/// # Errors
/// Wrong sizes, elements that are not finite, S nearly singular
/// ([`SINGULAR_RATIO`](crate::SINGULAR_RATIO)), no convergence, a solution that fails its check.
pub fn solve(n: usize, h: &[f64], s: &[f64]) -> Result<Solution, EigenError> {
    let mut room = Workspace::new(n);
    solve_into(&mut room, h, s)?;
    let quality = room.check(h, s)?;
    Ok(Solution {
        smallest_overlap_eigenvalue: room.smallest_overlap_eigenvalue(),
        residual: quality.residual,
        orthonormality: quality.orthonormality,
        values: room.values,
        vectors: room.vectors,
    })
}

/// Solves in `room` without allocating: the same as [`Workspace::solve`].
///
/// # Errors
/// As [`solve`], but the solution is not checked: [`Workspace::check`] does that.
pub fn solve_into(room: &mut Workspace, h: &[f64], s: &[f64]) -> Result<(), EigenError> {
    room.solve(h, s)
}

/// Room for one problem of a given size, to be used again and again.
#[derive(Clone, Debug)]
pub struct Workspace {
    n: usize,
    q: usize,
    arch: pulp::Arch,
    /// Five n × n matrices in padded octets.
    squares: [Vec<Lanes>; 5],
    rotations: Vec<[f64; 2]>,
    inverse: Vec<f64>,
    d: Vec<f64>,
    e: Vec<f64>,
    factors: Vec<f64>,
    room: Vec<Lanes>,
    large: Option<Box<LargeRoom>>,
    order: Vec<usize>,
    want_smallest: bool,
    smallest: f64,
    values: Vec<f64>,
    vectors: Vec<f64>,
}

impl Workspace {
    /// Room for problems of `n` functions.
    pub fn new(n: usize) -> Self {
        let q = n.div_ceil(8);
        let large = n >= LARGE;
        let octets = if large { 0 } else { n * q };
        let rotations = if large { 0 } else { rotation_room(n) };
        Workspace {
            n,
            q,
            arch: pulp::Arch::new(),
            squares: core::array::from_fn(|_| vec![[0.0; 8]; octets]),
            rotations: vec![[0.0; 2]; rotations],
            inverse: vec![0.0; n],
            d: vec![0.0; n],
            e: vec![0.0; n],
            factors: vec![0.0; n],
            room: vec![[0.0; 8]; 3 * q],
            large: None,
            order: vec![0; n],
            want_smallest: true,
            smallest: 0.0,
            values: vec![0.0; n],
            vectors: vec![0.0; n * n],
        }
    }

    /// Number of functions.
    pub fn size(&self) -> usize {
        self.n
    }

    /// Eigenvalues of the last solve, ascending.
    pub fn values(&self) -> &[f64] {
        &self.values
    }

    /// Eigenvectors of the last solve: element k·n + i is the coefficient of function i in level k.
    pub fn vectors(&self) -> &[f64] {
        &self.vectors
    }

    /// Whether to find the smallest eigenvalue of S (the default). Without it a solve is up to a
    /// quarter faster, and S is refused by the pivots of its Cholesky factor alone.
    pub fn set_smallest_overlap(&mut self, wanted: bool) {
        self.want_smallest = wanted;
    }

    /// Smallest eigenvalue of S in the last solve; 0 when it was not wanted.
    pub fn smallest_overlap_eigenvalue(&self) -> f64 {
        self.smallest
    }

    /// Solves H C = S C ε, see [`solve`](crate::solve).
    ///
    /// # Errors
    /// As [`solve`](crate::solve), but the solution is not checked.
    pub fn solve(&mut self, h: &[f64], s: &[f64]) -> Result<(), EigenError> {
        let n = self.n;
        check_input(n, h, s)?;
        if n == 0 {
            return Ok(());
        }
        let scale = |m: &[f64], even| {
            let mut size = 0.0_f64;
            for i in 0..n {
                size = m[i * n..i * n + i + 1]
                    .iter()
                    .fold(size, |a, x| a.max(x.abs()));
            }
            power_of_two_scale(size, even)
        };
        let (h_scale, s_scale) = (scale(h, false), scale(s, true));
        if n >= LARGE {
            return self.solve_large((h, h_scale), (s, s_scale));
        }
        load(n, self.q, h, h_scale, &mut self.squares[0]);
        load(n, self.q, s, s_scale, &mut self.squares[1]);
        let want_smallest = self.want_smallest;
        let outcome = run(
            self.arch,
            Solve {
                room: self,
                h_scale,
                s_scale,
                want_smallest,
            },
        );
        match outcome {
            Outcome::Solved => Ok(()),
            Outcome::NotConverged => Err(EigenError::NotConverged),
            Outcome::Singular => Err(self.describe_singular(s, s_scale)),
        }
    }

    fn solve_large(&mut self, h: (&[f64], f64), s: (&[f64], f64)) -> Result<(), EigenError> {
        let n = self.n;
        let room = self
            .large
            .get_or_insert_with(|| Box::new(LargeRoom::new(n)));
        let smallest = room
            .solve(h, s, self.want_smallest, &mut self.vectors)
            .map_err(|failure| failure.explain(n, s.0))?;
        self.smallest = smallest.unwrap_or(0.0) / s.1;
        let (value_scale, vector_scale) = (s.1 / h.1, s.1.sqrt());
        for (to, from) in self.values.iter_mut().zip(room.values()) {
            *to = from * value_scale + 0.0;
        }
        for vector in self.vectors.chunks_exact_mut(n) {
            for x in vector.iter_mut() {
                *x *= vector_scale;
            }
            fix_sign(vector);
        }
        Ok(())
    }

    /// Measures the last solution against the matrices it came from.
    ///
    /// # Errors
    /// Wrong sizes; [`EigenError::Inaccurate`] when an error is far above rounding.
    pub fn check(&mut self, h: &[f64], s: &[f64]) -> Result<Quality, EigenError> {
        let n = self.n;
        check_input(n, h, s)?;
        if n == 0 {
            return Ok(Quality::default());
        }
        let quality = if n >= LARGE {
            measure_large(n, h, s, &self.values, &self.vectors)
        } else {
            self.measure(h, s)
        };
        // Rounding grows with n, with the size of the coefficients and of what they multiply.
        let largest = |m: &[f64]| m.iter().fold(0.0_f64, |a, x| a.max(x.abs()));
        let (h_size, s_size) = (largest(h), largest(s));
        let c_size = largest(&self.vectors);
        let energy = largest(&self.values);
        let rounding = 1e-14 * n as f64;
        let worst_residual =
            rounding * c_size * (h_size + energy * s_size) * (1.0 + c_size * s_size.sqrt());
        let worst_orthonormality = rounding * (1.0 + c_size * c_size * s_size);
        if quality.residual <= worst_residual && quality.orthonormality <= worst_orthonormality {
            Ok(quality)
        } else {
            Err(EigenError::Inaccurate {
                residual: quality.residual,
                orthonormality: quality.orthonormality,
            })
        }
    }

    fn measure(&mut self, h: &[f64], s: &[f64]) -> Quality {
        let (n, q) = (self.n, self.q);
        load(n, q, h, 1.0, &mut self.squares[0]);
        load(n, q, s, 1.0, &mut self.squares[1]);
        let stride = 8 * q;
        let c = self.squares[2].as_flattened_mut();
        c.fill(0.0);
        for (row, vector) in c.chunks_exact_mut(stride).zip(self.vectors.chunks_exact(n)) {
            row[..n].copy_from_slice(vector);
        }
        run(self.arch, Measure { room: self })
    }

    /// The eigenvector that makes S singular. Slow, for the message only.
    #[cold]
    fn describe_singular(&mut self, s: &[f64], s_scale: f64) -> EigenError {
        let (n, q) = (self.n, self.q);
        let stride = 8 * q;
        load(n, q, s, s_scale, &mut self.squares[0]);
        // S in the place of H, and the unit matrix in the place of S.
        let unit = self.squares[1].as_flattened_mut();
        unit.fill(0.0);
        for i in 0..n {
            unit[i * stride + i] = 1.0;
        }
        match run(
            self.arch,
            Solve {
                room: self,
                h_scale: s_scale,
                s_scale: 1.0,
                want_smallest: false,
            },
        ) {
            Outcome::Solved => EigenError::Singular {
                eigenvalue: self.values[0],
                weights: self.vectors[..n].iter().map(|x| x * x).collect(),
            },
            _ => EigenError::NotConverged,
        }
    }
}

fn check_input(n: usize, h: &[f64], s: &[f64]) -> Result<(), EigenError> {
    for (matrix, m) in [("H", h), ("S", s)] {
        if m.len() != n * n {
            return Err(EigenError::Size {
                matrix,
                expected: n * n,
                found: m.len(),
            });
        }
    }
    for (matrix, m) in [("H", h), ("S", s)] {
        for i in 0..n {
            let row = &m[i * n..i * n + i + 1];
            if let Some(column) = row.iter().position(|x| !x.is_finite()) {
                return Err(EigenError::NotFinite {
                    matrix,
                    row: i,
                    column,
                });
            }
        }
    }
    Ok(())
}

enum Outcome {
    Solved,
    Singular,
    NotConverged,
}

struct Solve<'a> {
    room: &'a mut Workspace,
    h_scale: f64,
    s_scale: f64,
    want_smallest: bool,
}

impl OctWork for Solve<'_> {
    type Output = Outcome;

    #[inline(always)]
    fn work<S: Simd, const K: usize>(self, w: Wide<S, K>) -> Outcome {
        let room = self.room;
        let (n, q) = (room.n, room.q);
        let [h, s, third, fourth, fifth] = &mut room.squares;
        let (h, s, third, fourth, fifth) = (
            &mut h[..],
            &mut s[..],
            &mut third[..],
            &mut fourth[..],
            &mut fifth[..],
        );
        let (d, e, factors) = (&mut room.d[..], &mut room.e[..], &mut room.factors[..]);
        room.smallest = 0.0;
        if self.want_smallest {
            // From a copy of S.
            third.copy_from_slice(s);
            tridiagonalise(w, n, q, third, d, e, factors, &mut room.room);
            let size = (0..n).fold(0.0_f64, |m, i| {
                m.max(d[i].abs() + e[i].abs() + if i > 0 { e[i - 1].abs() } else { 0.0 })
            });
            let smallest = smallest_eigenvalue(d, e, 0.0, size);
            room.smallest = smallest / self.s_scale;
            if smallest <= SINGULAR_RATIO * size {
                return Outcome::Singular;
            }
        }
        if !cholesky(w, n, q, s, &mut room.inverse, SINGULAR_RATIO) {
            return Outcome::Singular;
        }
        // W = L⁻¹ (third), A = W H Wᵀ (h).
        invert(w, n, q, s, &room.inverse, third);
        product(w, n, q, third, h, Shape::LowerLeft, fourth, q, 1);
        transpose(n, q, fourth, fifth);
        product(w, n, q, third, fifth, Shape::LowerLeftLowerResult, h, q, 1);
        mirror(n, q, h);
        tridiagonalise(w, n, q, h, d, e, factors, &mut room.room);
        form_q_transposed(w, n, q, h, factors, fourth);
        // Cᵀ = Yᵀ W with the rotations applied last; the result lies in panels of eight columns.
        product(w, n, q, fourth, third, Shape::LowerRight, fifth, 1, n);
        if !implicit_ql(w, n, d, e, &mut room.rotations, Some(fifth)) {
            return Outcome::NotConverged;
        }
        let order = &mut room.order;
        for (k, to) in order.iter_mut().enumerate() {
            *to = k;
        }
        order.sort_unstable_by(|a, b| d[*a].total_cmp(&d[*b]).then(a.cmp(b)));
        let (value_scale, vector_scale) = (self.s_scale / self.h_scale, self.s_scale.sqrt());
        for ((k, value), vector) in order
            .iter()
            .zip(&mut room.values)
            .zip(room.vectors.chunks_exact_mut(n))
        {
            *value = d[*k] * value_scale + 0.0;
            for (panel, part) in fifth.chunks_exact(n).zip(vector.chunks_mut(8)) {
                for (to, from) in part.iter_mut().zip(&panel[*k]) {
                    *to = from * vector_scale;
                }
            }
            fix_sign(vector);
        }
        Outcome::Solved
    }
}

struct Measure<'a> {
    room: &'a mut Workspace,
}

impl OctWork for Measure<'_> {
    type Output = Quality;

    #[inline(always)]
    fn work<S: Simd, const K: usize>(self, w: Wide<S, K>) -> Quality {
        let room = self.room;
        let [h, s, c, hc, sc] = &mut room.squares;
        measure(w, room.n, room.q, h, [s, c], &room.values, [hc, sc])
    }
}
