//! How the block of two shells follows the direction of the bond.
//!
//! The block of ⟨l_a i | l_b j⟩ over a displacement along the unit vector e is a sum of coupled
//! tensors, Σ_L κ_L Σ_M w_ijLM C_LM(e), L = |l_a−l_b|, +2, …, l_a+l_b: the w are real Gaunt
//! coefficients normalised within each (L, M), the C Racah-normalised harmonics, and κ follows
//! from the diatomic integrals S_m by comparing with e = z, where the block is diagonal. No local
//! frame is chosen, so nothing jumps as the bond turns.

use std::sync::OnceLock;

use crate::angular::{MAX_DEGREE, index, solid_harmonics};

/// Numbers for one ordered pair (l_a, l_b).
pub(crate) struct Coupling {
    /// κ of the d-th L is Σ_m `reduce[d][m]` S_m.
    pub(crate) reduce: [[f64; 4]; 4],
    /// Number of L, which is also the number of diatomic integrals.
    pub(crate) count: usize,
    /// For each component: which L (d) and where its harmonic stands in the flat list.
    pub(crate) components: Vec<(u8, u8)>,
    /// Whether l_a = l_b: then the block is symmetric and only its entries with j ≥ i are listed.
    pub(crate) symmetric: bool,
    rows: usize,
    columns: usize,
    /// For each entry (i, j), row by row: how many terms it has.
    pub(crate) entries: Vec<u8>,
    /// (component, w).
    pub(crate) terms: Vec<(u8, f64)>,
}

impl Coupling {
    /// The coupling of two angular momenta up to 3 (made once in the life of the process).
    pub(crate) fn of(l_a: usize, l_b: usize) -> &'static Self {
        static TABLE: [OnceLock<Coupling>; 16] = [const { OnceLock::new() }; 16];
        TABLE[(l_a & 3) * 4 + (l_b & 3)].get_or_init(|| Self::build(l_a & 3, l_b & 3))
    }

    fn build(l_a: usize, l_b: usize) -> Self {
        let (rows, columns) = (2 * l_a + 1, 2 * l_b + 1);
        let count = l_a.min(l_b) + 1;
        let mut reduce = [[0.0; 4]; 4];
        let mut components = Vec::new();
        let mut weights = Vec::new(); // one table of rows × columns per component
        for (d, reduce_row) in reduce.iter_mut().enumerate().take(count) {
            let degree = l_a.abs_diff(l_b) + 2 * d;
            for member in 0..=2 * degree {
                components.push((d as u8, (degree * degree + member) as u8));
                weights.push(gaunt(l_a, l_b, degree, member));
            }
            for table in weights.iter_mut().rev().take(2 * degree + 1) {
                let norm = table.iter().map(|w| w * w).sum::<f64>().sqrt();
                table.iter_mut().for_each(|w| *w /= norm);
            }
            let along_z = &weights[weights.len() - (2 * degree + 1)];
            for (m, factor) in reduce_row.iter_mut().enumerate().take(count) {
                let both = if m == 0 { 1.0 } else { 2.0 };
                let k = index(0, m, false);
                *factor = both * along_z[k * columns + k];
            }
        }
        let mut entries = Vec::new();
        let mut terms = Vec::new();
        for i in 0..rows {
            let from = if l_a == l_b { i } else { 0 };
            for j in from..columns {
                let before = terms.len();
                for (component, table) in weights.iter().enumerate() {
                    let weight = table[i * columns + j];
                    if weight.abs() > 1e-12 {
                        terms.push((component as u8, weight));
                    }
                }
                entries.push((terms.len() - before) as u8);
            }
        }
        Self {
            reduce,
            count,
            symmetric: l_a == l_b,
            rows,
            columns,
            components,
            entries,
            terms,
        }
    }

    /// All (i, j, component, w), both halves of a symmetric block.
    pub(crate) fn all(&self) -> Vec<(usize, usize, usize, f64)> {
        let mut out = Vec::new();
        let mut terms = self.terms.iter();
        let mut entries = self.entries.iter();
        for i in 0..self.rows {
            let from = if self.symmetric { i } else { 0 };
            for (j, &count) in (from..self.columns).zip(&mut entries) {
                for &(component, w) in terms.by_ref().take(usize::from(count)) {
                    let component = usize::from(component);
                    out.push((i, j, component, w));
                    if self.symmetric && j > i {
                        out.push((j, i, component, w));
                    }
                }
            }
        }
        out
    }

    /// (i, j, w) of each component of the highest L: how products make the harmonics of degree
    /// l_a + l_b.
    pub(crate) fn highest(&self) -> Vec<Vec<(usize, usize, f64)>> {
        let count = self.rows + self.columns - 1;
        let first = self.components.len() - count;
        let mut out = vec![Vec::new(); count];
        for (i, j, component, w) in self.all() {
            if component >= first {
                out[component - first].push((i, j, w));
            }
        }
        out
    }
}

/// ∫ C_i C_j C_LM over the sphere for all (i, j), up to a common factor, by an exact product rule:
/// seven Gauss–Legendre latitudes, sixteen equal longitudes (all integrands have degree ≤ 12).
fn gaunt(l_a: usize, l_b: usize, degree: usize, member: usize) -> Vec<f64> {
    let (rows, columns) = (2 * l_a + 1, 2 * l_b + 1);
    let mut out = vec![0.0; rows * columns];
    for (harmonics, weight) in sphere() {
        let third = weight * harmonics[degree * degree + member];
        for i in 0..rows {
            for j in 0..columns {
                out[i * columns + j] +=
                    third * (harmonics[l_a * l_a + i] * harmonics[l_b * l_b + j]);
            }
        }
    }
    out
}

/// Harmonics and weights at the points of the product rule.
fn sphere() -> &'static [([f64; 49], f64)] {
    static POINTS: OnceLock<Vec<([f64; 49], f64)>> = OnceLock::new();
    POINTS.get_or_init(|| {
        let mut points = Vec::new();
        for (z, weight) in gauss_legendre_seven() {
            let radius = (1.0 - z * z).sqrt();
            for step in 0..16 {
                let angle = core::f64::consts::PI * (f64::from(step) + 0.5) / 8.0;
                let unit = [
                    [radius * libm::cos(angle)],
                    [radius * libm::sin(angle)],
                    [z],
                ];
                let mut values = [[0.0; 1]; 49];
                solid_harmonics(&unit, MAX_DEGREE, &mut values);
                points.push((values.map(|v| v[0]), weight / 16.0));
            }
        }
        points
    })
}

/// Nodes and weights of the seven-point Gauss–Legendre rule, by Newton's method on P₇.
fn gauss_legendre_seven() -> [(f64, f64); 7] {
    let mut rule = [(0.0, 0.0); 7];
    for (k, entry) in rule.iter_mut().enumerate() {
        let mut x = libm::cos(core::f64::consts::PI * (k as f64 + 0.75) / 7.5);
        let mut slope = 1.0;
        for _ in 0..8 {
            let (mut before, mut current) = (1.0, x);
            for n in 2..=7 {
                let n = f64::from(n);
                (before, current) = (
                    current,
                    ((2.0 * n - 1.0) * x * current - (n - 1.0) * before) / n,
                );
            }
            slope = 7.0 * (x * current - before) / (x * x - 1.0);
            x -= current / slope;
        }
        *entry = (x, 1.0 / ((1.0 - x * x) * slope * slope));
    }
    rule
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sparse_and_orthonormal() {
        for (l_a, l_b, terms) in [(0, 0, 1), (0, 1, 3), (1, 1, 14)] {
            assert_eq!(Coupling::of(l_a, l_b).all().len(), terms, "{l_a} {l_b}");
        }
        for l_a in 0..4 {
            for l_b in 0..4 {
                let coupling = Coupling::of(l_a, l_b);
                let n = coupling.components.len();
                let mut gram = vec![0.0; n * n];
                let all = coupling.all();
                for &(i, j, p, v) in &all {
                    for &(_, _, q, w) in all.iter().filter(|t| (t.0, t.1) == (i, j)) {
                        gram[p * n + q] += v * w;
                    }
                }
                for p in 0..n {
                    for q in 0..n {
                        let expected = if p == q { 1.0 } else { 0.0 };
                        assert!(
                            (gram[p * n + q] - expected).abs() < 1e-14,
                            "{l_a} {l_b} {p} {q}"
                        );
                    }
                }
            }
        }
    }
}
