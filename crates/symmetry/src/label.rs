//! Which irrep given orbitals belong to.

use crate::adapt::AdaptedBasis;

/// What a set of orbitals belongs to.
#[derive(Clone, Debug, PartialEq)]
pub struct Label {
    /// Irreps (as indices) with the number of whole sets of each, in order.
    pub content: Vec<(usize, usize)>,
    /// Share of the set's norm that the named irreps account for: 1 for orbitals of pure symmetry.
    pub purity: f64,
}

impl AdaptedBasis {
    /// Share of each irrep in an orbital c: Σ (u·c)(u·S c) over the adapted functions u of all its
    /// rows, `overlap_times_vector` being S c. The shares of a normalised orbital add up to 1.
    /// `out` has one place per irrep.
    pub fn weights(&self, vector: &[f64], overlap_times_vector: &[f64], out: &mut [f64]) {
        out.fill(0.0);
        for block in &self.blocks {
            let mut total = 0.0;
            for row in 0..block.row_count() {
                for column in block.row(row) {
                    let (mut a, mut b) = (0.0, 0.0);
                    for &(function, coefficient) in column {
                        a += coefficient * vector[function];
                        b += coefficient * overlap_times_vector[function];
                    }
                    total += a * b;
                }
            }
            out[block.irrep] = total;
        }
    }

    /// The irreps of a set of orbitals that are degenerate, or of a single one; `vectors` holds
    /// whole vectors one after another, `overlap` is the full matrix S. A set of accidentally
    /// degenerate orbitals has several irreps in its content.
    pub fn label(&self, vectors: &[f64], overlap: &[f64]) -> Label {
        let n = self.functions;
        let mut total = vec![0.0; self.irreps];
        let mut weights = vec![0.0; self.irreps];
        let mut image = vec![0.0; n];
        let mut count = 0;
        for vector in vectors.chunks_exact(n.max(1)) {
            for (x, row) in image.iter_mut().zip(overlap.chunks_exact(n)) {
                *x = row.iter().zip(vector).map(|(s, c)| s * c).sum();
            }
            self.weights(vector, &image, &mut weights);
            let norm: f64 = weights.iter().sum();
            for (t, w) in total.iter_mut().zip(&weights) {
                *t += w / norm;
            }
            count += 1;
        }
        self.from_weights(&total, count)
    }

    /// As [`AdaptedBasis::label`], from the weights of all orbitals of the set added together.
    pub fn from_weights(&self, total: &[f64], orbitals: usize) -> Label {
        let mut content = Vec::new();
        let mut explained = 0.0;
        for block in &self.blocks {
            let dimension = block.dimension as f64;
            let sets = (total[block.irrep] / dimension).round();
            if sets > 0.0 {
                content.push((block.irrep, sets as usize));
                explained += total[block.irrep].min(sets * dimension);
            }
        }
        if content.is_empty() {
            // Less than half of everything: the largest share names it.
            let mut best: Option<usize> = None;
            for block in &self.blocks {
                if best.is_none_or(|b| total[block.irrep] > total[b] + 1e-9) {
                    best = Some(block.irrep);
                }
            }
            content.extend(best.map(|irrep| (irrep, 1)));
            explained = best.map_or(0.0, |irrep| total[irrep]);
        }
        Label {
            content,
            purity: explained / orbitals.max(1) as f64,
        }
    }
}

/// Sets of equal levels: ranges of indices whose neighbours lie within `tolerance` of each other.
/// `values` rise.
pub fn degenerate_sets(values: &[f64], tolerance: f64) -> Vec<std::ops::Range<usize>> {
    let mut sets = Vec::new();
    let mut start = 0;
    for k in 1..=values.len() {
        if k == values.len() || values[k] - values[k - 1] > tolerance {
            sets.push(start..k);
            start = k;
        }
    }
    sets
}
