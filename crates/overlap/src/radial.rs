//! The diatomic integrals of a pair of atoms as functions of the distance.
//!
//! Work is shared by sets: all integrals with the same two exponents (and the same n + n′) use the
//! same auxiliary integrals. With s = ζ+ζ′, δ = ζ−ζ′, p = Rs/2, β = Rδ/2 and N = n+n′+1 an integral
//! is C e^(−p) Σ t_ij [a_i(p) p^(N−1−i)] B_j(β), or, about the tighter centre,
//! C e^(−R min(ζ,ζ′)) Σ t_ij [i! p^(N−1−i)] V_j(|β|): no division by R anywhere, so R = 0 is an
//! ordinary point. C and the contraction coefficients are folded into the t_ij.

use crate::auxiliary::{SWITCH, a_integrals, b_integrals, v_integrals};
use crate::lanes::{accumulate, exp_negative, mul, next};
use crate::polynomial::{Monomial, Quantum, shifted, spheroidal};
use crate::shell::{factorial, integer_power};

/// Distances beyond this (bohr) are treated as this; every overlap has long vanished.
const FARTHEST_BOHR: f64 = 1.0e4;

/// Several diatomic integrals as sums Σ_i f_i Σ_j t_ij g_j.
#[derive(Clone, Debug, Default)]
struct Table {
    /// For each integral: where its value goes and how many rows it has.
    integrals: Vec<(u8, u8)>,
    /// For each row: i and how many terms it has.
    rows: Vec<(u8, u8)>,
    /// (j, t_ij).
    terms: Vec<(u8, f64)>,
}

impl Table {
    fn push(&mut self, target: u8, monomials: &[Monomial], factor: impl Fn(&Monomial) -> f64) {
        let mut rows = 0;
        for row in monomials.chunk_by(|a, b| a.first == b.first) {
            self.rows.push((row[0].first, row.len() as u8));
            let term = |monomial: &Monomial| (monomial.second, factor(monomial));
            self.terms.extend(row.iter().map(term));
            rows += 1;
        }
        self.integrals.push((target, rows));
    }

    /// `values[target] += scaling · Σ f t g`, and with a derivative
    /// `slopes[target] += scaling · Σ (f′ t g + f t g′)`, where g′_j = `turn` · g_(j+1).
    #[inline(always)]
    fn add<const N: usize, const K: usize, const T: usize, const DERIVATIVE: bool>(
        &self,
        [first, first_slope, second]: [&[[f64; N]; K]; 3],
        turn: f64,
        scaling: &[f64; N],
        [values, slopes]: [&mut [[f64; N]; T]; 2],
    ) {
        let mut rows = self.rows.as_slice();
        let mut terms = self.terms.as_slice();
        for &(target, count) in &self.integrals {
            let (mut sum, mut slope) = ([0.0; N], [0.0; N]);
            for &(i, count) in next(&mut rows, count) {
                let (mut inner, mut turned) = ([0.0; N], [0.0; N]);
                for &(j, coefficient) in next(&mut terms, count) {
                    let j = usize::from(j) & (K - 1);
                    accumulate(&mut inner, coefficient, &second[j]);
                    if DERIVATIVE {
                        accumulate(&mut turned, coefficient, &second[(j + 1) & (K - 1)]);
                    }
                }
                let i = usize::from(i) & (K - 1);
                for lane in 0..N {
                    sum[lane] += first[i][lane] * inner[lane];
                    if DERIVATIVE {
                        let along = first_slope[i][lane] * inner[lane];
                        slope[lane] += along + (turn * first[i][lane]) * turned[lane];
                    }
                }
            }
            let target = usize::from(target) & (T - 1);
            for lane in 0..N {
                values[target][lane] += sum[lane] * scaling[lane];
                if DERIVATIVE {
                    slopes[target][lane] += slope[lane] * scaling[lane];
                }
            }
        }
    }
}

/// All integrals with one pair of exponents and one n + n′.
#[derive(Clone, Debug)]
struct Set {
    zeta_a: f64,
    zeta_b: f64,
    /// n + n′ = N − 1.
    degree: usize,
    spheroidal: Table,
    shifted: Table,
}

impl Set {
    fn push(&mut self, quantum: Quantum, target: u8, coefficient: f64) {
        let (zeta_a, zeta_b) = (self.zeta_a, self.zeta_b);
        let norm = coefficient * norm(quantum, zeta_a, zeta_b);
        self.spheroidal
            .push(target, spheroidal(quantum), |t| norm * t.coefficient as f64);
        // About B the picture is mirrored: both l change sign with z.
        let (about_tighter, sign) = if zeta_a >= zeta_b {
            (quantum, 1.0)
        } else {
            (
                quantum.swapped(),
                if (quantum.l_a + quantum.l_b).is_multiple_of(2) {
                    1.0
                } else {
                    -1.0
                },
            )
        };
        self.shifted.push(target, shifted(about_tighter), |t| {
            (sign * norm) * (t.coefficient as f64 * factorial(t.first))
        });
    }

    /// Adds this set's share of the integrals (and of their derivatives with respect to R).
    #[inline(always)]
    fn add<const N: usize, const K: usize, const T: usize, const DERIVATIVE: bool>(
        &self,
        distance: &[f64; N],
        values: &mut [[f64; N]; T],
        slopes: &mut [[f64; N]; T],
    ) {
        let half_sum = 0.5 * (self.zeta_a + self.zeta_b);
        let half_difference = 0.5 * (self.zeta_a - self.zeta_b);
        let (mut p, mut beta, mut size) = ([0.0; N], [0.0; N], [0.0; N]);
        let (mut smallest, mut largest) = (f64::INFINITY, 0.0);
        for lane in 0..N {
            p[lane] = half_sum * distance[lane];
            beta[lane] = half_difference * distance[lane];
            size[lane] = beta[lane].abs();
            smallest = if size[lane] < smallest {
                size[lane]
            } else {
                smallest
            };
            largest = if size[lane] > largest {
                size[lane]
            } else {
                largest
            };
        }
        let degree = self.degree.min(K - 2);
        let top = degree + usize::from(DERIVATIVE);
        let (mut a, mut powers) = ([[0.0; N]; K], [[0.0; N]; K]);
        a_integrals(&p, degree, &mut a, &mut powers);
        let (mut first, mut first_slope) = ([[0.0; N]; K], [[0.0; N]; K]);
        let mut second = [[0.0; N]; K];
        // A lane outside a branch gets the factor 0 there: its share is an exact zero.
        if smallest <= SWITCH {
            b_integrals(&beta, top, &mut second);
            let mut exponent = [0.0; N];
            for lane in 0..N {
                exponent[lane] = -p[lane];
            }
            let mut scaling = exp_negative(&exponent);
            for lane in 0..N {
                scaling[lane] = if size[lane] <= SWITCH {
                    scaling[lane]
                } else {
                    0.0
                };
            }
            for i in 0..=degree {
                first[i] = mul(&a[i], &powers[degree - i]);
                if DERIVATIVE {
                    // d/dR of e^(−p) a_i p^(N−1−i), times e^p.
                    let rest = (degree - i) as f64;
                    let below = &powers[(degree - i).max(1) - 1];
                    for lane in 0..N {
                        let slope = rest * (a[i][lane] * below[lane]) - powers[degree][lane];
                        first_slope[i][lane] = half_sum * slope;
                    }
                }
            }
            let factors = [&first, &first_slope, &second];
            let turn = -half_difference;
            self.spheroidal
                .add::<N, K, T, DERIVATIVE>(factors, turn, &scaling, [values, slopes]);
        }
        if largest > SWITCH {
            let smaller = self.zeta_a.min(self.zeta_b);
            let (mut exponent, mut edge) = ([0.0; N], [0.0; N]);
            for lane in 0..N {
                exponent[lane] = -(smaller * distance[lane]);
                edge[lane] = -2.0 * size[lane];
            }
            let mut scaling = exp_negative(&exponent);
            let edge = exp_negative(&edge);
            for lane in 0..N {
                scaling[lane] = if size[lane] > SWITCH {
                    scaling[lane]
                } else {
                    0.0
                };
            }
            v_integrals(&size, &edge, top, &mut second);
            for i in 0..=degree {
                first[i] = powers[degree - i];
                if DERIVATIVE {
                    let rest = half_sum * (degree - i) as f64;
                    let below = &powers[(degree - i).max(1) - 1];
                    for lane in 0..N {
                        first_slope[i][lane] =
                            rest * below[lane] - smaller * powers[degree - i][lane];
                    }
                }
            }
            let factors = [&first, &first_slope, &second];
            let turn = -half_difference.abs();
            self.shifted
                .add::<N, K, T, DERIVATIVE>(factors, turn, &scaling, [values, slopes]);
        }
    }
}

/// Normalisation of both functions, of the angular parts and of the length unit.
fn norm(q: Quantum, zeta_a: f64, zeta_b: f64) -> f64 {
    let sum = zeta_a + zeta_b;
    let radial = integer_power(2.0 * zeta_a / sum, 2 * i32::from(q.n_a) + 1)
        * integer_power(2.0 * zeta_b / sum, 2 * i32::from(q.n_b) + 1);
    // The Legendre polynomials came times 2^l.
    let legendre = |l: u8| {
        f64::from(2 * l + 1) / 2.0 * factorial(l - q.m)
            / (factorial(l + q.m) * integer_power(4.0, i32::from(l)))
    };
    let angular = legendre(q.l_a) * legendre(q.l_b);
    let factorials = factorial(2 * q.n_a) * factorial(2 * q.n_b);
    (radial * angular / factorials).sqrt()
}

/// The sets of one pair of atoms.
#[derive(Clone, Debug, Default)]
pub(crate) struct RadialKernel {
    sets: Vec<Set>,
    /// Number of integrals.
    pub(crate) integrals: usize,
    /// Largest n + n′.
    pub(crate) degree: usize,
}

impl RadialKernel {
    /// Adds `coefficient` times the integral of two primitives to integral number `target`.
    pub(crate) fn push(
        &mut self,
        quantum: Quantum,
        zeta_a: f64,
        zeta_b: f64,
        coefficient: f64,
        target: u8,
    ) {
        let degree = quantum.degree();
        let same = |set: &Set| {
            set.zeta_a.to_bits() == zeta_a.to_bits()
                && set.zeta_b.to_bits() == zeta_b.to_bits()
                && set.degree == degree
        };
        let at = self.sets.iter().position(same).unwrap_or_else(|| {
            let (spheroidal, shifted) = (Table::default(), Table::default());
            self.sets.push(Set {
                zeta_a,
                zeta_b,
                degree,
                spheroidal,
                shifted,
            });
            self.sets.len() - 1
        });
        self.sets[at].push(quantum, target, coefficient);
        self.integrals = self.integrals.max(usize::from(target) + 1);
        self.degree = self.degree.max(degree);
    }

    /// Values (and slopes dS/dR when `DERIVATIVE`) of all integrals at N distances. `K` and `T`
    /// are powers of two, at least `degree + 2` and `integrals`.
    #[inline(always)]
    pub(crate) fn evaluate<
        const N: usize,
        const K: usize,
        const T: usize,
        const DERIVATIVE: bool,
    >(
        &self,
        distance: &[f64; N],
        values: &mut [[f64; N]; T],
        slopes: &mut [[f64; N]; T],
    ) {
        let mut cut = *distance;
        for value in &mut cut {
            *value = if *value > FARTHEST_BOHR {
                FARTHEST_BOHR
            } else {
                *value
            };
        }
        for set in &self.sets {
            set.add::<N, K, T, DERIVATIVE>(&cut, values, slopes);
        }
    }
}
