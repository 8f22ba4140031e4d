//! A lattice around an orbital, and the isovalue that encloses a share of its density.

use rayon::prelude::*;

use orbend_structure::{Angstrom, Bohr};

use crate::field::OrbitalField;

/// Points along the longest edge of the first, wide lattice.
const COARSE: f64 = 56.0;
/// Points along the longest edge of the lattice that the surface is made on.
const FINE: f64 = 84.0;
/// Its step is not above this (Å) ...
const WIDEST_STEP: f64 = 0.12;
/// ... unless it would have more points than this.
const MOST_POINTS: f64 = 6e6;

/// A cubic lattice; x runs fastest.
pub(super) struct Lattice {
    /// The first point, Å.
    pub(super) origin: [f64; 3],
    /// Å.
    pub(super) step: f64,
    pub(super) counts: [usize; 3],
}

impl Lattice {
    /// Holds the surface with room to spare; the second and later attempts lie elsewhere.
    pub(super) fn around(field: &OrbitalField, share: f64, attempt: u32) -> Self {
        let wide = 1.0 + 0.15 * f64::from(attempt);
        let (low, high) = field.reach(0.02 * (1.0 - share));
        let longest = longest(low, high);
        let coarse = Self::filling(low, high, longest / COARSE);
        let values = coarse.values(field);
        let isovalue = coarse.isovalue(&values, share);
        let (low, high) = coarse.bounds(&values, 0.5 * isovalue, wide * 1.5 * coarse.step);
        let edges = (0..3).map(|k| high[k] - low[k]).product::<f64>();
        let step = (Self::longest_step(low, high) * (1.0 - 0.03 * f64::from(attempt)))
            .max((edges / MOST_POINTS).cbrt());
        Self::filling(low, high, step)
    }

    fn longest_step(low: [f64; 3], high: [f64; 3]) -> f64 {
        (longest(low, high) / FINE).min(WIDEST_STEP)
    }

    fn filling(low: [f64; 3], high: [f64; 3], step: f64) -> Self {
        let counts = core::array::from_fn(|k| ((high[k] - low[k]) / step).ceil() as usize + 2);
        // The same room on both sides.
        let origin =
            core::array::from_fn(|k| 0.5 * (low[k] + high[k] - (counts[k] - 1) as f64 * step));
        Self {
            origin,
            step,
            counts,
        }
    }

    /// The place of a lattice point, which need not be whole, Å.
    pub(super) fn place(&self, index: [f64; 3]) -> [f64; 3] {
        core::array::from_fn(|k| self.origin[k] + self.step * index[k])
    }

    /// ψ at every point, on the caller's pool.
    pub(super) fn values(&self, field: &OrbitalField) -> Vec<f64> {
        let [nx, ny, nz] = self.counts;
        let mut values = vec![0.0; nx * ny * nz];
        values
            .par_chunks_mut(nx)
            .enumerate()
            .for_each(|(row, values)| {
                let (y, z) = ((row % ny) as f64, (row / ny) as f64);
                for (x, value) in values.iter_mut().enumerate() {
                    *value = field.value(self.place([x as f64, y, z]));
                }
            });
        values
    }

    /// The v for which Σψ² h³ over the places with |ψ| ≥ v is the share.
    pub(super) fn isovalue(&self, values: &[f64], share: f64) -> f64 {
        let mut density: Vec<f64> = values.iter().map(|value| value * value).collect();
        density.par_sort_unstable_by(|a, b| b.total_cmp(a));
        let step = Bohr::from(Angstrom(self.step)).0;
        let cell = step * step * step;
        let mut inside = 0.0;
        for (index, value) in density.iter().enumerate() {
            inside += value * cell;
            if inside >= share {
                let next = density.get(index + 1).copied().unwrap_or_default();
                return (0.5 * (value + next)).sqrt();
            }
        }
        0.0
    }

    /// Whether the surface may run out of the lattice.
    pub(super) fn touches_edge(&self, values: &[f64], isovalue: f64) -> bool {
        let [nx, ny, nz] = self.counts;
        values.iter().enumerate().any(|(index, value)| {
            let (x, y, z) = (index % nx, index / nx % ny, index / (nx * ny));
            let edge = |at: usize, count: usize| at == 0 || at + 1 == count;
            (edge(x, nx) || edge(y, ny) || edge(z, nz)) && value.abs() >= isovalue
        })
    }

    /// The box of the points where |ψ| is at least `least`, with a margin, Å.
    fn bounds(&self, values: &[f64], least: f64, margin: f64) -> ([f64; 3], [f64; 3]) {
        let [nx, ny, _] = self.counts;
        let (mut low, mut high) = ([f64::INFINITY; 3], [f64::NEG_INFINITY; 3]);
        for (index, value) in values.iter().enumerate() {
            if value.abs() < least {
                continue;
            }
            let at = [index % nx, index / nx % ny, index / (nx * ny)];
            let place = self.place(at.map(|k| k as f64));
            for axis in 0..3 {
                low[axis] = low[axis].min(place[axis] - margin);
                high[axis] = high[axis].max(place[axis] + margin);
            }
        }
        (low, high)
    }
}

fn longest(low: [f64; 3], high: [f64; 3]) -> f64 {
    (0..3).map(|k| high[k] - low[k]).fold(0.0, f64::max)
}
