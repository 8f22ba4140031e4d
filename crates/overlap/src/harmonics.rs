//! Real spherical harmonics: their order, names, values and behaviour under rotation.
//!
//! Within a shell the order is m = 0, +1, −1, +2, −2, +3, −3 everywhere:
//! p: z, x, y; d: z², xz, yz, x²−y², xy; f: z³, xz², yz², z(x²−y²), xyz, x(x²−3y²), y(3x²−y²).
//! No Condon–Shortley sign: p lobes are positive along the positive axes.

use crate::angular::{solid_harmonics, tangential_gradient};
use crate::coupling::Coupling;
use crate::shell::MAX_L;

const NAMES: [&[&str]; 4] = [
    &["s"],
    &["z", "x", "y"],
    &["z2", "xz", "yz", "x2-y2", "xy"],
    &[
        "z3",
        "xz2",
        "yz2",
        "z(x2-y2)",
        "xyz",
        "x(x2-3y2)",
        "y(3x2-y2)",
    ],
];

/// Cartesian axis (0 = x) of the p functions in their order z, x, y.
const P_AXES: [usize; 3] = [2, 0, 1];

/// m of the function at `index` of its shell: 0, 1, −1, 2, −2, …
pub fn order(index: usize) -> i32 {
    let half = index.div_ceil(2) as i32;
    if index % 2 == 1 { half } else { -half }
}

/// Name of the function at `index` of a shell of angular momentum `l`, without the shell's letter:
/// "s", "x", "xz", "z(x2-y2)" …; "?" when there is no such function.
pub fn function_name(l: u8, index: usize) -> &'static str {
    NAMES
        .get(usize::from(l))
        .and_then(|names| names.get(index))
        .copied()
        .unwrap_or("?")
}

/// The 2l+1 normalised real harmonics in the direction of `vector` (any length but zero; for zero
/// only the s value means anything). Entries beyond 2l+1 are zero; all are NaN for l > 3.
pub fn evaluate(l: u8, vector: [f64; 3]) -> [f64; 7] {
    if l > MAX_L {
        return [f64::NAN; 7];
    }
    let [x, y, z] = vector;
    let length = (x * x + y * y + z * z).sqrt();
    let unit = if length > 0.0 {
        vector.map(|c| [c / length])
    } else {
        [[0.0], [0.0], [1.0]]
    };
    let l = usize::from(l);
    let mut values = [[0.0; 1]; 16];
    solid_harmonics(&unit, l, &mut values);
    let norm = ((2 * l + 1) as f64 / (4.0 * core::f64::consts::PI)).sqrt();
    let mut out = [0.0; 7];
    for (target, value) in out.iter_mut().zip(&values[l * l..(l + 1) * (l + 1)]) {
        *target = norm * value[0];
    }
    out
}

/// The gradients along the unit sphere of the harmonics that [`evaluate`] gives: r ∇Y at `vector`
/// (any length but zero), Cartesian components x, y, z. Entries beyond 2l+1 are zero; all are NaN for
/// l > 3. From the gradients of solid harmonics (Hobson 1931).
pub fn evaluate_tangential(l: u8, vector: [f64; 3]) -> [[f64; 3]; 7] {
    if l > MAX_L {
        return [[f64::NAN; 3]; 7];
    }
    let [x, y, z] = vector;
    let length = (x * x + y * y + z * z).sqrt();
    let mut out = [[0.0; 3]; 7];
    if l == 0 || length == 0.0 {
        return out;
    }
    let unit = vector.map(|c| [c / length]);
    let l = usize::from(l);
    let mut values = [[0.0; 1]; 16];
    solid_harmonics(&unit, l, &mut values);
    let mut gradients = [[[0.0; 1]; 16]; 3];
    tangential_gradient(&unit, l, &values, &mut gradients);
    let norm = ((2 * l + 1) as f64 / (4.0 * core::f64::consts::PI)).sqrt();
    for (index, target) in out.iter_mut().take(2 * l + 1).enumerate() {
        *target = core::array::from_fn(|axis| norm * gradients[axis][l * l + index][0]);
    }
    out
}

/// The matrix D of an orthogonal 3×3 matrix R (rows of `matrix` are rows of R; improper R too) on
/// the harmonics of angular momentum `l`: Y_i(R⁻¹r) = Σ_j Y_j(r) D\[j\]\[i\], so that the operation
/// acting on function i gives Σ_j D\[j\]\[i\] Y_j. The leading 2l+1 rows and columns hold it, the
/// rest is zero; all entries are NaN for l > 3.
///
/// D of l = 1 is R itself; higher l are built by coupling l−1 with 1 to the highest degree, as the
/// products of Cartesian components transform.
pub fn rotation(l: u8, matrix: &[[f64; 3]; 3]) -> [[f64; 7]; 7] {
    let mut out = [[0.0; 7]; 7];
    match l {
        0 => out[0][0] = 1.0,
        1 => {
            for (j, &row) in P_AXES.iter().enumerate() {
                for (i, &column) in P_AXES.iter().enumerate() {
                    out[j][i] = matrix[row][column];
                }
            }
        }
        2 | 3 => {
            let vector = rotation(1, matrix);
            let lower = rotation(l - 1, matrix);
            let below = usize::from(l) - 1;
            let products = Coupling::of(1, below).highest();
            for (j, left) in products.iter().enumerate() {
                for (i, right) in products.iter().enumerate() {
                    let mut sum = 0.0;
                    for &(p, q, v) in left {
                        for &(s, t, w) in right {
                            sum += (v * w) * (vector[p][s] * lower[q][t]);
                        }
                    }
                    out[j][i] = sum;
                }
            }
        }
        _ => out = [[f64::NAN; 7]; 7],
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Rotation by `angle` about a unit axis (Rodrigues), times −1 when improper.
    fn turn(axis: [f64; 3], angle: f64, improper: bool) -> [[f64; 3]; 3] {
        let r = axis.iter().map(|c| c * c).sum::<f64>().sqrt();
        let [x, y, z] = axis.map(|c| c / r);
        let (s, c) = angle.sin_cos();
        let t = 1.0 - c;
        let sign = if improper { -1.0 } else { 1.0 };
        [
            [t * x * x + c, t * x * y - s * z, t * x * z + s * y],
            [t * x * y + s * z, t * y * y + c, t * y * z - s * x],
            [t * x * z - s * y, t * y * z + s * x, t * z * z + c],
        ]
        .map(|row| row.map(|v| sign * v))
    }

    #[test]
    fn defining_property() {
        let point = [0.4, -1.2, 0.9];
        for (axis, angle, improper) in [
            ([1.0, 2.0, -0.5], 0.7, false),
            ([0.0, 0.0, 1.0], 2.1, false),
            ([-1.0, 0.3, 0.2], 2.9, true),
        ] {
            let r = turn(axis, angle, improper);
            // R⁻¹ r is the transpose times r.
            let back: [f64; 3] = core::array::from_fn(|i| (0..3).map(|k| r[k][i] * point[k]).sum());
            for l in 0..=3 {
                let (d, at, turned) = (rotation(l, &r), evaluate(l, point), evaluate(l, back));
                for i in 0..2 * usize::from(l) + 1 {
                    let sum: f64 = (0..7).map(|j| at[j] * d[j][i]).sum();
                    assert!((sum - turned[i]).abs() < 2e-15, "l {l} i {i}");
                }
            }
        }
    }

    #[test]
    fn quarter_turn_is_clean() {
        // C4(z) takes x to y and xz to yz, and turns the sign of x²−y² and xy.
        let r = [[0.0, -1.0, 0.0], [1.0, 0.0, 0.0], [0.0, 0.0, 1.0]];
        let (p, d) = (rotation(1, &r), rotation(2, &r));
        assert!((p[2][1] - 1.0).abs() < 1e-15);
        assert!((d[2][1] - 1.0).abs() < 1e-15);
        assert!((d[3][3] + 1.0).abs() < 1e-15 && (d[4][4] + 1.0).abs() < 1e-15);
        let off: f64 = (0..5)
            .map(|i| d[i].iter().map(|v| v.abs()).sum::<f64>())
            .sum();
        assert!((off - 5.0).abs() < 1e-14);
    }

    #[test]
    fn normalisation_and_names() {
        let y = evaluate(1, [0.0, 0.0, 2.0]);
        assert!((y[0] - (3.0 / (4.0 * core::f64::consts::PI)).sqrt()).abs() < 1e-15);
        assert_eq!(function_name(2, 3), "x2-y2");
        assert_eq!(function_name(1, 3), "?");
        assert_eq!([0, 1, 2, 3, 4].map(order), [0, 1, -1, 2, -2]);
        assert!(evaluate(4, [0.0, 0.0, 1.0])[0].is_nan());
    }
}
