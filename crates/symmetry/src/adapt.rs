//! Symmetry-adapted combinations of orbitals, by projection (Wigner's operators
//! P_rs = d/|G| Σ D_rs(g) g; see Cotton, *Chemical Applications of Group Theory*, chapter 6).

use crate::block::Block;
use crate::error::SymmetryError;
use crate::group::{Irrep, PointGroup};
use crate::representation::{Representation, along, matrices};
use crate::shells::{Layout, OrbitalShell};
use orbend_overlap::harmonics;

/// Adapted combinations of all functions, one block per irrep that occurs, in the order of
/// [`PointGroup::irreps`].
#[derive(Clone, Debug)]
pub struct AdaptedBasis {
    /// Number of functions.
    pub functions: usize,
    /// Number of irreps of the group.
    pub irreps: usize,
    /// The blocks.
    pub blocks: Vec<Block>,
}

impl PointGroup {
    /// Combinations of the functions of `shells` that belong to the irreps, orthonormal as vectors
    /// of coefficients. Functions are numbered shell by shell in the given order.
    ///
    /// Rows of degenerate sets follow the axes: the first row of an e set is even under C2(x) or
    /// under the plane xz, the rows of t sets are those of x, y, z or yz, xz, xy.
    ///
    /// # Errors
    /// Shells that the group does not map onto each other.
    pub fn adapt(&self, shells: &[OrbitalShell]) -> Result<AdaptedBasis, SymmetryError> {
        if self.is_atom() {
            return self.adapt_atom(shells);
        }
        self.adapt_rows(shells, &matrices(self)?)
    }

    /// As [`PointGroup::adapt`], with the rows of degenerate sets turned so that each belongs to
    /// one irrep of a subgroup in the same position: the set splits cleanly when only the subgroup
    /// is left.
    ///
    /// # Errors
    /// Also where `subgroup` is none.
    pub fn adapt_along(
        &self,
        shells: &[OrbitalShell],
        subgroup: &PointGroup,
    ) -> Result<AdaptedBasis, SymmetryError> {
        if self.is_atom() || subgroup.linear || subgroup.is_atom() {
            return self.adapt(shells);
        }
        if self.linear {
            let turned = self.turned_to(subgroup)?;
            return turned.adapt_kept(shells, subgroup);
        }
        self.adapt_kept(shells, subgroup)
    }

    fn adapt_kept(
        &self,
        shells: &[OrbitalShell],
        subgroup: &PointGroup,
    ) -> Result<AdaptedBasis, SymmetryError> {
        let kept: Result<Vec<usize>, SymmetryError> = subgroup
            .operations
            .iter()
            .map(|op| {
                self.operation_of(&op.matrix)
                    .ok_or_else(|| SymmetryError::NotSubgroup {
                        big: self.name.clone(),
                        small: subgroup.name.clone(),
                        operation: op.label.clone(),
                    })
            })
            .collect();
        let kept = kept?;
        let small = matrices(subgroup)?;
        let mut rows = matrices(self)?;
        for (irrep, own) in self.irreps.iter().zip(&mut rows) {
            if irrep.dimension > 1 && !irrep.paired {
                *own = along(own, subgroup, &small, &kept)?;
            }
        }
        self.adapt_rows(shells, &rows)
    }

    fn adapt_rows(
        &self,
        shells: &[OrbitalShell],
        rows: &[Representation],
    ) -> Result<AdaptedBasis, SymmetryError> {
        let layout = Layout::new(self, shells)?;
        let mut columns: Vec<Vec<Column>> = vec![Vec::new(); self.irreps.len()];
        let highest = shells.iter().map(|s| s.l).max().unwrap_or(0);
        let turns: Vec<Vec<[[f64; 7]; 7]>> = (0..=highest)
            .map(|l| {
                self.operations
                    .iter()
                    .map(|op| harmonics::rotation(l, &op.matrix))
                    .collect()
            })
            .collect();
        for orbit in &layout.orbits {
            let l = usize::from(shells[orbit[0]].l);
            let action = Action::new(&layout, orbit, l, &turns[l]);
            let counts = self.count_orbit(&layout, orbit, l);
            for (k, irrep) in self.irreps.iter().enumerate() {
                if counts[k] > 0 {
                    self.project(irrep, &rows[k], counts[k], &action, &mut columns[k])?;
                }
            }
        }
        let blocks = columns
            .into_iter()
            .enumerate()
            .filter(|(_, columns)| !columns.is_empty())
            .map(|(k, columns)| self.block(k, columns))
            .collect();
        Ok(AdaptedBasis {
            functions: layout.functions,
            irreps: self.irreps.len(),
            blocks,
        })
    }

    fn project(
        &self,
        irrep: &Irrep,
        rows: &Representation,
        count: usize,
        action: &Action,
        out: &mut Vec<Column>,
    ) -> Result<(), SymmetryError> {
        let order = self.order() as f64;
        let size = action.size();
        let inner = if irrep.paired {
            1.0
        } else {
            irrep.dimension as f64
        };
        let weight = |op: usize, row: usize| {
            let value = if irrep.paired {
                irrep.characters[self.class_of[op]]
            } else {
                rows.at(op, row, 0)
            };
            inner / order * value
        };
        let wanted = if irrep.paired {
            irrep.dimension * count
        } else {
            count
        };
        let all: Vec<usize> = (0..size).collect();
        let first: Vec<Vec<f64>> = action.images(&all, |op| weight(op, 0));
        let chosen = independent(&first, wanted).ok_or(SymmetryError::Inconsistent(
            "an irrep occurs less often than it should",
        ))?;
        // Cholesky of the projector among the chosen functions: u = L⁻¹ (P e).
        let inverse = inverse_factor(&first, &chosen).ok_or(SymmetryError::Inconsistent(
            "adapted functions are not independent",
        ))?;
        let partner_images: Vec<Vec<Vec<f64>>> = if irrep.paired {
            Vec::new()
        } else {
            (1..irrep.dimension)
                .map(|row| action.images(&chosen, |op| weight(op, row)))
                .collect()
        };
        let first_images: Vec<Vec<f64>> = chosen.iter().map(|&k| first[k].clone()).collect();
        for (k, combination) in inverse.iter().enumerate() {
            let combined = |images: &[Vec<f64>]| {
                let mut total = vec![0.0; size];
                for (factor, image) in combination.iter().zip(images) {
                    for (t, x) in total.iter_mut().zip(image) {
                        *t += factor * x;
                    }
                }
                action.sparse(&total)
            };
            let mut vectors = vec![combined(&first_images)];
            vectors.extend(partner_images.iter().map(|images| combined(images)));
            out.push(Column {
                row: action.functions[chosen[k]],
                factors: combination
                    .iter()
                    .zip(&chosen)
                    .map(|(factor, &c)| (action.functions[c], *factor))
                    .collect(),
                vectors,
            });
        }
        Ok(())
    }

    fn block(&self, k: usize, mut columns: Vec<Column>) -> Block {
        columns.sort_by_key(|column| column.row);
        let irrep = &self.irreps[k];
        let rows: Vec<usize> = columns.iter().map(|column| column.row).collect();
        let factors: Vec<Vec<(usize, f64)>> = columns
            .iter()
            .map(|column| {
                let mut list: Vec<(usize, f64)> = column
                    .factors
                    .iter()
                    .filter(|(_, factor)| factor.abs() > 1e-13)
                    .filter_map(|(row, factor)| Some((rows.binary_search(row).ok()?, *factor)))
                    .collect();
                list.sort_by_key(|(place, _)| *place);
                list
            })
            .collect();
        let mut reach = vec![0; rows.len()];
        for (i, list) in factors.iter().enumerate() {
            for &(place, _) in list {
                reach[place] = i + 1;
            }
        }
        let partners = if irrep.paired { 0 } else { irrep.dimension - 1 };
        let vectors = |row: usize| columns.iter().map(|c| c.vectors[row].clone()).collect();
        Block {
            irrep: k,
            dimension: irrep.dimension,
            paired: irrep.paired,
            first: vectors(0),
            partners: (1..=partners).map(vectors).collect(),
            rows,
            factors,
            reach,
        }
    }

    fn adapt_atom(&self, shells: &[OrbitalShell]) -> Result<AdaptedBasis, SymmetryError> {
        let layout = Layout::new(self, shells)?;
        let mut blocks = Vec::new();
        for (l, irrep) in self.irreps.iter().enumerate() {
            let columns: Vec<Column> = shells
                .iter()
                .zip(&layout.first)
                .filter(|(shell, _)| usize::from(shell.l) == l)
                .map(|(_, &first)| Column {
                    row: first,
                    factors: vec![(first, 1.0)],
                    vectors: (0..irrep.dimension)
                        .map(|m| vec![(first + m, 1.0)])
                        .collect(),
                })
                .collect();
            if !columns.is_empty() {
                blocks.push(self.block(l, columns));
            }
        }
        Ok(AdaptedBasis {
            functions: layout.functions,
            irreps: self.irreps.len(),
            blocks,
        })
    }
}

/// An adapted function before it is put into its block.
#[derive(Clone)]
struct Column {
    /// The function that stands for it in block transforms.
    row: usize,
    factors: Vec<(usize, f64)>,
    /// One vector per row of the irrep.
    vectors: Vec<Vec<(usize, f64)>>,
}

/// How the operations act on the functions of one set of equivalent shells.
struct Action<'a> {
    width: usize,
    /// Numbers of the functions of the set.
    functions: Vec<usize>,
    /// `places[operation][shell of the set]`: place in the set.
    places: Vec<Vec<usize>>,
    turns: &'a [[[f64; 7]; 7]],
}

impl<'a> Action<'a> {
    fn new(layout: &Layout, orbit: &[usize], l: usize, turns: &'a [[[f64; 7]; 7]]) -> Self {
        let width = 2 * l + 1;
        let places = layout
            .images
            .iter()
            .map(|image| {
                orbit
                    .iter()
                    .map(|&shell| orbit.binary_search(&image[shell]).unwrap_or(0))
                    .collect()
            })
            .collect();
        let functions = orbit
            .iter()
            .flat_map(|&s| layout.first[s]..layout.first[s] + width)
            .collect();
        Self {
            width,
            functions,
            places,
            turns,
        }
    }

    fn size(&self) -> usize {
        self.functions.len()
    }

    /// Σ over operations of weight × image, for each of the functions asked for.
    fn images(&self, of: &[usize], weight: impl Fn(usize) -> f64) -> Vec<Vec<f64>> {
        let mut out = vec![vec![0.0; self.size()]; of.len()];
        for (op, places) in self.places.iter().enumerate() {
            let w = weight(op);
            if w.abs() < 1e-14 {
                continue;
            }
            for (total, &k) in out.iter_mut().zip(of) {
                let start = places[k / self.width] * self.width;
                for (m, x) in total[start..start + self.width].iter_mut().enumerate() {
                    *x += w * self.turns[op][m][k % self.width];
                }
            }
        }
        out
    }

    fn sparse(&self, vector: &[f64]) -> Vec<(usize, f64)> {
        self.functions
            .iter()
            .zip(vector)
            .filter(|(_, x)| x.abs() > 1e-13)
            .map(|(&f, &x)| (f, x))
            .collect()
    }
}

/// Which columns of a projector span it best: the largest remaining one each time, the first of
/// nearly equal ones. In rising order.
fn independent(projected: &[Vec<f64>], wanted: usize) -> Option<Vec<usize>> {
    let n = projected.len();
    // Pivoted Cholesky; the projector is its own matrix of overlaps.
    let mut left: Vec<f64> = (0..n).map(|k| projected[k][k]).collect();
    let mut factors: Vec<Vec<f64>> = Vec::new();
    let mut chosen = Vec::new();
    for _ in 0..wanted {
        let mut best = 0;
        for k in 1..n {
            if left[k] > left[best] * (1.0 + 1e-6) + 1e-9 {
                best = k;
            }
        }
        if left[best] < 1e-4 {
            return None;
        }
        let root = left[best].sqrt();
        let column: Vec<f64> = (0..n)
            .map(|k| {
                let done: f64 = factors.iter().map(|f| f[k] * f[best]).sum();
                (projected[best][k] - done) / root
            })
            .collect();
        for (x, c) in left.iter_mut().zip(&column) {
            *x -= c * c;
        }
        factors.push(column);
        chosen.push(best);
    }
    chosen.sort_unstable();
    Some(chosen)
}

/// Rows of L⁻¹, where L Lᵀ is the projector among the chosen functions.
fn inverse_factor(projected: &[Vec<f64>], chosen: &[usize]) -> Option<Vec<Vec<f64>>> {
    let m = chosen.len();
    let mut lower = vec![vec![0.0; m]; m];
    for i in 0..m {
        for j in 0..=i {
            let done: f64 = (0..j).map(|k| lower[i][k] * lower[j][k]).sum();
            let x = projected[chosen[i]][chosen[j]] - done;
            lower[i][j] = if i == j {
                if x < 1e-8 {
                    return None;
                }
                x.sqrt()
            } else {
                x / lower[j][j]
            };
        }
    }
    let mut inverse = vec![vec![0.0; m]; m];
    for i in 0..m {
        // L⁻¹ row by row, from the rows above.
        let mut row = vec![0.0; m];
        row[i] = 1.0 / lower[i][i];
        for (j, x) in row[..i].iter_mut().enumerate() {
            let total: f64 = (j..i).map(|k| lower[i][k] * inverse[k][j]).sum();
            *x = -total / lower[i][i];
        }
        inverse[i] = row;
    }
    // Only the part up to the diagonal is ever non-zero.
    Some(
        inverse
            .into_iter()
            .enumerate()
            .map(|(i, row)| row[..=i].to_vec())
            .collect(),
    )
}
