//! Direct products of irreps, and the squares that decide which vibrations a degenerate level
//! feels.

use crate::group::{Irrep, PointGroup};
use crate::linear::multiplicity;
use crate::matrix::product;
use crate::names::Parts;

/// Which part of Γ ⊗ Γ.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Part {
    Symmetric,
    Antisymmetric,
}

impl PointGroup {
    /// Index of the irrep that every operation leaves alone (a1, ag, σg⁺ …).
    pub fn totally_symmetric(&self) -> usize {
        self.irreps
            .iter()
            .position(|irrep| {
                irrep.dimension == 1 && irrep.characters.iter().all(|x| (x - 1.0).abs() < 1e-6)
            })
            .unwrap_or(0)
    }

    /// How often each irrep is in the direct product of two. Parts that no orbital up to l = 3 has
    /// (Γ of a linear molecule, pg of an atom) have no name here and are left out.
    pub fn product(&self, a: usize, b: usize) -> Vec<usize> {
        let (Some(first), Some(second)) = (self.irreps.get(a), self.irreps.get(b)) else {
            return vec![0; self.irreps.len()];
        };
        if self.linear {
            return self.linear_product(first, second, None);
        }
        if self.is_atom() {
            return self.atom_product(first, second, None);
        }
        let values: Vec<f64> = first
            .characters
            .iter()
            .zip(&second.characters)
            .map(|(x, y)| x * y)
            .collect();
        self.counts(&values)
    }

    /// The symmetric part of Γ ⊗ Γ, with characters ½(χ(g)² + χ(g²)) (Jahn & Teller, Proc. R.
    /// Soc. A 161, 220 (1937)): what a level of the irrep can couple to in first order.
    pub fn symmetric_square(&self, irrep: usize) -> Vec<usize> {
        self.square(irrep, Part::Symmetric)
    }

    /// The antisymmetric part of Γ ⊗ Γ, with characters ½(χ(g)² − χ(g²)): the triplet terms of
    /// two electrons in the level.
    pub fn antisymmetric_square(&self, irrep: usize) -> Vec<usize> {
        self.square(irrep, Part::Antisymmetric)
    }

    fn square(&self, irrep: usize, part: Part) -> Vec<usize> {
        let Some(one) = self.irreps.get(irrep) else {
            return vec![0; self.irreps.len()];
        };
        if self.linear {
            return self.linear_product(one, one, Some(part));
        }
        if self.is_atom() {
            return self.atom_product(one, one, Some(part));
        }
        let sign = if part == Part::Symmetric { 1.0 } else { -1.0 };
        let values: Vec<f64> = self
            .classes
            .iter()
            .zip(&one.characters)
            .map(|(class, x)| {
                let matrix = &self.operations[class.operations[0]].matrix;
                let twice = self
                    .operation_of(&product(matrix, matrix))
                    .map_or(one.dimension as f64, |op| one.characters[self.class_of[op]]);
                0.5 * (x * x + sign * twice)
            })
            .collect();
        self.counts(&values)
    }

    /// How often each irrep is in a representation given by one character per class.
    pub(crate) fn counts(&self, values: &[f64]) -> Vec<usize> {
        let sizes = self.class_sizes();
        self.irreps
            .iter()
            .map(|irrep| multiplicity(irrep, &sizes, values).round().max(0.0) as usize)
            .collect()
    }

    /// Units of angular momentum about the axis: m₁ ± m₂; σ⁺ and σ⁻ where they cancel.
    fn linear_product(&self, a: &Irrep, b: &Irrep, part: Option<Part>) -> Vec<usize> {
        let waves = |irrep: &Irrep| {
            Parts::LINEAR
                .iter()
                .position(|letter| *letter == irrep.parts.letter)
                .unwrap_or(0)
        };
        let (m, n) = (waves(a), waves(b));
        let parity = match (a.parts.parity, b.parts.parity) {
            ("", _) | (_, "") => "",
            (x, y) if x == y => "g",
            _ => "u",
        };
        let mut counts = vec![0; self.irreps.len()];
        let mut add = |k: usize, sign: &str| {
            let found = self.irreps.iter().position(|irrep| {
                waves(irrep) == k && irrep.parts.parity == parity && irrep.parts.sign == sign
            });
            if let Some(found) = found {
                counts[found] += 1;
            }
        };
        match (m, n, part) {
            (0, 0, Some(Part::Antisymmetric)) => {}
            (0, 0, Some(Part::Symmetric)) => add(0, "+"),
            (0, 0, None) => add(
                0,
                if a.parts.sign == b.parts.sign {
                    "+"
                } else {
                    "-"
                },
            ),
            (0, k, _) | (k, 0, _) => add(k, ""),
            (m, n, Some(Part::Symmetric)) => {
                add(0, "+");
                add(m + n, "");
            }
            (_, _, Some(Part::Antisymmetric)) => add(0, "-"),
            (m, n, None) => {
                if m == n {
                    add(0, "+");
                    add(0, "-");
                } else {
                    add(m.abs_diff(n), "");
                }
                add(m + n, "");
            }
        }
        counts
    }

    /// L from |l₁ − l₂| to l₁ + l₂; even L are the symmetric part of a square.
    fn atom_product(&self, a: &Irrep, b: &Irrep, part: Option<Part>) -> Vec<usize> {
        let (l, k) = ((a.dimension - 1) / 2, (b.dimension - 1) / 2);
        let even = l % 2 == k % 2;
        let mut counts = vec![0; self.irreps.len()];
        for (index, irrep) in self.irreps.iter().enumerate() {
            let total = (irrep.dimension - 1) / 2;
            let inside = (l.abs_diff(k)..=l + k).contains(&total);
            let right_parity = (irrep.parts.parity == "g") == even;
            let wanted = match part {
                None => true,
                Some(Part::Symmetric) => total.is_multiple_of(2),
                Some(Part::Antisymmetric) => !total.is_multiple_of(2),
            };
            if inside && right_parity && wanted {
                counts[index] += 1;
            }
        }
        counts
    }
}
