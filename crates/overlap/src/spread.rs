//! From diatomic integrals and a direction to the block of two shells.

use crate::coupling::Coupling;
use crate::lanes::{accumulate, mul, next};

/// Unit vectors from A to B and what follows from them.
pub(crate) struct Direction<'a, const N: usize, const Y: usize> {
    pub(crate) unit: &'a [[f64; N]; 3],
    /// 1/R (bohr⁻¹), 0 where the atoms touch.
    pub(crate) inverse: &'a [f64; N],
    /// Racah-normalised harmonics of the unit vectors.
    pub(crate) harmonics: &'a [[f64; N]; Y],
}

/// Blocks with a short form of their own.
#[derive(Copy, Clone, Debug, PartialEq)]
enum Form {
    /// s with anything: the integral times a harmonic of degree l.
    Single,
    /// S_π δ_ij + (S_σ − S_π) e_i e_j.
    PWithP,
    /// Coupled tensors.
    Coupled,
}

/// Two shells and their place in the block.
#[derive(Clone)]
pub(crate) struct ShellPair {
    l: (usize, usize),
    row: usize,
    column: usize,
    /// First of its diatomic integrals; they follow with rising m.
    first: usize,
    form: Form,
    coupling: &'static Coupling,
}

/// Cartesian axis of the p functions in their order z, x, y.
const P_AXES: [usize; 3] = [2, 0, 1];

impl ShellPair {
    pub(crate) fn new(
        l: (usize, usize),
        (row, column): (usize, usize),
        first: usize,
        coupling: &'static Coupling,
    ) -> Self {
        let form = match l {
            (0, _) | (_, 0) => Form::Single,
            (1, 1) => Form::PWithP,
            _ => Form::Coupled,
        };
        Self {
            l,
            row,
            column,
            first,
            form,
            coupling,
        }
    }

    /// Highest degree of the harmonics that the block needs (those of degree 0 and 1 are at hand).
    pub(crate) fn degree(&self) -> usize {
        match self.form {
            Form::Single if self.l.0 + self.l.1 < 2 => 0,
            Form::PWithP => 0,
            _ => self.l.0 + self.l.1,
        }
    }

    /// Writes the block of overlaps.
    #[inline(always)]
    pub(crate) fn spread<const N: usize, const T: usize, const Y: usize, const Z: usize>(
        &self,
        values: &[[f64; N]; T],
        direction: &Direction<'_, N, Y>,
        stride: usize,
        out: &mut [[f64; N]],
    ) {
        let sigma = &values[self.first & (T - 1)];
        let begin = self.row * stride + self.column;
        match self.form {
            Form::Single => {
                let l = self.l.0 + self.l.1;
                let step = if self.l.0 == 0 { 1 } else { stride };
                for (k, target) in out[begin..]
                    .iter_mut()
                    .step_by(step)
                    .take(2 * l + 1)
                    .enumerate()
                {
                    *target = match l {
                        0 => *sigma,
                        1 => mul(sigma, &direction.unit[P_AXES[k % 3]]),
                        _ => mul(sigma, &direction.harmonics[(l * l + k) % Y]),
                    };
                }
            }
            Form::PWithP => {
                let pi = &values[(self.first + 1) & (T - 1)];
                for (i, &axis) in P_AXES.iter().enumerate() {
                    let mut along = [0.0; N];
                    for lane in 0..N {
                        along[lane] = (sigma[lane] - pi[lane]) * direction.unit[axis][lane];
                    }
                    for (j, &other) in P_AXES.iter().enumerate().skip(i) {
                        let mut value = mul(&along, &direction.unit[other]);
                        if i == j {
                            for lane in 0..N {
                                value[lane] += pi[lane];
                            }
                        }
                        out[begin + i * stride + j] = value;
                        out[begin + j * stride + i] = value;
                    }
                }
            }
            Form::Coupled => {
                let reduced = self.reduced(values);
                let mut components = [[0.0; N]; Z];
                for (component, &(d, at)) in components.iter_mut().zip(&self.coupling.components) {
                    let harmonic = &direction.harmonics[usize::from(at) % Y];
                    *component = mul(&reduced[usize::from(d) & 3], harmonic);
                }
                self.write(&components, stride, out);
            }
        }
    }

    /// Writes the derivatives of the block with respect to the three components of the
    /// displacement, one block of `size` numbers after the other.
    #[inline(always)]
    pub(crate) fn spread_slope<const N: usize, const T: usize, const Y: usize, const Z: usize>(
        &self,
        (values, slopes): (&[[f64; N]; T], &[[f64; N]; T]),
        direction: &Direction<'_, N, Y>,
        tangential: &[[[f64; N]; Y]; 3],
        (stride, size): (usize, usize),
        out: &mut [[f64; N]],
    ) {
        let (along, mut across) = (self.reduced(slopes), self.reduced(values));
        for (d, (along, across)) in along.iter().zip(&mut across).enumerate() {
            // At R = 0 the harmonics of degree 1 grow linearly: κ/R there is the slope.
            let linear = self.l.0.abs_diff(self.l.1) == 1 && d == 0;
            for lane in 0..N {
                let limit = if linear { along[lane] } else { 0.0 };
                let inverse = direction.inverse[lane];
                let quotient = across[lane] * inverse;
                across[lane] = if inverse > 0.0 { quotient } else { limit };
            }
        }
        for (axis, block) in out.chunks_exact_mut(size).take(3).enumerate() {
            let unit = &direction.unit[axis];
            let mut components = [[0.0; N]; Z];
            for (component, &(d, at)) in components.iter_mut().zip(&self.coupling.components) {
                let (d, at) = (usize::from(d) & 3, usize::from(at) % Y);
                for lane in 0..N {
                    component[lane] = (along[d][lane] * unit[lane]) * direction.harmonics[at][lane]
                        + across[d][lane] * tangential[axis][at][lane];
                }
            }
            self.write(&components, stride, block);
        }
    }

    /// κ_L from the diatomic integrals.
    #[inline(always)]
    fn reduced<const N: usize, const T: usize>(&self, values: &[[f64; N]; T]) -> [[f64; N]; 4] {
        let mut out = [[0.0; N]; 4];
        for (row, target) in self
            .coupling
            .reduce
            .iter()
            .zip(&mut out)
            .take(self.coupling.count)
        {
            for (m, &factor) in row.iter().enumerate().take(self.coupling.count) {
                accumulate(target, factor, &values[(self.first + m) & (T - 1)]);
            }
        }
        out
    }

    #[inline(always)]
    fn write<const N: usize, const Z: usize>(
        &self,
        components: &[[f64; N]; Z],
        stride: usize,
        out: &mut [[f64; N]],
    ) {
        let mut entries = self.coupling.entries.iter();
        let mut terms = self.coupling.terms.as_slice();
        let (rows, columns) = (2 * self.l.0 + 1, 2 * self.l.1 + 1);
        let begin = self.row * stride + self.column;
        for i in 0..rows {
            let from = if self.coupling.symmetric { i } else { 0 };
            for (j, &count) in (from..columns).zip(&mut entries) {
                let mut sum = [0.0; N];
                for &(component, weight) in next(&mut terms, count) {
                    accumulate(
                        &mut sum,
                        weight,
                        &components[usize::from(component) & (Z - 1)],
                    );
                }
                out[begin + i * stride + j] = sum;
                if self.coupling.symmetric {
                    out[begin + j * stride + i] = sum;
                }
            }
        }
    }
}
