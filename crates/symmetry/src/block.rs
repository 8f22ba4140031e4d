//! Blocks of H and S, and the way back to coefficients of all functions.

use orbend_overlap::{LANES, Lanes};

/// The part of the problem that belongs to one irrep.
///
/// For degenerate irreps only row 1 has to be solved: the blocks of all rows are identical, and
/// the partners of a level have the same block coefficients in the other rows. `paired` irreps are
/// solved as one block of all their functions, in which every level comes twice.
#[derive(Clone, Debug)]
pub struct Block {
    /// Index of the irrep in [`crate::PointGroup::irreps`].
    pub irrep: usize,
    /// Dimension of the irrep.
    pub dimension: usize,
    /// Whether the levels come in pairs inside the block.
    pub paired: bool,
    /// The adapted functions of row 1 as (function, coefficient), orthonormal as vectors.
    pub first: Vec<Vec<(usize, f64)>>,
    /// The same for rows 2 … dimension (empty for `paired`).
    pub partners: Vec<Vec<Vec<(usize, f64)>>>,
    /// One function per adapted function whose projections span the block.
    pub(crate) rows: Vec<usize>,
    /// Adapted function i is the projection of Σ factor × function `rows[k]`, k ≤ i.
    pub(crate) factors: Vec<Vec<(usize, f64)>>,
    /// One more than the last adapted function whose factors use row k.
    pub(crate) reach: Vec<usize>,
}

impl Block {
    /// Number of adapted functions in row 1: the size of the eigenproblem.
    pub fn size(&self) -> usize {
        self.first.len()
    }

    /// Levels of the block that stand for one set: the dimension in a `paired`
    /// block, else 1.
    pub fn levels_per_set(&self) -> usize {
        if self.paired {
            self.dimension.max(1)
        } else {
            1
        }
    }

    /// Number of rows: 1 + number of partner rows.
    pub fn row_count(&self) -> usize {
        1 + self.partners.len()
    }

    /// The adapted functions of a row, 0 being the first.
    pub fn row(&self, row: usize) -> &[Vec<(usize, f64)>] {
        match row.checked_sub(1) {
            Some(partner) => self.partners.get(partner).map_or(&[], Vec::as_slice),
            None => &self.first,
        }
    }

    /// The block of a full symmetric matrix (`functions` × `functions`) that is invariant under
    /// the group; `out` has size × size elements.
    ///
    /// With u_i = P w_i, where w_i touches a few functions only, u_i·M u_j = w_i·M u_j: only the
    /// rows of M at those functions are read. A matrix that is not invariant (a geometry that has
    /// the group only within a tolerance) is therefore not averaged: symmetrise the geometry first.
    pub fn transform(&self, functions: usize, full: &[f64], out: &mut [f64]) {
        let (full, _) = full.as_chunks::<1>();
        let (out, _) = out.as_chunks_mut::<1>();
        self.transform_any(functions, full, out);
    }

    /// [`Block::transform`] for [`LANES`] geometries at once, with the same bits.
    pub fn transform_lanes(&self, functions: usize, full: &[Lanes], out: &mut [Lanes]) {
        pulp::Arch::new().dispatch(
            #[inline(always)]
            || self.transform_any::<LANES>(functions, full, out),
        );
    }

    #[inline(always)]
    fn transform_any<const N: usize>(
        &self,
        functions: usize,
        full: &[[f64; N]],
        out: &mut [[f64; N]],
    ) {
        let m = self.size();
        for (k, &row) in self.rows.iter().enumerate() {
            let line = &full[row * functions..(row + 1) * functions];
            // Only the lower triangle is made, so later columns are not wanted.
            let wanted = &mut out[k * m..k * m + self.reach[k]];
            for (target, column) in wanted.iter_mut().zip(&self.first) {
                *target = combination(line, column);
            }
        }
        for i in (0..m).rev() {
            // The diagonal first: it reads column i, which the mirrored writes then overwrite.
            for j in (0..=i).rev() {
                let mut total = [0.0; N];
                for &(k, factor) in &self.factors[i] {
                    let x = &out[k * m + j];
                    for lane in 0..N {
                        total[lane] += factor * x[lane];
                    }
                }
                out[i * m + j] = total;
                out[j * m + i] = total;
            }
        }
    }

    /// The elements of a full matrix, as (row, column), that [`Block::transform`] reads; some come
    /// more than once.
    pub fn reads(&self) -> impl Iterator<Item = (usize, usize)> + '_ {
        self.rows
            .iter()
            .zip(&self.reach)
            .flat_map(|(&row, &reach)| {
                let columns = self.first[..reach].iter().flatten();
                columns.map(move |&(column, _)| (row, column))
            })
    }

    /// Coefficients of all functions from block vectors: `vectors[k * size + i]` is the
    /// coefficient of adapted function i in level k; `out[k * functions + f]` becomes that of
    /// function f, in the given row of the irrep.
    pub fn expand(&self, row: usize, functions: usize, vectors: &[f64], out: &mut [f64]) {
        let (vectors, _) = vectors.as_chunks::<1>();
        let (out, _) = out.as_chunks_mut::<1>();
        self.expand_any(row, functions, vectors, out);
    }

    /// [`Block::expand`] for [`LANES`] geometries at once, with the same bits.
    pub fn expand_lanes(&self, row: usize, functions: usize, vectors: &[Lanes], out: &mut [Lanes]) {
        pulp::Arch::new().dispatch(
            #[inline(always)]
            || self.expand_any::<LANES>(row, functions, vectors, out),
        );
    }

    #[inline(always)]
    fn expand_any<const N: usize>(
        &self,
        row: usize,
        functions: usize,
        vectors: &[[f64; N]],
        out: &mut [[f64; N]],
    ) {
        let columns = self.row(row);
        let levels = vectors.chunks_exact(self.size().max(1));
        for (vector, target) in levels.zip(out.chunks_exact_mut(functions.max(1))) {
            target.fill([0.0; N]);
            for (amount, column) in vector.iter().zip(columns) {
                for &(function, coefficient) in column {
                    for lane in 0..N {
                        target[function][lane] += coefficient * amount[lane];
                    }
                }
            }
        }
    }
}

#[inline(always)]
fn combination<const N: usize>(line: &[[f64; N]], column: &[(usize, f64)]) -> [f64; N] {
    let mut total = [0.0; N];
    for &(function, coefficient) in column {
        let x = &line[function];
        for lane in 0..N {
            total[lane] += coefficient * x[lane];
        }
    }
    total
}
