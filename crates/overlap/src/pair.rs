//! Blocks of overlaps between the shells of two atoms.

use crate::OverlapError;
use crate::angular::{solid_harmonics, tangential_gradient};
use crate::coupling::Coupling;
use crate::lanes::{LANES, Lanes};
use crate::polynomial::Quantum;
use crate::radial::RadialKernel;
use crate::shell::Shell;
use crate::spread::{Direction, ShellPair};

/// Below this distance (bohr) the direction is taken as z and S_L/R as its limit.
const TOUCHING_BOHR: f64 = 1.0e-8;
/// A contraction farther from ⟨χ|χ⟩ = 1 than this is refused.
const NORM_TOLERANCE: f64 = 1.0e-6;
/// Largest number of diatomic integrals of one part.
const MOST_INTEGRALS: usize = 32;

/// Everything about a pair of atoms that does not depend on the geometry.
///
/// Rows of a block are the functions of A in the order of its shells, columns those of B,
/// row-major; within a shell the order of [`crate::harmonics`]. Displacements are R_B − R_A in
/// bohr.
///
/// The distance itself is not judged here: atoms on top of each other give the one-centre overlaps.
#[derive(Clone)]
pub struct PairKernel {
    parts: Vec<Part>,
    rows: usize,
    columns: usize,
    arch: pulp::Arch,
}

/// Shell pairs that share a workspace; one part is enough for all but very large bases.
#[derive(Clone, Default)]
struct Part {
    radial: RadialKernel,
    pairs: Vec<ShellPair>,
    /// Highest degree of the harmonics of the direction, for blocks and for gradients.
    degree: usize,
    gradient_degree: usize,
}

impl core::fmt::Debug for PairKernel {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        f.debug_struct("PairKernel")
            .field("rows", &self.rows)
            .field("columns", &self.columns)
            .finish_non_exhaustive()
    }
}

impl PairKernel {
    /// Tables for the shells of atom A and atom B.
    ///
    /// # Errors
    /// Quantum numbers, exponents or coefficients out of range; a contraction that is not
    /// normalised.
    pub fn new(a: &[Shell], b: &[Shell]) -> Result<Self, OverlapError> {
        for shell in a.iter().chain(b) {
            shell.check()?;
            let norm_squared = shell.norm_squared();
            if norm_squared.is_nan() || (norm_squared - 1.0).abs() > NORM_TOLERANCE {
                return Err(OverlapError::Norm {
                    n: shell.n,
                    l: shell.l,
                    norm_squared,
                });
            }
        }
        let mut parts = Vec::new();
        let mut part = Part::default();
        let mut row = 0;
        for left in a {
            let mut column = 0;
            for right in b {
                let coupling = Coupling::of(usize::from(left.l), usize::from(right.l));
                if part.radial.integrals + coupling.count > MOST_INTEGRALS {
                    parts.push(core::mem::take(&mut part));
                }
                part.push(left, right, (row, column), coupling);
                column += right.functions();
            }
            row += left.functions();
        }
        parts.push(part);
        let columns = b.iter().map(Shell::functions).sum();
        let arch = pulp::Arch::new();
        Ok(Self {
            parts,
            rows: row,
            columns,
            arch,
        })
    }

    /// Number of functions of A.
    pub fn rows(&self) -> usize {
        self.rows
    }

    /// Number of functions of B.
    pub fn columns(&self) -> usize {
        self.columns
    }

    /// Overlaps of one geometry: `out` holds rows × columns numbers, row-major (more are left
    /// alone; with fewer nothing is written, which debug builds report).
    pub fn block(&self, displacement_bohr: [f64; 3], out: &mut [f64]) {
        self.arch.dispatch(Fill::<1, false> {
            kernel: self,
            displacement: &displacement_bohr.map(|c| [c]),
            out: out.as_chunks_mut::<1>().0,
            gradient: &mut [],
        });
    }

    /// Overlaps of [`crate::LANES`] geometries at once, each with the bits of [`Self::block`].
    pub fn block_lanes(&self, displacement_bohr: &[Lanes; 3], out: &mut [Lanes]) {
        self.arch.dispatch(Fill::<LANES, false> {
            kernel: self,
            displacement: displacement_bohr,
            out,
            gradient: &mut [],
        });
    }

    /// Overlaps and their derivatives with respect to the displacement (bohr⁻¹): `gradient` holds
    /// three blocks, ∂/∂x, ∂/∂y, ∂/∂z.
    ///
    /// Closed form: the derivative of the diatomic integrals along the bond and of the harmonics
    /// of its direction across it.
    pub fn gradient(&self, displacement_bohr: [f64; 3], out: &mut [f64], gradient: &mut [f64]) {
        self.arch.dispatch(Fill::<1, true> {
            kernel: self,
            displacement: &displacement_bohr.map(|c| [c]),
            out: out.as_chunks_mut::<1>().0,
            gradient: gradient.as_chunks_mut::<1>().0,
        });
    }

    /// As [`Self::gradient`] for [`crate::LANES`] geometries at once, with the same bits.
    pub fn gradient_lanes(
        &self,
        displacement_bohr: &[Lanes; 3],
        out: &mut [Lanes],
        gradient: &mut [Lanes],
    ) {
        self.arch.dispatch(Fill::<LANES, true> {
            kernel: self,
            displacement: displacement_bohr,
            out,
            gradient,
        });
    }

    #[inline(always)]
    fn run<const N: usize, const DERIVATIVE: bool>(
        &self,
        displacement: &[[f64; N]; 3],
        out: &mut [[f64; N]],
        gradient: &mut [[f64; N]],
    ) {
        let needed = self.rows * self.columns;
        let enough = out.len() >= needed && (!DERIVATIVE || gradient.len() >= 3 * needed);
        debug_assert!(enough, "a block of this pair has {needed} numbers");
        if !enough {
            return;
        }
        let gradient = if DERIVATIVE {
            &mut gradient[..3 * needed]
        } else {
            gradient
        };
        for part in &self.parts {
            match (
                part.radial.degree,
                part.radial.integrals,
                part.gradient_degree,
            ) {
                (0..=6, 0..=8, 0..=2) => {
                    part.fill::<N, 8, 8, 9, 8, DERIVATIVE>(
                        displacement,
                        self.columns,
                        out,
                        gradient,
                    );
                }
                (_, 0..=16, 0..=4) => {
                    part.fill::<N, 16, 16, 25, 16, DERIVATIVE>(
                        displacement,
                        self.columns,
                        out,
                        gradient,
                    );
                }
                _ => {
                    part.fill::<N, 16, 32, 49, 32, DERIVATIVE>(
                        displacement,
                        self.columns,
                        out,
                        gradient,
                    );
                }
            }
        }
    }
}

/// One call of a kernel, as what is compiled for each SIMD level. (A closure would do in principle,
/// but it is not inlined into the compiled-for-SIMD function and stays at the base level.)
struct Fill<'a, const N: usize, const DERIVATIVE: bool> {
    kernel: &'a PairKernel,
    displacement: &'a [[f64; N]; 3],
    out: &'a mut [[f64; N]],
    gradient: &'a mut [[f64; N]],
}

impl<const N: usize, const DERIVATIVE: bool> pulp::WithSimd for Fill<'_, N, DERIVATIVE> {
    type Output = ();

    #[inline(always)]
    fn with_simd<S: pulp::Simd>(self, _simd: S) {
        self.kernel
            .run::<N, DERIVATIVE>(self.displacement, self.out, self.gradient);
    }
}

impl Part {
    /// The integrals of two shells, contracted, and their place in the block.
    fn push(&mut self, a: &Shell, b: &Shell, place: (usize, usize), coupling: &'static Coupling) {
        let first = self.radial.integrals;
        for m in 0..=a.l.min(b.l) {
            let quantum = Quantum {
                n_a: a.n,
                l_a: a.l,
                n_b: b.n,
                l_b: b.l,
                m,
            };
            for s in &a.terms {
                for t in &b.terms {
                    let coefficient = s.coefficient * t.coefficient;
                    self.radial
                        .push(quantum, s.zeta, t.zeta, coefficient, first as u8 + m);
                }
            }
        }
        let pair = ShellPair::new((a.l.into(), b.l.into()), place, first, coupling);
        self.degree = self.degree.max(pair.degree());
        self.gradient_degree = self.gradient_degree.max(usize::from(a.l + b.l));
        self.pairs.push(pair);
    }

    /// `K`, `T`, `Y`, `Z`: room for auxiliary integrals, diatomic integrals, harmonics and the
    /// components of a shell pair.
    #[inline(always)]
    fn fill<
        const N: usize,
        const K: usize,
        const T: usize,
        const Y: usize,
        const Z: usize,
        const DERIVATIVE: bool,
    >(
        &self,
        displacement: &[[f64; N]; 3],
        stride: usize,
        out: &mut [[f64; N]],
        gradient: &mut [[f64; N]],
    ) {
        let mut distance = [0.0; N];
        let mut inverse = [0.0; N];
        let mut unit = [[0.0; N]; 3];
        for lane in 0..N {
            let [x, y, z] = [
                displacement[0][lane],
                displacement[1][lane],
                displacement[2][lane],
            ];
            let length = (x * x + y * y + z * z).sqrt();
            let touching = length < TOUCHING_BOHR;
            distance[lane] = length;
            inverse[lane] = if touching { 0.0 } else { 1.0 / length };
            unit[0][lane] = x * inverse[lane];
            unit[1][lane] = y * inverse[lane];
            unit[2][lane] = if touching { 1.0 } else { z * inverse[lane] };
        }
        let mut values = [[0.0; N]; T];
        let mut slopes = [[0.0; N]; T];
        self.radial
            .evaluate::<N, K, T, DERIVATIVE>(&distance, &mut values, &mut slopes);
        let mut harmonics = [[0.0; N]; Y];
        let degree = if DERIVATIVE {
            self.gradient_degree
        } else {
            self.degree
        };
        // Pairs of s functions alone read no harmonic, their gradient reads the first one.
        if degree > 0 || DERIVATIVE {
            solid_harmonics(&unit, degree, &mut harmonics);
        }
        let direction = Direction {
            unit: &unit,
            inverse: &inverse,
            harmonics: &harmonics,
        };
        for pair in &self.pairs {
            pair.spread::<N, T, Y, Z>(&values, &direction, stride, out);
        }
        if DERIVATIVE {
            let mut tangential = [[[0.0; N]; Y]; 3];
            tangential_gradient(&unit, degree, &harmonics, &mut tangential);
            let size = (gradient.len() / 3).max(1);
            for pair in &self.pairs {
                pair.spread_slope::<N, T, Y, Z>(
                    (&values, &slopes),
                    &direction,
                    &tangential,
                    (stride, size),
                    gradient,
                );
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::{Primitive, Term, slater_overlap};

    fn metal() -> Vec<Shell> {
        let d = vec![
            Term {
                zeta: 5.95,
                coefficient: 0.55,
            },
            Term {
                zeta: 2.3,
                coefficient: 0.62,
            },
        ];
        let d = Shell {
            n: 3,
            l: 2,
            terms: d,
        };
        vec![
            Shell::single(4, 0, 2.1),
            Shell::single(4, 1, 2.1),
            d.normalised().unwrap(),
            Shell::single(4, 3, 7.0),
        ]
    }

    fn light() -> Vec<Shell> {
        vec![Shell::single(2, 0, 1.625), Shell::single(2, 1, 1.625)]
    }

    /// Displacements that take every branch, a touching pair among them.
    const PLACES: [[f64; 8]; 3] = [
        [0.0, 0.0, 1.0, -2.2, 0.3, 9.0, -30.0, 0.01],
        [0.0, 0.0, -0.5, 1.1, 0.2, -3.0, 1.0, 0.02],
        [0.0, 1.5, 0.7, 0.4, -0.1, 5.0, 0.5, 0.0],
    ];

    #[test]
    fn p_block_is_the_textbook_form() {
        // S_ij = S_π δ_ij + (S_σ − S_π) e_i e_j.
        let kernel = PairKernel::new(&light(), &light()).unwrap();
        let vector = [1.0, -0.4, 2.0];
        let r = vector.iter().map(|c| c * c).sum::<f64>().sqrt();
        let p = Primitive {
            n: 2,
            l: 1,
            zeta: 1.625,
        };
        let sigma = slater_overlap(p, p, 0, r).unwrap();
        let pi = slater_overlap(p, p, 1, r).unwrap();
        let mut block = [0.0; 16];
        kernel.block(vector, &mut block);
        let axes = [2, 0, 1];
        for i in 0..3 {
            for j in 0..3 {
                let isotropic = if i == j { pi } else { 0.0 };
                let product = vector[axes[i]] * vector[axes[j]] / (r * r);
                let expected = isotropic + (sigma - pi) * product;
                assert!((block[(i + 1) * 4 + j + 1] - expected).abs() < 1e-15);
            }
        }
    }

    #[test]
    fn lanes_have_the_bits_of_single_geometries() {
        for (a, b) in [(light(), light()), (metal(), light()), (metal(), metal())] {
            let kernel = PairKernel::new(&a, &b).unwrap();
            let size = kernel.rows() * kernel.columns();
            let mut lanes = vec![[0.0; 8]; size];
            let mut slopes = vec![[0.0; 8]; 3 * size];
            kernel.block_lanes(&PLACES, &mut lanes);
            let (mut value, mut slope) = (vec![0.0; size], vec![0.0; 3 * size]);
            for lane in 0..8 {
                let place = PLACES.map(|axis| axis[lane]);
                kernel.block(place, &mut value);
                for (one, many) in value.iter().zip(&lanes) {
                    assert_eq!(one.to_bits(), many[lane].to_bits());
                }
                kernel.gradient_lanes(&PLACES, &mut lanes, &mut slopes);
                kernel.gradient(place, &mut value, &mut slope);
                for (one, many) in value.iter().zip(&lanes).chain(slope.iter().zip(&slopes)) {
                    assert_eq!(one.to_bits(), many[lane].to_bits());
                    assert!(one.is_finite());
                }
            }
        }
    }

    #[test]
    fn s_functions_alone_have_a_slope() {
        // 1s with 1s: S = e^(−p)(1 + p + p²/3), dS/dR = −ζ e^(−p)(p + p²)/3, p = ζR (Mulliken et al.,
        // J. Chem. Phys. 17, 1248 (1949)).
        let hydrogen = vec![Shell::single(1, 0, 1.3)];
        let kernel = PairKernel::new(&hydrogen, &hydrogen).unwrap();
        let place = [0.6, -1.2, 1.9];
        let r = place.iter().map(|x| x * x).sum::<f64>().sqrt();
        let p: f64 = 1.3 * r;
        let slope = -1.3 * (-p).exp() * (p + p * p) / 3.0;
        let (mut value, mut gradient) = ([0.0; 1], [0.0; 3]);
        kernel.gradient(place, &mut value, &mut gradient);
        for (found, x) in gradient.iter().zip(place) {
            assert!((found - slope * x / r).abs() < 1e-14, "{gradient:?}");
        }
    }

    #[test]
    fn exchange_is_the_transpose() {
        let forth = PairKernel::new(&metal(), &light()).unwrap();
        let back = PairKernel::new(&light(), &metal()).unwrap();
        let (mut s, mut t) = (vec![0.0; 64], vec![0.0; 64]);
        forth.block([0.9, 1.4, -0.8], &mut s);
        back.block([-0.9, -1.4, 0.8], &mut t);
        for i in 0..16 {
            for j in 0..4 {
                assert!((s[i * 4 + j] - t[j * 16 + i]).abs() < 2e-15);
            }
        }
    }

    #[test]
    fn touching_atoms_give_one_centre_overlaps() {
        let kernel = PairKernel::new(&metal(), &metal()).unwrap();
        let mut block = vec![0.0; 256];
        for place in [[0.0; 3], [0.0, 1e-200, 0.0], [1e-9, 0.0, 0.0]] {
            kernel.block(place, &mut block);
            for i in 0..16 {
                for j in 0..16 {
                    let expected = if i == j { 1.0 } else { 0.0 };
                    assert!((block[i * 16 + j] - expected).abs() < 1e-7, "{i} {j}");
                }
            }
        }
    }

    #[test]
    fn refusals() {
        let wide = Shell {
            n: 2,
            l: 0,
            terms: vec![Term {
                zeta: 1.0,
                coefficient: 1.1,
            }],
        };
        assert!(matches!(
            PairKernel::new(&[wide], &light()),
            Err(OverlapError::Norm { .. })
        ));
    }

    #[test]
    fn a_large_basis_is_split_into_parts() {
        // Nine f shells on each atom: every sub-block is that of one pair of shells.
        let zeta = |k: usize| 1.0 + 0.3 * k as f64;
        let many: Vec<Shell> = (0..9).map(|k| Shell::single(4, 3, zeta(k))).collect();
        let kernel = PairKernel::new(&many, &many).unwrap();
        let mut block = vec![0.0; 63 * 63];
        kernel.block([1.0, 0.2, -0.7], &mut block);
        let one = PairKernel::new(&many[7..8], &many[2..3]).unwrap();
        let mut small = vec![0.0; 49];
        one.block([1.0, 0.2, -0.7], &mut small);
        for i in 0..7 {
            for j in 0..7 {
                let (whole, part) = (block[(49 + i) * 63 + 14 + j], small[i * 7 + j]);
                assert_eq!(whole.to_bits(), part.to_bits());
            }
        }
    }
}
