//! The Cusachs form, S (2−|S|) (Hᵢᵢ+Hⱼⱼ)/2. It is not linear in S: applied to the overlaps in the
//! axes of the molecule it would change when the molecule turns. So it is applied to the diatomic
//! integrals (σ, π, δ) in the axes of each pair, and the result is turned as a block of S is.

use orbend_overlap::harmonics;
use orbend_structure::{Angstrom, Bohr};

use crate::fill::{Displacement, lengths};
use crate::plan::HamiltonianPlan;

type Turn = [[f64; 7]; 7];

/// The block of H of one pair; `mean(i, j, lane)` is (Hᵢᵢ+Hⱼⱼ)/2.
pub(crate) fn couple<const N: usize>(
    plan: &HamiltonianPlan,
    index: usize,
    displacement: &Displacement<N>,
    mean: impl Fn(usize, usize, usize) -> f64,
    h: &mut [[f64; N]],
) {
    let pair = plan.pairs[index];
    let (rows, columns) = (plan.atoms[pair.a].clone(), plan.atoms[pair.b].clone());
    let kernel = &plan.kernels[plan.kernel_of[index]];
    let n = plan.len();
    let distance = lengths(displacement);
    let mut local = vec![0.0; rows.len() * columns.len()];
    let mut turned = local.clone();
    for lane in 0..N {
        kernel.block(
            [0.0, 0.0, Bohr::from(Angstrom(distance[lane])).0],
            &mut local,
        );
        for value in &mut local {
            *value *= 2.0 - value.abs();
        }
        let frame = frame(displacement.map(|axis| axis[lane]), distance[lane]);
        turn(plan, index, &frame, &local, &mut turned);
        for (row, i) in rows.clone().enumerate() {
            for (column, j) in columns.clone().enumerate() {
                let value = mean(i, j, lane) * turned[row * columns.len() + column];
                h[i * n + j][lane] = value;
                h[j * n + i][lane] = value;
            }
        }
    }
}

/// The derivative of the block S (2−|S|) with respect to the displacement, three blocks per bohr,
/// and without the factor (Hᵢᵢ+Hⱼⱼ)/2. Along the bond it is (2−2|S|) dS/dR; across it, the change
/// of a block that is turned by dx/R.
pub(crate) fn gradient(
    plan: &HamiltonianPlan,
    index: usize,
    displacement_bohr: [f64; 3],
    out: &mut [f64],
) {
    let kernel = &plan.kernels[plan.kernel_of[index]];
    let size = kernel.rows() * kernel.columns();
    let [x, y, z] = displacement_bohr;
    let distance = (x * x + y * y + z * z).sqrt();
    let mut local = vec![0.0; size];
    let mut slopes = vec![0.0; 3 * size];
    kernel.gradient([0.0, 0.0, distance], &mut local, &mut slopes);
    let mut axes = [vec![0.0; size], vec![0.0; size], vec![0.0; size]];
    for at in 0..size {
        axes[2][at] = slopes[2 * size + at] * (2.0 - 2.0 * local[at].abs());
        local[at] *= 2.0 - local[at].abs();
    }
    for (axis, across) in axes.iter_mut().take(2).enumerate() {
        turning_slope(plan, index, axis, &local, across);
        across.iter_mut().for_each(|value| *value /= distance);
    }
    let frame = frame(displacement_bohr, distance);
    let mut turned = vec![0.0; size];
    out[..3 * size].fill(0.0);
    for (axis, block) in axes.iter().enumerate() {
        turn(plan, index, &frame, block, &mut turned);
        for (lab, target) in out.chunks_exact_mut(size).take(3).enumerate() {
            for (sum, value) in target.iter_mut().zip(&turned) {
                *sum += frame[lab][axis] * value;
            }
        }
    }
}

/// A rotation whose third column points along the displacement.
fn frame(displacement: [f64; 3], distance: f64) -> [[f64; 3]; 3] {
    let u = displacement.map(|x| x / distance);
    // The axis least along u gives the best conditioned normal.
    let least = (0..3).fold(0, |best, axis| {
        if u[axis].abs() < u[best].abs() {
            axis
        } else {
            best
        }
    });
    let mut v = [0.0; 3];
    v[least] = 1.0;
    for (v, component) in v.iter_mut().zip(u) {
        *v -= u[least] * component;
    }
    let length = (v[0] * v[0] + v[1] * v[1] + v[2] * v[2]).sqrt();
    let v = v.map(|component| component / length);
    let w = [
        u[1] * v[2] - u[2] * v[1],
        u[2] * v[0] - u[0] * v[2],
        u[0] * v[1] - u[1] * v[0],
    ];
    [[v[0], w[0], u[0]], [v[1], w[1], u[1]], [v[2], w[2], u[2]]]
}

/// D_a · block · D_bᵀ, shell by shell.
fn turn(
    plan: &HamiltonianPlan,
    index: usize,
    frame: &[[f64; 3]; 3],
    block: &[f64],
    out: &mut [f64],
) {
    let matrices: [Turn; 4] = [0, 1, 2, 3].map(|l| harmonics::rotation(l, frame));
    for_shells(plan, index, |row, column, (la, lb), width| {
        let (da, db) = (&matrices[usize::from(la)], &matrices[usize::from(lb)]);
        for i in 0..2 * usize::from(la) + 1 {
            for j in 0..2 * usize::from(lb) + 1 {
                let mut sum = 0.0;
                for k in 0..2 * usize::from(la) + 1 {
                    for m in 0..2 * usize::from(lb) + 1 {
                        sum += da[i][k] * block[(row + k) * width + column + m] * db[j][m];
                    }
                }
                out[(row + i) * width + column + j] = sum;
            }
        }
    });
}

/// G_a · block + block · G_bᵀ with G the derivative, at angle 0, of the matrix that turns z
/// towards x (`axis` 0) or y (`axis` 1).
fn turning_slope(
    plan: &HamiltonianPlan,
    index: usize,
    axis: usize,
    block: &[f64],
    out: &mut [f64],
) {
    let generators: [Turn; 4] = [0, 1, 2, 3].map(|l| generator(l, axis));
    for_shells(plan, index, |row, column, (la, lb), width| {
        let (ga, gb) = (&generators[usize::from(la)], &generators[usize::from(lb)]);
        for i in 0..2 * usize::from(la) + 1 {
            for j in 0..2 * usize::from(lb) + 1 {
                let mut sum = 0.0;
                for k in 0..2 * usize::from(la) + 1 {
                    sum += ga[i][k] * block[(row + k) * width + column + j];
                }
                for m in 0..2 * usize::from(lb) + 1 {
                    sum += block[(row + i) * width + column + m] * gb[j][m];
                }
                out[(row + i) * width + column + j] = sum;
            }
        }
    });
}

/// dD/dθ at θ = 0. The elements of D are trigonometric polynomials of degree ≤ 3, whose derivative
/// eight equally spaced values give exactly: f′(0) = −Σ ½ (−1)^k cot(kπ/8) f(2πk/8).
fn generator(l: u8, axis: usize) -> Turn {
    let mut out = [[0.0; 7]; 7];
    for k in 1..8_u8 {
        let half = f64::from(k) * std::f64::consts::PI / 8.0;
        let (sine, cosine) = (libm::sin(2.0 * half), libm::cos(2.0 * half));
        let mut matrix = [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, cosine]];
        matrix[axis][axis] = cosine;
        matrix[axis][2] = sine;
        matrix[2][axis] = -sine;
        let sign = if k % 2 == 0 { -0.5 } else { 0.5 };
        let weight = sign * libm::cos(half) / libm::sin(half);
        let turned = harmonics::rotation(l, &matrix);
        for (row, from) in out.iter_mut().zip(&turned) {
            for (target, value) in row.iter_mut().zip(from) {
                *target += weight * value;
            }
        }
    }
    out
}

/// Calls `work(row, column, (l, l′), columns of the block)` for each pair of shells.
fn for_shells(
    plan: &HamiltonianPlan,
    index: usize,
    mut work: impl FnMut(usize, usize, (u8, u8), usize),
) {
    let pair = plan.pairs[index];
    let (start_a, start_b) = (plan.atoms[pair.a].start, plan.atoms[pair.b].start);
    let width = plan.atoms[pair.b].len();
    for &(first_a, la, _) in plan.shells.iter().filter(|shell| shell.2 == pair.a) {
        for &(first_b, lb, _) in plan.shells.iter().filter(|shell| shell.2 == pair.b) {
            work(first_a - start_a, first_b - start_b, (la, lb), width);
        }
    }
}
