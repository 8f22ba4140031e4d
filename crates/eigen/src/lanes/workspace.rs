//! The room in which eight problems are solved.

use pulp::Simd;

use super::assemble::{load, scales, signs, sort};
use super::chain::{Rotations, buffered_sweeps, implicit_ql};
use super::reduce::{back_substitute, factor_and_reduce};
use super::smallest::smallest_eigenvalues;
use super::tridiagonal::{form_q, tridiagonalise};
use crate::error::EigenError;
use crate::single::Workspace;
use crate::wide::{OctWork, Wide, run};
use crate::{LANES, Lanes, MOST_IN_LANES, SINGULAR_RATIO};

/// How one lane ended.
#[derive(Clone, Debug, PartialEq)]
pub enum LaneStatus {
    /// Solved together with the others.
    Solved,
    /// Solved alone, because the lane kernel was not sure of it.
    SolvedAlone,
    /// Not solved; values and vectors of this lane are zero.
    Failed(EigenError),
}

/// Room for eight problems of one size.
///
/// Nothing is allocated after [`new`](Self::new) unless a lane has to be solved alone.
#[derive(Clone, Debug)]
pub struct LaneWorkspace {
    n: usize,
    arch: pulp::Arch,
    h: Vec<Lanes>,
    s: Vec<Lanes>,
    z: Vec<Lanes>,
    rotations: Vec<Lanes>,
    inverse_diagonal: Vec<Lanes>,
    d: Vec<Lanes>,
    e: Vec<Lanes>,
    factors: Vec<Lanes>,
    scratch: Vec<Lanes>,
    order: Vec<[u32; LANES]>,
    values: Vec<Lanes>,
    vectors: Vec<Lanes>,
    want_smallest: bool,
    smallest: Lanes,
    alone: Option<Box<Alone>>,
}

/// Room for one lane on its own.
#[derive(Clone, Debug)]
struct Alone {
    room: Workspace,
    h: Vec<f64>,
    s: Vec<f64>,
}

impl LaneWorkspace {
    /// Room for problems of `n` functions.
    pub fn new(n: usize) -> Self {
        let inside = if n > MOST_IN_LANES { 0 } else { n };
        let row = || vec![[0.0; LANES]; inside];
        let square = || vec![[0.0; LANES]; inside * inside];
        LaneWorkspace {
            n,
            arch: pulp::Arch::new(),
            h: square(),
            s: square(),
            z: square(),
            rotations: vec![[0.0; LANES]; 2 * inside * buffered_sweeps(n)],
            inverse_diagonal: row(),
            d: row(),
            e: row(),
            factors: row(),
            scratch: vec![[0.0; LANES]; 2 * inside],
            order: vec![[0; LANES]; inside],
            values: vec![[0.0; LANES]; n],
            vectors: vec![[0.0; LANES]; n * n],
            want_smallest: false,
            smallest: [0.0; LANES],
            alone: None,
        }
    }

    /// Number of functions.
    pub fn size(&self) -> usize {
        self.n
    }

    /// Whether to find the smallest eigenvalue of S in each lane (off by default: it costs about a
    /// fifth of a solve). Without it a lane's S is refused by the pivots of its Cholesky factor
    /// alone, which may let one pass that is below [`SINGULAR_RATIO`] by a small factor.
    pub fn set_smallest_overlap(&mut self, wanted: bool) {
        self.want_smallest = wanted;
    }

    /// Smallest eigenvalues of S in the last solve, exact to rounding; 0 when they were not wanted.
    pub fn smallest_overlap_eigenvalues(&self) -> &Lanes {
        &self.smallest
    }

    /// Solves the eight problems in `h` and `s` (n × n octets each, row-major; only elements with
    /// row ≥ column are read). With `vectors` false only the eigenvalues are found.
    ///
    /// # Errors
    /// Only for the wrong number of elements; what happened in each lane is in its status.
    pub fn solve(
        &mut self,
        h: &[Lanes],
        s: &[Lanes],
        vectors: bool,
    ) -> Result<[LaneStatus; LANES], EigenError> {
        let expected = self.n * self.n;
        for (matrix, found) in [("H", h.len()), ("S", s.len())] {
            if found != expected {
                return Err(EigenError::Size {
                    matrix,
                    expected,
                    found,
                });
            }
        }
        if self.n == 0 {
            return Ok([const { LaneStatus::Solved }; LANES]);
        }
        let good = if self.n > MOST_IN_LANES {
            [false; LANES]
        } else {
            let arch = self.arch;
            run(
                arch,
                Solve {
                    room: self,
                    h,
                    s,
                    vectors,
                },
            )
        };
        let mut status = [const { LaneStatus::Solved }; LANES];
        for lane in 0..LANES {
            if !good[lane] {
                status[lane] = self.solve_alone(h, s, lane);
            }
        }
        Ok(status)
    }

    /// Eigenvalues of the last solve, ascending: element k holds level k of the eight lanes.
    pub fn values(&self) -> &[Lanes] {
        &self.values
    }

    /// Eigenvectors of the last solve: element k·n + i is the coefficient of function i in level k.
    pub fn vectors(&self) -> &[Lanes] {
        &self.vectors
    }

    fn solve_alone(&mut self, h: &[Lanes], s: &[Lanes], lane: usize) -> LaneStatus {
        let n = self.n;
        let alone = self.alone.get_or_insert_with(|| {
            Box::new(Alone {
                room: Workspace::new(n),
                h: vec![0.0; n * n],
                s: vec![0.0; n * n],
            })
        });
        for (to, from) in [(&mut alone.h, h), (&mut alone.s, s)] {
            for (to, from) in to.iter_mut().zip(from) {
                *to = from[lane];
            }
        }
        // A lane that was given up must not pass unseen: its S is looked at in any case.
        alone
            .room
            .set_smallest_overlap(self.want_smallest || n <= MOST_IN_LANES);
        match alone.room.solve(&alone.h, &alone.s) {
            Ok(()) => {
                for (to, from) in self.values.iter_mut().zip(alone.room.values()) {
                    to[lane] = *from;
                }
                for (to, from) in self.vectors.iter_mut().zip(alone.room.vectors()) {
                    to[lane] = *from;
                }
                self.smallest[lane] = alone.room.smallest_overlap_eigenvalue();
                LaneStatus::SolvedAlone
            }
            Err(error) => {
                for to in self.values.iter_mut().chain(&mut self.vectors) {
                    to[lane] = 0.0;
                }
                self.smallest[lane] = 0.0;
                LaneStatus::Failed(error)
            }
        }
    }
}

struct Solve<'a> {
    room: &'a mut LaneWorkspace,
    h: &'a [Lanes],
    s: &'a [Lanes],
    vectors: bool,
}

impl OctWork for Solve<'_> {
    type Output = [bool; LANES];

    #[inline(always)]
    fn work<S: Simd, const K: usize>(self, w: Wide<S, K>) -> [bool; LANES] {
        let room = self.room;
        let n = room.n;
        let (h_in, s_in) = (w.view(self.h), w.view(self.s));
        let h_scale = scales(w, n, h_in, false);
        let s_scale = scales(w, n, s_in, true);
        let mut good = [true; LANES];
        for lane in 0..LANES {
            good[lane] = h_scale.finite[lane] && s_scale.finite[lane];
        }
        let one = w.splat(1.0);
        let flag =
            |x: [bool; LANES]| w.less(w.splat(0.5), w.pack(&x.map(|b| if b { 1.0 } else { 0.0 })));
        let h = w.view_mut(&mut room.h);
        let s = w.view_mut(&mut room.s);
        let use_lane = flag(good);
        load(w, n, h_in, h, &h_scale.factor, use_lane, 0.0);
        load(w, n, s_in, s, &s_scale.factor, use_lane, 1.0);
        let scratch = w.view_mut(&mut room.scratch);
        let factors = w.view_mut(&mut room.factors);
        let z = w.view_mut(&mut room.z);
        room.smallest = [0.0; LANES];
        if room.want_smallest {
            for (i, (to, from)) in z.chunks_exact_mut(n).zip(s.chunks_exact(n)).enumerate() {
                to[..i + 1].copy_from_slice(&from[..i + 1]);
            }
            let (d, e) = (w.view_mut(&mut room.d), w.view_mut(&mut room.e));
            tridiagonalise(w, n, z, d, e, factors, scratch);
            let (smallest, size) = smallest_eigenvalues(w, d, e);
            let (smallest, size) = (w.array(smallest), w.array(size));
            for lane in 0..LANES {
                room.smallest[lane] = smallest[lane] / s_scale.factor[lane];
                good[lane] &= smallest[lane] > SINGULAR_RATIO * size[lane];
            }
        }
        let inverse_diagonal = w.view_mut(&mut room.inverse_diagonal);
        let fine = factor_and_reduce(w, n, h, s, inverse_diagonal, scratch, SINGULAR_RATIO);
        let fine_lanes = w.array(w.select(fine, one, w.splat(0.0)));
        if fine_lanes.iter().any(|x| *x < 0.5) {
            // The rubbish of a failed lane must not keep the others waiting.
            let zero = w.splat(0.0);
            for x in h.iter_mut() {
                *x = w.select(fine, *x, zero);
            }
            for lane in 0..LANES {
                good[lane] &= fine_lanes[lane] > 0.5;
            }
        }
        tridiagonalise(
            w,
            n,
            h,
            w.view_mut(&mut room.d),
            w.view_mut(&mut room.e),
            factors,
            scratch,
        );
        let converged = if self.vectors {
            form_q(w, n, h, factors, z, scratch);
            let rotations = Rotations::new(n, w.view_mut(&mut room.rotations));
            let converged = implicit_ql(w, n, &mut room.d, &mut room.e, Some((rotations, z)));
            back_substitute(w, n, s, inverse_diagonal, z);
            converged
        } else {
            implicit_ql(w, n, &mut room.d, &mut room.e, None)
        };
        sort(n, &room.d, &mut room.order);
        // Back to the caller's units.
        let mut value_scale = [0.0; LANES];
        let mut vector_scale = [0.0; LANES];
        for lane in 0..LANES {
            good[lane] &= converged[lane];
            value_scale[lane] = s_scale.factor[lane] / h_scale.factor[lane];
            vector_scale[lane] = s_scale.factor[lane].sqrt();
        }
        for (to, order) in room.values.iter_mut().zip(&room.order) {
            for lane in 0..LANES {
                to[lane] = room.d[order[lane] as usize][lane] * value_scale[lane] + 0.0;
            }
        }
        if self.vectors {
            signs(w, n, z, scratch);
            let vector_scale = w.pack(&vector_scale);
            for sign in scratch[..n].iter_mut() {
                *sign = w.mul(*sign, vector_scale);
            }
            let factor = &room.scratch[..n];
            for (rank, order) in room.order.iter().enumerate() {
                let out = &mut room.vectors[rank * n..(rank + 1) * n];
                for lane in 0..LANES {
                    let k = order[lane] as usize;
                    let sign = factor[k][lane];
                    for (to, from) in out.iter_mut().zip(room.z[k..].iter().step_by(n)) {
                        to[lane] = from[lane] * sign + 0.0;
                    }
                }
            }
        }
        good
    }
}
