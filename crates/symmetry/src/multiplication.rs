//! The multiplication table of a group, and the exact matrices behind approximate ones.

use crate::matrix::{IDENTITY, Matrix3, largest_difference, orthogonal_factor, product, transpose};

/// Which operation follows from two: `times(i, j)` is "first j, then i". Operation 0 is the
/// identity.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Multiplication {
    order: usize,
    table: Vec<u16>,
    inverse: Vec<u16>,
}

impl Multiplication {
    /// The table from a function that multiplies two operations; only products with a few
    /// generators are asked for. `None` if a product is missing or the set is no group.
    pub(crate) fn new(
        order: usize,
        mut times: impl FnMut(usize, usize) -> Option<usize>,
    ) -> Option<Self> {
        let mut maps: Vec<Vec<usize>> = Vec::new();
        // Every element as (parent, generator): element = parent · generator.
        let mut words = vec![(0, 0)];
        let mut place: Vec<Option<usize>> = vec![None; order];
        let mut elements = vec![0];
        if order == 0 || order > usize::from(u16::MAX) {
            return None;
        }
        place[0] = Some(0);
        for generator in 1..order {
            if place[generator].is_some() {
                continue;
            }
            let map: Option<Vec<usize>> = (0..order).map(|x| times(x, generator)).collect();
            maps.push(map?);
            elements = vec![0];
            words = vec![(0, 0)];
            place.fill(None);
            place[0] = Some(0);
            let mut next = 0;
            while next < elements.len() {
                for (g, map) in maps.iter().enumerate() {
                    let reached = map[elements[next]];
                    if place[reached].is_none() {
                        place[reached] = Some(elements.len());
                        elements.push(reached);
                        words.push((elements[next], g));
                    }
                }
                next += 1;
            }
        }
        if elements.len() != order {
            return None;
        }
        let mut table = vec![0_u16; order * order];
        for x in 0..order {
            table[x * order] = u16::try_from(x).ok()?;
        }
        for (&element, &(parent, g)) in elements.iter().zip(&words).skip(1) {
            for x in 0..order {
                let before = usize::from(table[x * order + parent]);
                table[x * order + element] = u16::try_from(maps[g][before]).ok()?;
            }
        }
        let mut inverse = vec![u16::MAX; order];
        for x in 0..order {
            let row = &table[x * order..(x + 1) * order];
            inverse[x] = u16::try_from(row.iter().position(|&y| y == 0)?).ok()?;
        }
        Some(Self {
            order,
            table,
            inverse,
        })
    }

    /// The table of exact matrices.
    pub(crate) fn of_matrices(matrices: &[Matrix3]) -> Option<Self> {
        Self::new(matrices.len(), |i, j| {
            let wanted = product(&matrices[i], &matrices[j]);
            matrices
                .iter()
                .position(|m| largest_difference(m, &wanted) < 1e-6)
        })
    }

    pub(crate) fn order(&self) -> usize {
        self.order
    }

    pub(crate) fn times(&self, i: usize, j: usize) -> usize {
        usize::from(self.table[i * self.order + j])
    }

    pub(crate) fn inverse(&self, i: usize) -> usize {
        usize::from(self.inverse[i])
    }

    /// Matrices that obey the table exactly, next to approximate ones: each is replaced by the
    /// orthogonal factor of the mean of R(h)ᵀ R(hg) over all h, until nothing moves; the error is
    /// squared every time (Grove, Karcher & Ruh, Math. Ann. 211, 7 (1974)).
    pub(crate) fn exact(&self, approximate: &[Matrix3]) -> Vec<Matrix3> {
        let mut current = approximate.to_vec();
        for _ in 0..6 {
            if self.obeyed(&current, 1e-14) {
                break;
            }
            let mut next = Vec::with_capacity(self.order);
            for g in 0..self.order {
                let mut mean = [[0.0; 3]; 3];
                for h in 0..self.order {
                    let m = product(&transpose(&current[h]), &current[self.times(h, g)]);
                    for i in 0..3 {
                        for j in 0..3 {
                            mean[i][j] += m[i][j];
                        }
                    }
                }
                let share = 1.0 / self.order as f64;
                next.push(orthogonal_factor(&mean.map(|row| row.map(|x| x * share))));
            }
            current = next;
        }
        if let Some(first) = current.first_mut() {
            *first = IDENTITY;
        }
        current
    }

    /// Whether the matrices obey the table within `limit`.
    pub(crate) fn obeyed(&self, matrices: &[Matrix3], limit: f64) -> bool {
        (0..self.order).all(|g| {
            (0..self.order).all(|h| {
                let m = product(&matrices[g], &matrices[h]);
                largest_difference(&m, &matrices[self.times(g, h)]) < limit
            })
        })
    }
}
