//! Real solid harmonics up to degree 6 on N directions at once, with their gradients.
//!
//! Racah normalisation: each value is √(4π/(2L+1)) times the normalised harmonic, so that the
//! m = 0 member is 1 along z. Order within a degree: 0, +1, −1, +2, −2, …

use std::sync::OnceLock;

use crate::lanes::{accumulate, mul, scale};

/// Highest degree: the product of two f functions.
pub(crate) const MAX_DEGREE: usize = 6;
const SIZE: usize = MAX_DEGREE + 1;

/// Index of (degree, order within the degree) in the flat list.
pub(crate) const fn index(degree: usize, m: usize, sine: bool) -> usize {
    let position = if m == 0 { 0 } else { 2 * m - 1 + sine as usize };
    degree * degree + position
}

/// Constants of the recursions; they hold nothing but square roots of rationals.
struct Recursion {
    /// Value of the (m, m) member divided by (x+iy)^m.
    start: [f64; SIZE],
    /// Three-term recursion in the degree: q(L) = up · z · q(L−1) − back · q(L−2).
    up: [[f64; SIZE]; SIZE],
    back: [[f64; SIZE]; SIZE],
    /// ∂/∂z of (L, m) in terms of (L−1, m).
    along: [[f64; SIZE]; SIZE],
    /// ∂/∂x and ∂/∂y of (L, m) in terms of (L−1, m+1) and (L−1, m−1).
    raise: [[f64; SIZE]; SIZE],
    lower: [[f64; SIZE]; SIZE],
}

fn recursion() -> &'static Recursion {
    static RECURSION: OnceLock<Recursion> = OnceLock::new();
    RECURSION.get_or_init(|| {
        let zero = [[0.0; SIZE]; SIZE];
        let mut r = Recursion {
            start: [1.0; SIZE],
            up: zero,
            back: zero,
            along: zero,
            raise: zero,
            lower: zero,
        };
        for m in 1..SIZE {
            let ratio = if m == 1 {
                1.0
            } else {
                (2 * m - 1) as f64 / (2 * m) as f64
            };
            r.start[m] = (r.start[m - 1] * r.start[m - 1] * ratio).sqrt();
        }
        // Squares of the norms: 2(L−m)!/(L+m)!, half of that for m = 0.
        let norm2 = |l: usize, m: usize| {
            let quotient = ((l - m + 1)..=(l + m)).fold(1.0, |product, k| product * k as f64);
            if m == 0 { 1.0 } else { 2.0 / quotient }
        };
        for l in 1..SIZE {
            for m in 0..=l {
                if m < l {
                    let width = (l * l - m * m) as f64;
                    r.up[l][m] = (2 * l - 1) as f64 / width.sqrt();
                    if m + 1 < l {
                        r.back[l][m] = ((((l - 1) * (l - 1)) - m * m) as f64 / width).sqrt();
                    }
                    r.along[l][m] = (l + m) as f64 * (norm2(l, m) / norm2(l - 1, m)).sqrt();
                }
                if m + 1 < l {
                    let half = if m == 0 { 1.0 } else { 0.5 };
                    r.raise[l][m] = half * (norm2(l, m) / norm2(l - 1, m + 1)).sqrt();
                }
                if m > 0 {
                    let factor = 0.5 * ((l + m) * (l + m - 1)) as f64;
                    r.lower[l][m] = factor * (norm2(l, m) / norm2(l - 1, m - 1)).sqrt();
                }
            }
        }
        r
    })
}

/// All members up to `degree` for unit vectors; `out` holds at least (degree+1)² values.
#[inline(always)]
pub(crate) fn solid_harmonics<const N: usize, const Y: usize>(
    unit: &[[f64; N]; 3],
    degree: usize,
    out: &mut [[f64; N]; Y],
) {
    let r = recursion();
    let [x, y, z] = unit;
    let (mut cosine, mut sine) = ([1.0; N], [0.0; N]);
    for m in 0..=degree {
        if m > 0 {
            let (c, s) = (cosine, sine);
            for lane in 0..N {
                cosine[lane] = x[lane] * c[lane] - y[lane] * s[lane];
                sine[lane] = x[lane] * s[lane] + y[lane] * c[lane];
            }
        }
        let mut before = [0.0; N];
        let mut current = [r.start[m]; N];
        for l in m..=degree {
            if l > m {
                let mut next = [0.0; N];
                for lane in 0..N {
                    next[lane] =
                        r.up[l][m] * (z[lane] * current[lane]) - r.back[l][m] * before[lane];
                }
                before = current;
                current = next;
            }
            out[index(l, m, false)] = mul(&current, &cosine);
            if m > 0 {
                out[index(l, m, true)] = mul(&current, &sine);
            }
        }
    }
}

/// Derivative of each member along the sphere: R ∇ of its value at r/R, as three lists.
///
/// From the gradients of solid harmonics (Hobson 1931), which are solid harmonics of one degree
/// less, with the radial part taken off.
#[inline(always)]
pub(crate) fn tangential_gradient<const N: usize, const Y: usize>(
    unit: &[[f64; N]; 3],
    degree: usize,
    values: &[[f64; N]; Y],
    out: &mut [[[f64; N]; Y]; 3],
) {
    let r = recursion();
    for l in 1..=degree {
        for m in 0..=l {
            for sine in [false, true] {
                if sine && m == 0 {
                    continue;
                }
                let at = index(l, m, sine);
                let (mut dx, mut dy, mut dz) = ([0.0; N], [0.0; N], [0.0; N]);
                if m < l {
                    dz = scale(r.along[l][m], &values[index(l - 1, m, sine)]);
                }
                if m + 1 < l {
                    let factor = r.raise[l][m];
                    accumulate(&mut dx, -factor, &values[index(l - 1, m + 1, sine)]);
                    let sign = if sine { factor } else { -factor };
                    accumulate(&mut dy, sign, &values[index(l - 1, m + 1, !sine)]);
                }
                if m > 0 {
                    let factor = r.lower[l][m];
                    if !(sine && m == 1) {
                        accumulate(&mut dx, factor, &values[index(l - 1, m - 1, sine)]);
                    }
                    if sine || m > 1 {
                        let sign = if sine { factor } else { -factor };
                        accumulate(&mut dy, sign, &values[index(l - 1, m - 1, !sine)]);
                    }
                }
                let radial = scale(l as f64, &values[at]);
                for (axis, mut derivative) in [dx, dy, dz].into_iter().enumerate() {
                    for lane in 0..N {
                        derivative[lane] -= radial[lane] * unit[axis][lane];
                    }
                    out[axis][at] = derivative;
                }
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn unit(v: [f64; 3]) -> [[f64; 1]; 3] {
        let r = (v[0] * v[0] + v[1] * v[1] + v[2] * v[2]).sqrt();
        v.map(|c| [c / r])
    }

    #[test]
    fn known_members() {
        let u = unit([0.3, -1.1, 0.7]);
        let [x, y, z] = u.map(|c| c[0]);
        let mut v = [[0.0; 1]; 49];
        solid_harmonics(&u, 6, &mut v);
        let close = |a: f64, b: f64| assert!((a - b).abs() < 3e-15, "{a} {b}");
        close(v[1][0], z);
        close(v[2][0], x);
        close(v[3][0], y);
        close(v[4][0], (3.0 * z * z - 1.0) / 2.0);
        close(v[5][0], 3.0_f64.sqrt() * x * z);
        close(v[8][0], 3.0_f64.sqrt() * x * y);
        close(v[9][0], (5.0 * z * z - 3.0) * z / 2.0);
        close(v[14][0], (5.0_f64 / 8.0).sqrt() * x * (x * x - 3.0 * y * y));
        // Unsöld: the squares of a Racah-normalised degree add up to 1.
        for l in 0..=6_usize {
            close(
                v[l * l..(l + 1) * (l + 1)]
                    .iter()
                    .map(|c| c[0] * c[0])
                    .sum(),
                1.0,
            );
        }
    }

    #[test]
    fn gradient_is_the_limit_of_differences() {
        let point = [0.3, -1.1, 0.7];
        let r = (0.09_f64 + 1.21 + 0.49).sqrt();
        let u = unit(point);
        let mut v = [[0.0; 1]; 49];
        solid_harmonics(&u, 6, &mut v);
        let mut g = [[[0.0; 1]; 49]; 3];
        tangential_gradient(&u, 6, &v, &mut g);
        let h = 1e-5;
        for axis in 0..3 {
            let value = |step: f64| {
                let mut p = point;
                p[axis] += step;
                let mut v = [[0.0; 1]; 49];
                solid_harmonics(&unit(p), 6, &mut v);
                v
            };
            let (up, down) = (value(h), value(-h));
            for k in 0..49 {
                let difference = (up[k][0] - down[k][0]) / (2.0 * h) * r;
                assert!((difference - g[axis][k][0]).abs() < 1e-8, "{axis} {k}");
            }
        }
    }
}
