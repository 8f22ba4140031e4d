//! The diatomic integrals of a pair of atoms as functions of the distance.
//!
//! Work is shared by sets: all integrals with the same two exponents (and the same n + n′) use the
//! same auxiliary integrals. With s = ζ+ζ′, δ = ζ−ζ′, p = Rs/2, β = Rδ/2 and N = n+n′+1 an integral
//! is C e^(−p) Σ t_ij [a_i(p) p^(N−1−i)] B_j(β), or, about the tighter centre,
//! C e^(−R min(ζ,ζ′)) Σ t_ij [i! p^(N−1−i)] V_j(|β|): no division by R anywhere, so R = 0 is an
//! ordinary point. C and the contraction coefficients are folded into the t_ij.

use crate::auxiliary::{ORDERS, SWITCH, a_integrals, b_integrals, v_integrals};
use crate::lanes::{accumulate, exp_negative};
use crate::polynomial::{Monomial, Quantum, shifted, spheroidal};
use crate::shell::{factorial, integer_power};

/// Distances beyond this (bohr) are treated as this; every overlap has long vanished.
const FARTHEST_BOHR: f64 = 1.0e4;

/// Sum of products of the auxiliary integrals for several diatomic integrals.
#[derive(Clone, Debug, Default)]
struct Table {
    /// Distinct (i, j) in use.
    products: Vec<(u8, u8)>,
    /// For each integral: where its value goes, and the end of its terms.
    integrals: Vec<(usize, usize)>,
    /// (index of the product, coefficient).
    terms: Vec<(u8, f64)>,
}

impl Table {
    fn push(&mut self, target: usize, monomials: &[Monomial], factor: impl Fn(&Monomial) -> f64) {
        for monomial in monomials {
            let key = (monomial.first as u8, monomial.second as u8);
            let found = self.products.iter().position(|product| *product == key);
            let index = found.unwrap_or_else(|| {
                self.products.push(key);
                self.products.len() - 1
            });
            self.terms.push((index as u8, factor(monomial)));
        }
        self.integrals.push((target, self.terms.len()));
    }

    /// `values[target] += scaling · Σ t · product`, in lanes where `active`.
    #[inline(always)]
    fn accumulate<const N: usize, const P: usize, const T: usize>(
        &self,
        products: &[[f64; N]; P],
        scaling: &[f64; N],
        active: &[bool; N],
        values: &mut [[f64; N]; T],
    ) {
        let mut start = 0;
        for &(target, end) in &self.integrals {
            let mut sum = [0.0; N];
            for &(index, coefficient) in &self.terms[start..end] {
                accumulate(
                    &mut sum,
                    coefficient,
                    &products[usize::from(index) & (P - 1)],
                );
            }
            start = end;
            let value = &mut values[target & (T - 1)];
            for lane in 0..N {
                let term = sum[lane] * scaling[lane];
                value[lane] += if active[lane] { term } else { 0.0 };
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
    fn push(&mut self, quantum: Quantum, target: usize, coefficient: f64) {
        let (zeta_a, zeta_b) = (self.zeta_a, self.zeta_b);
        let norm = coefficient * norm(quantum, zeta_a, zeta_b);
        self.spheroidal.push(target, &spheroidal(quantum), |t| {
            norm * t.coefficient as f64
        });
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
        self.shifted.push(target, &shifted(about_tighter), |t| {
            (sign * norm) * (t.coefficient as f64 * factorial(t.first as u8))
        });
    }

    /// Adds this set's share of the integrals (and of their derivatives with respect to R).
    #[inline(always)]
    fn add<const N: usize, const P: usize, const T: usize, const DERIVATIVE: bool>(
        &self,
        distance: &[f64; N],
        values: &mut [[f64; N]; T],
        slopes: &mut [[f64; N]; T],
    ) {
        let half_sum = 0.5 * (self.zeta_a + self.zeta_b);
        let half_difference = 0.5 * (self.zeta_a - self.zeta_b);
        let (mut p, mut beta, mut size) = ([0.0; N], [0.0; N], [0.0; N]);
        let mut near = [false; N];
        let (mut any_near, mut any_far) = (false, false);
        for lane in 0..N {
            p[lane] = half_sum * distance[lane];
            beta[lane] = half_difference * distance[lane];
            size[lane] = beta[lane].abs();
            near[lane] = size[lane] <= SWITCH;
            any_near |= near[lane];
            any_far |= !near[lane];
        }
        let degree = self.degree.min(ORDERS - 2);
        let (mut a, mut powers) = ([[0.0; N]; ORDERS], [[0.0; N]; ORDERS]);
        a_integrals(&p, degree, &mut a, &mut powers);
        let mut second = [[0.0; N]; ORDERS];
        let mut products = [[0.0; N]; P];
        let mut products_slope = [[0.0; N]; P];
        let top = degree + usize::from(DERIVATIVE);
        if any_near {
            b_integrals(&beta, top, &mut second);
            let mut exponent = [0.0; N];
            for lane in 0..N {
                exponent[lane] = -p[lane];
            }
            let scaling = exp_negative(&exponent);
            for (at, &(i, j)) in self.spheroidal.products.iter().enumerate() {
                let (i, j) = (usize::from(i).min(degree), usize::from(j).min(degree));
                let power = &powers[degree - i];
                let product = &mut products[at & (P - 1)];
                for lane in 0..N {
                    product[lane] = (a[i][lane] * power[lane]) * second[j][lane];
                }
                if DERIVATIVE {
                    let rest = (degree - i) as f64;
                    let below = &powers[(degree - i).max(1) - 1];
                    let slope = &mut products_slope[at & (P - 1)];
                    for lane in 0..N {
                        // d/dp of e^(−p) a_i p^(N−1−i), times e^p.
                        let first = rest * (a[i][lane] * below[lane]) - powers[degree][lane];
                        slope[lane] = half_sum * (first * second[j][lane])
                            - half_difference * ((a[i][lane] * power[lane]) * second[j + 1][lane]);
                    }
                }
            }
            self.spheroidal
                .accumulate(&products, &scaling, &near, values);
            if DERIVATIVE {
                self.spheroidal
                    .accumulate(&products_slope, &scaling, &near, slopes);
            }
        }
        if any_far {
            let smaller = self.zeta_a.min(self.zeta_b);
            let half_difference = half_difference.abs();
            let mut far = [false; N];
            let (mut exponent, mut edge) = ([0.0; N], [0.0; N]);
            for lane in 0..N {
                far[lane] = !near[lane];
                exponent[lane] = -(smaller * distance[lane]);
                edge[lane] = -2.0 * size[lane];
            }
            let scaling = exp_negative(&exponent);
            let edge = exp_negative(&edge);
            v_integrals(&size, &edge, top, &mut second);
            for (at, &(i, j)) in self.shifted.products.iter().enumerate() {
                let (i, j) = (usize::from(i).min(degree), usize::from(j).min(degree));
                let power = &powers[degree - i];
                let product = &mut products[at & (P - 1)];
                for lane in 0..N {
                    product[lane] = power[lane] * second[j][lane];
                }
                if DERIVATIVE {
                    let rest = half_sum * (degree - i) as f64;
                    let below = &powers[(degree - i).max(1) - 1];
                    let slope = &mut products_slope[at & (P - 1)];
                    for lane in 0..N {
                        let first = rest * below[lane] - smaller * power[lane];
                        slope[lane] = first * second[j][lane]
                            - half_difference * (power[lane] * second[j + 1][lane]);
                    }
                }
            }
            self.shifted.accumulate(&products, &scaling, &far, values);
            if DERIVATIVE {
                self.shifted
                    .accumulate(&products_slope, &scaling, &far, slopes);
            }
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
    /// Largest number of distinct products in a set.
    pub(crate) widest: usize,
}

impl RadialKernel {
    /// Adds `coefficient` times the integral of two primitives to integral number `target`.
    pub(crate) fn push(
        &mut self,
        quantum: Quantum,
        zeta_a: f64,
        zeta_b: f64,
        coefficient: f64,
        target: usize,
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
        let set = &mut self.sets[at];
        set.push(quantum, target, coefficient);
        self.integrals = self.integrals.max(target + 1);
        let widest = set
            .spheroidal
            .products
            .len()
            .max(set.shifted.products.len());
        self.widest = self.widest.max(widest);
    }

    /// Values (and slopes dS/dR when `DERIVATIVE`) of all integrals at N distances. `P` and `T`
    /// are powers of two, at least `widest` and `integrals`.
    #[inline(always)]
    pub(crate) fn evaluate<
        const N: usize,
        const P: usize,
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
            set.add::<N, P, T, DERIVATIVE>(&cut, values, slopes);
        }
    }
}
